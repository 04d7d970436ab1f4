package surrogate

import (
	"cmp"
	"slices"
	"strconv"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// A neighbourhood is what was answered around one member of the front. Many
// answers lie on many branches of what is good; surfaces through a few of one
// branch follow it closer than surfaces through all, and cost less.
const (
	nearCentres = 80 // answers of a neighbourhood
	nearPoints  = 4  // that a neighbourhood chooses
	nearMembers = 30 // of the front, the most telling, that have one
)

// infillNear chooses n points by surfaces around members of the front and
// notes what they promise; by surfaces through everything while there is no
// front.
func (s *Search) infillNear(n int) []space.Point {
	members := s.anchors((n + nearPoints - 1) / nearPoints)
	if len(members) == 0 {
		return s.infill(n)
	}
	s.promised = nil
	var chosen []promise
	taken := map[string]bool{}
	for k, at := range members {
		few, _ := s.promises(s.nearest(at), n*(k+1)/len(members)-n*k/len(members), "near "+strconv.Itoa(k))
		for _, p := range few {
			if key := p.point.Key(); !taken[key] {
				taken[key] = true
				chosen = append(chosen, p)
			}
		}
	}
	return s.note(chosen, n)
}

// anchors draws n of the front's most telling members.
func (s *Search) anchors(n int) []int {
	members := front.Thinned(s.values(), nearMembers)
	rng := optimize.Stream(s.c.Seed, "surrogate anchors", s.round)
	rng.Shuffle(len(members), func(a, b int) { members[a], members[b] = members[b], members[a] })
	return members[:min(n, len(members))]
}

// nearest lists the answers nearest to one, itself first.
func (s *Search) nearest(at int) []int {
	var near []int
	away := make([]float64, len(s.known))
	for i := range s.known {
		if s.known[i].Status == optimize.OK {
			near = append(near, i)
			away[i] = distance(s.places[at], s.places[i])
		}
	}
	slices.SortStableFunc(near, func(a, b int) int { return cmp.Compare(away[a], away[b]) })
	return near[:min(nearCentres, len(near))]
}
