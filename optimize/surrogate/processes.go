package surrogate

import (
	"math"
	"sync"

	"turnwise/optimize"
)

// Bounds of what processes are laid through: all of it, and of that the best;
// and of what their scales are fitted to.
const (
	mostProcessed     = 600
	mostBestProcessed = 480
	mostFitted        = 200
)

// refit is by how much what is known has grown when scales are fitted again.
const refit = 1.25

// processes are what was learned of all traits, a process a kind.
type processes struct {
	of      []*process
	traits  int
	centres int
	typical float64 // distance of a centre to the nearest other, in features
}

// learnable reports whether an answer can be learned from.
func (s *Search) learnable(i int) bool {
	e := &s.known[i]
	return e.Status == optimize.OK && len(e.Traits) > 0 && finite(e.Traits)
}

// finite reports whether all are plain numbers.
func finite(xs []float64) bool {
	for _, x := range xs {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return false
		}
	}
	return true
}

// process lays processes through centres, best first. False: there is nothing
// to lay them through.
func (s *Search) process(centres []int) (*processes, bool) {
	if len(centres) < leastTelling {
		return nil, false
	}
	features := make([][]float64, len(centres))
	for k, i := range centres {
		features[k] = s.places[i]
	}
	kinds := s.domain.Traits.Kinds
	p := &processes{of: make([]*process, kinds), traits: len(s.known[centres[0]].Traits), centres: len(centres), typical: typical(features)}
	s.fit(centres, features)
	var all sync.WaitGroup
	for kind := range kinds {
		all.Go(func() {
			values, warps := standardised(s.traitsOf(kind, centres))
			p.of[kind], _ = newProcess(s.scales[kind], features, values, warps, len(centres)/2)
		})
	}
	all.Wait()
	for _, one := range p.of {
		if one == nil {
			return nil, false
		}
	}
	return p, true
}

// traitsOf gives every trait of a kind at the centres, a row a trait.
func (s *Search) traitsOf(kind int, centres []int) [][]float64 {
	kinds := s.domain.Traits.Kinds
	out := make([][]float64, len(s.known[centres[0]].Traits)/kinds)
	for t := range out {
		out[t] = make([]float64, len(centres))
		for k, i := range centres {
			out[t][k] = s.known[i].Traits[t*kinds+kind]
		}
	}
	return out
}

// fit learns the scales of every kind from the middle one of its traits,
// where enough has come since the last time.
func (s *Search) fit(centres []int, features [][]float64) {
	if s.scales != nil && float64(len(s.known)) < refit*float64(s.fitted) {
		return
	}
	kinds := s.domain.Traits.Kinds
	if s.scales == nil {
		s.scales = make([]*scales, kinds)
	}
	s.fitted = len(s.known)
	some := optimize.Stream(s.c.Seed, "surrogate fit", s.round).Perm(len(centres))[:min(mostFitted, len(centres))]
	x := make([][]float64, len(some))
	for k, i := range some {
		x[k] = features[i]
	}
	var all sync.WaitGroup
	for kind := range kinds {
		all.Go(func() {
			values, _ := standardised(s.traitsOf(kind, centres))
			middle := values[len(values)/2]
			y := make([]float64, len(some))
			for k, i := range some {
				y[k] = middle[i]
			}
			s.scales[kind] = fitted(x, y, s.scales[kind])
		})
	}
	all.Wait()
}

// foretell writes the traits at features u to out, as a view has them.
func (p *processes) foretell(u, view []float64, room *processRoom, out []float64) {
	for kind, one := range p.of {
		one.foretell(u, view[kind], room, out[kind:], len(p.of))
	}
}
