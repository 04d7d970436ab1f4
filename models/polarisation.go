package models

import (
	"math"
	"math/cmplx"
)

// AxialRatioCap is the highest axial ratio that is ever reported, dB.
const AxialRatioCap = 60

// linearFrom is the axial ratio from which a field is called linear, dB.
const linearFrom = 30

// AxialRatio gives the axial ratio in dB (0 to [AxialRatioCap]) and the
// sense of a field from its two partial power levels (any common scale):
// AR = (|E_R| + |E_L|) / ||E_R| − |E_L||, IEEE Std 145.
func AxialRatio(c Circular) (db float64, sense Sense) {
	r, l := math.Sqrt(c.Right), math.Sqrt(c.Left)
	sum, diff := r+l, math.Abs(r-l)
	if sum == 0 || diff*1e3 <= sum {
		return AxialRatioCap, 0
	}
	db = 20 * math.Log10(sum/diff)
	switch {
	case db >= linearFrom:
		return db, 0
	case r > l:
		return db, Right
	}
	return db, Left
}

// PortSpread is how far the port impedance moves when the voltage is spread
// evenly over the riser, in per cent of its magnitude: the model's own
// uncertainty about the port.
func PortSpread(s *Sample) float64 {
	return 100 * cmplx.Abs(s.SpreadPort-s.Port) / cmplx.Abs(s.Port)
}
