package main

import (
	"testing"

	"turnwise/cmd/internal/report"
	"turnwise/objectives"
	"turnwise/optimize"
)

func TestGrownBy(t *testing.T) {
	grown := func(shares ...float64) (all []report.Step) {
		for i, s := range shares {
			all = append(all, report.Step{Evaluations: 10 * (i + 1), Share: s})
		}
		return all
	}
	for want, all := range map[string][]report.Step{
		"90 % after 20 evaluations, 99 % after 40 evaluations": grown(0, 0.9, 0.95, 1, 1),
		"90 % after 10 evaluations, 99 % after 10 evaluations": grown(1),
		"": nil,
	} {
		if got := grownBy(all); got != want {
			t.Errorf("%v: %q, want %q", all, got, want)
		}
	}
}

// A member that comes late and far out moves what hypervolume is measured
// against; what came before it is measured against the same.
func TestHistoryIsMeasuredAlike(t *testing.T) {
	aims := [][]float64{{0, 1}, {1, 0}, {0.5, 0.5}, {3, -0.01}, {0.2, 0.7}}
	all := make([]optimize.Evaluation, len(aims))
	for i := range aims {
		all[i] = optimize.Evaluation{Candidate: optimize.Candidate{ID: i}, Status: optimize.OK, Score: optimize.Score{Aims: aims[i]}}
	}
	p := &objectives.Problem{}
	steps := history(all, p)
	if first := steps[3]; first.Evaluations != 3 || first.Share < 0.5 {
		t.Errorf("with three of five: %+v", first)
	}
}
