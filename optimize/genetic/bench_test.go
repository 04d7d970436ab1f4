package genetic_test

import (
	"math"
	"sort"
	"testing"
	"time"

	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/searchtest"
)

// BenchmarkNSGA is the searcher on the standard problems: population 100,
// 25,000 evaluations, seeds 1 to 11, the last population. Run it with
// -benchtime 1x. hv-fraction is the median over the seeds of the part of the
// true front's hypervolume that is covered, hv-fraction-worst the least.
func BenchmarkNSGA(b *testing.B) {
	for _, p := range searchtest.Problems() {
		b.Run(p.Name, func(b *testing.B) {
			for b.Loop() {
				var fractions []float64
				for seed := uint64(1); seed <= 11; seed++ {
					fractions = append(fractions, fraction(p, seed, 25000))
				}
				sort.Float64s(fractions)
				b.ReportMetric(fractions[len(fractions)/2], "hv-fraction")
				b.ReportMetric(fractions[0], "hv-fraction-worst")
			}
		})
	}
}

// fraction is what the last population of one search covers.
func fraction(p *searchtest.Problem, seed uint64, evaluations int) float64 {
	s := genetic.New(p.Domain, genetic.Config{Population: 100, Evaluations: evaluations, Seed: seed}, nil)
	searchtest.Drive(p, s)
	return p.Fraction(append([]front.Value(nil), s.Population()...))
}

// BenchmarkOverhead is what the searcher costs where an evaluation is free:
// 30 variables, population 100. pows is the time of one evaluation in calls
// of math.Pow, timed in the same run.
func BenchmarkOverhead(b *testing.B) {
	b.Run("zdt1", func(b *testing.B) {
		const evaluations = 25000
		p := searchtest.ProblemByName("zdt1")
		start := time.Now()
		for b.Loop() {
			searchtest.Drive(p, genetic.New(p.Domain, genetic.Config{Population: 100, Evaluations: evaluations, Seed: 1}, nil))
		}
		each := time.Since(start).Seconds() / evaluations / float64(b.N)
		b.ReportMetric(1/each, "evaluations/s")
		b.ReportMetric(each/pow(), "pows")
	})
}

// pow is the time of one call of math.Pow in seconds.
func pow() float64 {
	const calls = 2_000_000
	sum := 0.0
	start := time.Now()
	for k := range calls {
		sum += math.Pow(0.5+float64(k)/calls, 1.0/11)
	}
	if !(sum > 0) {
		panic("a sum of roots is not positive")
	}
	return time.Since(start).Seconds() / calls
}
