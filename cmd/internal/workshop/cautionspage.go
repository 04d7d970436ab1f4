package workshop

import (
	"fmt"

	"turnwise/cmd/internal/workshop/drawing"
)

// cautionsPage holds the cautions, the model's own, and the estimate of
// exposure.
func (s *sheet) cautionsPage() leaf {
	l := newLeaf("before you build or transmit", "")
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Before you build or transmit")
	for _, c := range Cautions {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, body, c) + 1.5
	}
	y -= 4
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "What the figures rest on")
	for _, w := range append([]string{s.Response.Statement}, s.Response.Warnings...) {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, small, sentence(w)) + 1
	}
	y -= 4
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Exposure in the beam")
	if s.power.Watts <= 0 {
		l.Paragraph(drawing.Point{X: left, Y: y}, across, body, "No transmitter power was stated, so nothing is estimated here. State it with --power before anyone transmits with this antenna.")
		return l
	}
	e := estimateExposure(s.Settled, s.power)
	for _, words := range e.words(s.power) {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, body, words) + 1.5
	}
	l.Table(drawing.Point{X: left, Y: y - 2}, e.table())
	return l
}

// table is the estimate against every level.
func (e *exposure) table() *drawing.Table {
	t := &drawing.Table{Size: small, Row: 5.2, Columns: []drawing.Column{
		{Title: "level", Width: 86}, {Title: "S, W/m²", Width: 18, Align: drawing.Right}, {Title: "in the clear", Width: 37, Align: drawing.Right}, {Title: "with reflection", Width: 37, Align: drawing.Right},
	}}
	text := func(metres float64, in bool) string {
		if in {
			return "inside 2L²/λ: does not hold"
		}
		return fmt.Sprintf("%.2f m", metres)
	}
	for _, r := range e.Rows {
		if r.Level.Value == 0 {
			t.Rows = append(t.Rows, []string{r.Level.Source, "–", "not stated here", "not stated here"})
			continue
		}
		t.Rows = append(t.Rows, []string{r.Level.Source, fmt.Sprintf("%.3g", r.Level.Value), text(r.Clear, r.ClearIn), text(r.Reflected, r.ReflectIn)})
	}
	return t
}
