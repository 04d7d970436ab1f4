package closedform_test

import (
	"context"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/models/closedform"
)

func db(ratio float64) float64 { return 10 * math.Log10(ratio) }

const rad = math.Pi / 180

func near(t *testing.T, what string, got, want, within float64) {
	t.Helper()
	if !(math.Abs(got-want) <= within) {
		t.Errorf("%s: %.6g, want %.6g within %g", what, got, want, within)
	}
}

// Closed form of Kraus' formulas at C = 1, α = 12.8°, N = 10 (Antennas, 2nd
// ed. 1988, ch. 7; memory). Tolerances are half the last printed digit.
func TestKraus(t *testing.T) {
	const n, c = 10, 1.0
	s := c * math.Tan(12.8*rad)
	near(t, "spacing", s, 0.2272, 5e-5)
	near(t, "beamwidth", closedform.KrausBeamwidth(n, c, s)/rad, 34.5, 0.05)
	near(t, "1949", db(closedform.Kraus1949(n, c, s)), 15.3, 0.05)
	near(t, "later", db(closedform.KrausLate(n, c, s)), 14.4, 0.05)
	near(t, "axial ratio", 20*math.Log10(closedform.KrausAxialRatio(n)), 0.424, 5e-4)
	near(t, "axial feed", closedform.AxialFeedResistance(c), 140, 1e-9)
	near(t, "peripheral feed", closedform.PeripheralFeedResistance(c), 150, 1e-9)
	// Second routes: the two constants differ by 10 lg(15/12), the two
	// beamwidths by 115/52, and the resistances cross where 140 C = 150/√C.
	near(t, "constants", db(closedform.Kraus1949(7, 0.9, 0.2)/closedform.KrausLate(7, 0.9, 0.2)), 0.9691, 1e-4)
	near(t, "nulls", closedform.KrausFirstNulls(7, 0.9, 0.2)/closedform.KrausBeamwidth(7, 0.9, 0.2), 115.0/52, 1e-12)
	cross := math.Pow(150.0/140, 2.0/3)
	near(t, "crossing", closedform.AxialFeedResistance(cross), closedform.PeripheralFeedResistance(cross), 1e-9)
}

// Closed form of King & Wong's fits at α = 12.8° (IEEE Trans. AP-28, 291,
// 1980; memory).
func TestKingWong(t *testing.T) {
	for _, v := range []struct{ n, c, gain, beamwidth float64 }{{5, 1.15, 11.0, 47.8}, {10, 1.10, 13.2, 36.4}, {15, 1.10, 14.9, 29.0}, {35, 1.05, 17.3, 18.8}} {
		pitch := 12.8 * rad
		s := v.c * math.Tan(pitch)
		near(t, "gain", db(closedform.KingWongPeak(v.n, v.c, s, pitch)), v.gain, 0.05)
		near(t, "beamwidth", closedform.KingWongBeamwidth(v.n, v.c, s, pitch)/rad, v.beamwidth, 0.05)
	}
	// Second route in logarithms.
	rapid.Check(t, func(t *rapid.T) {
		n, c := rapid.Float64Range(4, 40).Draw(t, "N"), rapid.Float64Range(0.8, 1.3).Draw(t, "C")
		s, pitch := rapid.Float64Range(0.1, 0.4).Draw(t, "S"), rapid.Float64Range(10, 16).Draw(t, "α")*rad
		want := math.Log(8.3) + (math.Sqrt(n+2)-1)*math.Log(c) + 0.8*math.Log(n*s) + math.Sqrt(n)/2*(math.Log(math.Tan(12.5*rad))-math.Log(math.Tan(pitch)))
		if got := math.Log(closedform.KingWongPeak(n, c, s, pitch)); math.Abs(got-want) > 1e-9 {
			t.Fatalf("peak %g, want %g", got, want)
		}
		wide := math.Log(61.5*rad) + 0.6*math.Log(2*n/(n+5)) - math.Sqrt(n)/4*math.Log(c) - 0.7*math.Log(n*s) + math.Sqrt(n)/4*(math.Log(math.Tan(pitch))-math.Log(math.Tan(12.5*rad)))
		if got := math.Log(closedform.KingWongBeamwidth(n, c, s, pitch)); math.Abs(got-wide) > 1e-9 {
			t.Fatalf("beamwidth %g, want %g", got, wide)
		}
	})
	// The −3 dB bandwidth of 9 turns: 1.07 · 1.82^(4/9); and none is lost at 0.91.
	near(t, "bandwidth", closedform.KingWongBandwidth(9, 0.5), 1.07*math.Pow(1.82, 4.0/9), 1e-12)
	near(t, "bandwidth at 0.91", closedform.KingWongBandwidth(9, 0.91), 1.07, 1e-12)
}

// Hansen–Woodyard: one on the axis; the array factor as a sum of n phasors.
func TestHansenWoodyard(t *testing.T) {
	near(t, "axis", closedform.HansenWoodyard(10, 0.23, 0), 1, 1e-12)
	near(t, "broadside", closedform.HansenWoodyard(10, 0.23, math.Pi/2), 0, 1e-12)
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(2, 40).Draw(t, "N")
		s, theta := rapid.Float64Range(0.1, 0.4).Draw(t, "S"), rapid.Float64Range(0, 1.5).Draw(t, "θ")
		psi := 2 * math.Pi * (s*(1-math.Cos(theta)) + 1/(2*float64(n)))
		re, im := 0.0, 0.0
		for k := range n {
			re += math.Cos(float64(k) * psi)
			im += math.Sin(float64(k) * psi)
		}
		want := math.Sin(math.Pi/(2*float64(n))) * math.Hypot(re, im) * math.Cos(theta)
		if got := math.Abs(closedform.HansenWoodyard(float64(n), s, theta)); math.Abs(got-want) > 1e-9 {
			t.Fatalf("%g, sum of phasors %g", got, want)
		}
	})
}

var copper = models.Material{Name: "copper", Conductivity: 58e6, Density: 8890, Permeability: 1}

// uniform is a winding of n turns, C = 1 and 13° at 1 GHz when c is 1.
func uniform(n, c float64) models.Design {
	wavelength := models.LightSpeed / 1e9
	return models.Design{
		Turns: n, Diameter: models.Law{c * wavelength / math.Pi}, Spacing: models.Law{c * wavelength * math.Tan(12.5*rad)}, Handedness: models.Right,
		Conductor: models.Conductor{Diameter: 3e-3, Material: copper}, Feed: models.Feed{Height: 6e-3, Impedance: 50},
	}
}

func ask(t *testing.T, d models.Design, o models.Outputs, hz ...float64) models.Response {
	t.Helper()
	r, err := closedform.New().Simulate(context.Background(), d, models.Question{Hz: hz, Outputs: o, Cone: 10 * rad})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// At the circumference of the peak and 12.5° the model is King & Wong's peak;
// off it, the published slopes.
func TestModelFollowsKingWong(t *testing.T) {
	for _, n := range []float64{5, 10, 20} {
		peak := 1.155 * math.Pow(n/5, -0.0393)
		d := uniform(n, peak)
		want := closedform.KingWongPeak(n, peak, peak*math.Tan(12.5*rad), 12.5*rad)
		near(t, "peak", db(ask(t, d, 0, 1e9).Samples[0].Directivity), db(want), 1e-9)
		low, lower := ask(t, d, 0, 0.8e9).Samples[0].Directivity, ask(t, d, 0, 0.7e9).Samples[0].Directivity
		near(t, "slope below", math.Log(low/lower)/math.Log(0.8/0.7), math.Sqrt(n), 1e-9)
		high, higher := ask(t, d, 0, 1.1e9).Samples[0].Directivity, ask(t, d, 0, 1.2e9).Samples[0].Directivity
		near(t, "slope above", math.Log(higher/high)/math.Log(1.2/1.1), -3*math.Sqrt(n), 1e-9)
		for _, u := range []float64{1 / 1.04, 1.03} {
			before, after := ask(t, d, 0, u*1e9*(1-1e-9)).Samples[0].Directivity, ask(t, d, 0, u*1e9*(1+1e-9)).Samples[0].Directivity
			near(t, "seam", before/after, 1, 1e-6)
			near(t, "level at the seam", before/want, 0.91, 1e-6)
		}
	}
}

func TestModelAxis(t *testing.T) {
	d := uniform(10, 1)
	s := ask(t, d, 0, 1e9).Samples[0]
	near(t, "resistance", real(s.Port), 150, 1e-9)
	near(t, "reactance", imag(s.Port), 0, 1e-9)
	near(t, "axial ratio", s.AxialRatio, 20*math.Log10(1.05), 1e-9)
	if s.Sense != models.Right {
		t.Errorf("a right-handed winding radiates %v", s.Sense)
	}
	near(t, "gain", s.Gain.Right, s.Directivity*s.Efficiency, 1e-12)
	// Loss: R' of the wire times its length against 150 Ω.
	wire := 6e-3 + 10*math.Hypot(d.Diameter[0]*math.Pi, d.Spacing[0])
	lost := real(copper.RoundWireImpedance(1.5e-3, 1e9)) * wire
	near(t, "efficiency", s.Efficiency, 150/(150+lost), 1e-9)
	d.Handedness = models.Left
	if m := ask(t, d, 0, 1e9).Samples[0]; m.Gain.Left != s.Gain.Right || m.Sense != models.Left {
		t.Error("the mirror image does not swap the senses")
	}
}

// A lead and a transformer change the input and nothing else.
func TestLeadAndTransformerMatch(t *testing.T) {
	d := uniform(8, 1)
	bare := ask(t, d, 0, 1e9).Samples[0]
	zt, theta, ok := models.MatchSection(50, bare.Port)
	if !ok {
		t.Fatal("no section matches")
	}
	d.Feed.Transformer = models.Transformer{Impedance: zt, Length: theta / (2 * math.Pi) * models.LightSpeed / 1e9}
	near(t, "matched", models.VSWR(ask(t, d, 0, 1e9).Samples[0].Input, 50), 1, 1e-9)
	d.Feed.Transformer = models.Transformer{}
	d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 8e-3, Shape: models.Ramp}
	led := ask(t, d, 0, 1e9).Samples[0]
	if led.Port == bare.Port {
		t.Error("the lead changes nothing")
	}
	// Lossless steps keep the power: a positive resistance remains.
	if real(led.Port) <= 0 {
		t.Errorf("port %v", led.Port)
	}
}

func TestModelConeCutsPattern(t *testing.T) {
	d := uniform(10, 1)
	r := ask(t, d, models.Cone|models.Cuts|models.Pattern|models.Balance, 1e9)
	if r.Answered&models.Balance != 0 {
		t.Error("a power balance was answered")
	}
	s := r.Samples[0]
	n, spacing := 10.0, math.Tan(12.5*rad)
	e := closedform.HansenWoodyard(n, spacing, 10*rad)
	near(t, "edge gain", s.EdgeGain.Right, s.Gain.Right*e*e, 1e-9)
	near(t, "cone axial ratio", s.ConeAxialRatio.Right, 20*math.Log10(1.05/math.Cos(10*rad)), 1e-9)
	near(t, "beamwidth", s.Beamwidth, closedform.KingWongBeamwidth(n, 1, spacing, 12.5*rad), 1e-9)
	if s.ConeAxialRatio.Left != 60 || s.Sidelobe > -5 || s.Sidelobe < -20 {
		t.Errorf("wrong sense %g, sidelobe %g dB", s.ConeAxialRatio.Left, s.Sidelobe)
	}
	highest := 0.0
	for _, ray := range s.Pattern[0].Rays {
		highest = math.Max(highest, ray.Gain.Right)
	}
	near(t, "pattern's peak", highest, s.Gain.Right, 1e-12)
	if len(s.Pattern) != 2 || len(s.Pattern[0].Rays) != 181 {
		t.Errorf("%d cuts of %d directions", len(s.Pattern), len(s.Pattern[0].Rays))
	}
	d.Handedness = models.Left
	if m := ask(t, d, models.Cone, 1e9).Samples[0]; m.ConeAxialRatio.Right != 60 || m.EdgeGain.Left != s.EdgeGain.Right {
		t.Error("the cone does not mirror")
	}
}

func TestWarnings(t *testing.T) {
	far := uniform(2.5, 1.4)
	far.Diameter = models.Law{far.Diameter[0], far.Diameter[0] * 0.9}
	far.Spacing = models.Law{0.02}
	far.Ground = models.Ground{Kind: models.Disc, Diameter: 1}
	far.Insulation = models.Insulation{Thickness: 1e-4, Permittivity: 2}
	all := strings.Join(ask(t, far, 0, 1e9).Warnings, "\n")
	for _, word := range []string{"circumference", "pitch angle", "turns", "uniform", "plate", "insulation"} {
		if !strings.Contains(all, word) {
			t.Errorf("no warning speaks of the %s:\n%s", word, all)
		}
	}
	if w := ask(t, uniform(8, 1), 0, 1e9).Warnings; len(w) != 0 {
		t.Errorf("a design in range is warned of: %q", w)
	}
	if w := strings.Join(ask(t, uniform(40, 1), 0, 1e9).Warnings, ""); !strings.Contains(w, "35") {
		t.Errorf("40 turns: %q", w)
	}
}

// Whatever can be wound is answered with plain numbers.
func TestModelNeverLeavesNumbers(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := uniform(rapid.Float64Range(0.6, 60).Draw(t, "N"), rapid.Float64Range(0.05, 4).Draw(t, "C"))
		r, err := closedform.New().Simulate(context.Background(), d, models.Question{Hz: []float64{rapid.Float64Range(1e8, 6e9).Draw(t, "f")}, Outputs: models.Cone | models.Cuts, Cone: 0.3})
		if err != nil {
			t.Fatal(err)
		}
		s := r.Samples[0]
		for _, x := range []float64{real(s.Port), imag(s.Port), s.Gain.Right, s.Gain.Left, s.AxialRatio, s.Directivity, s.Efficiency, s.EdgeGain.Right, s.ConeAxialRatio.Right, s.Beamwidth, s.Sidelobe} {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				t.Fatalf("%+v", s)
			}
		}
	})
}

func TestBadQuestions(t *testing.T) {
	m := closedform.New()
	for _, hz := range [][]float64{nil, {0}, {-1e9}, {math.NaN()}, {math.Inf(1)}} {
		if _, err := m.Simulate(context.Background(), uniform(8, 1), models.Question{Hz: hz}); err == nil {
			t.Errorf("%v Hz: no error", hz)
		}
	}
	bad := uniform(8, 1)
	bad.Turns = math.NaN()
	if _, err := m.Simulate(context.Background(), bad, models.Question{Hz: []float64{1e9}}); err == nil {
		t.Error("NaN turns: no error")
	}
	if _, err := closedform.HandFormulas(&bad, 1e9); err == nil {
		t.Error("NaN turns: no error by hand")
	}
	ended, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := m.Simulate(ended, uniform(8, 1), models.Question{Hz: []float64{1e9}}); err == nil {
		t.Error("an ended context: no error")
	}
}

func TestHandFormulas(t *testing.T) {
	d := uniform(10, 1)
	h, err := closedform.HandFormulas(&d, 1e9)
	if err != nil {
		t.Fatal(err)
	}
	s := math.Tan(12.5 * rad)
	near(t, "1949", h.Kraus1949, db(15*10*s), 1e-9)
	near(t, "later", h.KrausLate, db(12*10*s), 1e-9)
	near(t, "King & Wong", h.KingWong, db(closedform.KingWongPeak(10, 1, s, 12.5*rad)), 1e-9)
	near(t, "beamwidth", h.BeamwidthDeg, 52/math.Sqrt(10*s), 1e-9)
	near(t, "resistance", h.Resistance, 150, 1e-9)
}

func BenchmarkSimulate(b *testing.B) {
	m, d := closedform.New(), uniform(10, 1)
	q := models.Question{Hz: models.Band{From: 0.98e9, To: 1.02e9, Samples: 5}.Hz()}
	b.ReportAllocs()
	for b.Loop() {
		if _, err := m.Simulate(context.Background(), d, q); err != nil {
			b.Fatal(err)
		}
	}
}
