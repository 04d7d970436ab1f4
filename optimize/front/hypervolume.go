package front

import (
	"cmp"
	"math"
	"slices"
	"sort"
)

// MostAims is the largest number of aims whose hypervolume is computed.
const MostAims = 4

// Hypervolume is the measure of the region that the points dominate and that
// lies below the reference: exact, for one to four aims. Points that do not
// lie below the reference on every aim add nothing.
//
// Methods: a sweep in the plane; in space the sweep of Fonseca, Paquete,
// López-Ibáñez, CEC 2006, over a staircase kept sorted; in four dimensions
// each point in turn adds the part of its box that earlier ones left free
// (While, Bradstreet, Barone, IEEE Trans. Evol. Comput. 16, 86, 2012).
func Hypervolume(points [][]float64, reference []float64) float64 {
	if len(reference) > MostAims {
		panic("front: hypervolume of more than four aims")
	}
	var w volumes
	return w.of(w.inside(points, reference), reference)
}

// Contributions gives for each point the hypervolume that would be lost
// without it alone. Points that are dominated or equal to another, or that do
// not lie below the reference, contribute nothing.
func Contributions(points [][]float64, reference []float64) []float64 {
	var w volumes
	out := make([]float64, len(points))
	for i := range points {
		out[i] = w.exclusive(points, i, nil, reference)
	}
	return out
}

// Gain is the hypervolume that a point would add to the others.
func Gain(point []float64, others [][]float64, reference []float64) float64 {
	var w volumes
	return w.exclusive(append(slices.Clip(others), point), len(others), nil, reference)
}

// volumes is the workspace of hypervolume computations: repeated use
// allocates nothing.
type volumes struct {
	kept   [][]float64 // points below the reference
	sorted [][]float64
	stairs []step
	clip   [][]float64 // points cut to a box, backed by store
	store  []float64
	deeper *volumes // for the next dimension down
}

// step is a corner of a staircase: x ascends, y descends.
type step struct{ x, y float64 }

// inside keeps the points that lie below the reference on every aim.
func (w *volumes) inside(points [][]float64, reference []float64) [][]float64 {
	w.kept = w.kept[:0]
	for _, p := range points {
		if below(p, reference) {
			w.kept = append(w.kept, p)
		}
	}
	return w.kept
}

func below(p, reference []float64) bool {
	for i, r := range reference {
		if !(p[i] < r) {
			return false
		}
	}
	return true
}

// of is the hypervolume of points that all lie below the reference.
func (w *volumes) of(points [][]float64, ref []float64) float64 {
	if len(points) == 0 {
		return 0
	}
	switch len(ref) {
	case 0:
		return 0
	case 1:
		best := points[0][0]
		for _, p := range points[1:] {
			best = math.Min(best, p[0])
		}
		return ref[0] - best
	case 2:
		return w.plane(points, ref)
	case 3:
		return w.solid(points, ref)
	}
	return w.fourth(points, ref)
}

// plane sweeps along the first aim.
func (w *volumes) plane(points [][]float64, ref []float64) float64 {
	w.sort(points, 0)
	area, y := 0.0, ref[1]
	for _, p := range w.sorted {
		if p[1] < y {
			area += (ref[0] - p[0]) * (y - p[1])
			y = p[1]
		}
	}
	return area
}

// solid sweeps along the third aim and keeps the area that the points so far
// dominate in the plane of the first two.
func (w *volumes) solid(points [][]float64, ref []float64) float64 {
	w.sort(points, 2)
	w.stairs = append(w.stairs[:0], step{math.Inf(-1), ref[1]}, step{ref[0], math.Inf(-1)})
	volume, area := 0.0, 0.0
	for k, p := range w.sorted {
		area += w.climb(p[0], p[1])
		top := ref[2]
		if k+1 < len(w.sorted) {
			top = w.sorted[k+1][2]
		}
		volume += area * (top - p[2])
	}
	return volume
}

// climb adds a corner to the staircase and gives the area won.
func (w *volumes) climb(x, y float64) float64 {
	s := w.stairs
	at := sort.Search(len(s), func(i int) bool { return s[i].x > x })
	if s[at-1].y <= y {
		return 0
	}
	// Corners from `from` up to `to` are covered by the new one.
	to, from := at, at
	if s[at-1].x == x {
		from--
	}
	for s[to].y >= y {
		to++
	}
	area, left, height := 0.0, x, s[at-1].y
	for k := at; k <= to; k++ {
		area += (s[k].x - left) * (height - y)
		left, height = s[k].x, s[k].y
	}
	switch {
	case to > from:
		s[from] = step{x, y}
		w.stairs = append(s[:from+1], s[to:]...)
	default:
		w.stairs = slices.Insert(s, from, step{x, y})
	}
	return area
}

// fourth sweeps along the fourth aim and keeps the volume in the first three.
func (w *volumes) fourth(points [][]float64, ref []float64) float64 {
	w.sort(points, 3)
	if w.deeper == nil {
		w.deeper = &volumes{}
	}
	total, solid := 0.0, 0.0
	for k, p := range w.sorted {
		solid += w.deeper.exclusive(w.sorted[:k+1], k, nil, ref[:3])
		top := ref[3]
		if k+1 < len(w.sorted) {
			top = w.sorted[k+1][3]
		}
		total += solid * (top - p[3])
	}
	return total
}

// sort puts the points in ascending order of one aim.
func (w *volumes) sort(points [][]float64, aim int) {
	w.sorted = append(w.sorted[:0], points...)
	slices.SortFunc(w.sorted, func(p, q []float64) int { return cmp.Compare(p[aim], q[aim]) })
}

// exclusive is the hypervolume that point i has to itself: its box less what
// the others, cut to that box, dominate of it. Points marked gone are left
// out. Only the reference's aims are looked at.
func (w *volumes) exclusive(points [][]float64, i int, gone []bool, ref []float64) float64 {
	p, d := points[i], len(ref)
	box := 1.0
	for m, r := range ref {
		if !(p[m] < r) {
			return 0
		}
		box *= r - p[m]
	}
	w.clip, w.store = w.clip[:0], slices.Grow(w.store[:0], d*len(points))
	for j, q := range points {
		if j == i || gone != nil && gone[j] || !below(q[:d], ref) {
			continue
		}
		from := len(w.store)
		for m := range ref {
			w.store = append(w.store, math.Max(p[m], q[m]))
		}
		cut := w.store[from:len(w.store):len(w.store)]
		if covers(cut, p[:d]) {
			return 0
		}
		w.keep(cut)
	}
	return box - w.of(w.clip, ref)
}

// keep adds a cut point to the clip unless it is covered, and drops those
// that it covers: most points are, and the rest are near neighbours.
func (w *volumes) keep(cut []float64) {
	for _, c := range w.clip {
		if covers(c, cut) {
			return
		}
	}
	n := 0
	for _, c := range w.clip {
		if !covers(cut, c) {
			w.clip[n] = c
			n++
		}
	}
	w.clip = append(w.clip[:n], cut)
}
