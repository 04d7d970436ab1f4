package surrogate

import (
	"turnwise/optimize"
	"turnwise/optimize/genetic"
	"turnwise/optimize/space"
)

// mostDraws is how often a sample is drawn anew for those of its points that
// the screens reject.
const mostDraws = 1000

// draw gives n points of Latin hypercubes, fewer where the screens reject
// nearly everything. Method: McKay, Beckman, Conover, Technometrics 21, 239,
// 1979.
func (s *Search) draw(n int) []space.Point {
	rng := optimize.Stream(s.c.Seed, "surrogate draw", s.round)
	var out []space.Point
	taken := map[string]bool{}
	for range mostDraws {
		units := make([][]float64, n)
		for k := range units {
			units[k] = make([]float64, len(s.domain.Space))
		}
		for i := range s.domain.Space {
			for k, part := range rng.Perm(n) {
				units[k][i] = (float64(part) + rng.Float64()) / float64(n)
			}
		}
		for _, u := range units {
			p := s.domain.Space.FromUnit(u)
			if key := p.Key(); !taken[key] && !s.seen[key] && s.domain.Passes(p) {
				taken[key] = true
				out = append(out, p)
			}
			if len(out) == n {
				return out
			}
		}
	}
	return out
}

// breedingPopulation is that of the genetic searcher that breeds.
const breedingPopulation = 20

// breed gives n children of the best that is known, none of them beside.
func (s *Search) breed(n int, beside []space.Point) []space.Point {
	if n == 0 {
		return nil
	}
	most := n + len(beside)
	g := genetic.New(s.domain, genetic.Config{Population: max(most, breedingPopulation), Evaluations: most, Seed: s.stream("bred")}, s.known)
	taken := map[string]bool{}
	for _, p := range beside {
		taken[p.Key()] = true
	}
	var out []space.Point
	for _, c := range g.Ask() {
		if len(out) < n && !taken[c.Point.Key()] {
			out = append(out, c.Point)
		}
	}
	return out
}

// stream is the seed of a part of this round.
func (s *Search) stream(part string) uint64 {
	return optimize.Stream(s.c.Seed, "surrogate "+part, s.round).Uint64()
}
