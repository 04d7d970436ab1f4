package main

import (
	"context"
	"errors"
	"fmt"
	"runtime"
	"strings"
	"time"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"turnwise/cmd/internal/report"
	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// spreading is how copies are drawn: the options that tolerance and compare
// share.
type spreading struct {
	widths       [tolerance.DimensionCount]string
	distribution string
	samples      int
	seed         int64
	workers      int
}

// flags adds the options.
func (o *spreading) flags(f *pflag.FlagSet, samples int) {
	for i := range tolerance.Dimensions {
		d := &tolerance.Dimensions[i]
		f.StringVar(&o.widths[i], optionOf(tolerance.Dimension(i)), "", fmt.Sprintf("half-width of the %s (default the brief's margin, else %s)", d.Words, report.HalfWidth(tolerance.Dimension(i), d.Default)))
	}
	f.StringVar(&o.distribution, "distribution", string(tolerance.Uniform), "uniform within the half-widths, or normal with half of them as standard deviation")
	f.IntVar(&o.samples, "samples", samples, "number of copies")
	f.Int64Var(&o.seed, "seed", 1, "seed of the errors")
	f.IntVar(&o.workers, "workers", runtime.NumCPU(), "answers at a time; it changes no result")
}

func optionOf(d tolerance.Dimension) string { return strings.ReplaceAll(d.String(), "_", "-") }

// mostCopies bounds a Monte Carlo.
const mostCopies = 1_000_000

// study checks the options and lays out a study, all faults at once. A nil
// brief has no margins.
func (o *spreading) study(brief *objectives.Spec) (tolerance.Study, [tolerance.DimensionCount]string, error) {
	st := tolerance.Study{Spreads: tolerance.Defaults(), Distribution: tolerance.Distribution(o.distribution), Samples: o.samples, Seed: uint64(o.seed), Workers: o.workers}
	var from [tolerance.DimensionCount]string
	var margins tolerance.Spreads
	if brief != nil {
		margins = margins.Margins(brief.Margins)
		st.Spreads = st.Spreads.Margins(brief.Margins)
	}
	faults := []error{st.Distribution.Check()}
	for i := range from {
		from[i] = "default"
		if margins[i] > 0 {
			from[i] = "brief"
		}
		if o.widths[i] == "" {
			continue
		}
		from[i] = "option"
		dimension := configs.Length
		if tolerance.Dimension(i) == tolerance.Permittivity {
			dimension = configs.Plain
		}
		x, err := configs.Parse(o.widths[i], dimension)
		switch {
		case err != nil:
			faults = append(faults, fmt.Errorf("--%s: %w", optionOf(tolerance.Dimension(i)), err))
		case x < 0:
			faults = append(faults, fmt.Errorf("--%s: a half-width of %s; give zero or more", optionOf(tolerance.Dimension(i)), o.widths[i]))
		}
		st.Spreads[i] = x
	}
	if o.samples < 1 || o.samples > mostCopies {
		faults = append(faults, fmt.Errorf("--samples %d: give 1 to %d", o.samples, mostCopies))
	}
	if o.workers < 1 {
		faults = append(faults, fmt.Errorf("--workers %d: give at least 1", o.workers))
	}
	return st, from, errors.Join(faults...)
}

// toleranceOptions is what tolerance is asked for.
type toleranceOptions struct {
	spreading
	design, brief   string
	model, fidelity string
	json            bool
}

func toleranceCommand(s streams) *cobra.Command {
	var o toleranceOptions
	c := &cobra.Command{
		Use:   "tolerance DESIGN --brief BRIEF",
		Short: "Says what workshop errors do to the figures, and the yield",
		Long: `Makes copies of one design as a workshop would, every dimension off by an
error within its half-width, and says how many of them keep the brief's limits,
which dimension is the tightest, and which adjustment brings the match of a
poor copy back. The same seed gives the same copies. Figures are read, as those
of a final front are, from a sweep in steps of at most 0.25 % of mid-band.

A half-width is the option's; else the brief's margin; else the default, which
is common practice and no standard. A law is off as a whole, one error a law.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			o.design = args[0]
			return runTolerance(c.Context(), s, o)
		},
	}
	f := c.Flags()
	f.StringVar(&o.brief, "brief", "", "the brief whose band, sense, limits and margins hold")
	o.spreading.flags(f, 200)
	f.StringVar(&o.model, "model", defaultModel, "closed-form or full-wave")
	f.StringVar(&o.fidelity, "fidelity", "", "draft, standard or fine (full-wave; default standard)")
	f.BoolVar(&o.json, "json", false, "print one JSON object")
	return c
}

// runTolerance reads, studies and prints.
func runTolerance(ctx context.Context, s streams, o toleranceOptions) error {
	study, from, err := o.read()
	if err != nil {
		return wrong(err)
	}
	bar := newProgress(s)
	study.Progress = counting(bar)
	res, err := study.Run(ctx)
	bar.end()
	if err != nil {
		return failed(fmt.Errorf("%s: %w", o.design, err))
	}
	out := &report.Tolerance{Study: &study, Result: res, From: from}
	if o.json {
		err = out.WriteJSON(s.out)
	} else {
		err = out.WriteText(s.out)
	}
	if err == nil && res.Yield.Share == 0 && len(res.Limits) > 0 {
		return unmet("none of the %d copies keeps every limit", res.Answered)
	}
	if err == nil && res.Answered == 0 {
		err = fmt.Errorf("none of the %d copies has an answer: %s", len(res.Copies), res.Failures[0].Reason)
	}
	return failed(err)
}

// counting tells a bar of answers.
func counting(bar *progress) func(done, total, failed int) {
	began := time.Now()
	return func(done, total, failed int) {
		rate := float64(done) / time.Since(began).Seconds()
		bar.tell(done, total, func() string { return fmt.Sprintf("answers  %s/s  failed %d", significant(rate), failed) })
	}
}

// read reads the files and checks the options, all faults at once.
func (o *toleranceOptions) read() (tolerance.Study, [tolerance.DimensionCount]string, error) {
	d, designErr := configs.ReadDesign(o.design)
	var b configs.Brief
	var briefErr error
	if o.brief == "" {
		briefErr = errors.New("--brief is missing: name the brief whose limits are to be kept")
	} else {
		b, briefErr = configs.ReadBrief(o.brief)
	}
	rung, rungErr := newRung(o.model, o.fidelity)
	st, from, err := o.study(&b.Spec)
	if err := errors.Join(designErr, briefErr, rungErr, err); err != nil {
		return st, from, err
	}
	d.Band = b.Spec.Band
	d.Sense, d.FeedsReflector = b.Spec.Base.Sense, b.Spec.Base.FeedsReflector
	st.Design, st.Spec, st.Rung = d, b.Spec, rung
	return st, from, nil
}
