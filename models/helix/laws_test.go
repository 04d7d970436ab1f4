package helix

import (
	"testing"

	"turnwise/models"
)

func TestLawsAreGonums(t *testing.T) {
	laws := map[string]models.Law{
		"one knot":    {0.05},
		"two knots":   {0.05, 0.03},
		"monotone":    {0.03, 0.04, 0.07},
		"a peak":      {0.03, 0.06, 0.04},
		"level inner": {0.03, 0.05, 0.05, 0.04},
		"zigzag":      {0.03, 0.06, 0.02, 0.07, 0.01},
		"steep":       {0.01, 0.0101, 0.09, 0.0901, 0.0902, 0.02},
	}
	for name, law := range laws {
		for _, turns := range []float64{0.4, 1, 7.3, 30} {
			d := plain()
			d.Turns, d.Diameter, d.Spacing = turns, law, law
			c := wind(t, d)
			want := lawOf(law, turns)
			for _, at := range along(d, 97) {
				near(t, name+": diameter", c.Diameter(at), want.Predict(at), 1e-15)
				near(t, name+": spacing", c.Spacing(at), want.Predict(at), 1e-15)
			}
		}
	}
}

// The knots themselves are met, also the last.
func TestLawsMeetTheirKnots(t *testing.T) {
	law := models.Law{0.03, 0.06, 0.02, 0.07, 0.01}
	d := plain()
	d.Diameter = law
	c := wind(t, d)
	for i, want := range law {
		near(t, "knot", c.Diameter(d.Turns*float64(i)/4), want, 1e-16)
	}
}

func TestEqualKnotsAreOneKnot(t *testing.T) {
	base := plain()
	base.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.008}
	want := wind(t, base)
	for n := 2; n <= 6; n++ {
		d := base
		d.Diameter, d.Spacing = repeat(0.058, n), repeat(0.034, n)
		c := wind(t, d)
		near(t, "wire length", c.WireLength(), want.WireLength(), 1e-14)
		near(t, "bend radius", c.Geometry().BendRadius, want.Geometry().BendRadius, 1e-15)
		for _, at := range along(d, 50) {
			p, q := c.At(at), want.At(at)
			nearVec(t, "position", p.Pos, q.Pos, 1e-15)
			nearVec(t, "tangent", p.Tangent, q.Tangent, 1e-14)
			near(t, "arc", c.Arc(at), want.Arc(at), 1e-14)
		}
	}
}

func repeat(v float64, n int) models.Law {
	l := make(models.Law, n)
	for i := range l {
		l[i] = v
	}
	return l
}

// A law of three knots on a straight line is the law of two.
func TestStraightKnotsAreALine(t *testing.T) {
	d := plain()
	d.Diameter = models.Law{0.06, 0.04}
	want := wind(t, d)
	d.Diameter = models.Law{0.06, 0.05, 0.04}
	c := wind(t, d)
	for _, at := range along(d, 40) {
		near(t, "diameter", c.Diameter(at), want.Diameter(at), 1e-16)
	}
	near(t, "wire length", c.WireLength(), want.WireLength(), 1e-13)
}

func TestCubicAboutAnotherStart(t *testing.T) {
	q := cubic{from: 1.5, c: [4]float64{0.3, -0.2, 0.7, 0.11}}
	moved := cubic{from: -0.4, c: q.about(-0.4)}
	for _, at := range []float64{-2, -0.4, 0, 1.5, 3.25} {
		near(t, "cubic", moved.value(at), q.value(at), 1e-14)
	}
}
