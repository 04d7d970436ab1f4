package objectives

import (
	"gonum.org/v1/gonum/interp"

	"turnwise/models"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// views are the spaces in which the laws have fewer knots than the brief
// gives them: 1 each, then at most 2, and so on. A constant and a straight
// line are exactly themselves with more knots.
func (l *Layout) views() []optimize.View {
	most := 1
	for _, v := range l.spec.Vary {
		most = max(most, v.Knots)
	}
	var views []optimize.View
	for knots := 1; knots < most; knots++ {
		views = append(views, l.view(knots))
	}
	return views
}

// view has at most so many knots a law; it lifts to one more.
func (l *Layout) view(knots int) optimize.View {
	var v optimize.View
	for i, c := range l.Columns {
		if c.Knot < knots {
			v.Space = append(v.Space, l.Space[i])
		}
	}
	v.Lift = func(p space.Point) space.Point {
		var out space.Point
		for _, q := range l.spec.Vary {
			own := max(q.Knots, 1)
			n := min(own, knots)
			values := models.Law(p[:n])
			p = p[n:]
			out = append(out, resampled(values, min(own, knots+1))...)
		}
		return out
	}
	return v
}

// resampled is a law with another number of knots, none fewer.
func resampled(l models.Law, knots int) models.Law {
	if len(l) == knots {
		return l
	}
	out := make(models.Law, knots)
	at := func(float64) float64 { return l[0] }
	switch n := len(l); {
	case n == 2:
		at = func(x float64) float64 { return l[0] + (l[1]-l[0])*x }
	case n > 2:
		xs := make([]float64, n)
		for i := range xs {
			xs[i] = float64(i) / float64(n-1)
		}
		var curve interp.FritschButland
		_ = curve.Fit(xs, l) // fails on nothing in order
		at = curve.Predict
	}
	for i := range out {
		out[i] = at(float64(i) / float64(knots-1))
	}
	return out
}
