package moment

import (
	"fmt"
	"math"
)

// excitation is the tested field of the ports: for 1 V on port p,
// v_m = ∫ f_m E·t ds.
type excitation struct {
	ports  []Port
	even   [][]float64 // gaps and spreads: real, the same at all frequencies
	frills []frill
	which  []int // of each port: its entry in even or frills
	foot   []foot
}

// foot is the function that is alone not zero at a frill's foot, and its
// value there.
type foot struct {
	fn    int
	value float64
}

// prepare computes what does not depend on frequency.
func (x *excitation) prepare(m *mesh, a *Antenna) error {
	x.ports = a.Ports
	x.which = x.which[:0]
	evens, frills := 0, 0
	for i := range a.Ports {
		p := &a.Ports[i]
		if p.Kind == FrillPort {
			if frills == len(x.frills) {
				x.frills = append(x.frills, frill{})
				x.foot = append(x.foot, foot{})
			}
			if err := x.frills[frills].prepare(m, a, p); err != nil {
				return fmt.Errorf("port %d: %w", i, err)
			}
			e := &m.elements[m.wires[p.Wire].first]
			x.foot[frills] = foot{e.fn[0], e.value[0].at(-1, m.order)}
			x.which = append(x.which, frills)
			frills++
			continue
		}
		if evens == len(x.even) {
			x.even = append(x.even, nil)
		}
		x.even[evens] = cleared(x.even[evens], m.functions)
		if err := spread(m, a, p, x.even[evens]); err != nil {
			return fmt.Errorf("port %d: %w", i, err)
		}
		x.which = append(x.which, evens)
		evens++
	}
	return nil
}

// test writes the tested field of port p at wave number k to v.
func (x *excitation) test(m *mesh, p int, k float64, v []complex128) {
	if x.ports[p].Kind == FrillPort {
		x.frills[x.which[p]].test(m, k, v)
		return
	}
	for i, e := range x.even[x.which[p]] {
		v[i] = complex(e, 0)
	}
}

// current is the port's current: at the foot of a frill, the mean over a
// gap's or a spread's stretch.
func (x *excitation) current(p int, i []complex128) complex128 {
	if x.ports[p].Kind == FrillPort {
		f := x.foot[x.which[p]]
		return i[f.fn] * complex(f.value, 0)
	}
	var re, im float64
	for n, e := range x.even[x.which[p]] {
		re += e * real(i[n])
		im += e * imag(i[n])
	}
	return complex(re, im)
}

// spread tests a voltage of 1 V spread evenly over a stretch of a wire.
func spread(m *mesh, a *Antenna, p *Port, v []float64) error {
	s := &m.wires[p.Wire]
	lo, hi := 0.0, s.length
	if p.Kind == GapPort {
		at := m.arc(&a.Wires[p.Wire], s, p.At)
		lo, hi = at-p.Gap/2, at+p.Gap/2
		if slack := 1e-9 * s.length; lo < -slack || hi > s.length+slack {
			return fmt.Errorf("a gap from %g to %g m along a wire of %g m; one inside it is due", lo, hi, s.length)
		}
	}
	g := &legendre[8]
	for i := s.first; i < s.end; i++ {
		e := &m.elements[i]
		start := float64(i-s.first) * e.length
		from, to := max(lo, start), min(hi, start+e.length)
		if from >= to {
			continue
		}
		for j, t := range g.x {
			x := 2*(from+(to-from)*(t+1)/2-start)/e.length - 1
			w := g.w[j] * (to - from) / 2 / (hi - lo)
			for l, n := range e.fn[:m.order] {
				if n >= 0 {
					v[n] += w * e.value[l].at(x, m.order)
				}
			}
		}
	}
	return nil
}

// arc is the arc length from the wire's start to the curve's parameter t.
func (m *mesh) arc(w *Wire, s *span, t float64) float64 {
	i := s.first
	for i+1 < s.end && t > m.elements[i].to {
		i++
	}
	e := &m.elements[i]
	g := &legendre[16]
	half, sum := (t-e.from)/2, 0.0
	for j, x := range g.x {
		_, d := w.Curve.At(e.from + half*(x+1))
		sum += g.w[j] * math.Sqrt(d.X*d.X+d.Y*d.Y+d.Z*d.Z)
	}
	return float64(i-s.first)*e.length + sum*half
}
