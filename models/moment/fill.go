package moment

import (
	"context"
	"math"
)

// block is the most frequencies that are filled at once.
const block = 8

// grid evaluates the kernel between all pairs of grid points and projects it
// on the functions. Everything is room that is used again.
type grid struct {
	over bool // plane: images too
	both bool // fill both triangles (to see their difference)

	// Of one row of elements, point by point against all columns: distance,
	// its inverse, product of tangents; phasor and its step in frequency.
	direct, image  rows
	current, slope []complex128 // kernels of one frequency, [point][column]

	// Rows of functions not yet complete: [frequency][slot][kernel][column].
	half []complex128
	slot []int // of each function, −1: not active
	free []int

	// Functions on grid points with the points' weights: value and slope by
	// arc length, [point][local].
	value, rise []float64
	// The same gathered by function.
	runs  []run
	first []int // of each function in runs; one more at the end
	rv    []float64
	rr    []float64
}

// rows are one row's quantities against all columns.
type rows struct {
	r, inverse, dot []float64
	phasor, step    []complex128
}

// run is a stretch of neighbouring grid points of a function.
type run struct{ point, count, at int }

// prepare tabulates the functions on the grid.
func (g *grid) prepare(m *mesh) {
	points := len(m.x)
	g.value = cleared(g.value, points*m.order)
	g.rise = cleared(g.rise, points*m.order)
	for q, x := range m.node {
		e := &m.elements[m.owner[q]]
		for i := range m.order {
			if e.fn[i] < 0 {
				continue
			}
			g.value[q*m.order+i] = e.value[i].at(x, m.order) * m.weight[q]
			g.rise[q*m.order+i] = e.slope[i].at(x, m.order) * 2 / e.length * m.weight[q]
		}
	}
	g.gather(m)
	g.slot = cleared(g.slot, m.functions)
	for i := range g.slot {
		g.slot[i] = -1
	}
	width := 0
	for i := range m.elements {
		width = max(width, m.elements[i].end-m.elements[i].first)
	}
	g.direct.fit(width * points)
	if g.over {
		g.image.fit(width * points)
	}
	g.current = cleared(g.current, width*points)
	g.slope = cleared(g.slope, width*points)
	slots := g.slots(m)
	g.half = cleared(g.half, block*slots*2*points)
	g.free = g.free[:0]
	for i := range slots {
		g.free = append(g.free, i)
	}
}

func (r *rows) fit(n int) {
	r.r, r.inverse, r.dot = cleared(r.r, n), cleared(r.inverse, n), cleared(r.dot, n)
	r.phasor, r.step = cleared(r.phasor, n), cleared(r.step, n)
}

// gather lists each function's values along the grid.
func (g *grid) gather(m *mesh) {
	g.runs, g.first, g.rv, g.rr = g.runs[:0], g.first[:0], g.rv[:0], g.rr[:0]
	for n := range m.support {
		s := &m.support[n]
		g.first = append(g.first, len(g.runs))
		for _, on := range s.on[:s.count] {
			e := &m.elements[on.element]
			if k := len(g.runs); k == g.first[n] || g.runs[k-1].point+g.runs[k-1].count != e.first {
				g.runs = append(g.runs, run{point: e.first, at: len(g.rv)})
			}
			g.runs[len(g.runs)-1].count += e.end - e.first
			for q := e.first; q < e.end; q++ {
				g.rv = append(g.rv, g.value[q*m.order+on.local])
				g.rr = append(g.rr, g.rise[q*m.order+on.local])
			}
		}
	}
	g.first = append(g.first, len(g.runs))
}

// slots is the most functions that are ever incomplete at once.
func (g *grid) slots(m *mesh) int {
	most, now := 0, 0
	for i := range m.elements {
		e := &m.elements[i]
		for _, n := range e.fn[:m.order] {
			if n >= 0 && g.slot[n] < 0 {
				g.slot[n] = 0
				now++
			}
		}
		most = max(most, now)
		for _, n := range e.fn[:m.order] {
			if n >= 0 && g.slot[n] == 0 && m.support[n].last == i {
				g.slot[n] = 1
				now--
			}
		}
	}
	for i := range g.slot {
		g.slot[i] = -1
	}
	return most
}

// fill adds the grid's part of the matrices at wave numbers k, at most block
// of them, to z: lower triangles, row m of length functions. Where the wave
// numbers are evenly spaced, step is their difference; else it is 0. It stops
// between rows when ctx ends.
func (g *grid) fill(ctx context.Context, m *mesh, k []float64, step float64, z [][]complex128) error {
	for i := range m.elements {
		if err := ctx.Err(); err != nil {
			return err
		}
		e := &m.elements[i]
		columns := g.columns(m, e)
		g.distances(m, e, columns)
		g.activate(m, e, len(k))
		for f := range k {
			g.kernels(e.end-e.first, columns, k[f], step, f == 0)
			g.project(m, e, columns, f)
		}
		g.complete(m, i, k, z)
	}
	return nil
}

// columns is how many grid points a row of elements needs: up to the last
// element of any of its functions, whose row's diagonal lies there.
func (g *grid) columns(m *mesh, e *element) int {
	if g.both {
		return len(m.x)
	}
	n := 0
	for _, fn := range e.fn[:m.order] {
		if fn >= 0 {
			n = max(n, m.elements[m.support[fn].last].end)
		}
	}
	return n
}

// distances computes what does not depend on frequency.
func (g *grid) distances(m *mesh, e *element, columns int) {
	for p := e.first; p < e.end; p++ {
		x, y, z := m.x[p], m.y[p], m.z[p]
		tx, ty, tz, half := m.tx[p], m.ty[p], m.tz[p], m.half[p]
		at := (p - e.first) * columns
		qx, qy, qz := m.x[:columns], m.y[:columns], m.z[:columns]
		sx, sy, sz, qh := m.tx[:columns], m.ty[:columns], m.tz[:columns], m.half[:columns]
		dr, di, dd := g.direct.r[at:at+columns], g.direct.inverse[at:at+columns], g.direct.dot[at:at+columns]
		for q := range qx {
			dx, dy, dz := x-qx[q], y-qy[q], z-qz[q]
			r := math.Sqrt(dx*dx + dy*dy + dz*dz + half + qh[q])
			dr[q], di[q] = r, 1/r
			dd[q] = tx*sx[q] + ty*sy[q] + tz*sz[q]
		}
		if !g.over {
			continue
		}
		ir, ii, id := g.image.r[at:at+columns], g.image.inverse[at:at+columns], g.image.dot[at:at+columns]
		for q := range qx {
			dx, dy, dz := x-qx[q], y-qy[q], z+qz[q]
			r := math.Sqrt(dx*dx + dy*dy + dz*dz + half + qh[q])
			ir[q], ii[q] = r, 1/r
			id[q] = tz*sz[q] - tx*sx[q] - ty*sy[q]
		}
	}
}

// kernels evaluates one frequency on a row: e^{−jkR}/R, by a step from the
// frequency before where the steps are even.
func (g *grid) kernels(points, columns int, k, step float64, start bool) {
	n := points * columns
	g.direct.advance(n, k, step, start)
	if g.over {
		g.image.advance(n, k, step, start)
		current, slope := g.current[:n], g.slope[:n]
		dp, di, dd := g.direct.phasor[:n], g.direct.inverse[:n], g.direct.dot[:n]
		ip, ii, id := g.image.phasor[:n], g.image.inverse[:n], g.image.dot[:n]
		for q := range current {
			dr, dm := real(dp[q])*di[q], imag(dp[q])*di[q]
			ir, im := real(ip[q])*ii[q], imag(ip[q])*ii[q]
			slope[q] = complex(dr-ir, dm-im)
			current[q] = complex(dd[q]*dr+id[q]*ir, dd[q]*dm+id[q]*im)
		}
		return
	}
	current, slope := g.current[:n], g.slope[:n]
	dp, di, dd := g.direct.phasor[:n], g.direct.inverse[:n], g.direct.dot[:n]
	for q := range current {
		dr, dm := real(dp[q])*di[q], imag(dp[q])*di[q]
		slope[q] = complex(dr, dm)
		current[q] = complex(dd[q]*dr, dd[q]*dm)
	}
}

// advance brings the phasors of n pairs to wave number k.
func (r *rows) advance(n int, k, step float64, start bool) {
	dist, phasor, steps := r.r[:n], r.phasor[:n], r.step[:n]
	if !start && step != 0 {
		for q, s := range steps {
			p := phasor[q]
			phasor[q] = complex(real(p)*real(s)-imag(p)*imag(s), real(p)*imag(s)+imag(p)*real(s))
		}
		return
	}
	for q, d := range dist {
		c, s := unit(k * d)
		phasor[q] = complex(c, -s)
	}
	if step != 0 {
		for q, d := range dist {
			c, s := unit(step * d)
			steps[q] = complex(c, -s)
		}
	}
}

// activate gives the functions of e that start here a cleared row.
func (g *grid) activate(m *mesh, e *element, frequencies int) {
	points := len(m.x)
	for _, n := range e.fn[:m.order] {
		if n < 0 || g.slot[n] >= 0 {
			continue
		}
		last := len(g.free) - 1
		g.slot[n] = g.free[last]
		g.free = g.free[:last]
		for f := range frequencies {
			clear(g.row(f, g.slot[n], points))
		}
	}
}

// row is the room of a function's incomplete row: current, then charge.
func (g *grid) row(f, slot, points int) []complex128 {
	slots := len(g.half) / (block * 2 * points)
	at := (f*slots + slot) * 2 * points
	return g.half[at : at+2*points]
}

// project adds the element's row, weighted by its functions, to theirs.
func (g *grid) project(m *mesh, e *element, columns, f int) {
	points := len(m.x)
	for i, n := range e.fn[:m.order] {
		if n < 0 {
			continue
		}
		row := g.row(f, g.slot[n], points)
		current, charge := row[:columns], row[points:points+columns]
		for p := e.first; p < e.end; p++ {
			at := (p - e.first) * columns
			axpy(current, g.current[at:at+columns], g.value[p*m.order+i])
			axpy(charge, g.slope[at:at+columns], g.rise[p*m.order+i])
		}
	}
}

// axpy adds w·src to dst.
func axpy(dst, src []complex128, w float64) {
	src = src[:len(dst)]
	for q, v := range src {
		d := dst[q]
		dst[q] = complex(real(d)+w*real(v), imag(d)+w*imag(v))
	}
}

// complete projects the rows whose functions end on element i on all
// columns' functions up to their own, and frees their room.
func (g *grid) complete(m *mesh, i int, k []float64, z [][]complex128) {
	points := len(m.x)
	for _, fn := range m.elements[i].fn[:m.order] {
		if fn < 0 || g.slot[fn] < 0 || m.support[fn].last != i {
			continue
		}
		last := fn
		if g.both {
			last = m.functions - 1
		}
		for f := range k {
			row := g.row(f, g.slot[fn], points)
			out := z[f][fn*m.functions : fn*m.functions+last+1]
			scale, down := k[f]*eta/(4*math.Pi), eta/(4*math.Pi*k[f])
			for n := range out {
				a, c := g.column(row[:points], row[points:], n)
				v := complex(scale*real(a)-down*real(c), scale*imag(a)-down*imag(c))
				out[n] += complex(-imag(v), real(v))
			}
		}
		g.free = append(g.free, g.slot[fn])
		g.slot[fn] = -1
	}
}

// column projects a row on function n.
func (g *grid) column(current, charge []complex128, n int) (a, c complex128) {
	var ar, ai, cr, ci float64
	for _, r := range g.runs[g.first[n]:g.first[n+1]] {
		v, w := g.rv[r.at:r.at+r.count], g.rr[r.at:r.at+r.count]
		x, y := current[r.point:r.point+r.count], charge[r.point:r.point+r.count]
		for q := range v {
			ar += v[q] * real(x[q])
			ai += v[q] * imag(x[q])
			cr += w[q] * real(y[q])
			ci += w[q] * imag(y[q])
		}
	}
	return complex(ar, ai), complex(cr, ci)
}

// eta is the impedance of free space, Ω.
const eta = 376.730313668
