package moment

import (
	"context"
	"math"
	"testing"

	"turnwise/models"
)

// answered is a design of some shape with its sample and with its solution,
// read directions by directions.
type answered struct {
	name   string
	sample models.Sample
	gain   func(theta, phi float64) models.Circular // valid in see only
}

// eachAnswer shows samples beside the solutions of the same wires.
func eachAnswer(t *testing.T, see func(a *answered)) {
	left := benchDesign(4)
	left.Handedness = models.Left
	for name, d := range map[string]models.Design{"uniform": benchDesign(8), "taper": benchTaper(6), "left": left} {
		r := simulate(t, Standard, d, models.Cone|models.Cuts|models.Pattern|models.Spread, 1e9)
		solve(t, wound(t, d, Standard, 1e9), Standard, func(s *Solution) {
			see(&answered{name, r.Samples[0], func(theta, phi float64) models.Circular {
				return scaled(s.Intensity(theta, phi), 4*math.Pi/s.Accepted())
			}})
		}, 1e9)
	}
}

// fineStep is that of half cuts against which the coarser rays are read.
const fineStep = 0.1 * math.Pi / 180

// The beamwidth, sidelobe and peak of the contract, on rays ten times as close.
func TestCutsAreReadRight(t *testing.T) {
	eachAnswer(t, func(a *answered) {
		axis := total(a.gain(0, 0))
		peak, lobe, width := axis, 0.0, 0.0
		for p := range 2 * planes {
			phi := math.Pi * float64(p) / planes
			last, edge, fell, past := axis, 0.0, false, false
			for theta := fineStep; theta < math.Pi/2; theta += fineStep {
				g := total(a.gain(theta, phi))
				if edge == 0 && g < axis/2 {
					edge = theta - fineStep/2
				}
				past = past || fell && g > last
				if past {
					lobe = max(lobe, g)
				}
				fell, last, peak = g < last, g, max(peak, g)
			}
			width += edge / planes
		}
		s := &a.sample
		for what, pair := range map[string][2]float64{
			"beamwidth":        {s.Beamwidth * 180 / math.Pi, width * 180 / math.Pi},
			"sidelobe":         {s.Sidelobe, decibels(lobe / peak)},
			"peak directivity": {decibels(s.PeakDirectivity), decibels(peak / s.Efficiency)},
			"directivity":      {decibels(s.Directivity), decibels(axis / s.Efficiency)},
		} {
			if math.Abs(pair[0]-pair[1]) > 0.06 { // dB, degrees: a ray apart
				t.Errorf("%s: %s %.3f; %.3f is due", a.name, what, pair[0], pair[1])
			}
		}
	})
}

// The cone's worst axial ratio and gain against many more directions.
func TestConeIsReadRight(t *testing.T) {
	eachAnswer(t, func(a *answered) {
		wanted := models.Right
		if a.name == "left" {
			wanted = models.Left
		}
		edge, worst := math.Inf(1), 0.0
		for i := range 31 {
			for p := range 12 {
				g := a.gain(math.Pi/12*float64(i)/30, 2*math.Pi*float64(p)/12)
				ratio, sense := models.AxialRatio(g)
				if sense != wanted {
					ratio = models.AxialRatioCap
				}
				edge, worst = min(edge, g.Of(wanted)), max(worst, ratio)
			}
		}
		if miss := decibels(a.sample.EdgeGain.Of(wanted) / edge); math.Abs(miss) > 0.02 {
			t.Errorf("%s: the least gain in the cone is off by %.3f dB", a.name, miss)
		}
		if miss := a.sample.ConeAxialRatio.Of(wanted) - worst; math.Abs(miss) > 0.05 {
			t.Errorf("%s: the worst axial ratio in the cone is off by %.3f dB", a.name, miss)
		}
		if other := a.sample.ConeAxialRatio.Of(-wanted); other != models.AxialRatioCap {
			t.Errorf("%s: %g dB in the other sense; the cap is due", a.name, other)
		}
	})
}

// Every ray of the pattern is the field of its direction: a cut's negative
// angles lie on the far side.
func TestPatternIsTheField(t *testing.T) {
	eachAnswer(t, func(a *answered) {
		if len(a.sample.Pattern) != planes {
			t.Fatalf("%s: %d cuts", a.name, len(a.sample.Pattern))
		}
		for _, c := range a.sample.Pattern {
			for i, r := range c.Rays {
				theta, phi := r.Angle, c.Plane
				if theta < 0 {
					theta, phi = -theta, phi+math.Pi
				}
				g := a.gain(theta, phi)
				if math.Abs(r.Gain.Right-g.Right)+math.Abs(r.Gain.Left-g.Left) > 1e-9*total(a.gain(0, 0)) {
					t.Fatalf("%s: the ray at %g rad in plane %g reads %+v; the field is %+v", a.name, r.Angle, c.Plane, r.Gain, g)
				}
				if i > 0 && r.Angle <= c.Rays[i-1].Angle {
					t.Fatalf("%s: the rays of plane %g do not rise", a.name, c.Plane)
				}
			}
		}
	})
}

// The connector is behind the transformer, the port before it.
func TestInputIsBehindTheTransformer(t *testing.T) {
	d := benchDesign(5)
	bare := simulate(t, Standard, d, models.Axis, 1e9).Samples[0]
	d.Feed.Transformer = models.Transformer{Impedance: 85, Length: gigaWave / 4}
	behind := simulate(t, Standard, d, models.Axis, 1e9).Samples[0]
	if bare.Input != bare.Port || behind.Port != bare.Port {
		t.Errorf("without a transformer: port %.4g, input %.4g Ω; with: port %.4g Ω", bare.Port, bare.Input, behind.Port)
	}
	if want := 85 * 85 / bare.Port; apart(behind.Input, want) > 1e-9 { // a quarter wave
		t.Errorf("behind a quarter wave of 85 Ω %.6g Ω; %.6g is due", behind.Input, want)
	}
}

// A wide cone holds the null beside the main lobe, which its rim does not.
func TestConeIsLookedAtInside(t *testing.T) {
	const half = 1.0
	d := benchDesign(8)
	s, err := New(Standard)
	if err != nil {
		t.Fatal(err)
	}
	r, err := s.Simulate(context.Background(), d, models.Question{Hz: []float64{1e9}, Outputs: models.Cone, Cone: half})
	if err != nil {
		t.Fatal(err)
	}
	solve(t, wound(t, d, Standard, 1e9), Standard, func(s *Solution) {
		rim := math.Inf(1)
		for p := range coneAzimuths {
			rim = min(rim, s.Intensity(half, 2*math.Pi*float64(p)/coneAzimuths).Right*4*math.Pi/s.Accepted())
		}
		if got := r.Samples[0].EdgeGain.Right; decibels(got/rim) > -1 {
			t.Errorf("least gain in the cone %.2f dB, on its rim %.2f; at least 1 dB less is due", decibels(got), decibels(rim))
		}
	}, 1e9)
}
