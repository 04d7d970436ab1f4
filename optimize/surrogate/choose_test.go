package surrogate

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// plane is a domain of two variables, two aims and a limit.
func plane() optimize.Domain {
	return optimize.Domain{Aims: 2, Limits: 1, Space: space.Space{space.NewReal("x", 0, 1, 0), space.NewReal("y", 0, 1, 0)}}
}

func answeredAt(x, y, limit float64, status optimize.Status) optimize.Evaluation {
	e := optimize.Evaluation{Candidate: optimize.Candidate{Point: space.Point{x, y}}, Status: status}
	if status == optimize.OK {
		e.Aims, e.Limits = []float64{x, y}, []float64{limit}
	}
	return e
}

func promised(x, y, violation float64) promise {
	return promise{space.Point{x, y}, []float64{x, y}, front.Value{Aims: []float64{x, y}, Violation: violation}}
}

// What is taken is what plain trial of every promise takes, time and again.
func TestChoiceIsGreedy(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := New(plane(), Config{Evaluations: 10}, []optimize.Evaluation{answeredAt(0.5, 0.5, 0, optimize.OK)})
		at := rapid.Map(rapid.IntRange(0, 100), func(k int) float64 { return float64(k) / 100 })
		var pool []promise
		for range rapid.IntRange(1, 12).Draw(t, "promises") {
			pool = append(pool, promised(at.Draw(t, "x"), at.Draw(t, "y"), 0))
		}
		got := s.choose(slices.Clone(pool), 3, 0.1)
		points := [][]float64{{0.5, 0.5}}
		values := make([]front.Value, len(pool))
		for i := range pool {
			values[i] = pool[i].value
		}
		members := front.Front(values)
		axes := front.Span(append(aims(values, members), points...))
		reference := front.UnitReference(2)
		for _, p := range got {
			had := axes.Units(points)
			gained := func(q []float64) float64 {
				return front.Hypervolume(append(slices.Clone(had), axes.Unit(q)), reference) - front.Hypervolume(had, reference)
			}
			for _, i := range members {
				if gained(values[i].Aims) > gained(p.value.Aims)+1e-12 && far(&pool[i], got, apart) {
					t.Fatalf("%v was taken where %v adds more", p.point, pool[i].point)
				}
			}
			if gained(p.value.Aims) < 1e-9 {
				t.Fatalf("%v adds nothing", p.point)
			}
			points = append(points, p.value.Aims)
		}
	})
}

func TestChoiceKeepsApart(t *testing.T) {
	known := []optimize.Evaluation{answeredAt(0.5, 0.5, 0, optimize.OK), answeredAt(0.1, 0.9, 0, optimize.Failed)}
	for _, c := range []struct {
		name string
		pool []promise
		want []space.Point
	}{
		{"what is known", []promise{promised(0.5, 0.5-apart/2, 0), promised(0.5, 0.4, 0)}, []space.Point{{0.5, 0.4}}},
		{"what is taken", []promise{promised(0.4, 0.4, 0), promised(0.4-apart/4, 0.4+apart/2, 0)}, []space.Point{{0.4, 0.4}}},
		{"where it failed", []promise{promised(0.12, 0.8, 0), promised(0.6, 0.3, 0)}, []space.Point{{0.6, 0.3}}},
	} {
		s := New(plane(), Config{Evaluations: 10}, known)
		var got []space.Point
		for _, p := range s.choose(c.pool, 2, 0.1) {
			got = append(got, p.point)
		}
		if !slices.EqualFunc(got, c.want, func(a, b space.Point) bool { return slices.Equal(a, b) }) {
			t.Errorf("%s: %v, want %v", c.name, got, c.want)
		}
	}
}

// With nothing feasible the least violations are taken, some distance apart.
func TestChoiceOfLeastViolations(t *testing.T) {
	s := New(plane(), Config{Evaluations: 10}, []optimize.Evaluation{answeredAt(1, 1, 3, optimize.OK)})
	pool := []promise{promised(0.3, 0.3, 0.5), promised(0.2, 0.2, 0.1), promised(0.22, 0.2, 0.2), promised(0.9, 0.1, 2)}
	got := s.choose(pool, 2, 0.1)
	if len(got) != 2 || got[0].point[0] != 0.2 || got[1].point[0] != 0.3 {
		t.Errorf("taken: %+v", got)
	}
}

// The centres are the best by rank with an even sample of the rest, each
// once, and none that failed.
func TestCentres(t *testing.T) {
	var known []optimize.Evaluation
	for i := range 1000 {
		x := float64(i) / 1000
		e := answeredAt(x, 1-x+float64(i%7), 0, optimize.OK)
		if i%10 == 3 {
			e = answeredAt(x, 0.5, 0, optimize.Failed)
		}
		known = append(known, e)
	}
	s := New(plane(), Config{Evaluations: 10}, known)
	centres := s.centres(mostBest, mostCentres, s.answered)
	if len(centres) != mostCentres {
		t.Fatalf("%d centres", len(centres))
	}
	seen := map[int]bool{}
	best := 0
	for _, i := range centres {
		if seen[i] || known[i].Status != optimize.OK {
			t.Fatalf("centre %d twice or of a failure", i)
		}
		seen[i] = true
		if i%7 <= 1 { // near the front
			best++
		}
	}
	if best < mostBest || best == mostCentres {
		t.Errorf("%d of %d centres are near the front", best, mostCentres)
	}
}

func TestProgress(t *testing.T) {
	at := func(x, y, violation float64) front.Value {
		return front.Value{Aims: []float64{x, y}, Violation: violation}
	}
	unknown := front.Value{Unknown: true}
	for _, c := range []struct {
		name         string
		before, more []front.Value
		want         float64
	}{
		{"nothing", []front.Value{at(0, 1, 0), at(1, 0, 0)}, []front.Value{at(1, 1, 0)}, 0},
		{"a failure", []front.Value{at(0, 1, 0), at(1, 0, 0)}, []front.Value{unknown}, 0},
		{"a quarter", []front.Value{at(0, 1, 0), at(1, 0, 0)}, []front.Value{at(0.5, 0.5, 0)}, 0.25},
		{"the first that meets the limits", []front.Value{at(0, 0, 1)}, []front.Value{at(7, 7, 0)}, 1.21},
		{"half of the violation", []front.Value{at(0, 0, 3), unknown}, []front.Value{at(5, 5, 1.5)}, 0.5},
		{"a larger violation", []front.Value{at(0, 0, 3)}, []front.Value{at(5, 5, 4)}, 0},
		{"the first answer", nil, []front.Value{at(5, 5, 4)}, 0},
	} {
		if got := progress(c.before, c.more); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("%s: %g, want %g", c.name, got, c.want)
		}
	}
}
