package front

import (
	"cmp"
	"slices"
)

// Dominates reports whether a is better than b whatever the taste: a feasible
// value is better than an infeasible one, any known value better than an
// unknown one; of two feasible values the one that is at least as good on
// every aim and better on one; of two infeasible values the one of smaller
// violation. Two unknown values say nothing of each other.
//
// Source: constrained domination of Deb, Pratap, Agarwal, Meyarivan, IEEE
// Trans. Evol. Comput. 6, 182, 2002; unknown values are our addition.
func Dominates(a, b Value) bool {
	if a.rung() != b.rung() {
		return a.rung() < b.rung()
	}
	switch a.rung() {
	case feasible:
		return beats(a.Aims, b.Aims)
	case infeasible:
		return a.Violation < b.Violation
	}
	return false
}

// The rungs of a value, best first.
const (
	feasible = iota
	infeasible
	unknown
)

func (v *Value) rung() int {
	switch {
	case v.Unknown:
		return unknown
	case v.Violation <= 0:
		return feasible
	}
	return infeasible
}

// beats reports whether p is nowhere worse than q and somewhere better.
func beats(p, q []float64) bool {
	better := false
	for i, x := range p {
		if x > q[i] {
			return false
		}
		better = better || x < q[i]
	}
	return better
}

// covers reports whether p is nowhere worse than q.
func covers(p, q []float64) bool {
	for i, x := range p {
		if x > q[i] {
			return false
		}
	}
	return true
}

// Front gives the indices, ascending, of the feasible values that no other
// feasible value dominates; of exact equals the lowest index stays. All
// values have the same number of aims.
func Front(values []Value) []int {
	order := make([]int, 0, len(values))
	for i := range values {
		if values[i].Feasible() {
			order = append(order, i)
		}
	}
	sortByAims(values, order)
	members := order[:0]
	for _, i := range order {
		if !covered(values, members, i) {
			members = append(members, i)
		}
	}
	slices.Sort(members)
	return members
}

// covered reports whether one of the members is nowhere worse than value i.
// All members come before i in the order of aims; the latest are the likeliest.
func covered(values []Value, members []int, i int) bool {
	p := values[i].Aims
	if len(p) <= 2 && len(members) > 0 {
		return covers(values[members[len(members)-1]].Aims, p)
	}
	for k := len(members) - 1; k >= 0; k-- {
		if covers(values[members[k]].Aims, p) {
			return true
		}
	}
	return false
}

// sortByAims orders indices so that no value comes after one it dominates:
// by the first aim, then the second and so on, then by index.
func sortByAims(values []Value, order []int) {
	slices.SortFunc(order, func(i, j int) int { return compare(values[i].Aims, values[j].Aims, i, j) })
}

// compare orders two points, and of equals their indices. The first aim
// nearly always decides.
func compare(p, q []float64, i, j int) int {
	switch {
	case p[0] < q[0]:
		return -1
	case p[0] > q[0]:
		return 1
	}
	if c := slices.Compare(p, q); c != 0 {
		return c
	}
	return cmp.Compare(i, j)
}
