package surrogate

import (
	"math"

	"turnwise/optimize/front"
)

// parts divides batches between the surfaces and breeding.
type parts struct {
	learned float64 // of a batch that the surfaces choose
	owed    float64 // points of that which they have not had yet
}

// Bounds of the surfaces' part, and how fast it follows what is gained.
const (
	firstPart = 0.95
	leastPart = 0.05
	following = 0.25
)

// take is how many of the next n points the surfaces choose.
func (p *parts) take(n int) int {
	p.owed += p.learned * float64(n)
	whole := math.Floor(p.owed)
	p.owed -= whole
	return int(whole)
}

// follow moves the parts towards what a point of either kind gained; towards
// halves where none gained anything.
func (p *parts) follow(learned, bred float64) {
	to := 0.5
	if learned+bred > 0 {
		to = learned / (learned + bred)
	}
	p.learned = min(max(p.learned+following*(to-p.learned), leastPart), 1-leastPart)
}

// progress is what more values gain: hypervolume on the axes of the front
// with them, or while nothing is feasible the part of the violation that
// they take away.
func progress(before, more []front.Value) float64 {
	all := append(append([]front.Value(nil), before...), more...)
	now := front.Front(all)
	if len(now) == 0 {
		return relief(least(before), least(all))
	}
	points := aims(all, now)
	axes := front.Span(points)
	reference := front.UnitReference(len(points[0]))
	was := axes.Units(aims(all, front.Front(before)))
	return front.Hypervolume(axes.Units(points), reference) - front.Hypervolume(was, reference)
}

// relief is the part of a violation that went.
func relief(was, is float64) float64 {
	if math.IsInf(was, 1) {
		return 0
	}
	return (was - is) / was
}

// least is the smallest violation that is known; infinite where none is.
func least(values []front.Value) float64 {
	least := math.Inf(1)
	for i := range values {
		if !values[i].Unknown {
			least = min(least, values[i].Violation)
		}
	}
	return least
}

// aims lists those of some members.
func aims(values []front.Value, members []int) [][]float64 {
	out := make([][]float64, len(members))
	for k, i := range members {
		out[k] = values[i].Aims
	}
	return out
}
