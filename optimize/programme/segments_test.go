package programme

import (
	"slices"
	"testing"

	"turnwise/optimize/searchtest"
)

// Who has what of a plan: the learned searcher the beginning of every genetic
// stage that begins early enough, and of a dear search all of them.
func TestSegments(t *testing.T) {
	p := searchtest.ProblemByName("tnk").WithTraits()
	c := Config{Plan: []int{20_000, 1000}, Sample: 0.1, Genetic: 0.7, Simplex: 0.2, Learned: 500}
	late := []segment{{Sample, 2000, 0}, {Learned, 2500, 0}, {Genetic, 16_000, 0}, {Simplex, 20_000, 0}, {Genetic, 20_800, 1}, {Simplex, 21_000, 1}}
	early := []segment{{Sample, 100, 0}, {Learned, 600, 0}, {Genetic, 800, 0}, {Simplex, 1000, 0}, {Learned, 1500, 1}, {Genetic, 1800, 1}, {Simplex, 2000, 1}}
	dear := []segment{{Sample, 100, 0}, {Learned, 800, 0}, {Genetic, 800, 0}, {Simplex, 1000, 0}, {Learned, 1800, 1}, {Genetic, 1800, 1}, {Simplex, 2000, 1}}
	check := func(name string, c Config, want []segment) {
		if s := New(p.Domain, c); !slices.Equal(s.segments, want) {
			t.Errorf("%s: %v, want %v", name, s.segments, want)
		}
	}
	check("late", c, late)
	c.Plan = []int{1000, 1000}
	check("early", c, early)
	c.Dear = true
	check("dear", c, dear)
	c.Learned = 0
	check("dear alone", c, []segment{{Sample, 100, 0}, {Learned, 800, 0}, {Simplex, 1000, 0}, {Learned, 1800, 1}, {Simplex, 2000, 1}})
}
