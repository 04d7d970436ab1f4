package workshop

import (
	"math"

	"turnwise/cmd/internal/workshop/drawing"
)

// strip is a strip cut flat: part of a ring. A flat strip on edgeless rise
// follows the winding's curvature within its own face, R/(R² + c²) for a
// radius R and a rise of 2πc a turn (geodesic curvature of a helix on the
// right helicoid, any text on differential geometry).
type strip struct {
	radius, angle, length, width float64 // m, degrees, m, m
}

func (s *sheet) flatStrip() strip {
	c, st := s.Curve, s.Design.Feed.Strip
	length := c.Arc(st.Turns) - c.Riser()
	r := (c.Diameter(0) + c.Diameter(st.Turns)) / 4
	rise := (c.Height(st.Turns) - c.Height(0)) / st.Turns / (2 * math.Pi)
	radius := (r*r + rise*rise) / r
	return strip{radius: radius, angle: length / radius * 180 / math.Pi, length: length, width: st.Width}
}

// stripPage is the strip's flat pattern.
func (s *sheet) stripPage() leaf {
	p, r := s.flatStrip(), s.Resolution
	outer, inner := 1e3*(p.radius+p.width/2), 1e3*math.Max(p.radius-p.width/2, 0)
	sweep := math.Min(p.angle, 355)
	name, k := fitScale(2*outer, 2*outer, across-20, 120)
	l := newLeaf("feed: strip, flat pattern", name)
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Strip, flat pattern, scale "+name)
	d := new(drawing.Drawing)
	from := 90 - sweep/2
	for _, radius := range []float64{inner, outer} {
		d.Add(drawing.Arc{Layer: drawing.Outline, Radius: radius * k, From: from, Sweep: sweep})
	}
	d.Add(drawing.Arc{Layer: drawing.Axis, Radius: 1e3 * p.radius * k, From: from, Sweep: sweep})
	for _, a := range []float64{from, from + sweep} {
		d.Line(drawing.Outline, drawing.Point{}.Toward(a, inner*k), drawing.Point{}.Toward(a, outer*k))
	}
	b := d.Bounds()
	l.Place(d, left+(across-b.Width())/2-b.Min.X, y-4-b.Max.Y)
	y -= b.Height() + 10
	t := &drawing.Table{Size: small, Row: 5, Columns: []drawing.Column{{Title: "flat strip", Width: 60}, {Title: "mm, °", Width: 25, Align: drawing.Right}, {Title: "as built", Width: 30}}, Rows: [][]string{
		{"inner radius", r.mm(math.Max(p.radius-p.width/2, 0))}, {"outer radius", r.mm(p.radius + p.width/2)}, {"width", r.mm(p.width)},
		{"angle", degree(p.angle)}, {"length along the middle", r.mm(p.length)},
	}}
	if p.angle > 355 {
		t.Rows = append(t.Rows, []string{"more than a ring: cut in parts", ""})
	}
	l.Table(drawing.Point{X: left, Y: y}, t)
	y -= t.Height() + 3
	l.Paragraph(drawing.Point{X: left, Y: y}, across, body, "Cut flat, then lift the far end: the strip rises to its heights with its face parallel to the plate. The pattern is the same for both hands.")
	return l
}
