package workshop

import (
	"context"
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/models/moment"
)

// TestExplainTwo finds the two things that were changed, where no one alone
// explains it.
func TestExplainTwo(t *testing.T) {
	d := antennas["cylinder"]
	d.Turns = 4
	d.Feed.Transformer = models.Transformer{Impedance: 85, Length: 0.044}
	hz := models.Band{From: 1.5e9, To: 1.86e9, Samples: 13}.Hz()
	for name, c := range map[string]struct {
		change func(d *models.Design)
		want   map[string]float64
	}{
		"riser and diameter": {func(d *models.Design) { d.Feed.Height += 0.8e-3; d.Diameter = models.Law{d.Diameter[0] + 1.8e-3} },
			map[string]float64{"riser height": 0.8e-3, "winding diameter": 1.8e-3}},
		"line and diameter": {func(d *models.Design) {
			d.Feed.Transformer.Length -= 0.9e-3
			d.Diameter = models.Law{d.Diameter[0] + 1.8e-3}
		},
			map[string]float64{"line section": -0.9e-3, "winding diameter": 1.8e-3}},
	} {
		all := explain(t, d, hz, differing(t, d, hz, c.change))
		best := all.Best()
		if len(best.Shifts) != 2 || best.Left > 0.05 {
			t.Errorf("%s: %.3f left by %+v; alone %s leaves %.2f", name, best.Left, best.Shifts, all.Single[0].Words(), all.Single[0].Left)
			continue
		}
		for _, s := range best.Shifts {
			if by, ok := c.want[s.Name]; !ok || math.Abs(s.By/by-1) > 0.2 {
				t.Errorf("%s: %s, %.0f %% left", name, s.Words(), 100*best.Left)
			}
		}
	}
}

// bowl is a cause that adds a fixed complex number for each unit.
func bowl(slopes []complex128, low, high float64) cause {
	c := cause{movable: movable{Lowest: low, Highest: high}}
	for _, s := range slopes {
		c.at = append(c.at, path{{low, complex(low, 0) * s}, {0, 0}, {high, complex(high, 0) * s}})
	}
	return c
}

// TestFit: where effects are straight lines the amounts are those of the
// normal equations, kept inside what is allowed.
func TestFit(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		number := func(name string) complex128 {
			return complex(rapid.Float64Range(-1, 1).Draw(t, name), rapid.Float64Range(-1, 1).Draw(t, name+" j"))
		}
		slopes := []complex128{2 + number("a"), number("b")}
		due := []complex128{2 + number("due 1"), number("due 2")}
		one := bowl(slopes, -2, 3)
		c := candidate{causes: []*cause{&one}}
		c.fit(due, 0)
		want := 0.0
		for k := range due {
			want += real(cmplx.Conj(slopes[k])*due[k]) / energy(slopes)
		}
		if want = math.Min(math.Max(want, -2), 3); math.Abs(c.by[0]-want) > 1e-3 {
			t.Fatalf("by %g, want %g", c.by[0], want)
		}
	})
}

// TestFitTwo: two straight effects at right angles are found apart.
func TestFitTwo(t *testing.T) {
	a, b := bowl([]complex128{0.1, 0.1i}, -2, 2), bowl([]complex128{0.1i, 0.1}, -1, 4)
	c := candidate{causes: []*cause{&a, &b}}
	left := c.fit([]complex128{0.15 - 0.05i, 0.15i - 0.05}, 0)
	if math.Abs(c.by[0]-1.5) > 1e-3 || math.Abs(c.by[1]+0.5) > 1e-3 || left > 1e-6 {
		t.Errorf("by %g, %g left", c.by, left)
	}
}

// TestBench: what a piece adds does not depend on how it is told: a riser made
// longer is the design with that riser, bends add up, and none adds nothing.
func TestBench(t *testing.T) {
	ctx, rung := context.Background(), fullWave(t, moment.Standard)
	d := antennas["cylinder"]
	d.Turns = 3
	hz := d.Band.Hz()
	added := func(d models.Design, p func(p *piece)) []complex128 {
		t.Helper()
		b, err := newBench(ctx, rung, d, hz)
		if err != nil {
			t.Fatal(err)
		}
		one := b.piece()
		p(one)
		g, err := b.added(ctx, one)
		if err != nil {
			t.Fatal(err)
		}
		return g
	}
	bent := func(at, by float64) func(*piece) {
		return func(p *piece) { p.bends = append(p.bends, bend{at: at, reach: bendReach(at), by: by}) }
	}
	near := func(what string, got, want []complex128, within float64) {
		t.Helper()
		for k := range got {
			if cmplx.Abs(got[k]-want[k]) > within {
				t.Errorf("%s: %.4f, want %.4f", what, got[k], want[k])
			}
		}
	}
	raise := riser(&d, 3e-3)
	higher := d
	higher.Feed.Height += 1e-3
	near("riser", added(d, func(p *piece) { raise.move(p, 1e-3) }), differing(t, d, hz, func(d *models.Design) { d.Feed.Height += 1e-3 }), 1e-12)
	none := make([]complex128, len(hz))
	near("nothing", added(d, func(*piece) {}), none, 0)
	near("a bend of nothing", added(d, bent(1, 0)), none, 1e-12)
	near("the same place twice", added(d, func(p *piece) { bent(0.5, 1e-3)(p); bent(0.5, 0.5e-3)(p) }), added(d, bent(0.5, 1.5e-3)), 1e-9)
	// A bend of a piece with a higher riser is the bend of that design.
	both := added(d, func(p *piece) { raise.move(p, 1e-3); bent(0.5, 1e-3)(p) })
	alone := added(higher, bent(0.5, 1e-3))
	first := added(d, func(p *piece) { raise.move(p, 1e-3) })
	for k := range alone {
		alone[k] += first[k]
	}
	near("riser and bend", both, alone, 1e-9)
}
