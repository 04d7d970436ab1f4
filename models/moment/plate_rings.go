package moment

import (
	"math"
	"sync"
)

// rings integrates the kernel between two rings about the axis,
//
//	G_m = ∫₀^{2π} e^{−jkR}/R cos(mΔ) dΔ,  R² = d² + 4ρρ' sin²(Δ/2),
//
// for the modes 0 to some highest one. Radii may be complex.
type rings struct {
	k     float64
	modes int          // the highest
	g     []complex128 // G of the modes from 0 up
}

// azimuths are the nodes of a midpoint rule on the half circle.
type azimuths struct {
	sin2   []float64 // sin²(Δ/2)
	cosine []float64 // cos(mΔ), [node][azimuthModes]
}

const (
	mostHalf     = 160 // nodes of the largest rule on the half circle
	azimuthModes = 34  // modes whose cosines the rules hold
)

// midpoints are the rules by number of nodes, each made when it is first
// asked for.
var midpoints = func() (f [mostHalf + 1]func() *azimuths) {
	for n := range f {
		f[n] = sync.OnceValue(func() *azimuths { return midpoint(n) })
	}
	return f
}()

func midpoint(n int) *azimuths {
	a := new(azimuths)
	for i := range n {
		delta := math.Pi * (float64(i) + 0.5) / float64(n)
		s := math.Sin(delta / 2)
		a.sin2 = append(a.sin2, s*s)
		for m := range azimuthModes {
			a.cosine = append(a.cosine, math.Cos(float64(m)*delta))
		}
	}
	return a
}

// nearRings is the distance over radius from which the midpoint rule serves.
const nearRings = 0.4

func newRings(k float64, modes int) *rings {
	return &rings{k: k, modes: modes, g: make([]complex128, modes+1)}
}

// between fills g for the squared distance d2 of the rings' nearest points
// and the product rr of their radii.
func (r *rings) between(d2, rr complex128) {
	clear(r.g)
	size := math.Sqrt(size2(rr))
	near := math.Sqrt(math.Sqrt(size2(d2)) / max(size, 1e-300))
	if near > nearRings {
		// The integrand's singularity lies acosh(1 + d²/2ρρ') off the real line.
		decay := math.Acosh(1 + near*near/2*math.Cos(slantTurn))
		n := int(math.Ceil((18/decay+float64(r.modes))/2 + r.k*math.Sqrt(size)))
		n = min(max(n, 6), mostHalf)
		a := midpoints[n]()
		weight := 2 * math.Pi / float64(n)
		for i, s := range a.sin2 {
			r.add(d2+rr*complex(4*s, 0), weight, a.cosine[i*azimuthModes:])
		}
		return
	}
	r.close(d2, rr, near)
}

func size2(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }

// close spreads nodes from Δ = 0 by Δ = |δ| sinh v, δ² = d²/ρρ', and goes on in
// plain panels.
func (r *rings) close(d2, rr complex128, near float64) {
	waves := float64(r.modes) + r.k*math.Sqrt(math.Sqrt(size2(rr)))
	panel := min(math.Pi, 4/(1+waves))
	near = max(near, 1e-12)
	top := math.Asinh(panel / near)
	g := &legendre[22]
	for i, t := range g.x {
		v := top * (t + 1) / 2
		r.node(d2, rr, near*math.Sinh(v), g.w[i]*top/2*near*math.Cosh(v))
	}
	g = &legendre[10]
	count := math.Ceil((math.Pi - panel) / panel)
	for p := range int(count) {
		width := (math.Pi - panel) / count
		for i, t := range g.x {
			r.node(d2, rr, panel+width*(float64(p)+(t+1)/2), g.w[i]*width/2)
		}
	}
}

// node adds the azimuth Δ with its weight on the half circle.
func (r *rings) node(d2, rr complex128, delta, weight float64) {
	s, c := math.Sincos(delta / 2)
	re, im := r.kernel(d2 + rr*complex(4*s*s, 0))
	re, im = re*2*weight, im*2*weight
	// cos(mΔ) by its recurrence.
	cos, before, twice := 1.0, c*c-s*s, 2*(c*c-s*s)
	for m := range r.g {
		r.g[m] += complex(re*cos, im*cos)
		cos, before = twice*cos-before, cos
	}
}

// add adds a node whose cosines are known.
func (r *rings) add(r2 complex128, weight float64, cosine []float64) {
	re, im := r.kernel(r2)
	re, im = re*weight, im*weight
	for m := range r.g {
		r.g[m] += complex(re*cosine[m], im*cosine[m])
	}
}

// kernel is e^{−jkR}/R for a squared distance.
func (r *rings) kernel(r2 complex128) (re, im float64) {
	x, y := root(real(r2), imag(r2))
	pr, pi := wavelet(r.k, x, y)
	s := 1 / (x*x + y*y)
	// Divided by x + jy.
	return (pr*x + pi*y) * s, (pi*x - pr*y) * s
}

// root is the square root of re + j·im with a real part from zero.
func root(re, im float64) (x, y float64) {
	if im == 0 && re >= 0 {
		return math.Sqrt(re), 0
	}
	size := math.Sqrt(re*re + im*im)
	if re >= 0 {
		x = math.Sqrt((size + re) / 2)
		return x, im / (2 * x)
	}
	y = math.Copysign(math.Sqrt((size-re)/2), im)
	return im / (2 * y), y
}

// wavelet is e^{−jk(x + jy)}.
func wavelet(k, x, y float64) (re, im float64) {
	c, s := unit(k * x)
	if y == 0 {
		return c, -s
	}
	e := math.Exp(k * y)
	return e * c, -e * s
}
