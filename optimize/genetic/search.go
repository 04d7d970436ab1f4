// Package genetic is the genetic searcher: non-dominated sorting under
// limits, simulated binary crossover and changes of every scale, on the
// machinery of eaopt, driven by Ask and Tell.
package genetic

import (
	"fmt"
	"math"
	"math/rand"

	"github.com/MaxHalford/eaopt"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// Config says how to search.
type Config struct {
	Population  int // members, and the size of a batch; 0: 100
	Evaluations int // that may be asked
	Seed        uint64
}

// rivals is how many members a tournament has.
const rivals = 8

// mostRejections is how many points a screen may reject for each that it
// passes before the search gives up.
const mostRejections = 1000

// foreseen is the most points that room is made for at the start.
const foreseen = 1 << 16

// Search is the genetic searcher.
type Search struct {
	domain optimize.Domain
	c      Config
	model  survival
	pop    eaopt.Population
	free   []int           // variables that can move at all
	seen   map[uint64]bool // the mark of every point that was answered or asked
	asked  eaopt.Individuals
	spent  int
	why    string
}

var _ optimize.Searcher = (*Search)(nil)
var _ optimize.Explainer = (*Search)(nil)

// New is a searcher that starts from what is known: the best of start make
// its first population.
func New(d optimize.Domain, c Config, start []optimize.Evaluation) *Search {
	if c.Population <= 0 {
		c.Population = 100
	}
	s := &Search{domain: d, c: c, model: survival{size: c.Population}, seen: make(map[uint64]bool, min(max(c.Evaluations, 0), foreseen)+len(start))}
	for i := range d.Space {
		if d.Space[i].From < d.Space[i].To {
			s.free = append(s.free, i)
		}
	}
	rng := optimize.Stream(c.Seed, "genetic start", 0)
	for i := range start {
		if key := mark(start[i].Point); !s.seen[key] {
			s.seen[key] = true
			one := s.individual(start[i].Point, rng)
			one.Genome.(*genome).value = start[i].Value()
			s.pop.Individuals = append(s.pop.Individuals, one)
		}
	}
	s.apply()
	return s
}

func (s *Search) individual(p space.Point, rng *rand.Rand) eaopt.Individual {
	return eaopt.NewIndividual(&genome{space: s.domain.Space, free: s.free, point: append(space.Point(nil), p...)}, rng)
}

// apply lets the model pass over the population.
func (s *Search) apply() {
	if err := s.model.Apply(&s.pop); err != nil {
		panic("genetic: the model failed: " + err.Error()) // it has no way to
	}
}

// Ask gives one generation of offspring, or while there is no population
// points drawn at random.
func (s *Search) Ask() []optimize.Candidate {
	n := min(s.c.Population, s.c.Evaluations-s.spent)
	if n <= 0 || s.why != "" {
		s.finish("its evaluations are spent")
		return nil
	}
	s.pop.RNG = optimize.Stream(s.c.Seed, "genetic", int(s.pop.Generations))
	s.asked = s.asked[:0]
	for tries := 0; len(s.asked) < n; {
		for _, child := range s.family() {
			key := mark(child.Genome.(*genome).point)
			if len(s.asked) == n || s.seen[key] {
				tries++
				continue
			}
			if !s.domain.Passes(child.Genome.(*genome).point) {
				tries++
				continue
			}
			s.seen[key] = true
			s.asked = append(s.asked, child)
			tries = 0
		}
		if tries > mostRejections {
			s.finish(fmt.Sprintf("%d points in a row were known already or rejected by the screens", tries))
			break
		}
	}
	batch := make([]optimize.Candidate, len(s.asked))
	for i := range s.asked {
		batch[i] = optimize.Candidate{Point: s.asked[i].Genome.(*genome).point}
	}
	s.spent += len(batch)
	return batch
}

// family is two children of two parents, or two strangers while there are
// not enough parents.
func (s *Search) family() [2]eaopt.Individual {
	rng := s.pop.RNG
	var pair [2]eaopt.Individual
	if len(s.pop.Individuals) < 2 || s.pop.Individuals[0].Genome.(*genome).value.Unknown {
		for k := range pair {
			u := make([]float64, len(s.domain.Space))
			for i := range u {
				u[i] = rng.Float64()
			}
			pair[k] = s.individual(s.domain.Space.FromUnit(u), rng)
		}
		return pair
	}
	pair = [2]eaopt.Individual{s.winner(better).Clone(rng), s.winner(roomier).Clone(rng)}
	pair[0].Crossover(pair[1], rng)
	how := variation(rng.Intn(variations))
	for k := range pair {
		g := pair[k].Genome.(*genome)
		g.how, g.a, g.b = how, s.member().point, s.member().point
		pair[k].Mutate(rng)
		s.domain.Space.Snap(g.point)
	}
	return pair
}

// winner is the best in an order of a few members.
func (s *Search) winner(better func(a, b *genome) bool) *eaopt.Individual {
	all := s.pop.Individuals
	best := &all[s.pop.RNG.Intn(len(all))]
	for range rivals - 1 {
		one := &all[s.pop.RNG.Intn(len(all))]
		if better(one.Genome.(*genome), best.Genome.(*genome)) {
			best = one
		}
	}
	return best
}

// member is anyone of the population.
func (s *Search) member() *genome {
	all := s.pop.Individuals
	return all[s.pop.RNG.Intn(len(all))].Genome.(*genome)
}

// Tell lets parents and offspring compete.
func (s *Search) Tell(batch []optimize.Evaluation) {
	for i := range batch {
		s.asked[i].Genome.(*genome).value = batch[i].Value()
	}
	s.pop.Individuals = append(s.pop.Individuals, s.asked[:len(batch)]...)
	s.apply()
}

// Explain says why the search is done.
func (s *Search) Explain() string { return "genetic: " + s.why }

func (s *Search) finish(why string) {
	if s.why == "" {
		s.why = why
	}
}

// mark tells points apart by 64 bits. That two of a million different points
// share one has a chance of 3e-8, and costs no more than a point not asked.
func mark(p space.Point) uint64 {
	h := uint64(len(p))
	for _, x := range p {
		h = (h ^ math.Float64bits(x)) * 0x9e3779b97f4a7c15
		h ^= h >> 32
	}
	return h
}

// Population is what the members of the last generation have, best first.
func (s *Search) Population() []front.Value {
	out := make([]front.Value, len(s.pop.Individuals))
	for i := range out {
		out[i] = s.pop.Individuals[i].Genome.(*genome).value
	}
	return out
}
