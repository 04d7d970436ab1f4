package programme_test

import (
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/programme"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/space"
)

func standard(plan ...int) programme.Config {
	return programme.Config{Plan: plan, Sample: 0.1, Genetic: 0.7, Simplex: 0.2, Seed: 1}
}

func TestContract(t *testing.T) {
	searchtest.Run(t, func(d optimize.Domain, n int, seed uint64, _ []optimize.Evaluation) optimize.Searcher {
		c := standard(n)
		c.Seed = seed
		return programme.New(d, c)
	})
}

func stages(all []optimize.Evaluation) map[string]int {
	count := map[string]int{}
	for _, e := range all {
		count[e.From]++
	}
	return count
}

func TestSharesOfThePlan(t *testing.T) {
	p := searchtest.ProblemByName("zdt1")
	s := programme.New(p.Domain, standard(1000))
	defer s.Close()
	all := searchtest.Drive(p, s)
	got := stages(all)
	if len(all) != 1000 || got[programme.Sample] != 100 || got[programme.Genetic] != 700 || got[programme.Simplex] != 200 {
		t.Errorf("%d evaluations: %v", len(all), got)
	}
}

// A run that is extended asks what it asked before, then a further genetic
// and simplex stage.
func TestExtensionContinues(t *testing.T) {
	p := searchtest.ProblemByName("zdt2")
	short := searchtest.Drive(p, programme.New(p.Domain, standard(600)))
	long := searchtest.Drive(p, programme.New(p.Domain, standard(600, 400)))
	if len(short) != 600 || len(long) != 1000 {
		t.Fatalf("%d and %d evaluations", len(short), len(long))
	}
	for i := range short {
		if short[i].Point.Key() != long[i].Point.Key() {
			t.Fatalf("candidate %d differs", i)
		}
	}
	if got := stages(long[600:]); got[programme.Genetic] < 250 || got[programme.Simplex] < 50 {
		t.Errorf("the extension: %v", got)
	}
}

// The user's designs come first and under their own name, then seeds.
func TestStartsAndSeedsComeFirst(t *testing.T) {
	p := searchtest.ProblemByName("tnk")
	c := standard(100)
	c.Start = []space.Point{{1, 1}, {1, 1}, {9, 9}}
	c.Seeds = []space.Point{{0.5, 0.9}}
	s := programme.New(p.Domain, c)
	defer s.Close()
	batch := s.Ask()
	if batch[0].From != programme.Start || batch[1].From != programme.Start || batch[2].From != programme.Sample || batch[2].Point[0] != 0.5 {
		t.Errorf("first batch: %+v", batch[:4])
	}
	if batch[1].Point[0] > 3.2 {
		t.Errorf("a start outside the space was not brought in: %v", batch[1].Point)
	}
}

// Every variable of a sample takes each of as many parts of its range once.
func TestSampleIsALatinHypercube(t *testing.T) {
	p := searchtest.ProblemByName("dtlz2")
	c := programme.Config{Plan: []int{50}, Sample: 1, Seed: 3}
	all := searchtest.Drive(p, programme.New(p.Domain, c))
	if len(all) != 50 {
		t.Fatalf("%d points", len(all))
	}
	for v := range p.Domain.Space {
		parts := map[int]bool{}
		for _, e := range all {
			parts[int(e.Point[v]*64)] = true // a block is of one batch, 64
		}
		if len(parts) != 50 {
			t.Errorf("variable %d: %d parts of the range are used by 50 points", v, len(parts))
		}
	}
}

// What a stage cannot use goes on to others: with nothing continuous to move
// the simplexes leave their share to another genetic round.
func TestLeftoversAreUsed(t *testing.T) {
	p := searchtest.ProblemByName("tnk")
	for i := range p.Domain.Space {
		v := &p.Domain.Space[i]
		p.Domain.Space[i] = space.NewStepped(v.Name, v.From, 3.1, 0.01)
	}
	s := programme.New(p.Domain, standard(400))
	if all := searchtest.Drive(p, s); len(all) != 400 {
		t.Errorf("%d of 400 evaluations used: %s", len(all), s.Explain())
	}
}

// taught is a programme whose genetic stages begin with the learned searcher.
func taught(plan ...int) programme.Config {
	c := standard(plan...)
	c.Learned = 40
	return c
}

// The learned searcher takes the beginning of the genetic stage, of
// extensions too, and nothing where there are no traits to learn.
func TestLearnedTakesTheBeginningOfTheGeneticStage(t *testing.T) {
	with := searchtest.ProblemByName("tnk").WithTraits()
	for _, c := range []struct {
		problem                             *searchtest.Problem
		config                              programme.Config
		sample, genetic, learned, simplexes int
	}{
		{with, taught(200), 20, 100, 40, 40},
		{with, taught(50), 5, 0, 35, 10},
		{with, taught(100, 50), 10, 30 + 0, 40 + 40, 20 + 10},
		{searchtest.ProblemByName("tnk"), taught(200), 20, 140, 0, 40},
	} {
		s := programme.New(c.problem.Domain, c.config)
		got := stages(searchtest.Drive(c.problem, s))
		s.Close()
		if got[programme.Sample] != c.sample || got[programme.Genetic] != c.genetic || got[programme.Learned] != c.learned || got[programme.Simplex] != c.simplexes {
			t.Errorf("plan %v: %v", c.config.Plan, got)
		}
	}
	c := taught(200)
	c.Dear = true
	s := programme.New(with.Domain, c)
	defer s.Close()
	if got := stages(searchtest.Drive(with, s)); got[programme.Genetic] != 0 || got[programme.Learned] != 140 {
		t.Errorf("dear: %v", got)
	}
}
