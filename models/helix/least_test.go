package helix

import (
	"math"
	"testing"
)

func TestGoldenFindsTheLowerOfTwoDips(t *testing.T) {
	for _, x := range []struct {
		name string
		f    func(float64) float64
		a, b float64
		want float64
	}{
		{"parabola", func(x float64) float64 { return (x - 0.3) * (x - 0.3) }, 0, 1, 0},
		{"falling", func(x float64) float64 { return -x }, 0, 1, -1},
		{"rising", func(x float64) float64 { return x }, 0, 1, 0},
		{"level", func(float64) float64 { return 7 }, -1, 1, 7},
		{"no width", func(x float64) float64 { return x }, 2, 2, 2},
		// The probe nearest to a dip lies the lower at the shallow one.
		{"a dip between probes", func(x float64) float64 {
			return min(4*math.Abs(x-5.0/16), 0.05+math.Abs(x-0.75))
		}, 0, 1, 0},
	} {
		near(t, x.name, golden(x.a, x.b, x.f), x.want, 1e-4)
	}
}

func TestNewtonStaysInItsBracket(t *testing.T) {
	// Curved the wrong way almost everywhere: bisection has to help.
	f := func(x float64) (float64, float64, float64) { return -math.Cos(x), math.Sin(x), math.Cos(x) }
	near(t, "least of −cos", newton(-3, 2.9, 3, f), -1, 1e-12)
	near(t, "least at an end", newton(0.5, 1, 1.5, f), -math.Cos(0.5), 1e-6)
}
