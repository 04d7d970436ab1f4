package moment

import (
	"math"
	"testing"
)

func TestSplinesAddUpAndAreSmooth(t *testing.T) {
	for degree := 2; degree <= 5; degree++ {
		for _, n := range []int{1, 2, 3, 5, 12} {
			for e := range n {
				b := splines(n, e, degree)
				for _, x := range []float64{-1, -0.3, 0.2, 1} {
					sum := 0.0
					for i := 0; i <= degree; i++ {
						sum += b[i].at(x, maxOrder)
					}
					if math.Abs(sum-1) > 1e-13 {
						t.Fatalf("degree %d, element %d of %d: the functions add up to %g at %g", degree, e, n, sum, x)
					}
				}
				if e+1 < n {
					next := splines(n, e+1, degree)
					for i := 1; i <= degree; i++ {
						p, q := b[i], next[i-1]
						for d := 0; d < degree; d++ {
							u, v := p.at(1, maxOrder), q.at(-1, maxOrder)
							if math.Abs(u-v) > 1e-11 {
								t.Fatalf("degree %d, knot %d of %d, function %d: derivative %d jumps from %g to %g", degree, e+1, n, i, d, u, v)
							}
							p, q = p.slope(), q.slope()
						}
					}
				}
			}
			first, last := splines(n, 0, degree), splines(n, n-1, degree)
			if first[0].at(-1, maxOrder) != 1 || math.Abs(last[degree].at(1, maxOrder)-1) > 1e-13 {
				t.Errorf("degree %d, %d elements: the end functions are not 1 at the ends", degree, n)
			}
		}
	}
}
