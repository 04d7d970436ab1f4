package front

import (
	"cmp"
	"slices"
	"sort"
)

// Layers sorts values by domination: the first layer holds the indices of
// those that no other value dominates, the second those that only the first
// layer dominates, and so on; indices ascend within a layer. Feasible layers
// come first, then one layer for each violation, then the unknown values.
//
// Feasible values are sorted in O(n log n) for one or two aims (Jensen, IEEE
// Trans. Evol. Comput. 7, 503, 2003) and by a binary search over the layers
// for more (Zhang, Tian, Cheng, Jin, ibid. 19, 201, 2015).
func Layers(values []Value) [][]int {
	ranks := Ranks(values)
	count := 0
	for _, r := range ranks {
		count = max(count, r+1)
	}
	sizes := make([]int, count)
	for _, r := range ranks {
		sizes[r]++
	}
	all := make([]int, 0, len(values))
	layers := make([][]int, count)
	for r, n := range sizes {
		layers[r] = all[len(all) : len(all) : len(all)+n]
		all = all[:len(all)+n]
	}
	for i, r := range ranks {
		layers[r] = append(layers[r], i)
	}
	return layers
}

// Ranks gives the layer of each value, 0 for the first; see [Layers].
func Ranks(values []Value) []int {
	ranks := make([]int, len(values))
	var byRung [unknown + 1][]int
	for i := range values {
		r := values[i].rung()
		byRung[r] = append(byRung[r], i)
	}
	next := rankFeasible(values, byRung[feasible], ranks)
	next = rankInfeasible(values, byRung[infeasible], ranks, next)
	for _, i := range byRung[unknown] {
		ranks[i] = next
	}
	return ranks
}

// rankFeasible ranks by aims and gives the number of layers.
func rankFeasible(values []Value, order, ranks []int) int {
	if len(order) == 0 {
		return 0
	}
	sortByAims(values, order)
	if len(values[order[0]].Aims) <= 2 {
		return rankPlane(values, order, ranks)
	}
	var layers [][]int
	for k, i := range order {
		if k > 0 && slices.Equal(values[i].Aims, values[order[k-1]].Aims) {
			ranks[i] = ranks[order[k-1]]
			continue
		}
		r := sort.Search(len(layers), func(r int) bool { return !covered(values, layers[r], i) })
		if r == len(layers) {
			layers = append(layers, nil)
		}
		layers[r] = append(layers[r], i)
		ranks[i] = r
	}
	return len(layers)
}

// rankPlane ranks values of one or two aims. The last aim of the latest
// member is the least of its layer, so it alone decides.
func rankPlane(values []Value, order, ranks []int) int {
	var least []float64
	last := len(values[order[0]].Aims) - 1
	for k, i := range order {
		if k > 0 && slices.Equal(values[i].Aims, values[order[k-1]].Aims) {
			ranks[i] = ranks[order[k-1]]
			continue
		}
		y := values[i].Aims[last]
		r := sort.Search(len(least), func(r int) bool { return least[r] > y })
		if r == len(least) {
			least = append(least, y)
		}
		least[r] = y
		ranks[i] = r
	}
	return len(least)
}

// rankInfeasible ranks by violation from layer next on and gives the layer
// after the last.
func rankInfeasible(values []Value, order, ranks []int, next int) int {
	if len(order) == 0 {
		return next
	}
	slices.SortStableFunc(order, func(i, j int) int {
		return cmp.Compare(values[i].Violation, values[j].Violation)
	})
	for k, i := range order {
		if k > 0 && values[i].Violation > values[order[k-1]].Violation {
			next++
		}
		ranks[i] = next
	}
	return next + 1
}
