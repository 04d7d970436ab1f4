package moment

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
)

// quarter is a quarter-wave monopole in the middle of a plate.
func quarter(p Plate, radius float64) *Antenna {
	return &Antenna{
		Plane: true, Plate: p,
		Wires: []Wire{upright(0, 0, 0.25, radius, 8)},
		Ports: []Port{{Kind: FrillPort}},
	}
}

// freeMonopole is the quarter wave's sinusoid cos kz alone in space, of 1 A at
// its foot: its intensity towards θ, W per steradian, k²η/(32π²)|N|².
func freeMonopole(theta float64) float64 {
	const k = 2 * math.Pi
	part := func(of func(float64) float64) float64 {
		return quad.Fixed(func(z float64) float64 { return math.Cos(k*z) * of(k*z*math.Cos(theta)) }, 0, 0.25, 16, quad.Legendre{}, 0)
	}
	re, im := part(math.Cos), part(math.Sin)
	return k * k * eta / (32 * math.Pi * math.Pi) * math.Pow(math.Sin(theta), 2) * (re*re + im*im)
}

// As the ground vanishes under a monopole, what is left is its own current in
// free space: from memory 19.4 Ω of radiation resistance and a directivity of
// 1.88 dBi for the sinusoid, which the integral of its far field confirms.
func TestMonopoleAsItsGroundVanishes(t *testing.T) {
	power := quad.Fixed(func(theta float64) float64 { return 2 * math.Pi * math.Sin(theta) * freeMonopole(theta) }, 0, math.Pi, 40, quad.Legendre{}, 0)
	level := func(theta float64) float64 { return 4 * math.Pi * freeMonopole(theta) / power }
	top := 0.0
	for theta := 0.0; theta < math.Pi; theta += 0.001 {
		top = max(top, level(theta))
	}
	if math.Abs(2*power-19.4) > 0.05 || math.Abs(decibels(top)-1.88) > 0.005 {
		t.Fatalf("the free sinusoid has %.3f Ω and %.3f dBi; 19.4 and 1.88 are due", 2*power, decibels(top))
	}
	// Thin, as the sinusoid is met as 1/ln only; the plate is 0.08 λ across.
	solve(t, quarter(Plate{Radius: 0.04}, 1e-6), Fine, func(s *Solution) {
		peak := 0.0
		for theta := 0.02; theta < math.Pi; theta += 0.02 {
			got, want := s.Directivity(theta, 0), level(theta)
			peak = max(peak, got)
			if math.Abs(got-want) > 0.015*top {
				t.Errorf("θ = %.2f: directivity %.4f; the free monopole has %.4f", theta, got, want)
			}
		}
		t.Logf("peak %.4f dBi, free %.4f dBi", decibels(peak), decibels(top))
		if math.Abs(decibels(peak/top)) > 0.02 {
			t.Errorf("peak directivity %.4f dBi; the free monopole has %.4f", decibels(peak), decibels(top))
		}
	}, metreWave)
	resistance := func(radius float64) (r float64) {
		solve(t, quarter(Plate{Radius: 0.04}, radius), Fine, func(s *Solution) { r = real(1 / s.Admittance(0, 0)) }, metreWave)
		return r
	}
	x, y := 1/math.Log(1e6), 1/math.Log(1e8)
	u, v := resistance(1e-6), resistance(1e-8)
	limit := v - (u-v)/(x-y)*y
	t.Logf("resistance %.3f, %.3f → %.3f Ω; free %.3f Ω", u, v, limit, 2*power)
	if math.Abs(limit/(2*power)-1) > 0.03 { // which the plate's own size and 1/ln² leave
		t.Errorf("the resistance tends to %.3f Ω; the free monopole has %.3f", limit, 2*power)
	}
}

// Storer, J. Appl. Phys. 22, 1058, 1951 (from memory): on a large disc the
// impedance differs from that on the plane by
//
//	Z − Z∞ → j30 Ω (k∫I dz/I₀)² e^{−2jkR}/kR,
//
// what the edge sends back into the middle. The ratio to it tends to one as
// 1/R, swinging twice a wavelength of R: so its magnitude stays within bounds
// and its phase turns by 2 turns a wavelength.
func TestMonopoleOnAGrowingDisc(t *testing.T) {
	const k, wire = 2 * math.Pi, 1e-3
	var plane, height complex128 // height: k∫I dz/I₀
	solve(t, quarter(Plate{}, wire), Standard, func(s *Solution) {
		plane = 1 / s.Admittance(0, 0)
		for _, i := range s.w.field {
			height += i * k * plane
		}
	}, metreWave)
	for _, r := range []float64{1, 1.13, 1.25, 1.37, 1.5, 2, 3} {
		solve(t, quarter(Plate{Radius: r}, wire), Standard, func(s *Solution) {
			storer := 30i * height * height * cmplx.Exp(complex(0, -2*k*r)) / complex(k*r, 0)
			ratio := (1/s.Admittance(0, 0) - plane) / storer
			t.Logf("R = %g λ: %.3f Ω, %.4f of Storer's difference", r, 1/s.Admittance(0, 0), ratio)
			if miss := cmplx.Abs(ratio - 1); miss > 0.5/r {
				t.Errorf("R = %g λ: the impedance differs from the plane's by %.3f of Storer's; 1 within %.2f is due", r, ratio, 0.5/r)
			}
		}, metreWave)
	}
}

// knifeEdge is the power of a wave that passes a half-plane's edge over that of
// the wave unhindered, by Fresnel's integrals (any optics text), v² being four
// times the wavelengths of the way round; at v = 0, ¼.
func knifeEdge(v float64) float64 {
	fresnel := func(of func(float64) float64) float64 {
		return 0.5 + quad.Fixed(func(t float64) float64 { return of(math.Pi / 2 * t * t) }, 0, v, 30, quad.Legendre{}, 0)
	}
	c, s := fresnel(math.Cos), fresnel(math.Sin)
	return (c*c + s*s) / 2
}

// Towards the horizon a large disc's pattern is the plane's times that of a
// knife's edge: half the field along the plane, 1.4 dB more than the plane's
// at its first maximum. The way round is R(1 − sin θ); what the far side of the
// disc's edge sends makes the 0.2 dB.
func TestMonopolePatternOnALargeDisc(t *testing.T) {
	plane := map[int]float64{}
	solve(t, quarter(Plate{}, 1e-3), Standard, func(s *Solution) {
		for degrees := 62; degrees <= 90; degrees += 2 {
			plane[degrees] = s.Directivity(float64(degrees)*math.Pi/180, 0)
		}
	}, metreWave)
	for _, r := range []float64{3, 4} {
		worst := 0.0
		solve(t, quarter(Plate{Radius: r}, 1e-3), Standard, func(s *Solution) {
			for degrees, want := range plane {
				theta := float64(degrees) * math.Pi / 180
				got := decibels(s.Directivity(theta, 0) / want)
				due := decibels(knifeEdge(2 * math.Sqrt(r*(1-math.Sin(theta)))))
				worst = max(worst, math.Abs(got-due))
				if math.Abs(got-due) > 0.2 {
					t.Errorf("R = %g λ, %d° from the axis: %.2f dB beside the plane's; a knife's edge has %.2f", r, degrees, got, due)
				}
			}
		}, metreWave)
		t.Logf("R = %g λ: within %.3f dB", r, worst)
	}
}
