package programme_test

import (
	"context"
	"math"
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/programme"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/space"
)

// climb drives a programme over two models: the fine one is the problem's
// own, the rough one sees a tenth more of everything and a bend of its own.
func climb(p *searchtest.Problem, s optimize.Searcher) []optimize.Evaluation {
	return climbing(p, s, func(x []float64, aim float64) float64 { return 0.3 + 1.1*aim + 0.05*x[0] })
}

// climbing is the same with any rough model.
func climbing(p *searchtest.Problem, s optimize.Searcher, rough func(x []float64, aim float64) float64) (all []optimize.Evaluation) {
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			c.ID = len(all) + i
			score, _ := p.Evaluate(context.Background(), c)
			if c.Rung == 0 {
				for m := range score.Aims {
					score.Aims[m] = rough(c.Point, score.Aims[m])
				}
			}
			told[i] = optimize.Evaluation{Candidate: c, Score: score, Status: optimize.OK}
		}
		all = append(all, told...)
		s.Tell(told)
	}
	return all
}

func fineOf(all []optimize.Evaluation) (values []front.Value) {
	for i := range all {
		if all[i].Rung == 1 {
			values = append(values, all[i].Value())
		}
	}
	return values
}

// A cheap model in front of a dear one: a third of what is bred goes up, only
// what the cheap one was asked about, and the dear answers are worth more than
// as many without it.
func TestLadder(t *testing.T) {
	p := searchtest.ProblemByName("zdt1")
	p.Domain.Space = p.Domain.Space[:10]
	c := programme.Config{Plan: []int{3000}, Sample: 0.05, Genetic: 0.95, Seed: 5}
	two := p.Domain
	two.Finest = 1
	all := climb(p, programme.New(two, c))
	if len(all) != 3000 {
		t.Fatalf("%d asked of 3000", len(all))
	}
	rough := map[string]bool{}
	for _, e := range all {
		switch {
		case e.Rung == 0:
			rough[e.Point.Key()] = true
		case e.From != programme.Sample && !rough[e.Point.Key()]:
			t.Fatalf("%v went up without having been below", e.Point)
		}
	}
	fine := fineOf(all)
	if share := float64(len(fine)-150) / float64(len(rough)); share < 0.3 || share > 0.45 {
		t.Errorf("%.2f of what was asked below went up", share)
	}
	again := climb(p, programme.New(two, c))
	for i := range all {
		if all[i].Point.Key() != again[i].Point.Key() || all[i].Rung != again[i].Rung {
			t.Fatalf("candidate %d differs the second time", i)
		}
	}
	c.Plan[0] = len(fine)
	plain := searchtest.Drive(p, programme.New(p.Domain, c))
	values := make([]front.Value, len(plain))
	for i := range plain {
		values[i] = plain[i].Value()
	}
	if with, without := p.Fraction(fine), p.Fraction(values); with < without {
		t.Errorf("%d dear answers cover %.3f of the front with the cheap model, %.3f without", len(fine), with, without)
	} else {
		t.Logf("%d dear answers: %.3f with, %.3f without", len(fine), with, without)
	}
}

// A cheap model that fails on everything screens nothing out.
func TestLadderWhoseFirstRungFails(t *testing.T) {
	p := searchtest.ProblemByName("zdt1")
	d := p.Domain
	d.Space, d.Finest = append(space.Space(nil), d.Space[:6]...), 1
	s := programme.New(d, programme.Config{Plan: []int{600}, Sample: 0.1, Genetic: 0.9, Seed: 1})
	fine, count := 0, 0
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			c.ID = count + i
			told[i] = optimize.Evaluation{Candidate: c, Status: optimize.Failed, Err: "on purpose"}
			if c.Rung == 1 {
				score, _ := p.Evaluate(context.Background(), c)
				told[i] = optimize.Evaluation{Candidate: c, Score: score, Status: optimize.OK}
				fine++
			}
		}
		count += len(batch)
		s.Tell(told)
	}
	if fine < 200 {
		t.Errorf("%d of %d reached the finest model", fine, count)
	}
}

// What a straight line takes from one model to the other need not be asked of
// the dear one to count: a cheap model that is exact but for its scale finds
// more of the front with as many evaluations than one that is out by a wave.
func TestAgreementPays(t *testing.T) {
	covered := func(wave float64) float64 {
		sum := 0.0
		for seed := uint64(1); seed <= 5; seed++ {
			p := searchtest.ProblemByName("zdt1")
			p.Domain.Space, p.Domain.Finest = p.Domain.Space[:10], 1
			c := programme.Config{Plan: []int{1000}, Sample: 0.05, Genetic: 0.95, Seed: seed}
			sum += p.Fraction(fineOf(climbing(p, programme.New(p.Domain, c), func(x []float64, aim float64) float64 {
				return 2 - aim/2 + wave*math.Sin(1e3*(x[0]+x[1]))
			})))
		}
		return sum / 5
	}
	if exact, wavy := covered(0), covered(0.25); exact < wavy+0.1 {
		t.Errorf("%.3f of the front with a cheap model that agrees, %.3f with one that does not", exact, wavy)
	}
}
