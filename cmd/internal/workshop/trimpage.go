package workshop

import (
	"fmt"
	"math"
	"math/cmplx"

	"turnwise/cmd/internal/workshop/drawing"
)

// trimPage is the table a fitter trims by.
func (s *sheet) trimPage() leaf {
	l := newLeaf("test page: how to trim", "")
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Marker here: move this, that way, so far")
	words := fmt.Sprintf("Set the analyser's marker to mid-band, %s MHz, and find its place on the Smith chart. Should be: %s, VSWR %s at %s. Where it is elsewhere, take the nearest line below, move half of what it says, look again, then the rest. The VSWR expected after is at mid-band, two moves taken as their sum; check the whole band before soldering.",
		megahertz(s.trim.Hz), ohms(s.trim.impedance(s.trim.Reflection)), fixed(vswrOf(s.trim.Reflection), 2), degree(phase(s.trim.Reflection)))
	y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, body, words) + 3
	t := s.trimTable()
	l.Table(drawing.Point{X: left, Y: y}, t)
	y -= t.Height() + 4
	y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, small, "Angle is the reflection's, anticlockwise from the open-circuit side of the chart. Switch the transmitter off and lock it before touching the winding.") + 4
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "As measured")
	l.Table(drawing.Point{X: left, Y: y - 2}, s.measuredTable())
	return l
}

// phase is a reflection's angle, 0 to 360 degrees.
func phase(g complex128) float64 {
	return math.Mod(cmplx.Phase(g)*180/math.Pi+360, 360)
}

func ohms(z complex128) string { return fmt.Sprintf("%.0f %+.0fj Ω", real(z), imag(z)) }

// trimTable goes round the chart at two VSWRs.
func (s *sheet) trimTable() *drawing.Table {
	t := &drawing.Table{Size: small, Row: 5, Columns: []drawing.Column{
		{Title: "VSWR", Width: 13, Align: drawing.Right}, {Title: "angle", Width: 13, Align: drawing.Right}, {Title: "about", Width: 27, Align: drawing.Right},
		{Title: "move", Width: 52}, {Title: "then", Width: 52}, {Title: "VSWR after", Width: 21, Align: drawing.Right},
	}}
	for _, vswr := range []float64{2, 3} {
		for i := range 8 {
			angle := 45 * float64(i)
			marker := cmplx.Rect((vswr-1)/(vswr+1), angle*math.Pi/180)
			a := s.trim.adjust(marker)
			t.Rows = append(t.Rows, []string{fixed(vswr, 1), degree(angle), ohms(s.trim.impedance(marker)), s.moveWords(a.First, a.FirstBy), s.moveWords(a.Second, a.SecondBy), fixed(a.VSWR, 2)})
		}
	}
	return t
}

// moveWords say what to move, which way and how far.
func (s *sheet) moveWords(i int, by float64) string {
	if i < 0 {
		return "–"
	}
	m := &s.trim.Moves[i]
	way := m.More
	if by < 0 {
		way = m.Less
	}
	return fmt.Sprintf("%s: %s %s mm", m.Name, way, shortest(math.Round(math.Abs(by)*1e5)/1e2))
}

// measuredTable is for the fitter to fill in.
func (s *sheet) measuredTable() *drawing.Table {
	return &drawing.Table{Size: small, Row: 6.5, Columns: []drawing.Column{
		{Title: "step", Width: 13}, {Title: "what was moved", Width: 60}, {Title: "marker, Ω", Width: 35}, {Title: "VSWR mid-band", Width: 30}, {Title: "highest in band", Width: 40},
	}, Rows: [][]string{{"before"}, {"1"}, {"2"}, {"3"}, {"last"}}}
}
