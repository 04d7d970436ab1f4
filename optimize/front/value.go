// Package front ranks evaluations: dominance under limits, fronts, crowding,
// hypervolume and the rules that choose one member. Pure functions; every
// aim is to be minimised.
package front

import "math"

// Value is what ranking sees of one evaluation.
type Value struct {
	// Aims in minimise form.
	Aims []float64
	// Violation is the sum of the scaled limits that are not met; 0 is
	// feasible.
	Violation float64
	// Unknown marks an evaluation that failed: it is neither good nor bad.
	Unknown bool
}

// Feasible reports whether the value is known and meets every limit.
func (v *Value) Feasible() bool { return !v.Unknown && v.Violation <= 0 }

// Violation sums the positive parts of scaled limits, each ≤ 0 when met.
func Violation(limits []float64) float64 {
	sum := 0.0
	for _, l := range limits {
		sum += math.Max(l, 0)
	}
	return sum
}
