package surrogate

import (
	"slices"
	"strconv"
	"sync"

	"turnwise/optimize"
	"turnwise/optimize/space"
)

// views is how many searches of the processes choose a batch together. The
// first believes what is most likely; each of the others takes every kind of
// trait to be off by errors of its own, drawn anew, wherever answers are far.
// So what may be good is tried as often as that is likely: Thompson,
// Biometrika 25, 285, 1933, with one draw a kind for all points.
const views = 4

// viewed is how many evaluations of the processes each of them has.
const viewed = 1000

// infillViews chooses n points by processes through what is known; fewer where
// nothing is promised.
func (s *Search) infillViews(n int) []space.Point {
	centres := s.centres(mostBestProcessed, mostProcessed, s.learnable)
	p, ok := s.process(centres)
	if !ok {
		return nil
	}
	var start []optimize.Evaluation
	if s.round%afresh != 0 {
		start = s.those(centres)
	}
	var found [views][]promise
	var all sync.WaitGroup
	for k, view := range s.drawnViews(len(p.of)) {
		share := (n + views - 1 - k) / views
		if share == 0 {
			break
		}
		all.Go(func() {
			room, out := newProcessRoom(p.centres, s.features.size), make([]float64, p.traits)
			foretell := func(pt space.Point, u []float64) (aims, limits []float64) {
				p.foretell(u, view, room, out)
				return s.domain.Traits.Read(pt, out)
			}
			found[k] = s.choose(s.foretold(foretell, start, viewed, "view "+strconv.Itoa(k)), share, p.typical)
		})
	}
	all.Wait()
	var chosen []space.Point
	taken := map[string]bool{}
	for _, one := range slices.Concat(found[:]...) {
		if key := one.point.Key(); !taken[key] {
			taken[key] = true
			chosen = append(chosen, one.point)
		}
	}
	return chosen
}

// drawnViews says for every view how many errors each kind of trait is off.
func (s *Search) drawnViews(kinds int) [views][]float64 {
	rng := optimize.Stream(s.c.Seed, "surrogate views", s.round)
	var all [views][]float64
	for k := range all {
		all[k] = make([]float64, kinds)
		for i := range all[k] {
			if k > 0 {
				all[k][i] = rng.NormFloat64()
			}
		}
	}
	return all
}
