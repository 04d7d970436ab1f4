package programme

import (
	"math"

	"turnwise/optimize"
	"turnwise/optimize/front"
)

// correction takes a model's aims and limits to the next finer one's, a
// straight line each, by least squares over all that both have answered.
type correction struct {
	pairs   int
	outputs []line // of aims, then limits
}

// line is a regression of y on x.
type line struct{ n, x, y, xx, xy, yy float64 }

func (l *line) add(x, y float64) {
	l.n++
	l.x += x
	l.y += y
	l.xx += x * x
	l.xy += x * y
	l.yy += y * y
}

// slope is 0 where x never varied.
func (l *line) slope() float64 {
	spread := l.n*l.xx - l.x*l.x
	if !(spread > 1e-12*l.n*l.xx) {
		return 0
	}
	return (l.n*l.xy - l.x*l.y) / spread
}

// of is the line at x.
func (l *line) of(x float64) float64 { return l.y/l.n + l.slope()*(x-l.x/l.n) }

// deviation is the root mean square of y about the line.
func (l *line) deviation() float64 {
	squares := l.n*l.yy - l.y*l.y - l.slope()*(l.n*l.xy-l.x*l.y)
	return math.Sqrt(max(squares, 0)) / l.n
}

func (c *correction) learn(rough, fine *optimize.Evaluation) {
	if rough.Status != optimize.OK || fine.Status != optimize.OK {
		return
	}
	c.pairs++
	for m := range rough.Aims {
		c.outputs[m].add(rough.Aims[m], fine.Aims[m])
	}
	for m := range rough.Limits {
		c.outputs[len(rough.Aims)+m].add(rough.Limits[m], fine.Limits[m])
	}
}

// value is what ranking is to see of an answer, as the finer model would give
// it.
func (c *correction) value(e *optimize.Evaluation) front.Value {
	if e.Status != optimize.OK {
		return front.Value{Unknown: true}
	}
	aims, limits := c.foretell(e, 0)
	return front.Value{Aims: aims, Violation: front.Violation(limits)}
}

// foretell is what the finer model will make of an answer, so many deviations
// worse.
func (c *correction) foretell(e *optimize.Evaluation, doubt float64) (aims, limits []float64) {
	at := func(o int, x float64) float64 {
		l := &c.outputs[o]
		return l.of(x) + doubt*l.deviation()
	}
	aims, limits = make([]float64, len(e.Aims)), make([]float64, len(e.Limits))
	for m, x := range e.Aims {
		aims[m] = at(m, x)
	}
	for m, x := range e.Limits {
		limits[m] = at(len(aims)+m, x)
	}
	return aims, limits
}
