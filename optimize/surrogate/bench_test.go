package surrogate_test

import (
	"fmt"
	"sort"
	"testing"

	"turnwise/optimize/front"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/surrogate"
)

// BenchmarkExpensive is the searcher where simulations are dear: all that was
// answered within the evaluations, seeds 1 to 11. Run it with -benchtime 1x.
func BenchmarkExpensive(b *testing.B) {
	for _, p := range append(searchtest.Problems(), searchtest.ZDT1In10()...) {
		for _, n := range []int{200, 500, 2000} {
			b.Run(fmt.Sprintf("%s/evaluations=%d", p.Name, n), func(b *testing.B) {
				for b.Loop() {
					var fractions []float64
					for seed := uint64(1); seed <= 11; seed++ {
						all := searchtest.Drive(p, surrogate.New(p.Domain, surrogate.Config{Evaluations: n, Seed: seed}, nil))
						values := make([]front.Value, len(all))
						for i := range all {
							values[i] = all[i].Value()
						}
						fractions = append(fractions, p.Fraction(values))
					}
					sort.Float64s(fractions)
					b.ReportMetric(fractions[len(fractions)/2], "hv-fraction")
					b.ReportMetric(fractions[0], "hv-fraction-worst")
				}
			})
		}
	}
}
