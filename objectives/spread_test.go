package objectives

import (
	"math"
	"testing"

	"turnwise/models"
)

// At a percentile a figure is what so many of the windings reach, between
// the nominal and the worst; the windings stay inside the margins.
func TestMarginsAtAPercentile(t *testing.T) {
	rows := make([]Row, 20)
	for i := range rows {
		rows[i] = emptyRow()
		rows[i][Gain], rows[i][VSWR] = float64(i), float64(i)
	}
	if r := atPercentile(rows, 95); r[Gain] != 1 || r[VSWR] != 18 || !math.IsNaN(r[AxialRatio]) {
		t.Errorf("of 20 the 95th: gain %g, VSWR %g, axial ratio %g; 1, 18 and none are due", r[Gain], r[VSWR], r[AxialRatio])
	}
	if r := atPercentile(rows, 100); r[Gain] != 0 || r[VSWR] != 19 {
		t.Errorf("the worst: gain %g, VSWR %g; 0 and 19 are due", r[Gain], r[VSWR])
	}
	p := Problem{}
	p.Margins = Margins{Diameter: 1e-3, FeedHeight: 5e-4, Percentile: 90}
	p.Base.Diameter, p.Base.Spacing, p.Base.Feed.Height = models.Law{0.05}, models.Law{0.03}, 0.005
	if n := p.Windings(); n != percentileWindings+1 {
		t.Errorf("%d windings, %d are due", n, percentileWindings+1)
	}
	var mean float64
	for _, d := range p.spread(p.Base) {
		if math.Abs(d.Diameter[0]-0.05) > 1e-3 || math.Abs(d.Feed.Height-0.005) > 5e-4 || d.Spacing[0] != 0.03 {
			t.Errorf("%v %v %v lies outside the margins", d.Diameter, d.Spacing, d.Feed.Height)
		}
		mean += (d.Diameter[0] - 0.05) / percentileWindings
	}
	if math.Abs(mean) > 1e-4 {
		t.Errorf("the diameters lie %g m off their middle", mean)
	}
}
