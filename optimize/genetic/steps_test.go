package genetic

import (
	"math"
	"testing"

	"pgregory.net/rapid"
)

// Fronts stay what they were to the last bit: power is the library's.
func TestPowerIsTheLibrarys(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(0, 1).Draw(t, "x")
		n := rapid.IntRange(3, 40).Draw(t, "n")
		if got, want := power(x, 1/float64(n)), math.Pow(x, 1/float64(n)); got != want {
			t.Fatalf("%g to the power 1/%d: %g, the library says %g", x, n, got, want)
		}
	})
}
