package moment

import (
	"testing"

	"turnwise/models"
)

// A wide sweep, whose plates are interpolated between a few that are solved,
// answers as each frequency by itself does.
func TestWideSweepOverAPlate(t *testing.T) {
	for _, g := range []models.Ground{
		{Kind: models.Disc, Diameter: 0.3},
		{Kind: models.Cup, Diameter: 0.3, Rim: 0.1},
	} {
		d := benchDesign(3)
		d.Ground = g
		hz := models.Band{From: 0.9e9, To: 1.1e9, Samples: 41}.Hz()
		wide := simulate(t, Standard, d, models.Axis, hz...)
		for _, i := range []int{7, 20} {
			// The last frequency lays the mesh.
			alone := simulate(t, Standard, d, models.Axis, hz[i], hz[40])
			if what, e := differ(&alone.Samples[0], &wide.Samples[i]); e > 5e-5 {
				t.Errorf("%v at %g GHz: the %s is off by %.2g", g, hz[i]/1e9, what, e)
			}
		}
	}
}
