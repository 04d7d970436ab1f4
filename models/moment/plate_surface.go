package moment

import "math"

// surface holds the plate's own matrices, one a mode from 0 up:
//
//	C_ij = (jkη/2) ∬ [σσ'(sin sin' C_m + cos cos' G_m) TT' + ρρ' C_m FF'
//	       + σρ' sin S_m TF' + ρσ' sin' S_m FT'] du du'
//	     − (jη/2k) ∬ G_m (dT/du − mF)(dT'/du' − mF') du du'
//
// with C_m, S_m = (G_{m−1} ± G_{m+1})/2. They are symmetric; for mode −m the
// entries of a T and an F change their sign.
type surface struct {
	*meridian
	k     float64
	modes int
	rings *rings
	c     [][]complex128 // count × count each
}

// fill computes the matrices of the modes 0 to modes at wave number k.
func (m *meridian) fill(set *settings, k float64, modes int) *surface {
	s := &surface{meridian: m, k: k, modes: modes, rings: newRings(k, modes+1)}
	for range modes + 1 {
		s.c = append(s.c, make([]complex128, m.count*m.count))
	}
	for i := range m.patches {
		s.self(set, &m.patches[i])
		for j := range i {
			s.pair(set, &m.patches[j], &m.patches[i])
		}
	}
	return s
}

// self integrates a patch with itself by the difference of parameters.
func (s *surface) self(set *settings, p *patch) {
	g := &legendre[set.smooth+2]
	graded(1, 1, set.graded+2, func(u, w float64) {
		for i, t := range g.x {
			low := (1 - u) * (t + 1) / 2
			s.node(p, p, 2*(low+u)-1, 2*low-1, w*g.w[i]*(1-u)/2)
		}
	})
}

// pair integrates two patches.
func (s *surface) pair(set *settings, p, q *patch) {
	if sp, sq, meet := s.meet(p, q); meet {
		s.corner(set, p, q, sp, sq)
		return
	}
	n := set.apart
	if gap, size := span2(p, q); gap < size {
		n = set.smooth + 4
	}
	g := &legendre[n]
	for i, x := range g.x {
		for j, y := range g.x {
			s.node(p, q, x, y, g.w[i]*g.w[j]/4)
		}
	}
}

// meet tells by which ends (−1 start, 1 finish) two patches touch, p the
// earlier in the mesh.
func (s *surface) meet(p, q *patch) (sp, sq float64, meet bool) {
	if p.part == q.part {
		return 1, -1, p.at+1 == q.at
	}
	if q.at > 0 {
		return 0, 0, false
	}
	if p.part == disc {
		return 1, -1, p.at+1 == s.parts[disc]
	}
	return -1, -1, p.at == 0
}

// span2 is the least squared distance of two patches, as ends and middles
// have it, and the larger's squared size.
func span2(p, q *patch) (gap, size float64) {
	gap = math.Inf(1)
	for i := range p.tips {
		for j := range q.tips {
			gap = min(gap, apart2(&p.tips[i], &q.tips[j]))
		}
	}
	return gap, max(apart2(&p.tips[0], &p.tips[2]), apart2(&q.tips[0], &q.tips[2]))
}

func apart2(a, b *place) float64 {
	return size2(a.rho-b.rho) + (a.z-b.z)*(a.z-b.z)
}

// corner integrates two patches that touch by the sum u of the parameters'
// distances from there.
func (s *surface) corner(set *settings, p, q *patch, sp, sq float64) {
	g := &legendre[set.smooth+2]
	at := func(u, w float64) {
		lo, hi := max(0, u-1), min(u, 1)
		for i, t := range g.x {
			d := lo + (hi-lo)*(t+1)/2
			s.node(p, q, sp*(1-2*d), sq*(1-2*(u-d)), w*g.w[i]*(hi-lo)/2)
		}
	}
	graded(1, 1, set.graded+2, at)
	logarithmic(1, 2, set.smooth+2, at)
}

// node adds x on p with y on q, weight w in du du', both ways round.
func (s *surface) node(p, q *patch, x, y, w float64) {
	a, b := s.at(p, x), s.at(q, y)
	d, z := a.rho-b.rho, a.z-b.z
	s.rings.between(d*d+complex(z*z, 0), a.rho*b.rho)
	u, v := p.values(x, s.degree), q.values(y, s.degree)
	for m := range s.c {
		f := s.factors(m, &a, &b, w)
		f.add(s.c[m], s.count, p, q, &u, &v)
	}
}

// at is the point of a patch at its local coordinate.
func (s *surface) at(p *patch, x float64) place {
	return s.place(p.part, float64(p.at)+(x+1)/2)
}

// factors are what multiplies the functions at a pair of points: by the
// values of T T', T F', F T', F F' and by the charges.
type factors struct {
	tt, tf, ft, ff, charge complex128
	m                      float64
}

func (s *surface) factors(m int, a, b *place, w float64) factors {
	g := s.rings.g
	below := g[1] // cos is even: G_{−1} = G_1
	if m > 0 {
		below = g[m-1]
	}
	c, d := (below+g[m+1])/2, (below-g[m+1])/2
	up := complex(0, s.k*eta/2*w)
	return factors{
		tt:     up * a.sigma * b.sigma * (complex(a.sin*b.sin, 0)*c + complex(a.cos*b.cos, 0)*g[m]),
		tf:     up * a.sigma * b.rho * complex(a.sin, 0) * d,
		ft:     up * a.rho * b.sigma * complex(b.sin, 0) * d,
		ff:     up * a.rho * b.rho * c,
		charge: complex(0, -eta/(2*s.k)*w) * g[m],
		m:      float64(m),
	}
}

// add puts the products of all functions of two patches in their places and
// those across the diagonal.
func (f *factors) add(c []complex128, n int, p, q *patch, u, v *splineValues) {
	put := func(i, j int, by complex128, current float64, charge float64) {
		e := by*complex(current, 0) + f.charge*complex(charge, 0)
		c[i*n+j] += e
		c[j*n+i] += e
	}
	for _, i := range p.t {
		for _, j := range q.t {
			put(i.fn, j.fn, f.tt, u.value[i.local]*v.value[j.local], u.slope[i.local]*v.slope[j.local])
		}
		for _, j := range q.f {
			put(i.fn, j.fn, f.tf, u.value[i.local]*v.flow[j.local], -f.m*u.slope[i.local]*v.flow[j.local])
		}
	}
	for _, i := range p.f {
		for _, j := range q.t {
			put(i.fn, j.fn, f.ft, u.flow[i.local]*v.value[j.local], -f.m*u.flow[i.local]*v.slope[j.local])
		}
		for _, j := range q.f {
			put(i.fn, j.fn, f.ff, u.flow[i.local]*v.flow[j.local], f.m*f.m*u.flow[i.local]*v.flow[j.local])
		}
	}
}
