package moment

import "math"

// graded is a rule on 0 to span for integrands that vary on the scale b near
// 0, with a logarithm at 0: u = b sinh v spreads the nodes by the distance,
// and v = V·w³ softens the logarithm.
func graded(span, b float64, n int, do func(u, w float64)) {
	g := &legendre[n]
	top := math.Asinh(span / b)
	for i, t := range g.x {
		s := (t + 1) / 2
		v := top * s * s * s
		sinh, cosh := math.Sinh(v), math.Cosh(v)
		do(b*sinh, b*cosh*top*3*s*s*g.w[i]/2)
	}
}

// self integrates an element with itself, by the distance u along it and the
// position within: only u = 0 is singular.
func (s *static) self(p *pair) {
	h, set := p.e.length, &p.m.set
	g := &legendre[set.smooth]
	graded(h, p.e.radius, set.graded, func(u, w float64) {
		// s' from 0 to h − u, s = s' + u, and the same mirrored.
		room := h - u
		for i, t := range g.x {
			low := room * (t + 1) / 2
			weight := w * g.w[i] * room / 2 * 4 / (h * h)
			x, y := 2*(low+u)/h-1, 2*low/h-1
			s.add(p, x, y, weight, false)
		}
	})
	s.mom.symmetric()
}

// corner integrates two elements that share a point, the ends se of e and sf
// of f (0 start, 1 finish), by the sum u of the distances from it.
func (s *static) corner(p *pair, se, sf int) {
	he, hf, set := p.e.length, p.f.length, &p.m.set
	g := &legendre[set.smooth]
	at := func(u, w float64) {
		// Distance from the point along e: from max(0, u − hf) to min(u, he).
		lo, hi := max(0, u-hf), min(u, he)
		for i, t := range g.x {
			de := lo + (hi-lo)*(t+1)/2
			df := u - de
			weight := w * g.w[i] * (hi - lo) / 2 * 4 / (he * hf)
			x, y := 2*de/he-1, 2*df/hf-1
			if se == 1 {
				x = -x
			}
			if sf == 1 {
				y = -y
			}
			s.add(p, x, y, weight, false)
		}
	}
	b := (p.e.radius + p.f.radius) / 2
	short, long := min(he, hf), max(he, hf)
	graded(short, b, set.graded, at)
	if long > short {
		logarithmic(short, long, set.graded, at)
	}
	logarithmic(long, short+long, set.smooth, at)
}

// logarithmic is the Gauss–Legendre rule from lo to hi by the logarithm of u
// where hi is more than twice lo.
func logarithmic(lo, hi float64, n int, do func(u, w float64)) {
	g := &legendre[n]
	if hi > 2*lo {
		ratio := math.Log(hi / lo)
		for i, t := range g.x {
			u := lo * math.Exp(ratio*(t+1)/2)
			do(u, g.w[i]*ratio/2*u)
		}
		return
	}
	for i, t := range g.x {
		do(lo+(hi-lo)*(t+1)/2, g.w[i]*(hi-lo)/2)
	}
}

// aside integrates two elements that do not touch: a plain rule along e and,
// along f, nodes spread by the distance from the foot of the perpendicular,
// y − y0 = b sinh v.
func (s *static) aside(p *pair, reduce bool) {
	if p.e.length > p.f.length {
		s.aside(&pair{m: p.m, e: p.f, f: p.e, image: p.image}, reduce)
		s.mom.transpose()
		return
	}
	set := &p.m.set
	outer := &legendre[set.smooth+1]
	inner := &legendre[set.graded]
	for i, x := range outer.x {
		pe, te, ae := p.e.at(x)
		y0, d2 := p.foot(&pe)
		b := 2 * math.Sqrt(d2+ae*ae) / p.f.length
		lo, hi := math.Asinh((-1-y0)/b), math.Asinh((1-y0)/b)
		for j, t := range inner.x {
			v := lo + (hi-lo)*(t+1)/2
			y := y0 + b*math.Sinh(v)
			w := outer.w[i] * inner.w[j] * (hi - lo) / 2 * b * math.Cosh(v)
			pf, tf, af := p.f.at(y)
			s.node(p, &pe, &te, ae, x, &pf, &tf, af, y, w, reduce)
		}
	}
}

// apart integrates two elements with room between them: plain rules.
func (s *static) apart(p *pair, i, j int, reduce bool) {
	n, order := p.m.set.apart, p.m.order
	g := &legendre[n]
	es, fs := p.m.spots[i*n:(i+1)*n], p.m.spots[j*n:(j+1)*n]
	for a := range es {
		var c0, c1, q0, q1 [maxOrder]float64 // by the power of y
		for b := range fs {
			t := p.static(&es[a].at, &es[a].tangent, es[a].radius, &fs[b].at, &fs[b].tangent, fs[b].radius, reduce)
			w, y := g.w[b], g.x[b]
			q, r, c, d := w*t.charged, w*t.mean, w*t.dot*t.inverse, w*t.dot*t.mean
			for k := range order {
				q0[k] += q
				q1[k] += r
				c0[k] += c
				c1[k] += d
				q, r, c, d = q*y, r*y, c*y, d*y
			}
		}
		w := g.w[a]
		for k := range order {
			add(&s.mom.current0[k], &c0, w)
			add(&s.mom.current1[k], &c1, w)
			add(&s.mom.charge0[k], &q0, p.sign()*w)
			add(&s.mom.charge1[k], &q1, p.sign()*w)
			w *= g.x[a]
		}
	}
}

// add adds w·src to dst.
func add(dst, src *[maxOrder]float64, w float64) {
	for k := range dst {
		dst[k] += w * src[k]
	}
}

// foot finds where on f, or a little beyond its ends, a point is nearest,
// and the squared distance there.
func (p *pair) foot(at *vec) (y, d2 float64) {
	dist := func(y float64) (d2, slope, bend float64) {
		q, t, _ := p.f.at(y)
		d := vec{q[0] - at[0], q[1] - at[1], q[2] - at[2]}
		if p.image {
			d[2] = -q[2] - at[2]
			t[2] = -t[2]
		}
		d2 = d[0]*d[0] + d[1]*d[1] + d[2]*d[2]
		h := p.f.length / 2
		return d2, (d[0]*t[0] + d[1]*t[1] + d[2]*t[2]) * h, h * h
	}
	best, d2 := 0.0, math.Inf(1)
	for _, y := range [5]float64{-1, -0.5, 0, 0.5, 1} {
		if d, _, _ := dist(y); d < d2 {
			best, d2 = y, d
		}
	}
	y = best
	for range 3 {
		d, slope, bend := dist(y)
		if d <= d2 {
			best, d2 = y, d
		}
		y = min(1, max(-1, y-slope/bend))
	}
	if d, _, _ := dist(y); d <= d2 {
		best, d2 = y, d
	}
	return best, d2
}

// transpose exchanges x and y.
func (m *moments) transpose() {
	for _, a := range [...]*[maxOrder][maxOrder]float64{&m.current0, &m.current1, &m.charge0, &m.charge1} {
		for i := range a {
			for j := range i {
				a[i][j], a[j][i] = a[j][i], a[i][j]
			}
		}
	}
}
