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

	mom  moments
	kept []congruence // by how far the second element lies before the first
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
	m     *mesh
	e, f  *element
	image bool
	bare  bool // coats left out, as the grid does
}

// add accounts for the node (x on e, y on f) with weight w in x and y.
func (s *static) add(p *pair, x, y, w float64, reduce bool) {
	pe, te, ae := p.e.at(x)
	pf, tf, af := p.f.at(y)
	s.node(p, &pe, &te, ae, x, &pf, &tf, af, y, w, reduce)
}

// node is add with both points known.
func (s *static) node(p *pair, pe, te *vec, ae, x float64, pf, tf *vec, af, y, w float64, reduce bool) {
	k := p.static(pe, te, ae, pf, tf, af, reduce)
	charge := w * p.sign()
	s.mom.collect(p.m.order, x, y, charge*k.charged, charge*k.mean, w*k.dot*k.inverse, w*k.dot*k.mean)
}

// sign is that of the second element's charge.
func (p *pair) sign() float64 {
	if p.image {
		return -1
	}
	return 1
}

// terms are the kernel's static terms between a point of e and one of f: 1/R
// of the currents and of the charges, R, and the product of the tangents.
type terms struct{ inverse, charged, mean, dot float64 }

func (p *pair) static(pe, te *vec, ae float64, pf, tf *vec, af float64, reduce bool) (k terms) {
	dx, dy, dz := pe[0]-pf[0], pe[1]-pf[1], pe[2]-pf[2]
	k.dot = te[0]*tf[0] + te[1]*tf[1]
	if p.image {
		dz, k.dot = pe[2]+pf[2], -k.dot
	}
	k.dot += te[2] * tf[2]
	d2 := dx*dx + dy*dy + dz*dz
	k.inverse, k.mean = between(d2, ae, af, reduce)
	k.charged = k.inverse
	if p.e.coat > 0 && p.f.coat > 0 && !p.bare {
		outside, _ := between(d2, ae+p.e.coat, af+p.f.coat, reduce)
		k.charged += math.Sqrt(p.e.bound*p.f.bound) * (outside - k.inverse)
	}
	return k
}

// between gives 1/R and R for the squared distance of two axes.
func between(d2, a, b float64, reduce bool) (inverse, mean float64) {
	if reduce {
		return reduced(d2, (a*a+b*b)/2)
	}
	return averaged(d2+(a-b)*(a-b), a*b)
}

// symmetric adds to the moments those with x and y exchanged.
func (m *moments) symmetric() {
	for _, a := range [...]*[maxOrder][maxOrder]float64{&m.current0, &m.current1, &m.charge0, &m.charge1} {
		for i := range a {
			for j := range i {
				a[i][j] += a[j][i]
				a[j][i] = a[i][j]
			}
			a[i][i] *= 2
		}
	}
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

// place turns moments of powers into those of functions and puts them in
// their places.
func (s *static) place(p *pair) {
	scale := p.e.length * p.f.length / 4
	order := p.m.order
	var one, three, zero [maxOrder][maxOrder]float64
	contract(order, order, &s.mom.current0, &p.e.value, &p.f.value, scale, &one)
	contract(order, order, &s.mom.current1, &p.e.value, &p.f.value, scale/2, &three)
	contract(order, order-1, &s.mom.charge1, &p.e.slope, &p.f.slope, 0.5, &one)
	contract(order, order-1, &s.mom.charge0, &p.e.slope, &p.f.slope, 1, &zero)
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

// contract adds scale·Σ_ab e_i[a]·mom[a][b]·f_j[b] to out, for order
// functions and n powers.
func contract(order, n int, mom *[maxOrder][maxOrder]float64, e, f *[maxOrder]poly, scale float64, out *[maxOrder][maxOrder]float64) {
	for i := range order {
		var half [maxOrder]float64
		for a := range n {
			add(&half, &mom[a], scale*e[i][a])
		}
		for j := range order {
			c, sum := &f[j], 0.0
			for b := range n {
				sum += half[b] * c[b]
			}
			out[i][j] += sum
		}
	}
}

// gridless takes off what the grid will add for the pair.
func (s *static) gridless(p *pair) {
	m := p.m
	p.bare = true
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
	s.forget(len(m.elements))
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
	meet := i == j || p.e.finish.meets(j) || p.e.start.meets(j)
	gap2, near := p.near()
	if !meet && !near {
		return
	}
	if s.recall(p, i-j) {
		s.place(p)
		return
	}
	s.mom = moments{}
	switch {
	case i == j:
		s.self(p)
	case p.e.finish.meets(j):
		s.corner(p, 1, p.e.finish.side)
	case p.e.start.meets(j):
		s.corner(p, 0, p.e.start.side)
	default:
		s.separate(p, i, j, gap2, !p.along(i, j))
	}
	s.gridless(p)
	s.keep(p, i-j)
	s.place(p)
}

func (n neighbour) meets(j int) bool { return n.kind == another && n.element == j }

// separate integrates a near pair that does not meet, by its least distance.
func (s *static) separate(p *pair, i, j int, gap2 float64, reduce bool) {
	if l := apartFrom * max(p.e.length, p.f.length); gap2 > l*l {
		s.apart(p, i, j, reduce)
		return
	}
	s.aside(p, reduce)
}

// apartFrom is the distance in element lengths from which plain rules serve:
// with n nodes a side they are good to (d + √(1 + d²))^−2n, d twice that.
const apartFrom = 0.7

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
	gap2, near := p.near()
	if !near {
		return
	}
	s.mom = moments{}
	switch {
	case i == j && p.e.start.kind == plane:
		s.corner(p, 0, 0)
	case i == j && p.e.finish.kind == plane:
		s.corner(p, 1, 1)
	default:
		s.separate(p, i, j, gap2, !p.through(i, j))
	}
	s.gridless(p)
	s.place(p)
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

// near gives the squared distance of a pair, as the ends and middles have
// it, and whether that is closer than the grid's rule likes.
func (p *pair) near() (gap2 float64, near bool) {
	limit := p.m.set.near * max(p.e.length, p.f.length)
	reach := limit + (p.e.length+p.f.length)/2
	if p.apart2(&p.e.tips[1], &p.f.tips[1]) > reach*reach {
		return 0, false
	}
	gap2 = math.Inf(1)
	for a := range p.e.tips {
		for b := range p.f.tips {
			gap2 = min(gap2, p.apart2(&p.e.tips[a], &p.f.tips[b]))
		}
	}
	return gap2, gap2 < limit*limit
}

// apart2 is the squared distance of a point of e and one of f.
func (p *pair) apart2(a, b *vec) float64 {
	dx, dy, dz := a[0]-b[0], a[1]-b[1], a[2]-b[2]
	if p.image {
		dz = a[2] + b[2]
	}
	return dx*dx + dy*dy + dz*dz
}
