package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/chart"
	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/cmd/internal/workshop"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// comparing is what compare is asked for.
type comparing struct {
	spreading
	design, brief string
	measured      string
	fidelity      string
	allowance     float64
	json          bool
	chart         string
}

func compareCommand(s streams) *cobra.Command {
	var o comparing
	c := &cobra.Command{
		Use:   "compare DESIGN --measured FILE.s1p",
		Short: "Sets a measured one-port file on the prediction",
		Long: `Sets the reflection that was measured at the connector, a Touchstone 1.1
one-port file, on what the full-wave model predicts, with the band that copies
within the workshop's tolerances fill. It passes when the measured reflection
lies, at every measured frequency of the band, no farther from the prediction
than the copies reach and the allowance for the measurement. Says which
change of a dimension best explains the difference, or of two where one
leaves more than a third of it, and draws it on the trim chart (--chart).
Exit code 4: outside.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			o.design = args[0]
			return compare(c.Context(), s, o)
		},
	}
	f := c.Flags()
	f.StringVar(&o.measured, "measured", "", "the measured one-port file, Touchstone 1.1")
	f.StringVar(&o.brief, "brief", "", "the brief whose band and margins hold (default the design's own band)")
	o.spreading.flags(f, 40)
	f.StringVar(&o.fidelity, "fidelity", "", "draft, standard or fine (default standard)")
	f.Float64Var(&o.allowance, "allowance", 0.02, "how far off the measured reflection itself may be, 0 to 1")
	f.BoolVar(&o.json, "json", false, "print one JSON object")
	f.StringVar(&o.chart, "chart", "", "draw VSWR, Smith chart and trim chart into this file: SVG, or PNG where its name ends in .png")
	return c
}

// mostPredicted is the number of frequencies that are simulated; between them
// the prediction is a straight line.
const mostPredicted = 41

// compare reads, predicts and judges.
func compare(ctx context.Context, s streams, o comparing) error {
	study, port, err := o.read()
	if err != nil {
		return wrong(err)
	}
	hz, measured, outside, err := o.inBand(&port, &study.Design)
	if err != nil {
		return wrong(err)
	}
	out, err := o.predict(ctx, s, &study, hz, measured)
	if err != nil {
		return failed(fmt.Errorf("%s: %w", o.design, err))
	}
	out.Outside = outside
	if o.chart != "" {
		if err := o.draw(out); err != nil {
			return failed(err)
		}
	}
	if o.json {
		err = out.WriteJSON(s.out)
	} else {
		err = out.WriteText(s.out)
	}
	if err != nil {
		return failed(err)
	}
	if n := out.Left(); n > 0 {
		return unmet("the measured reflection leaves the tolerance band at %d of %d frequencies", n, len(hz))
	}
	return nil
}

// read reads the files and checks the options, all faults at once.
func (o *comparing) read() (tolerance.Study, workshop.OnePort, error) {
	d, designErr := configs.ReadDesign(o.design)
	var brief *objectives.Spec
	var briefErr, measuredErr, allowanceErr error
	if o.brief != "" {
		var b configs.Brief
		b, briefErr = configs.ReadBrief(o.brief)
		brief = &b.Spec
	}
	var port workshop.OnePort
	if o.measured == "" {
		measuredErr = errors.New("--measured is missing: name the one-port file (.s1p)")
	} else if data, err := os.ReadFile(o.measured); err != nil {
		measuredErr = fmt.Errorf("--measured: %w", err)
	} else {
		port, measuredErr = workshop.ReadTouchstone(o.measured, data)
	}
	if !(o.allowance >= 0 && o.allowance <= 1) {
		allowanceErr = fmt.Errorf("--allowance %g: give 0 to 1", o.allowance)
	}
	rung, rungErr := newRung(configs.FullWave, o.fidelity)
	st, _, err := o.study(brief)
	if err := errors.Join(designErr, briefErr, measuredErr, allowanceErr, rungErr, absent("--chart", o.chart), err); err != nil {
		return st, port, err
	}
	if brief != nil {
		d.Band = brief.Band
	}
	st.Design, st.Rung = d, rung
	return st, port, nil
}

// inBand keeps the measured points inside the design's band, a hundredth of a
// step beyond allowed for rounding; without a band all of them. They come
// against the design's reference.
func (o *comparing) inBand(port *workshop.OnePort, d *models.Design) (hz []float64, measured []complex128, outside int, err error) {
	if d.Band.From == 0 {
		d.Band = models.Band{From: port.Hz[0], To: port.Hz[len(port.Hz)-1], Samples: 1}
	}
	all := port.Against(d.Feed.Impedance)
	for i, f := range port.Hz {
		if f < d.Band.From*(1-1e-9) || f > d.Band.To*(1+1e-9) || f == 0 {
			outside++
			continue
		}
		hz, measured = append(hz, f), append(measured, all[i])
	}
	if len(hz) == 0 {
		return nil, nil, 0, fmt.Errorf("%s: none of its %d frequencies, %.6g to %.6g MHz, is in the band of %.6g to %.6g MHz", o.measured, len(port.Hz),
			port.Hz[0]/1e6, port.Hz[len(port.Hz)-1]/1e6, d.Band.From/1e6, d.Band.To/1e6)
	}
	return hz, measured, outside, nil
}

// predict answers the design and its copies, and looks for an explanation.
func (o *comparing) predict(ctx context.Context, s streams, st *tolerance.Study, hz []float64, measured []complex128) (*report.Comparison, error) {
	at := workshop.Thinned(len(hz), mostPredicted)
	some := make([]float64, len(at))
	for i, k := range at {
		some[i] = hz[k]
	}
	bar := newProgress(s)
	st.Progress = counting(bar)
	r, err := st.Reflections(ctx, some)
	bar.end()
	if err != nil {
		return nil, err
	}
	out := &report.Comparison{Study: st, Copies: len(r.Copies), Failures: r.Failures, Statement: r.Statement, Warnings: r.Warnings, Hz: hz, Measured: measured, Allowance: o.allowance}
	out.Predicted, out.Reach = r.At(hz)
	for i := range hz {
		out.Reach[i] += o.allowance
	}
	difference := make([]complex128, len(at))
	for i, k := range at {
		difference[i] = measured[k] - out.Predicted[k]
	}
	out.At = at
	out.Explanations, err = workshop.Explain(ctx, st.Rung, st.Design, st.Spreads, some, difference)
	return out, err
}

// draw writes the picture in the format of its file's name.
func (o *comparing) draw(out *report.Comparison) error {
	if !strings.EqualFold(filepath.Ext(o.chart), ".png") {
		return folder.WriteFile(o.chart, out.SVG())
	}
	data, err := chart.PNG(out.Picture())
	if err != nil {
		return err
	}
	return folder.WriteFile(o.chart, data)
}
