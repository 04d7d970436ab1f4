package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
)

// hole is what is drilled in the ground plate, mm from its centre.
type hole struct {
	At       drawing.Point
	Diameter float64
	For      string
}

// Fixing holes of a former: suggested, on a circle of this share of its
// radius, for screws of 3 mm; none where the former is too small for them.
const (
	fixingShare    = 0.7
	fixingHole     = 3.2
	leastFixingRim = 12.0
)

// holes are the plate's: the feed's opening on the riser's axis, and the
// former's fixing.
func (s *sheet) holes() []hole {
	out := []hole{{
		At: drawing.Point{X: 500 * s.Curve.Diameter(0)}, Diameter: models.Opening * 1e3 * s.Design.PinDiameter(),
		For: "coaxial opening, the riser in its middle",
	}}
	if s.former.combs {
		return out
	}
	if r := s.former.surface(0); r >= leastFixingRim {
		for i := range 4 {
			out = append(out, hole{At: drawing.Point{}.Toward(45+90*float64(i), fixingShare*r), Diameter: fixingHole, For: "suggested: screw into the former, heads flush below"})
		}
	}
	return out
}

// platePage is the ground's drilling plan.
func (s *sheet) platePage() leaf { return fitted(84, s.plate) }

// plate is the page with so much room for the holes' view, and where its
// words end.
func (s *sheet) plate(room float64) (leaf, float64) {
	holes := s.holes()
	view, name, whole := s.plateView(holes, room)
	l := newLeaf("ground plate, drilling plan", name)
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Ground plate, seen from the winding, scale "+name)
	b := view.Bounds()
	l.Place(view, left+(across-b.Width())/2-b.Min.X, y-4-b.Max.Y)
	y -= b.Height() + 8
	if s.Design.Ground.Finite() && !whole {
		y -= s.placeEdge(l, y)
	}
	t := &drawing.Table{Size: small, Row: 5, Columns: []drawing.Column{
		{Title: "hole", Width: 12, Align: drawing.Middle}, {Title: "x", Width: 18, Align: drawing.Right}, {Title: "y", Width: 18, Align: drawing.Right},
		{Title: "Ø", Width: 16, Align: drawing.Right}, {Title: "for", Width: 82}, {Title: "as built", Width: 24},
	}}
	for i, h := range holes {
		t.Rows = append(t.Rows, []string{letters(i), s.Resolution.mm(h.At.X / 1e3), s.Resolution.mm(h.At.Y / 1e3), s.Resolution.mm(h.Diameter / 1e3), h.For})
	}
	l.Table(drawing.Point{X: left, Y: y}, t)
	y -= t.Height() + 3
	for _, words := range s.plateWords() {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, body, words) + 1
	}
	return l, y
}

func (s *sheet) plateWords() []string {
	out := []string{"x and y are from the winding's axis; the riser stands on +x. Scribe both axes: the template's 0° line and the riser meet on +x."}
	if s.Design.Ground.Finite() {
		out = append(out, "Centre the winding on it: "+s.groundWords()+", of "+s.sheetName()+". Its size decides gain and pattern as the winding's does: cut it as drawn.")
	} else {
		out = append(out, fmt.Sprintf("The design assumes an infinite plane. Make the plate at least %.0f across, 0.75 wavelengths at mid-band (practice); a smaller one costs gain, and any real one moves it by a decibel or two.", math.Ceil(750*s.wavelength())))
	}
	return append(out,
		fmt.Sprintf("The opening is %s times the riser's diameter, an air line of 50 Ω, as the calculation has it. A connector with another dielectric keeps its own diameters. Take its fixing holes from the connector itself.", shortest(models.Opening)),
		"The plate conducts over its whole upper face: bare metal under the connector's flange, no paint.")
}

// placeEdge puts a small view of the whole plate on the page, y downwards, and
// gives the height it takes.
func (s *sheet) placeEdge(l leaf, y float64) float64 {
	edge := 500 * s.Design.Ground.Diameter
	name, k := fitScale(2*edge, 2*edge, across, 40)
	d := new(drawing.Drawing)
	d.Circle(drawing.Outline, drawing.Point{}, edge*k)
	d.Cross(drawing.Axis, drawing.Point{}, edge*k+3)
	d.Circle(drawing.Axis, drawing.Point{}, 500*s.Curve.Diameter(0)*k)
	d.Disc(drawing.Outline, drawing.Point{X: 500 * s.Curve.Diameter(0) * k}, 0.6)
	d.Measure(drawing.Point{X: -edge * k}, drawing.Point{X: edge * k}, 0, -edge*k-9, "Ø "+s.Resolution.mm(s.Design.Ground.Diameter))
	height := l.Heading(drawing.Point{X: left, Y: y}, across, body, "The whole plate, scale "+name+"; dot: riser")
	b := d.Bounds()
	l.Place(d, left+(across-b.Width())/2-b.Min.X, y-height-b.Max.Y)
	return height + b.Height() + 6
}

// plateView draws the plate from above with its holes, and its own edge where
// that fits beside them: the whole plate.
func (s *sheet) plateView(holes []hole, room float64) (view *drawing.Drawing, name string, whole bool) {
	half, edge := 650*s.Curve.Diameter(0), 500*s.Design.Ground.Diameter
	name, k := fitScale(2*half, 2*half, across-60, room)
	if whole = s.Design.Ground.Finite() && 2*edge*k <= room; whole {
		half = math.Max(half, edge)
	}
	d := new(drawing.Drawing)
	h := half * k
	d.Line(drawing.Axis, drawing.Point{X: -h - 5}, drawing.Point{X: h + 5})
	d.Line(drawing.Axis, drawing.Point{Y: -h - 5}, drawing.Point{Y: h + 5})
	d.Add(drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: h + 6, Y: -1}, Size: body, S: "+x"}, drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: 1.5, Y: h + 3.5}, Size: body, S: "+y"})
	if whole {
		d.Circle(drawing.Outline, drawing.Point{}, edge*k)
	}
	if !s.former.combs {
		d.Circle(drawing.Axis, drawing.Point{}, s.former.surface(0)*k)
	}
	for i, o := range holes {
		at := drawing.Point{X: o.At.X * k, Y: o.At.Y * k}
		r := math.Max(o.Diameter/2*k, 0.3)
		d.Circle(drawing.Hole, at, r)
		d.Cross(drawing.Axis, at, r+1.5)
		d.Add(drawing.Text{Layer: drawing.Lettering, At: at.Plus(r+0.8, r+0.8), Size: body, Bold: true, S: letters(i)})
	}
	d.Measure(drawing.Point{}, drawing.Point{X: holes[0].At.X * k}, 0, -h-6, s.Resolution.mm(holes[0].At.X/1e3))
	if whole {
		d.Measure(drawing.Point{X: -edge * k}, drawing.Point{X: edge * k}, 0, -h-13, "Ø "+s.Resolution.mm(s.Design.Ground.Diameter))
	}
	return d, name, whole
}
