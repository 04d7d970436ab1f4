package moment

import (
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"
)

// unitPower is jᵐ.
func unitPower(m int) complex128 { return [4]complex128{1, 1i, -1, -1i}[m%4] }

func TestBesselModesOfRealArguments(t *testing.T) {
	b := make([]complex128, 34)
	for _, x := range []float64{0, 1e-9, 1e-7, 0.01, 0.7, 2.4, 9, 33.3, 100} {
		besselModes(complex(x, 0), b)
		for m, got := range b {
			if want := unitPower(m) * complex(math.Jn(m, x), 0); cmplx.Abs(got-want) > 1e-9 {
				t.Errorf("jᵐJ_m(%g), m = %d: %.15g; %.15g is due", x, m, got, want)
			}
		}
	}
}

// besselSeries is jᵐJ_m(x) by the power series Σ (−1)ⁿ(x/2)^{m+2n}/n!(m+n)!,
// and the size of its first term.
func besselSeries(m int, x complex128) (sum complex128, first float64) {
	term := unitPower(m)
	for i := range m {
		term *= x / complex(float64(2*(i+1)), 0)
	}
	first = cmplx.Abs(term)
	for n := range 60 {
		sum += term
		term *= -x * x / complex(float64(4*(n+1)*(m+n+1)), 0)
	}
	return sum, first
}

// Every mode is right in its own digits, however small it is.
func TestBesselModesOfComplexArguments(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		x := cmplx.Rect(rapid.Float64Range(1e-9, 5).Draw(rt, "size"), rapid.Float64Range(-math.Pi/2, math.Pi/2).Draw(rt, "angle"))
		b := make([]complex128, rapid.IntRange(2, 30).Draw(rt, "modes"))
		besselModes(x, b)
		for m, got := range b {
			want, first := besselSeries(m, x)
			if math.Sqrt(size2(x)) < 1e-8 && m > 1 {
				want, first = 0, 1 // taken for nothing
			}
			if cmplx.Abs(got-want) > 1e-10*first {
				rt.Fatalf("jᵐJ_m(%g), m = %d: %.15g; %.15g is due", x, m, got, want)
			}
		}
	})
}

// Of large arguments off the real line, which grow as e^{|Im x|}, by the mean
// of e^{jx cos τ} cos mτ over even steps of a turn.
func TestBesselModesOfLargeComplexArguments(t *testing.T) {
	const steps = 400
	for _, x := range []complex128{6 - 9i, 20 - 1i, 20 + 1i, 0.1 - 30i, 0.1 + 30i, 60 - 40i, 90 + 20i} {
		b := make([]complex128, 34)
		besselModes(x, b)
		for m, got := range b {
			want := complex128(0)
			for i := range steps {
				tau := 2 * math.Pi * float64(i) / steps
				want += cmplx.Exp(complex(0, math.Cos(tau))*x) * complex(math.Cos(float64(m)*tau)/steps, 0)
			}
			if miss := cmplx.Abs(got-want) / math.Exp(math.Abs(imag(x))); miss > 1e-9 {
				t.Errorf("jᵐJ_m(%g), m = %d: %.15g; %.15g is due", x, m, got, want)
			}
		}
	}
}
