package moment

// apply adds what comes back from the plate to the wires' matrix z: with ỹ of
// mode m the y of mode −m, its azimuthal entries turned,
//
//	ΔZ = ỹ₀ᵀ s₀ y₀ + Σ_{m>0} (ỹ_mᵀ s_m y_m + its transpose).
func (c *coupling) apply(m *mesh, e *echo, z []complex128, both bool) {
	n, q := m.functions, c.entries()
	sent, below := q*(2*c.modes+1), q*c.modes // the modes below zero stand first
	size := below + q
	c.back = cleared(c.back, n*size)
	for fn := range n {
		c.echo(e, fn, c.back[fn*size:(fn+1)*size])
	}
	for i := range n {
		last := i
		if both {
			last = n - 1
		}
		row, y, back := z[i*n:i*n+last+1], c.y[i*sent:i*sent+size], c.back[i*size:i*size+below]
		for j := range row {
			row[j] += dot(y, c.back[j*size:(j+1)*size]) + dot(back, c.y[j*sent:j*sent+below])
		}
	}
}

// sent is a function's y of a mode.
func (c *coupling) sent(fn, mode int) []complex128 {
	q := c.entries()
	at := (fn*(2*c.modes+1) + c.modes + mode) * q
	return c.y[at : at+q]
}

// echo makes s y of a function in the modes from 0 up, the azimuthal entries
// turned, each in the place of the mode below zero that it meets.
func (c *coupling) echo(e *echo, fn int, back []complex128) {
	q := c.entries()
	for mode := range c.modes + 1 {
		s, y, out := e.modes[mode].s, c.sent(fn, mode), back[(c.modes-mode)*q:][:q]
		for j := range out {
			out[j] = dot(s[j*q:(j+1)*q], y)
		}
		for _, j := range c.turns {
			out[j] = -out[j]
		}
	}
}

// dot is Σ a b; its sums are kept apart so that none waits for another.
func dot(a, b []complex128) complex128 {
	b = b[:len(a)]
	var rr, ii, ri, ir, ss, jj, sj, js float64
	i := 0
	for ; i+1 < len(a); i += 2 {
		x, y, u, v := a[i], b[i], a[i+1], b[i+1]
		rr += real(x) * real(y)
		ii += imag(x) * imag(y)
		ri += real(x) * imag(y)
		ir += imag(x) * real(y)
		ss += real(u) * real(v)
		jj += imag(u) * imag(v)
		sj += real(u) * imag(v)
		js += imag(u) * real(v)
	}
	if i < len(a) {
		x, y := a[i], b[i]
		rr += real(x) * real(y)
		ii += imag(x) * imag(y)
		ri += real(x) * imag(y)
		ir += imag(x) * real(y)
	}
	return complex(rr-ii+(ss-jj), ri+ir+(sj+js))
}
