package helix

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
)

func TestUniformWindingIsTheClosedForm(t *testing.T) {
	d := plain()
	c := wind(t, d)
	turn := math.Hypot(math.Pi*0.058, 0.034)
	near(t, "wire length", c.WireLength(), 0.005+8.25*turn, 1e-14)
	near(t, "top", c.Top(), 0.005+8.25*0.034, 1e-15)
	near(t, "speed", c.At(3.3).Speed, turn, 1e-15)
	near(t, "turns", c.Turns(), 8.25, 0)
	// Curvature of a helix: r/(r² + (S/2π)²).
	p := 0.034 / (2 * math.Pi)
	near(t, "curvature", c.At(3.3).Curvature, 0.029/(0.029*0.029+p*p), 1e-11)
	nearVec(t, "start", c.At(0).Pos, r3.Vec{X: 0.029, Z: 0.005}, 0)
	nearVec(t, "a quarter turn, right-handed", c.At(0.25).Pos, r3.Vec{Y: 0.029, Z: 0.005 + 0.034/4}, 1e-15)
	nearVec(t, "a whole turn", c.At(1).Pos, r3.Vec{X: 0.029, Z: 0.005 + 0.034}, 1e-17)
}

func TestPositionIsTheDesignFilesDescription(t *testing.T) {
	for name, d := range windings() {
		c, want := wind(t, d), refer(d)
		for _, at := range along(d, 61) {
			p := c.At(at)
			nearVec(t, name+": position", p.Pos, want.pos(at), 1e-14)
			near(t, name+": height", c.Height(at), p.Pos.Z, 1e-16)
			near(t, name+": speed", p.Speed, want.speed(at), 1e-13)
			near(t, name+": spacing", c.Spacing(at), want.climb(at), 1e-15)
			near(t, name+": diameter", c.Diameter(at), 2*want.radius(at), 1e-15)
		}
		near(t, name+": top", c.Top(), want.height(d.Turns), 1e-14)
	}
}

// smooth are places a little off every break, where both sides of a central
// difference lie on one piece.
func smooth(c *Curve, n int, reach float64) []float64 {
	var ts []float64
	for i := range n {
		t := c.turns * (float64(i) + 0.5) / float64(n)
		clear := t > reach && t < c.turns-reach
		for _, b := range c.breaks {
			clear = clear && math.Abs(t-b) > reach
		}
		if clear {
			ts = append(ts, t)
		}
	}
	return ts
}

func TestTangentAndCurvatureAgainstDifferences(t *testing.T) {
	const h = 1e-4
	for name, d := range windings() {
		c := wind(t, d)
		places := smooth(c, 53, 2*h)
		if len(places) < 40 {
			t.Fatalf("%s: only %d places left", name, len(places))
		}
		for _, at := range places {
			p, before, after := c.At(at), c.At(at-h), c.At(at+h)
			chord := r3.Scale(1/(2*h), r3.Sub(after.Pos, before.Pos))
			near(t, name+": speed", r3.Norm(chord), p.Speed, 1e-7*p.Speed)
			nearVec(t, name+": tangent", r3.Unit(chord), p.Tangent, 1e-6)
			turn := r3.Norm(r3.Sub(after.Tangent, before.Tangent)) / (2 * h * p.Speed)
			near(t, name+": curvature", turn, p.Curvature, 1e-6*p.Curvature)
			near(t, name+": unit tangent", r3.Norm(p.Tangent), 1, 1e-15)
		}
	}
}

// The start stands on +x whatever the hand, and the mirror image in y is the
// winding of the other hand.
func TestHandednessMirrors(t *testing.T) {
	for name, d := range windings() {
		one := wind(t, d)
		d.Handedness = -d.Handedness
		other := wind(t, d)
		for _, at := range along(d, 40) {
			p, q := one.At(at), other.At(at)
			if q.Pos.Y, q.Tangent.Y = -q.Pos.Y, -q.Tangent.Y; p != q {
				t.Errorf("%s: at %g mirrored %+v, want %+v", name, at, q, p)
			}
		}
		if one.Geometry() != other.Geometry() || one.Clearances() != other.Clearances() || one.WireLength() != other.WireLength() {
			t.Errorf("%s: the hand changes its measures", name)
		}
	}
}

// A uniform winding moved along itself by any part of a turn is itself,
// turned and lifted.
func TestUniformWindingIsAScrew(t *testing.T) {
	d := plain()
	c := wind(t, d)
	for _, by := range []float64{0.1, 0.5, 1, 2.37} {
		turn := r3.NewRotation(2*math.Pi*by, r3.Vec{Z: 1})
		for _, at := range []float64{0, 0.3, 1.9, 5.2} {
			p, q := c.At(at), c.At(at+by)
			moved := turn.Rotate(p.Pos)
			moved.Z += by * 0.034
			nearVec(t, "position", q.Pos, moved, 1e-15)
			nearVec(t, "tangent", q.Tangent, turn.Rotate(p.Tangent), 1e-14)
			near(t, "curvature", q.Curvature, p.Curvature, 0)
		}
	}
}

// The winding's ends stand for all that lies beyond them.
func TestBeyondTheEnds(t *testing.T) {
	c := wind(t, rich())
	if c.At(-1) != c.At(0) || c.At(99) != c.At(c.Turns()) {
		t.Error("a point beyond an end is not that end")
	}
	if c.Arc(-1) != c.Riser() || c.Arc(99) != c.Arc(c.Turns()) {
		t.Error("arc length beyond an end is not that end's")
	}
	if c.Diameter(99) != c.Diameter(c.Turns()) || c.Spacing(-3) != c.Spacing(0) || c.Height(99) != c.Top() {
		t.Error("a law beyond an end is not that end's")
	}
}

func TestBreaks(t *testing.T) {
	change := func(f func(*models.Design)) models.Design {
		d := plain()
		d.Turns = 8
		f(&d)
		return d
	}
	for _, x := range []struct {
		name   string
		design models.Design
		want   []float64
	}{
		{"uniform", change(func(*models.Design) {}), nil},
		{"a line", change(func(d *models.Design) { d.Diameter = models.Law{0.05, 0.04} }), nil},
		{"three knots", change(func(d *models.Design) { d.Diameter = models.Law{0.05, 0.04, 0.05} }), []float64{4}},
		{"knots of two laws", change(func(d *models.Design) {
			d.Diameter, d.Spacing = models.Law{0.05, 0.04, 0.05}, models.Law{0.03, 0.02, 0.03, 0.04, 0.03}
		}), []float64{2, 4, 6}},
		{"ramp", change(func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.01} }), []float64{0.5}},
		{"flat", change(func(d *models.Design) {
			d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.01, Shape: models.Flat}
		}), []float64{0.5, 0.75}},
		{"strip", change(func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.004} }), []float64{0.25}},
		{"strip as long as the lead", change(func(d *models.Design) {
			d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.01}
			d.Feed.Strip = models.Strip{Turns: 0.5 + 1e-12, Width: 0.004}
		}), []float64{0.5}},
		{"lead and strip to the very end", change(func(d *models.Design) {
			d.Turns = 1
			d.Feed.Lead = models.Lead{Turns: 0.75, Spacing: 0.01, Shape: models.Flat}
			d.Feed.Strip = models.Strip{Turns: 1, Width: 0.004}
		}), []float64{0.75}},
	} {
		if got := wind(t, x.design).Breaks(); !slices.Equal(got, x.want) {
			t.Errorf("%s: breaks %v, want %v", x.name, got, x.want)
		}
	}
}

// Position and tangent run on through every break.
func TestBreaksAreSmooth(t *testing.T) {
	for name, d := range windings() {
		c := wind(t, d)
		for _, b := range c.Breaks() {
			p, q := c.At(b-1e-12), c.At(b)
			nearVec(t, name+": position", p.Pos, q.Pos, 1e-12)
			nearVec(t, name+": tangent", p.Tangent, q.Tangent, 1e-10)
		}
	}
}

func TestRiser(t *testing.T) {
	for name, d := range windings() {
		c := wind(t, d)
		near(t, name+": riser", c.Riser(), 0.005, 0)
		for _, s := range []float64{-1, 0, 0.001, 0.00499} {
			want := Point{Pos: r3.Vec{X: c.Diameter(0) / 2, Z: max(s, 0)}, Tangent: r3.Vec{Z: 1}, Speed: 1}
			if got := c.AtArc(s); got != want {
				t.Errorf("%s: at %g of the riser %+v, want %+v", name, s, got, want)
			}
			if got := c.Parameter(s); got != 0 {
				t.Errorf("%s: parameter %g on the riser", name, got)
			}
		}
		if c.AtArc(0.005) != c.At(0) {
			t.Errorf("%s: the winding does not start on the riser's top", name)
		}
	}
}

// A curve wound again is a new one, whatever it was before, an error
// included.
func TestWindingAgain(t *testing.T) {
	var used Curve
	faulty := plain()
	faulty.Turns = math.NaN()
	for name, d := range windings() {
		other := rich()
		if err := used.Wind(&other); err != nil {
			t.Fatal(err)
		}
		if used.Wind(&faulty) == nil {
			t.Fatal("no error")
		}
		if err := used.Wind(&d); err != nil {
			t.Fatal(err)
		}
		fresh := wind(t, d)
		if used.Geometry() != fresh.Geometry() || used.Clearances() != fresh.Clearances() ||
			used.ExcessPhase(1.68e9) != fresh.ExcessPhase(1.68e9) || !slices.Equal(used.Breaks(), fresh.Breaks()) {
			t.Errorf("%s: wound again it measures otherwise", name)
		}
		for _, at := range along(d, 30) {
			if used.At(at) != fresh.At(at) || used.Arc(at) != fresh.Arc(at) || used.AtArc(0.2*at) != fresh.AtArc(0.2*at) {
				t.Errorf("%s: wound again it runs otherwise at %g", name, at)
			}
		}
	}
}

func TestWindingAgainAllocatesNothing(t *testing.T) {
	for _, name := range []string{"uniform", "left", "taper", "growing", "ramp", "flat", "lead to the end", "strip"} {
		d := windings()[name]
		c := wind(t, d)
		if n := testing.AllocsPerRun(20, func() {
			if err := c.Wind(&d); err != nil {
				t.Fatal(err)
			}
		}); n != 0 {
			t.Errorf("%s: %g allocations", name, n)
		}
	}
}

func TestAskingAllocatesNothing(t *testing.T) {
	c := wind(t, rich())
	if n := testing.AllocsPerRun(10, func() {
		c.At(4.2)
		c.AtArc(0.5)
		c.Arc(4.2)
		c.Geometry()
		c.Clearances()
		c.ExcessPhase(1.68e9)
	}); n != 0 {
		t.Errorf("%g allocations", n)
	}
}
