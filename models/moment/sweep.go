package moment

import (
	"context"
	"math"

	"turnwise/models"
)

// work is everything one solution of an antenna needs; the next antenna
// finds the room already there.
type work struct {
	mesh    mesh
	static  static
	grid    grid
	ports   excitation
	factors factored

	k       []float64
	z       [][]complex128 // of a block of frequencies
	tested  []complex128   // V of each port, in turn
	solved  []complex128   // I of each port at 1 V, in turn
	loss    []complex128   // Ω/m of each wire at this frequency
	current []complex128   // the functions' amplitudes under the voltages
	volts   []complex128   // of the ports, what the current is the answer to
	field   []complex128   // ∫-weighted current on the grid points
	gram    [][maxOrder][maxOrder]float64
	shore   shore

	antenna *Antenna
	hz      float64
	wave    float64 // k at this frequency
}

// visitor sees the solution at each frequency in turn.
type visitor interface {
	visit(w *work, i int) error
}

// sweep solves the antenna at the frequencies hz, rising, and shows each
// solution to v. It stops between blocks of frequencies when ctx ends.
func (w *work) sweep(ctx context.Context, a *Antenna, set settings, hz []float64, v visitor) error {
	if err := w.prepare(a, set, hz); err != nil {
		return err
	}
	for at := 0; at < len(hz); at += block {
		if err := ctx.Err(); err != nil {
			return err
		}
		if err := w.block(ctx, hz, at, min(block, len(hz)-at), v); err != nil {
			return err
		}
	}
	return nil
}

// prepare does what does not depend on frequency.
func (w *work) prepare(a *Antenna, set settings, hz []float64) error {
	w.antenna = a
	if err := w.mesh.build(a, set, wave(hz[len(hz)-1])); err != nil {
		return err
	}
	m := &w.mesh
	w.static.fill(m, a.Plane)
	w.conductors()
	w.grid.over = a.Plane
	w.grid.both = w.static.both
	w.grid.prepare(m)
	if err := w.ports.prepare(m, a); err != nil {
		return err
	}
	n := m.functions
	w.tested = cleared(w.tested, n*len(a.Ports))
	w.solved = cleared(w.solved, n*len(a.Ports))
	w.current = cleared(w.current, n)
	w.loss = cleared(w.loss, len(a.Wires))
	w.field = cleared(w.field, len(m.x))
	return w.shore.prepare(m, a.Plate, set, hz)
}

// wave is the wave number, rad/m.
func wave(hz float64) float64 { return 2 * math.Pi * hz / models.LightSpeed }

// block solves count frequencies from the one at index at.
func (w *work) block(ctx context.Context, hz []float64, at, count int, v visitor) error {
	m := &w.mesh
	n := m.functions
	w.k = w.k[:0]
	for len(w.z) < count {
		w.z = append(w.z, nil)
	}
	for f := range count {
		w.k = append(w.k, wave(hz[at+f]))
		w.z[f] = cleared(w.z[f], n*n)
	}
	if err := w.grid.fill(ctx, m, w.k, evenly(w.k), w.z); err != nil {
		return err
	}
	for f := range count {
		if err := ctx.Err(); err != nil {
			return err
		}
		w.hz, w.wave = hz[at+f], w.k[f]
		w.complete(w.z[f])
		if err := w.shore.complete(m, at+f, w.wave, w.z[f], w.static.both); err != nil {
			return err
		}
		if err := w.factors.factor(w.z[f], n); err != nil {
			return err
		}
		for p := range w.antenna.Ports {
			tested, solved := w.tested[p*n:(p+1)*n], w.solved[p*n:(p+1)*n]
			w.ports.test(m, p, w.wave, tested)
			copy(solved, tested)
			w.factors.solve(solved)
		}
		if len(w.antenna.Ports) > 0 {
			w.excite(0)
		}
		if err := v.visit(w, at+f); err != nil {
			return err
		}
	}
	return nil
}

// evenly is the step of evenly spaced wave numbers, else 0.
func evenly(k []float64) float64 {
	if len(k) < 2 {
		return 0
	}
	step := (k[len(k)-1] - k[0]) / float64(len(k)-1)
	for i := range k {
		if math.Abs(k[0]+step*float64(i)-k[i]) > 1e-13*k[i] {
			return 0
		}
	}
	return step
}

// conductors keeps the products of the functions for the losses.
func (w *work) conductors() {
	m := &w.mesh
	if cap(w.gram) < len(m.elements) {
		w.gram = make([][maxOrder][maxOrder]float64, len(m.elements))
	}
	w.gram = w.gram[:len(m.elements)]
	g := &legendre[m.order+1]
	for i := range m.elements {
		e := &m.elements[i]
		gram := &w.gram[i]
		*gram = [maxOrder][maxOrder]float64{}
		for j, x := range g.x {
			w.products(e, gram, x, g.w[j])
		}
	}
}

func (w *work) products(e *element, gram *[maxOrder][maxOrder]float64, x, weight float64) {
	m := &w.mesh
	var f [maxOrder]float64
	for l := range m.order {
		f[l] = e.value[l].at(x, m.order)
	}
	for l := range m.order {
		for r := range m.order {
			gram[l][r] += f[l] * f[r] * weight * e.length / 2
		}
	}
}

// complete adds the static part and the conductors' losses to a matrix.
func (w *work) complete(z []complex128) {
	m, s, k := &w.mesh, &w.static, w.wave
	n := m.functions
	one, three, zero := eta/(4*math.Pi)*k, -eta/(4*math.Pi)*k*k*k, -eta/(4*math.Pi)/k
	for i := range n {
		last := i + 1
		if s.both {
			last = n
		}
		row := z[i*n : i*n+last]
		a, b, c := s.one[i*n:i*n+last], s.three[i*n:i*n+last], s.zero[i*n:i*n+last]
		for j := range row {
			row[j] += complex(0, one*a[j]+three*b[j]+zero*c[j])
		}
	}
	for i := range w.antenna.Wires {
		w.loss[i] = 0
		if f := w.antenna.Wires[i].Loss; f != nil {
			w.loss[i] = f(w.hz)
		}
	}
	for i := range m.elements {
		e := &m.elements[i]
		loss := w.loss[e.wire]
		if loss == 0 {
			continue
		}
		for l, p := range e.fn[:m.order] {
			for r, q := range e.fn[:m.order] {
				if p >= 0 && q >= 0 && (q <= p || s.both) {
					z[p*n+q] += loss * complex(w.gram[i][l][r], 0)
				}
			}
		}
	}
}

// excite sets the current to that of 1 V on one port, the others shorted.
func (w *work) excite(port int) {
	n := w.mesh.functions
	copy(w.current, w.solved[port*n:(port+1)*n])
	w.volts = cleared(w.volts, len(w.antenna.Ports))
	w.volts[port] = 1
	w.spreadOut()
}

// spreadOut takes the current to the grid points.
func (w *work) spreadOut() {
	w.shore.seen = [2]bool{}
	m := &w.mesh
	for q := range w.field {
		e := &m.elements[m.owner[q]]
		var re, im float64
		for i, fn := range e.fn[:m.order] {
			if fn >= 0 {
				v := w.grid.value[q*m.order+i]
				re += v * real(w.current[fn])
				im += v * imag(w.current[fn])
			}
		}
		w.field[q] = complex(re, im)
	}
}

// accepted is the power taken from port p at v volts, ½ Re(Vᴴ I), W.
func (w *work) accepted(port int, v complex128) float64 {
	n := w.mesh.functions
	sum := 0.0
	for i, e := range w.tested[port*n : (port+1)*n] {
		e *= v
		c := w.current[i]
		sum += real(e)*real(c) + imag(e)*imag(c)
	}
	return sum / 2
}

// lost is the power the conductors turn into heat, ½ ∫ Re(z)|I|² ds, W.
func (w *work) lost() float64 {
	m := &w.mesh
	total := 0.0
	for i := range m.elements {
		e := &m.elements[i]
		r := real(w.loss[e.wire])
		if r == 0 {
			continue
		}
		sum := 0.0
		for l, p := range e.fn[:m.order] {
			for s, q := range e.fn[:m.order] {
				if p >= 0 && q >= 0 {
					a, b := w.current[p], w.current[q]
					sum += w.gram[i][l][s] * (real(a)*real(b) + imag(a)*imag(b))
				}
			}
		}
		total += r * sum
	}
	return total / 2
}

// admittance is the current of port p for 1 V on port q, the others shorted.
func (w *work) admittance(p, q int) complex128 {
	n := w.mesh.functions
	return w.ports.current(p, w.solved[q*n:(q+1)*n])
}
