package workshop

import (
	"cmp"
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// Shift is a change of one dimension.
type Shift struct {
	Name   string
	Stands string // what exactly is changed
	By     float64
	Plain  bool // By is a number without unit; else metres
	OrMore bool // it was not sought any farther
	// Undo is what a fitter does on the finished antenna to take it back;
	// empty where it takes winding anew.
	Undo string
}

// Explanation is a change of one dimension, or of two at once, that would take
// the prediction towards a measurement.
type Explanation struct {
	Shifts []Shift
	// Left is the part of the squared difference that it leaves; more than 1
	// where it makes it worse.
	Left float64
	// Added is what the antenna changed so reflects more than the drawn one,
	// as simulated at each frequency.
	Added []complex128
}

// Explanations are those of one difference, each list with the best first.
type Explanations struct {
	Single []Explanation
	// Pairs are sought only where no single dimension explains most.
	Pairs []Explanation
}

// Best is the explanation to believe first: a pair only where pairs were
// sought; nil where there was nothing to explain.
func (e *Explanations) Best() *Explanation {
	switch {
	case len(e.Pairs) > 0 && e.Pairs[0].Left < e.Single[0].Left:
		return &e.Pairs[0]
	case len(e.Single) > 0:
		return &e.Single[0]
	}
	return nil
}

// explained is the number of frequencies that changes are simulated at before
// their amounts are sought; between them they are taken along straight lines.
const explained = 9

// unexplained is the part of a difference that one dimension may leave before
// pairs are sought.
const unexplained = 1.0 / 3

// cause is a change of one dimension and what it adds to the reflection at
// each frequency.
type cause struct {
	movable
	at []path
}

// Explain finds, for everything a fitter can move and every dimension that a
// workshop may miss, the amount whose reflection comes nearest to the measured
// one, by least squares over frequency; where one dimension leaves much of the
// difference, also pairs. Each is simulated as found, and judged by that.
func Explain(ctx context.Context, rung objectives.Rung, d models.Design, spreads tolerance.Spreads, hz []float64, difference []complex128) (Explanations, error) {
	var out Explanations
	if energy(difference) < 1e-18 {
		return out, nil
	}
	causes, err := possibleCauses(ctx, rung, d, spreads, hz)
	if err != nil {
		return out, err
	}
	band, err := newBench(ctx, rung, d, hz)
	if err != nil {
		return out, err
	}
	if out.Single, err = judged(ctx, band, singles(causes, difference), difference); err != nil {
		return out, err
	}
	if len(out.Single) > 0 && out.Single[0].Left > unexplained {
		out.Pairs, err = judged(ctx, band, pairs(causes, difference), difference)
	}
	return out, err
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

// energy is the sum of squared magnitudes.
func energy(gs []complex128) (sum float64) {
	for _, g := range gs {
		sum += square(g)
	}
	return sum
}

func square(g complex128) float64 { return real(g)*real(g) + imag(g)*imag(g) }

// possibleCauses moves every dimension as far as it goes.
func possibleCauses(ctx context.Context, rung objectives.Rung, d models.Design, spreads tolerance.Spreads, hz []float64) ([]cause, error) {
	c, err := helix.Wind(&d)
	if err != nil {
		return nil, err
	}
	at := Thinned(len(hz), explained)
	few := make([]float64, len(at))
	for i, k := range at {
		few[i] = hz[k]
	}
	b, err := newBench(ctx, rung, d, few)
	if err != nil {
		return nil, err
	}
	far := reach(hz[len(hz)/2])
	var out []cause
	for _, m := range append(fittersMovables(&d, c, far), windingMovables(&d, spreads, far)...) {
		paths := make([]path, len(few))
		for _, by := range m.amounts() {
			p := b.piece()
			if by != 0 {
				m.move(p, by)
			}
			g, err := b.added(ctx, p)
			if ctx.Err() != nil {
				return nil, ctx.Err()
			}
			if err != nil {
				continue // it cannot be so far off
			}
			for k := range few {
				paths[k] = append(paths[k], waypoint{by, g[k]})
			}
		}
		out = append(out, cause{m, between(few, paths, hz)})
	}
	return out, nil
}

// between gives a path at each of many frequencies from those at a few, the
// first and the last among them.
func between(few []float64, paths []path, hz []float64) []path {
	out := make([]path, len(hz))
	i := 0
	for k, f := range hz {
		for i < len(few)-2 && f > few[i+1] {
			i++
		}
		if f == few[i] {
			out[k] = paths[i]
			continue
		}
		u := complex((f-few[i])/(few[i+1]-few[i]), 0)
		for w, a := range paths[i] {
			b := paths[i+1][w]
			out[k] = append(out[k], waypoint{a.By, a.Added + u*(b.Added-a.Added)})
		}
	}
	return out
}

// windingMovables are the dimensions that only winding anew would mend, each
// as far as four half-widths; and the lead's spacing, which a fitter bends as
// far as the rest. The riser is among the fitter's own.
func windingMovables(d *models.Design, spreads tolerance.Spreads, reach float64) []movable {
	var out []movable
	for i := range tolerance.Dimensions {
		dim := tolerance.Dimension(i)
		if dim == tolerance.FeedHeight || !dim.In(d) {
			continue
		}
		info := &tolerance.Dimensions[dim]
		far := 4 * spreads[dim]
		if far == 0 {
			far = 4 * info.Default
		}
		m := movable{Name: info.Words, Stands: "made so from the start", Plain: dim == tolerance.Permittivity}
		if dim == tolerance.LeadSpacing {
			far = reach
			m = movable{Name: info.Words, Stands: "whole lead, the winding after it moves with it", More: "widen", Less: "narrow"}
		}
		m.Lowest, m.Highest = -far, far
		m.move = altering(func(d *models.Design, by float64) { *d = dim.Shift(*d, by) })
		out = append(out, m)
	}
	return out
}

// candidate is causes and how much of each.
type candidate struct {
	causes []*cause
	by     []float64
}

// singles are the amounts of each cause alone that leave least of a
// difference.
func singles(causes []cause, due []complex128) []candidate {
	var out []candidate
	for i := range causes {
		c := candidate{causes: []*cause{&causes[i]}}
		if c.fit(due, 0); c.by[0] != 0 {
			out = append(out, c)
		}
	}
	return out
}

// judged simulates candidates and says what each leaves of a difference.
func judged(ctx context.Context, b *bench, candidates []candidate, difference []complex128) ([]Explanation, error) {
	whole := energy(difference)
	var out []Explanation
	for i := range candidates {
		c := &candidates[i]
		added, err := b.added(ctx, c.piece(b))
		if ctx.Err() != nil {
			return nil, ctx.Err()
		}
		if err != nil {
			continue // two that can be so far off need not both be
		}
		e := Explanation{Added: added, Shifts: c.shifts()}
		for k := range added {
			e.Left += square(difference[k]-added[k]) / whole
		}
		out = append(out, e)
	}
	slices.SortStableFunc(out, func(a, b Explanation) int { return cmp.Compare(a.Left, b.Left) })
	return out, nil
}

func (c *candidate) piece(b *bench) *piece {
	p := b.piece()
	for i, one := range c.causes {
		one.move(p, c.by[i])
	}
	return p
}

func (c *candidate) shifts() []Shift {
	out := make([]Shift, len(c.causes))
	for i, one := range c.causes {
		low, high := one.span()
		out[i] = Shift{Name: one.Name, Stands: one.Stands, By: c.by[i], Plain: one.Plain, OrMore: c.by[i] == low || c.by[i] == high, Undo: one.Less}
		if c.by[i] < 0 {
			out[i].Undo = one.More
		}
	}
	return out
}

// Words say the change with its sign: "riser height +0.80 mm".
func (s *Shift) Words() string {
	sign, more := "+", ""
	if s.By < 0 {
		sign = "−"
	}
	if s.OrMore {
		more = " or more"
	}
	if s.Plain {
		return fmt.Sprintf("%s %s%.3g%s", s.Name, sign, math.Abs(s.By), more)
	}
	return fmt.Sprintf("%s %s%.2f mm%s", s.Name, sign, math.Abs(s.By)*1e3, more)
}

// Words say all its changes.
func (e *Explanation) Words() string {
	return e.each(" and ", (*Shift).Words)
}

// Mendable reports whether a fitter can take all of it back.
func (e *Explanation) Mendable() bool {
	return !slices.ContainsFunc(e.Shifts, func(s Shift) bool { return s.Undo == "" })
}

// UndoWords say how a fitter takes it back.
func (e *Explanation) UndoWords() string {
	if !e.Mendable() {
		return "wind anew"
	}
	return e.each(", ", (*Shift).UndoWords)
}

// UndoWords say how a fitter takes it back: "lower by 0.80 mm".
func (s *Shift) UndoWords() string { return fmt.Sprintf("%s by %.2f mm", s.Undo, math.Abs(s.By)*1e3) }

func (e *Explanation) each(between string, say func(s *Shift) string) string {
	words := make([]string, len(e.Shifts))
	for i := range e.Shifts {
		words[i] = say(&e.Shifts[i])
	}
	return strings.Join(words, between)
}
