package moment

import (
	"fmt"
	"math"
	"testing"

	"turnwise/models"
)

// grounded puts a design on a disc, a cup, or, with no diameter, the plane;
// diameter and rim in wavelengths at 1 GHz.
func grounded(d models.Design, diameter, rim float64) models.Design {
	d.Ground = models.Ground{Kind: models.Infinite}
	if diameter > 0 {
		d.Ground = models.Ground{Kind: models.Disc, Diameter: diameter * gigaWave}
	}
	if rim > 0 {
		d.Ground.Kind, d.Ground.Rim = models.Cup, rim*gigaWave
	}
	return d
}

// lossless makes a design of a conductor that takes no heat.
func lossless(d models.Design) models.Design {
	d.Conductor.Material.Conductivity = 1e40
	return d
}

// tableDesign is a lossless winding of 10 turns, C = 1.1 λ and 12.8° at 1 GHz.
func tableDesign() models.Design {
	const c = 1.1 * gigaWave
	d := lossless(benchDesign(10))
	d.Diameter, d.Spacing = models.Law{c / math.Pi}, models.Law{c * math.Tan(12.8*math.Pi/180)}
	return d
}

// BenchmarkPlateTable prints what discs and cups make of one winding.
func BenchmarkPlateTable(b *testing.B) {
	for _, g := range [][2]float64{
		{0, 0}, {0.5, 0}, {0.75, 0}, {1, 0}, {1.5, 0}, {2, 0}, {3, 0},
		{0.5, 0.25}, {0.6, 0.3}, {0.8, 0.25}, {0.8, 0.4}, {1, 0.4}, {1.2, 0.5},
	} {
		b.Run(fmt.Sprintf("diameter=%g,rim=%g", g[0], g[1]), func(b *testing.B) {
			var s models.Sample
			for b.Loop() {
				s = simulate(b, Standard, grounded(tableDesign(), g[0], g[1]), models.Cuts, 1e9).Samples[0]
			}
			b.ReportMetric(decibels(s.Gain.Right), "dBic")
			b.ReportMetric(s.AxialRatio, "dB-axial-ratio")
			b.ReportMetric(s.Beamwidth*180/math.Pi, "deg-beamwidth")
			if g[0] > 0 {
				b.ReportMetric(decibels(s.Gain.Right/s.RearGain), "dB-front-to-back")
			}
			b.ReportMetric(real(s.Port), "ohm-R")
			b.ReportMetric(imag(s.Port), "ohm-X")
		})
	}
}

// cupped is a winding in the dimensions of King and Wong's measurements, IEEE
// Trans. AP-28, 291–296, 1980 (from memory): 4.23 in across, 12.8°, of a
// strip 0.468 in wide, a quarter of which is its equivalent radius, in a cup
// of 12 in by 5.5 in. The riser is ours.
func cupped(turns float64, cup bool) models.Design {
	const inch = 0.0254
	d := lossless(benchDesign(turns))
	d.Diameter, d.Spacing = models.Law{4.23 * inch}, models.Law{math.Pi * 4.23 * inch * math.Tan(12.8*math.Pi/180)}
	d.Conductor.Diameter, d.Feed.Height = 0.468/2*inch, 8e-3
	if cup {
		d.Ground = models.Ground{Kind: models.Cup, Diameter: 12 * inch, Rim: 5.5 * inch}
	}
	return d
}

// kingWong is their peak gain, dB, at the circumference where it peaks.
func kingWong(turns, c float64) float64 {
	tangent := math.Tan(12.8 * math.Pi / 180)
	return decibels(8.3 * math.Pow(c, math.Sqrt(turns+2)-1) * math.Pow(turns*c*tangent, 0.8) *
		math.Pow(math.Tan(12.5*math.Pi/180)/tangent, math.Sqrt(turns)/2))
}

// BenchmarkMeasuredCup prints peak gains of those windings over the plane and
// in the cup, and how much more the empirical formula gives.
func BenchmarkMeasuredCup(b *testing.B) {
	for _, tt := range []struct{ turns, c float64 }{{5, 1.155}, {10, 1.10}, {15, 1.10}, {22, 1.07}, {35, 1.05}} {
		b.Run(fmt.Sprintf("turns=%g", tt.turns), func(b *testing.B) {
			var plane, cup peak
			for b.Loop() {
				plane, cup = peakOf(b, cupped(tt.turns, false)), peakOf(b, cupped(tt.turns, true))
			}
			b.ReportMetric(plane.db, "dBic-plane")
			b.ReportMetric(plane.c, "C-plane")
			b.ReportMetric(cup.db, "dBic-cup")
			b.ReportMetric(cup.c, "C-cup")
			b.ReportMetric(kingWong(tt.turns, tt.c)-plane.db, "dB-formula-over-plane")
			b.ReportMetric(kingWong(tt.turns, tt.c)-cup.db, "dB-formula-over-cup")
		})
	}
}

// peak is a gain and the circumference in wavelengths where it stands.
type peak struct{ db, c float64 }

// peakOf sweeps a winding from C = 0.9 λ to 1.3 λ.
func peakOf(t testing.TB, d models.Design) (p peak) {
	around := math.Pi * d.Diameter[0] / models.LightSpeed
	r := simulate(t, Standard, d, models.Axis, models.Band{From: 0.9 / around, To: 1.3 / around, Samples: 41}.Hz()...)
	for _, s := range r.Samples {
		if db := decibels(s.Gain.Right); db > p.db {
			p = peak{db, s.Hz * around}
		}
	}
	return p
}

// BenchmarkPlateConvergence prints what modes of the azimuth and elements of
// the meridian leave out: against the most of both, in decibels on the axis and
// per cent of the impedance.
func BenchmarkPlateConvergence(b *testing.B) {
	levels := modeLevels
	defer func() { modeLevels = levels }()
	for _, g := range [][2]float64{{0.5, 0}, {0.5, 0.25}, {0.8, 0.4}} {
		d := grounded(tableDesign(), g[0], g[1])
		set, _ := Standard.settings()
		dense := set
		dense.wave, dense.beyond, dense.graded, dense.smooth = 3*set.wave, 3*set.beyond, 16, 8
		want := platedAt(b, d, dense, 24)
		report := func(name string, set settings, modes int) {
			b.Run(fmt.Sprintf("diameter=%g,rim=%g,%s", g[0], g[1], name), func(b *testing.B) {
				var got reading
				for b.Loop() {
					got = platedAt(b, d, set, modes)
				}
				b.ReportMetric(decibels(total(got.sides[0])/total(want.sides[0])), "dB-axis")
				b.ReportMetric(100*apart(got.port, want.port), "%-impedance")
			})
		}
		for _, modes := range []int{2, 4, 6, 8, 12} {
			report(fmt.Sprintf("modes=%d", modes), dense, modes)
		}
		for _, wave := range []float64{2, set.wave, 8} {
			s := dense
			s.wave = wave
			report(fmt.Sprintf("plate=%g", wave), s, 24)
		}
		for _, beyond := range []int{4, 6, 7, 9, 12} {
			s := dense
			s.beyond = beyond
			report(fmt.Sprintf("beyond=%d", beyond), s, 24)
		}
	}
}

// platedAt reads a design at 1 GHz with settings of the plate alone, and its
// number of modes.
func platedAt(t testing.TB, d models.Design, set settings, modes int) (r reading) {
	for i := range modeLevels {
		modeLevels[i] = modes
	}
	see := watcher(func(s *Solution) error {
		r = reading{port: 1 / s.Admittance(0, 0), sides: []models.Circular{scaled(s.Intensity(0, 0), 4*math.Pi/s.Accepted())}}
		return nil
	})
	a := wound(t, d, Standard, 1e9)
	if err := new(work).sweep(t.Context(), a, set, []float64{1e9}, see); err != nil {
		t.Fatal(err)
	}
	return r
}
