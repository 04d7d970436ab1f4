package models

import (
	"math"
	"math/cmplx"
)

// vacuumPermeability is μ₀, H/m (CODATA 2018).
const vacuumPermeability = 1.25663706212e-6

// SkinDepth is δ = √(2/ωμσ), m.
func (m Material) SkinDepth(hz float64) float64 {
	mu := vacuumPermeability
	if m.Permeability > 0 {
		mu *= m.Permeability
	}
	return math.Sqrt(1 / (math.Pi * hz * mu * m.Conductivity))
}

// RoundWireImpedance is the internal impedance of a round wire of radius a
// (m), ohms a metre: Z' = k_c J₀(k_c a)/(2πaσ J₁(k_c a)), k_c = (1 − j)/δ,
// for e^{+jωt} (Ramo, Whinnery, Van Duzer; any field text). A material
// without conductivity given is perfect: 0.
func (m Material) RoundWireImpedance(a, hz float64) complex128 {
	if m.Conductivity <= 0 || math.IsInf(m.Conductivity, 1) {
		return 0
	}
	k := complex(1, -1) / complex(m.SkinDepth(hz), 0)
	return k * besselRatio(k*complex(a, 0)) / complex(2*math.Pi*a*m.Conductivity, 0)
}

// besselRatio is J₀(z)/J₁(z) for z in the lower half plane, by the continued
// fraction of the recurrence J_{n−1} + J_{n+1} = 2n J_n/z (Abramowitz, Stegun
// 9.1.27 and 9.1.73), from so far up that what lies beyond does not count.
// For large |z| the ratio tends to j there: no overflow on the way.
func besselRatio(z complex128) complex128 {
	n := int(min(cmplx.Abs(z), 4000)) + 60
	if n > 4000 {
		// Hankel's expansion, two terms: J₀/J₁ → j (1 + …), 9.2.5.
		return complex(0, 1) + 1/(2*z) + complex(0, 3)/(8*z*z)
	}
	ratio := complex128(0) // J_n/J_{n+1} inverted: J_{n+1}/J_n
	for ; n >= 1; n-- {
		ratio = 1 / (complex(float64(2*n), 0)/z - ratio)
	}
	return 1 / ratio
}
