package report

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/chart"
	"turnwise/models"
	"turnwise/objectives"
)

// GroundWords is what an antenna stands on. Dimensions that are not settled
// yet stay unsaid.
func GroundWords(g models.Ground) string {
	text := "an infinite ground plane"
	switch g.Kind {
	case models.Disc:
		text = "a disc" + across(g)
	case models.Cup:
		text = "a cup" + across(g)
		if g.Rim > 0 {
			text += " with a rim of " + millimetres(g.Rim)
		}
	}
	if g.Finite() {
		text += ", " + SheetWords(g)
	}
	return text
}

func across(g models.Ground) string {
	if g.Diameter > 0 {
		return " " + millimetres(g.Diameter) + " across"
	}
	return ""
}

// SheetWords is what a disc or cup is made of: "1 mm aluminium".
func SheetWords(g models.Ground) string {
	m := g.Metal()
	name := m.Name
	if name == "" {
		name = fmt.Sprintf("metal of %s g/cm³", trimmed(m.Density/1e3, 3))
	}
	return millimetres(g.SheetThickness()) + " " + name
}

// rearChart is front to back against frequency; none where nothing has a
// rear.
func (r *Run) rearChart(s *Sheet) []Chart {
	per, _ := frequencyUnit(r.Problem.Band)
	ratio := s.sweep(func(w sweepRow) number { return w.FrontToBack })
	if low, _ := extent(ratio); math.IsInf(low, 1) {
		return nil
	}
	low, high := extent(ratio, r.limitValues(objectives.FrontToBack))
	l := r.overFrequency(s, chart.Around("front to back, dB", low-0.5, high+0.5))
	s.add(l, per, "front to back", ratio)
	r.limits(l, objectives.FrontToBack)
	return []Chart{{Name: "front-to-back", Title: "Front to back against frequency", Figure: l,
		Caption: "Gain on the axis in the wanted sense over the highest total gain within 30° of the rear axis."}}
}
