package tolerance

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// TestWilson holds the interval to printed ones (Newcombe, Stat. Med. 17, 857,
// 1998, table I, method 3).
func TestWilson(t *testing.T) {
	for _, c := range []struct {
		k, n      int
		low, high float64
	}{{81, 263, 0.2553, 0.3662}, {15, 148, 0.0624, 0.1605}, {0, 20, 0, 0.1611}, {1, 29, 0.0061, 0.1718}, {0, 0, 0, 1}} {
		low, high := Wilson(c.k, c.n)
		if math.Abs(low-c.low) > 5e-5 || math.Abs(high-c.high) > 5e-5 {
			t.Errorf("%d of %d: %.4f to %.4f, want %.4f to %.4f", c.k, c.n, low, high, c.low, c.high)
		}
	}
}

// TestWilsonAnotherWay: at its ends the normal test just rejects.
func TestWilsonAnotherWay(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 5000).Draw(t, "n")
		k := rapid.IntRange(0, n).Draw(t, "k")
		low, high := Wilson(k, n)
		share := float64(k) / float64(n)
		if low < 0 || high > 1 || low > share || high < share {
			t.Fatalf("%d of %d: %g to %g", k, n, low, high)
		}
		for _, p := range []float64{low, high} {
			if p == share {
				continue // nothing lies beyond
			}
			if z := math.Abs(p-share) / math.Sqrt(p*(1-p)/float64(n)); math.Abs(z-1.959964) > 1e-6 {
				t.Fatalf("%d of %d: at %g the deviate is %g", k, n, p, z)
			}
		}
		mirrored, _ := Wilson(n-k, n)
		if math.Abs(mirrored-(1-high)) > 1e-12 {
			t.Fatalf("%d of %d: %g, mirrored %g", k, n, high, mirrored)
		}
	})
}

// TestYieldOf: copies without an answer widen the interval either way and
// leave the share alone; nothing is certain but copies that are all the same.
func TestYieldOf(t *testing.T) {
	sound, torn := yieldOf(90, 100, 0, false), yieldOf(90, 100, 10, false)
	if sound.Share != 0.9 || torn.Share != 0.9 || torn.Low >= sound.Low || torn.High <= sound.High {
		t.Errorf("%+v, with failures %+v", sound, torn)
	}
	low, _ := Wilson(90, 110)
	_, high := Wilson(100, 110)
	if torn.Low != low || torn.High != high {
		t.Errorf("%+v, want %g to %g", torn, low, high)
	}
	if y := yieldOf(7, 7, 0, true); y != (Yield{1, 1, 1}) {
		t.Errorf("all the same: %+v", y)
	}
	if y := yieldOf(0, 0, 5, false); !math.IsNaN(y.Share) || y.Low != 0 || y.High != 1 {
		t.Errorf("none answered: %+v", y)
	}
}

func TestPercentile(t *testing.T) {
	nan := math.NaN()
	for _, c := range []struct {
		values []float64
		share  float64
		want   float64
	}{
		{[]float64{3, 1, 2}, 0.5, 2}, {[]float64{1, 2}, 0.5, 1.5}, {[]float64{4}, 0.95, 4}, {[]float64{1, 2, 3, 4, 5}, 0.05, 1.2},
		{[]float64{1, 2, 3, 4, 5}, 1, 5}, {[]float64{1, 2, 3, 4, 5}, 0, 1}, {[]float64{nan, 3, nan}, 0.5, 3},
	} {
		if got := Percentile(c.values, c.share); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("%v at %g: %g, want %g", c.values, c.share, got, c.want)
		}
	}
	if !math.IsNaN(Percentile(nil, 0.5)) {
		t.Error("nothing has a percentile")
	}
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.SliceOfN(rapid.Float64Range(-1e6, 1e6), 1, 40).Draw(t, "values")
		a, b := rapid.Float64Range(0, 1).Draw(t, "a"), rapid.Float64Range(0, 1).Draw(t, "b")
		x, y := Percentile(v, min(a, b)), Percentile(v, max(a, b))
		if x > y || x < slices.Min(v) || y > slices.Max(v) {
			t.Fatalf("%g at %g, %g at %g", x, min(a, b), y, max(a, b))
		}
	})
}
