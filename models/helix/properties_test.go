package helix

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
	"pgregory.net/rapid"

	"turnwise/models"
)

// sane draws windings somebody might try.
var sane = rapid.Custom(func(t *rapid.T) models.Design {
	num := func(name string, lo, hi float64) float64 { return rapid.Float64Range(lo, hi).Draw(t, name) }
	law := func(name string, lo, hi float64) models.Law {
		return rapid.SliceOfN(rapid.Float64Range(lo, hi), 1, 6).Draw(t, name)
	}
	d := plain()
	d.Turns = num("turns", 0.05, 6)
	d.Diameter, d.Spacing = law("diameter", 0.02, 0.08), law("spacing", 0.003, 0.06)
	d.Handedness = rapid.SampledFrom([]models.Sense{models.Right, models.Left}).Draw(t, "hand")
	d.Feed.Height = num("height", 0.0015, 0.02)
	switch rapid.IntRange(0, 3).Draw(t, "start") {
	case 1:
		d.Feed.Lead = models.Lead{Turns: d.Turns * num("lead", 0.05, 1), Spacing: num("lead spacing", 0, 0.05)}
	case 2:
		if d.Turns > 0.3 {
			d.Feed.Lead = models.Lead{Turns: (d.Turns - 0.25) * num("lead", 0.05, 1), Spacing: num("lead spacing", 0, 0.05), Shape: models.Flat}
		}
	case 3:
		d.Feed.Strip = models.Strip{Turns: d.Turns * num("strip", 0.05, 1), Width: 0.004}
	}
	return d
})

// wild draws dimensions at the very edges of what Check lets through.
var wild = rapid.Custom(func(t *rapid.T) models.Design {
	size := func(name string) float64 { return math.Pow(10, rapid.Float64Range(-8, 3).Draw(t, name)) }
	law := func(name string) models.Law {
		l := make(models.Law, rapid.IntRange(1, 5).Draw(t, name+" knots"))
		for i := range l {
			l[i] = size(name)
		}
		return l
	}
	d := plain()
	d.Turns = math.Pow(10, rapid.Float64Range(-3, 3).Draw(t, "turns"))
	d.Diameter, d.Spacing = law("diameter"), law("spacing")
	d.Conductor.Diameter = 0.9 * max(narrowest(d.Diameter), 2e-9)
	d.Feed.Height = max(size("height"), d.Conductor.Diameter)
	if rapid.Bool().Draw(t, "lead") {
		d.Feed.Lead = models.Lead{Turns: max(d.Turns*rapid.Float64Range(0, 1).Draw(t, "lead turns"), 1e-3), Spacing: size("lead spacing")}
	}
	if rapid.Bool().Draw(t, "strip") {
		d.Feed.Strip = models.Strip{Turns: max(d.Turns*rapid.Float64Range(0, 1).Draw(t, "strip turns"), 1e-3), Width: size("width")}
	}
	return d
})

func drawn(t *rapid.T, from *rapid.Generator[models.Design]) (models.Design, *Curve) {
	d := from.Draw(t, "design")
	c, err := Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	return d, c
}

func TestLawsNeverLeaveTheirKnots(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d, c := drawn(t, sane)
		least, most := narrowest(d.Diameter), 0.0
		for _, v := range d.Diameter {
			most = max(most, v)
		}
		for _, at := range along(d, 60) {
			if v := c.Diameter(at); v < least-1e-15 || v > most+1e-15 {
				t.Errorf("diameter %g at %g of a law from %g to %g", v, at, least, most)
			}
			if v := c.Spacing(at); v < 0 {
				t.Errorf("spacing %g at %g", v, at)
			}
		}
	})
}

func TestArcLengthOfAnyWinding(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d, c := drawn(t, sane)
		want := refer(d).arc(d.Turns)
		near(t, "wire length", c.WireLength(), want, 1e-9*want)
		at := d.Turns * rapid.Float64Range(0, 1).Draw(t, "at")
		near(t, "parameter", c.Parameter(c.Arc(at)), at, 1e-12*(1+d.Turns))
		nearVec(t, "point", c.AtArc(c.Arc(at)).Pos, c.At(at).Pos, 1e-12)
	})
}

// All lengths of a design grown alike grow all lengths of the curve alike.
func TestScale(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d, c := drawn(t, sane)
		const by = 8 // a power of two, so that laws scale without rounding
		grown := d
		grown.Diameter, grown.Spacing = scaled(d.Diameter, by), scaled(d.Spacing, by)
		grown.Feed.Height *= by
		grown.Feed.Lead.Spacing *= by
		grown.Feed.Strip.Width *= by
		grown.Conductor.Diameter *= by
		g, err := Wind(&grown)
		if err != nil {
			t.Fatal(err)
		}
		a, b := c.Geometry(), g.Geometry()
		near(t, "length", b.Length, by*a.Length, 1e-12*b.Length)
		near(t, "wire length", b.WireLength, by*a.WireLength, 1e-12*b.WireLength)
		near(t, "widest", b.Widest, by*a.Widest, 1e-12*b.Widest)
		near(t, "mass", b.Mass, by*by*by*a.Mass, 1e-12*b.Mass)
		near(t, "bend radius", b.BendRadius, by*a.BendRadius, 1e-9*b.BendRadius)
		near(t, "excess phase", g.ExcessPhase(1e9/by), c.ExcessPhase(1e9), 1e-12*c.ExcessPhase(1e9))
		if one := c.Clearances().Turns; !math.IsInf(one, 1) {
			near(t, "clearance", g.Clearances().Turns, by*one, 1e-9*by*one)
		}
	})
}

func scaled(l models.Law, by float64) models.Law {
	out := make(models.Law, len(l))
	for i, v := range l {
		out[i] = by * v
	}
	return out
}

// No pair of sampled points comes closer than the clearance says, but for the
// half a percent that a law of many waves may hide; some pair comes nearly as
// close.
func TestClearanceOfAnyWinding(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d, c := drawn(t, sane)
		got := c.Clearances().Turns
		if low := c.ClearancesFrom(0).Turns; low > got+1e-8 {
			t.Errorf("clearance %g, below its lower bound %g", got, low)
		}
		if low := c.ClearancesFrom(got * 0.9).Turns; low < got*0.9 {
			t.Errorf("clearance %g, told as %g to who needs nine tenths of it", got, low)
		}
		const per = 48 // samples a turn
		n := int(d.Turns * per)
		points := make([]r3.Vec, n+1)
		for i := range points {
			points[i] = c.At(float64(i) / per).Pos
		}
		least := math.Inf(1)
		for i, p := range points {
			for j := i + per/2; j <= min(i+per*3/2, n); j++ {
				least = min(least, r3.Norm(r3.Sub(points[j], p)))
			}
		}
		if got > least*1.005+1e-8 {
			t.Errorf("clearance %g, but a pair at %g", got, least)
		}
		// The true nearest pair is within a step of a sampled one at both
		// ends, each step at most the fastest speed long.
		fastest := 0.0
		for _, at := range along(d, 200) {
			fastest = max(fastest, c.At(at).Speed)
		}
		if slack := 2.1 * fastest / per; !math.IsInf(got, 1) && least > got+slack {
			t.Errorf("clearance %g, but no pair within %g of it", got, least-got)
		}
	})
}

// Whatever Check lets through is wound in moderate room, and every measure of
// it is a number.
func TestWildDesignsAreMeasured(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		_, c := drawn(t, wild)
		if n := len(c.panels); n > 3000 {
			t.Errorf("%d panels", n)
		}
		g := c.Geometry()
		for _, v := range []float64{g.Length, g.WireLength, g.Widest, g.Mass, g.BendRadius} {
			if !(v > 0) || math.IsInf(v, 1) {
				t.Errorf("geometry %+v", g)
			}
		}
		if v := c.Clearances(); !(v.Turns >= 0) || !(v.Plane > 0) {
			t.Errorf("clearances %+v", v)
		}
		if !(c.WireLength() >= c.Top()*(1-1e-12)) {
			t.Errorf("wire of %g m reaches %g m up", c.WireLength(), c.Top())
		}
		for i := range 21 {
			s := c.WireLength() * float64(i) / 20
			p := c.AtArc(s)
			for _, v := range []float64{p.Pos.X, p.Pos.Y, p.Pos.Z, p.Speed, p.Curvature} {
				if math.IsNaN(v) || math.IsInf(v, 0) {
					t.Errorf("point %+v at %g", p, s)
				}
			}
			near(t, "tangent", r3.Norm(p.Tangent), 1, 1e-12)
			if s > c.Riser() {
				near(t, "arc of the parameter", c.Arc(c.Parameter(s)), s, 1e-9*c.WireLength())
			}
		}
	})
}
