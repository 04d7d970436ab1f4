package surrogate

import (
	"errors"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
)

// kernel is a radial basis: of the distance of two points, or the sum over
// their coordinates, linear or cubic. The sums learn functions that are sums
// of functions of one variable each from very few points.
type kernel int

const (
	cubic kernel = iota
	linear
	cubicSum
	linearSum
	mixed
	kernels int = iota
)

func (k kernel) of(a, b []float64) float64 {
	sum := 0.0
	switch k {
	case cubicSum:
		for i, x := range a {
			d := math.Abs(x - b[i])
			sum += d * d * d
		}
		return sum
	case linearSum:
		for i, x := range a {
			sum -= math.Abs(x - b[i])
		}
		return sum
	case mixed:
		return 0.5*linearSum.of(a, b) + 0.5*linear.of(a, b)
	case linear:
		return -distance(a, b)
	}
	d := distance(a, b)
	return d * d * d
}

// surfaces are the learned answers: for every output of an evaluation an
// interpolating sum of kernels with a linear tail. Method: radial basis
// functions, Powell, in: Advances in Numerical Analysis 2, 105, 1992.
type surfaces struct {
	ordered int // features in the tail
	centres [][]float64
	outputs []surface
	used    [kernels]bool
}

// surface is one output.
type surface struct {
	kernel  kernel
	weights []float64 // of the centres
	tail    []float64 // constant, then of the ordered features
	warp    warp
	error   float64 // left-out error in the warped unit
}

// warp is a monotone scale on which an output is learned: the middle half of
// the values spans a unit, and far above it grows like a logarithm, so that
// the worst of the known do not bend the surface where it matters.
type warp struct{ middle, width float64 }

const warpFrom = 3 // widths

func newWarp(values []float64) warp {
	v := slices.Clone(values)
	slices.Sort(v)
	n := len(v)
	w := warp{middle: v[n/2], width: v[(3*n)/4] - v[n/4]}
	if !(w.width > 0) {
		w.width = v[n-1] - v[0]
	}
	if !(w.width > 0) {
		w.width = 1
	}
	return w
}

func (w warp) to(x float64) float64 {
	z := (x - w.middle) / w.width
	if z > warpFrom {
		return warpFrom + math.Log1p(z-warpFrom)
	}
	return z
}

func (w warp) from(z float64) float64 {
	if z > warpFrom {
		z = warpFrom + math.Expm1(min(z-warpFrom, 50))
	}
	return w.middle + z*w.width
}

// errFlat is a set of points that no surface can be laid through.
var errFlat = errors.New("the points lie in a plane")

// learn lays surfaces through the outputs at the centres: outputs[o][i] of
// centre i. Each output takes the kernel that foretells left-out centres
// best, the first telling ones counted only.
func learn(centres [][]float64, ordered int, outputs [][]float64, telling int, smooth bool) (*surfaces, error) {
	s := &surfaces{ordered: ordered, centres: centres, outputs: make([]surface, len(outputs))}
	n := len(centres)
	for o := range s.outputs {
		s.outputs[o].error = math.Inf(1)
		s.outputs[o].warp = newWarp(outputs[o])
	}
	right := mat.NewDense(n+1+ordered, len(outputs), nil)
	for o := range outputs {
		for i, x := range outputs[o] {
			right.Set(i, o, s.outputs[o].warp.to(x))
		}
	}
	var inverse, solved mat.Dense
	fitted := false
	for k := range kernels {
		if smooth && kernel(k) != cubic && kernel(k) != cubicSum {
			continue
		}
		inverse.Reset()
		if err := inverse.Inverse(system(centres, ordered, kernel(k))); err != nil && !mild(err) {
			continue
		}
		fitted = true
		solved.Reset()
		solved.Mul(&inverse, right)
		for o := range s.outputs {
			// Rippa, Adv. Comput. Math. 11, 193, 1999: the left-out error of
			// centre i is its weight over the inverse's diagonal.
			sum := 0.0
			for i := range telling {
				e := solved.At(i, o) / inverse.At(i, i)
				sum += e * e
			}
			if e := math.Sqrt(sum / float64(telling)); e < s.outputs[o].error {
				column := mat.Col(nil, o, &solved)
				out := &s.outputs[o]
				out.kernel, out.error, out.weights, out.tail = kernel(k), e, column[:n], column[n:]
			}
		}
	}
	if !fitted {
		return nil, errFlat
	}
	for o := range s.outputs {
		if s.outputs[o].weights == nil {
			return nil, errFlat
		}
		s.used[s.outputs[o].kernel] = true
	}
	return s, nil
}

// mild is a warning of bad condition that interpolation can live with.
func mild(err error) bool {
	var c mat.Condition
	return errors.As(err, &c) && float64(c) < 1e15
}

// nugget keeps centres that all but coincide apart.
const nugget = 1e-10

// system is the matrix of interpolation with a linear tail.
func system(centres [][]float64, ordered int, k kernel) *mat.Dense {
	n := len(centres)
	size := n + 1 + ordered
	m := mat.NewDense(size, size, nil)
	for i, a := range centres {
		for j := range i {
			v := k.of(a, centres[j])
			m.Set(i, j, v)
			m.Set(j, i, v)
		}
		m.Set(i, i, nugget)
		m.Set(i, n, 1)
		m.Set(n, i, 1)
		for t := range ordered {
			m.Set(i, n+1+t, a[t])
			m.Set(n+1+t, i, a[t])
		}
	}
	return m
}

// foretell writes every output at the features u to out; columns is room for
// the kernels, one row each.
func (s *surfaces) foretell(u []float64, columns *[kernels][]float64, out []float64) {
	for k := range kernels {
		if !s.used[k] {
			continue
		}
		c := columns[k][:0]
		for _, x := range s.centres {
			c = append(c, kernel(k).of(u, x))
		}
		columns[k] = c
	}
	for o := range s.outputs {
		f := &s.outputs[o]
		z := f.tail[0]
		for t := range s.ordered {
			z += f.tail[1+t] * u[t]
		}
		for i, c := range columns[f.kernel] {
			z += f.weights[i] * c
		}
		out[o] = f.warp.from(z)
	}
}
