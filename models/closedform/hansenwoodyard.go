package closedform

import "math"

// HansenWoodyard is the field pattern of an end-fire array of n turns spaced
// s wavelengths under the Hansen–Woodyard condition, 1 on the axis, at theta
// rad from it: sin(90°/N)·sin(Nψ/2)/sin(ψ/2)·cos θ,
// ψ = 360°[S(1 − cos θ) + 1/(2N)]. Signed. Source: Kraus (as above); the
// condition is W. W. Hansen, J. R. Woodyard, Proc. IRE 26, 333, 1938.
func HansenWoodyard(n, s, theta float64) float64 {
	half := math.Pi * (s*(1-math.Cos(theta)) + 1/(2*n))
	num, den := math.Sin(n*half), math.Sin(half)
	if math.Abs(den) < 1e-12 {
		// A grating lobe: the quotient's limit is ±n for whole n.
		return math.Sin(math.Pi/(2*n)) * n * math.Cos(theta)
	}
	return math.Sin(math.Pi/(2*n)) * num / den * math.Cos(theta)
}

// sidelobe is the highest level beyond the pattern's first minimum, dB below
// the axis, not below −60.
func sidelobe(n, s float64) float64 {
	const steps = 720
	last, falling, high := 1.0, true, 0.0
	for i := 1; i <= steps; i++ {
		e := math.Abs(HansenWoodyard(n, s, math.Pi/2*float64(i)/steps))
		if falling && e > last {
			falling = false
		}
		if !falling {
			high = math.Max(high, e)
		}
		last = e
	}
	if high < 1e-3 {
		return -60
	}
	return 20 * math.Log10(high)
}
