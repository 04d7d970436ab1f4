package front

import "math"

// Scalar turns a value into the one number that a simplex needs, the smaller
// the better: an augmented achievement function for feasible values, then the
// violation, then one level for unknown values. Every number is finite, every
// feasible one lies in [−1, 1], every infeasible one in [2, 3], and unknown
// is 4; only the order means anything.
//
// Source: achievement scalarising function of Wierzbicki, in Multiple
// Criteria Decision Making, Theory and Application, Springer 1980 (memory):
// max_m w_m(f_m − r_m) + ρ Σ w_m(f_m − r_m). Its minimiser lies on the front,
// near where the ray from the reference in the direction 1/w meets it.
type Scalar struct {
	// Reference is where one would like to be, in the aims' units.
	Reference []float64
	// Weight of each aim, positive: 1 over its range makes aims comparable.
	Weight []float64
	// Augmentation is ρ; a small positive number keeps weakly dominated
	// points from being as good as their betters.
	Augmentation float64
}

// The levels of a scalar beyond the feasible ones.
const (
	infeasibleFrom = 2.0
	unknownLevel   = 4.0
)

// Of is the number of one value. An aim that is not a number makes the value
// unknown.
func (s *Scalar) Of(v Value) float64 {
	switch v.rung() {
	case infeasible:
		if !math.IsNaN(v.Violation) {
			return infeasibleFrom + squash(v.Violation)
		}
	case feasible:
		if a := s.Achievement(v.Aims); !math.IsNaN(a) {
			return squash(a)
		}
	}
	return unknownLevel
}

// Achievement is how far aims fall short of the reference, negative beyond
// it: without bounds, for feasible values only.
func (s *Scalar) Achievement(aims []float64) float64 {
	most, sum := math.Inf(-1), 0.0
	for m, f := range aims {
		d := s.Weight[m] * (f - s.Reference[m])
		most = math.Max(most, d)
		sum += d
	}
	return most + s.Augmentation*sum
}

// squash takes the line to [−1, 1] and keeps the order, with full relative
// precision about 0.
func squash(x float64) float64 {
	if math.IsInf(x, 0) {
		return math.Copysign(1, x)
	}
	return x / (1 + math.Abs(x))
}
