package front

import (
	"cmp"
	"slices"
	"sort"
)

// Archive is a front that grows with a search: it holds the non-dominated
// feasible values of all that was inserted, each under its id, whatever the
// order of insertion. The zero Archive is empty and measures hypervolume
// against a running reference: the worst of each aim that a feasible value
// has shown so far, so that it never falls while that stays.
//
// An insertion takes O(log n) comparisons for two aims and O(n) otherwise;
// the hypervolume is computed when it is asked for and has changed.
type Archive struct {
	members   []member // ascending by aims
	worst     []float64
	reference []float64
	volume    float64
	stale     bool
	work      volumes
}

type member struct {
	id   int
	aims []float64
}

// NewArchive is an empty archive that measures hypervolume against a fixed
// reference.
func NewArchive(reference []float64) *Archive {
	return &Archive{reference: slices.Clone(reference)}
}

// Insert adds a value and reports whether it is now a member. Of exact equals
// the lowest id stays. The archive keeps v.Aims, which must not change.
func (a *Archive) Insert(id int, v Value) bool {
	if !v.Feasible() {
		return false
	}
	a.widen(v.Aims)
	at := sort.Search(len(a.members), func(i int) bool {
		return slices.Compare(a.members[i].aims, v.Aims) >= 0
	})
	if at < len(a.members) && slices.Equal(a.members[at].aims, v.Aims) {
		lower := id < a.members[at].id
		if lower {
			a.members[at].id = id
		}
		return lower
	}
	if a.covered(v.Aims, at) {
		return false
	}
	to := a.drop(v.Aims, at)
	a.members = slices.Replace(a.members, at, to, member{id, v.Aims})
	a.stale = true
	return true
}

// widen keeps the worst of each aim.
func (a *Archive) widen(aims []float64) {
	if a.worst == nil {
		a.worst = slices.Clone(aims)
	}
	for m, x := range aims {
		if x > a.worst[m] {
			a.worst[m] = x
			a.stale = true
		}
	}
}

// covered reports whether a member before position at is nowhere worse.
func (a *Archive) covered(aims []float64, at int) bool {
	from := 0
	if len(aims) <= 2 {
		from = max(at-1, 0) // in the plane the nearest has the least second aim
	}
	for i := at - 1; i >= from; i-- {
		if covers(a.members[i].aims, aims) {
			return true
		}
	}
	return false
}

// drop takes out the members from position at on that the aims dominate. It
// gives the end of the run at position at that is to be replaced.
func (a *Archive) drop(aims []float64, at int) int {
	if len(aims) <= 2 {
		to := at
		for to < len(a.members) && covers(aims, a.members[to].aims) {
			to++
		}
		return to
	}
	n := at
	for _, m := range a.members[at:] {
		if !covers(aims, m.aims) {
			a.members[n] = m
			n++
		}
	}
	clear(a.members[n:])
	a.members = a.members[:n]
	return at
}

// Len is the number of members.
func (a *Archive) Len() int { return len(a.members) }

// IDs gives the members' ids, ascending.
func (a *Archive) IDs() []int {
	ids := make([]int, len(a.members))
	for i, m := range a.members {
		ids[i] = m.id
	}
	slices.SortFunc(ids, cmp.Compare[int])
	return ids
}

// Aims gives the members' aims, ascending by the first, then the second …
// They must not be changed.
func (a *Archive) Aims() [][]float64 {
	points := make([][]float64, len(a.members))
	for i, m := range a.members {
		points[i] = m.aims
	}
	return points
}

// Reference is the point that hypervolume is measured against; nil while a
// running one has seen nothing.
func (a *Archive) Reference() []float64 {
	if a.reference != nil {
		return slices.Clone(a.reference)
	}
	return slices.Clone(a.worst)
}

// Hypervolume of the members.
func (a *Archive) Hypervolume() float64 {
	if a.stale {
		reference := a.reference
		if reference == nil {
			reference = a.worst
		}
		a.volume = a.work.of(a.work.inside(a.Aims(), reference), reference)
		a.stale = false
	}
	return a.volume
}
