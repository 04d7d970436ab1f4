package moment

import (
	"math"
	"math/cmplx"
)

// The meridian is the plate's cross-section on one side of the axis, and the
// plane's beyond its edge: disc, rim and beyond, each with a parameter u that
// runs over its elements, one unit an element. In mode m of the azimuth the
// current is
//
//	J = (t̂ T/ρ + jφ̂ F/σ) e^{jmφ},   σ = ds/du,
//
// with T and F splines in u. Its charge is (dT/du − mF)/(ρσ). On the plate F is
// of one degree less, as dT/du is, so that the currents without charge are
// among the functions: of equal degrees some are only nearly there, and their
// small charges resonate where nothing else does. The parameter crowds towards
// edges as the square root of the distance does, so that currents that go
// there as that root or its inverse are splines as well.

// reach is how the meridian goes on beyond the edge.
const (
	slantTurn  = 66 * math.Pi / 180 // α
	slantWaves = 2.2                // length, wavelengths
	slantGrow  = 3.0                // ln of how much finer it starts than it ends
)

// part is a piece of the meridian.
type part int

const (
	disc part = iota
	rim
	beyond
)

// patch is an element of the meridian.
type patch struct {
	part         part
	at           int            // element of the part, whose parameter is at + (x + 1)/2
	value, slope [maxOrder]poly // of T
	flow         [maxOrder]poly // of F
	t, f         []term
	tips         [3]place
}

// splineValues are an element's splines at a point.
type splineValues struct {
	value, slope [maxOrder]float64 // of T, and its derivative by u
	flow         [maxOrder]float64 // of F
}

// values are the splines at the local coordinate x.
func (p *patch) values(x float64, degree int) (v splineValues) {
	for l := range degree + 1 {
		v.value[l], v.slope[l] = p.value[l].at(x, degree+1), 2*p.slope[l].at(x, degree+1)
		v.flow[l] = p.flow[l].at(x, degree+1)
	}
	return v
}

// term is a function's part on an element: its number and the spline.
type term struct{ fn, local int }

// place is a point of the meridian.
type place struct {
	rho, sigma complex128 // radius; ds/du
	z          float64
	sin, cos   float64 // of the angle from the axis to the meridian's direction
}

// meridian is a plate's mesh for frequencies up to one.
type meridian struct {
	plate   Plate
	degree  int
	parts   [3]int // elements of each part
	slant   complex128
	patches []patch
	unknown int // functions of the plate's own; those beyond follow
	count   int
	axial   int       // function of F on the axis, which only m = 1 has
	around  []bool    // of each function: F
	ring    []float64 // parameters beyond of the rings that take the plane's current
	turns   []int     // entries of y whose sign turns with the mode's
}

func (s *settings) meridian(p Plate, k float64) *meridian {
	wave := 2 * math.Pi / k
	m := &meridian{plate: p, degree: s.degree, slant: cmplx.Rect(slantWaves*wave, -slantTurn)}
	m.parts[disc] = 1 + int(math.Ceil(s.wave*p.Radius/wave*math.Pi/2))
	if p.Rim > 0 {
		m.parts[rim] = 1 + int(math.Ceil(s.wave*p.Rim/wave*math.Pi/2))
	}
	m.parts[beyond] = s.beyond
	for p := range m.parts {
		for e := range m.parts[p] {
			q := patch{part: part(p), at: e, value: splines(m.parts[p], e, m.degree)}
			q.flow = splines(m.parts[p], e, m.flow(part(p)))
			for i := range q.slope {
				q.slope[i] = q.value[i].slope()
			}
			for i, x := range [3]float64{-1, 0, 1} {
				q.tips[i] = m.place(part(p), float64(e)+(x+1)/2)
			}
			m.patches = append(m.patches, q)
		}
	}
	m.number()
	n := m.parts[beyond]
	for i := range n + m.degree {
		m.ring = append(m.ring, greville(n, i, m.degree))
	}
	m.turns = m.azimuthal()
	return m
}

// flow is the degree of F. Beyond the edge, where nothing is unknown and so
// nothing resonates, it shares its rings with T.
func (m *meridian) flow(p part) int {
	if p == beyond {
		return m.degree
	}
	return m.degree - 1
}

// greville is the mean of the inner knots of spline i.
func greville(n, i, degree int) float64 {
	sum := 0
	for j := i + 1; j <= i+degree; j++ {
		sum += min(max(j-degree, 0), n)
	}
	return float64(sum) / float64(degree)
}

// place is the point of a part with parameter u.
func (m *meridian) place(p part, u float64) place {
	n := float64(m.parts[p])
	switch p {
	case disc:
		psi := math.Pi / 2 * u / n
		sin, cos := math.Sincos(psi)
		return place{rho: complex(m.plate.Radius*sin, 0), sigma: complex(m.plate.Radius*cos*math.Pi/2/n, 0), sin: 1}
	case rim:
		psi := math.Pi * u / n
		sin, cos := math.Sincos(psi)
		h := m.plate.Rim / 2
		return place{rho: complex(m.plate.Radius, 0), sigma: complex(h*sin*math.Pi/n, 0), z: h * (1 - cos), cos: 1}
	}
	// Wires close to the edge, or in the middle of a small plate, want it fine
	// there; along the waves that die away it may be coarse.
	scale, grown := m.slant/complex(math.Expm1(slantGrow), 0), slantGrow*u/n
	return place{
		rho:   complex(m.plate.Radius, 0) + scale*complex(math.Expm1(grown), 0),
		sigma: scale * complex(slantGrow/n*math.Exp(grown), 0),
		sin:   1,
	}
}

// number gives the functions their numbers: the plate's T and F, then those
// beyond. T is zero on the axis and at a rim's top; where disc, rim and beyond
// meet it has two functions, disc into rim, which is unknown, and disc into
// beyond, which the plane's current there determines.
func (m *meridian) number() {
	next, edge := 0, &m.patches[m.parts[disc]-1]
	first := 0
	for p, n := range m.parts {
		if part(p) == beyond {
			m.unknown = next
		}
		patches := m.patches[first : first+n]
		first += n
		if n == 0 {
			continue
		}
		last := n + m.degree - 1
		for i := range n + m.degree {
			if i == last || part(p) == disc && i == 0 {
				continue
			}
			if part(p) != disc && i == 0 {
				edge.t = append(edge.t, term{next, m.degree})
			}
			lay(patches, i, m.degree, func(q *patch, local int) { q.t = append(q.t, term{next, local}) })
			m.around = append(m.around, false)
			next++
		}
		flow := m.flow(part(p))
		for i := range n + flow {
			if part(p) == disc && i == 0 {
				m.axial = next
			}
			lay(patches, i, flow, func(q *patch, local int) { q.f = append(q.f, term{next, local}) })
			m.around = append(m.around, true)
			next++
		}
	}
	m.count = next
}

// azimuthal lists the entries of y whose sign turns with the mode's: the
// azimuthal current on the rings beyond and the rim's functions F.
func (m *meridian) azimuthal() (turns []int) {
	n := len(m.ring)
	for i := range n {
		turns = append(turns, n+i)
	}
	for i := m.unknown - m.rimCount(); i < m.unknown; i++ {
		if m.around[i] {
			turns = append(turns, 2*n+i-(m.unknown-m.rimCount()))
		}
	}
	return turns
}

// lay visits the elements on which spline i is not zero.
func lay(patches []patch, i, degree int, do func(q *patch, local int)) {
	for e := max(0, i-degree); e <= min(i, len(patches)-1); e++ {
		do(&patches[e], i-e)
	}
}
