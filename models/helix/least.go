package helix

import "math"

// probes is how finely lowest looks before it closes in.
const probes = 8

// lowest is the least value of f between a and b, both included: evenly
// spread probes, then close about every probe that none beside it undercuts.
// Close is given the probes on both sides and the probe itself.
func lowest(a, b float64, f func(float64) float64, settle func(lo, x, hi float64) float64) float64 {
	var x, y [probes + 1]float64
	for i := range x {
		x[i] = a + (b-a)*float64(i)/probes
		y[i] = f(x[i])
	}
	best := math.Inf(1)
	for i, v := range y {
		left, right := max(i-1, 0), min(i+1, probes)
		if left < i && y[left] <= v || y[right] < v {
			continue
		}
		best = min(best, v, settle(x[left], x[i], x[right]))
	}
	return best
}

// golden is the least value of f between a and b, closing in by golden
// sections.
func golden(a, b float64, f func(float64) float64) float64 {
	return lowest(a, b, f, func(lo, _, hi float64) float64 { return section(lo, hi, f) })
}

// section is the least value of f between lo and hi, where it falls and then
// rises.
func section(lo, hi float64, f func(float64) float64) float64 {
	const ratio = 0.6180339887498949
	u, v := hi-ratio*(hi-lo), lo+ratio*(hi-lo)
	fu, fv := f(u), f(v)
	// The value is stationary: a bracket 1e-4 of a step wide holds it to 1e-8.
	for range 18 {
		if fu < fv {
			hi, v, fv = v, u, fu
			u = hi - ratio*(hi-lo)
			fu = f(u)
		} else {
			lo, u, fu = u, v, fv
			v = lo + ratio*(hi-lo)
			fv = f(v)
		}
	}
	return min(fu, fv)
}
