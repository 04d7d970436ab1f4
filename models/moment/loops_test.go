package moment

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
)

// loop is a closed circle in the xy plane, joined to itself at φ = 0, with
// a gap at φ = π.
func loop(radius, wire float64, elements int, gap float64) *Antenna {
	return &Antenna{
		Wires: []Wire{{
			Curve: Arc{U: r3.Vec{X: 1}, V: r3.Vec{Y: 1}, Radius: radius},
			To:    2 * math.Pi, Radius: wire, Elements: elements,
		}},
		Ports: []Port{{At: math.Pi, Gap: gap}},
	}
}

// halves is the same of two half circles, the gap in the middle of the one.
func halves(radius, wire float64, elements int, gap float64) *Antenna {
	a := loop(radius, wire, elements, gap)
	first := a.Wires[0]
	first.From, first.To, first.Elements = math.Pi/2, 3*math.Pi/2, elements/2
	second := first
	second.From, second.To = -math.Pi/2, math.Pi/2
	a.Wires = []Wire{first, second}
	return a
}

// Any antenna text: a small loop has R = 20π²C⁴ and L = μ₀b(ln(8b/a) − 2),
// both in the limit of small circumference C (in wavelengths). The next term
// is of the order of C²; at C = 0.05 the resistance is about 1.03 times that
// (the Fourier series below says 1.025 for this conductor).
func TestSmallLoop(t *testing.T) {
	const over, gap = 100, 0.3 // loop's radius over the conductor's; rad
	tests := []struct{ c, resistance, inductance float64 }{
		{0.05, 0.035, 0.01},
		{0.02, 0.006, 0.002},
		{0.01, 0.002, 0.001},
	}
	for _, tt := range tests {
		b := tt.c / (2 * math.Pi)
		solve(t, loop(b, b/over, 24, gap*b), Fine, func(s *Solution) {
			z := 1 / s.Admittance(0, 0)
			r := real(z) / (20 * math.Pow(math.Pi, 2) * math.Pow(tt.c, 4))
			l := imag(z) / (eta * 2 * math.Pi * b * (math.Log(8*over) - 2))
			exact := 1 / fourier(tt.c, 2*math.Log(2*math.Pi*over), 60).admittance(gap)
			t.Logf("C = %g: R %.5f, L %.5f of the small loop's; the series' impedance is %.4f, %.4f of ours", tt.c, r, l, real(exact)/real(z), imag(exact)/imag(z))
			if math.Abs(r-1) > tt.resistance || math.Abs(l-1) > tt.inductance {
				t.Errorf("C = %g: R %.5f, L %.5f of the small loop's; 1 ± %g and 1 ± %g are due", tt.c, r, l, tt.resistance, tt.inductance)
			}
			if math.Abs(real(exact)/real(z)-1) > 0.002 || math.Abs(imag(exact)/imag(z)-1) > 0.001 {
				t.Errorf("C = %g: %.6g Ω; the series gives %.6g", tt.c, z, exact)
			}
		}, metreWave)
	}
}

// series is the circular loop's current as a Fourier series (Storer, Trans.
// AIEE 75, 606, 1956; Wu, J. Math. Phys. 3, 1301, 1962), for a loop of
// circumference kb wavelengths and Ω = 2 ln(2πb/a):
//
//	I(φ) = V/(jπη)·Σ s_n e^{jnφ}/a_n,  a_n = (kb/2)(K_{n+1} + K_{n−1}) − (n²/kb)·K_n,
//
// with K_n the Fourier coefficients of b·e^{−jkR}/R averaged around the
// conductor and s_n those of a voltage spread evenly over an angle.
type series struct {
	kb float64
	a  []complex128 // from n = 0
}

func fourier(kb, omega float64, terms int) series {
	ratio := 2 * math.Pi * math.Exp(-omega/2) // a/b
	k := make([]complex128, terms+2)
	// θ = π t³ softens the logarithm at 0; panels keep up with cos nθ.
	const panels, nodes, around = 200, 10, 24
	g := &legendre[nodes]
	for p := range panels {
		for i, x := range g.x {
			t := (float64(p) + (x+1)/2) / panels
			theta := math.Pi * t * t * t
			w := g.w[i] / 2 / panels * 3 * math.Pi * t * t / math.Pi
			v := kernelAround(kb, 2*math.Sin(theta/2), ratio, around)
			for n := range k {
				k[n] += complex(w*math.Cos(float64(n)*theta), 0) * v
			}
		}
	}
	s := series{kb: kb}
	for n := range terms + 1 {
		below := k[1]
		if n > 0 {
			below = k[n-1]
		}
		s.a = append(s.a, complex(kb/2, 0)*(k[n+1]+below)-complex(float64(n*n)/kb, 0)*k[n])
	}
	return s
}

// kernelAround is the mean of e^{−jkR}/R, R² = d² + 4a² sin²(ψ/2), around the
// conductor, lengths by b: that of 1/R by the arithmetic-geometric mean.
func kernelAround(kb, d, a float64, nodes int) complex128 {
	x, y := math.Hypot(d, 2*a), d
	for math.Abs(x-y) > 1e-15*x {
		x, y = (x+y)/2, math.Sqrt(x*y)
	}
	sum := complex(1/x, 0)
	for i := range nodes {
		r := math.Hypot(d, 2*a*math.Sin(math.Pi*(float64(i)+0.5)/float64(nodes)))
		sum += (cmplx.Exp(complex(0, -kb*r)) - 1) / complex(r*float64(nodes), 0)
	}
	return sum
}

// spreadOver is s_n for a voltage spread over an angle.
func spreadOver(n int, angle float64) complex128 {
	if n == 0 || angle == 0 {
		return 1
	}
	x := float64(n) * angle / 2
	return complex(math.Sin(x)/x, 0)
}

// admittance is the mean current of the gap at 1 V.
func (s series) admittance(angle float64) (y complex128) {
	for n, a := range s.a {
		w := spreadOver(n, angle)
		if n > 0 {
			w *= 2
		}
		y += w * spreadOver(n, angle) / a
	}
	return y / complex(0, math.Pi*eta)
}

// directivity is that on the axis, where only n = ±1 radiates: there
// N_y = π b·I_1, I_1 the amplitude of cos φ.
func (s series) directivity(angle float64) float64 {
	first := 2 * spreadOver(1, angle) / s.a[1] / complex(0, math.Pi*eta)
	n := cmplx.Abs(first) * math.Pi * s.kb // times k
	intensity := eta / (32 * math.Pi * math.Pi) * n * n
	return 4 * math.Pi * intensity / (real(s.admittance(angle)) / 2)
}

// The series itself against its printed-digit values for n ≤ 20 terms and a
// gap of no width, where it does not converge (evaluated from the papers'
// closed form).
func TestLoopSeriesIsTheOneMeant(t *testing.T) {
	for omega, want := range map[float64]complex128{10: 105.4 - 95.2i, 12: 116.4 - 94.5i, 15: 123.0 - 93.5i} {
		if z := 1 / fourier(1, omega, 20).admittance(0); cmplx.Abs(z-want) > 0.08 {
			t.Errorf("kb = 1, Ω = %g: %.2f Ω; %.1f is due", omega, z, want)
		}
	}
	for omega, want := range map[float64]float64{10: 3.41, 12: 3.44} {
		if d := decibels(fourier(1, omega, 20).directivity(0)); math.Abs(d-want) > 0.006 {
			t.Errorf("kb = 1, Ω = %g: %.3f dB on the axis; %.2f is due", omega, d, want)
		}
	}
}

// The series shares no code with the method of moments. Both have the same
// finite gap, wide enough for the mesh to see it.
func TestLoopAgreesWithItsSeries(t *testing.T) {
	const gap, elements = 0.3, 36
	shapes := map[string]func(radius, wire float64, elements int, gap float64) *Antenna{"one closed wire": loop, "two half circles": halves}
	for _, kb := range []float64{1, 1.1, 2} {
		for _, omega := range []float64{10, 12} {
			f := fourier(kb, omega, 120)
			impedance, directivity := 1/f.admittance(gap), decibels(f.directivity(gap))
			b := kb / (2 * math.Pi)
			for name, shape := range shapes {
				solve(t, shape(b, b*2*math.Pi*math.Exp(-omega/2), elements, gap*b), Fine, func(s *Solution) {
					z, d := 1/s.Admittance(0, 0), decibels(s.Directivity(0, 0))
					t.Logf("kb = %g, Ω = %g, %s: %.2f Ω, %.4f dB; series %.2f Ω, %.4f dB", kb, omega, name, z, d, impedance, directivity)
					if apart(z, impedance) > 0.015 {
						t.Errorf("kb = %g, Ω = %g, %s: %.2f Ω; the series gives %.2f", kb, omega, name, z, impedance)
					}
					if math.Abs(d-directivity) > 0.02 {
						t.Errorf("kb = %g, Ω = %g, %s: %.3f dB on the axis; the series gives %.3f", kb, omega, name, d, directivity)
					}
				}, metreWave)
			}
		}
	}
}
