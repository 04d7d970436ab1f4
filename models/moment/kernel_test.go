package moment

import (
	"math"
	"testing"
)

// around is the mean of 1/R and R over φ, R² = d² + 4aa' sin²(φ/2), d the
// distance that averaged is given the square of: even steps converge
// exponentially once they are short against d.
func around(d2, aa float64, steps int) (inverse, mean float64) {
	for i := range steps {
		s := math.Sin(math.Pi * (float64(i) + 0.5) / float64(steps))
		r := math.Sqrt(d2 + 4*aa*s*s)
		inverse += 1 / r / float64(steps)
		mean += r / float64(steps)
	}
	return inverse, mean
}

// The averages against the sum around the conductors, on both sides of where
// the expansion takes over (good to 3e-9 there).
func TestAveragedKernel(t *testing.T) {
	const aa = 2.5e-6
	for _, ratio := range []float64{1e-3, 0.1, 1, 4, 15.99, 16.01, 40, 1e3, 1e6} {
		inverse, mean := averaged(ratio*aa, aa)
		wantInverse, wantMean := around(ratio*aa, aa, 2000)
		if a, b := math.Abs(inverse/wantInverse-1), math.Abs(mean/wantMean-1); a > 5e-9 || b > 5e-9 {
			t.Errorf("d² = %g aa': 1/R off by %.2g, R by %.2g", ratio, a, b)
		}
	}
	// As the distance vanishes, ln(8a/d)/(πa) and 4a/π (d'Alembert's ring).
	a := math.Sqrt(aa)
	for _, d := range []float64{1e-6, 1e-9, 1e-12} {
		inverse, mean := averaged(d*d*aa, aa)
		if e := math.Abs(inverse*math.Pi*a/math.Log(8/d) - 1); e > 1e-9 {
			t.Errorf("d = %g a: 1/R off by %.2g", d, e)
		}
		if e := math.Abs(mean*math.Pi/(4*a) - 1); e > 1e-9 {
			t.Errorf("d = %g a: R off by %.2g", d, e)
		}
	}
	// Far off the conductors are their axes, whichever way it is reckoned: the
	// kernels differ by aa'/2d².
	const far = 1e6
	inverse, mean := averaged(far*aa, aa)
	thin, r := reduced(far*aa, aa)
	if a, b := 2*far*(thin/inverse-1), 2*far*(mean/r-1); math.Abs(a-1) > 1e-3 || math.Abs(b-1) > 1e-3 {
		t.Errorf("far off averaged %g, %g and reduced %g, %g differ by %g and %g of aa'/2d²", inverse, mean, thin, r, a, b)
	}
}

func TestUnitIsTheCircle(t *testing.T) {
	worst := 0.0
	for i := range 20000 {
		x := (float64(i) - 9000) * 0.1234567
		for _, x := range []float64{x, 36 * x} {
			c, s := unit(x)
			worst = max(worst, math.Abs(c-math.Cos(x)), math.Abs(s-math.Sin(x)))
		}
	}
	if worst > 5e-13 {
		t.Errorf("off by %.2g", worst)
	}
}
