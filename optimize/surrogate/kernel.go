package surrogate

import "math"

// kernel is a radial basis, linear or cubic, over the distance of two points
// in all coordinates, in each one alone, or in each pair. The fewer
// coordinates a term sees, the fewer answers teach it: sums over one and two
// learn figures that are sums of functions of one and two variables. Cubic
// ones learn what is smooth, linear ones what has kinks.
type kernel int

const (
	cubic kernel = iota
	cubicSum
	cubicPairs
	linearSum
	linearMixed     // half over each one alone, half over all
	kernels     int = iota
)

// mostPaired is the most features whose pairs are worth their time.
const mostPaired = 16

// worth reports whether a kernel pays for so many features.
func (k kernel) worth(features int) bool { return k != cubicPairs || features <= mostPaired }

// of is the kernel between two points. The sign makes the matrix over any
// points positive definite where their weights are free of a linear trend.
func (k kernel) of(a, b []float64) float64 {
	sum := 0.0
	switch k {
	case cubic:
		d := distance(a, b)
		sum = d * d * d
	case cubicSum:
		for i, x := range a {
			d := math.Abs(x - b[i])
			sum += d * d * d
		}
	case linearSum:
		for i, x := range a {
			sum -= math.Abs(x - b[i])
		}
	case cubicPairs:
		for i := range a {
			p := (a[i] - b[i]) * (a[i] - b[i])
			for j := range i {
				q := p + (a[j]-b[j])*(a[j]-b[j])
				sum += q * math.Sqrt(q)
			}
		}
	case linearMixed:
		sum = (linearSum.of(a, b) - distance(a, b)) / 2
	}
	return sum
}

// distance is Euclid's.
func distance(a, b []float64) float64 {
	sum := 0.0
	for i, x := range a {
		d := x - b[i]
		sum += d * d
	}
	return math.Sqrt(sum)
}
