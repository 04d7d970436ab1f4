package helix

import (
	"math"
	"testing"

	"turnwise/models"
)

// copper is 100 % IACS (values page: handbook, memory).
var copper = models.Material{Name: "copper", Conductivity: 58e6, Density: 8890}

// plain is a uniform winding of our own.
func plain() models.Design {
	return models.Design{
		Turns: 8.25, Diameter: models.Law{0.058}, Spacing: models.Law{0.034},
		Handedness: models.Right,
		Conductor:  models.Conductor{Diameter: 0.002, Material: copper},
		Feed:       models.Feed{Height: 0.005, Impedance: 50},
	}
}

// rich has three knots, two knots, a flat lead and a strip.
func rich() models.Design {
	d := plain()
	d.Diameter = models.Law{0.058, 0.060, 0.040}
	d.Spacing = models.Law{0.025, 0.036}
	d.Handedness = models.Left
	d.Feed.Lead = models.Lead{Turns: 0.6, Spacing: 0.008, Shape: models.Flat}
	d.Feed.Strip = models.Strip{Turns: 0.3, Width: 0.005}
	d.Feed.Pin = 0.00127
	return d
}

func wind(t testing.TB, d models.Design) *Curve {
	t.Helper()
	c, err := Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s = %.12g, want %.12g ± %g", what, got, want, tolerance)
	}
}

func TestUniformWindingIsTheClosedForm(t *testing.T) {
	d := plain()
	c := wind(t, d)
	turn := math.Hypot(math.Pi*0.058, 0.034)
	near(t, "wire length", c.WireLength(), 0.005+8.25*turn, 1e-14)
	near(t, "top", c.Top(), 0.005+8.25*0.034, 1e-15)
	near(t, "speed", c.At(3.3).Speed, turn, 1e-15)
	// Curvature of a helix: r/(r² + (S/2π)²).
	p := 0.034 / (2 * math.Pi)
	near(t, "curvature", c.At(3.3).Curvature, 0.029/(0.029*0.029+p*p), 1e-11)
	start := c.At(0)
	near(t, "start x", start.Pos.X, 0.029, 0)
	near(t, "start y", start.Pos.Y, 0, 0)
	near(t, "start z", start.Pos.Z, 0.005, 0)
	quarter := c.At(0.25)
	near(t, "right-handed quarter turn y", quarter.Pos.Y, 0.029, 1e-15)
}

// A tube of the same outside weighs what its ring of metal weighs.
func TestTubeIsLighter(t *testing.T) {
	d := plain()
	solid, err := Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	outer := d.Conductor.Diameter
	d.Conductor.Wall = outer / 8
	tube, err := Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	want := 1 - math.Pow(1-2.0/8, 2)
	if got := tube.Geometry().Mass / solid.Geometry().Mass; math.Abs(got-want) > 1e-12 {
		t.Errorf("tube to solid %g, want %g", got, want)
	}
	for _, wall := range []float64{-1e-3, outer, math.NaN()} {
		d.Conductor.Wall = wall
		if _, err := Wind(&d); err == nil {
			t.Errorf("wall %g: no error", wall)
		}
	}
}
