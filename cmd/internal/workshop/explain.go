package workshop

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"slices"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// Explanation is one change of a dimension that would take the prediction
// towards a measurement.
type Explanation struct {
	Name   string
	Stands string // what exactly is changed
	By     float64
	Plain  bool // By is a number without unit; else metres
	// Undo is what a fitter does on the finished antenna to take it back;
	// empty where it takes winding anew.
	Undo string
	// Left is the part of the squared difference that it leaves, 0 to 1.
	Left float64
}

// explained is the number of frequencies an explanation is sought at.
const explained = 5

// cause is a change of one dimension: what it adds to the reflection at each
// frequency.
type cause struct {
	at            []move // one a frequency
	plain, fitter bool   // By has no unit; a fitter can undo it
}

// Explain finds, for everything a fitter can move and every dimension that a
// workshop may miss, the amount whose reflection comes nearest to the measured
// one, by least squares over frequency; the best explanation first. Without a
// difference there is none.
func Explain(ctx context.Context, rung objectives.Rung, d models.Design, spreads tolerance.Spreads, hz []float64, difference []complex128) ([]Explanation, error) {
	at := Thinned(len(hz), explained)
	few, due := make([]float64, len(at)), make([]complex128, len(at))
	whole := 0.0
	for i, k := range at {
		few[i], due[i] = hz[k], difference[k]
		whole += square(due[i])
	}
	if whole < 1e-18 {
		return nil, nil
	}
	causes, err := fitterCauses(ctx, rung, d, few)
	if err != nil {
		return nil, err
	}
	more, err := windingCauses(ctx, rung, d, spreads, few)
	if err != nil {
		return nil, err
	}
	var out []Explanation
	for _, c := range append(causes, more...) {
		if e := c.explain(due, whole); e.By != 0 {
			out = append(out, e)
		}
	}
	slices.SortStableFunc(out, func(a, b Explanation) int { return cmp.Compare(a.Left, b.Left) })
	return out, nil
}

// Thinned picks at most so many of n places, evenly, both ends among them.
func Thinned(n, most int) []int {
	var out []int
	for i := range min(n, most) {
		k := 0
		if most > 1 && n > 1 {
			k = (i*(n-1) + (min(n, most)-1)/2) / (min(n, most) - 1)
		}
		out = append(out, k)
	}
	return out
}

func square(g complex128) float64 { return real(g)*real(g) + imag(g)*imag(g) }

// fitterCauses are the moves of the trim chart, drawn at every frequency.
func fitterCauses(ctx context.Context, rung objectives.Rung, d models.Design, hz []float64) ([]cause, error) {
	c, err := helix.Wind(&d)
	if err != nil {
		return nil, err
	}
	var out []cause
	for _, f := range hz {
		d.Band = models.Band{From: f, To: f, Samples: 1}
		t, err := newTrimChart(ctx, rung, &d, c)
		if err != nil {
			return nil, err
		}
		if out == nil {
			out = make([]cause, len(t.Moves))
		}
		for i, m := range t.Moves {
			out[i].fitter = true
			out[i].at = append(out[i].at, m)
		}
	}
	return out, nil
}

// windingCauses are the dimensions that only winding anew would mend, each
// moved up to four half-widths; and the lead's spacing, which a fitter bends as
// far as the rest. The riser is among the fitter's moves already.
func windingCauses(ctx context.Context, rung objectives.Rung, d models.Design, spreads tolerance.Spreads, hz []float64) ([]cause, error) {
	from, err := sweptReflection(ctx, rung, d, hz)
	if err != nil {
		return nil, err
	}
	var out []cause
	for i := range tolerance.Dimensions {
		dim := tolerance.Dimension(i)
		if dim == tolerance.FeedHeight || !dim.In(&d) {
			continue
		}
		info := &tolerance.Dimensions[dim]
		half := spreads[dim]
		if half == 0 {
			half = info.Default
		}
		m := move{Name: info.Words, Stands: "made so from the start"}
		c := cause{plain: dim == tolerance.Permittivity, at: make([]move, len(hz))}
		if dim == tolerance.LeadSpacing {
			c.fitter, half = true, (&trimChart{Hz: hz[0]}).reach()/4
			m = move{Name: info.Words, Stands: "whole lead, the winding after it moves with it", More: "widen", Less: "narrow"}
		}
		for k := range hz {
			c.at[k] = m
		}
		for _, times := range []float64{-4, -2, -1, 0, 1, 2, 4} {
			g, err := sweptReflection(ctx, rung, dim.Shift(d, times*half), hz)
			if ctx.Err() != nil {
				return nil, ctx.Err()
			}
			if err != nil {
				continue // it cannot be so far off
			}
			for k := range hz {
				c.at[k].Path = append(c.at[k].Path, waypoint{By: times * half, Added: g[k] - from[k]})
			}
		}
		out = append(out, c)
	}
	return out, nil
}

// sweptReflection is a design's reflection at the connector.
func sweptReflection(ctx context.Context, rung objectives.Rung, d models.Design, hz []float64) ([]complex128, error) {
	r, err := rung.Simulator.Simulate(ctx, d, models.Question{Hz: hz, Outputs: models.Axis})
	if err != nil {
		return nil, err
	}
	out := make([]complex128, len(hz))
	for i := range out {
		out[i] = models.Reflection(r.Samples[i].Input, d.Feed.Impedance)
	}
	return out, nil
}

// explain finds the amount that leaves least of a difference.
func (c *cause) explain(due []complex128, whole float64) Explanation {
	left := func(x float64) float64 {
		sum := 0.0
		for i := range due {
			sum += square(due[i] - c.at[i].by(x))
		}
		return sum / whole
	}
	low, high := math.Inf(-1), math.Inf(1)
	for i := range c.at {
		path := c.at[i].Path
		low, high = math.Max(low, path[0].By), math.Min(high, path[len(path)-1].By)
	}
	m := &c.at[0]
	e := Explanation{Name: m.Name, Stands: m.Stands, Plain: c.plain, Left: 1}
	const parts = 2000
	for k := range parts + 1 {
		x := low + (high-low)*float64(k)/parts
		if l := left(x); l < e.Left {
			e.By, e.Left = x, l
		}
	}
	switch {
	case !c.fitter || e.By == 0:
	case e.By > 0:
		e.Undo = m.Less
	default:
		e.Undo = m.More
	}
	return e
}

// Words say the change with its sign: "riser height +0.80 mm".
func (e *Explanation) Words() string {
	sign := "+"
	if e.By < 0 {
		sign = "−"
	}
	if e.Plain {
		return fmt.Sprintf("%s %s%.3g", e.Name, sign, math.Abs(e.By))
	}
	return fmt.Sprintf("%s %s%.2f mm", e.Name, sign, math.Abs(e.By)*1e3)
}

// UndoWords say how a fitter takes it back.
func (e *Explanation) UndoWords() string {
	if e.Undo == "" {
		return "wind anew"
	}
	return fmt.Sprintf("%s by %.2f mm", e.Undo, math.Abs(e.By)*1e3)
}
