package workshop

import (
	"cmp"
	"context"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/models/moment"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// differing is what a change makes of a design's reflection.
func differing(t *testing.T, d models.Design, hz []float64, change func(d *models.Design)) []complex128 {
	t.Helper()
	rung := fullWave(t, moment.Standard)
	was, err1 := sweptReflection(context.Background(), rung, d, hz)
	change(&d)
	is, err2 := sweptReflection(context.Background(), rung, d, hz)
	if err1 != nil || err2 != nil {
		t.Fatal(err1, err2)
	}
	for i := range is {
		is[i] -= was[i]
	}
	return is
}

// sweptReflection is a design's reflection at the connector.
func sweptReflection(ctx context.Context, rung objectives.Rung, d models.Design, hz []float64) ([]complex128, error) {
	r, err := rung.Simulator.Simulate(ctx, d, models.Question{Hz: hz, Outputs: models.Axis})
	if err != nil {
		return nil, err
	}
	out := make([]complex128, len(hz))
	for i := range out {
		out[i] = models.Reflection(r.Samples[i].Input, d.Feed.Impedance)
	}
	return out, nil
}

func explain(t *testing.T, d models.Design, hz []float64, difference []complex128) Explanations {
	t.Helper()
	out, err := Explain(context.Background(), fullWave(t, moment.Standard), d, tolerance.Defaults(), hz, difference)
	if err != nil {
		t.Fatal(err)
	}
	for _, list := range [][]Explanation{out.Single, out.Pairs} {
		if !slices.IsSortedFunc(list, func(a, b Explanation) int { return cmp.Compare(a.Left, b.Left) }) {
			t.Error("the best explanation is not first")
		}
	}
	return out
}

// TestExplain finds the one thing that was changed, and by how much.
func TestExplain(t *testing.T) {
	d := antennas["cylinder"]
	d.Turns = 4
	d.Insulation = models.Insulation{Thickness: 0.0001, Permittivity: 2.3}
	d.Feed.Transformer = models.Transformer{Impedance: 85, Length: 0.044}
	hz := models.Band{From: 1.6e9, To: 1.76e9, Samples: 9}.Hz()
	for name, c := range map[string]struct {
		change func(d *models.Design)
		by     float64
		undo   string
	}{
		"riser height":                   {func(d *models.Design) { d.Feed.Height += 1.4e-3 }, 1.4e-3, "lower"},
		"line section":                   {func(d *models.Design) { d.Feed.Transformer.Length -= 2e-3 }, -2e-3, "lengthen"},
		"winding diameter":               {func(d *models.Design) { d.Diameter = models.Law{d.Diameter[0] + 1e-3} }, 1e-3, ""},
		"spacing per turn":               {func(d *models.Design) { d.Spacing = models.Law{d.Spacing[0] - 0.6e-3} }, -0.6e-3, ""},
		"permittivity of the insulation": {func(d *models.Design) { d.Insulation.Permittivity += 0.3 }, 0.3, ""},
	} {
		difference := differing(t, d, hz, c.change)
		all := explain(t, d, hz, difference)
		best := all.Best()
		if s := best.Shifts[0]; s.Name != name || math.Abs(s.By/c.by-1) > 0.06 || best.Left > 0.01 || s.Undo != c.undo {
			t.Errorf("%s by %g: %+v", name, c.by, best)
		}
		if len(all.Pairs) > 0 || len(best.Shifts) != 1 {
			t.Errorf("%s by %g: explained by one dimension, but pairs were sought", name, c.by)
		}
		// What is left is what simulating it leaves.
		left := 0.0
		for i, g := range best.Added {
			left += square(difference[i] - g)
		}
		if left /= energy(difference); math.Abs(left-best.Left) > 1e-12 {
			t.Errorf("%s leaves %g, said are %g", name, left, best.Left)
		}
	}
	d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.012, Shape: models.Ramp}
	all := explain(t, d, hz, differing(t, d, hz, func(d *models.Design) { d.Feed.Lead.Spacing += 5e-3 }))
	if s := all.Best().Shifts[0]; s.Name != "spacing at the start of the lead" || math.Abs(s.By/5e-3-1) > 0.06 || s.Undo != "narrow" {
		t.Errorf("lead: %+v", s)
	}
	if out := explain(t, d, hz, make([]complex128, len(hz))); out.Best() != nil {
		t.Errorf("no difference, but %+v", out)
	}
}

// TestExplainBend finds a bend of the first turn, and says how to undo it.
func TestExplainBend(t *testing.T) {
	d := antennas["cylinder"]
	d.Turns = 4
	c, err := helix.Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	hz := d.Band.Hz()
	difference := make([]complex128, len(hz))
	for i, f := range hz {
		bent := bend{curve: c, at: 0.5, reach: 0.5, by: -0.0025}
		straight := bent
		straight.by = 0
		z1, err1 := portOf(bent, &d, f)
		z0, err2 := portOf(straight, &d, f)
		if err1 != nil || err2 != nil {
			t.Fatal(err1, err2)
		}
		difference[i] = models.Reflection(z1, 50) - models.Reflection(z0, 50)
	}
	all := explain(t, d, hz, difference)
	best := all.Best()
	if s := best.Shifts[0]; s.Name != "height at ½ turn" || math.Abs(s.By+0.0025) > 0.2e-3 || s.Undo != "lift" {
		t.Errorf("%+v", best)
	}
	if best.Shifts[0].OrMore {
		t.Error("it was sought farther")
	}
	if w, u := best.Words(), best.UndoWords(); !strings.HasPrefix(w, "height at ½ turn −2.") || !strings.HasPrefix(u, "lift by 2.") {
		t.Errorf("%q, %q", w, u)
	}
}

// TestExplainNoise: what the analyser adds by chance at every frequency evens
// out over the band.
func TestExplainNoise(t *testing.T) {
	d := antennas["cylinder"]
	d.Turns = 4
	hz := models.Band{From: 1.6e9, To: 1.76e9, Samples: 41}.Hz()
	difference := differing(t, d, hz, func(d *models.Design) { d.Feed.Height += 1.2e-3 })
	level := math.Sqrt(energy(difference)/float64(len(hz))) / 2
	chance := rand.New(rand.NewPCG(1, 2))
	for i := range difference {
		difference[i] += cmplx.Rect(level, 2*math.Pi*chance.Float64())
	}
	best := explain(t, d, hz, difference).Single[0]
	if s := best.Shifts[0]; s.Name != "riser height" || math.Abs(s.By/1.2e-3-1) > 0.15 || math.Abs(best.Left-0.2) > 0.05 {
		t.Errorf("%s leaves %.3f", s.Words(), best.Left)
	}
}

// TestBetween: halfway between two frequencies a path is their mean, at each
// its own.
func TestBetween(t *testing.T) {
	few := []path{{{-1, 1}, {2, 4}}, {{-1, 3i}, {2, 8}}, {{-1, 5}, {2, 6}}}
	got := between([]float64{10, 20, 30}, few, []float64{10, 15, 20, 30})
	for k, want := range []path{few[0], {{-1, 0.5 + 1.5i}, {2, 6}}, few[1], few[2]} {
		if !slices.Equal(got[k], want) {
			t.Errorf("%v, want %v", got[k], want)
		}
	}
	if one := between([]float64{10}, few[:1], []float64{10}); !slices.Equal(one[0], few[0]) {
		t.Errorf("at one frequency %v", one)
	}
}

// TestExplainFar: what lies farther off than was sought is called so.
func TestExplainFar(t *testing.T) {
	d := antennas["cylinder"]
	hz := d.Band.Hz()
	far := reach(hz[0])
	all := explain(t, d, hz, differing(t, d, hz, func(d *models.Design) { d.Feed.Height += 1.5 * far }))
	s := all.Best().Shifts[0]
	if s.Name != "riser height" || math.Abs(s.By-far) > 1e-9 || !s.OrMore || !strings.HasSuffix(s.Words(), " mm or more") {
		t.Errorf("%+v: %s", s, s.Words())
	}
}

func TestThinned(t *testing.T) {
	for _, c := range []struct {
		n, most int
		want    []int
	}{{0, 5, nil}, {1, 5, []int{0}}, {3, 5, []int{0, 1, 2}}, {9, 5, []int{0, 2, 4, 6, 8}}, {100, 3, []int{0, 50, 99}}, {7, 1, []int{0}}} {
		if got := Thinned(c.n, c.most); !slices.Equal(got, c.want) {
			t.Errorf("%d of %d: %v, want %v", c.most, c.n, got, c.want)
		}
	}
}
