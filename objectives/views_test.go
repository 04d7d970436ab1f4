package objectives

import (
	"math"
	"testing"

	"turnwise/models"
	"turnwise/models/helix"
)

// A law with more knots than it needs is the same law.
func TestViewsLiftToTheSameWinding(t *testing.T) {
	s := &Spec{Vary: []Vary{
		{Quantity: Turns, From: 3, To: 12, Knots: 1},
		{Quantity: Diameter, From: 0.04, To: 0.08, Knots: 3},
		{Quantity: Spacing, From: 0.02, To: 0.06, Knots: 2},
		{Quantity: FeedHeight, From: 0.004, To: 0.01, Knots: 1},
	}}
	l := NewLayout(s)
	views := l.views()
	if len(views) != 2 || len(views[0].Space) != 4 || len(views[1].Space) != 6 {
		t.Fatalf("views %v; one of 4 variables and one of 6 are due", views)
	}
	p := views[0].Lift([]float64{7, 0.05, 0.03, 0.006})
	q := views[1].Lift([]float64{7, 0.05, 0.06, 0.03, 0.04, 0.006})
	for i, want := range []float64{7, 0.05, 0.05, 0.03, 0.03, 0.006} {
		if p[i] != want {
			t.Fatalf("lifted to %v", p)
		}
	}
	if len(q) != len(l.Space) {
		t.Fatalf("lifted to %d variables of %d", len(q), len(l.Space))
	}
	wind := func(diameter models.Law) *helix.Curve {
		c, err := helix.Wind(&models.Design{Turns: 7, Diameter: diameter, Spacing: models.Law{0.03}, Handedness: models.Right,
			Conductor: models.Conductor{Diameter: 0.002, Material: models.Material{Conductivity: 58e6, Density: 8890}}, Feed: models.Feed{Height: 0.005, Impedance: 50}})
		if err != nil {
			t.Fatal(err)
		}
		return c
	}
	for _, law := range []models.Law{{0.05}, {0.05, 0.06}, {0.05, 0.06, 0.045}} {
		few, more := wind(law), wind(resampled(law, len(law)+1))
		most := 1e-12
		if len(law) > 2 {
			most = 2e-3 // another cubic
		}
		for x := 0.0; x <= 7; x += 0.25 {
			if d := math.Abs(few.Diameter(x) - more.Diameter(x)); d > most {
				t.Errorf("%v: %g m off at %g turns", law, d, x)
			}
		}
	}
}
