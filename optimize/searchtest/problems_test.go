package searchtest_test

import (
	"context"
	"math"
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/space"
)

// The true front of each problem, sampled on its known optimum, has the
// volume that the problem states (the values named in problems.go).
func TestTrueFronts(t *testing.T) {
	for _, p := range append(searchtest.Problems(), searchtest.Mixed()...) {
		points := optimum(p)
		if points == nil {
			continue
		}
		var values []front.Value
		for _, x := range points {
			s, err := p.Evaluate(context.Background(), optimize.Candidate{Point: x})
			if err != nil {
				t.Fatal(err)
			}
			values = append(values, front.Value{Aims: s.Aims, Violation: front.Violation(s.Limits)})
		}
		if got := p.Fraction(values); math.Abs(got-1) > 0.005 { // sampling, and rounded axes
			t.Errorf("%s: its own optimum covers %.5f of its front", p.Name, got)
		}
	}
}

// optimum samples the known Pareto set; nil where it is not known in closed
// form (TNK, OSY) .
func optimum(p *searchtest.Problem) []space.Point {
	const n = 4000
	var points []space.Point
	add := func(x ...float64) { points = append(points, x) }
	rest := func(first float64, size int, at func(k int) float64) {
		x := make([]float64, size)
		x[0] = first
		for k := range x[1:] {
			x[k+1] = at(k)
		}
		add(x...)
	}
	shift := func(k int) float64 {
		_, f := math.Modf(float64(k+1) * 0.6180339887498949)
		return 0.2 + 0.6*f
	}
	coil := func(turns, core, pitch float64) {
		add(turns, math.Min(math.Floor(turns/5), 7), core, 7, pitch, 0.28, 0.6)
	}
	for quarters := range 161 {
		switch p.Name {
		case "coil":
			coil(float64(quarters)/4, 1, 0.5)
		case "coil-narrow":
			coil(float64(quarters)/4, 0, 0.56)
		}
	}
	for i := range n + 1 {
		u := float64(i) / n
		switch p.Name {
		case "zdt1", "zdt2", "zdt3", "zdt6":
			rest(u, len(p.Domain.Space), func(int) float64 { return 0 })
		case "zdt4":
			rest(u, 10, func(int) float64 { return 0 })
		case "zdt1-shifted", "zdt2-shifted", "zdt3-shifted", "zdt6-shifted":
			rest(u, len(p.Domain.Space), shift)
		case "zdt4-shifted":
			rest(u, 10, func(k int) float64 { return 10*shift(k) - 5 })
		case "bnh": // x1 = x2 to 3, then x2 = 3
			add(math.Min(5*u, 3), math.Min(5*u, 3))
			add(5*u, math.Min(5*u, 3))
		case "srn": // x1 = −2.5 and on along the edge of the second limit
			add(-2.5, 2.5+u*12.3)
			x2 := 2.5 + 1.2*u
			add(3*x2-10, x2)
		}
	}
	return points
}

func TestShiftedOptimaAreInside(t *testing.T) {
	p := searchtest.ProblemByName("zdt1-shifted")
	s, err := p.Evaluate(context.Background(), optimize.Candidate{Point: make(space.Point, 30)})
	if err != nil || s.Aims[1] < 2 {
		t.Errorf("the old optimum still is one: %v (%v)", s.Aims, err)
	}
}

// Of the narrow coil less than a hundredth of the space is feasible.
func TestNarrowIsNarrow(t *testing.T) {
	p := searchtest.ProblemByName("coil-narrow")
	rng := optimize.Stream(1, "narrow", 0)
	met := 0
	const draws = 100000
	for range draws {
		u := make([]float64, len(p.Domain.Space))
		for i := range u {
			u[i] = rng.Float64()
		}
		s, err := p.Evaluate(context.Background(), optimize.Candidate{Point: p.Domain.Space.FromUnit(u)})
		if err != nil {
			t.Fatal(err)
		}
		if front.Violation(s.Limits) <= 0 {
			met++
		}
	}
	if met == 0 || met > draws/100 {
		t.Errorf("%d of %d points meet the limits", met, draws)
	}
}
