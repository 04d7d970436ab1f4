package surrogate

import (
	"slices"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/space"
)

// The search on the surfaces: its population, and its evaluations by those
// of the whole search.
const (
	innerPopulation = 50
	innerEach       = 10
	innerLeast      = 500
	innerMost       = 2000
)

// promise is a point with what the surfaces foretell of it.
type promise struct {
	point    space.Point
	features []float64
	value    front.Value
}

// infill chooses n points by surfaces through all that is known and notes
// what they promise; fewer where nothing does.
func (s *Search) infill(n int) []space.Point {
	s.promised = nil
	centres := s.centres(mostBest, mostCentres, s.answered)
	surfaces, ok := s.learn(centres)
	if !ok {
		return nil
	}
	var start []optimize.Evaluation
	if s.caution >= 0 || s.round%afresh != 0 {
		start = s.those(centres)
	}
	room := newColumns(surfaces)
	foretell := func(_ space.Point, u []float64) (aims, limits []float64) {
		out := make([]float64, len(surfaces.outputs))
		surfaces.foretell(u, float64(s.caution), room, out)
		return out[:s.domain.Aims:s.domain.Aims], out[s.domain.Aims:]
	}
	all := s.foretold(foretell, start, min(max(innerEach*s.c.Evaluations, innerLeast), innerMost), "inner")
	return s.note(s.choose(all, n, surfaces.typical), n)
}

// note keeps what the chosen points promise, and lets go of caution where
// there are fewer than the n that were wanted.
func (s *Search) note(chosen []promise, n int) []space.Point {
	points := make([]space.Point, len(chosen))
	for i, p := range chosen {
		points[i] = p.point
		s.promised = append(s.promised, p.value)
	}
	if len(points) < n {
		s.caution.yield()
	}
	return points
}

// centres picks what is learned from among the answers that are of use, best
// first: most of them by rank, and an even sample of the rest.
func (s *Search) centres(best, most int, use func(int) bool) []int {
	values := s.values()
	for i := range values {
		values[i].Unknown = !use(i)
	}
	order := front.Thinned(values, best)
	among := map[int]bool{}
	for _, i := range order {
		among[i] = true
	}
	for _, layer := range front.Layers(values) {
		for _, i := range layer {
			if !among[i] && !values[i].Unknown {
				order = append(order, i)
			}
		}
	}
	if len(order) <= most {
		return order
	}
	rest := order[best:]
	out := slices.Clone(order[:best])
	for k := range most - best {
		out = append(out, rest[k*len(rest)/(most-best)])
	}
	return out
}

// those are the evaluations of some centres.
func (s *Search) those(centres []int) []optimize.Evaluation {
	all := make([]optimize.Evaluation, len(centres))
	for k, i := range centres {
		all[k] = s.known[i]
	}
	return all
}

// leastTelling is the least number of centres that choose the kernels.
const leastTelling = 20

// learn lays the surfaces of aims, then limits. The better half of the
// centres chooses the kernels.
func (s *Search) learn(centres []int) (*surfaces, bool) {
	points := make([][]float64, len(centres))
	outputs := make([][]float64, s.domain.Aims+s.domain.Limits)
	for k, i := range centres {
		points[k] = s.places[i]
		for o, x := range slices.Concat(s.known[i].Aims, s.known[i].Limits) {
			outputs[o] = append(outputs[o], x)
		}
	}
	telling := min(max(len(points)/2, leastTelling), len(points))
	return learn(points, len(s.features.ordered), outputs, telling)
}

// afresh is how often bold searches of the surfaces start from nothing, to
// find what lies behind infeasible ground.
const afresh = 3

// foretold runs the genetic searcher, from a start, on what is foretold of
// points and their features, and gives all that it asked; part is the random
// stream's name.
func (s *Search) foretold(foretell func(p space.Point, u []float64) (aims, limits []float64), start []optimize.Evaluation, evaluations int, part string) []promise {
	g := genetic.New(s.domain, genetic.Config{Population: innerPopulation, Evaluations: evaluations, Seed: s.stream(part)}, start)
	var all []promise
	for batch := g.Ask(); len(batch) > 0; batch = g.Ask() {
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			e := &told[i]
			u := s.features.of(c.Point)
			e.Candidate, e.Status = c, optimize.OK
			e.Aims, e.Limits = foretell(c.Point, u)
			if !finite(e.Aims) || !finite(e.Limits) {
				e.Status = optimize.Failed
			}
			all = append(all, promise{c.Point, u, e.Value()})
		}
		g.Tell(told)
	}
	return all
}
