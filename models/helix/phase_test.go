package helix

import (
	"math"
	"testing"

	"turnwise/models"
)

func excess(c, s float64) float64 { return 0.052 * math.Exp(6.8*(math.Hypot(c, s)-s-1)) }

func TestExcessPhaseAgainstQuadrature(t *testing.T) {
	for name, d := range windings() {
		want := refer(d)
		for _, hz := range []float64{0.8e9, 1.68e9, 2.4e9, 20e9} {
			k := hz / 299792458.0
			e := want.integral(func(at float64) float64 {
				return excess(2*math.Pi*want.radius(at)*k, want.climb(at)*k)
			}, d.Turns)
			got, err := ExcessPhase(&d, hz)
			if err != nil {
				t.Fatal(err)
			}
			near(t, name+": excess phase", got, e, 1e-8*e)
			near(t, name+": excess phase of the curve", wind(t, d).ExcessPhase(hz), got, 0)
		}
	}
}

// Where √(C² + S²) = S + 1 a turn adds the fit's own constant, 0.052: at a
// wavelength of 0.2 m, S = 0.04 m (0.2 λ) and C = √1.4 λ.
func TestExcessPhaseOfResonantTurns(t *testing.T) {
	d := plain()
	d.Turns = 6.5
	d.Spacing = models.Law{0.04}
	d.Diameter = models.Law{math.Sqrt(1.4) * 0.2 / math.Pi}
	got, err := ExcessPhase(&d, models.LightSpeed/0.2)
	if err != nil {
		t.Fatal(err)
	}
	near(t, "excess phase", got, 6.5*0.052, 1e-14)
}

func TestExcessPhaseOfNoDesign(t *testing.T) {
	d := plain()
	d.Turns = 0
	if _, err := ExcessPhase(&d, 1e9); err == nil {
		t.Error("no error")
	}
}
