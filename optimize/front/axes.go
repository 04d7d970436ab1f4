package front

import "math"

// Axes scale aims: the ideal goes to 0, the nadir to 1.
type Axes struct{ Ideal, Nadir []float64 }

// Span gives the axes from the least to the greatest of each aim over the
// points. It panics when there are none.
func Span(points [][]float64) Axes {
	if len(points) == 0 {
		panic("front: the span of no points")
	}
	a := Axes{Ideal: append([]float64(nil), points[0]...), Nadir: append([]float64(nil), points[0]...)}
	for _, p := range points[1:] {
		for m, x := range p {
			a.Ideal[m] = math.Min(a.Ideal[m], x)
			a.Nadir[m] = math.Max(a.Nadir[m], x)
		}
	}
	return a
}

// Unit scales the aims. On an axis of no width everything is 0 at the ideal
// and otherwise as far from it as it is.
func (a *Axes) Unit(aims []float64) []float64 {
	u := make([]float64, len(aims))
	a.scale(u, aims)
	return u
}

func (a *Axes) scale(u, aims []float64) {
	for m, x := range aims {
		u[m] = x - a.Ideal[m]
		if w := a.Nadir[m] - a.Ideal[m]; w > 0 {
			u[m] /= w
		}
	}
}

// Units scales many points.
func (a *Axes) Units(points [][]float64) [][]float64 {
	out := make([][]float64, len(points))
	n := len(a.Ideal)
	all := make([]float64, n*len(points))
	for i, p := range points {
		out[i] = all[i*n : (i+1)*n : (i+1)*n]
		a.scale(out[i], p)
	}
	return out
}

// Margin is how far beyond the nadir, in parts of an axis, the reference
// point of a hypervolume on scaled axes lies: extremes of a front count too.
const Margin = 0.1

// UnitReference is the reference point 1 + Margin on each of n scaled axes.
func UnitReference(n int) []float64 {
	r := make([]float64, n)
	for i := range r {
		r[i] = 1 + Margin
	}
	return r
}
