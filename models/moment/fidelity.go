package moment

import "math"

// Fidelity is how finely the current and its fields are resolved.
type Fidelity string

// The fidelities. Standard is converged to about 0.01 dB in gain and axial
// ratio and 1 % in impedance; Draft is for the rough part of a search; Fine
// confirms.
const (
	Draft    Fidelity = "draft"
	Standard Fidelity = "standard"
	Fine     Fidelity = "fine"
)

// settings are the numbers behind a fidelity.
type settings struct {
	degree int // of the splines of the current
	// Elements: at least so many a turn of wire, a wavelength, and a wire.
	turn, wave float64
	least      int
	points     int     // grid points an element
	edge       int     // grid points on the first and last element of a wire
	near       float64 // pairs closer than so many element lengths are corrected
	graded     int     // nodes of graded rules through a logarithm
	smooth     int     // nodes a side where nothing is singular
	apart      int     // nodes a side for near pairs that stand apart
	beyond     int     // elements of a plate's meridian beyond its edge
}

func (f Fidelity) settings() (settings, bool) {
	switch f {
	case Draft:
		return settings{degree: 4, turn: 4.2, wave: 3.8, least: 1, points: 3, edge: 4, near: 1.2, graded: 8, smooth: 4, apart: 4, beyond: 6}, true
	case Standard, "":
		return settings{degree: 4, turn: 5.4, wave: 4.4, least: 1, points: 3, edge: 4, near: 1.2, graded: 10, smooth: 5, apart: 5, beyond: 7}, true
	case Fine:
		return settings{degree: 4, turn: 9, wave: 8, least: 2, points: 4, edge: 5, near: 1.6, graded: 16, smooth: 8, apart: 8, beyond: 12}, true
	}
	return settings{}, false
}

// elements is how many a piece of wire needs that turns so often and is so
// many wavelengths long.
func (s *settings) elements(turns, wavelengths float64) int {
	n := max(s.turn*turns, s.wave*wavelengths)
	return max(s.least, int(math.Ceil(min(n, 1e9)-1e-6)))
}
