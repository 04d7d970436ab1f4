// Package surrogate is the learned searcher for dear simulations: it lays
// surfaces through what was answered, searches them with the genetic searcher
// at no cost, and asks the points that promise the most hypervolume. A part
// of each batch is bred without the surfaces; the parts follow what they
// gain, so that surfaces that mislead are soon left alone.
package surrogate

import (
	"math"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/space"
)

// Config says how to search.
type Config struct {
	Evaluations int // that may be asked
	Batch       int // 0: 5 to 16, by the evaluations
	Seed        uint64
}

// Bounds of a batch, and of what one surface is laid through.
const (
	leastBatch  = 5
	mostBatch   = 16
	mostCentres = 300
)

// Search is the learned searcher.
type Search struct {
	domain   optimize.Domain
	c        Config
	features features
	known    []optimize.Evaluation // answered, each point once
	seen     map[string]bool
	spent    int
	round    int
	asked    []origin   // of the last batch
	share    float64    // of a batch that the surfaces choose
	owed     float64    // parts of a point that they had not yet
	smooth   bool       // the last batch's surfaces were smooth ones
	merit    [2]float64 // of any surfaces, and of smooth ones
	why      string
}

// origin is how a candidate came about.
type origin int

const (
	drawn origin = iota
	learned
	bred
)

var _ optimize.Searcher = (*Search)(nil)
var _ optimize.Explainer = (*Search)(nil)

// New is a searcher that starts from what is known.
func New(d optimize.Domain, c Config, start []optimize.Evaluation) *Search {
	if c.Batch <= 0 {
		c.Batch = min(max(c.Evaluations/30, leastBatch), mostBatch)
	}
	s := &Search{domain: d, c: c, features: newFeatures(d.Space), seen: map[string]bool{}, share: firstShare, merit: [2]float64{1, 1}}
	s.take(start)
	return s
}

// take keeps what is new to the search.
func (s *Search) take(es []optimize.Evaluation) {
	for i := range es {
		if key := es[i].Point.Key(); !s.seen[key] {
			s.seen[key] = true
			s.known = append(s.known, es[i])
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
	var points []space.Point
	s.asked = s.asked[:0]
	add := func(ps []space.Point, from origin) {
		for _, p := range ps {
			points = append(points, p)
			s.asked = append(s.asked, from)
		}
	}
	if short := s.first() - s.answered(); short > 0 {
		add(s.draw(min(n, short)), drawn)
	} else {
		s.owed += s.share * float64(n)
		add(s.infill(int(s.owed)), learned)
		s.owed -= math.Floor(s.owed)
		add(s.breed(n-len(points), points), bred)
	}
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

// first is how many answers the surfaces want to begin with.
func (s *Search) first() int {
	return min(2*(s.features.size+1), max(s.c.Evaluations/3, s.features.size+2))
}

// answered counts the evaluations that surfaces can be laid through.
func (s *Search) answered() int {
	n := 0
	for i := range s.known {
		if s.known[i].Status == optimize.OK {
			n++
		}
	}
	return n
}

// draw gives points of a Latin hypercube.
func (s *Search) draw(n int) []space.Point {
	rng := optimize.Stream(s.c.Seed, "surrogate draw", s.round)
	var out []space.Point
	d := len(s.domain.Space)
	for range mostDraws {
		cells := make([][]int, d)
		for i := range cells {
			cells[i] = rng.Perm(n)
		}
		u := make([]float64, d)
		for k := range n {
			for i := range u {
				u[i] = (float64(cells[i][k]) + rng.Float64()) / float64(n)
			}
			p := s.domain.Space.FromUnit(u)
			if key := p.Key(); len(out) < n && !s.seen[key] && s.domain.Passes(p) {
				s.seen[key] = true
				out = append(out, p)
			}
		}
		if len(out) == n {
			break
		}
	}
	for _, p := range out {
		delete(s.seen, p.Key())
	}
	return out
}

const mostDraws = 1000

// breed gives children of the best that is known, made without surfaces.
func (s *Search) breed(n int, beside []space.Point) []space.Point {
	if n <= 0 {
		return nil
	}
	g := genetic.New(s.domain, genetic.Config{Population: max(n+len(beside), 20), Evaluations: n + len(beside), Seed: s.stream("bred")}, s.known)
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
func (s *Search) stream(name string) uint64 {
	return optimize.Stream(s.c.Seed, "surrogate "+name, s.round).Uint64()
}

// Parts of a batch: what the surfaces choose at first, the least of either,
// and how fast they follow what is gained.
const (
	firstShare = 0.95
	leastShare = 0.05
	following  = 0.25
	otherwise  = 3
)

// Tell takes a batch in and moves the parts towards the one that gained more.
func (s *Search) Tell(batch []optimize.Evaluation) {
	before := s.values()
	s.take(batch)
	var gain, count [3]float64
	for i := range batch {
		from := s.asked[i]
		count[from]++
		v := batch[i].Value()
		if !v.Unknown && !beaten(v, before) {
			gain[from]++
		}
	}
	if count[learned] > 0 {
		k := 0
		if s.smooth {
			k = 1
		}
		s.merit[k] += 0.3 * (gain[learned]/count[learned] - s.merit[k])
	}
	if count[learned] == 0 || count[bred] == 0 || gain[learned]+gain[bred] == 0 {
		return
	}
	a, b := gain[learned]/count[learned], gain[bred]/count[bred]
	s.share = min(max((1-following)*s.share+following*a/(a+b), leastShare), 1-leastShare)
}

func (s *Search) values() []front.Value {
	vs := make([]front.Value, len(s.known))
	for i := range s.known {
		vs[i] = s.known[i].Value()
	}
	return vs
}

// beaten reports whether some value is at least as good as v.
func beaten(v front.Value, by []front.Value) bool {
	for _, o := range by {
		if front.Dominates(o, v) {
			return true
		}
	}
	return false
}

// Explain says why the search is done.
func (s *Search) Explain() string { return "surrogate: " + s.why }

func (s *Search) finish(why string) {
	if s.why == "" {
		s.why = why
	}
}
