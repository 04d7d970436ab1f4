// Package genetic is the genetic searcher: non-dominated sorting under
// limits, simulated binary crossover and polynomial mutation, on the
// machinery of eaopt, driven by Ask and Tell.
package genetic

import (
	"encoding/binary"
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

// disturbance is how often a child of differential variation is mutated too:
// seldom, or it would lose the precision that its parents have.
const disturbance = 0.2

// mostRejections is how many points a screen may reject for each that it
// passes before the search gives up.
const mostRejections = 1000

// Search is the genetic searcher.
type Search struct {
	domain optimize.Domain
	c      Config
	model  survival
	pop    eaopt.Population
	free   int
	seen   map[string]bool // every point that was answered or asked
	asked  eaopt.Individuals
	shares shares
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
	s := &Search{domain: d, c: c, model: survival{size: c.Population}, shares: evenShares(), seen: map[string]bool{}}
	for i := range d.Space {
		if d.Space[i].From < d.Space[i].To {
			s.free++
		}
	}
	rng := optimize.Stream(c.Seed, "genetic start", 0)
	for i := range start {
		if key := bits(start[i].Point); !s.seen[key] {
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
			key := bits(child.Genome.(*genome).point)
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
	for k := range pair {
		pair[k] = s.parent().Clone(rng)
	}
	how := s.shares.pick(rng)
	if how == differing {
		for k := range pair {
			s.differ(pair[k].Genome.(*genome))
		}
	} else if rng.Float64() < crossoverRate {
		pair[0].Crossover(pair[1], rng)
	}
	for k := range pair {
		g := pair[k].Genome.(*genome)
		g.from = how
		if how != differing || rng.Float64() < disturbance {
			pair[k].Mutate(rng)
		}
		g.point = s.domain.Space.Canonical(g.point)
	}
	return pair
}

// differ moves a point by a part of the difference of two others of the
// population: differential variation, whose steps shrink with the population
// along every direction. Storn, Price, J. Global Optim. 11, 341, 1997.
func (s *Search) differ(g *genome) {
	rng, all := s.pop.RNG, s.pop.Individuals
	a, b := all[rng.Intn(len(all))].Genome.(*genome).point, all[rng.Intn(len(all))].Genome.(*genome).point
	factor := 0.9 * rng.Float64()
	take := rng.Float64()
	for i := range g.space {
		v := &g.space[i]
		switch {
		case rng.Float64() >= take:
		case v.Kind == space.Choice:
			g.point[i] = a[i]
		default:
			g.point[i] = inside(g.point[i]+factor*(a[i]-b[i]), g.point[i], v.From, v.To, rng)
		}
	}
}

// inside brings a value that left its bounds back to a place between the
// bound and where it came from.
func inside(x, was, low, high float64, rng *rand.Rand) float64 {
	switch {
	case x < low:
		return low + rng.Float64()*(was-low)
	case x > high:
		return high - rng.Float64()*(high-was)
	}
	return x
}

// parent wins a tournament of two.
func (s *Search) parent() eaopt.Individual {
	all := s.pop.Individuals
	a, b := all[s.pop.RNG.Intn(len(all))], all[s.pop.RNG.Intn(len(all))]
	if better(b.Genome.(*genome), a.Genome.(*genome)) {
		return b
	}
	return a
}

// Tell lets parents and offspring compete.
func (s *Search) Tell(batch []optimize.Evaluation) {
	for i := range batch {
		s.asked[i].Genome.(*genome).value = batch[i].Value()
	}
	fresh := s.asked[:len(batch)]
	s.pop.Individuals = append(s.pop.Individuals, fresh...)
	s.apply()
	s.shares.learn(fresh, s.pop.Individuals)
	s.asked = nil
}

// Explain says why the search is done.
func (s *Search) Explain() string { return "genetic: " + s.why }

func (s *Search) finish(why string) {
	if s.why == "" {
		s.why = why
	}
}

// bits is a key that two points share only if they are the same.
func bits(p space.Point) string {
	b := make([]byte, 0, 256)
	for _, x := range p {
		b = binary.LittleEndian.AppendUint64(b, math.Float64bits(x))
	}
	return string(b)
}

// Population is what the members of the last generation have, best first.
func (s *Search) Population() []front.Value {
	out := make([]front.Value, len(s.pop.Individuals))
	for i := range out {
		out[i] = s.pop.Individuals[i].Genome.(*genome).value
	}
	return out
}
