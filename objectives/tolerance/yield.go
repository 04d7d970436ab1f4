package tolerance

import (
	"math"
	"slices"
)

// Yield is the share of copies that keep something, 0 to 1, with its 95 %
// confidence interval.
type Yield struct{ Share, Low, High float64 }

// z95 is the normal quantile of 97.5 %.
const z95 = 1.959963984540054

// Wilson is the score interval of a share of k in n at 95 % (Wilson, J. Am.
// Stat. Assoc. 22, 209, 1927): where |p − k/n| = z √(p(1 − p)/n). Of none it is
// everything.
func Wilson(k, n int) (low, high float64) {
	if n == 0 {
		return 0, 1
	}
	share, size := float64(k)/float64(n), float64(n)
	middle := share + z95*z95/(2*size)
	half := z95 * math.Sqrt(share*(1-share)/size+z95*z95/(4*size*size))
	scale := 1 + z95*z95/size
	low, high = (middle-half)/scale, (middle+half)/scale
	if k == 0 {
		low = 0
	}
	if k == n {
		high = 1
	}
	return low, high
}

// yieldOf counts copies. A failed one is unknown: it is no part of the share,
// and widens the interval as if it broke the limit and as if it kept it.
// Copies that are all the same leave nothing to chance.
func yieldOf(kept, answered, failed int, same bool) Yield {
	if answered == 0 {
		return Yield{Share: math.NaN(), Low: 0, High: 1}
	}
	y := Yield{Share: float64(kept) / float64(answered)}
	if same {
		y.Low, y.High = y.Share, y.Share
		return y
	}
	y.Low, _ = Wilson(kept, answered+failed)
	_, y.High = Wilson(kept+failed, answered+failed)
	return y
}

// Percentile is the value that a share of the values, 0 to 1, does not
// exceed, between neighbours along straight lines (type 7 of Hyndman and Fan,
// Am. Stat. 50, 361, 1996). Values that are none are left out; of nothing it
// is none.
func Percentile(values []float64, share float64) float64 {
	sorted := slices.DeleteFunc(slices.Clone(values), math.IsNaN)
	if len(sorted) == 0 {
		return math.NaN()
	}
	slices.Sort(sorted)
	at := share * float64(len(sorted)-1)
	i := min(int(at), len(sorted)-1)
	if i == len(sorted)-1 || sorted[i] == sorted[i+1] {
		return sorted[i]
	}
	return sorted[i] + (at-float64(i))*(sorted[i+1]-sorted[i])
}
