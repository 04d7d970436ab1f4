package surrogate_test

import (
	"fmt"
	"slices"
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/space"
	"turnwise/optimize/surrogate"
)

func TestContract(t *testing.T) {
	searchtest.Run(t, func(d optimize.Domain, n int, seed uint64, past []optimize.Evaluation) optimize.Searcher {
		return surrogate.New(d, surrogate.Config{Evaluations: n, Batch: 16, Seed: seed}, past)
	})
}

// cube is a domain of n real variables from 0 to 1.
func cube(n, aims, limits int) optimize.Domain {
	d := optimize.Domain{Aims: aims, Limits: limits}
	for i := range n {
		d.Space = append(d.Space, space.NewReal(fmt.Sprintf("x%d", i), 0, 1, 0))
	}
	return d
}

// drive runs a searcher to its end on answers of a test's own.
func drive(s optimize.Searcher, answer func(c optimize.Candidate) optimize.Evaluation) []optimize.Evaluation {
	var all []optimize.Evaluation
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			told[i] = answer(c)
		}
		s.Tell(told)
		all = append(all, told...)
	}
	return all
}

// trade answers with squared distances to as many places as there are aims,
// and limits that cut corners off.
func trade(d optimize.Domain) func(c optimize.Candidate) optimize.Evaluation {
	return func(c optimize.Candidate) optimize.Evaluation {
		e := optimize.Evaluation{Candidate: c, Status: optimize.OK}
		u := d.Space.Unit(c.Point)
		for m := range d.Aims {
			sum := 0.0
			for i, x := range u {
				sum += (x - float64((m+i)%3)/2) * (x - float64((m+i)%3)/2)
			}
			e.Aims = append(e.Aims, sum)
		}
		for l := range d.Limits {
			e.Limits = append(e.Limits, u[l%len(u)]*u[(l+1)%len(u)]-0.5)
		}
		return e
	}
}

func TestTinyBudgetsAreUsed(t *testing.T) {
	d := cube(4, 2, 1)
	for n := 1; n <= 20; n++ {
		if all := drive(surrogate.New(d, surrogate.Config{Evaluations: n, Seed: 2}, nil), trade(d)); len(all) != n {
			t.Errorf("%d of %d evaluations used", len(all), n)
		}
	}
}

// One to four aims: with the evaluations of a few generations the surfaces
// cover what breeding does not.
func TestCoversMoreThanBreeding(t *testing.T) {
	const evaluations = 80
	for aims := 2; aims <= 4; aims++ {
		d := cube(6, aims, 1)
		learned := drive(surrogate.New(d, surrogate.Config{Evaluations: evaluations, Seed: 1}, nil), trade(d))
		bred := drive(genetic.New(d, genetic.Config{Population: 20, Evaluations: evaluations, Seed: 1}, nil), trade(d))
		if l, b := volume(learned), volume(bred); l < 1.1*b {
			t.Errorf("%d aims: hypervolume %.4f learned, %.4f bred", aims, l, b)
		}
	}
}

// volume is the hypervolume that evaluations cover below 1.5 on every aim.
func volume(es []optimize.Evaluation) float64 {
	var points [][]float64
	for i := range es {
		if v := es[i].Value(); v.Feasible() {
			points = append(points, v.Aims)
		}
	}
	reference := slices.Repeat([]float64{1.5}, len(es[0].Aims))
	return front.Hypervolume(points, reference)
}

// A bowl is learned from few points: its floor is found far closer than the
// points drawn lie to each other.
func TestOneAimFindsTheFloor(t *testing.T) {
	d := cube(5, 1, 0)
	least := 1.0
	for _, e := range drive(surrogate.New(d, surrogate.Config{Evaluations: 60, Seed: 3}, nil), trade(d)) {
		least = min(least, e.Aims[0])
	}
	if least > 1e-3 {
		t.Errorf("the least of a bowl is %g after 60 evaluations", least)
	}
}

// Nothing meets the limits at first, and the way there is narrow: what is met
// is 1 in 3,000 of the cube.
func TestWayToTheFeasible(t *testing.T) {
	d := cube(5, 2, 1)
	answer := func(c optimize.Candidate) optimize.Evaluation {
		e := trade(d)(c)
		e.Limits[0] = -0.25
		for _, x := range c.Point {
			e.Limits[0] += 4 * (x - 0.8) * (x - 0.8)
		}
		return e
	}
	met := 0
	for _, e := range drive(surrogate.New(d, surrogate.Config{Evaluations: 80, Seed: 4}, nil), answer) {
		if e.Limits[0] <= 0 {
			met++
		}
	}
	if met < 30 {
		t.Errorf("%d of 80 evaluations meet the limit", met)
	}
}

// Where simulations fail the surfaces know nothing: such places are not
// asked again, and do not swallow the search.
func TestFailuresAreAvoided(t *testing.T) {
	d := cube(4, 2, 0)
	failed := 0
	seen := map[string]bool{}
	answer := func(c optimize.Candidate) optimize.Evaluation {
		if seen[c.Point.Key()] {
			t.Errorf("%v asked twice", c.Point)
		}
		seen[c.Point.Key()] = true
		if c.Point[0] < 0.3 { // the best of the first aim
			failed++
			return optimize.Evaluation{Candidate: c, Status: optimize.Failed, Err: "on purpose"}
		}
		return trade(d)(c)
	}
	if n := len(drive(surrogate.New(d, surrogate.Config{Evaluations: 120, Seed: 5}, nil), answer)); failed > n/3 {
		t.Errorf("%d of %d failed, in 0.3 of the space", failed, n)
	}
}

// A choice among names is learned with the rest: the best of each is found
// although the names have no order.
func TestChoicesAreLearned(t *testing.T) {
	d := optimize.Domain{Aims: 1, Space: space.Space{
		space.NewReal("x", 0, 1, 0), space.NewStepped("n", 1, 9, 1), space.NewChoice("c", "a", "b", "c", "d"),
		space.NewReal("same", 2, 2, 0), space.NewChoice("only", "one"),
	}}
	cost := []float64{3, 0, 2, 1}
	best := 10.0
	for _, e := range drive(surrogate.New(d, surrogate.Config{Evaluations: 50, Seed: 6}, nil), func(c optimize.Candidate) optimize.Evaluation {
		p := c.Point
		aim := (p[0]-0.3)*(p[0]-0.3) + (p[1]-6)*(p[1]-6)/10 + cost[int(p[2])]
		return optimize.Evaluation{Candidate: c, Status: optimize.OK, Score: optimize.Score{Aims: []float64{aim}}}
	}) {
		best = min(best, e.Aims[0])
	}
	if best > 1e-3 {
		t.Errorf("the best of all names is %g off", best)
	}
}

// A space that is asked out ends the search with a word.
func TestSmallSpaceEnds(t *testing.T) {
	d := optimize.Domain{Aims: 1, Space: space.Space{space.NewStepped("n", 1, 4, 1), space.NewChoice("c", "a", "b")}}
	s := surrogate.New(d, surrogate.Config{Evaluations: 40, Seed: 1}, nil)
	if all := drive(s, trade(d)); len(all) != 8 || s.Explain() == "surrogate: its evaluations are spent" {
		t.Errorf("%d of 8 points asked: %s", len(all), s.Explain())
	}
}
