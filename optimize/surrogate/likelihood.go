package surrogate

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize"
)

// scales are what a process has learned of a kind of trait: how far along
// each feature it takes to change, as an inverse, and what part of its
// variance follows no feature.
type scales struct {
	inverse []float64
	nugget  float64
	raw     []float64 // where their search ended, to start from again
	// error is how far processes with these scales are off where a centre is
	// left out, by what the nearest other lets expect; 0: not known yet.
	error float64
}

// Bounds of lengths, in parts of a feature's range, and of the nugget. A
// feature as long as the longest makes no difference.
const (
	shortest, longest          = 0.05, 30
	leastNugget, mostNugget    = 1e-8, 0.1
	firstLength, firstNugget   = 1, 1e-4
	likelihoodSteps, mostTried = 25, 60
	// farthest keeps a start off the bounds, where the likelihood is flat.
	farthest = 4
)

// likelihood is that of a process through answers, as a function of raw
// scales: the logistic of each spans the logarithm's bounds. Method:
// Rasmussen, Williams, Gaussian Processes for Machine Learning, 2006, ch. 5,
// with the variance that is best.
type likelihood struct {
	x          [][]float64
	y          *mat.VecDense
	kernel     *mat.SymDense
	slope      *mat.SymDense // −2 d(kernel)/d(distance²)
	at         []float64     // raw scales of value and gradient
	value      float64
	gradient   []float64
	chol       mat.Cholesky
	inverse    mat.SymDense
	weights    mat.VecDense
	low, width []float64
}

func newLikelihood(x [][]float64, values []float64) *likelihood {
	n, features := len(x), len(x[0])
	l := &likelihood{x: x, y: mat.NewVecDense(n, values), kernel: mat.NewSymDense(n, nil), slope: mat.NewSymDense(n, nil),
		gradient: make([]float64, features+1)}
	for range features {
		l.low, l.width = append(l.low, math.Log(shortest)), append(l.width, math.Log(longest/shortest))
	}
	l.low, l.width = append(l.low, math.Log(leastNugget)), append(l.width, math.Log(mostNugget/leastNugget))
	return l
}

// fitted are the most likely scales for values at some points, from where an
// earlier fit ended.
func fitted(x [][]float64, values []float64, from *scales) *scales {
	l := newLikelihood(x, values)
	start := l.first()
	if from != nil {
		start = from.raw
	}
	problem := optimize.Problem{
		Func: func(raw []float64) float64 { l.evaluate(raw); return l.value },
		Grad: func(g, raw []float64) { l.evaluate(raw); copy(g, l.gradient) },
	}
	// What it reports is no failure: the best so far is as good as any.
	best, _ := optimize.Minimize(problem, start, &optimize.Settings{MajorIterations: likelihoodSteps, FuncEvaluations: mostTried}, &optimize.LBFGS{})
	if best == nil || math.IsNaN(best.F) || math.IsInf(best.F, 0) {
		return l.scales(start)
	}
	for i := range best.X {
		best.X[i] = min(max(best.X[i], -farthest), farthest)
	}
	return l.scales(best.X)
}

// first are the raw scales to begin with.
func (l *likelihood) first() []float64 {
	raw := make([]float64, len(l.low))
	for i := range raw {
		want := math.Log(firstLength)
		if i == len(raw)-1 {
			want = math.Log(firstNugget)
		}
		share := (want - l.low[i]) / l.width[i]
		raw[i] = math.Log(share / (1 - share))
	}
	return raw
}

// scales are those that raw ones stand for.
func (l *likelihood) scales(raw []float64) *scales {
	s := &scales{raw: slices.Clone(raw)}
	for i, r := range raw {
		log := l.low[i] + l.width[i]*logistic(r)
		if i < len(raw)-1 {
			s.inverse = append(s.inverse, math.Exp(-log))
		} else {
			s.nugget = math.Exp(log)
		}
	}
	return s
}

func logistic(x float64) float64 { return 1 / (1 + math.Exp(-x)) }

// evaluate sets value and gradient.
func (l *likelihood) evaluate(raw []float64) {
	if slices.Equal(raw, l.at) {
		return
	}
	l.at = append(l.at[:0], raw...)
	s := l.scales(raw)
	square := make([]float64, len(s.inverse))
	for k, v := range s.inverse {
		square[k] = v * v
	}
	for i, a := range l.x {
		for j := range i {
			d := 0.0
			for k, b := range l.x[j] {
				d += (a[k] - b) * (a[k] - b) * square[k]
			}
			r := math.Sqrt(5 * d)
			e := decay(r)
			l.kernel.SetSym(i, j, (1+r+r*r/3)*e)
			l.slope.SetSym(i, j, 5.0/3*(1+r)*e)
		}
		l.kernel.SetSym(i, i, 1+s.nugget)
	}
	variance := 0.0
	if l.chol.Factorize(l.kernel) && l.chol.SolveVecTo(&l.weights, l.y) == nil && l.chol.InverseTo(&l.inverse) == nil {
		variance = mat.Dot(l.y, &l.weights) / float64(len(l.x))
	}
	if !(variance > 0) { // a matrix beyond its digits, or nothing to learn
		l.value = math.Inf(1)
		clear(l.gradient)
		return
	}
	n := float64(len(l.x))
	l.value = n*math.Log(variance) + l.chol.LogDet()
	l.slopes(s, square, variance)
	for k, r := range raw {
		l.gradient[k] *= l.width[k] * logistic(r) * (1 - logistic(r))
	}
}

// slopes sets the gradient by the logarithms of lengths and nugget.
func (l *likelihood) slopes(s *scales, square []float64, variance float64) {
	clear(l.gradient)
	last := len(square)
	for i, a := range l.x {
		wi := l.weights.AtVec(i)
		for j := range i {
			pull := 2 * (l.inverse.At(i, j) - wi*l.weights.AtVec(j)/variance) * l.slope.At(i, j)
			for k, b := range l.x[j] {
				l.gradient[k] += pull * (a[k] - b) * (a[k] - b) * square[k]
			}
		}
		l.gradient[last] += s.nugget * (l.inverse.At(i, i) - wi*wi/variance)
	}
}
