package moment

import (
	"math"
	"math/cmplx"
	"testing"
)

// filament is a dipole of two joined arms, so that the current's slope may
// jump in the middle, with its sinusoid sin k(l/2 − |z|) imposed: at 1e-7
// wavelengths of radius, it is a filament to all digits here.
type filament struct {
	*work
	z, current []complex128
}

func sinusoid(t *testing.T, length float64, places ...float64) filament {
	const radius, elements = 1e-7, 10
	a := new(Antenna)
	for _, x := range places {
		a.Wires = append(a.Wires, upright(x, -length/2, 0, radius, elements), upright(x, 0, length/2, radius, elements))
	}
	f := filament{}
	f.work, f.z = prepared(t, a, Fine, metreWave, false)
	f.current = f.of(t, length, 0)
	carry(f.work, f.current)
	return f
}

// of is the sinusoid on dipole i alone.
func (f *filament) of(t *testing.T, length float64, i int) []complex128 {
	return imposed(t, f.work, func(wire int, s float64) float64 {
		if wire/2 != i {
			return 0
		}
		if wire%2 == 1 {
			s = length/2 - s
		}
		return math.Sin(2 * math.Pi * s)
	})
}

// power is ½ Re(Iᴴ Z I) for a real current.
func (f *filament) power() float64 { return real(reaction(f.z, f.current, f.current)) / 2 }

func (f *filament) directivity(theta float64) float64 {
	return 4 * math.Pi * total(f.intensity(toward(theta, 0))) / f.power()
}

// beamwidth is the half-power angle about the broadside, degrees.
func (f *filament) beamwidth() float64 {
	half := f.directivity(math.Pi/2) / 2
	lo, hi := 0.0, math.Pi/2
	for range 40 {
		if mid := (lo + hi) / 2; f.directivity(math.Pi/2-mid) > half {
			lo = mid
		} else {
			hi = mid
		}
	}
	return 2 * lo * 180 / math.Pi
}

// Any antenna text: sinusoidal currents on straight filaments. The tolerance
// of 0.01 % is the printed digits' and the rules'.
func TestSinusoidalCurrentDirectivity(t *testing.T) {
	tests := []struct {
		name            string
		length          float64
		directivity     float64
		beamwidth       float64 // degrees; the infinitesimal dipole's sin θ: 90°
		within, degrees float64
	}{
		{"half-wave", 0.5, 1.64092, 78.08, 1e-4, 0.01},
		{"full-wave", 1, 2.41100, 47.84, 1e-4, 0.01},
		{"infinitesimal", 1e-3, 1.5, 90, 1e-4, 0.01},
	}
	for _, tt := range tests {
		f := sinusoid(t, tt.length, 0)
		d, b := f.directivity(math.Pi/2), f.beamwidth()
		t.Logf("%s: directivity %.6f, beamwidth %.3f°", tt.name, d, b)
		if math.Abs(d/tt.directivity-1) > tt.within {
			t.Errorf("%s: directivity %.6f; %g is due", tt.name, d, tt.directivity)
		}
		if math.Abs(b-tt.beamwidth) > tt.degrees {
			t.Errorf("%s: beamwidth %.3f°; %g° is due", tt.name, b, tt.beamwidth)
		}
	}
}

// The induced-EMF impedance of the half-wave filament in terms of sine and
// cosine integrals, any antenna text: 73.1 + j42.5 Ω. Its closed form,
// (η/4π)·[Cin(2π) + j Si(2π)], carries more digits.
func TestSinusoidalCurrentImpedance(t *testing.T) {
	f := sinusoid(t, 0.5, 0)
	got := reaction(f.z, f.current, f.current)
	want := complex(eta/(4*math.Pi), 0) * complex(cosineIntegral(2*math.Pi), sineIntegral(2*math.Pi))
	t.Logf("half-wave: %.4f Ω, closed form %.4f Ω", got, want)
	if math.Abs(real(want)-73.1) > 0.05 || math.Abs(imag(want)-42.5) > 0.05 {
		t.Fatalf("closed form %.4f Ω; the texts print 73.1 + j42.5", want)
	}
	if apart(got, want) > 1e-4 {
		t.Errorf("half-wave: %.4f Ω; %.4f is due", got, want)
	}
}

// sineIntegral is Si(x) by its series.
func sineIntegral(x float64) float64 {
	sum, term := 0.0, x
	for n := 1; n < 80; n += 2 {
		sum += term / float64(n)
		term *= -x * x / float64((n+1)*(n+2))
	}
	return sum
}

// cosineIntegral is Cin(x) = ∫ (1 − cos t)/t dt from 0 by its series.
func cosineIntegral(x float64) float64 {
	sum, term := 0.0, x*x/2
	for n := 2; n < 80; n += 2 {
		sum += term / float64(n)
		term *= -x * x / float64((n+1)*(n+2))
	}
	return sum
}

// Carter, Proc. IRE 20, 1004, 1932: mutual impedance of side-by-side
// half-wave dipoles; values evaluated from his closed form, to two decimals.
func TestMutualImpedanceOfDipoles(t *testing.T) {
	tests := []struct {
		distance float64
		want     complex128
	}{
		{0.1, 67.29 + 7.53i},
		{0.25, 40.76 - 28.33i},
		{0.5, -12.52 - 29.91i},
		{1, 4.01 + 17.73i},
	}
	for _, tt := range tests {
		f := sinusoid(t, 0.5, 0, tt.distance)
		got := reaction(f.z, f.current, f.of(t, 0.5, 1))
		t.Logf("d = %g: %.4f Ω", tt.distance, got)
		// 0.01 % of the self-impedance, and the printed rounding.
		if cmplx.Abs(got-tt.want) > 0.0085+0.0071 {
			t.Errorf("d = %g: %.4f Ω; %.2f is due", tt.distance, got, tt.want)
		}
	}
}

// thinner are conductor radii in wavelengths, thinner and thinner.
var thinner = [...]float64{1e-3, 1e-4, 1e-6, 1e-9}

// approach reads a quantity of a full solve at ever thinner conductors and
// gives where a straight line in 1/ln(1/a) through the last two meets 0.
func approach(read func(radius float64) float64) (values [len(thinner)]float64, limit float64) {
	for i, a := range thinner {
		values[i] = read(a)
	}
	n := len(thinner)
	x, y := 1/math.Log(1/thinner[n-2]), 1/math.Log(1/thinner[n-1])
	u, v := values[n-2], values[n-1]
	return values, v - (u-v)/(x-y)*y
}

// A conductor's current tends to the sinusoid as 1/ln(1/a) only, so the
// limit is met by a straight line: within 0.3 % in directivity and 3 % in
// impedance, which the term in 1/ln² leaves.
func TestSolveTendsToTheSinusoid(t *testing.T) {
	half := eta / (4 * math.Pi)
	at := func(length float64, read func(*Solution) float64) func(float64) float64 {
		return func(radius float64) (v float64) {
			a := &Antenna{
				Wires: []Wire{upright(0, -length/2, length/2, radius, 24)},
				Ports: []Port{{At: 0.5, Gap: 0.01}},
			}
			solve(t, a, Fine, func(s *Solution) { v = read(s) }, metreWave)
			return v
		}
	}
	broadside := func(s *Solution) float64 { return s.Directivity(math.Pi/2, 0) }
	tests := []struct {
		name   string
		read   func(float64) float64
		limit  float64
		within float64
	}{
		{"half-wave directivity", at(0.5, broadside), 1.64092, 0.003},
		{"full-wave directivity", at(1, broadside), 2.41100, 0.003},
		{"half-wave resistance", at(0.5, func(s *Solution) float64 { return real(1 / s.Admittance(0, 0)) }), half * cosineIntegral(2*math.Pi), 0.03},
		{"half-wave reactance", at(0.5, func(s *Solution) float64 { return imag(1 / s.Admittance(0, 0)) }), half * sineIntegral(2*math.Pi), 0.03},
	}
	for _, tt := range tests {
		values, limit := approach(tt.read)
		t.Logf("%s: %.5g → %.5g, filament %.5g", tt.name, values, limit, tt.limit)
		for i, v := range values {
			if v <= tt.limit || i > 0 && v >= values[i-1] {
				t.Errorf("%s: %.5g; a fall towards %.5g is due", tt.name, values, tt.limit)
				break
			}
		}
		if math.Abs(limit/tt.limit-1) > tt.within {
			t.Errorf("%s: tends to %.5g; %.5g is due", tt.name, limit, tt.limit)
		}
	}
}

// Image theorem: with each half of the dipole's gap a port, the monopole has
// half the impedance and twice the directivity (3.01 dB) to rounding.
func TestMonopoleIsHalfADipole(t *testing.T) {
	const height, radius, gap, elements = 0.24, 0.003, 0.01, 5
	port := Port{At: gap / 2 / height, Gap: gap}
	other := port
	other.Wire = 1
	monopole := &Antenna{Plane: true, Wires: []Wire{upright(0, 0, height, radius, elements)}, Ports: []Port{port}}
	dipole := &Antenna{
		Wires: []Wire{upright(0, 0, height, radius, elements), upright(0, 0, -height, radius, elements)},
		Ports: []Port{port, other},
	}
	theta := [...]float64{0.3, 0.9, math.Pi / 2}
	for _, f := range []Fidelity{Draft, Standard, Fine} {
		var half, whole complex128
		var above, around [len(theta)]float64
		solve(t, monopole, f, func(s *Solution) {
			half = 1 / s.Admittance(0, 0)
			for i, a := range theta {
				above[i] = s.Directivity(a, 1)
			}
		}, metreWave)
		solve(t, dipole, f, func(s *Solution) {
			// The second arm runs downwards: 2 V across both are 1 and −1 V.
			s.Drive(1, -1)
			whole = 2 / (s.Admittance(0, 0) - s.Admittance(0, 1))
			for i, a := range theta {
				around[i] = s.Directivity(a, 1)
			}
		}, metreWave)
		if e := apart(whole, 2*half); e > 1e-12 {
			t.Errorf("%s: dipole %.6f Ω, monopole %.6f Ω: off from twice by %.2g", f, whole, half, e)
		}
		for i, a := range theta {
			if e := math.Abs(above[i]/around[i]/2 - 1); e > 1e-12 {
				t.Errorf("%s, θ = %g: directivities %.6f and %.6f: off from twice by %.2g", f, a, above[i], around[i], e)
			}
		}
	}
}
