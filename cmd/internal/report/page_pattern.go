package report

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/chart"
	"turnwise/models"
	"turnwise/objectives"
)

// patternFloor is the level at the middle of a polar chart, dB.
const patternFloor = -30

// patternCharts are two cuts at right angles and the axial ratio against
// angle, at mid-band.
func (r *Run) patternCharts(s *Sheet) []Chart {
	n := len(s.Pattern)
	if n == 0 {
		return nil
	}
	first, second := &s.Pattern[0], &s.Pattern[n/2]
	rim := math.Max(strongest(first), strongest(second))
	charts := []Chart{r.cutChart(s, first, rim)}
	if n > 1 {
		charts = append(charts, r.cutChart(s, second, rim))
	}
	return append(charts, r.angleChart(s))
}

// strongest is the highest gain of either sense in a cut.
func strongest(c *models.Cut) float64 {
	most := 0.0
	for _, ray := range c.Rays {
		most = math.Max(most, math.Max(ray.Gain.Right, ray.Gain.Left))
	}
	return most
}

func planeDegrees(c *models.Cut) float64 { return c.Plane * 180 / math.Pi }

func (r *Run) cutChart(s *Sheet, c *models.Cut, rim float64) Chart {
	wanted := s.Member.Design.Wanted()
	plane := planeDegrees(c)
	p := &chart.Polar{
		Floor: patternFloor, Rim: fmt.Sprintf("rim: %s dBic, at %s", minus(fmt.Sprintf("%.2f", objectives.Decibels(rim))), frequency(r.Problem.Band.Mid(), r.Problem.Band)),
		Sides: [2]string{fmt.Sprintf("azimuth %.0f°", plane+180), fmt.Sprintf("azimuth %.0f°", plane)},
	}
	for _, sense := range []models.Sense{wanted, -wanted} {
		name := sense.String() + "-hand, wanted"
		if sense != wanted {
			name = sense.String() + "-hand, unwanted"
		}
		cut := chart.Cut{Name: name}
		for _, ray := range c.Rays {
			cut.Angles = append(cut.Angles, ray.Angle*180/math.Pi)
			cut.Level = append(cut.Level, objectives.Decibels(ray.Gain.Of(sense))-objectives.Decibels(rim))
		}
		p.Cuts = append(p.Cuts, cut)
	}
	return Chart{
		Name: fmt.Sprintf("pattern-%03.0f", plane), Title: fmt.Sprintf("Pattern in the plane of azimuth %.0f°", plane), Figure: p,
		Caption:    fmt.Sprintf("Both senses in the plane of azimuth %.0f° (the riser stands at 0°); the axis points up.", plane),
		Indicative: s.Simulation.Response.Indicative,
	}
}

// widestAngle is how far from the axis the axial ratio is shown.
const widestAngle = 45.0

// angleChart is the axial ratio against angle in four planes. Where the field
// turns the other way the line breaks off.
func (r *Run) angleChart(s *Sheet) Chart {
	wanted := s.Member.Design.Wanted()
	limits := r.limitValues(objectives.AxialRatioCone)
	l := &chart.Lines{
		X: chart.Axis{Label: "angle from the axis, °", Min: -widestAngle, Max: widestAngle, Step: 15},
		Y: chart.Axis{Label: "axial ratio, dB", Min: 0, Max: 8},
	}
	n := len(s.Pattern)
	planes := min(4, n)
	for k := range planes {
		c := &s.Pattern[k*n/planes]
		series := chart.Series{Name: fmt.Sprintf("azimuth %.0f°", planeDegrees(c))}
		for _, ray := range c.Rays {
			ratio := ray.AxialRatio
			if ray.Gain.Of(-wanted) > ray.Gain.Of(wanted) {
				ratio = math.NaN()
			}
			series.X, series.Y = append(series.X, ray.Angle*180/math.Pi), append(series.Y, ratio)
		}
		l.Series = append(l.Series, series)
	}
	if len(limits) > 0 {
		cone := r.Problem.Cone * 180 / math.Pi
		l.Band = [2]float64{-cone, cone}
		for _, m := range r.Brief.Spec.Limits {
			if m.Figure == objectives.AxialRatioCone {
				l.Limits = append(l.Limits, chart.Limit{From: -cone, To: cone, Value: m.Value, AtLeast: m.AtLeast, Label: limitMark(m)})
			}
		}
	}
	return Chart{
		Name: "axial-ratio-angle", Title: "Axial ratio against angle", Figure: l, Indicative: s.Simulation.Response.Indicative,
		Caption: fmt.Sprintf("At mid-band, in %s through the axis; a line breaks off where the field turns the other way.", plural(planes, "plane", "planes")),
	}
}
