package surrogate

import (
	"math"
	"slices"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/space"
)

// The inner search on the surfaces.
const (
	innerPopulation  = 50
	innerEvaluations = 3000
	mostPool         = 150 // of its best that are weighed
)

// apart is the least distance of a chosen point to every other, in features:
// closer ones teach nothing.
const apart = 1e-4

// infill chooses n points by the surfaces; fewer where nothing promises.
func (s *Search) infill(n int) []space.Point {
	if n <= 0 {
		return nil
	}
	s.smooth = s.merit[1] > s.merit[0]
	if s.round%otherwise == 0 {
		s.smooth = !s.smooth
	}
	centres := s.centres()
	learned, err := s.learn(centres)
	if err != nil {
		return nil
	}
	pool := s.search(learned)
	return s.choose(pool, n)
}

// centres picks what the surfaces are laid through: the best, and of the
// rest an even sample.
func (s *Search) centres() []int {
	values := s.values()
	var order []int
	for _, layer := range front.Layers(values) {
		for _, i := range layer {
			if s.known[i].Status == optimize.OK {
				order = append(order, i)
			}
		}
	}
	if len(order) <= mostCentres {
		return order
	}
	const best = mostCentres * 4 / 5
	out := slices.Clone(order[:best])
	rest := order[best:]
	for k := range mostCentres - best {
		out = append(out, rest[k*len(rest)/(mostCentres-best)])
	}
	return out
}

// learn lays the surfaces of aims, then limits.
func (s *Search) learn(centres []int) (*surfaces, error) {
	points := make([][]float64, len(centres))
	outputs := make([][]float64, s.domain.Aims+s.domain.Limits)
	for k, i := range centres {
		e := &s.known[i]
		points[k] = make([]float64, s.features.size)
		s.features.of(e.Point, points[k])
		for o := range outputs {
			if o < s.domain.Aims {
				outputs[o] = append(outputs[o], e.Aims[o])
			} else {
				outputs[o] = append(outputs[o], e.Limits[o-s.domain.Aims])
			}
		}
	}
	return learn(points, len(s.features.ordered), outputs, min(len(points), max(len(points)/2, 20)), s.smooth)
}

// promise is a point with what the surfaces foretell of it.
type promise struct {
	point    space.Point
	features []float64
	value    front.Value
}

// search runs the genetic searcher on the surfaces and gives the front of
// what they foretell, or where nothing is feasible the least violations.
func (s *Search) search(f *surfaces) []promise {
	g := genetic.New(s.domain, genetic.Config{Population: innerPopulation, Evaluations: innerEvaluations, Seed: s.stream("inner")}, s.known)
	var all []promise
	u := make([]float64, s.features.size)
	out := make([]float64, len(f.outputs))
	var columns [kernels][]float64
	for batch := g.Ask(); len(batch) > 0; batch = g.Ask() {
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			s.features.of(c.Point, u)
			f.foretell(u, &columns, out)
			e := optimize.Evaluation{Candidate: c, Status: optimize.OK}
			e.Aims = slices.Clone(out[:s.domain.Aims])
			e.Limits = slices.Clone(out[s.domain.Aims:])
			told[i] = e
			all = append(all, promise{c.Point, slices.Clone(u), e.Value()})
		}
		g.Tell(told)
	}
	values := make([]front.Value, len(all))
	for i := range all {
		values[i] = all[i].value
	}
	var pool []promise
	best := front.Thinned(values, mostPool)
	if len(best) == 0 && len(all) > 0 {
		best = front.Layers(values)[0]
	}
	for _, i := range best {
		pool = append(pool, all[i])
	}
	return pool
}

// choose takes n of the pool, each time the one that adds the most foretold
// hypervolume to what is known and chosen.
func (s *Search) choose(pool []promise, n int) []space.Point {
	var have [][]float64
	values := s.values()
	for _, i := range front.Front(values) {
		if values[i].Feasible() {
			have = append(have, values[i].Aims)
		}
	}
	foretold := have
	for i := range pool {
		if pool[i].value.Feasible() {
			foretold = append(foretold, pool[i].value.Aims)
		}
	}
	var taken []promise
	open := slices.Clone(pool)
	take := func(i int) {
		taken = append(taken, open[i])
		open = slices.Delete(open, i, i+1)
	}
	if len(foretold) > 0 {
		axes := front.Span(foretold)
		h := newHeap(&axes, have, open)
		for len(taken) < n {
			i, ok := h.next()
			if !ok {
				break
			}
			if !s.near(&pool[i], taken) {
				h.keep(i)
				taken = append(taken, pool[i])
			}
		}
	} else {
		slices.SortStableFunc(open, func(a, b promise) int {
			switch {
			case a.value.Violation < b.value.Violation:
				return -1
			case a.value.Violation > b.value.Violation:
				return 1
			}
			return 0
		})
		for len(open) > 0 && len(taken) < n {
			if s.near(&open[0], taken) {
				open = open[1:]
				continue
			}
			take(0)
		}
	}
	points := make([]space.Point, len(taken))
	for i := range taken {
		points[i] = taken[i].point
	}
	return points
}

// near reports whether a point lies too close to one that is known or taken.
func (s *Search) near(p *promise, taken []promise) bool {
	for i := range taken {
		if distance(taken[i].features, p.features) < apart {
			return true
		}
	}
	u := make([]float64, s.features.size)
	for i := range s.known {
		s.features.of(s.known[i].Point, u)
		if distance(u, p.features) < apart {
			return true
		}
	}
	return false
}

// heap hands out a pool by the hypervolume that each adds. What a point adds
// only falls as others are kept, so a gain that is still the greatest after
// it was computed anew is the greatest of all.
type gains struct {
	axes      *front.Axes
	have      [][]float64
	reference []float64
	volume    float64
	points    [][]float64
	gain      []float64
	fresh     []int // how many were kept when the gain was computed
	kept      int
}

func newHeap(axes *front.Axes, have [][]float64, pool []promise) *gains {
	h := &gains{axes: axes, have: axes.Units(have)}
	for i := range pool {
		h.gain = append(h.gain, math.Inf(1))
		h.fresh = append(h.fresh, -1)
		if !pool[i].value.Feasible() {
			h.gain[i] = 0
			h.points = append(h.points, nil)
			continue
		}
		h.points = append(h.points, axes.Unit(pool[i].value.Aims))
	}
	for i := range h.points {
		if h.points[i] != nil {
			h.reference = front.UnitReference(len(h.points[i]))
		}
	}
	if h.reference != nil {
		h.volume = front.Hypervolume(h.have, h.reference)
	}
	return h
}

// next is the point that adds the most; ok is false when none adds anything.
func (h *gains) next() (at int, ok bool) {
	for {
		at = -1
		for i, g := range h.gain {
			if g > 0 && (at < 0 || g > h.gain[at]) {
				at = i
			}
		}
		if at < 0 {
			return 0, false
		}
		if h.fresh[at] == h.kept {
			h.gain[at] = 0
			return at, true
		}
		h.gain[at] = front.Hypervolume(append(slices.Clone(h.have), h.points[at]), h.reference) - h.volume
		h.fresh[at] = h.kept
	}
}

// keep counts a point among those that are had.
func (h *gains) keep(i int) {
	h.have = append(h.have, h.points[i])
	h.volume = front.Hypervolume(h.have, h.reference)
	h.kept++
}
