package moment

import (
	"math"
	"testing"
)

// A cup's answer runs smoothly with its size, mode by mode: a space of
// functions in which charges do not cancel resonates at sizes that have no
// meaning, so narrowly that only fine steps show it. The least true resonance
// of a cup's inside, of mode 1, has kR = 1.84: R = 0.29 λ.
func TestCupsDoNotResonateByThemselves(t *testing.T) {
	set, _ := Draft.settings()
	const k, modes, most = 2 * math.Pi, 6, 1.25
	var last [modes + 1]float64
	for i := range 40 {
		radius := 0.155 + 0.0025*float64(i)
		e, err := set.meridian(Plate{Radius: radius, Rim: 0.34}, k).echo(&set, k, modes)
		if err != nil {
			t.Fatal(err)
		}
		for mode := range e.modes {
			sum := 0.0
			for _, c := range e.modes[mode].current {
				sum += size2(c)
			}
			size := math.Sqrt(sum)
			if step := size / last[mode]; last[mode] > 0 && (step > most || step < 1/most) {
				t.Errorf("mode %d: the currents change by a factor of %.3g up to a radius of %.4f λ", mode, step, radius)
			}
			last[mode] = size
		}
	}
}
