package surrogate_test

import (
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/surrogate"
)

func TestContractOfNear(t *testing.T) {
	searchtest.Run(t, func(d optimize.Domain, n int, seed uint64, past []optimize.Evaluation) optimize.Searcher {
		return surrogate.New(d, surrogate.Config{Evaluations: n, Batch: 16, Seed: seed, Near: true}, past)
	})
}

// Around a front that the genetic searcher has found, neighbourhoods find
// more of the true front than as many evaluations of the genetic searcher.
func TestNearRefinesAFront(t *testing.T) {
	for _, name := range []string{"zdt3", "osy"} {
		p := searchtest.ProblemByName(name)
		var near, bred float64
		for seed := uint64(1); seed <= 2; seed++ {
			first := searchtest.Drive(p, genetic.New(p.Domain, genetic.Config{Population: 60, Evaluations: 600, Seed: seed}, nil))
			near += covered(p, first, surrogate.New(p.Domain, surrogate.Config{Evaluations: 120, Seed: seed, Near: true}, first))
			bred += covered(p, first, genetic.New(p.Domain, genetic.Config{Population: 60, Evaluations: 120, Seed: seed + 100}, first))
		}
		t.Logf("%s: %.3f near, %.3f bred", name, near/2, bred/2)
		if near <= bred {
			t.Errorf("%s: neighbourhoods cover %.3f, the genetic searcher %.3f", name, near/2, bred/2)
		}
	}
}

// covered is the part of the true front's hypervolume that a history and what
// a searcher adds to it cover.
func covered(p *searchtest.Problem, history []optimize.Evaluation, s optimize.Searcher) float64 {
	var values []front.Value
	for _, e := range append(append([]optimize.Evaluation(nil), history...), searchtest.Drive(p, s)...) {
		values = append(values, e.Value())
	}
	return p.Fraction(values)
}
