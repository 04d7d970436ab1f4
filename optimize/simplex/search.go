// Package simplex polishes what other searchers found: Nelder–Mead simplexes
// start at members of the front and walk towards reference points spread
// along it.
//
// Method: Nelder, Mead, Comput. J. 7, 308, 1965, in gonum's implementation;
// several aims become one by the achievement scalarising function of
// front.Scalar. Stepped variables and choices stay where the member has
// them. A vertex beyond a bound is folded back into the box, so that an
// optimum on a bound or in a corner is reached like any other.
package simplex

import (
	"math"

	"turnwise/optimize"
	"turnwise/optimize/front"
)

// Config says how to polish.
type Config struct {
	// Evaluations is how many may be asked at the most.
	Evaluations int
	// Parallel is how many simplexes walk at a time, one vertex of each a
	// batch; 0: 16.
	Parallel int
	// Size of a new simplex, in parts of a variable's range; 0: 0.05.
	Size float64
	// Tolerance ends a simplex whose scalar has improved by less over its
	// last vertices; 0: 1e-4 of the front's span.
	Tolerance float64
	// Each is how many evaluations one simplex may take, in vertices of a
	// first simplex; 0: 12. Negative: no limit.
	Each int
	// Reach is how far beyond the front, in parts of its span, the reference
	// points lie; 0: 0.1.
	Reach float64
}

func (c Config) withDefaults() Config {
	set := func(x *float64, to float64) {
		if *x == 0 {
			*x = to
		}
	}
	if c.Parallel == 0 {
		c.Parallel = 16
	}
	if c.Each == 0 {
		c.Each = 12
	}
	set(&c.Size, 0.05)
	set(&c.Tolerance, 1e-4)
	set(&c.Reach, 0.1)
	return c
}

// Search is the Nelder–Mead searcher. Close it when it is no longer asked.
type Search struct {
	domain optimize.Domain
	c      Config
	free   []int // variables that move

	seen    []optimize.Evaluation // all that is known, in order
	started map[string]bool       // members that a simplex has started from
	walks   []*walk
	asked   []*walk // whose vertices the open batch holds
	left    int
	why     string
}

var _ optimize.Searcher = (*Search)(nil)
var _ optimize.Explainer = (*Search)(nil)

// New is a searcher that polishes what the history holds.
func New(d optimize.Domain, c Config, history []optimize.Evaluation) *Search {
	s := &Search{domain: d, c: c.withDefaults(), left: c.Evaluations, started: map[string]bool{}}
	s.seen = append(s.seen, history...)
	for i := range d.Space {
		if !d.Space[i].Pinned() {
			s.free = append(s.free, i)
		}
	}
	return s
}

// Ask gives one vertex of each simplex that walks, starting new ones where
// others have ended.
func (s *Search) Ask() []optimize.Candidate {
	if s.left <= 0 {
		s.finish("its evaluations are spent")
		return nil
	}
	if len(s.free) == 0 {
		s.finish("no variable can move continuously")
		return nil
	}
	s.asked = s.asked[:0]
	kept := s.walks[:0]
	for _, w := range s.walks {
		if w.advance() {
			kept = append(kept, w)
		} else {
			w.d.end()
		}
	}
	s.walks = kept
	s.refill()
	var batch []optimize.Candidate
	for _, w := range s.walks {
		if len(batch) == s.left {
			break
		}
		batch = append(batch, optimize.Candidate{Point: w.at})
		s.asked = append(s.asked, w)
	}
	s.left -= len(batch)
	if len(batch) == 0 {
		s.finish("every member of the front has been polished")
	}
	return batch
}

// Tell gives the simplexes the values of their vertices.
func (s *Search) Tell(batch []optimize.Evaluation) {
	for i := range batch {
		s.seen = append(s.seen, batch[i])
		s.asked[i].take(batch[i].Value())
	}
}

// Explain says why the search is done.
func (s *Search) Explain() string { return "simplex: " + s.why }

// Close ends every simplex.
func (s *Search) Close() error {
	for _, w := range s.walks {
		w.d.end()
	}
	s.walks = nil
	return nil
}

func (s *Search) finish(why string) {
	if s.why == "" {
		s.why = why
	}
	s.Close()
}

// refill starts new simplexes at members of the front that none has started
// from, the most telling ones first.
func (s *Search) refill() {
	want := s.c.Parallel - len(s.walks)
	if want <= 0 {
		return
	}
	values := make([]front.Value, len(s.seen))
	for i := range s.seen {
		values[i] = s.seen[i].Value()
	}
	for _, i := range s.starts(values, want) {
		s.started[s.seen[i].Point.Key()] = true
		w := s.walk(i, values)
		if w.advance() {
			s.walks = append(s.walks, w)
		} else {
			w.d.end()
		}
	}
}

// starts picks at most want evaluations to start from: the front's members,
// thinned, or while nothing is feasible the least violating ones.
func (s *Search) starts(values []front.Value, want int) []int {
	fresh := func(all []int) []int {
		var open []int
		for _, i := range all {
			if !s.started[s.seen[i].Point.Key()] {
				open = append(open, i)
			}
		}
		return open
	}
	members := front.Front(values)
	if len(members) > 0 {
		members = fresh(members)
		picked := make([]front.Value, len(members))
		for k, i := range members {
			picked[k] = values[i]
		}
		var out []int
		for _, k := range front.Thinned(picked, want) {
			out = append(out, members[k])
		}
		return out
	}
	var out []int
	for _, layer := range front.Layers(values) {
		for _, i := range fresh(layer) {
			if !values[i].Unknown && len(out) < want {
				out = append(out, i)
			}
		}
	}
	return out
}

// walk is a new simplex at evaluation i, with a reference point a little
// beyond it on every aim.
func (s *Search) walk(i int, values []front.Value) *walk {
	axes := spanOf(values, s.domain.Aims)
	scalar := front.Scalar{Reference: make([]float64, s.domain.Aims), Weight: make([]float64, s.domain.Aims), Augmentation: 0.05}
	if s.domain.Aims == 1 {
		scalar.Augmentation = 0
	}
	for m := range scalar.Weight {
		width := axes.Nadir[m] - axes.Ideal[m]
		if !(width > 0) {
			width = math.Max(math.Abs(axes.Ideal[m]), 1)
		}
		scalar.Weight[m] = 1 / width
		if !values[i].Unknown {
			scalar.Reference[m] = values[i].Aims[m] - s.c.Reach*width
		}
	}
	w := &walk{s: s, scalar: scalar, home: s.seen[i].Point, known: map[string]float64{}, best: math.Inf(1)}
	unit := s.domain.Space.Unit(w.home)
	x := make([]float64, len(s.free))
	for k, j := range s.free {
		x[k] = unit[j]
	}
	w.known[w.home.Key()] = scalar.Of(values[i])
	w.d = descend(x, s.c.Size)
	return w
}

// spanOf are the axes of the front, or of all known values before there is
// one.
func spanOf(values []front.Value, aims int) front.Axes {
	var points [][]float64
	for _, i := range front.Front(values) {
		points = append(points, values[i].Aims)
	}
	for i := range values {
		if len(points) == 0 && !values[i].Unknown {
			points = append(points, values[i].Aims)
		}
	}
	if len(points) == 0 {
		points = append(points, make([]float64, aims))
	}
	return front.Span(points)
}
