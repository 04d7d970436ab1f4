package moment

import (
	"context"
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
)

// metreWave is the frequency whose wavelength is 1 m: lengths are then in
// wavelengths and k = 2π.
const metreWave = models.LightSpeed

// solve analyses an antenna at frequencies and fails the test if that fails.
func solve(t testing.TB, a *Antenna, f Fidelity, see func(*Solution), hz ...float64) {
	t.Helper()
	err := Analyse(context.Background(), a, f, hz, func(s *Solution) error {
		see(s)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
}

// simulate asks the solver of a fidelity and fails the test if that fails.
func simulate(t testing.TB, f Fidelity, d models.Design, o models.Outputs, hz ...float64) models.Response {
	t.Helper()
	s, err := New(f)
	if err != nil {
		t.Fatal(err)
	}
	r, err := s.Simulate(context.Background(), d, models.Question{Hz: hz, Outputs: o, Cone: math.Pi / 12})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// upright is a straight wire along z.
func upright(x, from, to, radius float64, elements int) Wire {
	return Wire{Curve: Straight{A: r3.Vec{X: x, Z: from}, B: r3.Vec{X: x, Z: to}}, To: 1, Radius: radius, Elements: elements}
}

// prepared is an antenna's work up to its matrix at one frequency, with both
// triangles filled each by itself or the upper copied from the lower.
func prepared(t testing.TB, a *Antenna, f Fidelity, hz float64, both bool) (*work, []complex128) {
	t.Helper()
	set, ok := f.settings()
	if !ok {
		t.Fatalf("no fidelity %q", f)
	}
	w := new(work)
	w.static.both = both
	if err := w.prepare(a, set, []float64{hz}); err != nil {
		t.Fatal(err)
	}
	n := w.mesh.functions
	w.hz, w.wave = hz, wave(hz)
	z := make([]complex128, n*n)
	if err := w.grid.fill(t.Context(), &w.mesh, []float64{w.wave}, 0, [][]complex128{z}); err != nil {
		t.Fatal(err)
	}
	w.complete(z)
	if !both {
		for i := range n {
			for j := range i {
				z[j*n+i] = z[i*n+j]
			}
		}
	}
	return w, z
}

// imposed is the spline nearest to a current, given by wire and arc length
// from the wire's start, in the least squares.
func imposed(t testing.TB, w *work, current func(wire int, s float64) float64) []complex128 {
	t.Helper()
	m := &w.mesh
	n := m.functions
	gram, rhs := mat.NewSymDense(n, nil), mat.NewVecDense(n, nil)
	g := &legendre[12]
	for i := range m.elements {
		e := &m.elements[i]
		for j, x := range g.x {
			s := (float64(i-m.wires[e.wire].first) + (x+1)/2) * e.length
			weight := g.w[j] * e.length / 2
			for l, p := range e.fn[:m.order] {
				if p < 0 {
					continue
				}
				v := e.value[l].at(x, m.order) * weight
				rhs.SetVec(p, rhs.AtVec(p)+v*current(e.wire, s))
				for r, q := range e.fn[:m.order] {
					if q >= p {
						gram.SetSym(p, q, gram.At(p, q)+v*e.value[r].at(x, m.order))
					}
				}
			}
		}
	}
	var c mat.Cholesky
	if !c.Factorize(gram) {
		t.Fatal("the functions are not independent")
	}
	var x mat.VecDense
	if err := c.SolveVecTo(&x, rhs); err != nil {
		t.Fatal(err)
	}
	out := make([]complex128, n)
	for i := range out {
		out[i] = complex(x.AtVec(i), 0)
	}
	return out
}

// carry makes c the current of w.
func carry(w *work, c []complex128) {
	copy(w.current, c)
	w.spreadOut()
}

// reaction is aᵀ·z·b.
func reaction(z, a, b []complex128) (sum complex128) {
	n := len(a)
	for i, u := range a {
		for j, v := range b {
			sum += u * z[i*n+j] * v
		}
	}
	return sum
}

// apart is the difference of two numbers over the larger one.
func apart(a, b complex128) float64 {
	return cmplx.Abs(a-b) / max(cmplx.Abs(a), cmplx.Abs(b))
}

func decibels(ratio float64) float64 { return 10 * math.Log10(ratio) }

// wound is a helical design as an antenna, by the solver's own worker.
func wound(t testing.TB, d models.Design, f Fidelity, hz float64) *Antenna {
	t.Helper()
	set, ok := f.settings()
	if !ok {
		t.Fatalf("no fidelity %q", f)
	}
	w := newWorker()
	w.design, w.question = &d, models.Question{Hz: []float64{hz}}
	if err := w.curve.Wind(&d); err != nil {
		t.Fatal(err)
	}
	if err := w.wires(set, hz); err != nil {
		t.Fatal(err)
	}
	return &w.wound
}
