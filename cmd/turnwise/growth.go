package main

import (
	"fmt"
	"slices"
	"strings"

	"turnwise/cmd/internal/report"
	"turnwise/objectives"
	"turnwise/optimize"
)

// milestones are the parts of the last hypervolume that a summary names.
var milestones = []float64{0.9, 0.99}

// grownBy says after how many evaluations the front's hypervolume, over the
// aims' final span, came to parts of its last; empty where it was not
// measured.
func grownBy(steps []report.Step) string {
	var parts []string
	for _, part := range milestones {
		if at := slices.IndexFunc(steps, func(s report.Step) bool { return s.Share >= part }); at >= 0 {
			parts = append(parts, fmt.Sprintf("%.0f %% after %d evaluations", 100*part, steps[at].Evaluations))
		}
	}
	return strings.Join(parts, ", ")
}

// history is how the front of a search grew; what cheaper models said of a
// ladder's candidates counts as evaluations alone.
func history(all []optimize.Evaluation, p *objectives.Problem) []report.Step {
	all = slices.Clone(all)
	for i := range all {
		if all[i].Rung < len(p.Rungs())-1 {
			all[i].Status = optimize.Failed
		}
	}
	return report.History(all)
}
