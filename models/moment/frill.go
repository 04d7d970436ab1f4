package moment

import (
	"errors"
	"math"

	"turnwise/models"
)

// A coaxial opening in the plane, radii a to b about an upright wire's foot,
// carries the TEM field V/(ρ ln(b/a)). Its equivalent magnetic current on the
// plane, image included, is M = −2V/(ρ' ln(b/a)) φ̂'. At height z and distance
// ρ from the axis, R from the point of the opening at ρ', φ':
//
//	(E_ρ, E_z) = V/(2π ln(b/a)) ∬ (1 + jkR) e^{−jkR}/R³ (z cos φ', ρ' − ρ cos φ') dρ' dφ'
//
// which on the axis is E_z = V/ln(b/a)·(e^{−jkR_a}/R_a − e^{−jkR_b}/R_b),
// R_x = √(z² + x²), and far away the field of a short dipole.

// Rules on the opening and where they end.
const (
	openingAngles = 10 // on half the circle
	openingRadii  = 4
	openingFar    = 20 // outer radii from which the dipole's field serves
)

// frill holds an opening's field on nodes along the wires, as terms
//
//	e^{−jkR}·(zero + one·(1 + jkR) + two·k²).
type frill struct {
	terms []frillTerm
	nodes []frillNode
	value []float64 // of the element's functions at each node, weight included
}

type frillTerm struct{ r, zero, one, two float64 }

type frillNode struct {
	element    int
	first, end int // its terms
}

// prepare lays the nodes for a port at the start of its wire.
func (f *frill) prepare(m *mesh, a *Antenna, port *Port) error {
	f.terms, f.nodes, f.value = f.terms[:0], f.nodes[:0], f.value[:0]
	footElement := m.wires[port.Wire].first
	e := &m.elements[footElement]
	at, tangent, radius := e.at(-1)
	if e.start.kind != plane || math.Abs(tangent[2]-1) > 1e-6 {
		return errors.New("a coaxial opening is due at the foot of a wire that starts on the plane and rises upright")
	}
	ratio := port.Ratio
	if ratio == 0 {
		ratio = models.Opening
	}
	o := opening{at: at, a: radius, b: ratio * radius, log: math.Log(ratio)}
	for i := range m.elements {
		f.element(m, i, &o)
	}
	return nil
}

// opening is the coaxial opening: centre, radii and ln(b/a).
type opening struct {
	at   vec
	a, b float64
	log  float64
}

// element lays the nodes of one element: spread by the distance from the
// opening where that is near, else the grid's own.
func (f *frill) element(m *mesh, i int, o *opening) {
	e := &m.elements[i]
	p := pair{m: m, e: e, f: e}
	y0, d2 := p.foot(&o.at)
	if d2 > openingFar*openingFar*o.b*o.b {
		for q := e.first; q < e.end; q++ {
			f.node(m, i, m.node[q], m.weight[q], o)
		}
		return
	}
	g := &legendre[m.set.graded+4]
	b := 2 * max(math.Sqrt(d2), o.a) / e.length
	lo, hi := math.Asinh((-1-y0)/b), math.Asinh((1-y0)/b)
	for j, t := range g.x {
		v := lo + (hi-lo)*(t+1)/2
		w := g.w[j] * (hi - lo) / 2 * b * math.Cosh(v) * e.length / 2
		f.node(m, i, y0+b*math.Sinh(v), w, o)
	}
}

// node adds a node at x on element i with weight w, m.
func (f *frill) node(m *mesh, i int, x, w float64, o *opening) {
	e := &m.elements[i]
	p, t, _ := e.at(x)
	dx, dy, z := p[0]-o.at[0], p[1]-o.at[1], p[2]-o.at[2]
	rho := math.Hypot(dx, dy)
	along, up := 0.0, t[2] // the tangent's parts along ρ and z
	first := len(f.terms)
	switch {
	case rho < 1e-6*o.a:
		ra, rb := math.Hypot(z, o.a), math.Hypot(z, o.b)
		f.terms = append(f.terms, frillTerm{r: ra, zero: up / (ra * o.log)}, frillTerm{r: rb, zero: -up / (rb * o.log)})
	default:
		along = (t[0]*dx + t[1]*dy) / rho
		if math.Hypot(rho, z) > openingFar*o.b {
			f.dipole(rho, z, along, up, o)
		} else {
			f.ring(rho, z, along, up, o)
		}
	}
	f.nodes = append(f.nodes, frillNode{element: i, first: first, end: len(f.terms)})
	for l := range m.order {
		f.value = append(f.value, w*e.value[l].at(x, m.order))
	}
}

// ring integrates over the opening.
func (f *frill) ring(rho, z, along, up float64, o *opening) {
	g := &legendre[openingRadii]
	for j, t := range g.x {
		r := o.a + (o.b-o.a)*(t+1)/2
		w := g.w[j] * (o.b - o.a) / 2 * (2 * math.Pi / openingAngles) / (2 * math.Pi * o.log)
		for n := range openingAngles {
			cos := math.Cos(math.Pi * (float64(n) + 0.5) / openingAngles)
			d := math.Sqrt(rho*rho + r*r - 2*rho*r*cos + z*z)
			s := along*z*cos + up*(r-rho*cos)
			f.terms = append(f.terms, frillTerm{r: d, one: w * s / (d * d * d)})
		}
	}
}

// dipole is the opening's first moment: with g = (1 + jkR)e^{−jkR}/R³ and its
// derivative g',
//
//	E_ρ = −C zρ/R·g',  E_z = C·(2g + ρ²/R·g'),  C = (b² − a²)/(4 ln(b/a)).
func (f *frill) dipole(rho, z, along, up float64, o *opening) {
	c := (o.b*o.b - o.a*o.a) / (4 * o.log)
	r2 := rho*rho + z*z
	r := math.Sqrt(r2)
	q := (rho*rho*up - z*rho*along) / r
	f.terms = append(f.terms, frillTerm{r: r, one: c * (2*up/(r2*r) - 3*q/(r2*r2)), two: c * q / r2})
}

// test writes the tested field for 1 V at wave number k to v.
func (f *frill) test(m *mesh, k float64, v []complex128) {
	clear(v)
	for i := range f.nodes {
		n := &f.nodes[i]
		var re, im float64
		for _, t := range f.terms[n.first:n.end] {
			c, s := unit(k * t.r)
			a, b := t.zero+t.one+t.two*k*k, t.one*k*t.r
			re += a*c + b*s
			im += b*c - a*s
		}
		e := &m.elements[n.element]
		for l, fn := range e.fn[:m.order] {
			if fn >= 0 {
				w := f.value[i*m.order+l]
				v[fn] += complex(w*re, w*im)
			}
		}
	}
}
