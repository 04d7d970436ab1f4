package helix

import (
	"gonum.org/v1/gonum/interp"

	"turnwise/models"
)

// cubic is one stretch of a law: c[0] + c[1]x + c[2]x² + c[3]x³ with
// x = t − from, for t up to the next stretch.
type cubic struct {
	from float64
	c    [4]float64
}

// fitter turns laws into cubics and keeps the room that takes.
type fitter struct {
	knots []float64
	curve interp.FritschButland
}

// fit appends the stretches of a law over the given turns to dst.
func (f *fitter) fit(dst []cubic, l models.Law, turns float64) []cubic {
	switch n := len(l); n {
	case 1:
		return append(dst, cubic{c: [4]float64{l[0]}})
	case 2:
		return append(dst, cubic{c: [4]float64{l[0], (l[1] - l[0]) / turns}})
	default:
		f.knots = f.knots[:0]
		for i := range n {
			f.knots = append(f.knots, turns*float64(i)/float64(n-1))
		}
		// Fit has nothing to fail of: it panics on unordered knots, and
		// these are in order.
		_ = f.curve.Fit(f.knots, l)
		for i := range n - 1 {
			a, b := f.knots[i], f.knots[i+1]
			dst = append(dst, hermite(a, b, l[i], l[i+1], f.curve.PredictDerivative(a), f.curve.PredictDerivative(b)))
		}
		return dst
	}
}

// hermite is the cubic from (a, ya) to (b, yb) with slopes da and db.
func hermite(a, b, ya, yb, da, db float64) cubic {
	h := b - a
	m := (yb - ya) / h
	return cubic{from: a, c: [4]float64{ya, da, (3*m - 2*da - db) / h, (da + db - 2*m) / (h * h)}}
}

// at finds the stretch of a law that holds t.
func at(law []cubic, t float64) *cubic {
	i := len(law) - 1
	for i > 0 && law[i].from > t {
		i--
	}
	return &law[i]
}

// value is the law's value at t.
func (q *cubic) value(t float64) float64 {
	x := t - q.from
	return q.c[0] + x*(q.c[1]+x*(q.c[2]+x*q.c[3]))
}

// about gives the coefficients of the same cubic in x = t − from.
func (q *cubic) about(from float64) [4]float64 {
	h := from - q.from
	c := q.c
	return [4]float64{
		c[0] + h*(c[1]+h*(c[2]+h*c[3])),
		c[1] + h*(2*c[2]+3*h*c[3]),
		c[2] + 3*h*c[3],
		c[3],
	}
}
