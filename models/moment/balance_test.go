package moment

import (
	"math"
	"testing"

	"turnwise/models"
)

// imbalance is how far radiated and lost power miss the accepted power.
func imbalance(s *Solution) float64 { return math.Abs((s.Radiated()+s.Lost())/s.Accepted() - 1) }

// What the far field carries away, integrated over the hemisphere, and the
// heat in the wire are what the port takes: within 0.3 %, the thick wire's
// share (its kernel's radius is not in the far field).
func TestPowerBalance(t *testing.T) {
	strip := benchDesign(5)
	strip.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.006}
	coat := benchDesign(5)
	coat.Insulation = models.Insulation{Thickness: 5e-4, Permittivity: 2.3}
	poor := benchDesign(5)
	poor.Conductor.Material.Conductivity = 1e4
	thick := benchDesign(5)
	thick.Conductor.Diameter *= 2.4
	for name, d := range map[string]models.Design{
		"short": benchDesign(2), "medium": benchDesign(6), "long": benchDesign(15), "taper": benchTaper(6),
		"strip": strip, "coat": coat, "poor conductor": poor, "thick": thick,
	} {
		for _, f := range []Fidelity{Draft, Standard, Fine} {
			for _, s := range simulate(t, f, d, models.Balance, 0.92e9, 1e9, 1.08e9).Samples {
				if e := math.Abs(s.PowerBalance - 1); e > 0.003 {
					t.Errorf("%s, %s, %.3g GHz: power balance misses by %.2g", name, f, s.Hz/1e9, e)
				}
			}
		}
	}
}

// The balance notices a wrong current: the coefficient at the foot, where
// the current is largest, taken 3 % too large or too small alone.
func TestPowerBalanceNoticesAWrongCurrent(t *testing.T) {
	for _, turns := range []float64{3, 6, 12} {
		solve(t, wound(t, benchDesign(turns), Standard, 1e9), Standard, func(s *Solution) {
			if e := imbalance(s); e > 0.003 {
				t.Fatalf("%g turns: power balance misses by %.2g", turns, e)
			}
			top := 0.0
			for _, c := range s.w.current {
				top = max(top, math.Sqrt(square(c)))
			}
			for _, by := range []float64{0.03, -0.03} {
				wrong := append([]complex128(nil), s.w.solved[:s.Unknowns()]...)
				wrong[0] += wrong[0] * complex(by*top/math.Sqrt(square(wrong[0])), 0)
				carry(s.w, wrong)
				e := imbalance(s)
				t.Logf("%g turns, %+.2f: misses by %.4f", turns, by, e)
				if e < 0.01 {
					t.Errorf("%g turns, the foot's coefficient off by %+.2f of the largest: power balance misses by %.4f only", turns, by, e)
				}
			}
		}, 1e9)
	}
}
