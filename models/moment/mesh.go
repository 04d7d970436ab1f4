package moment

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// vec is a point or a direction in the hot loops, x y z.
type vec = [3]float64

// element is one knot span of one wire.
type element struct {
	wire   int
	length float64 // m along the wire
	// shape holds x, y, z and the radius as polynomials in x.
	shape [4][samples]float64
	// even is set where the radius is the same all along.
	even   bool
	radius float64 // in the middle, m
	// coat is the thickness of the wire's coat, m, and bound the part of its
	// charge that polarises it, 1 − 1/ε_r.
	coat, bound float64
	tips        [3]vec // start, middle, finish
	// value holds the functions that live here, and slope their derivatives
	// by x; fn their numbers, −1 for one that does not exist (an open end);
	// functions carry their sign already.
	value, slope [maxOrder]poly
	fn           [maxOrder]int
	first, end   int     // its grid points
	from, to     float64 // the curve's parameter at its ends
	// start and finish name what meets the element's ends.
	start, finish neighbour
}

// neighbour is the element that meets an element's end, if any.
type neighbour struct {
	kind    meeting
	element int
	side    int // its end: 0 start, 1 finish
}

type meeting int

const (
	nothing meeting = iota
	another         // the element named
	plane           // the plane, and so the element's own image
)

// at gives the point at x with its unit tangent and radius.
func (e *element) at(x float64) (p, t vec, radius float64) {
	k := 2 / e.length
	for i := range p {
		v, d := horner(&e.shape[i], x)
		p[i], t[i] = v, d*k
	}
	if e.even {
		return p, t, e.radius
	}
	radius, _ = horner(&e.shape[3], x)
	return p, t, radius
}

// mesh is an antenna cut into elements, with its functions and grid points.
// All its slices are used again by the next antenna.
type mesh struct {
	set       settings
	order     int // functions an element
	functions int
	elements  []element
	wires     []span
	support   []support // of each function
	width     float64   // longest element, m

	// Grid points, one entry each: position, unit tangent, half the squared
	// radius (a pair's two halves add up to the kernel's), weight in metres.
	x, y, z    []float64
	tx, ty, tz []float64
	half       []float64
	weight     []float64
	node       []float64 // local coordinate x
	owner      []int     // element

	spots []spot // set.apart a element: nodes of the rule for pairs that stand apart

	raw    []rawFunction
	panels []panel
	ends   []wireEnd
}

// spot is a point of a wire.
type spot struct {
	at, tangent vec
	radius      float64
}

// span is one wire's share of the mesh.
type span struct {
	first, end int // elements
	length     float64
	raw        int // its first raw function
}

// support lists where a function lives.
type support struct {
	last  int // its last element
	count int
	on    [2 * maxOrder]struct{ element, local int }
}

// rawFunction is a wire's own function before joints make one of two.
type rawFunction struct {
	root   int // itself, or the one it is one with
	sign   float64
	last   int // last element of a root
	number int // −1: dropped
}

// panel is a stretch of curve with the arc length along it as a polynomial.
type panel struct {
	from, to float64
	arc      float64
	length   float64
	speed    [samples]float64 // ds/dx
	rise     [samples + 1]float64
}

type wireEnd struct {
	wire, side int
	at         r3.Vec
	kind       meeting
	other      int // index of the end it meets
}

// build cuts the antenna for frequencies up to the one of wave number k.
func (m *mesh) build(a *Antenna, set settings, k float64) error {
	m.set, m.order = set, set.degree+1
	m.elements = m.elements[:0]
	m.wires = m.wires[:0]
	m.width = 0
	if err := m.meet(a); err != nil {
		return err
	}
	raw := 0
	for i := range a.Wires {
		first := len(m.elements)
		n := m.cut(&a.Wires[i], i, k)
		m.wires[i].first, m.wires[i].end, m.wires[i].raw = first, first+n, raw
		raw += n + set.degree
	}
	m.connect(raw)
	m.number()
	m.points()
	return nil
}

// meet finds which ends of wires meet each other or the plane.
func (m *mesh) meet(a *Antenna) error {
	m.ends = m.ends[:0]
	for i := range a.Wires {
		w := &a.Wires[i]
		p, _ := w.Curve.At(w.From)
		q, _ := w.Curve.At(w.To)
		m.ends = append(m.ends, wireEnd{wire: i, at: p}, wireEnd{wire: i, side: 1, at: q})
		m.wires = append(m.wires, span{})
	}
	for i := range m.ends {
		e := &m.ends[i]
		near := 1e-3 * a.Wires[e.wire].radius(e.side)
		if a.Plane && math.Abs(e.at.Z) < near {
			e.kind = plane
			continue
		}
		for j := range i {
			f := &m.ends[j]
			if r3.Norm(r3.Sub(e.at, f.at)) >= near {
				continue
			}
			if e.kind != nothing || f.kind != nothing {
				return fmt.Errorf("wire %d: more than two wires meet at %v; two are due", e.wire, e.at)
			}
			e.kind, e.other = another, j
			f.kind, f.other = another, i
		}
	}
	return nil
}

func (w *Wire) radius(side int) float64 {
	t := w.From
	if side == 1 {
		t = w.To
	}
	return w.radiusAt(t)
}

func (w *Wire) radiusAt(t float64) float64 {
	if w.RadiusAt != nil {
		return w.RadiusAt(t)
	}
	return w.Radius
}

// cut lays the elements of one wire and says how many.
func (m *mesh) cut(w *Wire, index int, k float64) int {
	n := w.Elements
	if n <= 0 {
		n = m.count(w, k)
	}
	length := m.measure(w, n)
	m.wires[index].length = length
	h := length / float64(n)
	m.width = max(m.width, h)
	for e := range n {
		m.elements = append(m.elements, element{wire: index, length: h})
		el := &m.elements[len(m.elements)-1]
		if c := w.Coat; c.Thickness > 0 {
			el.coat, el.bound = c.Thickness, 1-1/c.Permittivity
		}
		m.shape(el, w, float64(e)*h, h)
		if p := m.set.degree; e > p && e < n-p {
			el.value, el.slope = m.elements[len(m.elements)-2].value, m.elements[len(m.elements)-2].slope
			continue
		}
		el.value = splines(n, e, m.set.degree)
		for i := range m.order {
			el.slope[i] = el.value[i].slope()
		}
	}
	return n
}

// count is the number of elements a wire needs.
func (m *mesh) count(w *Wire, k float64) int {
	const steps = 96
	length, turn := 0.0, 0.0
	last, d := w.Curve.At(w.From)
	dir := r3.Unit(d)
	for i := 1; i <= steps; i++ {
		p, d := w.Curve.At(w.From + (w.To-w.From)*float64(i)/steps)
		next := r3.Unit(d)
		length += r3.Norm(r3.Sub(p, last))
		turn += math.Acos(min(1, max(-1, r3.Dot(dir, next))))
		last, dir = p, next
	}
	return m.set.elements(turn/(2*math.Pi), length*k/(2*math.Pi))
}

// measure lays n panels along a wire and gives its length.
func (m *mesh) measure(w *Wire, n int) float64 {
	m.panels = m.panels[:0]
	arc := 0.0
	for i := range n {
		p := panel{arc: arc}
		p.from = w.From + (w.To-w.From)*float64(i)/float64(n)
		p.to = w.From + (w.To-w.From)*float64(i+1)/float64(n)
		half := (p.to - p.from) / 2
		var speed [samples]float64
		for j, x := range sampling.x {
			_, d := w.Curve.At(p.from + half*(x+1))
			speed[j] = r3.Norm(d) * half
		}
		p.speed = fitted(&speed)
		low := 0.0 // of the integral's polynomial at x = −1
		sign := -1.0
		for k, c := range p.speed {
			p.rise[k+1] = c / float64(k+1)
			low += sign * p.rise[k+1]
			sign = -sign
		}
		p.rise[0] = -low
		for _, c := range p.rise {
			p.length += c
		}
		arc += p.length
		m.panels = append(m.panels, p)
	}
	return arc
}

// parameter is the curve's parameter at arc length s from the wire's start;
// hint is a panel to start looking from.
func (m *mesh) parameter(s float64, hint int) (t float64, at int) {
	for hint+1 < len(m.panels) && s > m.panels[hint+1].arc {
		hint++
	}
	p := &m.panels[hint]
	target := s - p.arc
	x := 2*target/p.length - 1
	for range 20 {
		rise, speed := p.rise[samples], 0.0
		for k := samples - 1; k >= 0; k-- {
			rise = rise*x + p.rise[k]
			speed = speed*x + p.speed[k]
		}
		step := (rise - target) / speed
		x -= step
		if math.Abs(step) < 1e-13 {
			break
		}
	}
	return p.from + (p.to-p.from)*(x+1)/2, hint
}

// sameRadius is the relative difference below which a radius counts as even:
// it moves an impedance by a tenth as much.
const sameRadius = 1e-5

// shape lays the polynomials of an element that starts at arc length s.
func (m *mesh) shape(e *element, w *Wire, s, h float64) {
	var v [4][samples]float64
	hint := 0
	for j, x := range sampling.x {
		var t float64
		t, hint = m.parameter(s+h*(x+1)/2, hint)
		p, _ := w.Curve.At(t)
		v[0][j], v[1][j], v[2][j], v[3][j] = p.X, p.Y, p.Z, w.radiusAt(t)
	}
	e.even = true
	for _, a := range v[3] {
		e.even = e.even && math.Abs(a-v[3][0]) <= sameRadius*v[3][0]
	}
	for i := range v {
		e.shape[i] = fitted(&v[i])
	}
	e.from, hint = m.parameter(s, 0)
	e.to, _ = m.parameter(s+h, hint)
	e.radius = e.shape[3][0]
	if e.even {
		e.radius = v[3][0]
	}
	for i, x := range [3]float64{-1, 0, 1} {
		e.tips[i], _, _ = e.at(x)
	}
}

// connect makes one function of two where wires are joined.
func (m *mesh) connect(total int) {
	m.raw = m.raw[:0]
	for i := range total {
		m.raw = append(m.raw, rawFunction{root: i, sign: 1, number: -1})
	}
	for i := range m.ends {
		e := &m.ends[i]
		el, raw := m.tip(e)
		side := &m.elements[el].start
		if e.side == 1 {
			side = &m.elements[el].finish
		}
		switch e.kind {
		case plane:
			side.kind = plane
		case another:
			f := &m.ends[e.other]
			oel, oraw := m.tip(f)
			*side = neighbour{another, oel, f.side}
			if e.other < i {
				m.raw[raw].root = oraw
				if e.side == f.side {
					m.raw[raw].sign = -1
				}
			}
		case nothing:
			m.raw[raw].root = -1
		}
	}
	for i := range m.wires {
		w := &m.wires[i]
		for e := w.first; e+1 < w.end; e++ {
			m.elements[e].finish = neighbour{another, e + 1, 0}
			m.elements[e+1].start = neighbour{another, e, 1}
		}
	}
}

// tip is the element and the raw function at an end of a wire.
func (m *mesh) tip(e *wireEnd) (el, raw int) {
	w := &m.wires[e.wire]
	if e.side == 0 {
		return w.first, w.raw
	}
	return w.end - 1, w.raw + w.end - w.first + m.set.degree - 1
}

// number gives the functions their numbers, in the order of their last
// elements, so that a function's row is complete when its number comes.
func (m *mesh) number() {
	local := func(e, i int) int {
		w := &m.wires[m.elements[e].wire]
		return w.raw + e - w.first + i
	}
	for e := range m.elements {
		for i := range m.order {
			if root := m.raw[local(e, i)].root; root >= 0 {
				m.raw[root].last = e
			}
		}
	}
	m.functions = 0
	m.support = m.support[:0]
	for e := range m.elements {
		for i := range m.order {
			root := m.raw[local(e, i)].root
			if root >= 0 && m.raw[root].last == e && m.raw[root].number < 0 {
				m.raw[root].number = m.functions
				m.functions++
				m.support = append(m.support, support{last: e})
			}
		}
	}
	for e := range m.elements {
		el := &m.elements[e]
		for i := range m.order {
			r := m.raw[local(e, i)]
			el.fn[i] = -1
			if r.root < 0 {
				continue
			}
			n := m.raw[r.root].number
			el.fn[i] = n
			if r.sign < 0 {
				el.value[i].negate()
				el.slope[i].negate()
			}
			s := &m.support[n]
			s.on[s.count] = struct{ element, local int }{e, i}
			s.count++
		}
	}
}

func (p *poly) negate() {
	for k := range p {
		p[k] = -p[k]
	}
}

// points lays the grid.
func (m *mesh) points() {
	m.x, m.y, m.z = m.x[:0], m.y[:0], m.z[:0]
	m.tx, m.ty, m.tz = m.tx[:0], m.ty[:0], m.tz[:0]
	m.half, m.weight, m.node, m.owner = m.half[:0], m.weight[:0], m.node[:0], m.owner[:0]
	for i := range m.elements {
		e := &m.elements[i]
		g := legendre[m.set.points]
		if w := m.wires[e.wire]; i == w.first || i == w.end-1 {
			g = legendre[m.set.edge]
		}
		e.first = len(m.x)
		for j, x := range g.x {
			p, t, a := e.at(x)
			m.x, m.y, m.z = append(m.x, p[0]), append(m.y, p[1]), append(m.z, p[2])
			m.tx, m.ty, m.tz = append(m.tx, t[0]), append(m.ty, t[1]), append(m.tz, t[2])
			m.half = append(m.half, a*a/2)
			m.weight = append(m.weight, g.w[j]*e.length/2)
			m.node = append(m.node, x)
			m.owner = append(m.owner, i)
		}
		e.end = len(m.x)
	}
	m.spots = m.spots[:0]
	for i := range m.elements {
		for _, x := range legendre[m.set.apart].x {
			p, t, a := m.elements[i].at(x)
			m.spots = append(m.spots, spot{p, t, a})
		}
	}
}
