package moment

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// symmetric makes a random complex symmetric matrix (full storage) with a
// heavy diagonal.
func symmetric(rng *rand.Rand, n int, diagonal float64) []complex128 {
	a := make([]complex128, n*n)
	for i := range n {
		for j := range i + 1 {
			v := complex(rng.NormFloat64(), rng.NormFloat64())
			if i == j {
				v += complex(0, -diagonal)
			}
			a[i*n+j], a[j*n+i] = v, v
		}
	}
	return a
}

// realTwin is the real 2n × 2n system with the same solution.
func realTwin(a []complex128, n int) *mat.Dense {
	d := mat.NewDense(2*n, 2*n, nil)
	for i := range n {
		for j := range n {
			v := a[i*n+j]
			d.Set(i, j, real(v))
			d.Set(i, j+n, -imag(v))
			d.Set(i+n, j, imag(v))
			d.Set(i+n, j+n, real(v))
		}
	}
	return d
}

// realSolution solves by gonum's LU of the real twin.
func realSolution(t testing.TB, a []complex128, b []complex128) []complex128 {
	n := len(b)
	var lu mat.LU
	lu.Factorize(realTwin(a, n))
	rhs := mat.NewVecDense(2*n, nil)
	for i, v := range b {
		rhs.SetVec(i, real(v))
		rhs.SetVec(i+n, imag(v))
	}
	var x mat.VecDense
	if err := lu.SolveVecTo(&x, false, rhs); err != nil {
		t.Fatal(err)
	}
	out := make([]complex128, n)
	for i := range out {
		out[i] = complex(x.AtVec(i), x.AtVec(i+n))
	}
	return out
}

func worstOf(x, y []complex128) float64 {
	top, miss := 0.0, 0.0
	for i := range x {
		top = max(top, cmplx.Abs(y[i]))
		miss = max(miss, cmplx.Abs(x[i]-y[i]))
	}
	return miss / top
}

func TestFactorAgreesWithTheRealTwin(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for _, n := range []int{1, 2, 3, 7, 20, 61} {
		a := symmetric(rng, n, 3*float64(n))
		b := make([]complex128, n)
		for i := range b {
			b[i] = complex(rng.NormFloat64(), rng.NormFloat64())
		}
		want := realSolution(t, a, b)
		var f factored
		if err := f.factor(append([]complex128(nil), a...), n); err != nil {
			t.Fatal(err)
		}
		if f.pivoted {
			t.Errorf("n = %d: a dominant diagonal went to the pivoting way, growth %g", n, f.growth)
		}
		x := append([]complex128(nil), b...)
		f.solve(x)
		if e := worstOf(x, want); e > 1e-12 {
			t.Errorf("n = %d: off by %g", n, e)
		}
		if err := f.kaufman.factor(); err != nil {
			t.Fatal(err)
		}
		copy(x, b)
		f.kaufman.solve(x)
		if e := worstOf(x, want); e > 1e-12 {
			t.Errorf("n = %d, pivoted: off by %g", n, e)
		}
	}
}

func TestHostileMatricesGoToPivoting(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	matrices := map[string]func(n int) []complex128{
		"zero diagonal": func(n int) []complex128 {
			a := symmetric(rng, n, 0)
			for i := range n {
				a[i*n+i] = 0
			}
			return a
		},
		"tiny diagonal": func(n int) []complex128 {
			a := symmetric(rng, n, 0)
			for i := range n {
				a[i*n+i] *= 1e-9
			}
			return a
		},
		"isotropic rows": func(n int) []complex128 { // vᵀv = 0 though v ≠ 0
			a := symmetric(rng, n, 0)
			for i := range n {
				for j := range n {
					v, w := complex(math.Cos(float64(i)), math.Sin(float64(i))), complex(math.Cos(float64(j)), math.Sin(float64(j)))
					a[i*n+j] = a[i*n+j]*1e-6 + v*w
				}
			}
			return a
		},
	}
	for name, make := range matrices {
		for _, n := range []int{2, 5, 24, 51} {
			a := make(n)
			b := append([]complex128(nil), a[:n]...)
			for i := range b {
				b[i] = complex(rng.NormFloat64(), rng.NormFloat64())
			}
			want := realSolution(t, a, b)
			var f factored
			if err := f.factor(append([]complex128(nil), a...), n); err != nil {
				t.Fatal(err)
			}
			if name != "isotropic rows" && !f.pivoted {
				t.Errorf("%s, n = %d: growth %g went unnoticed", name, n, f.growth)
			}
			x := append([]complex128(nil), b...)
			f.solve(x)
			residue := 0.0
			for i := range n {
				s := -b[i]
				for j := range n {
					s += a[i*n+j] * x[j]
				}
				residue = max(residue, cmplx.Abs(s))
			}
			top := 0.0
			for _, v := range want {
				top = max(top, cmplx.Abs(v))
			}
			if residue > 1e-11*max(1, top) {
				t.Errorf("%s, n = %d: residue %g", name, n, residue)
			}
		}
	}
}

func TestSingularIsAnError(t *testing.T) {
	var f factored
	if err := f.factor(make([]complex128, 16), 4); err == nil {
		t.Error("a matrix of zeros was factored")
	}
	nan := symmetric(rand.New(rand.NewPCG(5, 6)), 3, 1)
	nan[4] = complex(math.NaN(), 0)
	if err := f.factor(nan, 3); err == nil {
		x := []complex128{1, 1, 1}
		f.solve(x)
		if cmplx.Abs(x[0]) < math.Inf(1) {
			t.Error("a matrix with NaN gave numbers")
		}
	}
}
