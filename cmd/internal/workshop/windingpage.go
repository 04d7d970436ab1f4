package workshop

import (
	"fmt"

	"turnwise/cmd/internal/workshop/drawing"
)

// Rows of a winding table: two blocks a page.
const (
	windingRow    = 4.5
	windingBlock  = 48
	windingBlocks = 2
)

// windingPages is the winding table, as many pages as it takes.
func (s *sheet) windingPages() []leaf {
	rows := s.windingRows()
	var leaves []leaf
	for len(rows) > 0 {
		l := newLeaf("winding table", "")
		y := top
		y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Winding table, from the plate to the open end")
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, small, s.windingWords()) + 2
		for block := range windingBlocks {
			n := min(windingBlock, len(rows))
			if n == 0 {
				break
			}
			l.Table(drawing.Point{X: left + float64(block)*(across/2+0.5), Y: y}, windingTable(rows[:n]))
			rows = rows[n:]
		}
		leaves = append(leaves, l)
	}
	return leaves
}

func (s *sheet) windingWords() string {
	return fmt.Sprintf("Azimuth counts from the riser in the direction of winding (%s seen from the open end). z is the height of the conductor's centre line over the plate, step its rise since the line above, radius and wire are of the centre line, wire from the plate. The steps as printed add up to the length as printed, %s; no z is more than half a last digit from the design.",
		rotation(s.Design.Handedness), s.Resolution.mm(s.Curve.Top()))
}

// windingRows are the table's rows, the plate first.
func (s *sheet) windingRows() [][]string {
	r := s.Resolution
	rows := [][]string{{"plate", "0°", r.shown(0), "", r.mm(s.Curve.Diameter(0) / 2), r.mm(0), ""}}
	for _, m := range stations(s.Curve, r) {
		rows = append(rows, []string{shortest(m.T), degree(m.Azimuth), r.shown(m.Z), r.shown(m.Step), r.mm(m.Radius), r.mm(m.Wire), ""})
	}
	return rows
}

func degree(a float64) string { return fixed(a, decimals(a)) + "°" }

// decimals is one where the angle is no whole degree.
func decimals(a float64) int {
	if a-float64(int(a+0.5)) > 0.05 || float64(int(a+0.5))-a > 0.05 {
		return 1
	}
	return 0
}

func windingTable(rows [][]string) *drawing.Table {
	return &drawing.Table{Size: small, Row: windingRow, Rows: rows, Columns: []drawing.Column{
		{Title: "turn", Width: 11, Align: drawing.Right}, {Title: "azim.", Width: 12, Align: drawing.Right}, {Title: "z", Width: 14, Align: drawing.Right},
		{Title: "step", Width: 11, Align: drawing.Right}, {Title: "radius", Width: 12, Align: drawing.Right}, {Title: "wire", Width: 14.5, Align: drawing.Right},
		{Title: "as built", Width: 15, Align: drawing.Middle},
	}}
}
