package closedform

import "math"

// The measured fits of King & Wong: H. E. King, J. L. Wong, IEEE Trans.
// AP-28, 291–296, 1980 (memory). Taken over a cup; circumference c and
// spacing s in wavelengths, pitch angle in rad, n turns.

// referencePitch is the pitch angle the fits are scaled to, 12.5°.
const referencePitch = 12.5 * math.Pi / 180

// KingWongPeak is the gain at the frequency where it peaks, a power ratio:
// 8.3 C^(√(N+2)−1) (NS)^0.8 (tan 12.5°/tan α)^(√N/2), c being the
// circumference there.
func KingWongPeak(n, c, s, pitch float64) float64 {
	return 8.3 * math.Pow(c, math.Sqrt(n+2)-1) * math.Pow(n*s, 0.8) * math.Pow(math.Tan(referencePitch)/math.Tan(pitch), math.Sqrt(n)/2)
}

// KingWongBeamwidth is the half-power beamwidth, rad:
// 61.5° (2N/(N+5))^0.6 / (C^(√N/4) (NS)^0.7) · (tan α/tan 12.5°)^(√N/4).
func KingWongBeamwidth(n, c, s, pitch float64) float64 {
	deg := 61.5 * math.Pow(2*n/(n+5), 0.6) / (math.Pow(c, math.Sqrt(n)/4) * math.Pow(n*s, 0.7))
	return deg * math.Pow(math.Tan(pitch)/math.Tan(referencePitch), math.Sqrt(n)/4) * math.Pi / 180
}

// KingWongBandwidth is f_high/f_low of the band whose gain is at least share
// of the peak's (a power ratio, at most 0.91): 1.07 (0.91/share)^(4/(3√N)).
func KingWongBandwidth(n, share float64) float64 {
	return 1.07 * math.Pow(0.91/share, 4/(3*math.Sqrt(n)))
}

// peakCircumference is the circumference at which gain peaks, a line of ours
// through the published ends, 1.155 for 5 turns and 1.07 for 35.
func peakCircumference(n float64) float64 { return 1.155 * math.Pow(n/5, -0.0393) }

// offPeak is the share of the peak gain at u times the peak's circumference:
// the published slopes, f^√N below and f^(−3√N) above, from the 0.91 points
// on, and between these a bell that meets them.
func offPeak(n, u float64) float64 {
	root := math.Sqrt(n)
	switch {
	case u <= 1/1.04:
		return 0.91 * math.Pow(1.04*u, root)
	case u >= 1.03:
		return 0.91 * math.Pow(u/1.03, -3*root)
	}
	edge := 1.03
	if u < 1 {
		edge = 1 / 1.04
	}
	t := math.Log(u) / math.Log(edge)
	return math.Pow(0.91, t*t)
}
