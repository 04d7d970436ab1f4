package moment

import "math"

// wireSpot is a point of a wire about the axis, with the tangent there.
type wireSpot struct {
	element      int
	rho, z       float64
	cos, sin     float64 // of its azimuth
	ur, uphi, uz float64
}

// decay is how fast the modes of what a spot sends to a ring die away: as
// e^{−m·decay}.
func (s *wireSpot) decay(p *place) float64 {
	d, z := p.rho-complex(s.rho, 0), p.z-s.z
	size := math.Sqrt(size2(p.rho)) * max(s.rho, 1e-12)
	return math.Acosh(1 + (size2(d)+z*z)/(2*size))
}

// lay lays the spots: as many an element as its distance from the edge, in
// half lengths δ, wants for (δ + √(1 + δ²))^−2n to be spotLoss.
func (c *coupling) lay(m *mesh) {
	c.spots, c.value, c.slope = c.spots[:0], c.value[:0], c.slope[:0]
	for i := range m.elements {
		e := &m.elements[i]
		delta := 2 * c.clear(e) / e.length
		n := int(math.Ceil(spotLoss / 2 / math.Asinh(delta)))
		g := &legendre[min(max(n, leastSpots), mostSpots)]
		for j, x := range g.x {
			at, tangent, _ := e.at(x)
			s := wireSpot{element: i, rho: math.Hypot(at[0], at[1]), z: at[2], cos: 1, uz: tangent[2]}
			if s.rho > 0 {
				s.cos, s.sin = at[0]/s.rho, at[1]/s.rho
			}
			s.ur = tangent[0]*s.cos + tangent[1]*s.sin
			s.uphi = tangent[1]*s.cos - tangent[0]*s.sin
			c.spots = append(c.spots, s)
			w := g.w[j] * e.length / 2
			for l := range m.order {
				c.value = append(c.value, w*e.value[l].at(x, m.order))
				c.slope = append(c.slope, w*e.slope[l].at(x, m.order)*2/e.length)
			}
		}
	}
}

// clear is an element's distance from the plate's edge, from a cup's rim too.
func (c *coupling) clear(e *element) float64 {
	gap := math.Inf(1)
	for _, p := range e.tips {
		z := max(0, p[2]-c.plate.Rim)
		gap = min(gap, math.Hypot(math.Hypot(p[0], p[1])-c.plate.Radius, z))
	}
	return max(gap, 1e-3*e.length)
}

// means are a ring's modes from 0 up.
type means []complex128

// plane makes those of (1 + jkR)e^{−jkR}/R³.
func (mean means) plane(samples []sample, r *ringRule, k float64) {
	clear(mean)
	for i := range samples {
		s := &samples[i]
		x, y := real(s.r), imag(s.r)
		inv := 1 / (x*x + y*y)
		o := complex(x*inv, -y*inv)
		g := s.phasor * complex(1-k*y, k*x) * (o * o * o)
		re, im := real(g), imag(g)
		cosine := r.cosine[i*azimuthModes:]
		cosine = cosine[:len(mean)]
		for m, cos := range cosine {
			mean[m] += complex(re*cos, im*cos)
		}
	}
	scale := 1 / float64(len(samples))
	for m := range mean {
		mean[m] *= complex(scale, 0)
	}
}

// adjacent are (a_{m−1} ± a_{m+1})/2 and a_m.
func adjacent(a means, m int) (plus, minus, mid complex128) {
	below, above := a[1], a[m+1]
	if m > 0 {
		below = a[m-1]
	}
	br, bi, ar, ai := real(below)/2, imag(below)/2, real(above)/2, imag(above)/2
	return complex(br+ar, bi+ai), complex(br-ar, bi-ai), a[m]
}

// planeModes are K_ρ and K_φ/j of a mode and of its like below zero, but for
// the turn to the spot's azimuth.
type planeModes struct{ up, down [2]complex128 }

func (s *wireSpot) plane(rho complex128, mean means, m int) planeModes {
	const scale = -1 / (2 * math.Pi)
	p, q, u := scale*(s.z*s.ur-s.rho*s.uz), scale*s.z*s.uphi, scale*s.uz
	plus, minus, a := adjacent(mean, m)
	a *= rho
	er, ei := p*real(plus)+u*real(a), p*imag(plus)+u*imag(a)
	or, oi := -q*imag(minus), q*real(minus)
	tr, ti := p*real(minus), p*imag(minus)
	sr, si := -q*imag(plus), q*real(plus)
	return planeModes{
		up:   [2]complex128{complex(er-or, ei-oi), complex(tr-sr, ti-si)},
		down: [2]complex128{complex(er+or, ei+oi), complex(-tr-sr, -ti-si)},
	}
}

// planeRow puts the modes of the plane's current on ring j into the row.
func (c *coupling) planeRow(s *wireSpot, r *ringRule, j int) {
	n, wide := len(c.ring), c.rawEntries()
	for m := range c.modes + 1 {
		k := s.plane(r.rho, c.mean, m)
		up, down := c.row[(c.modes+m)*wide:], c.row[(c.modes-m)*wide:]
		up[j], up[n+j] = k.up[0], k.up[1]
		down[j], down[n+j] = k.down[0], k.down[1]
	}
}
