// Package surrogate is the learned searcher: it lays surfaces through what was
// answered, searches them with the genetic searcher at no cost, and asks the
// points that promise the most hypervolume. A part of each batch is bred
// without the surfaces; the parts follow what they gain, so that surfaces that
// mislead are soon left alone.
//
// Where a domain has traits, Gaussian processes follow those and several
// views of their errors choose; else radial basis functions follow aims and
// limits themselves, with caution.
package surrogate

import (
	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// Config says how to search.
type Config struct {
	Evaluations int // that may be asked
	Batch       int // 0: 5 to 16, by the evaluations
	Seed        uint64
}

// Bounds of a batch, and the rounds that a search should have at least.
const (
	leastBatch = 5
	mostBatch  = 16
	rounds     = 60
)

// Bounds of what surfaces are laid through: all of it, and of that the best.
const (
	mostCentres = 300
	mostBest    = 240
)

// Search is the learned searcher.
type Search struct {
	domain   optimize.Domain
	c        Config
	features features
	known    []optimize.Evaluation // answered, each point once
	places   [][]float64           // features of what is known
	seen     map[string]bool       // keys of what is known
	spent    int
	round    int
	asked    []origin // of the last batch
	parts    parts
	caution  caution
	promised []front.Value // by the surfaces, of the last batch
	scales   []*scales     // of every kind of trait, learned when fitted were known
	fitted   int
	why      string
}

// origin is how a candidate came about.
type origin int

const (
	drawn origin = iota
	learned
	bred
	origins int = iota
)

var _ optimize.Searcher = (*Search)(nil)
var _ optimize.Explainer = (*Search)(nil)

// New is a searcher that starts from what is known.
func New(d optimize.Domain, c Config, start []optimize.Evaluation) *Search {
	if c.Batch <= 0 {
		c.Batch = min(max(c.Evaluations/rounds, leastBatch), mostBatch)
	}
	s := &Search{
		domain: d, c: c, features: newFeatures(d.Space), seen: map[string]bool{},
		parts: parts{learned: firstPart}, caution: firstCaution,
	}
	s.take(start)
	return s
}

// take keeps what is new to the search.
func (s *Search) take(es []optimize.Evaluation) {
	for i := range es {
		if key := es[i].Point.Key(); !s.seen[key] {
			s.seen[key] = true
			s.known = append(s.known, es[i])
			s.places = append(s.places, s.features.of(es[i].Point))
		}
	}
}

// Ask gives the next batch: points drawn at random until there is enough to
// learn from, then those that the surfaces choose and those that are bred.
func (s *Search) Ask() []optimize.Candidate {
	n := min(s.c.Batch, s.c.Evaluations-s.spent)
	if n <= 0 || s.why != "" {
		s.finish("its evaluations are spent")
		return nil
	}
	s.round++
	points := s.points(n)
	if len(points) == 0 {
		s.finish("no point is left that passes the screens and is not known")
		return nil
	}
	batch := make([]optimize.Candidate, len(points))
	for i, p := range points {
		batch[i] = optimize.Candidate{Point: p}
	}
	s.spent += len(batch)
	return batch
}

// points gives n of them and notes how they came about.
func (s *Search) points(n int) []space.Point {
	var points []space.Point
	s.asked = s.asked[:0]
	add := func(more []space.Point, from origin) {
		for _, p := range more {
			points = append(points, p)
			s.asked = append(s.asked, from)
		}
	}
	if short := s.first() - s.count(); short > 0 {
		add(s.draw(min(n, short)), drawn)
		return points
	}
	infill := s.infill
	if s.domain.Traits != nil {
		infill = s.infillViews
	}
	if k := s.parts.take(n); k > 0 {
		add(infill(k), learned)
	}
	add(s.breed(n-len(points), points), bred)
	return points
}

// first is how many answers the surfaces want to begin with: a third of the
// evaluations at the most, but never next to nothing.
func (s *Search) first() int {
	return min(2*(s.features.size+1), max(s.c.Evaluations/3, leastBatch))
}

// answered reports whether an evaluation can be learned from.
func (s *Search) answered(i int) bool { return s.known[i].Status == optimize.OK }

// count is how many evaluations were answered.
func (s *Search) count() int {
	n := 0
	for i := range s.known {
		if s.answered(i) {
			n++
		}
	}
	return n
}

// Tell takes a batch in and learns from it how far to trust the surfaces.
func (s *Search) Tell(batch []optimize.Evaluation) {
	before := s.values()
	s.take(batch)
	var of [origins][]front.Value
	for i := range batch {
		of[s.asked[i]] = append(of[s.asked[i]], batch[i].Value())
	}
	if len(of[learned]) == 0 {
		return
	}
	came := progress(before, of[learned])
	s.caution.follow(progress(before, s.promised), came)
	if n := float64(len(of[bred])); n > 0 {
		s.parts.follow(came/float64(len(of[learned])), progress(before, of[bred])/n)
	}
}

// values is what ranking sees of all that is known.
func (s *Search) values() []front.Value {
	values := make([]front.Value, len(s.known))
	for i := range s.known {
		values[i] = s.known[i].Value()
	}
	return values
}

// Explain says why the search is done.
func (s *Search) Explain() string { return "surrogate: " + s.why }

func (s *Search) finish(why string) {
	if s.why == "" {
		s.why = why
	}
}
