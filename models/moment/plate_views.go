package moment

import "math"

// amplitudes finds those of all functions under the wires' current, mode by
// mode.
func (s *shore) amplitudes(current []complex128) {
	q, signed, n := s.entries(), 2*s.modes+1, s.count
	s.sum = cleared(s.sum, q)
	s.amplitude = cleared(s.amplitude, signed*n)
	for m := -s.modes; m <= s.modes; m++ {
		clear(s.sum)
		for fn, i := range current {
			y := s.sent(fn, m)
			for j := range y {
				s.sum[j] += i * y[j]
			}
		}
		s.opposite(m, s.sum)
		mode := &s.echo.modes[abs(m)]
		out := s.amplitude[(s.modes+m)*n:][:n]
		for i := range out {
			out[i] = dot(mode.current[i*q:(i+1)*q], s.sum)
		}
		if m < 0 {
			for i, around := range s.around {
				if around {
					out[i] = -out[i]
				}
			}
		}
	}
}

// opposite turns the azimuthal entries of a mode below zero: the plate answers
// it as its like above.
func (s *shore) opposite(m int, y []complex128) {
	if m >= 0 {
		return
	}
	for _, j := range s.turns {
		y[j] = -y[j]
	}
}

// onNodes is the rule on each patch that a view takes its currents from.
const onNodes = 8

// openView lays the open view's currents.
func (s *shore) openView() *vista {
	v := &s.open
	v.reset(s.modes)
	for i := range s.patches {
		s.currents(v, &s.patches[i])
	}
	return v
}

// currents adds a patch's rings to a view.
func (s *shore) currents(v *vista, p *patch) {
	g := &legendre[onNodes]
	for j, x := range g.x {
		at, splines := s.place(p.part, float64(p.at)+(x+1)/2), p.values(x, s.degree)
		out := v.add(fieldNode{at.rho, at.z, at.sin, at.cos})
		wt, wf := at.sigma*complex(g.w[j]/2, 0), at.rho*complex(g.w[j]/2, 0)
		for m := -s.modes; m <= s.modes; m++ {
			a := s.amplitude[(s.modes+m)*s.count:][:s.count]
			var t, f complex128
			for _, e := range p.t {
				t += a[e.fn] * complex(splines.value[e.local], 0)
			}
			for _, e := range p.f {
				f += a[e.fn] * complex(splines.flow[e.local], 0)
			}
			out[2*(v.modes+m)], out[2*(v.modes+m)+1] = t*wt, f*wf
		}
	}
}

// closedView lays the closed view's currents: the plate's own, and the
// plane's within its edge.
func (s *shore) closedView(m *mesh, current []complex128, k float64) *vista {
	v := &s.closed
	v.reset(min(max(s.modes, int(math.Ceil(k*min(s.widest, s.plate.Radius)))+farModes), azimuthModes-2))
	for i := range s.patches {
		if s.patches[i].part != beyond {
			s.currents(v, &s.patches[i])
		}
	}
	s.carried = cleared(s.carried, len(s.spots))
	for i := range s.spots {
		e := &m.elements[s.spots[i].element]
		for l, fn := range e.fn[:m.order] {
			if fn >= 0 {
				s.carried[i] += current[fn] * complex(s.value[i*m.order+l], 0)
			}
		}
	}
	s.within(v, k, 0, s.plate.Radius)
	return v
}

const (
	farModes   = 7     // beyond ka, of what a ring radiates
	widestRing = 0.8   // k times the widest panel of rings
	leastRing  = 0.015 // k times the narrowest
	panelNodes = 5
)

// within adds the plane's current between two radii, in panels as narrow as
// what runs over them is low.
func (s *shore) within(v *vista, k, from, to float64) {
	width := to - from
	if k*width > widestRing || k*width > leastRing && s.low(from, to) {
		s.within(v, k, from, from+width/2)
		s.within(v, k, from+width/2, to)
		return
	}
	g := &legendre[panelNodes]
	for i, x := range g.x {
		rho := from + width*(x+1)/2
		s.covered(v, k, rho, g.w[i]*width/2)
	}
}

// low tells whether any spot is closer to a panel than the panel is wide.
func (s *shore) low(from, to float64) bool {
	for i := range s.spots {
		p := &s.spots[i]
		if math.Hypot(max(0, from-p.rho, p.rho-to), p.z) < to-from {
			return true
		}
	}
	return false
}

// covered adds the plane's current on one ring of a weight.
func (s *shore) covered(v *vista, k, rho, weight float64) {
	out := v.add(fieldNode{rho: complex(rho, 0), sin: 1})
	s.wide = cleared(s.wide, v.modes+2)
	r := ringRule{place: place{rho: complex(rho, 0)}}
	for i := range s.spots {
		p := &s.spots[i]
		around := max(float64(v.modes)+coverLoss/p.decay(&r.place), float64(v.modes)+6+2*k*min(p.rho, rho))
		r.azimuths = midpoints[min(max(4, int(math.Ceil(around/2))), mostHalf)]()
		s.circle = s.circle[:0]
		d, rr := rho-p.rho, 4*rho*p.rho
		for _, sin2 := range r.sin2 {
			x := math.Sqrt(d*d + rr*sin2 + p.z*p.z)
			s.circle = append(s.circle, sample{r: complex(x, 0), phasor: phasor(k, complex(x, 0))})
		}
		s.wide.plane(s.circle, &r, k)
		turn, step := s.carried[i]*complex(rho*weight, 0), complex(p.cos, -p.sin)
		back := turn
		for m := range v.modes + 1 {
			c := p.plane(r.rho, s.wide, m)
			up, down := out[2*(v.modes+m):], out[2*(v.modes-m):]
			up[0] += turn * c.up[0]
			up[1] += turn * c.up[1]
			if m > 0 {
				down[0] += back * c.down[0]
				down[1] += back * c.down[1]
			}
			turn *= step
			back *= complex(real(step), -imag(step))
		}
	}
}

// coverLoss is azimuthLoss for the plane's current within the edge, which is
// only radiated.
const coverLoss = 7.0
