package moment

import (
	"math"
	"testing"

	"turnwise/models"
)

// lossy is a half-wave dipole of a constant series resistance, Ω/m.
func lossy(radius, resistance float64) *Antenna {
	w := upright(0, -0.25, 0.25, radius, 12)
	w.Loss = func(float64) complex128 { return complex(resistance, 0.4*resistance) }
	return &Antenna{Wires: []Wire{w}, Ports: []Port{{At: 0.5, Gap: 0.02}}}
}

// heat is ½∫R'|I|² ds of the current, point by point.
func heat(w *work, resistance float64) (sum float64) {
	m := &w.mesh
	g := &legendre[20]
	for i := range m.elements {
		e := &m.elements[i]
		for j, x := range g.x {
			var current complex128
			for l, fn := range e.fn[:m.order] {
				if fn >= 0 {
					current += w.current[fn] * complex(e.value[l].at(x, m.order), 0)
				}
			}
			sum += resistance / 2 * square(current) * g.w[j] * e.length / 2
		}
	}
	return sum
}

func TestLostPowerHeatsTheWire(t *testing.T) {
	for _, resistance := range []float64{0.1, 5, 400} {
		solve(t, lossy(1e-3, resistance), Standard, func(s *Solution) {
			want := heat(s.w, resistance)
			if math.Abs(s.Lost()/want-1) > 1e-12 {
				t.Errorf("%g Ω/m: %g W lost; ½∫R'|I|² is %g", resistance, s.Lost(), want)
			}
			// The far field knows nothing of the loss.
			if e := math.Abs((s.Radiated()+s.Lost())/s.Accepted() - 1); e > 1e-4 {
				t.Errorf("%g Ω/m: power balance misses by %.2g", resistance, e)
			}
		}, metreWave)
	}
}

// With the sinusoid, R' on a half-wave dipole is R'λ/4 at the port, against
// 73.1 Ω of radiation: any antenna text, for thin wire and little loss. The
// tolerance is the thin wire's own distance from the sinusoid.
func TestEfficiencyOfALossyDipole(t *testing.T) {
	for _, resistance := range []float64{1, 10} {
		solve(t, lossy(1e-6, resistance), Standard, func(s *Solution) {
			got, want := s.Lost()/s.Accepted(), resistance/4/(resistance/4+73.1)
			t.Logf("%g Ω/m: %.5f lost, sinusoid %.5f", resistance, got, want)
			if math.Abs(got/want-1) > 0.02 {
				t.Errorf("%g Ω/m: %.5f of the power lost; %.5f is due", resistance, got, want)
			}
		}, metreWave)
	}
}

// A poor conductor wastes as the root of its resistivity, and the gain falls
// by as much as the efficiency.
func TestEfficiencyOfAHelix(t *testing.T) {
	d := benchDesign(6)
	answer := func(conductivity float64) models.Sample {
		d.Conductor.Material.Conductivity = conductivity
		return simulate(t, Standard, d, models.Axis, 1e9).Samples[0]
	}
	copper, poor := answer(58e6), answer(58e4)
	if lost, more := 1-copper.Efficiency, 1-poor.Efficiency; lost <= 0 || math.Abs(more/lost/10-1) > 0.02 {
		t.Errorf("%.3g of the power lost in copper, %.3g in what conducts a hundredth; ten times is due", lost, more)
	}
	for _, s := range []models.Sample{copper, poor} {
		if gain := s.Gain.Right + s.Gain.Left; math.Abs(gain/s.Directivity/s.Efficiency-1) > 1e-12 {
			t.Errorf("gain %g is not directivity %g times efficiency %g", gain, s.Directivity, s.Efficiency)
		}
	}
}

// coated is a half-wave dipole with a coat.
func coated(c Coat) *Antenna {
	w := upright(0, -0.25, 0.25, 1e-3, 6)
	w.Coat = c
	return &Antenna{Wires: []Wire{w}, Ports: []Port{{At: 0.5, Gap: 0.02}}}
}

// reactance of a coated dipole of half a metre.
func reactance(t *testing.T, c Coat, hz float64) (x float64) {
	solve(t, coated(c), Standard, func(s *Solution) { x = imag(1 / s.Admittance(0, 0)) }, hz)
	return x
}

// resonance is the frequency of no reactance about the half wave, by
// bisection; in units of c/1 m.
func resonance(t *testing.T, c Coat) float64 {
	lo, hi := 0.5, 1.1
	for range 40 {
		if mid := (lo + hi) / 2; reactance(t, c, mid*metreWave) < 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	return lo
}

// Richmond and Newman, Radio Science 11, 13–20, 1976 (from memory): a coat of
// no thickness, or of air, is none.
func TestNoCoatIsBare(t *testing.T) {
	bare := reactance(t, Coat{}, metreWave)
	for _, c := range []Coat{{Permittivity: 2.3}, {Thickness: 5e-4, Permittivity: 1}} {
		if x := reactance(t, c, metreWave); x != bare {
			t.Errorf("%+v: reactance %.15g Ω; bare %.15g", c, x, bare)
		}
	}
	if x := reactance(t, Coat{Thickness: 1e-15, Permittivity: 2.3}, metreWave); math.Abs(x/bare-1) > 1e-9 {
		t.Errorf("a coat of 1e-15 m: reactance %.12g Ω; bare %.12g", x, bare)
	}
	d := benchDesign(4)
	naked := simulate(t, Standard, d, models.Axis, 1e9).Samples[0]
	d.Insulation = models.Insulation{Thickness: 3e-4, Permittivity: 1}
	if air := simulate(t, Standard, d, models.Axis, 1e9).Samples[0]; air.Port != naked.Port || air.Gain != naked.Gain {
		t.Errorf("a helix in a coat of air: %+v; bare %+v", air, naked)
	}
}

// The same paper: resonance falls with thickness and with permittivity.
func TestCoatLowersTheResonance(t *testing.T) {
	last := resonance(t, Coat{})
	if last < 0.9 || last > 1 {
		t.Fatalf("the bare dipole resonates at %g half waves; a little under 1 is due", last)
	}
	for _, thickness := range []float64{1e-4, 3e-4, 1e-3} {
		now := resonance(t, Coat{thickness, 2.3})
		if now >= last {
			t.Errorf("%g m thick: resonance at %g; under %g is due", thickness, now, last)
		}
		last = now
	}
	last = resonance(t, Coat{})
	for _, permittivity := range []float64{1.5, 2.3, 4, 10} {
		now := resonance(t, Coat{3e-4, permittivity})
		if now >= last {
			t.Errorf("permittivity %g: resonance at %g; under %g is due", permittivity, now, last)
		}
		last = now
	}
}
