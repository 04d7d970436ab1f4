package programme_test

import (
	"context"
	"slices"
	"testing"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/programme"
	"turnwise/optimize/searchtest"
)

// dear is a programme for simulations that take long.
func dear(plan ...int) programme.Config {
	c := standard(plan...)
	c.Dear = true
	return c
}

// A programme keeps the contract with the learned searcher in the genetic
// searcher's place, and before it.
func TestContractOfTheLearned(t *testing.T) {
	for name, config := range map[string]func(...int) programme.Config{"dear": dear, "taught": taught} {
		t.Run(name, func(t *testing.T) {
			searchtest.Run(t, func(d optimize.Domain, n int, seed uint64, _ []optimize.Evaluation) optimize.Searcher {
				c := config(n)
				c.Seed = seed
				return programme.New(d, c)
			})
		})
	}
}

// The learned searcher has the genetic searcher's share.
func TestLearnedHasTheGeneticShare(t *testing.T) {
	p := searchtest.ProblemByName("tnk")
	s := programme.New(p.Domain, dear(100))
	defer s.Close()
	got := stages(searchtest.Drive(p, s))
	if got[programme.Sample] != 10 || got[programme.Learned] != 70 || got[programme.Simplex] != 20 {
		t.Errorf("stages: %v", got)
	}
}

// A dear run that is extended asks what it asked before, then a further
// learned and simplex stage.
func TestDearExtensionContinues(t *testing.T) {
	p := searchtest.ProblemByName("tnk")
	short := searchtest.Drive(p, programme.New(p.Domain, dear(80)))
	long := searchtest.Drive(p, programme.New(p.Domain, dear(80, 50)))
	if len(short) != 80 || len(long) != 130 {
		t.Fatalf("%d and %d evaluations", len(short), len(long))
	}
	for i := range short {
		if short[i].Point.Key() != long[i].Point.Key() {
			t.Fatalf("candidate %d differs", i)
		}
	}
	if got := stages(long[80:]); got[programme.Learned] < 30 || got[programme.Simplex] < 5 || got[programme.Genetic] > 0 {
		t.Errorf("the extension: %v", got)
	}
}

// A dear run that was stopped anywhere and goes on finds what an unbroken
// one finds, and evaluates nothing anew.
func TestDearReplay(t *testing.T) {
	for _, p := range []*searchtest.Problem{searchtest.ProblemByName("tnk"), searchtest.ProblemByName("tnk").WithTraits()} {
		replays(t, p)
	}
}

func replays(t *testing.T, p *searchtest.Problem) {
	t.Helper()
	run := func(past []optimize.Evaluation) optimize.Result {
		s := programme.New(p.Domain, dear(80))
		defer s.Close()
		r, err := optimize.Run(context.Background(), p, s, past, optimize.Options{Workers: 2, Evaluations: 80})
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	whole := run(nil)
	for _, at := range []int{7, 33, 71} {
		again := run(whole.Evaluations[:at])
		if again.New != len(whole.Evaluations)-at {
			t.Errorf("stopped at %d: %d evaluated anew", at, again.New)
		}
		same := slices.EqualFunc(whole.Evaluations, again.Evaluations, func(a, b optimize.Evaluation) bool {
			return a.From == b.From && slices.Equal(a.Point, b.Point) && slices.Equal(a.Aims, b.Aims)
		})
		if !same {
			t.Errorf("stopped at %d: another run came out", at)
		}
	}
}

// With few evaluations the learned searcher finds what the genetic one
// cannot.
func TestDearFindsMore(t *testing.T) {
	p := searchtest.ZDT1In10()[0]
	covered := func(c programme.Config) float64 {
		s := programme.New(p.Domain, c)
		defer s.Close()
		all := searchtest.Drive(p, s)
		values := make([]front.Value, len(all))
		for i := range all {
			values[i] = all[i].Value()
		}
		return p.Fraction(values)
	}
	if d, g := covered(dear(100)), covered(standard(100)); d < 0.8 || g > 0.5*d {
		t.Errorf("%.3f of the front learned, %.3f bred", d, g)
	}
}

// The learned searcher steps in where the first sample took long, and where
// it did not, never.
func TestDearByTheClock(t *testing.T) {
	p := searchtest.ProblemByName("tnk")
	run := func(took time.Duration) map[string]int {
		c := standard(200)
		c.DearFrom = 300 * time.Millisecond
		s := programme.New(p.Domain, c)
		defer s.Close()
		var all []optimize.Evaluation
		for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
			told := make([]optimize.Evaluation, len(batch))
			for i, c := range batch {
				score, _ := p.Evaluate(context.Background(), c)
				told[i] = optimize.Evaluation{Candidate: c, Score: score, Status: optimize.OK, Duration: took}
			}
			all = append(all, told...)
			s.Tell(told)
		}
		return stages(all)
	}
	if got := run(time.Second); got[programme.Learned] == 0 || got[programme.Genetic] > 0 {
		t.Errorf("a second each: %v", got)
	}
	if got := run(time.Millisecond); got[programme.Learned] > 0 || got[programme.Genetic] == 0 {
		t.Errorf("a millisecond each: %v", got)
	}
}
