package surrogate

import (
	"cmp"
	"math"
	"slices"

	"turnwise/optimize"
	"turnwise/optimize/front"
)

// apart is the least distance of a chosen point to every other, in features:
// closer ones teach nothing.
const apart = 1e-4

// choose takes n of the promises at the most.
func (s *Search) choose(all []promise, n int, typical float64) []promise {
	values := make([]front.Value, len(all))
	for i := range all {
		values[i] = all[i].value
	}
	pool := front.Front(values)
	known := s.values()
	have := aims(known, front.Front(known))
	if len(pool)+len(have) == 0 {
		return s.leastViolated(all, n, typical)
	}
	best := make([]promise, len(pool))
	for k, i := range pool {
		best[k] = all[i]
	}
	return s.mostGaining(best, have, n)
}

// leastViolated takes the least violations that are foretold, each at some
// distance from the others.
func (s *Search) leastViolated(all []promise, n int, typical float64) []promise {
	slices.SortStableFunc(all, func(a, b promise) int { return cmp.Compare(a.value.Violation, b.value.Violation) })
	var taken []promise
	for i := range all {
		if len(taken) == n {
			break
		}
		if s.teaches(&all[i]) && far(&all[i], taken, typical/2) {
			taken = append(taken, all[i])
		}
	}
	return taken
}

// mostGaining takes, time and again, the feasible promise that adds the most
// hypervolume to what is had and taken. What one adds only falls as others
// are taken, so a gain that is still the greatest after it was computed anew
// is the greatest of all.
func (s *Search) mostGaining(pool []promise, have [][]float64, n int) []promise {
	points := slices.Clone(have)
	for i := range pool {
		points = append(points, pool[i].value.Aims)
	}
	axes := front.Span(points)
	have = axes.Units(have)
	reference := front.UnitReference(len(points[0]))
	gain := make([]float64, len(pool))
	fresh := make([]int, len(pool)) // points had when the gain was computed
	for i := range gain {
		gain[i], fresh[i] = math.Inf(1), -1
	}
	var taken []promise
	for len(taken) < n {
		i := greatest(gain)
		if i < 0 {
			break
		}
		unit := axes.Unit(pool[i].value.Aims)
		if fresh[i] != len(have) {
			gain[i], fresh[i] = front.Gain(unit, have, reference), len(have)
			continue
		}
		gain[i] = 0
		if s.teaches(&pool[i]) && far(&pool[i], taken, apart) {
			taken = append(taken, pool[i])
			have = append(have, unit)
		}
	}
	return taken
}

// greatest is where the greatest positive value is; −1 when there is none.
func greatest(values []float64) int {
	at, most := -1, 0.0
	for i, x := range values {
		if x > most {
			at, most = i, x
		}
	}
	return at
}

// teaches reports whether the point is apart from all that is known, and not
// nearest to one that failed: there the surfaces know nothing.
func (s *Search) teaches(p *promise) bool {
	nearest, at := math.Inf(1), 0
	for i, u := range s.places {
		if d := distance(u, p.features); d < nearest {
			nearest, at = d, i
		}
	}
	return nearest >= apart && s.known[at].Status == optimize.OK
}

// far reports whether a promise is at least so far from all that are taken.
func far(p *promise, taken []promise, least float64) bool {
	for i := range taken {
		if distance(taken[i].features, p.features) < least {
			return false
		}
	}
	return true
}
