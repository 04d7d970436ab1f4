package surrogate

import (
	"errors"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
)

// surfaces are the learned answers: for every figure an interpolating sum of
// kernels with a linear tail. Method: radial basis functions, Powell, in:
// Advances in Numerical Analysis 2, 105, 1992.
type surfaces struct {
	centres [][]float64
	ordered int     // features in the tail, the first ones
	typical float64 // distance of a centre to the nearest other
	figures []surface
	outputs []copied // of figures
}

// surface is one figure, learned on its warped scale.
type surface struct {
	kernel  kernel
	weights []float64 // of the centres
	tail    []float64 // constant, then of the ordered features
	warp    warp
	error   float64 // root mean square over left-out centres
}

// learn lays surfaces through outputs[o][i] at centre i. Each takes the
// kernel that foretells left-out centres best, only the first telling ones
// counted. False means that no kernel can be laid through the centres.
func learn(centres [][]float64, ordered int, outputs [][]float64, telling int) (*surfaces, bool) {
	s := &surfaces{centres: centres, ordered: ordered, typical: typical(centres)}
	var figures [][]float64
	figures, s.outputs = distinct(outputs)
	n := len(centres)
	right := mat.NewDense(n+1+ordered, len(figures), nil)
	for o, values := range figures {
		f := surface{warp: newWarp(values), error: math.Inf(1)}
		for i, x := range values {
			right.Set(i, o, f.warp.to(x))
		}
		s.figures = append(s.figures, f)
	}
	for k := range kernels {
		if kernel(k).worth(len(centres[0])) {
			s.try(kernel(k), right, telling)
		}
	}
	for o := range s.figures {
		if s.figures[o].weights == nil {
			return nil, false
		}
	}
	return s, true
}

// try gives a kernel to the figures that it foretells better than their own.
func (s *surfaces) try(k kernel, right *mat.Dense, telling int) {
	var inverse, solved mat.Dense
	if err := inverse.Inverse(s.system(k)); err != nil && !mild(err) {
		return
	}
	solved.Mul(&inverse, right)
	n := len(s.centres)
	for o := range s.figures {
		// Rippa, Adv. Comput. Math. 11, 193, 1999: the error of a left-out
		// centre is its weight over the inverse's diagonal.
		sum := 0.0
		for i := range telling {
			e := solved.At(i, o) / inverse.At(i, i)
			sum += e * e
		}
		if f := &s.figures[o]; math.Sqrt(sum/float64(telling)) < f.error {
			column := mat.Col(nil, o, &solved)
			f.kernel, f.error = k, math.Sqrt(sum/float64(telling))
			f.weights, f.tail = column[:n], column[n:]
		}
	}
}

// mild is a warning of bad condition that interpolation can live with.
func mild(err error) bool {
	var c mat.Condition
	return errors.As(err, &c) && float64(c) < 1e15
}

// nugget keeps centres that all but coincide apart, and tells slopes apart
// that the centres do not.
const nugget = 1e-10

// system is the matrix of interpolation.
func (s *surfaces) system(k kernel) *mat.Dense {
	n := len(s.centres)
	m := mat.NewDense(n+1+s.ordered, n+1+s.ordered, nil)
	both := func(i, j int, v float64) {
		m.Set(i, j, v)
		m.Set(j, i, v)
	}
	for i, a := range s.centres {
		for j := range i {
			both(i, j, k.of(a, s.centres[j]))
		}
		m.Set(i, i, nugget)
		both(i, n, 1)
		for t := range s.ordered {
			both(i, n+1+t, a[t])
		}
	}
	for t := range s.ordered {
		m.Set(n+1+t, n+1+t, -nugget)
	}
	return m
}

// typical is the median distance of a point to the nearest other.
func typical(points [][]float64) float64 {
	nearest := make([]float64, len(points))
	for i, a := range points {
		nearest[i] = math.Inf(1)
		for j, b := range points {
			if i != j {
				nearest[i] = min(nearest[i], distance(a, b))
			}
		}
	}
	slices.Sort(nearest)
	return max(nearest[len(nearest)/2], apart)
}

// foretell writes every output at the features u to out. Caution makes each
// worse by so many left-out errors at the typical distance from the centres,
// and by less where one is near.
func (s *surfaces) foretell(u []float64, caution float64, room *columns, out []float64) {
	room.fill(s, u)
	for o := range s.figures {
		f := &s.figures[o]
		z := f.tail[0] + caution*f.error*room.nearest/s.typical
		for t := range s.ordered {
			z += f.tail[1+t] * u[t]
		}
		for i, c := range room.of[f.kernel] {
			z += f.weights[i] * c
		}
		room.figures[o] = f.warp.from(z)
	}
	for o, c := range s.outputs {
		out[o] = c.offset + c.scale*room.figures[c.figure]
	}
}

// columns is what foretelling needs: the kernels that are used between a
// point and every centre.
type columns struct {
	used    [kernels]bool
	of      [kernels][]float64
	nearest float64 // centre, by distance
	figures []float64
}

func newColumns(s *surfaces) *columns {
	c := &columns{figures: make([]float64, len(s.figures))}
	for i := range s.figures {
		k := s.figures[i].kernel
		c.used[k] = true
		c.of[k] = make([]float64, len(s.centres))
	}
	return c
}

func (c *columns) fill(s *surfaces, u []float64) {
	c.nearest = math.Inf(1)
	for _, x := range s.centres {
		c.nearest = min(c.nearest, distance(u, x))
	}
	for k, used := range c.used {
		if !used {
			continue
		}
		for i, x := range s.centres {
			c.of[k][i] = kernel(k).of(u, x)
		}
	}
}
