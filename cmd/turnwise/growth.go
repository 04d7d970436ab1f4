package main

import (
	"fmt"
	"strings"

	"turnwise/optimize/journal"
)

// milestones are the parts of the last hypervolume that a summary names.
var milestones = []float64{0.9, 0.99}

// grownBy says when the front's hypervolume came to parts of its last; empty
// where it was not measured.
func grownBy(all []journal.Growth) string {
	if len(all) == 0 || !(all[len(all)-1].Hypervolume > 0) {
		return ""
	}
	last := all[len(all)-1].Hypervolume
	var parts []string
	for _, part := range milestones {
		for _, g := range all {
			if g.Hypervolume >= part*last {
				parts = append(parts, fmt.Sprintf("%.0f %% after %d evaluations", 100*part, g.Evaluations))
				break
			}
		}
	}
	return strings.Join(parts, ", ")
}
