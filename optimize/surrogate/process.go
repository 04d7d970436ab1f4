package surrogate

import (
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

// process is a Gaussian process through every trait of one kind: of each
// frequency's, say. They share scales and so all but their values. Method:
// Rasmussen, Williams, Gaussian Processes for Machine Learning, 2006, ch. 2,
// with Matérn's kernel of order 5/2 (Stein, Interpolation of Spatial Data,
// 1999).
type process struct {
	*scales
	centres []float64   // by their scales, one after the other
	weights [][]float64 // of the centres, a row a trait
	warps   []warp
}

// matern is the kernel at a squared distance in scales.
func matern(square float64) float64 {
	r := math.Sqrt(5 * square)
	return (1 + r + r*r/3) * decay(r)
}

// decay is e to the −x for x ≥ 0, to within 2e-12 of it and below 1e-300
// none: a power of two, one of a table and a short series, several times as
// fast as math.Exp.
func decay(x float64) float64 {
	if x > 690 {
		return 0
	}
	n := int(x * (decaySteps / math.Ln2))
	f := x - float64(n)*(math.Ln2/decaySteps)
	series := 1 - f*(1-f*(1./2-f*(1./6-f*(1./24))))
	return decays[n%decaySteps] * series * math.Float64frombits(uint64(1023-n/decaySteps)<<52)
}

const decaySteps = 64

// decays are e to the −ln 2 · i / decaySteps.
var decays = func() (t [decaySteps]float64) {
	for i := range t {
		t[i] = math.Exp2(-float64(i) / decaySteps)
	}
	return t
}()

// standardised are the traits of a kind as a process sees them: values[t][i]
// of trait t at centre i, and the scales that turn them back.
func standardised(traits [][]float64) (values [][]float64, warps []warp) {
	for _, t := range traits {
		w := newWarp(t)
		w.both = true
		z := make([]float64, len(t))
		for i, x := range t {
			z[i] = w.to(x)
		}
		values, warps = append(values, z), append(warps, w)
	}
	return values, warps
}

// stubborn are the nuggets to try, times the one that was learned, where
// centres all but coincide.
var stubborn = []float64{1, 1e2, 1e4}

// newProcess lays a process through values at the features of its centres,
// best first. False: nothing can be laid through them.
func newProcess(s *scales, features [][]float64, values [][]float64, warps []warp, telling int) (*process, bool) {
	n, d := len(features), len(s.inverse)
	p := &process{scales: s, warps: warps, centres: make([]float64, n*d)}
	for i, u := range features {
		for k, x := range u {
			p.centres[i*d+k] = x * s.inverse[k]
		}
	}
	kernel := mat.NewSymDense(n, nil)
	most := make([]float64, n) // kernel to another centre
	for i := range n {
		for j := range i {
			k := matern(square(p.centres[i*d:(i+1)*d], p.centres[j*d:(j+1)*d]))
			kernel.SetSym(i, j, k)
			most[i], most[j] = max(most[i], k), max(most[j], k)
		}
	}
	var chol mat.Cholesky
	for _, times := range stubborn {
		for i := range n {
			kernel.SetSym(i, i, 1+s.nugget*times)
		}
		if chol.Factorize(kernel) && p.weigh(values, &chol, most, telling) {
			return p, true
		}
	}
	return nil, false
}

// weigh sets the weights, and where the scales have none yet their error.
func (p *process) weigh(values [][]float64, chol *mat.Cholesky, most []float64, telling int) bool {
	p.weights = nil
	for _, z := range values {
		var w mat.VecDense
		if err := chol.SolveVecTo(&w, mat.NewVecDense(len(z), z)); err != nil && !mild(err) {
			return false
		}
		p.weights = append(p.weights, w.RawVector().Data)
	}
	if p.error == 0 {
		p.error = p.leftOut(chol, most, telling)
	}
	return true
}

// leftOut is the error of the first telling centres where each is left out:
// Rippa, Adv. Comput. Math. 11, 193, 1999.
func (p *process) leftOut(chol *mat.Cholesky, most []float64, telling int) float64 {
	var inverse mat.SymDense
	if err := chol.InverseTo(&inverse); err != nil && !mild(err) {
		return 0
	}
	sum := 0.0
	for _, weights := range p.weights {
		for i := range telling {
			e := weights[i] / inverse.At(i, i)
			sum += e * e / (max(1-most[i]*most[i], 0) + p.nugget)
		}
	}
	return math.Sqrt(sum / float64(telling*len(p.weights)))
}

// square is the squared distance of two points.
func square(a, b []float64) float64 {
	sum := 0.0
	for k, x := range a {
		sum += (x - b[k]) * (x - b[k])
	}
	return sum
}

// foretell writes the traits at features u to every step-th place of out,
// each off by so many errors as view says: none at a centre, and more the
// farther the nearest is. room holds a kernel for each centre and the
// features in scales.
func (p *process) foretell(u []float64, view float64, room *processRoom, out []float64, step int) {
	d := len(u)
	for k, x := range u {
		room.scaled[k] = x * p.inverse[k]
	}
	most := 0.0
	for i := range room.kernels {
		k := matern(square(room.scaled, p.centres[i*d:(i+1)*d]))
		room.kernels[i] = k
		most = max(most, k)
	}
	off := view * p.error * math.Sqrt(max(1-most*most, 0)) // rounding may lift most above 1
	for t, weights := range p.weights {
		out[t*step] = p.warps[t].from(off + floats.Dot(weights, room.kernels))
	}
}

// processRoom is what foretelling needs.
type processRoom struct{ kernels, scaled []float64 }

func newProcessRoom(centres, features int) *processRoom {
	return &processRoom{kernels: make([]float64, centres), scaled: make([]float64, features)}
}
