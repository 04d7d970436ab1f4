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
	widest  float64   // largest radius of a spot
	value   []float64 // of the element's functions at each spot, weight included
	slope   []float64 // and of their derivatives
	rims    []rimNode
	rings   []ringRule // of each ring beyond, then of each node of the rim
	samples []sample   // [spot][ring][azimuth], two on the rim: wire and image

	mean, pair means        // modes of one spot and ring
	row        []complex128 // of one spot: [signed mode][raw entry]
	raw        []complex128 // [function][signed mode][raw entry]
	y          []complex128 // [function][signed mode][entry]
	back       []complex128 // s y of a function, turned: [function][−mode][entry]
}

// ringRule is a ring and the midpoint rule on it.
type ringRule struct {
	place
	*azimuths
}

// sample is a pair of a spot, or its image, and a point of a ring: the
// distance R, e^{−jkR} and the latter's step in frequency.
type sample struct{ r, phasor, step complex128 }

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

// survey lays the spots and takes as many modes as the antenna needs at the
// highest wave number k; it is short of them where even the last level is.
func (c *coupling) survey(m *mesh, mer *meridian, k float64) (short bool) {
	c.meridian = mer
	c.lay(m)
	edge := mer.place(beyond, 0)
	decay := math.Inf(1)
	c.widest = 0
	for i := range c.spots {
		s := &c.spots[i]
		decay = min(decay, s.decay(&edge))
		if mer.parts[rim] > 0 && s.z < mer.plate.Rim {
			decay = min(decay, s.decay(&place{rho: edge.rho, z: s.z}))
		}
		c.widest = max(c.widest, s.rho)
	}
	need := max(modeLoss/2/decay, 2+k*min(c.widest, mer.plate.Radius))
	for _, c.modes = range modeLevels {
		if float64(c.modes) >= need {
			return false
		}
	}
	return true
}

// prepare does what does not depend on frequency: rules, distances, and the
// phasors at the first wave number and their step (0: none).
func (c *coupling) prepare(set *settings, k, highest, step float64) {
	c.lines(set)
	for i := range c.rings {
		r := &c.rings[i]
		decay := math.Inf(1)
		for j := range c.spots {
			decay = min(decay, c.spots[j].decay(&r.place))
		}
		around := float64(c.modes) + max(azimuthLoss/decay, 6+2*highest*c.widest)
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
	c.mean, c.pair = cleared(c.mean, c.modes+2), cleared(c.pair, c.modes+2)
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
			n := rimNode{patch: p, weight: g.w[j] / 2, splineValues: p.values(x, c.degree)}
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

// rawEntries is how many numbers a spot sends in each mode.
func (c *coupling) rawEntries() int { return 2*len(c.ring) + 3*len(c.rims) }

// send computes y of all functions at wave number k.
func (c *coupling) send(m *mesh, k float64) {
	signed, wide := 2*c.modes+1, c.rawEntries()
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
	wide, charges := c.rawEntries(), len(c.rims)
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

// turn turns the row to the spot's azimuth: by e^{−jmφ}.
func (c *coupling) turn(s *wireSpot) {
	wide := c.rawEntries()
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
