package moment

import (
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// BenchmarkFactor factors a complex symmetric matrix of 120 unknowns, and
// the real system of 240 that stands for it by gonum's LU.
func BenchmarkFactor(b *testing.B) {
	const n = 120
	a := symmetric(rand.New(rand.NewPCG(1, 2)), n, 3*n)
	b.Run("symmetric", func(b *testing.B) {
		var f factored
		room := make([]complex128, n*n)
		b.ReportAllocs()
		for b.Loop() {
			copy(room, a)
			if err := f.factor(room, n); err != nil || f.pivoted {
				b.Fatal(err, f.pivoted)
			}
		}
	})
	b.Run("gonum-lu", func(b *testing.B) {
		twin := realTwin(a, n)
		var lu mat.LU
		b.ReportAllocs()
		for b.Loop() {
			lu.Factorize(twin)
		}
	})
}
