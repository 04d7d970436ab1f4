package moment

import (
	"context"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"turnwise/models"
)

// family is a space of designs like a built-in brief's: ranges in
// wavelengths at mid-band, frequencies over it.
type family struct {
	name                   string
	turns, diameter        [2]float64
	spacing, radius, riser [2]float64
	diameters, spacings    int
	lead                   bool
	share                  float64 // half the band over mid-band
}

var families = []family{
	{"balloon", [2]float64{3, 14}, [2]float64{0.22, 0.42}, [2]float64{0.14, 0.32}, [2]float64{0.0056, 0.0112}, [2]float64{0.0224, 0.067}, 2, 1, true, 0.012},
	{"gauge", [2]float64{3, 9}, [2]float64{0.25, 0.40}, [2]float64{0.15, 0.30}, [2]float64{0.0043, 0.0087}, [2]float64{0.023, 0.058}, 1, 1, false, 0.0023},
	{"rocket", [2]float64{4, 16}, [2]float64{0.22, 0.44}, [2]float64{0.12, 0.32}, [2]float64{0.0039, 0.0098}, [2]float64{0.0196, 0.0626}, 3, 2, false, 0.0064},
}

// draw is a random design of a family at 1 GHz, with its band.
func (f *family) draw(rng *rand.Rand) (models.Design, []float64) {
	const lambda = models.LightSpeed / 1e9
	in := func(r [2]float64) float64 { return r[0] + (r[1]-r[0])*rng.Float64() }
	law := func(r [2]float64, knots int) (l models.Law) {
		for range knots {
			l = append(l, in(r)*lambda)
		}
		return l
	}
	d := models.Design{
		Turns: math.Round(in(f.turns)*4) / 4, Diameter: law(f.diameter, f.diameters), Spacing: law(f.spacing, f.spacings),
		Handedness: models.Right,
		Conductor:  models.Conductor{Diameter: 2 * in(f.radius) * lambda, Material: models.Material{Conductivity: 58e6, Density: 8890}},
		Feed:       models.Feed{Impedance: 50},
	}
	d.Feed.Height = max(in(f.riser)*lambda, 1.25*d.Conductor.Diameter)
	if f.lead {
		d.Feed.Lead = models.Lead{Turns: 0.25 + rng.Float64(), Spacing: (0.022 + 0.2*rng.Float64()) * lambda}
	}
	return d, models.Band{From: 1e9 * (1 - f.share), To: 1e9 * (1 + f.share), Samples: 3}.Hz()
}

// solveWith answers with any settings.
func solveWith(t testing.TB, set settings, d models.Design, q models.Question) []models.Sample {
	t.Helper()
	s := make([]models.Sample, len(q.Hz))
	if err := newWorker().answer(context.Background(), set, &d, q, s); err != nil {
		t.Fatalf("%+v: %v", d, err)
	}
	return s
}

// reference has more than twice the unknowns of standard, splines of another
// degree, and twice the nodes in every rule.
var reference = settings{degree: 5, turn: 11.5, wave: 10, least: 2, points: 6, edge: 8, near: 2.4, graded: 20, smooth: 10, apart: 10}

// Standard answers over random designs of the built-in spaces, against a
// solution with more than twice the unknowns: where the axial ratio is under
// 6 dB, gain within 0.03 dB, axial ratio within 0.05 dB, impedance within
// 2 %, power balance within 0.3 %.
func TestStandardIsConverged(t *testing.T) {
	count := 200
	if testing.Short() {
		count = 20
	}
	rng := rand.New(rand.NewPCG(7, 7))
	set, _ := Standard.settings()
	var worst [4]float64
	for i := range count {
		f := &families[i%len(families)]
		d, hz := f.draw(rng)
		rough := solveWith(t, set, d, models.Question{Hz: hz, Outputs: models.Balance})
		exact := solveWith(t, reference, d, models.Question{Hz: hz})
		for j := range hz {
			a, b := &rough[j], &exact[j]
			if b.AxialRatio >= 6 {
				continue
			}
			miss := [4]float64{
				math.Abs(10 * math.Log10(a.Gain.Right/b.Gain.Right)),
				math.Abs(a.AxialRatio - b.AxialRatio),
				100 * cmplx.Abs(a.Port-b.Port) / cmplx.Abs(b.Port),
				100 * math.Abs(a.PowerBalance-1),
			}
			for k, most := range [4]float64{0.03, 0.05, 2, 0.3} {
				worst[k] = max(worst[k], miss[k])
				if !(miss[k] <= most) {
					t.Errorf("%s %d at %.4g GHz (%s): misses by %.3g, at most %g is due; turns %g diameter %.3g spacing %.3g radius %.3g riser %.3g lead %+v gain %.2f dB AR %.2f", f.name, i, hz[j]/1e9,
						[4]string{"gain dB", "axial ratio dB", "impedance %", "power balance %"}[k], miss[k], most, d.Turns, d.Diameter, d.Spacing, d.Conductor.Diameter/2, d.Feed.Height, d.Feed.Lead, 10*math.Log10(b.Gain.Right), b.AxialRatio)
				}
			}
		}
	}
	t.Logf("worst over %d designs: gain %.4f dB, axial ratio %.4f dB, impedance %.2f %%, power balance %.3f %%", count, worst[0], worst[1], worst[2], worst[3])
}
