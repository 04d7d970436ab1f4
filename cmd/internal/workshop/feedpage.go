package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
)

// feedPage shows the riser and the first turn unrolled, its heights, the
// strip's flat pattern and the line section.
func (s *sheet) feedPage() leaf {
	view, name := s.firstTurn(across-35, 46)
	l := newLeaf("feed: riser and first turn", name)
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "First turn, unrolled, seen from outside, scale "+name)
	b := view.Bounds()
	l.Place(view, left+(across-b.Width())/2-b.Min.X, y-3-b.Max.Y)
	y -= b.Height() + 7
	t := s.leadTable()
	l.Table(drawing.Point{X: left, Y: y}, t)
	y -= t.Height() + 3
	for _, words := range s.feedWords() {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, body, words) + 1
	}
	if s.Design.Feed.Strip.Turns > 0 {
		s.stripPattern(l, drawing.Point{X: left, Y: y - 3})
	}
	return l
}

// firstTurn draws riser and first turn as on the unrolled cylinder through
// them: along the circumference, and upwards.
func (s *sheet) firstTurn(room, tall float64) (*drawing.Drawing, string) {
	c := s.Curve
	turns := math.Min(1, c.Turns())
	circumference := 1e3 * math.Pi * c.Diameter(0)
	name, k := fitScale(circumference*turns, 1e3*c.Height(turns), room, tall)
	hand := float64(s.Design.Handedness)
	at := func(t float64) drawing.Point {
		return drawing.Point{X: hand * circumference * t * k, Y: 1e3 * c.Height(t) * k}
	}
	d := new(drawing.Drawing)
	ends := []drawing.Point{{X: -hand * 8}, {X: hand * (circumference*turns*k + 8)}}
	d.Add(drawing.Polyline{Layer: drawing.Outline, Width: 0.7, Points: ends})
	d.Write(drawing.Point{X: math.Min(ends[0].X, ends[1].X), Y: -4}, small, "plate")
	pen := func(m float64) float64 { return math.Min(math.Max(0.3, 1e3*m*k), 6) }
	d.Add(drawing.Polyline{Layer: drawing.Winding, Width: pen(s.Design.PinDiameter()), Points: []drawing.Point{{}, at(0)}})
	strip := math.Min(s.Design.Feed.Strip.Turns, turns)
	s.unrolled(d, drawing.Strip, 0.8, 0, strip, at)
	s.unrolled(d, drawing.Winding, pen(s.Design.Conductor.Diameter), strip, turns, at)
	for _, t := range eighths(turns) {
		p := at(t)
		d.Line(drawing.Dimension, drawing.Point{X: p.X}, p)
		d.Add(drawing.Text{Layer: drawing.Lettering, At: p.Plus(0, 3+pen(s.Design.Conductor.Diameter)/2), Size: small, Align: drawing.Middle, S: s.Resolution.mm(c.Height(t))})
		d.Add(drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: p.X, Y: -4}, Size: small, Align: drawing.Middle, S: degree(360 * t)})
	}
	arrow := at(0.44 * turns)
	way := at(0.5*turns).Plus(0, 0)
	d.Head(drawing.Winding, way, math.Atan2(way.Y-arrow.Y, way.X-arrow.X)*180/math.Pi, 4)
	return d, name
}

// eighths are the places of the first turn that are measured.
func eighths(turns float64) []float64 {
	var out []float64
	for _, t := range []float64{0, 0.125, 0.25, 0.375, 0.5, 0.75, 1} {
		if t <= turns {
			out = append(out, t)
		}
	}
	return out
}

func (s *sheet) unrolled(d *drawing.Drawing, l drawing.Layer, pen, from, to float64, at func(float64) drawing.Point) {
	if to <= from {
		return
	}
	points := make([]drawing.Point, 49)
	for i := range points {
		points[i] = at(from + (to-from)*float64(i)/48)
	}
	d.Add(drawing.Polyline{Layer: l, Points: points, Width: pen})
}

// leadTable lists the heights of the first turn, with room for what was
// made.
func (s *sheet) leadTable() *drawing.Table {
	c, r := s.Curve, s.Resolution
	places := eighths(c.Turns())
	t := &drawing.Table{Size: small, Row: 5, Columns: []drawing.Column{{Title: "turn", Width: 50}},
		Rows: [][]string{{"height z of the centre line"}, {"clear air under the conductor"}, {"as built"}}}
	for _, p := range places {
		t.Columns = append(t.Columns, drawing.Column{Title: shortest(p), Width: 18, Align: drawing.Right})
		t.Rows[0] = append(t.Rows[0], r.mm(c.Height(p)))
		air := c.Height(p) - s.Design.Conductor.Diameter/2 - s.Design.Insulation.Thickness
		if p < s.Design.Feed.Strip.Turns {
			air = c.Height(p)
		}
		t.Rows[1] = append(t.Rows[1], r.mm(air))
		t.Rows[2] = append(t.Rows[2], "")
	}
	return t
}

// feedWords describe the way from the connector to the winding.
func (s *sheet) feedWords() []string {
	f, r := s.Design.Feed, s.Resolution
	out := []string{fmt.Sprintf("Riser: Ø %s, upright from the plate to z = %s at a radius of %s, straight on from the connector's inner conductor. The winding starts on its top with a corner, a soldered joint.",
		bought(s.Design.PinDiameter()), r.mm(f.Height), r.mm(s.Curve.Diameter(0)/2))}
	if l := f.Lead; l.Turns > 0 {
		way := "climbing evenly into the winding's own spacing"
		if l.Shape == models.Flat {
			way = "keeping that spacing, then passing into the winding's own over a quarter turn"
		}
		out = append(out, fmt.Sprintf("Lead: the first %s turns rise more slowly, from %s a turn, %s. The heights above hold.", r.turns(l.Turns), r.mm(l.Spacing), way))
	}
	if st := f.Strip; st.Turns > 0 {
		out = append(out, fmt.Sprintf("Strip: the first %s turns are flat strip %s wide, its face parallel to the plate and its middle on the centre line; round conductor from there, lapped and soldered on top.", r.turns(st.Turns), r.mm(st.Width)))
	}
	if t := f.Transformer; t.Impedance > 0 {
		velocity := t.Velocity
		if velocity == 0 {
			velocity = 1
		}
		out = append(out, fmt.Sprintf("Line section between connector and plate: %s Ω, %s long, for a line with a velocity of %s of light's. In another line the length goes with its velocity.", fixed(t.Impedance, r.digits), r.mm(t.Length), shortest(velocity)))
	}
	return append(out, fmt.Sprintf("Expected for a connection of %s Ω. Heights of the first turn decide the match: set them with gauge blocks before anything is glued.", shortest(f.Impedance)))
}

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

// stripPattern draws the strip's flat pattern below a place.
func (s *sheet) stripPattern(l leaf, at drawing.Point) {
	p, r := s.flatStrip(), s.Resolution
	sweep := math.Min(p.angle, 355)
	outer, inner := 1e3*(p.radius+p.width/2), 1e3*math.Max(p.radius-p.width/2, 0)
	name, k := fitScale(2*outer, outer*(1-math.Cos(math.Min(sweep/2, 180)*math.Pi/180))+1e3*p.width, 80, 55)
	h := l.Heading(at, across, heading, "Strip, flat pattern, scale "+name)
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
	l.Place(d, at.X+4-b.Min.X, at.Y-h-4-b.Max.Y)
	t := &drawing.Table{Size: small, Row: 4.6, Columns: []drawing.Column{{Title: "flat strip", Width: 45}, {Title: "mm, °", Width: 22, Align: drawing.Right}}, Rows: [][]string{
		{"inner radius", r.mm(math.Max(p.radius-p.width/2, 0))}, {"outer radius", r.mm(p.radius + p.width/2)}, {"width", r.mm(p.width)},
		{"angle", degree(p.angle)}, {"length along the middle", r.mm(p.length)},
	}}
	if p.angle > 355 {
		t.Rows = append(t.Rows, []string{"more than a ring: cut in parts", ""})
	}
	l.Table(drawing.Point{X: left + 100, Y: at.Y - h - 4}, t)
}
