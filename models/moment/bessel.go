package moment

import "math"

// besselModes fills b with jᵐJ_m(x) for m from 0 up, by downward recurrence
// (Miller): J_{m−1} = (2m/x)J_m − J_{m+1}, scaled by
//
//	e^{jx} = J₀ + 2 Σ jᵐJ_m  or its like for −x,
//
// whichever is the larger, so that nothing cancels.
func besselModes(x complex128, b []complex128) {
	clear(b)
	size := math.Sqrt(size2(x))
	if size < 1e-8 {
		b[0] = 1
		if len(b) > 1 {
			b[1] = complex(0, 0.5) * x
		}
		return
	}
	top := max(len(b), int(size)) + 12 + int(4*math.Cbrt(size))
	// B = jᵐJ_m comes down by B_{m−1} = (2m/jx)B_m + B_{m+1}.
	next, at, sum := complex(0, 0), complex(1e-280, 0), complex(0, 0)
	sign := 1.0
	if imag(x) > 0 {
		sign = -1 // e^{−jx} = J₀ + 2 Σ (−j)ᵐJ_m
	}
	over := 1 / (complex(0, 1) * x)
	for m := top; m > 0; m-- {
		if m < len(b) {
			b[m] = at
		}
		s := 2.0
		if sign < 0 && m%2 == 1 {
			s = -2
		}
		sum += complex(s, 0) * at
		next, at = at, complex(float64(2*m), 0)*over*at+next
		if size2(at) > 1e200 {
			const down = 1e-150
			next, at, sum = next*down, at*down, sum*down
			for i := m; i < len(b); i++ {
				b[i] *= down
			}
		}
	}
	b[0] = at
	sum += at
	re, im := wavelet(-sign, real(x), imag(x)) // e^{±jx}
	scale := complex(re, im) / sum
	for m := range b {
		b[m] *= scale
	}
}
