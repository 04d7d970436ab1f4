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
	if n == 0 {
		return nil
	}
	chosen, ok := s.promises(s.centres(), n, "inner")
	if !ok {
		return nil
	}
	return s.note(chosen, n)
}

// promises are at most n points that surfaces through some centres choose;
// part is the random stream's name. False: no surface can be laid.
func (s *Search) promises(centres []int, n int, part string) ([]promise, bool) {
	surfaces, ok := s.learn(centres)
	if !ok {
		return nil, false
	}
	return s.choose(s.foretold(surfaces, centres, part), n, surfaces.typical), true
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

// centres picks what the surfaces are laid through, best first: most of
// them by rank, and an even sample of the rest.
func (s *Search) centres() []int {
	values := s.values()
	order := front.Thinned(values, mostBest)
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
	if len(order) <= mostCentres {
		return order
	}
	rest := order[mostBest:]
	out := slices.Clone(order[:mostBest])
	for k := range mostCentres - mostBest {
		out = append(out, rest[k*len(rest)/(mostCentres-mostBest)])
	}
	return out
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

// foretold runs the genetic searcher on the surfaces and gives all that it
// asked.
func (s *Search) foretold(f *surfaces, centres []int, part string) []promise {
	var start []optimize.Evaluation
	if s.caution >= 0 || s.round%afresh != 0 {
		for _, i := range centres {
			start = append(start, s.known[i])
		}
	}
	g := genetic.New(s.domain, genetic.Config{
		Population:  innerPopulation,
		Evaluations: min(max(innerEach*s.c.Evaluations, innerLeast), innerMost),
		Seed:        s.stream(part),
	}, start)
	room := newColumns(f)
	var all []promise
	for batch := g.Ask(); len(batch) > 0; batch = g.Ask() {
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			u := s.features.of(c.Point)
			out := make([]float64, len(f.outputs))
			f.foretell(u, float64(s.caution), room, out)
			e := &told[i]
			e.Candidate, e.Status = c, optimize.OK
			e.Aims, e.Limits = out[:s.domain.Aims:s.domain.Aims], out[s.domain.Aims:]
			all = append(all, promise{c.Point, u, e.Value()})
		}
		g.Tell(told)
	}
	return all
}
