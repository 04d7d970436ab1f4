package helix

import (
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
)

// closest is the least distance between points of the winding half a turn to
// one and a half turns apart: a grid over all pairs, then ever finer grids
// about each of the best.
func closest(c *Curve) float64 {
	type pair struct{ at, on, distance float64 }
	distance := func(at, on float64) float64 {
		if at < 0 || on < 0.5 || on > 1.5 || at+on > c.Turns()+1e-12 {
			return math.Inf(1)
		}
		return r3.Norm(r3.Sub(c.At(at+on).Pos, c.At(at).Pos))
	}
	const steps = 40
	best := make([]pair, 0, 400)
	room := c.Turns() - 0.5
	rows := int(math.Ceil(room*24)) + 1
	for i := range rows + 1 {
		p := pair{distance: math.Inf(1)}
		for j := range steps + 1 {
			at, on := room*float64(i)/float64(rows), 0.5+float64(j)/steps
			if d := distance(at, on); d < p.distance {
				p = pair{at, on, d}
			}
		}
		best = append(best, p)
	}
	least := math.Inf(1)
	for _, p := range best {
		reachAt, reachOn := room/float64(rows), 1.0/steps
		for range 22 {
			centre := p
			for i := -3; i <= 3; i++ {
				for j := -3; j <= 3; j++ {
					at := min(max(centre.at+reachAt*float64(i)/3, 0), room)
					on := min(max(centre.on+reachOn*float64(j)/3, 0.5), 1.5, c.Turns()-at)
					if d := distance(at, on); d < p.distance {
						p = pair{at, on, d}
					}
				}
			}
			reachAt, reachOn = reachAt*0.6, reachOn*0.6
		}
		least = min(least, p.distance)
	}
	return least
}

func TestClearancesAgainstAllPairs(t *testing.T) {
	designs := windings()
	add := func(name string, turns float64, diameter, spacing models.Law) {
		d := plain()
		d.Turns, d.Diameter, d.Spacing = turns, diameter, spacing
		designs[name] = d
	}
	add("touching", 6, models.Law{0.058}, models.Law{1e-6})
	add("touching in the middle", 6, models.Law{0.058}, models.Law{0.03, 1e-5, 0.03})
	add("steep", 6, models.Law{0.058}, models.Law{0.5})
	add("nearly straight", 6, models.Law{0.01}, models.Law{0.3})
	add("a turn and a bit", 1.2, models.Law{0.058, 0.03}, models.Law{0.03})
	add("a turn", 1, models.Law{0.05, 0.03, 0.06}, models.Law{0.03, 0.01})
	add("under a turn", 0.8, models.Law{0.058, 0.03}, models.Law{0.03, 0.01})
	add("a flat cone", 5, models.Law{0.02, 0.2}, models.Law{1e-4})
	add("a flat funnel", 5, models.Law{0.2, 0.02}, models.Law{1e-4})
	add("many knots", 9, models.Law{0.06, 0.05, 0.07, 0.05, 0.06, 0.04}, models.Law{0.03, 0.02, 0.04, 0.015, 0.03})
	add("knots closer than turns", 2, models.Law{0.06, 0.05, 0.07, 0.05, 0.06, 0.04}, models.Law{0.03, 0.02, 0.04, 0.015, 0.03})
	for name, d := range designs {
		c := wind(t, d)
		got := c.Clearances()
		near(t, name+": plane", got.Plane, 0.005, 0)
		if d.Turns < 0.5 {
			continue
		}
		want := closest(c)
		near(t, name+": turns", got.Turns, want, 1e-6*want)
	}
}

// Of a uniform winding the nearest point a turn on lies where the distance
// √(D² sin²(πτ) + S²τ²) is least; found here by bisecting its derivative.
func TestClearanceOfAUniformWinding(t *testing.T) {
	const d, s = 0.058, 0.034
	slope := func(tau float64) float64 { return math.Pi*d*d*math.Sin(2*math.Pi*tau) + 2*s*s*tau }
	lo, hi := 0.75, 1.0
	for range 60 {
		if mid := (lo + hi) / 2; slope(mid) < 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	want := math.Hypot(d*math.Sin(math.Pi*lo), s*lo)
	near(t, "turns", wind(t, plain()).Clearances().Turns, want, 1e-13)
}

func TestClearanceOfShortWindings(t *testing.T) {
	d := plain()
	for _, turns := range []float64{0.001, 0.25, 0.499} {
		d.Turns = turns
		if got := wind(t, d).Clearances().Turns; !math.IsInf(got, 1) {
			t.Errorf("%g turns: clearance %g, want none", turns, got)
		}
	}
	// Half a turn has one pair: its ends.
	for _, law := range []models.Law{{0.058}, {0.058, 0.04}, {0.058, 0.03, 0.05}} {
		d.Turns, d.Diameter = 0.5, law
		c := wind(t, d)
		ends := r3.Norm(r3.Sub(c.At(0.5).Pos, c.At(0).Pos))
		near(t, "half a turn", c.Clearances().Turns, ends, 1e-15)
	}
}

// The distance to a cup's wall, by hand: straight across below the rim, to
// its edge above it.
func TestRimClearance(t *testing.T) {
	for _, x := range []struct {
		name          string
		diameter      models.Law
		spacing       float64
		cup, rim, gap float64 // m
	}{
		{"no cup", models.Law{0.058}, 0.034, 0, 0, math.Inf(1)},
		{"straight", models.Law{0.058}, 0.034, 0.15, 0.06, 0.046},
		{"lower than the riser", models.Law{0.058}, 0.034, 0.15, 0.003, math.Hypot(0.046, 0.002)},
		{"growing, at the open end", models.Law{0.058, 0.098}, 0.034, 0.15, 0.5, 0.026},
		{"shrinking, at the start", models.Law{0.098, 0.058}, 0.034, 0.15, 0.06, 0.026},
		// r = 29 mm + t·20 mm/8.25, z = 5 mm + t·34 mm: a straight line past the edge at (45, 60) mm.
		{"growing past the rim", models.Law{0.058, 0.098}, 0.034, 0.09, 0.06,
			((45-29)*34 - (60-5)*20/8.25) / math.Hypot(34, 20/8.25) * 1e-3},
	} {
		d := plain()
		d.Diameter, d.Spacing = x.diameter, models.Law{x.spacing}
		if x.cup > 0 {
			d.Ground = models.Ground{Kind: models.Cup, Diameter: x.cup, Rim: x.rim}
		}
		if got := wind(t, d).Clearances().Rim; got != x.gap && math.Abs(got-x.gap) > 1e-7 {
			t.Errorf("%s: %g m from the rim, want %g", x.name, got, x.gap)
		}
	}
}

func TestWindingThroughItsCup(t *testing.T) {
	through := plain()
	through.Diameter, through.Ground = models.Law{0.058, 0.098}, models.Ground{Kind: models.Cup, Diameter: 0.09, Rim: 0.25}
	touching := plain()
	touching.Ground = models.Ground{Kind: models.Cup, Diameter: 0.0599, Rim: 0.06}
	touching.Feed.Pin = 0.0005 // so that the opening fits
	for name, d := range map[string]models.Design{"through": through, "touching": touching} {
		if _, err := Wind(&d); err == nil || !strings.Contains(err.Error(), "ground.diameter: the winding comes to") || !strings.Contains(err.Error(), "a lower rim is due") {
			t.Errorf("%s: error %v", name, err)
		}
	}
	through.Ground.Rim = 0.15
	if _, err := Wind(&through); err != nil {
		t.Errorf("a winding that grows wider than its cup above the rim: %v", err)
	}
}
