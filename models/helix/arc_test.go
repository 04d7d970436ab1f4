package helix

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
)

func TestArcLengthAgainstQuadrature(t *testing.T) {
	for name, d := range windings() {
		c, want := wind(t, d), refer(d)
		length := want.arc(d.Turns)
		near(t, name+": wire length", c.WireLength(), length, 1e-11*length)
		for _, at := range along(d, 13) {
			near(t, name+": arc", c.Arc(at), want.arc(at), 1e-11*length)
		}
	}
}

// Where a winding has a narrow waist or all but stands still, a fixed rule
// fails and halving has to do it.
func TestArcLengthOfNarrowWaists(t *testing.T) {
	for _, waist := range []float64{0.01, 0.003, 0.0021} {
		d := plain()
		d.Turns, d.Diameter, d.Spacing = 2, models.Law{0.2, waist, 0.3, waist, 0.2}, models.Law{0.001}
		c, want := wind(t, d), refer(d)
		near(t, "wire length", c.WireLength(), want.arc(2), 1e-11*c.WireLength())
		for _, at := range along(d, 32) {
			near(t, "arc", c.Arc(at), want.arc(at), 1e-11*c.WireLength())
			near(t, "arc of the parameter", c.Arc(c.Parameter(c.Arc(at))), c.Arc(at), 1e-14)
		}
	}
}

// A flat spiral of the same plane has a length in closed form (any calculus
// text): r = r₀ + kθ, L = k/2·[u√(1 + u²) + asinh u] between the ends' u = r/k.
func TestFlatSpiralIsTheClosedForm(t *testing.T) {
	d := plain()
	d.Turns, d.Diameter, d.Spacing = 4, models.Law{0.02, 0.1}, models.Law{0.03}
	d.Feed.Lead = models.Lead{Turns: 3, Spacing: 0, Shape: models.Flat}
	c := wind(t, d)
	k := (0.05 - 0.01) / (2 * math.Pi * 4)
	f := func(r float64) float64 { u := r / k; return k / 2 * (u*math.Sqrt(1+u*u) + math.Asinh(u)) }
	near(t, "arc of the flat part", c.Arc(3)-c.Riser(), f(0.04)-f(0.01), 1e-13)
}

// The chords of a fine polygon are shorter than the arc, by its curvature.
func TestArcLengthAgainstChords(t *testing.T) {
	for name, d := range windings() {
		c := wind(t, d)
		ts := along(d, 20000)
		sum := c.Riser()
		for i, at := range ts[1:] {
			sum += r3.Norm(r3.Sub(c.At(at).Pos, c.At(ts[i]).Pos))
		}
		if length := c.WireLength(); sum > length || sum < length*(1-1e-6) {
			t.Errorf("%s: %g of chords, %g of arc", name, sum, length)
		}
	}
}

func TestParameterIsTheInverseOfArc(t *testing.T) {
	for name, d := range windings() {
		c := wind(t, d)
		for _, at := range along(d, 211) {
			near(t, name+": parameter", c.Parameter(c.Arc(at)), at, 1e-13*(1+d.Turns))
		}
		for i := range 211 {
			s := c.Riser() + (c.WireLength()-c.Riser())*float64(i)/210
			near(t, name+": arc", c.Arc(c.Parameter(s)), s, 1e-14)
			p := c.AtArc(s)
			nearVec(t, name+": point", p.Pos, c.At(c.Parameter(s)).Pos, 0)
		}
		if got := c.Parameter(c.WireLength() + 1); got != d.Turns {
			t.Errorf("%s: parameter %g beyond the open end, want %g", name, got, d.Turns)
		}
		if got := c.AtArc(c.WireLength()); got != c.At(d.Turns) {
			t.Errorf("%s: the wire does not end where the winding does", name)
		}
	}
}

// Panels are where a wrong inverse would hide: their ends and just beside.
func TestParameterAtPanelEnds(t *testing.T) {
	for name, d := range windings() {
		c := wind(t, d)
		for _, q := range c.panels {
			for _, s := range []float64{q.arc, q.arc + q.length, q.arc + 1e-9*q.length, q.arc + (1-1e-9)*q.length} {
				near(t, name+": arc", c.Arc(c.Parameter(s)), s, 1e-14)
			}
		}
	}
}

func TestArcRises(t *testing.T) {
	for name, d := range windings() {
		c := wind(t, d)
		last := c.Riser() - 1e-300
		for _, at := range along(d, 997) {
			s := c.Arc(at)
			if !(s > last || at == 0) {
				t.Errorf("%s: arc %g at %g after %g", name, s, at, last)
			}
			last = s
		}
	}
}

// Speed by arc length is one: AtArc walks as far as it says.
func TestAtArcWalksEvenly(t *testing.T) {
	const h = 1e-6
	for name, d := range windings() {
		c := wind(t, d)
		for i := range 40 {
			s := c.Riser() + (c.WireLength()-c.Riser()-2*h)*(float64(i)+0.5)/40
			step := r3.Norm(r3.Sub(c.AtArc(s+h).Pos, c.AtArc(s).Pos))
			near(t, name+": step", step, h, 1e-7*h)
		}
	}
}
