package closedform

import (
	"math"

	"turnwise/models"
	"turnwise/models/helix"
)

// The formulas of Kraus: J. D. Kraus, Antennas, 2nd ed., McGraw-Hill 1988,
// chapter 7 (memory). Circumference c and spacing s in wavelengths, n turns.
// Range: pitch angle 12° to 14°, 0.8 < c < 1.15, n > 3, ground at least
// 0.75 wavelengths across.

// Kraus1949 is the directivity of 1949, 15 C²NS, a power ratio. Measured and
// full-wave results lie 1 to 5 dB below it.
func Kraus1949(n, c, s float64) float64 { return 15 * c * c * n * s }

// Kraus1949Length is the length, m, at which [Kraus1949] promises a power
// ratio to a winding of the curve's mean circumference at hz.
func Kraus1949Length(curve *helix.Curve, hz, ratio float64) float64 {
	wavelength := models.LightSpeed / hz
	c := math.Pi * meanDiameter(curve) / wavelength
	return ratio / (15 * c * c) * wavelength
}

// KrausLate is his later, more realistic directivity, 12 C²NS.
func KrausLate(n, c, s float64) float64 { return 12 * c * c * n * s }

// KrausBeamwidth is the half-power beamwidth 52°/(C√(NS)), rad.
func KrausBeamwidth(n, c, s float64) float64 {
	return 52 / (c * math.Sqrt(n*s)) * math.Pi / 180
}

// KrausFirstNulls is the beamwidth between first nulls 115°/(C√(NS)), rad.
func KrausFirstNulls(n, c, s float64) float64 {
	return 115 / (c * math.Sqrt(n*s)) * math.Pi / 180
}

// KrausAxialRatio is (2N+1)/(2N) on the axis, a ratio of amplitudes.
func KrausAxialRatio(n float64) float64 { return (2*n + 1) / (2 * n) }

// AxialFeedResistance is the terminal resistance 140 C, Ω, within 20 %, of a
// winding fed on its axis.
func AxialFeedResistance(c float64) float64 { return 140 * c }

// PeripheralFeedResistance is the terminal resistance 150/√C, Ω, within
// 10 %, of a winding fed at its periphery.
func PeripheralFeedResistance(c float64) float64 { return 150 / math.Sqrt(c) }

// krausRange says how a uniform winding leaves the range of the formulas.
func krausRange(n, c, pitchDeg float64) []string {
	var out []string
	if !(c > 0.8 && c < 1.15) {
		out = append(out, warn("circumference %.3g wavelengths: the hand formulas hold for 0.8 to 1.15", c))
	}
	if !(pitchDeg > 12 && pitchDeg < 14) {
		out = append(out, warn("pitch angle %.3g°: the hand formulas hold for 12° to 14°", pitchDeg))
	}
	if !(n > 3) {
		out = append(out, warn("%.4g turns: the hand formulas hold above 3", n))
	}
	return out
}
