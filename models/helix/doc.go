// Package helix turns a design into a smooth curve: the centre line of the
// wire, exactly as the laws of the design describe it, with its arc length,
// its overall geometry and the clearances that thin wire needs.
//
// The winding parameter t counts turns from the start of the winding,
// 0 ≤ t ≤ Turns. At t the azimuth is ±2πt (plus for a right hand), the radius
// half the diameter law and the height
//
//	z(t) = feed height + ∫₀ᵗ s dτ,
//
// where s is the spacing law, its start hidden by a lead. Diameter and height
// are polynomials between [Curve.Breaks], so nothing of the curve is
// approximated but its arc length, which is good to 1e-11.
package helix
