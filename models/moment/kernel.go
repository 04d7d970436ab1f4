package moment

import (
	"math"

	"gonum.org/v1/gonum/mathext"
)

// The kernel is e^{−jkR}/R between the axes of two conductors. Far pairs
// take it reduced, R² = |r − r'|² + (a² + a'²)/2; near pairs average it
// around the conductors, R² = |r − r'|² + (a − a')² + 4aa' sin²(φ/2), and
// need only its first two static terms so: 1/R and R.
//
// A thin coat of thickness t takes (1 − 1/ε_r) of what the charges' 1/R of the
// conductor's surface has over that of the coat's surface, radius a + t. Along
// functions that are long against the radius that is the series loading of
// Richmond and Newman (Radio Science 11, 13, 1976), a potential less by
// 2(1 − 1/ε_r) ln(1 + t/a) times the charge; on shorter ones it fades as the
// field does, where the loading by itself would outweigh the kernel.

// expand is the squared distance in units of a·a' beyond which the averages
// come from their expansion, good to 3e-9 there.
const expand = 16

// averaged gives the means of 1/R and R over φ, for the squared distance d2
// of the axes, (a − a')² included, and aa = a·a'.
//
// With R² = s² − 2aa' cos φ, s² = d² + 2aa', both are complete elliptic
// integrals: (2/π)K(m)/√(d² + 4aa') and (2/π)E(m)·√(d² + 4aa'), with
// m = 4aa'/(d² + 4aa').
func averaged(d2, aa float64) (inverse, mean float64) {
	s2 := d2 + 2*aa
	if d2 > expand*aa {
		y := aa / s2
		y *= y
		s := math.Sqrt(s2)
		inverse = (1 + y*(0.75+y*(1.640625+y*4.51171875))) / s
		mean = s * (1 - y*(0.25+y*(0.234375+y*0.41015625)))
		return inverse, mean
	}
	far2 := d2 + 4*aa
	far := math.Sqrt(far2)
	rest := d2 / far2 // 1 − m
	if rest < 1e-9 {
		// K → ln(4/√(1 − m)), E → 1.
		return (2 / math.Pi) * math.Log(4/math.Sqrt(max(rest, 1e-300))) / far, (2 / math.Pi) * far
	}
	m := 1 - rest
	return (2 / math.Pi) * mathext.CompleteK(m) / far, (2 / math.Pi) * mathext.CompleteE(m) * far
}

// reduced gives 1/R and R of the reduced kernel for the squared distance of
// the axes d2 and a2 = (a² + a'²)/2.
func reduced(d2, a2 float64) (inverse, r float64) {
	r = math.Sqrt(d2 + a2)
	return 1 / r, r
}
