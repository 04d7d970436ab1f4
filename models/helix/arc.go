package helix

import (
	"math"
	"sort"

	"gonum.org/v1/gonum/integrate/quad"
)

// panel is a stretch of one piece short enough for the fixed rule: arc
// length within it is good to arcTolerance of the whole.
type panel struct {
	from, to float64 // t
	arc      float64 // from the foot of the riser to from
	length   float64
	slow     float64 // ds/dt at from
	fast     float64 // ds/dt at to
	piece    int
}

const (
	arcTolerance = 1e-12
	arcRounding  = 1e-16 // of a piece's length: differences below it mean nothing
	arcDepth     = 40    // halvings of a piece, never reached by a smooth law
	gaussPoints  = 12
)

// gauss is the Gauss–Legendre rule on 0 to 1.
var gauss = func() (g struct{ x, w [gaussPoints]float64 }) {
	quad.Legendre{}.FixedLocations(g.x[:], g.w[:], 0, 1)
	return g
}()

// arc is the arc length of the piece from x = a to b by the fixed rule.
func (p *piece) arc(a, b float64) float64 {
	h := b - a
	if p.uniform {
		return p.speed(a) * h
	}
	sum := 0.0
	for i, x := range gauss.x {
		sum += gauss.w[i] * p.speed(a+h*x)
	}
	return sum * h
}

// measure splits the winding into panels and adds their lengths up.
func (c *Curve) measure() {
	c.panels = c.panels[:0]
	c.wire = c.height
	for i := range c.pieces {
		p := &c.pieces[i]
		width := p.to - p.from
		whole := p.arc(0, width)
		c.split(i, 0, width, whole, arcRounding*whole, arcDepth)
	}
}

// split lays panels from x = a to b of a piece, halving until the fixed rule
// on the halves confirms the whole, but for the slack that rounding needs: a
// waist a millionth as wide as the winding would otherwise be halved for ever.
func (c *Curve) split(i int, a, b, whole, slack float64, depth int) {
	p := &c.pieces[i]
	if p.uniform {
		c.lay(i, a, b, whole)
		return
	}
	mid := (a + b) / 2
	left, right := p.arc(a, mid), p.arc(mid, b)
	if depth == 0 || math.Abs(left+right-whole) <= arcTolerance*whole+slack {
		c.lay(i, a, mid, left)
		c.lay(i, mid, b, right)
		return
	}
	c.split(i, a, mid, left, slack, depth-1)
	c.split(i, mid, b, right, slack, depth-1)
}

func (c *Curve) lay(i int, a, b, length float64) {
	p := &c.pieces[i]
	c.panels = append(c.panels, panel{
		from: p.from + a, to: p.from + b,
		arc: c.wire, length: length,
		slow: p.speed(a), fast: p.speed(b),
		piece: i,
	})
	c.wire += length
}

// WireLength is the length of the wire from the plane to the open end, m,
// riser included.
func (c *Curve) WireLength() float64 { return c.wire }

// Arc is the arc length from the foot of the riser to t, m.
func (c *Curve) Arc(t float64) float64 {
	t = min(max(t, 0), c.turns)
	i := sort.Search(len(c.panels), func(i int) bool { return c.panels[i].from > t })
	return c.arcOn(&c.panels[max(i-1, 0)], t)
}

func (c *Curve) arcOn(q *panel, t float64) float64 {
	p := &c.pieces[q.piece]
	return q.arc + p.arc(q.from-p.from, t-p.from)
}

// Parameter is the t at arc length s from the foot of the riser: the inverse
// of [Curve.Arc]. On the riser it is 0, beyond the open end the last turn.
func (c *Curve) Parameter(s float64) float64 {
	switch {
	case s <= c.height:
		return 0
	case s >= c.wire:
		return c.turns
	}
	i := sort.Search(len(c.panels), func(i int) bool { return c.panels[i].arc > s })
	q := &c.panels[max(i-1, 0)]
	p := &c.pieces[q.piece]
	if p.uniform {
		return min(q.from+(s-q.arc)/q.slow, q.to)
	}
	t := q.guess(s)
	lo, hi := q.from, q.to
	for range 60 {
		miss := c.arcOn(q, t) - s
		if miss > 0 {
			hi = t
		} else {
			lo = t
		}
		next := t - miss/p.speed(t-p.from)
		if next < lo || next > hi {
			next = (lo + hi) / 2
		}
		if math.Abs(next-t) <= 4e-15*(1+c.turns) {
			return next
		}
		t = next
	}
	return t
}

// guess is the cubic through both ends of the panel with their dt/ds, at s.
func (q *panel) guess(s float64) float64 {
	h := q.length
	u := (s - q.arc) / h
	rise := q.to - q.from
	a, b := h/q.slow, h/q.fast
	t := q.from + u*(a+u*((3*rise-2*a-b)+u*(a+b-2*rise)))
	return min(max(t, q.from), q.to)
}
