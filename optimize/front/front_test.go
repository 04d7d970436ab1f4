package front_test

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"turnwise/optimize/front"
)

// drawn values: coarse aims, so that ties are common; some infeasible, some
// unknown.
func drawn(t *rapid.T, aims int) []front.Value {
	n := rapid.IntRange(0, 25).Draw(t, "n")
	values := make([]front.Value, n)
	for i := range values {
		for range aims {
			values[i].Aims = append(values[i].Aims, float64(rapid.IntRange(0, 6).Draw(t, "aim")))
		}
		switch rapid.IntRange(0, 9).Draw(t, "kind") {
		case 0:
			values[i] = front.Value{Unknown: true}
		case 1, 2:
			values[i].Violation = float64(rapid.IntRange(1, 3).Draw(t, "violation"))
		}
	}
	return values
}

func drawnAims(t *rapid.T) int { return rapid.IntRange(1, 4).Draw(t, "aims") }

func points(values []front.Value, of []int) [][]float64 {
	var ps [][]float64
	for _, i := range of {
		ps = append(ps, values[i].Aims)
	}
	return ps
}

func TestDominationIsAStrictOrder(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := drawn(t, drawnAims(t))
		for i := range v {
			if front.Dominates(v[i], v[i]) {
				t.Fatalf("%v dominates itself", v[i])
			}
			for j := range v {
				if front.Dominates(v[i], v[j]) && front.Dominates(v[j], v[i]) {
					t.Fatalf("%v and %v dominate each other", v[i], v[j])
				}
				for k := range v {
					if front.Dominates(v[i], v[j]) && front.Dominates(v[j], v[k]) && !front.Dominates(v[i], v[k]) {
						t.Fatalf("%v, %v, %v: not transitive", v[i], v[j], v[k])
					}
				}
			}
		}
	})
}

// The front by the definition: feasible, not dominated by a feasible one, of
// exact equals the lowest index.
func byDefinition(v []front.Value) []int {
	var out []int
	for i := range v {
		in := v[i].Feasible()
		for j := range v {
			if in && j != i && v[j].Feasible() && (front.Dominates(v[j], v[i]) || j < i && slices.Equal(v[j].Aims, v[i].Aims)) {
				in = false
			}
		}
		if in {
			out = append(out, i)
		}
	}
	return out
}

func TestFrontByDefinition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := drawn(t, drawnAims(t))
		if got, want := front.Front(v), byDefinition(v); !slices.Equal(got, want) {
			t.Fatalf("front %v, by definition %v", got, want)
		}
	})
}

// Layers by the definition: take the undominated off, time and again.
func TestLayersByDefinition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := drawn(t, drawnAims(t))
		left := make([]int, len(v))
		for i := range left {
			left[i] = i
		}
		var want [][]int
		for len(left) > 0 {
			var layer, rest []int
			for _, i := range left {
				if slices.ContainsFunc(left, func(j int) bool { return front.Dominates(v[j], v[i]) }) {
					rest = append(rest, i)
				} else {
					layer = append(layer, i)
				}
			}
			want, left = append(want, layer), rest
		}
		got := front.Layers(v)
		if len(got) != len(want) {
			t.Fatalf("%d layers, by definition %d", len(got), len(want))
		}
		for k := range got {
			if !slices.Equal(got[k], want[k]) {
				t.Fatalf("layer %d is %v, by definition %v", k, got[k], want[k])
			}
		}
	})
}

// Hypervolume on a grid of unit cells: the cells that some point dominates,
// counted one by one.
func cells(ps [][]float64, side int) float64 {
	if len(ps) == 0 {
		return 0
	}
	count, n := 0, len(ps[0])
	cell := make([]int, n)
	for {
		if slices.ContainsFunc(ps, func(p []float64) bool {
			for m := range p {
				if p[m] > float64(cell[m]) {
					return false
				}
			}
			return true
		}) {
			count++
		}
		m := 0
		for ; m < n; m++ {
			if cell[m]++; cell[m] < side {
				break
			}
			cell[m] = 0
		}
		if m == n {
			return float64(count)
		}
	}
}

func TestHypervolumeCountsCells(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		aims := drawnAims(t)
		v := drawn(t, aims)
		var ps [][]float64
		for i := range v {
			if !v[i].Unknown {
				ps = append(ps, v[i].Aims)
			}
		}
		reference := slices.Repeat([]float64{6}, aims)
		want := cells(ps, 6)
		if got := front.Hypervolume(ps, reference); math.Abs(got-want) > 1e-9 {
			t.Fatalf("%v: %g, by counting %g", ps, got, want)
		}
		for i, share := range front.Contributions(ps, reference) {
			without := slices.Delete(slices.Clone(ps), i, i+1)
			if loss := want - front.Hypervolume(without, reference); math.Abs(share-loss) > 1e-9 {
				t.Fatalf("point %d of %v contributes %g, is missed by %g", i, ps, share, loss)
			}
		}
	})
}

// What a point gains is what the hypervolume grows by.
func TestGainByDefinition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		aims := rapid.IntRange(1, 4).Draw(t, "aims")
		at := rapid.SliceOfN(rapid.Map(rapid.IntRange(0, 6), func(k int) float64 { return float64(k) }), aims, aims)
		points := rapid.SliceOfN(at, 0, 12).Draw(t, "points")
		one := at.Draw(t, "one")
		reference := slices.Repeat([]float64{5}, aims)
		want := front.Hypervolume(append(slices.Clone(points), one), reference) - front.Hypervolume(points, reference)
		if got := front.Gain(one, points, reference); math.Abs(got-want) > 1e-9 {
			t.Fatalf("%v gains %g, the hypervolume grows by %g", one, got, want)
		}
	})
}

// Closed form: the unit square under a quarter circle, sampled finely.
func TestHypervolumeOfACircle(t *testing.T) {
	var ps [][]float64
	for i := range 20001 {
		s, c := math.Sincos(math.Pi / 2 * float64(i) / 20000)
		ps = append(ps, []float64{1 - s, 1 - c})
	}
	if got := front.Hypervolume(ps, []float64{1, 1}); math.Abs(got-math.Pi/4) > 1e-4 {
		t.Errorf("%.6f, want π/4", got)
	}
	defer func() {
		if recover() == nil {
			t.Error("five aims did not panic")
		}
	}()
	front.Hypervolume(nil, make([]float64, 5))
}

// Thinning removes, one at a time, the point that is missed least.
func TestThinByDefinition(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		aims := rapid.IntRange(2, 4).Draw(t, "aims")
		v := drawn(t, aims)
		ps := points(v, front.Front(v))
		k := rapid.IntRange(1, 12).Draw(t, "k")
		reference := slices.Repeat([]float64{7}, aims)
		left := make([]int, len(ps))
		for i := range left {
			left[i] = i
		}
		for len(left) > k {
			var now [][]float64
			for _, i := range left {
				now = append(now, ps[i])
			}
			shares := front.Contributions(now, reference)
			worst := 0
			for i := range shares {
				if shares[i] < shares[worst]-1e-12 || math.Abs(shares[i]-shares[worst]) <= 1e-12 {
					worst = i
				}
			}
			left = slices.Delete(left, worst, worst+1)
		}
		if got := front.Thin(ps, reference, k); !slices.Equal(got, left) {
			t.Fatalf("%v to %d: %v, by definition %v", ps, k, got, left)
		}
	})
}

func TestThinnedKeepsMembers(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := drawn(t, rapid.IntRange(2, 4).Draw(t, "aims"))
		k := rapid.IntRange(0, 6).Draw(t, "most")
		all := front.Front(v)
		got := front.Thinned(v, k)
		want := len(all)
		if k > 0 {
			want = min(want, k)
		}
		if len(got) != want {
			t.Fatalf("%d members of %d, most %d", len(got), len(all), k)
		}
		for _, i := range got {
			if !slices.Contains(all, i) {
				t.Fatalf("%d is no member", i)
			}
		}
	})
}

// An archive holds the front of all that was inserted, in any order.
func TestArchiveIsTheFront(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := drawn(t, drawnAims(t))
		var a front.Archive
		for _, i := range rapid.Permutation(indices(len(v))).Draw(t, "order") {
			a.Insert(i, v[i])
		}
		want := front.Front(v)
		if got := a.IDs(); !slices.Equal(got, want) || a.Len() != len(want) {
			t.Fatalf("archive %v, front %v", got, want)
		}
		if len(want) > 0 {
			if got, want := a.Hypervolume(), front.Hypervolume(points(v, want), a.Reference()); math.Abs(got-want) > 1e-9 {
				t.Fatalf("hypervolume %g, want %g", got, want)
			}
		}
	})
	fixed := front.NewArchive([]float64{2, 2})
	fixed.Insert(0, front.Value{Aims: []float64{1, 1}})
	if fixed.Hypervolume() != 1 || !slices.Equal(fixed.Reference(), []float64{2, 2}) {
		t.Errorf("hypervolume %g against %v", fixed.Hypervolume(), fixed.Reference())
	}
}

func indices(n int) []int {
	out := make([]int, n)
	for i := range out {
		out[i] = i
	}
	return out
}

func TestCrowding(t *testing.T) {
	v := []front.Value{{Aims: []float64{0, 4}}, {Aims: []float64{1, 2}}, {Aims: []float64{3, 1}}, {Aims: []float64{4, 0}}}
	got := front.Crowding(v, []int{0, 1, 2, 3})
	if !math.IsInf(got[0], 1) || !math.IsInf(got[3], 1) || math.Abs(got[1]-1.5) > 1e-12 || math.Abs(got[2]-1.25) > 1e-12 {
		t.Errorf("room %v, want ∞ 1.5 1.25 ∞", got)
	}
	if len(front.Crowding(v, nil)) != 0 {
		t.Error("no members have room")
	}
}

// The order of a scalar: feasible by achievement, infeasible by violation,
// unknown; every number finite.
func TestScalarOrder(t *testing.T) {
	s := front.Scalar{Reference: []float64{0, 0}, Weight: []float64{1, 2}, Augmentation: 0.01}
	in := []front.Value{
		{Aims: []float64{-1, -1}}, {Aims: []float64{0, 0}}, {Aims: []float64{1, 1}}, {Aims: []float64{1e300, 1}},
		{Violation: 0.1}, {Violation: 5}, {Violation: math.Inf(1)}, {Unknown: true},
	}
	last := math.Inf(-1)
	for _, v := range in {
		x := s.Of(v)
		if math.IsNaN(x) || math.IsInf(x, 0) || x <= last {
			t.Errorf("%+v: %g after %g", v, x, last)
		}
		last = x
	}
	if x := s.Of(front.Value{Aims: []float64{math.NaN(), 1}}); x != last {
		t.Errorf("an aim that is no number: %g, want that of the unknown", x)
	}
	if got := s.Achievement([]float64{3, 1}); math.Abs(got-(3+0.01*5)) > 1e-12 {
		t.Errorf("achievement %g", got)
	}
}

func TestChoosing(t *testing.T) {
	nan := math.NaN()
	rows := [][]float64{{10, 0.3, nan}, {12, 0.5, 1.5}, {12.5, 0.6, 1.2}, {14, 0.9, nan}}
	gain := func(x float64) front.Target { return front.Target{Column: 0, Bound: x} }
	for _, c := range []struct {
		name string
		got  int
		want int
	}{
		{"shortest of all", front.Least(rows, 1), 0},
		{"shortest with 12", front.Least(rows, 1, gain(12)), 1},
		{"with a ceiling that some lack", front.Least(rows, 1, gain(12), front.Target{Column: 2, Bound: 1.3, Most: true}), 2},
		{"none", front.Least(rows, 1, gain(20)), -1},
		{"greatest", front.Greatest(rows, 0, front.Target{Column: 1, Bound: 0.6, Most: true}), 2},
		{"nearest to 20", front.Nearest(rows, gain(20)), 3},
		{"nearest of none", front.Nearest(nil, gain(20)), -1},
		{"knee", front.Knee([][]float64{{0, 1}, {0.1, 0.2}, {0.5, 0.15}, {1, 0}}), 1},
	} {
		if c.got != c.want {
			t.Errorf("%s: %d, want %d", c.name, c.got, c.want)
		}
	}
	if h := gain(12).Headroom(rows[3]); h != 2 {
		t.Errorf("headroom %g, want 2", h)
	}
}

func TestAxesScale(t *testing.T) {
	a := front.Span([][]float64{{1, 5}, {3, 5}})
	if got := a.Unit([]float64{2, 5}); !slices.Equal(got, []float64{0.5, 0}) {
		t.Errorf("%v", got)
	}
	defer func() {
		if recover() == nil {
			t.Error("the span of nothing did not panic")
		}
	}()
	front.Span(nil)
}

func TestViolationSumsWhatIsBroken(t *testing.T) {
	if got := front.Violation([]float64{-3, 0.5, 0, 2}); got != 2.5 {
		t.Errorf("%g, want 2.5", got)
	}
}
