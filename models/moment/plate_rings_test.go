package moment

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mathext"
	"pgregory.net/rapid"
)

// halfToroidal are the Legendre functions of the second kind Q_{m−1/2}(χ), by
// their recurrence downwards (m + ½)Q_{m+1/2} = 2mχ Q_{m−1/2} − (m − ½)Q_{m−3/2},
// of which they are the solution that dies away; the scale is the complete
// elliptic integral K in Q_{−1/2} = √μ K(μ), μ = 2/(χ + 1).
func halfToroidal(chi float64, count int) []float64 {
	q := make([]float64, count+1)
	next, at := 0.0, 1e-300
	for m := count + int(60/math.Acosh(chi)); m > 0; m-- {
		next, at = at, (4*float64(m)*chi*at-float64(2*m+1)*next)/float64(2*m-1)
		if m <= count+1 {
			q[m-1] = at
		}
		if at > 1e200 {
			next, at = next*1e-250, at*1e-250
			for i := range q {
				q[i] *= 1e-250
			}
		}
	}
	mu := 2 / (chi + 1)
	scale := math.Sqrt(mu) * mathext.CompleteK(mu) / q[0]
	for m := range q {
		q[m] *= scale
	}
	return q
}

// The recurrence meets Q_{1/2} = χ√μ K(μ) − √(2(χ+1)) E(μ).
func TestHalfToroidal(t *testing.T) {
	for _, chi := range []float64{1.0001, 1.01, 1.3, 3, 20} {
		mu := 2 / (chi + 1)
		want := chi*math.Sqrt(mu)*mathext.CompleteK(mu) - math.Sqrt(2*(chi+1))*mathext.CompleteE(mu)
		if got := halfToroidal(chi, 4)[1]; math.Abs(got/want-1) > 1e-9 {
			t.Errorf("χ = %g: %.12g; %.12g is due", chi, got, want)
		}
	}
}

// Without phase G_m is 2/√(ρρ') Q_{m−1/2}(1 + d²/2ρρ'), by either of the
// rules, and between rings that all but touch.
func TestStaticRings(t *testing.T) {
	const modes = 12
	r := newRings(0, modes)
	for _, d := range []float64{1e-4, 0.01, 0.1, 0.39, 0.41, 1, 5} {
		for _, rr := range []float64{0.04, 1, 30} {
			r.between(complex(d*d*rr, 0), complex(rr, 0))
			q := halfToroidal(1+d*d/2, modes)
			for m := range r.g {
				want := 2 / math.Sqrt(rr) * q[m]
				if miss := cmplx.Abs(r.g[m]-complex(want, 0)) / (2 / math.Sqrt(rr) * q[0]); miss > 1e-8 {
					t.Errorf("d²/ρρ' = %g, ρρ' = %g, mode %d: %.12g; %.12g is due", d*d, rr, m, r.g[m], want)
				}
			}
		}
	}
}

// plainRings is G_m of some modes by panels that halve towards Δ = 0.
func plainRings(k float64, d2, rr complex128, modes ...int) []complex128 {
	const nodes, parts = 20, 3
	var x, w [nodes]float64
	quad.Legendre{}.FixedLocations(x[:], w[:], 0, 1)
	g := make([]complex128, len(modes))
	panel := func(from, width float64) {
		for i := range x {
			delta := from + width*x[i]
			s := math.Sin(delta / 2)
			r := cmplx.Sqrt(d2 + rr*complex(4*s*s, 0))
			kernel := cmplx.Exp(complex(0, -k)*r) / r * complex(2*w[i]*width, 0)
			for j, m := range modes {
				g[j] += kernel * complex(math.Cos(float64(m)*delta), 0)
			}
		}
	}
	to := math.Pi
	for ; to > 1e-8; to /= 2 {
		for p := range parts {
			panel(to/2*(1+float64(p)/parts), to/2/parts)
		}
	}
	panel(0, to)
	return g
}

// Rings of a plate's meridian, disc, rim and the slanting radii beyond, in
// all distances, against plain quadrature.
func TestRings(t *testing.T) {
	set, _ := Standard.settings()
	const k = 2 * math.Pi
	worst := 0.0
	rapid.Check(t, func(rt *rapid.T) {
		num := func(name string, lo, hi float64) float64 { return rapid.Float64Range(lo, hi).Draw(rt, name) }
		m := set.meridian(Plate{Radius: math.Exp(num("log of the radius", -3, 1)), Rim: 0.3}, k)
		at := func(name string) place {
			p := rapid.SampledFrom([]part{disc, rim, beyond}).Draw(rt, name)
			return m.place(p, num(name+"'s parameter", 0.02, 1)*float64(m.parts[p]))
		}
		a := at("one")
		b := at("other")
		if rapid.Bool().Draw(rt, "close") {
			b = a
			b.rho *= complex(1+math.Exp(num("log of the distance", -16, -1)), 0)
		}
		d := a.rho - b.rho
		d2, rr := d*d+complex((a.z-b.z)*(a.z-b.z), 0), a.rho*b.rho
		if size2(d2) < 1e-28*size2(rr) {
			return // closer than any two nodes of two patches
		}
		modes := rapid.IntRange(1, 13).Draw(rt, "modes")
		r := newRings(k, modes)
		r.between(d2, rr)
		asked := []int{0, modes / 2, modes}
		plain := plainRings(k, d2, rr, asked...)
		// Rings that all but touch on the slanting radii have the singularity
		// beside the sinh's nodes; few nodes of the plate's rules are so close.
		most := 1e-5
		if size2(d2) < 1e-4*size2(rr) {
			most = 3e-3
		}
		for i, m := range asked {
			miss := cmplx.Abs(r.g[m]-plain[i]) / cmplx.Abs(plain[0])
			worst = max(worst, miss)
			if miss > most {
				rt.Fatalf("mode %d of %d: %.9g; %.9g is due, off by %.2g", m, modes, r.g[m], plain[i], miss)
			}
		}
	})
	t.Logf("off by %.2g of mode 0 at the worst", worst)
}
