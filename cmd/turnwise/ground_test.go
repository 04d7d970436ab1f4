package main

import (
	"context"
	"fmt"
	"testing"

	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/programme"
)

// A ground is dear to solve and serves every winding on it, so a search must
// come back to equal grounds: only sizes that the brief names, many windings
// on each, and in the last, local stage none that was not known before.
func TestSearchesComeBackToEqualGrounds(t *testing.T) {
	b, err := configs.ReadScenario("seabird-colony")
	if err != nil {
		t.Fatal(err)
	}
	b.Ladder = []configs.Rung{{Model: configs.ClosedForm}}
	b.Spec.Limits = []objectives.Limit{{Figure: objectives.Gain, AtLeast: true, Value: 9}, {Figure: objectives.Mass, Value: 0.8}}
	b.Spec.Aims = append(b.Spec.Aims, objectives.Aim{Figure: objectives.Widest})
	p, err := newProblem(b, b.Spec)
	if err != nil {
		t.Fatal(err)
	}
	const evaluations = 1500
	s := programme.New(p.Domain(), programme.Config{Plan: []int{evaluations}, Sample: 0.1, Genetic: 0.6, Simplex: 0.3, Seed: 1})
	defer s.Close()
	r, err := optimize.Run(context.Background(), p, s, nil, optimize.Options{Workers: 2, Evaluations: evaluations})
	if err != nil {
		t.Fatal(err)
	}
	sizes, windings := map[string]map[string]bool{}, map[string]int{}
	for _, e := range r.Evaluations {
		if sizes[e.From] == nil {
			sizes[e.From] = map[string]bool{}
		}
		g := p.Layout.Design(e.Point).Ground
		sizes[e.From][fmt.Sprintf("%g by %g", g.Diameter, g.Rim)] = true
		windings[e.From]++
	}
	if n, w := len(sizes[programme.Genetic]), windings[programme.Genetic]; n == 0 || n > grounds(p) || w < 10*n {
		t.Errorf("the genetic stage put %d windings on %d grounds; the brief has %d", w, n, grounds(p))
	}
	if windings[programme.Simplex] == 0 {
		t.Error("no simplex moved")
	}
	for size := range sizes[programme.Simplex] {
		if !sizes[programme.Genetic][size] && !sizes[programme.Sample][size] {
			t.Errorf("the simplexes came to a ground of their own, %s", size)
		}
	}
}
