package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
)

// cupPage is a cup's flat pattern: the disc of its base and the strip of its
// rim, to one scale.
func (s *sheet) cupPage() leaf {
	g, f, r := s.Design.Ground, s.flatRim(), s.Resolution
	name, k := fitScale(1e3*f.length, 1e3*math.Max(g.Diameter, f.width), across-10, 80)
	l := newLeaf("ground cup, flat pattern", name)
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Base and rim, flat, scale "+name)
	for _, view := range []*drawing.Drawing{s.baseView(k), s.rimView(k)} {
		b := view.Bounds()
		l.Place(view, left+(across-b.Width())/2-b.Min.X, y-4-b.Max.Y)
		y -= b.Height() + 10
	}
	t := &drawing.Table{Size: small, Row: 5, Columns: []drawing.Column{{Title: "cup", Width: 70}, {Title: "mm", Width: 25, Align: drawing.Right}, {Title: "as built", Width: 30}}, Rows: [][]string{
		{"sheet", bought(g.SheetThickness())}, {"base: Ø", r.mm(g.Diameter)},
		{"rim: length, π · (Ø + sheet), without overlap", r.mm(f.length)}, {"rim: width, sheet and height over the base", r.mm(f.width)},
		{"height over the base, finished", r.mm(g.Rim)}, {"inner Ø, finished", r.mm(g.Diameter)},
	}}
	l.Table(drawing.Point{X: left, Y: y}, t)
	y -= t.Height() + 3
	for _, words := range []string{
		fmt.Sprintf("Of %s. The strip goes round the edge of the base, flush with its underside: the inner face then has the design's diameter. Its length is along its middle; add what the seam overlaps, on the outside.", s.sheetName()),
		"Solder, weld or rivet base and rim together all along: no gap longer than a hundredth of a wavelength (" + fixed(10*s.wavelength(), 1) + " mm; practice). Holes are those of the drilling plan.",
	} {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, body, words) + 1
	}
	return l
}

// baseView is the disc of a cup's base.
func (s *sheet) baseView(k float64) *drawing.Drawing {
	d := new(drawing.Drawing)
	radius := 500 * s.Design.Ground.Diameter * k
	d.Circle(drawing.Outline, drawing.Point{}, radius)
	d.Cross(drawing.Axis, drawing.Point{}, radius+3)
	d.Measure(drawing.Point{X: -radius}, drawing.Point{X: radius}, 0, -radius-9, "Ø "+s.Resolution.mm(s.Design.Ground.Diameter))
	return d
}

// rimView is the strip of a cup's rim.
func (s *sheet) rimView(k float64) *drawing.Drawing {
	f := s.flatRim()
	d := new(drawing.Drawing)
	length, width := 1e3*f.length*k, 1e3*f.width*k
	d.Rectangle(drawing.Outline, drawing.Point{}, length, width)
	d.Measure(drawing.Point{}, drawing.Point{X: length}, 0, -6, s.Resolution.mm(f.length))
	d.Measure(drawing.Point{X: length}, drawing.Point{X: length, Y: width}, 90, -6, s.Resolution.mm(f.width))
	return d
}
