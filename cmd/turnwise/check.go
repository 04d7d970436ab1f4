package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"math"
	"runtime"
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/report"
	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

func checkCommand(s streams) *cobra.Command {
	var lasting string
	c := &cobra.Command{
		Use:   "check BRIEF",
		Short: "Says what is wrong with a brief, or what it will do",
		Long: `Reads a brief and says everything that is wrong with it at once; or, when
nothing is, what the search will do: the space and its size, aims and limits,
a timed estimate of one evaluation and of the whole run on this machine.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error { return check(c.Context(), s, args[0], lasting) },
	}
	c.Flags().StringVar(&lasting, "for", "", "say what a search of this time allows, such as 8h")
	return c
}

func check(ctx context.Context, s streams, path, lasting string) error {
	var limit time.Duration
	if lasting != "" {
		seconds, err := configs.Parse(lasting, configs.Time)
		if err != nil {
			return wrong(fmt.Errorf("--for: %w", err))
		}
		limit = time.Duration(seconds * float64(time.Second))
	}
	b, err := configs.ReadBrief(path)
	if err != nil {
		return wrong(err)
	}
	p, err := newProblem(b, b.Spec)
	if err != nil {
		return wrong(fmt.Errorf("%s: %w", path, err))
	}
	defer closeModels(p)
	w := s.out
	fmt.Fprintf(w, "%s: nothing is wrong\n\n", path)
	describeBrief(w, &b, p)
	passing := screenedShare(p)
	fmt.Fprintf(w, "screens       %s of the space can be wound and fits\n", percent(passing))
	if passing == 0 {
		fmt.Fprintf(w, "              in 2000 tries nothing did; look at the limits on dimensions, the coils and the bend radii\n")
	}
	one, err := timeEvaluation(ctx, p)
	if err != nil {
		return failed(fmt.Errorf("the model answers none of the first designs: %w", err))
	}
	workers := runtime.NumCPU()
	planned := plannedEvaluations(&b, p, one, workers)
	ground, sizes := timeGround(ctx, p, one), grounds(p)
	whole := time.Duration((float64(one)*float64(planned)+float64(ground)*float64(sizes))/float64(workers)) + ownTime(p, planned)
	first := ""
	if ground > 0 {
		first = fmt.Sprintf(" and up to %s more for the first on each of %d grounds", brief(ground), sizes)
	}
	fmt.Fprintf(w, "time          one evaluation %s here%s; %d of them on %d workers about %s, and the final front besides\n", brief(one), first, planned, workers, brief(whole))
	switch {
	case one >= dearFrom:
		fmt.Fprintf(w, "searcher      learned: an evaluation takes so long that surfaces through the answers pay\n")
	case learns(p):
		fmt.Fprintf(w, "searcher      learned for the first %d evaluations, which it takes some %v each for; then genetic\n", min(planned, learnedMost), learnedOwn)
	}
	_, err = fmt.Fprintf(w, "journal       about %s\n", bytesText(journalBytes(&b, planned)))
	if limit > 0 {
		n := timedPlan(p, limit, one, workers)
		_, err = fmt.Fprintf(w, "in %-10s about %d evaluations and %s of journal\n", brief(limit), n, bytesText(journalBytes(&b, n)))
	}
	return failed(err)
}

// describeBrief says what a brief asks for.
func describeBrief(w io.Writer, b *configs.Brief, p *objectives.Problem) {
	s := &p.Spec
	fmt.Fprintf(w, "title         %s\n", s.Title)
	fmt.Fprintf(w, "band          %.6g to %.6g MHz, %d samples\n", s.Band.From/1e6, s.Band.To/1e6, s.Band.Samples)
	hand := s.Base.Handedness
	like := map[bool]string{true: "like", false: "opposite to"}[hand > 0]
	fmt.Fprintf(w, "winding       %s-handed, %s an ordinary screw thread\n", hand, like)
	if s.Base.FeedsReflector {
		fmt.Fprintf(w, "              it feeds a reflector, which turns its %s-hand circular into the other\n", s.Base.Sense)
	}
	describeGround(w, p)
	for _, r := range b.Ladder {
		fmt.Fprintf(w, "model         %s\n", strings.TrimSpace(r.Model+" "+r.Fidelity))
	}
	describeSpace(w, p)
	for _, a := range s.Aims {
		want := "least"
		if a.Most {
			want = "most"
		}
		fmt.Fprintf(w, "aim           %s %s: %s\n", want, a.Figure, objectives.Figures[a.Figure].Words)
	}
	for _, l := range s.Limits {
		bound := "at most"
		if l.AtLeast {
			bound = "at least"
		}
		fmt.Fprintf(w, "limit         %s %s %s\n", l.Figure, bound, report.Quantity(l.Figure, l.Value))
	}
	if n := p.Windings(); n > 1 {
		at := "the worst"
		if s.Margins.Percentile > 0 {
			at = percent(s.Margins.Percentile / 100)
		}
		fmt.Fprintf(w, "margins       aims and limits hold at %s of %d windings, each simulated: %d times the cost\n", at, n, n)
	}
	for _, u := range p.Unapplied {
		fmt.Fprintf(w, "set aside     %s: the model only indicates it (trust_indicative: true applies it)\n", u)
	}
	if n := samplesWanted(s); n > s.Band.Samples {
		fmt.Fprintf(w, "warning       the band's samples are more than 1 %% of mid-band apart; %d would be closer\n", n)
	}
}

// samplesWanted is how many samples keep a band's steps to 1 % of mid-band.
func samplesWanted(s *objectives.Spec) int {
	return int(math.Ceil((s.Band.To-s.Band.From)/(0.01*s.Band.Mid())-1e-9)) + 1
}

// describeSpace names the variables and how many points they span.
func describeSpace(w io.Writer, p *objectives.Problem) {
	size := 0.0
	for i := range p.Layout.Space {
		v := &p.Layout.Space[i]
		n := v.Levels()
		if n == 0 {
			n = int(math.Round((v.To-v.From)/v.Grid)) + 1
		}
		size += math.Log10(float64(n))
		switch v.Kind {
		case space.Choice:
			fmt.Fprintf(w, "varies        %s: %d choices\n", v.Name, n)
		case space.Stepped:
			fmt.Fprintf(w, "varies        %s: %s to %s in %d values\n", v.Name, shownValue(v.Name, v.From), shownValue(v.Name, v.To), n)
		default:
			fmt.Fprintf(w, "varies        %s: %s to %s\n", v.Name, shownValue(v.Name, v.From), shownValue(v.Name, v.To))
		}
	}
	fmt.Fprintf(w, "space         %d variables, about 10^%.0f designs\n", len(p.Layout.Space), size)
}

// shownValue is a variable's value as a person reads it.
func shownValue(name string, x float64) string {
	switch {
	case strings.HasSuffix(name, "_m"):
		return fmt.Sprintf("%.4g mm", x*1e3)
	case strings.HasSuffix(name, "_ohm"):
		return fmt.Sprintf("%.4g Ω", x)
	}
	return fmt.Sprintf("%.4g", x)
}

// screenedShare is the part of the space that passes the screens.
func screenedShare(p *objectives.Problem) float64 {
	const tries = 2000
	rng := optimize.Stream(1, "check", 0)
	passed := 0
	for range tries {
		if v, _ := p.Screen(randomPoint(p, rng.Float64)); v <= 0 {
			passed++
		}
	}
	return float64(passed) / tries
}

func randomPoint(p *objectives.Problem, random func() float64) space.Point {
	u := make([]float64, len(p.Layout.Space))
	for i := range u {
		u[i] = random()
	}
	return p.Layout.Space.FromUnit(u)
}

// enoughTiming is the time after which an estimate is good enough.
const enoughTiming = 3 * time.Second

// timeEvaluation is how long one evaluation takes here: the mean over some
// designs of hand rules and some drawn at random, on one ground, the first of
// all left out.
func timeEvaluation(ctx context.Context, p *objectives.Problem) (time.Duration, error) {
	const most = 12
	points := p.HandSeeds(most / 2)
	rng := optimize.Stream(1, "timing", 0)
	domain := p.Domain()
	for tries := 0; len(points) < most && tries < 2000; tries++ {
		if pt := randomPoint(p, rng.Float64); domain.Passes(pt) {
			points = append(points, pt)
		}
	}
	if len(points) == 0 {
		points = append(points, randomPoint(p, rng.Float64))
	}
	for i := range points {
		points[i] = onGroundOf(p, points[0], points[i])
	}
	var faults []error
	var sum time.Duration
	answered := 0
	for i, pt := range append(points[:1:1], points...) {
		began := time.Now()
		_, err := p.Evaluate(ctx, optimize.Candidate{Point: pt, Rung: len(p.Rungs()) - 1})
		if err != nil {
			if !slices.ContainsFunc(faults, func(said error) bool { return said.Error() == err.Error() }) {
				faults = append(faults, err)
			}
			continue
		}
		if i > 0 {
			sum += time.Since(began)
			answered++
		}
		if sum > enoughTiming {
			break
		}
	}
	if answered == 0 {
		return 0, errors.Join(faults...)
	}
	return max(sum/time.Duration(answered), time.Microsecond), nil
}

// plannedEvaluations is what a search of a brief plans: what the brief says,
// else as many as its time allows, else the default.
func plannedEvaluations(b *configs.Brief, p *objectives.Problem, one time.Duration, workers int) int {
	switch {
	case b.Budget.Evaluations > 0:
		return b.Budget.Evaluations
	case b.Budget.Time > 0:
		return timedPlan(p, b.Budget.Time, one, workers)
	}
	return configs.DefaultEvaluations
}

// timedPlan is how many evaluations fit into a time, a tenth of it kept for
// the final front.
func timedPlan(p *objectives.Problem, t, one time.Duration, workers int) int {
	left, each := 0.9*float64(t), float64(one)/float64(workers)
	n := left / each
	if learns(p) && one < dearFrom {
		n = math.Max((left-float64(ownTime(p, learnedMost)))/each, 0)
		n = math.Max(n, math.Min(left/(each+float64(learnedOwn)), learnedMost))
	}
	return int(math.Min(math.Max(n, 100), 100_000_000))
}

// ownTime is about what the learned searcher takes for itself.
func ownTime(p *objectives.Problem, planned int) time.Duration {
	if !learns(p) {
		return 0
	}
	return learnedOwn * time.Duration(min(planned, learnedMost))
}

// journalBytes is about how many bytes a journal takes on disk: a row and an
// answer an evaluation, and the sweeps of the final front's members. Measured
// on journals of the built-in briefs.
func journalBytes(b *configs.Brief, evaluations int) float64 {
	return float64(evaluations)*(800+320*float64(b.Spec.Band.Samples)) + 60e3*float64(b.FrontAtMost)
}

func bytesText(n float64) string {
	switch {
	case n >= 1e9:
		return fmt.Sprintf("%.1f GB", n/1e9)
	case n >= 1e6:
		return fmt.Sprintf("%.0f MB", n/1e6)
	}
	return fmt.Sprintf("%.0f kB", n/1e3)
}

func percent(share float64) string {
	if share > 0 && share < 0.01 {
		return fmt.Sprintf("%.2f %%", 100*share)
	}
	return fmt.Sprintf("%.0f %%", 100*share)
}

// brief is a duration in three digits.
func brief(d time.Duration) string {
	switch {
	case d < time.Millisecond:
		return fmt.Sprintf("%.3g µs", float64(d)/1e3)
	case d < time.Second:
		return fmt.Sprintf("%.3g ms", float64(d)/1e6)
	case d < time.Minute:
		return fmt.Sprintf("%.3g s", d.Seconds())
	}
	return clock(d)
}
