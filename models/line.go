package models

import (
	"math"
	"math/cmplx"
)

// Input is the impedance at the connector of a port of z ohms at hz, through
// the transformer: Z_in = Z_t (Z + j Z_t tan θ)/(Z_t + j Z tan θ),
// θ = 2πf·length/(velocity·c), the ideal line of any handbook. Without a
// transformer it is z.
func (t Transformer) Input(z complex128, hz float64) complex128 {
	if t.Impedance <= 0 {
		return z
	}
	velocity := t.Velocity
	if velocity == 0 {
		velocity = 1
	}
	// Written with sine and cosine, so that a quarter wave is no pole.
	sin, cos := math.Sincos(2 * math.Pi * hz * t.Length / (velocity * LightSpeed))
	zt := complex(t.Impedance, 0)
	s, c := complex(0, sin), complex(cos, 0)
	return zt * (z*c + zt*s) / (zt*c + z*s)
}

// VSWRCap is the highest VSWR that is ever reported.
const VSWRCap = 1000

// Reflection is the reflection coefficient of z against a resistance, ohms.
func Reflection(z complex128, reference float64) complex128 {
	r := complex(reference, 0)
	return (z - r) / (z + r)
}

// VSWR is the voltage standing wave ratio of z against a resistance, ohms:
// (1 + |Γ|)/(1 − |Γ|), not above [VSWRCap]. An impedance that gives power
// back counts as the cap.
func VSWR(z complex128, reference float64) float64 {
	return VSWROf(cmplx.Abs(Reflection(z, reference)))
}

// VSWROf is the voltage standing wave ratio of a reflection coefficient's
// magnitude, not above [VSWRCap].
func VSWROf(reflection float64) float64 {
	if !(reflection < 1) {
		return VSWRCap
	}
	return math.Min((1+reflection)/(1-reflection), VSWRCap)
}

// MatchSection is the one line section that turns z into r0 (ohms) exactly:
// its impedance (ohms) and electrical length (radians, 0 to π). ok is false
// where no single section does. From equating both parts of the line
// equation: Z_t = √(R₀(R² + X² − R R₀)/(R − R₀)), tan θ = −Z_t (R − R₀)/(R₀ X);
// for a real load √(R R₀), a quarter wave.
func MatchSection(r0 float64, z complex128) (impedance, theta float64, ok bool) {
	r, x := real(z), imag(z)
	if x == 0 {
		return math.Sqrt(r * r0), math.Pi / 2, r > 0 && r0 > 0
	}
	square := r0 * (r*r + x*x - r*r0) / (r - r0)
	if !(square > 0) || math.IsInf(square, 0) {
		return 0, 0, false
	}
	impedance = math.Sqrt(square)
	theta = math.Atan(-impedance * (r - r0) / (r0 * x))
	if theta < 0 {
		theta += math.Pi
	}
	return impedance, theta, true
}

// WireOverPlane is the characteristic impedance, ohms, of a round wire of
// radius a (m) whose axis runs h (m) above a plane: 60 acosh(h/a), any
// handbook; 0 where they touch.
func WireOverPlane(a, h float64) float64 {
	if h <= a {
		return 0
	}
	return 60 * math.Acosh(h/a)
}

// WireRadiusOverPlane is the equivalent radius, m, of a round wire of radius
// a (m) whose axis runs h (m) above a plane: 2a/(1 + √(1 − a²/h²)), whose line
// over the plane has by ln(2h/a_eq) what [WireOverPlane] has by acosh(h/a).
func WireRadiusOverPlane(a, h float64) float64 {
	return 2 * a / (1 + math.Sqrt(max(0, 1-a*a/(h*h))))
}

// StripOverPlane is the characteristic impedance, ohms, of a thin strip of a
// width whose middle runs h (m) above a plane: the air microstrip of
// Hammerstad, 1975 (memory).
func StripOverPlane(width, h float64) float64 {
	if width <= h {
		return 60 * math.Log(8*h/width+width/(4*h))
	}
	u := width / h
	return 120 * math.Pi / (u + 1.393 + 0.667*math.Log(u+1.444))
}

// StripRadiusOverPlane is the equivalent radius, m, of that strip,
// 2h·exp(−Z/60 Ω), which tends to a quarter of the width far from the plane.
func StripRadiusOverPlane(width, h float64) float64 {
	return 2 * h * math.Exp(-StripOverPlane(width, h)/60)
}
