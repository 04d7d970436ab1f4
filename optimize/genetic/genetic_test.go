package genetic_test

import (
	"strings"
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/genetic"
	"turnwise/optimize/searchtest"
)

func TestContract(t *testing.T) {
	searchtest.Run(t, func(d optimize.Domain, n int, seed uint64, past []optimize.Evaluation) optimize.Searcher {
		return genetic.New(d, genetic.Config{Population: 20, Evaluations: n, Seed: seed}, past)
	})
}

// A guard on quality at a fifth of the benchmark's budget: fractions measured
// with seeds 1 to 11, less some room.
func TestReachesFronts(t *testing.T) {
	for name, least := range map[string]float64{"zdt1": 0.78, "zdt1-shifted": 0.82, "zdt3": 0.78, "bnh": 0.99, "tnk": 0.97, "dtlz2": 0.91, "osy": 0.90, "coil": 0.98, "coil-narrow": 0.98} {
		if got := fraction(searchtest.ProblemByName(name), 1, 5000); got < least {
			t.Errorf("%s: %.4f of the front, want %.2f", name, got, least)
		}
	}
}

// No point is asked twice, nor one that was known before.
func TestAsksNothingTwice(t *testing.T) {
	coarse := searchtest.ProblemByName("tnk")
	coarse.Domain.Space[0].Grid, coarse.Domain.Space[1].Grid = 0.01, 0.01
	for _, p := range []*searchtest.Problem{coarse, searchtest.ProblemByName("coil"), searchtest.ProblemByName("coil-narrow")} {
		first := searchtest.Drive(p, genetic.New(p.Domain, genetic.Config{Population: 20, Evaluations: 300, Seed: 1}, nil))
		second := searchtest.Drive(p, genetic.New(p.Domain, genetic.Config{Population: 20, Evaluations: 300, Seed: 2}, first))
		seen := map[string]bool{}
		for _, e := range append(first, second...) {
			if seen[e.Point.Key()] {
				t.Fatalf("%s: %v was asked twice", p.Name, e.Point)
			}
			seen[e.Point.Key()] = true
		}
	}
}

func TestExhaustedSpaceEnds(t *testing.T) {
	p := searchtest.ProblemByName("tnk")
	p.Domain.Space[0].Grid, p.Domain.Space[1].Grid = 1, 1
	s := genetic.New(p.Domain, genetic.Config{Population: 20, Evaluations: 3000, Seed: 1}, nil)
	if n := len(searchtest.Drive(p, s)); n == 0 || n > 25 {
		t.Errorf("%d points of a space of at most 25", n)
	}
	if !strings.Contains(s.Explain(), "known already") {
		t.Errorf("explanation %q", s.Explain())
	}
}
