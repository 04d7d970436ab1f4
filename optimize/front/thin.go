package front

import (
	"container/heap"
	"slices"
)

// Thin leaves k of the points, indices ascending: time and again the one that
// contributes the least hypervolume goes; of equals the highest index. For
// two aims it takes O(n log n); for three and four it re-computes only the
// contributions that may have become the least, since taking a point away
// never lowers another's.
func Thin(points [][]float64, reference []float64, k int) []int {
	t := thinner{points: points, ref: reference, gone: make([]bool, len(points))}
	if len(points) > k {
		if len(reference) == 2 {
			t.plane(len(points) - k)
		} else {
			t.lazy(len(points) - k)
		}
	}
	left := make([]int, 0, min(max(k, 0), len(points)))
	for i, gone := range t.gone {
		if !gone {
			left = append(left, i)
		}
	}
	return left
}

// thinner is one thinning: a heap of the points that are left, by
// contribution.
type thinner struct {
	points [][]float64
	ref    []float64
	gone   []bool
	share  []float64 // contribution, or a lower bound of it
	queue  []int     // heap of indices
	place  []int     // of an index in the queue
	work   volumes
}

func (t *thinner) Len() int { return len(t.queue) }
func (t *thinner) Less(a, b int) bool {
	i, j := t.queue[a], t.queue[b]
	if t.share[i] != t.share[j] {
		return t.share[i] < t.share[j]
	}
	return i > j
}
func (t *thinner) Swap(a, b int) {
	t.queue[a], t.queue[b] = t.queue[b], t.queue[a]
	t.place[t.queue[a]], t.place[t.queue[b]] = a, b
}
func (t *thinner) Push(any) { panic("front: a thinning only shrinks") }
func (t *thinner) Pop() any {
	i := t.queue[len(t.queue)-1]
	t.queue = t.queue[:len(t.queue)-1]
	return i
}

func (t *thinner) start() {
	n := len(t.points)
	t.share, t.queue, t.place = make([]float64, n), make([]int, n), make([]int, n)
	for i := range t.queue {
		t.queue[i], t.place[i] = i, i
	}
}

// lazy removes points of any number of aims.
func (t *thinner) lazy(remove int) {
	t.start()
	for i := range t.points {
		t.share[i] = t.work.exclusive(t.points, i, t.gone, t.ref)
	}
	heap.Init(t)
	fresh := make([]int, len(t.points)) // removals seen by each share
	for removed := 0; removed < remove; {
		i := t.queue[0]
		if fresh[i] == removed {
			heap.Pop(t)
			t.gone[i] = true
			removed++
			continue
		}
		t.share[i] = t.work.exclusive(t.points, i, t.gone, t.ref)
		fresh[i] = removed
		heap.Fix(t, 0)
	}
}

// plane removes points of two aims. What is dominated contributes nothing
// and goes first; of the rest only two neighbours change with each removal.
func (t *thinner) plane(remove int) {
	t.start()
	before, after := t.chain()
	for i := range t.points {
		t.share[i] = t.strip(i, before, after)
	}
	heap.Init(t)
	for range remove {
		i := heap.Pop(t).(int)
		t.gone[i] = true
		b, a := before[i], after[i]
		if b == alone {
			continue
		}
		if b >= 0 {
			after[b] = a
			t.share[b] = t.strip(b, before, after)
			heap.Fix(t, t.place[b])
		}
		if a >= 0 {
			before[a] = b
			t.share[a] = t.strip(a, before, after)
			heap.Fix(t, t.place[a])
		}
	}
}

// Neighbours that are no index.
const (
	end   = -1 // of the chain
	alone = -2 // not in the chain: contributes nothing
)

// chain links the members of the front in the plane, by ascending first aim.
func (t *thinner) chain() (before, after []int) {
	before, after = make([]int, len(t.points)), make([]int, len(t.points))
	order := make([]int, len(t.points))
	for i := range order {
		order[i], before[i], after[i] = i, alone, alone
	}
	slices.SortFunc(order, func(i, j int) int { return compare(t.points[i], t.points[j], i, j) })
	last := end
	for _, i := range order {
		if !below(t.points[i], t.ref) || last != end && t.points[last][1] <= t.points[i][1] {
			continue
		}
		before[i], after[i] = last, end
		if last != end {
			after[last] = i
		}
		last = i
	}
	return before, after
}

// strip is the rectangle that only point i of the chain dominates.
func (t *thinner) strip(i int, before, after []int) float64 {
	if before[i] == alone {
		return 0
	}
	right, top := t.ref[0], t.ref[1]
	if a := after[i]; a >= 0 {
		right = t.points[a][0]
	}
	if b := before[i]; b >= 0 {
		top = t.points[b][1]
	}
	return (right - t.points[i][0]) * (top - t.points[i][1])
}

// Thinned is the front of the values, thinned to most members where it has
// more (0: all), on axes scaled to the front's own span; indices ascending.
func Thinned(values []Value, most int) []int {
	members := Front(values)
	if most <= 0 || len(members) <= most {
		return members
	}
	points := make([][]float64, len(members))
	for k, i := range members {
		points[k] = values[i].Aims
	}
	axes := Span(points)
	keep := Thin(axes.Units(points), UnitReference(len(points[0])), most)
	for k, j := range keep {
		keep[k] = members[j]
	}
	return keep
}
