package programme

import (
	"fmt"

	"turnwise/optimize"
	"turnwise/optimize/space"
)

// mostRejections is how many points a screen may reject for each that it
// passes before sampling gives up.
const mostRejections = 1000

// chunk is how many points of a sample are asked at a time.
const chunk = 64

// sample asks a Latin hypercube: in every block of points each variable takes
// each of as many equal parts of its range once. Method: McKay, Beckman,
// Conover, Technometrics 21, 239, 1979. Given points come first.
type sample struct {
	domain  optimize.Domain
	seed    uint64
	left    int
	given   []optimize.Candidate
	block   int
	waiting []space.Point
	seen    map[string]bool
	why     string
}

var _ optimize.Searcher = (*sample)(nil)

// newSample asks n points at the most, start and seeds first: start as the
// user's own, seeds as part of the sample.
func newSample(d optimize.Domain, seed uint64, n int, start, seeds []space.Point) *sample {
	s := &sample{domain: d, seed: seed, left: n, seen: map[string]bool{}, why: "its evaluations are spent"}
	give := func(points []space.Point, from string) {
		for _, p := range points {
			p = d.Space.Canonical(p)
			if !s.seen[p.Key()] && len(s.given) < n {
				s.seen[p.Key()] = true
				s.given = append(s.given, optimize.Candidate{Point: p, From: from})
			}
		}
	}
	give(start, Start)
	give(seeds, Sample)
	return s
}

// Ask gives the next part of the sample.
func (s *sample) Ask() []optimize.Candidate {
	n := min(chunk, s.left)
	batch := make([]optimize.Candidate, 0, max(n, 0))
	for len(batch) < n && len(s.given) > 0 {
		batch, s.given = append(batch, s.given[0]), s.given[1:]
	}
	for rejected := 0; len(batch) < n; {
		if len(s.waiting) == 0 {
			s.waiting = s.draw(max(s.left, chunk))
		}
		p := s.waiting[0]
		s.waiting = s.waiting[1:]
		if s.seen[p.Key()] || !s.domain.Passes(p) {
			if rejected++; rejected > mostRejections {
				s.why = fmt.Sprintf("%d points in a row were rejected by the screens: the limits on dimensions leave next to nothing of what may vary", rejected)
				s.left = len(batch)
				break
			}
			continue
		}
		rejected = 0
		s.seen[p.Key()] = true
		batch = append(batch, optimize.Candidate{Point: p, From: Sample})
	}
	s.left -= len(batch)
	return batch
}

// draw is one block of a Latin hypercube of n points.
func (s *sample) draw(n int) []space.Point {
	rng := optimize.Stream(s.seed, "sample", s.block)
	s.block++
	units := make([][]float64, n)
	for i := range units {
		units[i] = make([]float64, len(s.domain.Space))
	}
	for v := range s.domain.Space {
		for i, part := range rng.Perm(n) {
			units[i][v] = (float64(part) + rng.Float64()) / float64(n)
		}
	}
	points := make([]space.Point, n)
	for i := range points {
		points[i] = s.domain.Space.FromUnit(units[i])
	}
	return points
}

// Tell is told nothing that a sample needs.
func (s *sample) Tell([]optimize.Evaluation) {}

// Explain says why the sample is over.
func (s *sample) Explain() string { return "sample: " + s.why }
