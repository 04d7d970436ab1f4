// Package programme runs the stages of a search as one searcher: a first
// sample, the learned searcher where that pays, the genetic searcher on what
// they found, then simplexes on the front.
// Where evaluations are dear the learned searcher takes the genetic one's place.
// Shares are of the evaluations planned at the start and never change; what a
// stage leaves goes to the next, and what the last leaves to another round of
// the genetic searcher and the simplexes.
package programme

import (
	"io"
	"math"
	"slices"
	"strings"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/genetic"
	"turnwise/optimize/simplex"
	"turnwise/optimize/space"
	"turnwise/optimize/surrogate"
)

// Names of the stages, as candidates carry them. Start marks designs that the
// user gave.
const (
	Start   = "start"
	Sample  = "sample"
	Genetic = "genetic"
	Learned = "learned"
	Simplex = "simplex"
)

// Config says how to search.
type Config struct {
	// Plan lists the evaluations planned: of the run first, then of each
	// extension. An extension is a further genetic or learned and a simplex
	// stage, so that a run extended at a count is the same run however often it
	// was stopped.
	Plan []int
	// Shares of each plan; an extension leaves the sample's to the others.
	Sample, Genetic, Simplex float64
	// Dear marks evaluations that take so long that few can be had: the share
	// of the genetic searcher goes to the learned one, and each is answered by the finest model. DearFrom decides so where
	// the first sample's evaluations took that long, by their median; 0: never.
	// The times come with what is told, so a run that is repeated from its
	// record decides alike.
	Dear     bool
	DearFrom time.Duration
	// Learned is how many evaluations at the start of a genetic stage go to the
	// learned searcher, where the domain has traits for it and one model: it
	// finds in fewer evaluations what the genetic searcher would, and takes
	// time of its own for each. A ladder saves in its own way.
	Learned int
	// Population of the genetic searcher; 0: fitted to the plan.
	Population int
	Seed       uint64
	// Start are points of the user's own; Seeds are those of hand rules, at
	// most half of the sample.
	Start, Seeds []space.Point
}

// main is the stage between the sample and the simplexes.
func (c *Config) main() string {
	if c.Dear {
		return Learned
	}
	return Genetic
}

// segment is one stage with its part of the plan.
type segment struct {
	stage string
	end   int // evaluations of the whole programme at which it ends
	id    int // distinguishes the random streams of stages of a kind
}

// Search is the programme as a searcher. Close it when it is no longer asked.
type Search struct {
	domain   optimize.Domain
	c        Config
	segments []segment
	at       int
	stage    optimize.Searcher
	told     []optimize.Evaluation
	asked    int
	why      []string
	idle     int // stages in a row that asked nothing
	decided  bool
}

var _ optimize.Searcher = (*Search)(nil)
var _ optimize.Explainer = (*Search)(nil)
var _ io.Closer = (*Search)(nil)

// learnedBefore is how many evaluations may go before a learned stage that the
// genetic searcher follows: it learns from some hundreds at most, and would
// see little of more.
const learnedBefore = 20_000

// New is the programme of a config. It panics on a plan of nothing.
func New(d optimize.Domain, c Config) *Search {
	if len(c.Plan) == 0 || c.Plan[0] < 1 {
		panic("programme: a plan without evaluations")
	}
	s := &Search{domain: d, c: c}
	end := 0
	for k, n := range c.Plan {
		begin := end
		end += n
		sample := 0
		if k == 0 {
			sample = max(1, int(math.Round(c.Sample*float64(n))))
			s.segments = append(s.segments, segment{stage: Sample, end: begin + min(sample, n), id: k})
		}
		walks := int(math.Round(c.Simplex * float64(n)))
		learned := 0
		if d.Traits != nil && d.Finest == 0 && begin < learnedBefore {
			learned = max(min(c.Learned, n-walks-min(sample, n)), 0)
		}
		if learned > 0 {
			s.segments = append(s.segments, segment{stage: Learned, end: begin + min(sample, n) + learned, id: k})
		}
		s.segments = append(s.segments,
			segment{stage: Genetic, end: end - walks, id: k},
			segment{stage: Simplex, end: end, id: k})
	}
	if c.Dear {
		s.learn()
	}
	return s
}

// decide looks at how long the first sample took, once it is over.
func (s *Search) decide() {
	if s.decided || s.at >= len(s.segments) || s.segments[s.at].stage == Sample {
		return
	}
	s.decided = true
	if s.c.Dear || s.c.DearFrom <= 0 {
		return
	}
	var took []time.Duration
	for i := range s.told {
		if !s.told[i].Reused {
			took = append(took, s.told[i].Duration)
		}
	}
	slices.Sort(took)
	if n := len(took); n > 0 && took[n/2] >= s.c.DearFrom {
		s.c.Dear = true
		s.learn()
	}
}

// learn gives what the genetic searcher would have to the learned one, the one
// before it where there is one.
func (s *Search) learn() {
	for i := range s.segments {
		if s.segments[i].stage != Genetic {
			continue
		}
		if i > 0 && s.segments[i-1].stage == Learned {
			s.segments[i-1].end = s.segments[i].end
		} else {
			s.segments[i].stage = Learned
		}
	}
}

// Planned is the sum of the plan.
func (s *Search) Planned() int { return s.segments[len(s.segments)-1].end }

// Ask gives the next batch of the stage that is on.
func (s *Search) Ask() []optimize.Candidate {
	for s.asked < s.Planned() {
		if s.stage == nil && !s.open() {
			return nil
		}
		batch := s.stage.Ask()
		if len(batch) > 0 {
			s.idle = 0
			s.asked += len(batch)
			_, cheapFirst := s.stage.(*ladder)
			for i := range batch {
				if batch[i].From == "" {
					batch[i].From = s.segments[s.at].stage
				}
				if !cheapFirst {
					batch[i].Rung = s.domain.Finest
				}
			}
			return batch
		}
		s.close()
	}
	return nil
}

// open makes the searcher of the next stage that has something to do.
func (s *Search) open() bool {
	s.decide()
	for ; s.at < len(s.segments); s.at++ {
		g := s.segments[s.at]
		n := g.end - s.asked
		if n <= 0 {
			continue
		}
		switch g.stage {
		case Sample:
			seeds := s.c.Seeds[:min(len(s.c.Seeds), (n+1)/2)]
			s.stage = newSample(s.domain, s.c.Seed, n, s.c.Start, seeds)
		case Genetic:
			if s.c.Genetic > 0 {
				s.stage = genetic.New(s.domain, genetic.Config{Population: s.population(n), Evaluations: n, Seed: s.c.Seed + uint64(g.id)}, s.told)
			}
		case Learned:
			if s.c.Genetic > 0 {
				s.stage = surrogate.New(s.domain, surrogate.Config{Evaluations: n, Seed: s.c.Seed + uint64(g.id)}, s.told)
			}
		case Simplex:
			if s.c.Simplex > 0 {
				s.stage = simplex.New(s.domain, simplex.Config{Evaluations: n}, s.told)
			}
		}
		if s.stage != nil {
			if s.domain.Finest > 0 && g.stage == Genetic {
				s.stage = newLadder(s.stage, s.domain, n, s.c.Seed+uint64(s.at))
			}
			return true
		}
	}
	return s.again()
}

// again starts another round with what is left of the plan, unless the last
// round found nothing to ask.
func (s *Search) again() bool {
	left := s.Planned() - s.asked
	if left <= 0 || s.idle >= 3 || s.c.Genetic+s.c.Simplex <= 0 {
		return false
	}
	id := s.segments[len(s.segments)-1].id + 1000
	end := s.Planned()
	walks := int(math.Round(float64(left) * s.c.Simplex / (s.c.Genetic + s.c.Simplex)))
	s.segments = append(s.segments, segment{stage: s.c.main(), end: end - walks, id: id}, segment{stage: Simplex, end: end, id: id})
	return s.open()
}

// population fits the genetic searcher's population to its evaluations: ten
// generations or more, 20 to 100 members. Fewer members come to rest sooner,
// and often where the front is not.
func (s *Search) population(evaluations int) int {
	if s.c.Population > 0 {
		return s.c.Population
	}
	return min(max(evaluations/10, 20), 100)
}

// close ends the stage that is on, with its word.
func (s *Search) close() {
	if s.stage == nil {
		return
	}
	if e, ok := s.stage.(optimize.Explainer); ok {
		if word := e.Explain(); !strings.Contains(word, "evaluations are spent") {
			s.why = append(s.why, word)
		}
	}
	if c, ok := s.stage.(io.Closer); ok {
		c.Close()
	}
	s.stage = nil
	s.at++
	s.idle++
}

// Tell hands on what came back.
func (s *Search) Tell(batch []optimize.Evaluation) {
	for i := range batch {
		if batch[i].Rung >= s.domain.Finest {
			s.told = append(s.told, batch[i])
		}
	}
	if s.stage != nil {
		s.stage.Tell(batch)
	}
}

// Explain says what each stage that ended early said.
func (s *Search) Explain() string { return strings.Join(s.why, "; ") }

// Close ends the stage that is on.
func (s *Search) Close() error {
	s.close()
	return nil
}
