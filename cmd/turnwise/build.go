package main

import (
	"errors"
	"fmt"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/workshop"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/objectives"
)

// construction is what build is asked for.
type construction struct {
	design, out, brief   string
	fidelity             string
	power, exposureLimit string
}

func buildCommand(s streams) *cobra.Command {
	var o construction
	c := &cobra.Command{
		Use:   "build DESIGN --out DIR",
		Short: "Writes the workshop pack of one design",
		Long: `Writes a new folder with what a workshop needs to make one design: the
dimensioned sheet with winding table, drilling plan and test page (PDF), the
1:1 winding template (PDF on A4, SVG, DXF), the centre line (CSV, DXF), the
bill of materials, and the design as it was drawn.

The design is rounded to 0.1 mm and 0.01 turn (0.01 mm and 0.001 turn where
that is too coarse), read back and answered again by the full-wave model. It is
refused when it then breaks a limit of the brief, or when rounding moves its
gain by more than 0.05 dB.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			o.design = args[0]
			return build(c, s, o)
		},
	}
	f := c.Flags()
	f.StringVar(&o.out, "out", "", "the new folder (must not exist)")
	f.StringVar(&o.brief, "brief", "", "the brief whose band, sense, limits and margins hold")
	f.StringVar(&o.fidelity, "fidelity", "", "draft, standard or fine (default standard)")
	f.StringVar(&o.power, "power", "", "average transmitter power, such as 10W: adds an estimate of exposure")
	f.StringVar(&o.exposureLimit, "exposure-limit", "", "your own limit of power density, such as 5W/m2, beside the published levels")
	return c
}

// order is a construction with its files read.
type order struct {
	design models.Design
	brief  *objectives.Spec
	rung   objectives.Rung
	power  workshop.Power
	out    string
}

// build rounds, proves and writes.
func build(c *cobra.Command, s streams, o construction) error {
	job, err := o.read()
	if err != nil {
		return wrong(err)
	}
	settled, err := workshop.Settle(c.Context(), job.rung, job.design, job.brief)
	var refused *workshop.Refused
	switch {
	case errors.As(err, &refused):
		return unmet("%s is not built: %w", o.design, refused)
	case c.Context().Err() != nil:
		return stopped(c.Context().Err())
	case err != nil:
		return failed(fmt.Errorf("%s: %w", o.design, err))
	}
	files, err := workshop.Pack(c.Context(), job.rung, settled, job.brief, job.power)
	if err != nil {
		if c.Context().Err() != nil {
			return stopped(err)
		}
		return failed(fmt.Errorf("%s: %w", o.design, err))
	}
	if err := workshop.WriteDir(job.out, files); err != nil {
		return failed(err)
	}
	for _, w := range settled.Response.Warnings {
		fmt.Fprintf(s.err, "warning: %s\n", w)
	}
	return failed(sayBuilt(s, job.out, settled, files))
}

// read reads the files and checks the options, all faults at once.
func (o construction) read() (order, error) {
	var job order
	var faults []error
	note := func(err error) {
		if err != nil {
			faults = append(faults, err)
		}
	}
	var err error
	job.design, err = configs.ReadDesign(o.design)
	note(err)
	if o.brief != "" {
		brief, err := configs.ReadBrief(o.brief)
		note(err)
		job.brief = &brief.Spec
	}
	job.rung, err = newRung(configs.FullWave, o.fidelity)
	note(err)
	if o.out == "" {
		note(errors.New("--out is missing: name the folder to write"))
	} else {
		job.out = filepath.Clean(o.out)
		note(absent("--out", job.out))
	}
	note(o.readPower(&job.power))
	if len(faults) > 0 {
		return job, errors.Join(faults...)
	}
	if job.brief != nil {
		job.design.Band = job.brief.Band
		job.design.Sense, job.design.FeedsReflector = job.brief.Base.Sense, job.brief.Base.FeedsReflector
	}
	if job.design.Band.From == 0 {
		return job, fmt.Errorf("%s has no band of its own: write one into it, such as band: {from: 1.66 GHz, to: 1.70 GHz}, or give --brief", o.design)
	}
	return job, nil
}

// readPower reads --power and --exposure-limit.
func (o construction) readPower(p *workshop.Power) error {
	var powerErr, limitErr error
	if o.power != "" {
		if p.Watts, powerErr = configs.Parse(o.power, configs.Power); powerErr == nil && !(p.Watts > 0) {
			powerErr = fmt.Errorf("%q is no power that is sent; give more than zero, such as 10W", o.power)
		}
	}
	if o.exposureLimit != "" {
		if p.Limit, limitErr = powerDensity(o.exposureLimit); limitErr == nil && o.power == "" {
			limitErr = errors.New("goes with --power; give both")
		}
	}
	if powerErr != nil {
		powerErr = fmt.Errorf("--power: %w", powerErr)
	}
	if limitErr != nil {
		limitErr = fmt.Errorf("--exposure-limit: %w", limitErr)
	}
	return errors.Join(powerErr, limitErr)
}

// powerDensity reads a power over a square metre or centimetre, in W/m².
func powerDensity(text string) (float64, error) {
	for _, area := range []struct {
		suffix  string
		squares float64 // in a square metre
	}{{"/m2", 1}, {"/m²", 1}, {"/cm2", 1e4}, {"/cm²", 1e4}} {
		if power, ok := strings.CutSuffix(strings.TrimSpace(text), area.suffix); ok {
			w, err := configs.Parse(power, configs.Power)
			if err == nil && !(w > 0) {
				err = fmt.Errorf("%q is no limit; give more than zero, such as 5W/m2", text)
			}
			return w * area.squares, err
		}
	}
	return 0, fmt.Errorf("%q is no power density; write for example 5W/m2 or 0.5mW/cm2", text)
}

// sayBuilt says what was written and what rounding did.
func sayBuilt(s streams, out string, b *workshop.Settled, files []workshop.File) error {
	var text strings.Builder
	if id := b.Design.ID(); id == b.Original {
		fmt.Fprintf(&text, "design %s needs no rounding at %s\n", id, b.Resolution)
	} else {
		fmt.Fprintf(&text, "design %s is %s rounded to %s: gain moves by %+.3f dB at most\n", id, b.Original, b.Resolution, b.Moved)
	}
	fmt.Fprintf(&text, "gain %.2f dBic, axial ratio %.2f dB, VSWR %.2f over the band\n", b.Figures[objectives.Gain], b.Figures[objectives.AxialRatio], b.Figures[objectives.VSWR])
	for _, words := range workshop.HandWords(&b.Design) {
		fmt.Fprintf(&text, "%s\n", words)
	}
	for _, f := range files {
		fmt.Fprintf(&text, "%s\n", filepath.Join(out, f.Name))
	}
	_, err := fmt.Fprint(s.out, text.String())
	return err
}
