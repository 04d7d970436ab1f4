package main

import (
	"math"
	"testing"

	"turnwise/optimize/journal"
)

func TestGrownBy(t *testing.T) {
	grown := func(volumes ...float64) (all []journal.Growth) {
		for i, v := range volumes {
			all = append(all, journal.Growth{Evaluations: 10 * (i + 1), Hypervolume: v})
		}
		return all
	}
	for want, all := range map[string][]journal.Growth{
		"90 % after 20 evaluations, 99 % after 40 evaluations": grown(0, 1.8, 1.9, 2, 2),
		"90 % after 10 evaluations, 99 % after 10 evaluations": grown(3),
		"": grown(math.NaN(), math.NaN()),
	} {
		if got := grownBy(all); got != want {
			t.Errorf("%v: %q, want %q", all, got, want)
		}
	}
	if got := grownBy(grown(0, 0)); got != "" {
		t.Errorf("nothing feasible: %q", got)
	}
}
