package helix

import "turnwise/models"

// Resample reads a law at n knots. Knots that a constant or a straight taper
// gains leave it as it is; a curve keeps its values at the new knots and
// bends anew between them. One knot gets the mean of the old ones.
func Resample(l models.Law, n int) models.Law {
	out := make(models.Law, n)
	switch {
	case len(l) == n:
		copy(out, l)
		return out
	case n == 1:
		out[0] = mean(l)
		return out
	}
	stretches := new(fitter).fit(nil, l, 1)
	for k := range out {
		t := float64(k) / float64(n-1)
		out[k] = at(stretches, t).value(t)
	}
	return out
}

func mean(l models.Law) float64 {
	sum := 0.0
	for _, x := range l {
		sum += x
	}
	return sum / float64(len(l))
}
