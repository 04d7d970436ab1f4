package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
)

// feedPage shows the riser and the first turn unrolled, its heights and the
// line section.
func (s *sheet) feedPage() leaf {
	view, name := s.firstTurn(across-30, 70)
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
	s.riserSection(l, drawing.Point{X: left, Y: y - 3})
	return l
}

// riserSection draws plate, opening and riser cut through the riser's axis,
// seen from outside, below a place.
func (s *sheet) riserSection(l leaf, at drawing.Point) {
	r, c := s.Resolution, s.Curve
	pin, wide, height := 1e3*s.Design.PinDiameter(), models.Opening*1e3*s.Design.PinDiameter(), 1e3*c.Riser()
	reach := math.Max(2*wide, 1.5*height)
	name, k := fitScale(2*reach, 1.7*height, 110, 40)
	h := l.Heading(at, across, heading, "Section through the riser, seen from outside, scale "+name)
	d := new(drawing.Drawing)
	const plate = 4.0 // mm of paper: as thick as the plate is
	for _, side := range []float64{-1, 1} {
		near, far := side*wide/2*k, side*reach*k
		d.Add(drawing.Polyline{Layer: drawing.Outline, Points: []drawing.Point{{X: far}, {X: near}, {X: near, Y: -plate}, {X: far, Y: -plate}}})
		for x := math.Min(near, far); x+plate <= math.Max(near, far); x += 2.5 {
			d.Line(drawing.Grid, drawing.Point{X: x, Y: -plate}, drawing.Point{X: x + plate})
		}
	}
	d.Add(drawing.Polyline{Layer: drawing.Winding, Closed: true, Points: []drawing.Point{
		{X: -pin / 2 * k, Y: -plate - 3}, {X: pin / 2 * k, Y: -plate - 3}, {X: pin / 2 * k, Y: height * k}, {X: -pin / 2 * k, Y: height * k}}})
	s.windingStart(d, k, reach)
	d.Line(drawing.Axis, drawing.Point{Y: -plate - 6}, drawing.Point{Y: height*k + 5})
	hand := float64(s.Design.Handedness)
	d.Measure(drawing.Point{X: -hand * wide / 2 * k}, drawing.Point{Y: height * k}, 90, hand*(reach*k-wide/2*k+3), r.mm(c.Riser()))
	d.Measure(drawing.Point{X: -wide / 2 * k, Y: -plate}, drawing.Point{X: wide / 2 * k, Y: -plate}, 0, -11, "Ø "+r.mm(wide/1e3))
	side := hand * pin / 2 * k
	d.Leader(drawing.Point{X: side, Y: height * k / 2}, drawing.Point{X: hand * (reach*k + 6), Y: height * k / 2}, "riser Ø "+bought(s.Design.PinDiameter()))
	b := d.Bounds()
	l.Place(d, at.X+(across-b.Width())/2-b.Min.X, at.Y-h-3-b.Max.Y)
}

// windingStart draws both edges of the conductor from the riser's top on.
func (s *sheet) windingStart(d *drawing.Drawing, k, reach float64) {
	c := s.Curve
	thick := 1e3 * s.Design.Conductor.Diameter
	if s.Design.Feed.Strip.Turns > 0 {
		thick = 1 / k // a strip on edge: a line about as thick as a sheet
	}
	end := math.Min(reach/(1e3*math.Pi*c.Diameter(0)), c.Turns())
	for _, side := range []float64{-0.5, 0.5} {
		points := make([]drawing.Point, 25)
		for i := range points {
			t := end * float64(i) / 24
			points[i] = drawing.Point{X: float64(s.Design.Handedness) * 1e3 * math.Pi * c.Diameter(0) * t * k, Y: (1e3*c.Height(t) + side*thick) * k}
		}
		d.Add(drawing.Polyline{Layer: drawing.Winding, Points: points})
	}
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
	d.Add(drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: math.Min(ends[0].X, ends[1].X) - 1, Y: -0.9}, Size: small, Align: drawing.Right, S: "plate"})
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
	arrow := at(0.6 * turns)
	tip := at(0.65 * turns)
	d.Head(drawing.Winding, tip, math.Atan2(tip.Y-arrow.Y, tip.X-arrow.X)*180/math.Pi, 7)
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
