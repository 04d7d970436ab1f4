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
func (s *sheet) platePage() leaf {
	holes := s.holes()
	view, name := s.plateView(holes, 84)
	l := newLeaf("ground plate, drilling plan", name)
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Ground plate, seen from the winding, scale "+name)
	b := view.Bounds()
	l.Place(view, left+(across-b.Width())/2-b.Min.X, y-4-b.Max.Y)
	y -= b.Height() + 8
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
	return l
}

func (s *sheet) plateWords() []string {
	out := []string{"x and y are from the winding's axis; the riser stands on +x. Scribe both axes: the template's 0° line and the riser meet on +x."}
	switch s.Design.Ground.Kind {
	case models.Disc, models.Cup:
		out = append(out, "Centre the winding on it: "+s.groundWords()+". The full-wave model takes it for an infinite plane.")
	default:
		out = append(out, fmt.Sprintf("The design assumes an infinite plane. Make the plate at least %.0f across, 0.75 wavelengths at mid-band (practice); a smaller one costs gain, and any real one moves it by a decibel or two.", math.Ceil(750*s.wavelength())))
	}
	return append(out,
		fmt.Sprintf("The opening is %s times the riser's diameter, an air line of 50 Ω, as the calculation has it. A connector with another dielectric keeps its own diameters. Take its fixing holes from the connector itself.", shortest(models.Opening)),
		"The plate conducts over its whole upper face: bare metal under the connector's flange, no paint.")
}

// plateView draws the plate from above with its holes; the plate's own edge
// where it fits beside them.
func (s *sheet) plateView(holes []hole, room float64) (*drawing.Drawing, string) {
	g := s.Design.Ground
	half := 650 * s.Curve.Diameter(0)
	name, k := fitScale(2*half, 2*half, across-60, room)
	edge := 500 * g.Diameter
	finite := (g.Kind == models.Disc || g.Kind == models.Cup) && 2*edge*k <= room
	if finite {
		half = math.Max(half, edge)
	}
	d := new(drawing.Drawing)
	h := half * k
	d.Line(drawing.Axis, drawing.Point{X: -h - 5}, drawing.Point{X: h + 5})
	d.Line(drawing.Axis, drawing.Point{Y: -h - 5}, drawing.Point{Y: h + 5})
	d.Add(drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: h + 6, Y: -1}, Size: body, S: "+x"}, drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: 1.5, Y: h + 3.5}, Size: body, S: "+y"})
	if finite {
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
	if finite {
		d.Measure(drawing.Point{X: -edge * k}, drawing.Point{X: edge * k}, 0, -h-13, "Ø "+s.Resolution.mm(g.Diameter))
	}
	return d, name
}
