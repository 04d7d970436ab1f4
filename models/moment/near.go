package moment

import "math"

// Near pairs of elements: the grid's rule is too coarse for 1/R and for the
// kink of R there. With
//
//	e^{−jkR}/R = [1/R − k²R/2] + smooth rest,
//
// the bracket's integrals do not depend on frequency apart from the factor
// k². They are computed once an antenna, less what the grid makes of them,
// so that grid and correction together are the accurate integral.

// moments are the integrals over one pair of elements of x^i x'^j times the
// static kernels: current by current (times the tangents' product) and, by
// the charges, of slopes by x.
type moments struct {
	current0, current1 [maxOrder][maxOrder]float64 // 1/R and R
	charge0, charge1   [maxOrder][maxOrder]float64
}

// static collects the corrections as full lower triangles, function by
// function, row m of length functions:
//
//	Z_mn += (jη/4π)·(k·one − k³·three − zero/k).
type static struct {
	zero, one, three []float64
	n                int
	both             bool // fill both triangles (to see their difference)

	mom moments
}

// reset clears the matrices for n functions.
func (s *static) reset(n int) {
	s.n = n
	s.zero = cleared(s.zero, n*n)
	s.one = cleared(s.one, n*n)
	s.three = cleared(s.three, n*n)
}

// cleared is a slice of n zeros, in v's room where that suffices.
func cleared[T float64 | complex128 | int](v []T, n int) []T {
	if cap(v) < n {
		return make([]T, n)
	}
	v = v[:n]
	clear(v)
	return v
}

// pair is two elements of a mesh, the second perhaps mirrored in the plane.
type pair struct {
	m      *mesh
	e, f   *element
	image  bool
	reduce bool // reduced kernel
}

// add accounts for the node (x on e, y on f) with weight w in x and y.
func (s *static) add(p *pair, x, y, w float64, reduce bool) {
	pe, te, ae := p.e.at(x)
	pf, tf, af := p.f.at(y)
	s.node(p, &pe, &te, ae, x, &pf, &tf, af, y, w, reduce)
}

// node is add with both points known.
func (s *static) node(p *pair, pe, te *vec, ae, x float64, pf, tf *vec, af, y, w float64, reduce bool) {
	dx, dy := pe[0]-pf[0], pe[1]-pf[1]
	dz, flat, charge := pe[2]-pf[2], 1.0, 1.0
	if p.image {
		dz, flat, charge = pe[2]+pf[2], -1, -1
	}
	dot := flat*(te[0]*tf[0]+te[1]*tf[1]) + te[2]*tf[2]
	d2 := dx*dx + dy*dy + dz*dz
	var inverse, mean float64
	if reduce {
		inverse, mean = reduced(d2, (ae*ae+af*af)/2)
	} else {
		inverse, mean = averaged(d2+(ae-af)*(ae-af), ae*af)
	}
	s.mom.collect(p.m.order, x, y, w*charge*inverse, w*charge*mean, w*dot*inverse, w*dot*mean)
}

// collect adds powers of x and y times the kernels.
func (m *moments) collect(order int, x, y, q0, q1, c0, c1 float64) {
	var py [maxOrder]float64
	py[0] = 1
	for j := 1; j < order; j++ {
		py[j] = py[j-1] * y
	}
	for i := 0; i < order; i++ {
		a, b := &m.current0[i], &m.current1[i]
		for j := 0; j < order; j++ {
			a[j] += c0 * py[j]
			b[j] += c1 * py[j]
		}
		if i+1 < order {
			a, b = &m.charge0[i], &m.charge1[i]
			for j := 0; j+1 < order; j++ {
				a[j] += q0 * py[j]
				b[j] += q1 * py[j]
			}
		}
		c0, c1, q0, q1 = c0*x, c1*x, q0*x, q1*x
	}
}

// begin clears the moments.
func (s *static) begin() { s.mom = moments{} }

// finish takes the grid's part off, turns moments of powers into those of
// functions and puts them in their places.
func (s *static) finish(p *pair) {
	s.gridless(p)
	scale := p.e.length * p.f.length / 4
	order := p.m.order
	var one, three, zero [maxOrder][maxOrder]float64
	contract(order, &s.mom.current0, &p.e.value, &p.f.value, scale, &one)
	contract(order, &s.mom.current1, &p.e.value, &p.f.value, scale/2, &three)
	contract(order-1, &s.mom.charge1, &p.e.slope, &p.f.slope, 0.5, &one)
	contract(order-1, &s.mom.charge0, &p.e.slope, &p.f.slope, 1, &zero)
	for i := range order {
		for j := range order {
			s.put(p, p.e.fn[i], p.f.fn[j], zero[i][j], one[i][j], three[i][j])
		}
	}
}

// put adds one entry of a pair of elements. An unordered pair is computed
// once and stands for both orders: its entry (m, n) belongs to the lower
// triangle at (m, n), and by symmetry at (n, m).
func (s *static) put(p *pair, m, n int, zero, one, three float64) {
	if m < 0 || n < 0 {
		return
	}
	if !s.both {
		switch {
		case p.e == p.f:
			if n > m {
				return
			}
		case m < n:
			m, n = n, m
		case m == n:
			zero, one, three = 2*zero, 2*one, 2*three
		}
	}
	i := m*s.n + n
	s.zero[i] += zero
	s.one[i] += one
	s.three[i] += three
}

// contract adds scale·Σ_ab e_i[a]·mom[a][b]·f_j[b] to out. Functions number
// maxOrder at most; n is the number of powers.
func contract(n int, mom *[maxOrder][maxOrder]float64, e, f *[maxOrder]poly, scale float64, out *[maxOrder][maxOrder]float64) {
	var half [maxOrder][maxOrder]float64 // [a][j]
	for a := range n {
		row := &mom[a]
		for j := range maxOrder {
			c := &f[j]
			sum := 0.0
			for b := 0; b < n; b++ {
				sum += row[b] * c[b]
			}
			half[a][j] = scale * sum
		}
	}
	for i := range maxOrder {
		c := &e[i]
		for j := range maxOrder {
			sum := 0.0
			for a := 0; a < n; a++ {
				sum += c[a] * half[a][j]
			}
			out[i][j] += sum
		}
	}
}

// gridless takes off what the grid will add for the pair.
func (s *static) gridless(p *pair) {
	m := p.m
	for i := p.e.first; i < p.e.end; i++ {
		pe, te := vec{m.x[i], m.y[i], m.z[i]}, vec{m.tx[i], m.ty[i], m.tz[i]}
		we := m.weight[i] * 2 / p.e.length
		for j := p.f.first; j < p.f.end; j++ {
			pf, tf := vec{m.x[j], m.y[j], m.z[j]}, vec{m.tx[j], m.ty[j], m.tz[j]}
			wf := m.weight[j] * 2 / p.f.length
			s.node(p, &pe, &te, math.Sqrt(2*m.half[i]), m.node[i], &pf, &tf, math.Sqrt(2*m.half[j]), m.node[j], -we*wf, true)
		}
	}
}

// fill computes every near pair of the mesh.
func (s *static) fill(m *mesh, over bool) {
	s.reset(m.functions)
	for i := range m.elements {
		e := &m.elements[i]
		last := i
		if s.both {
			last = len(m.elements) - 1
		}
		for j := 0; j <= last; j++ {
			f := &m.elements[j]
			p := pair{m: m, e: e, f: f}
			s.direct(&p, i, j)
			if over {
				p.image = true
				s.mirrored(&p, i, j)
			}
		}
	}
}

// direct corrects a pair of elements if it is near.
func (s *static) direct(p *pair, i, j int) {
	switch {
	case i == j:
		s.begin()
		s.self(p)
	case p.e.finish.kind == another && p.e.finish.element == j:
		s.begin()
		s.corner(p, 1, p.e.finish.side)
	case p.e.start.kind == another && p.e.start.element == j:
		s.begin()
		s.corner(p, 0, p.e.start.side)
	case p.close():
		s.begin()
		s.aside(p, !p.along(i, j))
	default:
		return
	}
	s.finish(p)
}

// along tells whether two elements lie on one wire with one between them, or
// on wires joined so: there the conductor is one and the kernel averaged.
func (p *pair) along(i, j int) bool {
	for _, a := range [2]neighbour{p.e.start, p.e.finish} {
		if a.kind != another || a.element == i {
			continue
		}
		mid := &p.m.elements[a.element]
		if mid.start.kind == another && mid.start.element == j || mid.finish.kind == another && mid.finish.element == j {
			return true
		}
	}
	return false
}

// mirrored corrects a pair of an element and an image if it is near.
func (s *static) mirrored(p *pair, i, j int) {
	s.begin()
	switch {
	case i == j && p.e.start.kind == plane:
		s.corner(p, 0, 0)
	case i == j && p.e.finish.kind == plane:
		s.corner(p, 1, 1)
	case p.close():
		s.aside(p, !p.through(i, j))
	default:
		return
	}
	s.finish(p)
}

// through tells whether an element and the image of another follow each
// other through the plane: one conductor with its image.
func (p *pair) through(i, j int) bool {
	foot := func(e *element) bool { return e.start.kind == plane || e.finish.kind == plane }
	next := func(e *element, to int) bool {
		return e.start.kind == another && e.start.element == to || e.finish.kind == another && e.finish.element == to
	}
	return foot(p.e) && next(p.e, j) || foot(p.f) && next(p.f, i)
}

// close tells whether a pair is closer than the grid's rule likes.
func (p *pair) close() bool {
	limit := p.m.set.near * max(p.e.length, p.f.length)
	reach := limit + (p.e.length+p.f.length)/2
	a, b := p.e.middle, p.f.middle
	dx, dy, dz := a[0]-b[0], a[1]-b[1], a[2]-b[2]
	if p.image {
		dz = a[2] + b[2]
	}
	if dx*dx+dy*dy+dz*dz > reach*reach {
		return false
	}
	least := math.Inf(1)
	for _, x := range [3]float64{-1, 0, 1} {
		pe, _, _ := p.e.at(x)
		for _, y := range [3]float64{-1, 0, 1} {
			pf, _, _ := p.f.at(y)
			dx, dy, dz := pe[0]-pf[0], pe[1]-pf[1], pe[2]-pf[2]
			if p.image {
				dz = pe[2] + pf[2]
			}
			least = min(least, dx*dx+dy*dy+dz*dz)
		}
	}
	return least < limit*limit
}
