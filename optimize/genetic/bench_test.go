package genetic_test

import (
	"context"
	"math"
	"sort"
	"testing"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/searchtest"
)

// BenchmarkNSGA is the searcher on the standard problems: population 100,
// 25,000 evaluations, seeds 1 to 11, the last population. Run it with
// -benchtime 1x. hv-fraction is the median over the seeds of the part of the
// true front's hypervolume that is covered, hv-fraction-worst the least.
func BenchmarkNSGA(b *testing.B) { standard(b) }

// BenchmarkFront is the same under the name by which searchers are compared
// where an evaluation is cheap.
func BenchmarkFront(b *testing.B) { standard(b) }

// BenchmarkMixed is the same on variables of every kind, 5,000 evaluations.
func BenchmarkMixed(b *testing.B) {
	for _, p := range searchtest.Mixed() {
		covered(b, p, 5000)
	}
}

func standard(b *testing.B) {
	for _, p := range searchtest.Problems() {
		covered(b, p, 25000)
	}
}

func covered(b *testing.B, p *searchtest.Problem, evaluations int) {
	b.Run(p.Name, func(b *testing.B) {
		for b.Loop() {
			var fractions []float64
			for seed := uint64(1); seed <= 11; seed++ {
				fractions = append(fractions, fraction(p, seed, evaluations))
			}
			sort.Float64s(fractions)
			b.ReportMetric(fractions[len(fractions)/2], "hv-fraction")
			b.ReportMetric(fractions[0], "hv-fraction-worst")
		}
	})
}

// fraction is what the last population of one search covers.
func fraction(p *searchtest.Problem, seed uint64, evaluations int) float64 {
	s := genetic.New(p.Domain, genetic.Config{Population: 100, Evaluations: evaluations, Seed: seed}, nil)
	searchtest.Drive(p, s)
	return p.Fraction(append([]front.Value(nil), s.Population()...))
}

// BenchmarkOverhead is what the searcher costs where an evaluation is free:
// 30 variables, population 100. pows is the time of one evaluation in calls
// of math.Pow, timed in turn with it; least times of some rounds, since
// whatever else runs on the machine only adds.
func BenchmarkOverhead(b *testing.B) {
	b.Run("zdt1", func(b *testing.B) {
		const evaluations, turns = 25000, 9
		p := searchtest.ProblemByName("zdt1")
		search, pow := time.Duration(math.MaxInt64), time.Duration(math.MaxInt64)
		for b.Loop() {
			for range turns {
				search = min(search, timed(func() { free(p, evaluations) }))
				pow = min(pow, timed(func() { powers(b, evaluations*100) }))
			}
		}
		b.ReportMetric(evaluations/search.Seconds(), "evaluations/s")
		b.ReportMetric(100*search.Seconds()/pow.Seconds(), "pows")
	})
}

// free searches and keeps nothing of what was answered.
func free(p *searchtest.Problem, evaluations int) {
	s := genetic.New(p.Domain, genetic.Config{Population: 100, Evaluations: evaluations, Seed: 1}, nil)
	var told []optimize.Evaluation
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		told = told[:0]
		for _, c := range batch {
			score, _ := p.Evaluate(context.Background(), c)
			told = append(told, optimize.Evaluation{Candidate: c, Score: score, Status: optimize.OK})
		}
		s.Tell(told)
	}
}

func timed(work func()) time.Duration {
	start := time.Now()
	work()
	return time.Since(start)
}

// powers calls math.Pow so many times.
func powers(b *testing.B, calls int) {
	sum := 0.0
	for k := range calls {
		sum += math.Pow(0.5+float64(k)/float64(calls), 1.0/11)
	}
	if !(sum > 0) {
		b.Fatal("a sum of roots is not positive")
	}
}
