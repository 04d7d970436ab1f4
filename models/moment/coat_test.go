package moment

import (
	"context"
	"math"
	"math/cmplx"
	"testing"

	"turnwise/models"
)

// A thick coat on a short riser changes the port smoothly with the riser's
// height, and alike at every fidelity: a loading that outweighs the kernel on
// short functions would put resonances there that no antenna has.
func TestCoatMakesNoResonances(t *testing.T) {
	d := models.Design{
		Turns: 4, Diameter: models.Law{0.056}, Spacing: models.Law{0.04}, Handedness: models.Right,
		Conductor:  models.Conductor{Diameter: 0.002, Material: models.Material{Conductivity: 58e6, Density: 8890}},
		Insulation: models.Insulation{Thickness: 0.0003, Permittivity: 2.3},
		Feed:       models.Feed{Impedance: 50},
	}
	last := map[Fidelity]complex128{}
	for mm := 3.0; mm <= 9; mm += 0.4 {
		d.Feed.Height = mm / 1e3
		ports := map[Fidelity]complex128{}
		for _, f := range []Fidelity{Draft, Standard, Fine} {
			s, err := New(f)
			if err != nil {
				t.Fatal(err)
			}
			r, err := s.Simulate(context.Background(), d, models.Question{Hz: []float64{1.68e9}})
			if err != nil {
				t.Fatal(err)
			}
			ports[f] = r.Samples[0].Port
			if before := last[f]; before != 0 && cmplx.Abs(ports[f]-before) > 0.06*cmplx.Abs(before) {
				t.Errorf("%s: the port jumps from %.1f Ω to %.1f Ω at a riser of %.1f mm", f, before, ports[f], mm)
			}
			last[f] = ports[f]
		}
		if e := cmplx.Abs(ports[Standard]-ports[Fine]) / cmplx.Abs(ports[Fine]); e > 0.03 {
			t.Errorf("riser %.1f mm: standard %.1f Ω, fine %.1f Ω", mm, ports[Standard], ports[Fine])
		}
	}
}

// Along a charge that does not vary the coat takes off the series loading of
// Richmond and Newman (Radio Science 11, 13, 1976; memory): 2 ln(1 + t/a)
// times the bound part of the charge.
func TestCoatIsTheSeriesLoading(t *testing.T) {
	const a, thick = 1e-3, 4e-4
	g := legendre[24]
	sum := 0.0
	for from := 1e-9; from < 1; from *= 2 { // along one half of a wire of 2 m
		for i, x := range g.x {
			s := from * (1 + (x+1)/2)
			bare, _ := between(s*s, a, a, false)
			coated, _ := between(s*s, a+thick, a+thick, false)
			sum += g.w[i] * from / 2 * (bare - coated)
		}
	}
	if want := 2 * math.Log1p(thick/a); math.Abs(2*sum-want) > 1e-5*want {
		t.Errorf("the coat takes off %.7f, %.7f is due", 2*sum, want)
	}
}
