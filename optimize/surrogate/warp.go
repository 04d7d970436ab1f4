package surrogate

import (
	"math"
	"slices"
)

// warp is a monotone scale on which a figure is learned: the middle half of
// the values spans a unit, and far above it grows like a logarithm, so that
// the worst of the known do not bend the surface where it matters.
type warp struct {
	middle, width float64
	both          bool // far below as well, where it is not known which end is bad
}

// warpFrom is where the logarithm begins, and warpTo the most that it is
// undone for: what lies beyond is bad enough.
const (
	warpFrom = 3.0
	warpTo   = 50.0
)

// newWarp is the scale for some values.
func newWarp(values []float64) warp {
	v := slices.Clone(values)
	slices.Sort(v)
	n := len(v)
	w := warp{middle: v[n/2], width: v[(3*n)/4] - v[n/4]}
	if !(w.width > 0) {
		w.width = v[n-1] - v[0]
	}
	if !(w.width > 0) {
		w.width = 1
	}
	return w
}

func (w warp) to(x float64) float64 {
	z := (x - w.middle) / w.width
	if z > warpFrom {
		return warpFrom + math.Log1p(z-warpFrom)
	}
	if w.both && z < -warpFrom {
		return -warpFrom - math.Log1p(-warpFrom-z)
	}
	return z
}

func (w warp) from(z float64) float64 {
	if z > warpFrom {
		z = warpFrom + math.Expm1(min(z-warpFrom, warpTo))
	}
	if w.both && z < -warpFrom {
		z = -warpFrom - math.Expm1(min(-warpFrom-z, warpTo))
	}
	return w.middle + z*w.width
}
