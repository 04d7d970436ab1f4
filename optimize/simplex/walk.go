package simplex

import (
	"math"

	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// walk is one simplex on its way from a member of the front.
type walk struct {
	s      *Search
	d      *descent
	scalar front.Scalar
	home   space.Point

	at    space.Point        // the canonical vertex whose value is wanted
	known map[string]float64 // values of canonical points seen on this walk

	best  float64
	since int // vertices since the best improved by the tolerance
	spent int // evaluations
	idle  int // vertices in a row that cost none
}

// Levels between those of front.Scalar: what a screen rejects is worse than
// anything that was evaluated and violates its limits, and better than the
// unknown.
const screenedFrom = 3

// mostIdle ends a walk that keeps asking what it knows or what a screen
// rejects.
const mostIdle = 1000

// advance moves on to the next vertex that costs an evaluation and reports
// whether there is one. Vertices that a screen rejects and those that are
// known already are answered here.
func (w *walk) advance() bool {
	vertices := len(w.s.free) + 1
	for {
		if w.s.c.Each > 0 && w.spent >= w.s.c.Each*vertices || w.since > 4*vertices || w.idle > mostIdle {
			return false
		}
		x := w.d.next()
		if x == nil {
			return false
		}
		w.at = w.point(x)
		if value, ok := w.known[w.at.Key()]; ok {
			w.settle(value)
			continue
		}
		if screen := w.s.domain.Screen; screen != nil {
			if violation, _ := screen(w.at); violation > 0 {
				w.settle(screenedFrom + violation/(1+violation))
				continue
			}
		}
		return true
	}
}

// take gives the walk the value of its vertex, which cost an evaluation.
func (w *walk) take(v front.Value) {
	w.spent++
	value := w.scalar.Of(v)
	w.settle(value)
	w.idle = 0
}

// settle tells the simplex a value and keeps the walk's progress.
func (w *walk) settle(value float64) {
	w.known[w.at.Key()] = value
	w.idle++
	w.since++
	if value < w.best-w.s.c.Tolerance {
		w.best, w.since = value, 0
	}
	w.d.tell(value)
}

// point is the canonical point of a vertex: folded into the box, with the
// pinned variables as they were at home.
func (w *walk) point(x []float64) space.Point {
	p := append(space.Point(nil), w.home...)
	for k, j := range w.s.free {
		v := &w.s.domain.Space[j]
		p[j] = v.From + fold(x[k])*(v.To-v.From)
	}
	return w.s.domain.Space.Canonical(p)
}

// fold mirrors a coordinate at 0 and 1 until it lies between them.
func fold(x float64) float64 {
	x = math.Mod(math.Abs(x), 2)
	if x > 1 {
		x = 2 - x
	}
	return x
}
