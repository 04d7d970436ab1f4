package workshop

import (
	"cmp"
	"math"
	"slices"
)

// mostPairs is the number of pairs that are simulated.
const mostPairs = 5

// parsimony is what a pair must explain more, as a part of the difference, to
// move both of its dimensions as far as they go. Over a narrow band a
// difference is hardly more than one complex number, which almost any two
// dimensions can make up; the smaller errors are the likelier ones.
const parsimony = 0.02

// pairs are the pairs of causes that leave least of a difference, the effects
// of both taken as their sum; the best first.
func pairs(causes []cause, due []complex128) []candidate {
	type scored struct {
		candidate
		score float64
	}
	var all []scored
	for i := range causes {
		for j := range i {
			c := candidate{causes: []*cause{&causes[j], &causes[i]}}
			score := c.fit(due, parsimony)
			if c.by[0] != 0 && c.by[1] != 0 {
				all = append(all, scored{c, score})
			}
		}
	}
	slices.SortStableFunc(all, func(a, b scored) int { return cmp.Compare(a.score, b.score) })
	var out []candidate
	for _, s := range all[:min(len(all), mostPairs)] {
		out = append(out, s.candidate)
	}
	return out
}

// Amounts are tried on a grid of so many steps across what is allowed, then
// on ever finer ones about the best.
const (
	gridSteps = 40
	gridZoom  = 8.0
	grids     = 4
)

// fit finds the amounts that leave least of a difference; each dimension moved
// as far as it goes counts as much as the given part of it left. It returns
// what is left, so counted.
func (c *candidate) fit(due []complex128, dear float64) float64 {
	n := len(c.causes)
	c.by = make([]float64, n)
	least := 1.0
	low, high, width, about := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	for i, one := range c.causes {
		low[i], high[i] = one.span()
		width[i], about[i] = high[i]-low[i], (low[i]+high[i])/2
	}
	whole := energy(due)
	try := func(by []float64) {
		if s := c.left(due, by)/whole + dear*c.effort(by); s < least {
			least = s
			copy(c.by, by)
		}
	}
	by := make([]float64, n)
	for range grids {
		var each func(i int)
		each = func(i int) {
			if i == n {
				try(by)
				return
			}
			for k := range gridSteps + 1 {
				x := about[i] + width[i]*(float64(k)/gridSteps-0.5)
				by[i] = math.Min(math.Max(x, low[i]), high[i])
				each(i + 1)
			}
		}
		each(0)
		copy(about, c.by)
		for i := range width {
			width[i] /= gridZoom
		}
	}
	return least
}

// left is the squared difference that the amounts leave.
func (c *candidate) left(due []complex128, by []float64) float64 {
	sum := 0.0
	for k := range due {
		g := due[k]
		for i, one := range c.causes {
			g -= one.at[k].by(by[i])
		}
		sum += square(g)
	}
	return sum
}

// effort is how far the amounts go, as parts of what is allowed.
func (c *candidate) effort(by []float64) float64 {
	sum := 0.0
	for i, one := range c.causes {
		part := by[i] / math.Max(-one.Lowest, one.Highest)
		sum += part * part
	}
	return sum
}

// span is from where to where the cause was moved.
func (c *cause) span() (low, high float64) {
	p := c.at[0]
	return p[0].By, p[len(p)-1].By
}
