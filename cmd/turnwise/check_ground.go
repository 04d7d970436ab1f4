package main

import (
	"context"
	"fmt"
	"io"
	"slices"
	"time"

	"turnwise/cmd/internal/report"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// isGround reports whether a column is a dimension of the ground.
func isGround(c objectives.Column) bool {
	return c.Quantity == objectives.GroundDiameter || c.Quantity == objectives.GroundRim
}

// grounds is how many different grounds a search may put its windings on.
func grounds(p *objectives.Problem) int {
	n := 1
	for i, c := range p.Layout.Columns {
		if isGround(c) {
			n *= p.Layout.Space[i].Levels()
		}
	}
	return n
}

// describeGround says what the antennas stand on, and how many sizes of it
// there are.
func describeGround(w io.Writer, p *objectives.Problem) {
	g := p.Base.Ground
	fmt.Fprintf(w, "ground        %s\n", report.GroundWords(g))
	if n := grounds(p); n > 1 {
		fmt.Fprintf(w, "              %d different sizes; the full wave solves each once for all windings on it\n", n)
	}
}

// onGroundOf is a point with the ground of another, itself where its winding
// cannot stand there.
func onGroundOf(p *objectives.Problem, other, pt space.Point) space.Point {
	moved := slices.Clone(pt)
	for i, c := range p.Layout.Columns {
		if isGround(c) {
			moved[i] = other[i]
		}
	}
	if violation, _ := p.Screen(moved); violation > 0 {
		return pt
	}
	return moved
}

// timeGround is how much longer an evaluation takes that is the first on its
// ground: that of one winding on the widest and deepest ground, which no
// other has been timed on, less what an evaluation takes. Without an answer
// it is nothing.
func timeGround(ctx context.Context, p *objectives.Problem, one time.Duration) time.Duration {
	seeds := p.HandSeeds(1)
	if len(seeds) == 0 || grounds(p) == 1 {
		return 0
	}
	widest := slices.Clone(seeds[0])
	for i, c := range p.Layout.Columns {
		if isGround(c) {
			widest[i] = p.Layout.Space[i].To
		}
	}
	began := time.Now()
	if _, err := p.Evaluate(ctx, optimize.Candidate{Point: widest, Rung: len(p.Rungs()) - 1}); err != nil {
		return 0
	}
	return max(time.Since(began)-one, 0)
}
