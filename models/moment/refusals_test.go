package moment

import (
	"context"
	"encoding/json"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
)

// ask puts a question to a standard solver.
func ask(d models.Design, o models.Outputs, hz ...float64) (models.Response, error) {
	s, err := New(Standard)
	if err != nil {
		return models.Response{}, err
	}
	return s.Simulate(context.Background(), d, models.Question{Hz: hz, Outputs: o, Cone: 0.3})
}

// spoilt is a five-turn helix at 1 GHz with a change.
func spoilt(change func(*models.Design)) models.Design {
	d := benchDesign(5)
	if change != nil {
		change(&d)
	}
	return d
}

// What cannot be built or solved is an error that names the dimension and
// the bound.
func TestRefusals(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	tests := []struct {
		name   string
		change func(*models.Design)
		hz     []float64 // 1 GHz where none
		want   []string
	}{
		{"turns that touch", func(d *models.Design) { d.Spacing = models.Law{0.9 * d.Conductor.Diameter} }, nil, []string{"spacing", "2.998 mm", "wider spacing"}},
		{"turns that touch half way", func(d *models.Design) { d.Spacing = models.Law{0.05, 0.002, 0.05} }, nil, []string{"spacing", "2.998 mm"}},
		{"a conductor thicker than the spacing", func(d *models.Design) { d.Conductor.Diameter, d.Feed.Height = 1.2*d.Spacing[0], 0.1 }, nil, []string{"spacing", "thinner conductor"}},
		{"coats that touch", func(d *models.Design) { d.Insulation = models.Insulation{Thickness: d.Spacing[0] / 2, Permittivity: 2} }, nil, []string{"spacing", "with its coat"}},
		{"no spacing to speak of", func(d *models.Design) { d.Spacing = models.Law{1e-9} }, nil, []string{"spacing", "2.998 mm"}},
		{"a riser under a radius", func(d *models.Design) { d.Feed.Height = 0.45 * d.Conductor.Diameter }, nil, []string{"feed.height", "half its diameter"}},
		{"zero turns", func(d *models.Design) { d.Turns = 0 }, nil, []string{"turns", "above zero"}},
		{"negative turns", func(d *models.Design) { d.Turns = -3 }, nil, []string{"turns", "above zero"}},
		{"NaN turns", func(d *models.Design) { d.Turns = nan }, nil, []string{"turns", "above zero"}},
		{"zero diameter", func(d *models.Design) { d.Diameter = models.Law{0.1, 0} }, nil, []string{"diameter[2]", "above zero"}},
		{"negative diameter", func(d *models.Design) { d.Diameter = models.Law{-0.1} }, nil, []string{"diameter[1]", "above zero"}},
		{"NaN spacing", func(d *models.Design) { d.Spacing = models.Law{nan} }, nil, []string{"spacing[1]", "above zero"}},
		{"infinite spacing", func(d *models.Design) { d.Spacing = models.Law{inf} }, nil, []string{"spacing[1]", "up to"}},
		{"zero conductor", func(d *models.Design) { d.Conductor.Diameter = 0 }, nil, []string{"conductor.diameter", "above zero"}},
		{"NaN riser", func(d *models.Design) { d.Feed.Height = nan }, nil, []string{"feed.height", "above zero"}},
		{"negative riser", func(d *models.Design) { d.Feed.Height = -0.01 }, nil, []string{"feed.height", "above zero"}},
		{"negative coat", func(d *models.Design) { d.Insulation = models.Insulation{Thickness: -1e-3, Permittivity: 2} }, nil, []string{"insulation.thickness", "from 0"}},
		{"thin air", func(d *models.Design) { d.Insulation = models.Insulation{Thickness: 1e-3, Permittivity: 0.5} }, nil, []string{"insulation.permittivity", "from 1"}},
		{"no conductivity", func(d *models.Design) { d.Conductor.Material.Conductivity = 0 }, nil, []string{"conductor.conductivity", "above zero"}},
		{"a plate within the opening", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Disc, Diameter: d.Diameter[0]} }, nil, []string{"ground.diameter", "opening", "more than"}},
		{"a plate as wide as a field", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Disc, Diameter: 1e3} }, nil, []string{"ground", "wavelengths across", "up to 30"}},
		{"a low winding over the edge", func(d *models.Design) {
			d.Diameter = append(d.Diameter, 3*d.Diameter[0])
			d.Turns, d.Ground = 1, models.Ground{Kind: models.Disc, Diameter: 1.1 * d.Diameter[0]}
		}, nil, []string{"ground.diameter", "overhangs", "as wide as the winding"}},
		{"a winding through the rim", func(d *models.Design) {
			d.Ground = models.Ground{Kind: models.Cup, Diameter: d.Diameter[0] + 0.9*d.Conductor.Diameter, Rim: d.Spacing[0]}
			d.Feed.Pin = d.Conductor.Diameter / 3
		}, nil, []string{"ground.diameter", "cup's wall", "a wider cup"}},
		{"more turns than room", func(d *models.Design) { d.Turns = 1000 }, nil, []string{"1000 turns", "at most 2500", "fewer turns"}},
		{"light", nil, []float64{1e15}, []string{"1e+06 GHz", "at most 2500", "lower frequency"}},
		{"beyond light", nil, []float64{1e9, 1e300}, []string{"1e+291 GHz", "at most 2500", "lower frequency"}},
		{"no frequency", nil, []float64{}, []string{"no frequency"}},
		{"falling frequencies", nil, []float64{1e9, 0.9e9}, []string{"9e+08 Hz", "rising"}},
		{"a frequency twice", nil, []float64{1e9, 1e9}, []string{"1e+09 Hz", "rising"}},
		{"a frequency of NaN", nil, []float64{1e9, nan}, []string{"NaN Hz", "positive"}},
		{"an infinite frequency", nil, []float64{1e9, inf}, []string{"+Inf Hz", "positive"}},
		{"a frequency of zero", nil, []float64{0, 1e9}, []string{"0 Hz", "positive"}},
		{"a negative frequency", nil, []float64{-1e9}, []string{"-1e+09 Hz", "positive"}},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			if tt.hz == nil {
				tt.hz = []float64{1e9}
			}
			r, err := ask(spoilt(tt.change), models.Axis, tt.hz...)
			if err == nil {
				t.Fatalf("answered: %+v", r)
			}
			for _, w := range tt.want {
				if !strings.Contains(err.Error(), w) {
					t.Errorf("%q does not say %q", err, w)
				}
			}
		})
	}
}

// Outside the model's range an answer comes with a warning that names the
// bound, and is finite.
func TestWarnings(t *testing.T) {
	c := func(c float64) []float64 { return []float64{c / 1.05 * 1e9} } // circumference in wavelengths
	tests := []struct {
		name   string
		change func(*models.Design)
		hz     []float64
		want   []string
	}{
		{"a short riser", func(d *models.Design) { d.Feed.Height = d.Conductor.Diameter }, nil, []string{"riser of 2 radii", "2.5"}},
		{"a thick pin", func(d *models.Design) { d.Feed.Pin = 0.04 }, nil, []string{"radius of 0.0667 wavelengths", "0.012", "riser of 0.3 radii", "2.5"}},
		{"a low winding", func(d *models.Design) { d.Feed.Height = 2 * d.Conductor.Diameter }, nil, []string{"4 radii over the plane"}},
		{"close turns", func(d *models.Design) { d.Spacing = models.Law{2 * d.Conductor.Diameter} }, nil, []string{"radii apart", "6"}},
		{"a thick coat", func(d *models.Design) { d.Insulation = models.Insulation{Thickness: 0.02, Permittivity: 80} }, nil, []string{"coat of 13.3 radii"}},
		{"normal mode", nil, c(0.05), []string{"0.05 wavelengths", "0.6 to 1.5", "axial mode"}},
		{"a small coil", nil, c(0.005), []string{"0.005 wavelengths", "axial mode"}},
		{"half a wavelength", nil, c(0.4), []string{"0.4 wavelengths", "axial mode"}},
		{"mains", nil, []float64{50}, []string{"axial mode"}},
		{"two wavelengths", nil, c(2), []string{"2 wavelengths", "axial mode", "excess phase"}},
		{"five wavelengths", nil, c(5), []string{"5 wavelengths", "conductor radius of 0.0238", "axial mode"}},
		{"six decades", nil, []float64{1e3, 1e9}, []string{"axial mode"}},
		{"a steep cone", func(d *models.Design) { d.Diameter = models.Law{0.004, 0.2} }, nil, []string{"0.0419 to 2.1 wavelengths", "axial mode"}},
		{"a wide strip", func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.02} }, nil, []string{"strip is 3.34 times", "3"}},
		{"close to a rim", func(d *models.Design) {
			d.Ground = models.Ground{Kind: models.Cup, Diameter: d.Diameter[0] + 2.5*d.Conductor.Diameter, Rim: 0.1}
		}, nil, []string{"cup", "modes"}},
		{"60 turns", func(d *models.Design) { d.Turns = 60 }, nil, []string{"excess phase is 1.02", "0.5"}},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			if tt.hz == nil {
				tt.hz = []float64{1e9}
			}
			r, err := ask(spoilt(tt.change), models.Cone|models.Spread, tt.hz...)
			if err != nil {
				t.Fatal(err)
			}
			if _, err := json.Marshal(r); err != nil {
				t.Errorf("the answer is not all numbers: %v", err)
			}
			all := strings.Join(r.Warnings, "\n")
			for _, w := range tt.want {
				if !strings.Contains(all, w) {
					t.Errorf("no warning says %q: %q", w, r.Warnings)
				}
			}
		})
	}
}

// In its range a design is answered without a word.
func TestNoWarningInside(t *testing.T) {
	d := spoilt(func(d *models.Design) { d.Feed.Height *= 1.5 })
	r, err := ask(d, models.Axis, 0.95e9, 1e9)
	if err != nil || len(r.Warnings) != 0 {
		t.Errorf("%v, %q", err, r.Warnings)
	}
}

// A small normal-mode helix is a short dipole over its image: nothing on the
// axis, a capacitance at the port.
func TestNormalModeIsADipole(t *testing.T) {
	r, err := ask(spoilt(nil), models.Cuts|models.Balance, 0.05/1.05*1e9)
	if err != nil {
		t.Fatal(err)
	}
	s := r.Samples[0]
	if s.Directivity > 1e-3 || math.Abs(s.PeakDirectivity-3) > 0.05 || imag(s.Port) > 0 || math.Abs(s.PowerBalance-1) > 1e-3 {
		t.Errorf("%+v; directivity 3 along the plane, none on the axis are due", s)
	}
}

func TestManyFrequencies(t *testing.T) {
	hz := models.Band{From: 0.7e9, To: 1.3e9, Samples: 400}.Hz()
	r, err := ask(benchDesign(3), models.Axis, hz...)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := json.Marshal(r); err != nil || len(r.Samples) != len(hz) {
		t.Fatalf("%d samples, %v", len(r.Samples), err)
	}
	for i := range hz[2:] {
		// A sample lies where its neighbours say: none is another's.
		a, b, c := r.Samples[i].Port, r.Samples[i+1].Port, r.Samples[i+2].Port
		if r.Samples[i].Hz != hz[i] || apart(b, (a+c)/2) > 0.02 {
			t.Errorf("%g Hz: %.4g Ω between %.4g and %.4g", r.Samples[i+1].Hz, b, a, c)
		}
	}
}

// Whatever the dimensions, the end is an answer of numbers or an error with
// words. About half of these designs are answered.
func TestAnythingEndsWell(t *testing.T) {
	s, err := New(Draft)
	if err != nil {
		t.Fatal(err)
	}
	rapid.Check(t, func(rt *rapid.T) {
		power := func(name string, lo, hi float64) float64 {
			return math.Pow(10, rapid.Float64Range(lo, hi).Draw(rt, "log "+name))
		}
		across := power("diameter", -4, 1)
		d := models.Design{
			Turns:      rapid.Float64Range(0.01, 8).Draw(rt, "turns"),
			Handedness: models.Right,
			Conductor:  models.Conductor{Diameter: across * power("conductor", -6, -0.5), Material: models.Material{Conductivity: power("conductivity", -3, 40), Density: 8890}},
			Feed:       models.Feed{Height: across * power("riser", -2, 1), Impedance: 50},
		}
		for range rapid.IntRange(1, 4).Draw(rt, "knots") {
			d.Diameter = append(d.Diameter, across*power("taper", -0.5, 0.5))
			d.Spacing = append(d.Spacing, across*power("spacing", -1.5, 1))
		}
		if rapid.Bool().Draw(rt, "strip") {
			d.Feed.Strip = models.Strip{Turns: d.Turns * rapid.Float64Range(0.05, 0.95).Draw(rt, "strip turns"), Width: across * power("width", -3, 0)}
		}
		if rapid.Bool().Draw(rt, "pin") {
			d.Feed.Pin = across * power("pin", -6, 1)
		}
		if rapid.Bool().Draw(rt, "coat") {
			d.Insulation = models.Insulation{Thickness: across * power("thickness", -6, 0), Permittivity: power("permittivity", 0, 3)}
		}
		hz := models.LightSpeed / across * power("size in wavelengths", -7, 0.5)
		r, err := s.Simulate(context.Background(), d, models.Question{Hz: []float64{hz, 1.1 * hz}, Outputs: models.Cone | models.Spread, Cone: 0.3})
		if err != nil {
			if err.Error() == "" {
				rt.Fatal("an error without words")
			}
			return
		}
		if _, err := json.Marshal(r); err != nil {
			rt.Fatalf("the answer is not all numbers: %v", err)
		}
	})
}
