package report

import (
	"math"
	"slices"
	"testing"

	"turnwise/cmd/internal/chart"
	"turnwise/cmd/internal/folder"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/objectives"
)

// platedSheet is a run with one design on a disc, of round numbers: to the
// front the right hand, behind the left hand 20 dB below it.
func platedSheet() (*Run, *Sheet) {
	d := models.Design{
		Turns: 5, Diameter: models.Law{0.056}, Spacing: models.Law{0.042}, Handedness: models.Right,
		Conductor: models.Conductor{Diameter: 2e-3}, Feed: models.Feed{Height: 5e-3, Impedance: 50},
		Ground: models.Ground{Kind: models.Disc, Diameter: 0.16},
	}
	s := Sheet{Member: &folder.Member{ID: "0123456789", Design: d}, Band: [3]int{0, 1, 2}, Laws: [][3]float64{{0, 0.056, 0.042}, {5, 0.056, 0.042}}}
	for p := range 12 {
		c := models.Cut{Plane: float64(p) * math.Pi / 12}
		for a := -180; a <= 180; a++ {
			angle := float64(a) * math.Pi / 180
			front := math.Pow((1+math.Cos(angle))/2, 4)
			r := models.Ray{Angle: angle, Gain: models.Circular{Right: 10 * front, Left: 0.1 * (1 - front)}}
			r.AxialRatio, _ = models.AxialRatio(r.Gain)
			c.Rays = append(c.Rays, r)
		}
		s.Pattern = append(s.Pattern, c)
	}
	sim := &Simulation{Design: d, Model: "full-wave", Response: models.Response{Answered: models.Axis | models.Cuts | models.Balance}}
	for _, hz := range []float64{1.66e9, 1.68e9, 1.70e9} {
		sim.Response.Samples = append(sim.Response.Samples, models.Sample{
			Hz: hz, Port: 50, Input: 50, Gain: models.Circular{Right: 10}, Sense: models.Right, Directivity: 10, Efficiency: 1,
			PeakDirectivity: 10, Beamwidth: 1, Sidelobe: -10, RearGain: 0.1 * hz / 1.68e9, PowerBalance: 1,
		})
	}
	s.Simulation = sim
	spec := objectives.Spec{Band: models.Band{From: 1.66e9, To: 1.70e9, Samples: 3}, Base: d,
		Limits: []objectives.Limit{{Figure: objectives.FrontToBack, AtLeast: true, Value: 12}}}
	r := &Run{Brief: configs.Brief{Spec: spec}, Problem: &objectives.Problem{Spec: spec}}
	return r, &s
}

// A pattern with a rear is drawn all round, both senses; the axial ratio
// against angle stays about the axis.
func TestPatternsAllRound(t *testing.T) {
	r, s := platedSheet()
	charts := r.patternCharts(s)
	if len(charts) != 3 {
		t.Fatalf("%d charts, want two cuts and the axial ratio", len(charts))
	}
	for _, c := range charts[:2] {
		p := c.Figure.(*chart.Polar)
		if len(p.Cuts) != 2 {
			t.Fatalf("%s: %d senses", c.Name, len(p.Cuts))
		}
		wanted, other := p.Cuts[0], p.Cuts[1]
		if n := len(wanted.Angles); n != 361 || wanted.Angles[0] != -180 || wanted.Angles[n-1] != 180 {
			t.Errorf("%s: %d angles from %g to %g", c.Name, n, wanted.Angles[0], wanted.Angles[n-1])
		}
		if wanted.Level[180] != 0 || math.Abs(other.Level[0]+20) > 1e-9 || math.Abs(other.Level[360]+20) > 1e-9 {
			t.Errorf("%s: %g dB in front, %g and %g dB behind", c.Name, wanted.Level[180], other.Level[0], other.Level[360])
		}
		if w, h := p.Size(); h < w*0.9 {
			t.Errorf("%s: %g by %g is no room for a circle", c.Name, w, h)
		}
	}
	x := charts[2].Figure.(*chart.Lines).X
	if x.Min != -45 || x.Max != 45 {
		t.Errorf("axial ratio from %g° to %g°", x.Min, x.Max)
	}
}

func TestRearChart(t *testing.T) {
	r, s := platedSheet()
	charts := r.rearChart(s)
	if len(charts) != 1 {
		t.Fatalf("%d charts of front to back", len(charts))
	}
	l := charts[0].Figure.(*chart.Lines)
	if y := l.Series[0].Y; len(y) != 3 || math.Abs(y[1]-20) > 1e-9 || l.Y.Min > 12 || len(l.Limits) != 1 {
		t.Errorf("front to back %v from %g dB, %d limits", y, l.Y.Min, len(l.Limits))
	}
	names := func() []string {
		var names []string
		for _, c := range r.sheetCharts(s) {
			names = append(names, c.Name)
		}
		return names
	}
	if !slices.Contains(names(), "front-to-back") {
		t.Errorf("charts %v", names())
	}
	for i := range s.Simulation.Response.Samples {
		s.Simulation.Response.Samples[i].RearGain = 0
	}
	if slices.Contains(names(), "front-to-back") {
		t.Errorf("charts without a rear: %v", names())
	}
}
