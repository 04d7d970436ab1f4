package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/cmd/internal/workshop"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/closedform"
	"turnwise/models/helix"
	"turnwise/objectives"
)

// simulation is what simulate is asked for.
type simulation struct {
	design, model, fidelity string
	from, to                string
	samples                 int
	json                    bool
	touchstone, pattern     string
}

func simulateCommand(s streams) *cobra.Command {
	var o simulation
	c := &cobra.Command{
		Use:   "simulate DESIGN",
		Short: "Answers one design over a band",
		Long: `Simulates one design file over a band: by default the file's own. Prints the
figures, the hand formulas beside them, and every warning.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			o.design = args[0]
			return simulate(c, s, o)
		},
	}
	f := c.Flags()
	f.StringVar(&o.model, "model", defaultModel, "closed-form or full-wave")
	f.StringVar(&o.fidelity, "fidelity", "", "draft, standard or fine (full-wave; default standard)")
	f.StringVar(&o.from, "from", "", "lowest frequency, such as 1.66GHz")
	f.StringVar(&o.to, "to", "", "highest frequency")
	f.IntVar(&o.samples, "samples", 0, "number of frequencies (default the file's own, or 5)")
	f.BoolVar(&o.json, "json", false, "print one JSON object")
	f.StringVar(&o.touchstone, "touchstone", "", "write the input reflection to this .s1p file")
	f.StringVar(&o.pattern, "pattern", "", "write the pattern cuts to this CSV file")
	return c
}

// simulate answers the design and prints the answer.
func simulate(c *cobra.Command, s streams, o simulation) error {
	d, err := configs.ReadDesign(o.design)
	if err != nil {
		return wrong(err)
	}
	band, bandErr := o.band(d)
	rung, rungErr := newRung(o.model, o.fidelity)
	if err := errors.Join(bandErr, rungErr, absent("--touchstone", o.touchstone), absent("--pattern", o.pattern)); err != nil {
		return wrong(err)
	}
	curve, err := helix.Wind(&d)
	if err != nil {
		return wrong(fmt.Errorf("%s: %w", o.design, err))
	}
	outputs := models.Axis | models.Cuts | models.Balance | models.Spread
	if o.pattern != "" {
		outputs |= models.Pattern
	}
	r, err := rung.Simulator.Simulate(c.Context(), d, models.Question{Hz: band.Hz(), Outputs: outputs})
	if err != nil {
		if c.Context().Err() != nil {
			return stopped(err)
		}
		return failed(fmt.Errorf("%s: %w", o.design, err))
	}
	hand, err := closedform.HandFormulas(&d, band.Mid())
	if err != nil {
		return failed(err)
	}
	d.Band = band
	sim := report.Simulation{
		Design: d, Model: rung.Model, Fidelity: rung.Fidelity, Response: r,
		Geometry: curve.Geometry(), ExcessPhase: curve.ExcessPhase(band.To), Figures: objectives.Read(&d, curve.Geometry(), &r),
		Hand: report.HandFigures(hand), DesignJSON: d,
	}
	if err := o.writeFiles(&sim); err != nil {
		return failed(err)
	}
	if o.json {
		return failed(sim.WriteJSON(s.out))
	}
	return failed(sim.WriteText(s.out))
}

// band is the one asked for, else the design file's own.
func (o simulation) band(d models.Design) (models.Band, error) {
	b := d.Band
	if o.from != "" || o.to != "" {
		if o.from == "" || o.to == "" {
			return b, errors.New("--from and --to go together: give both ends of the band")
		}
		from, errFrom := configs.ParseFrequency(o.from)
		to, errTo := configs.ParseFrequency(o.to)
		if errFrom != nil {
			errFrom = fmt.Errorf("--from: %w", errFrom)
		}
		if errTo != nil {
			errTo = fmt.Errorf("--to: %w", errTo)
		}
		if err := errors.Join(errFrom, errTo); err != nil {
			return b, err
		}
		b = models.Band{From: from, To: to, Samples: b.Samples}
		if b.Samples == 0 || from == to {
			b.Samples = 5
		}
		if from == to {
			b.Samples = 1
		}
	}
	if b.From == 0 {
		return b, fmt.Errorf("%s has no band of its own: give --from and --to", o.design)
	}
	if o.samples != 0 {
		b.Samples = o.samples
	}
	return b, checkBand(b)
}

// mostSamples is the largest sweep that is answered at once.
const mostSamples = 100_000

func checkBand(b models.Band) error {
	switch {
	case b.From > b.To:
		return fmt.Errorf("the band runs from %g Hz to %g Hz: give the lower end first", b.From, b.To)
	case b.Samples < 1 || b.Samples > mostSamples:
		return fmt.Errorf("--samples %d: give 1 to %d", b.Samples, mostSamples)
	case b.From == b.To && b.Samples != 1:
		return fmt.Errorf("one frequency (%g Hz) wants --samples 1", b.From)
	case b.From < b.To && b.Samples == 1:
		return fmt.Errorf("a band with a width wants at least 2 samples")
	}
	return nil
}

// absent refuses to write over a file that is there.
func absent(option, path string) error {
	if path == "" {
		return nil
	}
	if _, err := os.Lstat(path); errors.Is(err, fs.ErrNotExist) {
		return nil
	}
	return fmt.Errorf("%s: %s exists already; name another file", option, path)
}

// writeFiles writes what was asked for beside the text.
func (o simulation) writeFiles(sim *report.Simulation) error {
	if o.touchstone != "" {
		if err := folder.WriteFile(o.touchstone, workshop.Touchstone(&sim.Design, &sim.Response)); err != nil {
			return err
		}
	}
	if o.pattern != "" {
		if err := folder.WriteFile(o.pattern, workshop.PatternCSV(&sim.Response)); err != nil {
			return err
		}
	}
	return nil
}

func writeJSON(w io.Writer, v any) error {
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	return e.Encode(v)
}
