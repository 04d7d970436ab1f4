package surrogate_test

import (
	"fmt"
	"sort"
	"testing"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/space"
	"turnwise/optimize/surrogate"
)

// BenchmarkExpensive is the searcher where simulations are dear: all that was
// answered within the evaluations, seeds 1 to 11. Run it with -benchtime 1x.
// Beside it what the published genetic searcher and this project's cover with
// a population of 20: nsga and genetic.
func BenchmarkExpensive(b *testing.B) {
	for _, p := range append(searchtest.Problems(), searchtest.ZDT1In10()...) {
		for _, n := range []int{200, 500, 2000} {
			b.Run(fmt.Sprintf("%s/evaluations=%d", p.Name, n), func(b *testing.B) {
				for b.Loop() {
					dear := fractions(p, func(seed uint64) []front.Value {
						return driven(p, surrogate.New(p.Domain, surrogate.Config{Evaluations: n, Seed: seed}, nil))
					})
					b.ReportMetric(dear[len(dear)/2], "hv-fraction")
					b.ReportMetric(dear[0], "hv-fraction-worst")
					ours := fractions(p, func(seed uint64) []front.Value {
						return driven(p, genetic.New(p.Domain, genetic.Config{Population: plainPopulation, Evaluations: n, Seed: seed}, nil))
					})
					b.ReportMetric(ours[len(ours)/2], "genetic")
					published := fractions(p, func(seed uint64) []front.Value { return plain(p, n, seed) })
					b.ReportMetric(published[len(published)/2], "nsga")
				}
			})
		}
	}
}

// fractions are what searches cover of a front, ascending, of 11 seeds.
func fractions(p *searchtest.Problem, search func(seed uint64) []front.Value) []float64 {
	var out []float64
	for seed := uint64(1); seed <= 11; seed++ {
		out = append(out, p.Fraction(search(seed)))
	}
	sort.Float64s(out)
	return out
}

// driven is all that a searcher was told.
func driven(p *searchtest.Problem, s optimize.Searcher) []front.Value {
	return valuesOf(searchtest.Drive(p, s))
}

func valuesOf(es []optimize.Evaluation) []front.Value {
	values := make([]front.Value, len(es))
	for i := range es {
		values[i] = es[i].Value()
	}
	return values
}

// BenchmarkRound is what one round costs late in a search: 16 points asked
// when 2,000 are known, of 10 variables; by figures of 3 aims and 4 limits,
// and by the traits of two aims and a limit over five frequencies.
func BenchmarkRound(b *testing.B) {
	figures := cube(10, 3, 4)
	b.Run("figures", func(b *testing.B) {
		rounds(b, figures, func(c optimize.Candidate) optimize.Evaluation { return trade(figures)(c) })
	})
	many := banded{true}
	wide := many.domain()
	for _, name := range []string{"a", "b", "c", "d", "e"} {
		wide.Space = append(wide.Space, space.NewReal(name, 0, 1, 1e-6))
	}
	b.Run("traits", func(b *testing.B) {
		rounds(b, wide, func(c optimize.Candidate) optimize.Evaluation {
			s, _ := many.Evaluate(b.Context(), c)
			return optimize.Evaluation{Candidate: c, Score: s, Status: optimize.OK}
		})
	})
}

func rounds(b *testing.B, d optimize.Domain, answer func(optimize.Candidate) optimize.Evaluation) {
	start := drive(genetic.New(d, genetic.Config{Population: 40, Evaluations: 2000, Seed: 1}, nil), answer)
	spent := time.Duration(0)
	count := 0
	for b.Loop() {
		s := surrogate.New(d, surrogate.Config{Evaluations: 2000, Batch: 16, Seed: uint64(count)}, start)
		for range 3 {
			began := time.Now()
			batch := s.Ask()
			told := make([]optimize.Evaluation, len(batch))
			for i, c := range batch {
				told[i] = answer(c)
			}
			s.Tell(told)
			spent += time.Since(began)
			count++
		}
	}
	b.ReportMetric(spent.Seconds()*1000/float64(count), "ms/round")
}
