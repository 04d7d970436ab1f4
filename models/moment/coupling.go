package moment

import "math"

// coupling is what the functions of an antenna's wires send to the rings of a
// plate's meridian, mode by mode of the azimuth. Of an element I ds along u at
// radius ρ, height z, with p = z u_ρ − ρ u_z and q = z u_φ, the plane's current
// 2 ẑ × H on the ring ρ' has the modes
//
//	K_ρ  = −(1/2π) [p a⁺ + ρ' u_z a ∓ jq a⁻] e^{∓jmφ}
//	K_φ/j = −(1/2π) [±p a⁻ − jq a⁺] e^{∓jmφ}
//
// with a_m the mean of (1 + jkR)e^{−jkR}/R³ cos(mΔ) over the ring and
// a^± = (a_{m−1} ± a_{m+1})/2. On a rim the potentials serve: of A the upright
// and the azimuthal part, and Φ, of the wires with their images.
type coupling struct {
	*meridian
	modes int

	spots   []wireSpot
	value   []float64 // of the element's functions at each spot, weight included
	slope   []float64 // and of their derivatives
	rims    []rimNode
	rings   []ringRule // of each ring beyond, then of each node of the rim
	samples []sample   // [spot][ring][azimuth], two on the rim: wire and image

	mean, pair means        // modes of one spot and ring
	row        []complex128 // of one spot: [signed mode][raw entry]
	slopes     []complex128 // of one spot, the rim's Φ: [signed mode][node]
	raw        []complex128 // [function][signed mode][raw entry]
	y          []complex128 // [function][signed mode][entry]
	back       []complex128 // s y of a function, turned: [function][−mode][entry]
}

// wireSpot is a point of a wire about the axis, with the tangent there.
type wireSpot struct {
	element      int
	rho, z       float64
	cos, sin     float64 // of its azimuth
	ur, uphi, uz float64
}

// ringRule is a ring and the midpoint rule on it.
type ringRule struct {
	place
	*azimuths
}

// sample is a pair of a spot, or its image, and a point of a ring: the
// distance R, e^{−jkR} and the latter's step in frequency.
type sample struct{ r, phasor, step complex128 }

// rimNode is a node of the rim's quadrature, its place among the rings.
type rimNode struct {
	patch        *patch
	weight       float64
	value, slope [maxOrder]float64
}

// modeLevels are the numbers of modes that plates are solved for.
var modeLevels = [...]int{4, 5, 6, 7, 8, 10, 12, 16, 20, 24, 32}

// levels of accuracy: what the modes and the azimuths leave out.
const (
	modeLoss    = 9.0  // −ln of a share of the wires' matrix
	azimuthLoss = 10.0 // −ln of a share of what is sent to a ring
	spotLoss    = 8.0  // −ln of a share of what an element sends
	leastSpots  = 3
	mostSpots   = 10
)

// survey lays the spots and says how many modes the antenna needs at the
// highest wave number k; it is short of them where even the last level is.
func (c *coupling) survey(m *mesh, mer *meridian, k float64) (modes int, short bool) {
	c.meridian = mer
	c.lay(m)
	edge := mer.place(beyond, 0)
	decay, widest := math.Inf(1), 0.0
	for i := range c.spots {
		s := &c.spots[i]
		decay = min(decay, s.decay(&edge))
		if mer.parts[rim] > 0 && s.z < mer.plate.Rim {
			decay = min(decay, s.decay(&place{rho: edge.rho, z: s.z}))
		}
		widest = max(widest, s.rho)
	}
	need := max(modeLoss/2/decay, 2+k*min(widest, mer.plate.Radius))
	for _, level := range modeLevels {
		if float64(level) >= need {
			return level, false
		}
	}
	return modeLevels[len(modeLevels)-1], true
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

// prepare does what does not depend on frequency: rules, distances, and the
// phasors at the first wave number and their step (0: none).
func (c *coupling) prepare(set *settings, modes int, k, highest, step float64) {
	c.modes = modes
	c.lines(set)
	for i := range c.rings {
		r := &c.rings[i]
		decay, widest := math.Inf(1), 0.0
		for j := range c.spots {
			decay = min(decay, c.spots[j].decay(&r.place))
			widest = max(widest, c.spots[j].rho)
		}
		around := max(float64(modes)+azimuthLoss/decay, float64(modes)+6+2*highest*widest)
		r.azimuths = midpoints[min(max(4, int(math.Ceil(around/2))), mostHalf)]()
	}
	c.samples = c.samples[:0]
	for i := range c.spots {
		for j := range c.rings {
			c.sample(&c.spots[i], &c.rings[j], j >= len(c.ring))
		}
	}
	for i := range c.samples {
		s := &c.samples[i]
		s.phasor = phasor(k, s.r)
		if step != 0 {
			s.step = phasor(step, s.r)
		}
	}
	c.mean, c.pair = cleared(c.mean, modes+2), cleared(c.pair, modes+2)
}

func phasor(k float64, r complex128) complex128 {
	return complex(wavelet(k, real(r), imag(r)))
}

// lines lays the rings.
func (c *coupling) lines(set *settings) {
	c.rings, c.rims = c.rings[:0], c.rims[:0]
	for _, u := range c.ring {
		c.rings = append(c.rings, ringRule{place: c.place(beyond, u)})
	}
	g := &legendre[set.apart]
	for i := range c.patches {
		p := &c.patches[i]
		if p.part != rim {
			continue
		}
		for j, x := range g.x {
			n := rimNode{patch: p, weight: g.w[j] / 2}
			for l := range c.degree + 1 {
				n.value[l], n.slope[l] = p.value[l].at(x, c.degree+1), 2*p.slope[l].at(x, c.degree+1)
			}
			c.rims = append(c.rims, n)
			c.rings = append(c.rings, ringRule{place: c.place(rim, float64(p.at)+(x+1)/2)})
		}
	}
}

// sample lays the samples of a spot on a ring.
func (c *coupling) sample(s *wireSpot, r *ringRule, image bool) {
	d := r.rho - complex(s.rho, 0)
	z, zi := r.z-s.z, r.z+s.z
	rr := r.rho * complex(4*s.rho, 0)
	for _, sin2 := range r.sin2 {
		across := d*d + rr*complex(sin2, 0)
		c.distance(across + complex(z*z, 0))
		if image {
			c.distance(across + complex(zi*zi, 0))
		}
	}
}

func (c *coupling) distance(r2 complex128) {
	c.samples = append(c.samples, sample{r: complex(root(real(r2), imag(r2)))})
}

// advance takes the phasors to the next wave number, k.
func (c *coupling) advance(k float64, stepped bool) {
	for i := range c.samples {
		s := &c.samples[i]
		if stepped {
			s.phasor *= s.step
		} else {
			s.phasor = phasor(k, s.r)
		}
	}
}

// entriesRaw is how many numbers a spot sends in each mode.
func (c *coupling) entriesRaw() int { return 2*len(c.ring) + 3*len(c.rims) }

// send computes y of all functions at wave number k.
func (c *coupling) send(m *mesh, k float64) {
	signed, wide := 2*c.modes+1, c.entriesRaw()
	size := signed * wide
	c.row = cleared(c.row, size)
	c.raw = cleared(c.raw, m.functions*size)
	at := 0
	for i := range c.spots {
		s := &c.spots[i]
		at = c.spot(s, k, at)
		e := &m.elements[s.element]
		for l, fn := range e.fn[:m.order] {
			if fn >= 0 {
				c.gather(c.raw[fn*size:(fn+1)*size], c.value[i*m.order+l], c.slope[i*m.order+l])
			}
		}
	}
	c.project(m, k)
}

// gather adds a spot's row, weighted by a function's value, and Φ by its
// slope.
func (c *coupling) gather(raw []complex128, value, slope float64) {
	if len(c.rims) == 0 {
		axpy(raw, c.row, value)
		return
	}
	wide, charges := c.entriesRaw(), len(c.rims)
	for a := 0; a < len(raw); a += wide {
		b := a + wide - charges
		axpy(raw[a:b], c.row[a:b], value)
		axpy(raw[b:a+wide], c.row[b:a+wide], slope)
	}
}

// spot computes the row of a spot whose samples start at one, and says where
// the next one's do.
func (c *coupling) spot(s *wireSpot, k float64, at int) int {
	n := len(c.ring)
	for j := range c.rings {
		r := &c.rings[j]
		if j < n {
			c.mean.plane(c.samples[at:at+len(r.sin2)], r, k)
			at += len(r.sin2)
			c.planeRow(s, r, j)
		} else {
			c.rimMeans(c.samples[at:at+2*len(r.sin2)], r)
			at += 2 * len(r.sin2)
			c.rimRow(s, j-n)
		}
	}
	c.turn(s)
	return at
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
	n, wide := len(c.ring), c.entriesRaw()
	for m := range c.modes + 1 {
		k := s.plane(r.rho, c.mean, m)
		up, down := c.row[(c.modes+m)*wide:], c.row[(c.modes-m)*wide:]
		up[j], up[n+j] = k.up[0], k.up[1]
		down[j], down[n+j] = k.down[0], k.down[1]
	}
}

// rimMeans are the modes of e^{−jkR}/R, integrated over the ring: the sums
// and the differences of wire and image.
func (c *coupling) rimMeans(samples []sample, r *ringRule) {
	sum, dif := c.mean, c.pair
	clear(sum)
	clear(dif)
	for i := range r.sin2 {
		a, b := &samples[2*i], &samples[2*i+1]
		u, v := 1/real(a.r), 1/real(b.r)
		dr, di, ir, ii := u*real(a.phasor), u*imag(a.phasor), v*real(b.phasor), v*imag(b.phasor)
		sr, si, er, ei := dr+ir, di+ii, dr-ir, di-ii
		cosine := r.cosine[i*azimuthModes:]
		cosine = cosine[:len(sum)]
		for m, cos := range cosine {
			sum[m] += complex(cos*sr, cos*si)
			dif[m] += complex(cos*er, cos*ei)
		}
	}
	scale := complex(2*math.Pi/float64(len(r.sin2)), 0)
	for m := range sum {
		sum[m] *= scale
		dif[m] *= scale
	}
}

// rimRow puts the modes of the potentials on a node of the rim into the row.
func (c *coupling) rimRow(s *wireSpot, j int) {
	wide, nodes := c.entriesRaw(), len(c.rims)
	first := 2*len(c.ring) + j
	for m := range c.modes + 1 {
		plus, minus, charge := adjacent(c.pair, m)
		upright := complex(s.uz*real(c.mean[m]), s.uz*imag(c.mean[m]))
		turn, straight := complex(s.ur*real(minus), s.ur*imag(minus)), complex(-s.uphi*imag(plus), s.uphi*real(plus))
		up, down := c.row[(c.modes+m)*wide+first:], c.row[(c.modes-m)*wide+first:]
		up[0], up[nodes], up[2*nodes] = upright, turn-straight, charge
		down[0], down[nodes], down[2*nodes] = upright, -turn-straight, charge
	}
}

// turn turns the row to the spot's azimuth: by e^{−jmφ}.
func (c *coupling) turn(s *wireSpot) {
	wide := c.entriesRaw()
	by, step := complex(1, 0), complex(s.cos, -s.sin)
	for m := 1; m <= c.modes; m++ {
		by *= step
		back := complex(real(by), -imag(by))
		up, down := c.row[(c.modes+m)*wide:(c.modes+m+1)*wide], c.row[(c.modes-m)*wide:(c.modes-m+1)*wide]
		for i := range up {
			up[i] *= by
			down[i] *= back
		}
	}
}

// project makes y of the raw entries: those beyond as they are, those of the
// rim tested.
func (c *coupling) project(m *mesh, k float64) {
	if len(c.rims) == 0 {
		c.raw, c.y = c.y, c.raw
		return
	}
	signed, wide, narrow := 2*c.modes+1, c.entriesRaw(), c.entries()
	plane, nodes := 2*len(c.ring), len(c.rims)
	c.y = cleared(c.y, m.functions*signed*narrow)
	first := c.unknown - c.rimCount()
	a, b := k*eta/(4*math.Pi), eta/(4*math.Pi*k)
	for i := range m.functions * signed {
		raw, y := c.raw[i*wide:(i+1)*wide], c.y[i*narrow:(i+1)*narrow]
		copy(y[:plane], raw)
		mode := float64(i%signed - c.modes)
		for j := range c.rims {
			n, at := &c.rims[j], &c.rings[len(c.ring)+j]
			upright, around, charge := raw[plane+j], raw[plane+nodes+j], raw[plane+2*nodes+j]
			upright *= complex(0, a*n.weight*real(at.sigma))
			around *= complex(0, a*n.weight*real(at.rho))
			charge *= complex(0, -b*n.weight)
			for _, t := range n.patch.t {
				y[plane+t.fn-first] += upright*complex(n.value[t.local], 0) + charge*complex(n.slope[t.local], 0)
			}
			for _, f := range n.patch.f {
				y[plane+f.fn-first] += (around - charge*complex(mode, 0)) * complex(n.value[f.local], 0)
			}
		}
	}
}

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
