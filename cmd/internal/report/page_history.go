package report

import (
	"turnwise/optimize"
	"turnwise/optimize/front"
)

// historySteps is about how many points a history has.
const historySteps = 100

// History replays a search and tells how its front grew: the hypervolume
// over the aims' final span, as a share of what it came to.
func History(past []optimize.Evaluation) []Step {
	values := make([]front.Value, len(past))
	for i := range past {
		values[i] = past[i].Value()
	}
	members := front.Front(values)
	if len(members) == 0 {
		return nil
	}
	last := make([][]float64, len(members))
	for i, m := range members {
		last[i] = values[m].Aims
	}
	axes := front.Span(last)
	grown := newGrowth(len(last[0]))
	every := max(1, len(past)/historySteps)
	steps := []Step{{}}
	for i := range values {
		if values[i].Feasible() {
			grown.insert(i, axes.Unit(values[i].Aims))
		}
		if n := i + 1; n%every == 0 || n == len(values) {
			steps = append(steps, Step{n, grown.volume()})
		}
	}
	whole := steps[len(steps)-1].Share
	if whole == 0 {
		return nil // too little for the cloud to see
	}
	for i := range steps {
		steps[i].Share /= whole
	}
	return steps
}

// growth measures a front that grows, on aims scaled to the final span.
type growth interface {
	insert(id int, aims []float64)
	volume() float64
}

// mostExact is the number of aims up to which the hypervolume is computed:
// with four, a hundred times that of a large front takes minutes.
const mostExact = 3

func newGrowth(aims int) growth {
	if aims <= mostExact {
		return exact{front.NewArchive(front.UnitReference(aims))}
	}
	return newCounted(aims)
}

type exact struct{ *front.Archive }

func (e exact) insert(id int, aims []float64) { e.Insert(id, front.Value{Aims: aims}) }
func (e exact) volume() float64               { return e.Hypervolume() }

// cloudPoints is the number of points that a volume is counted by: to about
// one per cent.
const cloudPoints = 4000

// counted is the part of a fixed cloud of points that the front dominates.
type counted struct {
	free  [][]float64 // not dominated yet
	taken int
}

// newCounted spreads the cloud over the box that the front can dominate.
func newCounted(aims int) *counted {
	reference := front.UnitReference(aims)
	random := optimize.Stream(1, "history", aims)
	c := &counted{free: make([][]float64, cloudPoints)}
	for i := range c.free {
		c.free[i] = make([]float64, aims)
		for k := range c.free[i] {
			c.free[i][k] = reference[k] * random.Float64()
		}
	}
	return c
}

func (c *counted) insert(_ int, aims []float64) {
	left := c.free[:0]
	for _, p := range c.free {
		if below(aims, p) {
			c.taken++
		} else {
			left = append(left, p)
		}
	}
	c.free = left
}

func (c *counted) volume() float64 { return float64(c.taken) }

// below reports whether a is at most p in every aim.
func below(a, p []float64) bool {
	for k := range a {
		if a[k] > p[k] {
			return false
		}
	}
	return true
}

// Stages tells what each stage of a search cost, in the order of their
// beginnings, and how many members of the front it found.
func Stages(past []optimize.Evaluation, found map[string]int) []Stage {
	at := map[string]int{}
	var stages []Stage
	for i := range past {
		name := past[i].From
		k, known := at[name]
		if !known {
			k = len(stages)
			at[name] = k
			stages = append(stages, Stage{Name: name, Front: found[name]})
		}
		stages[k].Evaluations++
	}
	return stages
}

// Stretches tells which stage asked when.
func Stretches(past []optimize.Evaluation) []Stretch {
	var all []Stretch
	for i := range past {
		if n := len(all); n == 0 || all[n-1].Stage != past[i].From {
			all = append(all, Stretch{Stage: past[i].From})
		}
		all[len(all)-1].To = i + 1
	}
	return all
}
