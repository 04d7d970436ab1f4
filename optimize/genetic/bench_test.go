package genetic_test

import (
	"sort"
	"testing"

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
