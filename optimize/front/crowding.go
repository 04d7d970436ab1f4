package front

import (
	"cmp"
	"math"
	"slices"
)

// Crowding gives, for each of the members (indices into values, one layer),
// how much room it has: the sum over the aims of the distance between its two
// neighbours, in parts of the members' range. The extremes of every aim have
// infinite room; so do members of a layer that is flat in every aim.
//
// Source: crowding distance of Deb and others, 2002, as for [Dominates].
func Crowding(values []Value, members []int) []float64 {
	room := make([]float64, len(members))
	if len(members) == 0 {
		return room
	}
	order, aim := make([]int, len(members)), make([]float64, len(members))
	for k := range order {
		order[k] = k
	}
	flat := true
	for m := range values[members[0]].Aims {
		for k, i := range members {
			aim[k] = values[i].Aims[m]
		}
		// From the order of the aim before: in the plane that is the reverse,
		// which is sorted at once.
		slices.SortFunc(order, func(a, b int) int {
			switch x, y := aim[a], aim[b]; {
			case x < y:
				return -1
			case x > y:
				return 1
			}
			return cmp.Compare(a, b)
		})
		first, last := order[0], order[len(order)-1]
		width := aim[last] - aim[first]
		if !(width > 0) {
			continue
		}
		flat = false
		room[first], room[last] = math.Inf(1), math.Inf(1)
		for k := 1; k < len(order)-1; k++ {
			room[order[k]] += (aim[order[k+1]] - aim[order[k-1]]) / width
		}
	}
	if flat {
		for k := range room {
			room[k] = math.Inf(1)
		}
	}
	return room
}
