package surrogate_test

import (
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/surrogate"
)

func TestContract(t *testing.T) {
	searchtest.Run(t, func(d optimize.Domain, n int, seed uint64, past []optimize.Evaluation) optimize.Searcher {
		return surrogate.New(d, surrogate.Config{Evaluations: n, Seed: seed}, past)
	})
}
