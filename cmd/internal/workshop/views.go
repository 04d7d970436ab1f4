package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
)

// viewsPage shows the antenna from the side and from its open end, with its
// main dimensions and the way to wind it.
func (s *sheet) viewsPage() leaf { return fitted(62, s.views) }

// views is the page with a side view so tall, and where its words end.
func (s *sheet) views(tall float64) (leaf, float64) {
	side, name := s.sideView(across-40, tall)
	l := newLeaf("antenna, views and main dimensions", name)
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Side view, riser at the upper edge, scale "+name)
	b := side.Bounds()
	l.Place(side, left+(across-b.Width())/2-b.Min.X, y-3-b.Max.Y)
	y -= b.Height() + 8

	end, endName := s.endView(27)
	at := drawing.Point{X: left, Y: y}
	l.Heading(at, 78, heading, "Seen from the open end, scale "+endName)
	b = end.Bounds()
	l.Place(end, left+38-(b.Min.X+b.Max.X)/2, y-11-b.Max.Y)
	endLow := y - 11 - b.Height()

	t := s.mainTable()
	l.Heading(drawing.Point{X: left + 80, Y: y}, 90, heading, "Main dimensions")
	l.Table(drawing.Point{X: left + 80, Y: y - 8}, t)
	y = math.Min(endLow, y-8-t.Height()) - 5
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Which way to wind")
	for _, words := range HandWords(&s.Design) {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, body, words) + 1
	}
	y -= 2
	for _, words := range s.windingNotes() {
		y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, small, words) + 0.8
	}
	return l, y
}

// sideView projects the winding on a plane through the axis: z to the right,
// x upwards, seen from +y.
func (s *sheet) sideView(room, tall float64) (*drawing.Drawing, string) {
	c := s.Curve
	widest, plate := 0.0, s.Design.Ground.Diameter*500
	for i := range 65 {
		widest = math.Max(widest, 500*c.Diameter(c.Turns()*float64(i)/64))
	}
	half := math.Max(widest*1.25, plate)
	name, k := fitScale(1e3*math.Max(c.Top(), s.Design.Ground.Rim), 2*half, room, tall)
	d := new(drawing.Drawing)
	s.plateEdge(d, k, half)
	pen := math.Min(math.Max(0.3, 1e3*s.Design.Conductor.Diameter*k), 3)
	s.strands(d, k, pen, false)
	s.strands(d, k, pen, true)
	d.Line(drawing.Axis, drawing.Point{X: -4}, drawing.Point{X: 1e3*c.Top()*k + 6})
	s.sideArrows(d, k)
	s.sideDimensions(d, k, math.Max(half, widest))
	return d, name
}

// project is a point of the winding on the side view, mm of paper.
func (s *sheet) project(t, k float64) drawing.Point {
	p := s.Curve.At(t).Pos
	return drawing.Point{X: 1e3 * p.Z * k, Y: 1e3 * p.X * k}
}

// strands draws the half of the winding on one side of the picture's plane.
func (s *sheet) strands(d *drawing.Drawing, k, pen float64, near bool) {
	layer := drawing.Far
	if near {
		layer = drawing.Winding
	}
	turns := s.Curve.Turns()
	firstNear := 0.0 // turns at which the near half begins
	if s.Design.Handedness == models.Left {
		firstNear = 0.5
	}
	if !near {
		firstNear = 0.5 - firstNear
	}
	for from := firstNear; from < turns; from++ {
		to := math.Min(from+0.5, turns)
		n := max(int(math.Ceil((to-from)*96)), 1)
		points := make([]drawing.Point, n+1)
		for i := range points {
			points[i] = s.project(from+(to-from)*float64(i)/float64(n), k)
		}
		d.Add(drawing.Polyline{Layer: layer, Points: points, Width: pen})
	}
	if near {
		foot := s.project(0, k)
		d.Add(drawing.Polyline{Layer: layer, Width: math.Max(0.3, 1e3*s.Design.PinDiameter()*k), Points: []drawing.Point{{X: 0, Y: foot.Y}, foot}})
	}
}

// plateEdge draws the ground from its edge: a plate, a cup, or a stretch of
// a plane that goes on.
func (s *sheet) plateEdge(d *drawing.Drawing, k, half float64) {
	g := s.Design.Ground
	h := half * k
	d.Add(drawing.Polyline{Layer: drawing.Outline, Width: 0.7, Points: []drawing.Point{{Y: -h}, {Y: h}}})
	switch g.Kind {
	case models.Cup:
		rim := 1e3 * g.Rim * k
		for _, y := range []float64{-h, h} {
			d.Add(drawing.Polyline{Layer: drawing.Outline, Width: 0.7, Points: []drawing.Point{{Y: y}, {X: rim, Y: y}}})
		}
	case models.Disc:
	default:
		for _, y := range []float64{-h, h} { // it goes on
			d.Add(drawing.Polyline{Layer: drawing.Outline, Points: []drawing.Point{{X: -1.5, Y: y - 0.6}, {X: -0.4, Y: y + 0.6}, {X: 0.4, Y: y - 0.6}, {X: 1.5, Y: y + 0.6}}})
		}
	}
}

// sideArrows puts arrowheads on the near strands, the way the wire runs from
// the plate.
func (s *sheet) sideArrows(d *drawing.Drawing, k float64) {
	size := math.Min(5, math.Max(1.5, 0.4e3*s.Curve.Top()/s.Curve.Turns()*k))
	t := 0.25
	if s.Design.Handedness == models.Left {
		t = 0.75
	}
	for ; t < s.Curve.Turns()-0.1; t += math.Max(1, math.Floor(s.Curve.Turns()/5)) {
		a, b := s.project(t-0.02, k), s.project(t+0.02, k)
		d.Head(drawing.Winding, b, math.Atan2(b.Y-a.Y, b.X-a.X)*180/math.Pi, size)
	}
}

// sideDimensions are the dimensions of the side view.
func (s *sheet) sideDimensions(d *drawing.Drawing, k, half float64) {
	c, r := s.Curve, s.Resolution
	low, high := -half*k, half*k
	end := 1e3 * c.Top() * k
	start, last := 500*c.Diameter(0)*k, 500*c.Diameter(c.Turns())*k
	d.Measure(drawing.Point{Y: low}, drawing.Point{X: end, Y: -last}, 0, -7, r.mm(c.Top()))
	d.Measure(drawing.Point{X: 1e3 * c.Riser() * k, Y: start}, drawing.Point{Y: high}, 0, 4, "riser "+r.mm(c.Riser()))
	if from := s.spacingFrom(); from >= 0 {
		a, b := s.project(from, k), s.project(from+1, k)
		d.Measure(a, b, 0, high-math.Max(a.Y, b.Y)+11, fmt.Sprintf("turn %s to %s: %s", shortest(from), shortest(from+1), r.mm(c.Height(from+1)-c.Height(from))))
	}
	d.Measure(drawing.Point{X: end, Y: -last}, drawing.Point{X: end, Y: last}, 90, -9, "Ø "+r.mm(c.Diameter(c.Turns())))
	if len(s.Design.Diameter) > 1 {
		d.Measure(drawing.Point{Y: start}, drawing.Point{Y: -start}, 90, 7, "Ø "+r.mm(c.Diameter(0)))
	}
	s.groundDimensions(d, k, low)
}

// groundDimensions are those of a plate or cup on the side view.
func (s *sheet) groundDimensions(d *drawing.Drawing, k, low float64) {
	r, g := s.Resolution, s.Design.Ground
	edge, rim := 500*g.Diameter*k, 1e3*g.Rim*k
	if g.Finite() {
		d.Measure(drawing.Point{Y: edge}, drawing.Point{Y: -edge}, 90, 14, "Ø "+r.mm(g.Diameter))
	}
	if g.Kind == models.Cup {
		d.Measure(drawing.Point{Y: low}, drawing.Point{X: rim, Y: low}, 0, -14, "rim "+r.mm(g.Rim))
	}
}

// spacingFrom is the first whole turn past the lead that has a whole turn
// after it, −1 where there is none.
func (s *sheet) spacingFrom() float64 {
	from := 0.0
	if l := s.Design.Feed.Lead; l.Turns > 0 {
		from = math.Ceil(l.Turns + 0.25)
	}
	if from+1 > s.Curve.Turns() {
		return -1
	}
	return from
}

// endView looks from the open end at the plate, x to the right, y upwards.
func (s *sheet) endView(radius float64) (*drawing.Drawing, string) {
	c := s.Curve
	start, last := 500*c.Diameter(0), 500*c.Diameter(c.Turns())
	widest := math.Max(start, last)
	name, k := fitScale(widest, widest, radius, radius)
	d := new(drawing.Drawing)
	centre := drawing.Point{}
	reach := widest*k + 4
	d.Line(drawing.Axis, drawing.Point{X: -reach}, drawing.Point{X: reach})
	d.Line(drawing.Axis, drawing.Point{Y: -reach}, drawing.Point{Y: reach})
	s.endSpiral(d, k)
	hand := float64(s.Design.Handedness)
	for quarter := range 4 {
		a := 90 * float64(quarter) * hand
		at := centre.Toward(a, reach+4)
		d.Add(drawing.Text{Layer: drawing.Lettering, At: at.Plus(0, -1), Size: body, Align: drawing.Middle, S: fmt.Sprintf("%d°", 90*quarter)})
	}
	d.Disc(drawing.Outline, centre.Toward(0, start*k), 1)
	open := hand * 360 * c.Turns()
	d.Circle(drawing.Outline, centre.Toward(open, last*k), 1.2)
	d.Add(drawing.Text{Layer: drawing.Lettering, At: centre.Plus(0, 3.2), Size: small, Align: drawing.Middle, S: "dot: riser"})
	d.Add(drawing.Text{Layer: drawing.Lettering, At: centre.Plus(0, -5.4), Size: small, Align: drawing.Middle, S: "ring: open end"})
	s.windingArrow(d, widest*k+2.4)
	return d, name
}

// endSpiral draws the winding as it is seen along its axis.
func (s *sheet) endSpiral(d *drawing.Drawing, k float64) {
	turns := s.Curve.Turns()
	n := int(math.Ceil(turns * 90))
	points := make([]drawing.Point, n+1)
	for i := range points {
		p := s.Curve.At(turns * float64(i) / float64(n)).Pos
		points[i] = drawing.Point{X: 1e3 * p.X * k, Y: 1e3 * p.Y * k}
	}
	d.Add(drawing.Polyline{Layer: drawing.Winding, Points: points, Width: 0.25})
}

// windingArrow is the arrow round the end view: the way the wire runs as it
// leaves the plate.
func (s *sheet) windingArrow(d *drawing.Drawing, radius float64) {
	hand := float64(s.Design.Handedness)
	const from, to = 25.0, 65.0
	points := make([]drawing.Point, 21)
	for i := range points {
		points[i] = drawing.Point{}.Toward(hand*(from+(to-from)*float64(i)/20), radius)
	}
	d.Add(drawing.Polyline{Layer: drawing.Winding, Points: points, Width: 0.7})
	tip := drawing.Point{}.Toward(hand*(to+6), radius)
	d.Head(drawing.Winding, tip, hand*(to+3+90), 4)
}

// mainTable lists the main dimensions, each with room for what was made.
func (s *sheet) mainTable() *drawing.Table {
	c, r, g := s.Curve, s.Resolution, s.Curve.Geometry()
	k := cuts(c, s.Design.Feed.Strip.Turns, s.Design.Feed.Pin > 0)
	t := &drawing.Table{Size: small, Row: 4.4, Columns: []drawing.Column{{Title: "", Width: 46}, {Title: "as drawn", Width: 32, Align: drawing.Right}, {Title: "as built", Width: 22}}}
	row := func(what, drawn string) { t.Rows = append(t.Rows, []string{what, drawn}) }
	row("turns", r.turns(s.Design.Turns))
	row("Ø of the centre line at the plate", r.mm(c.Diameter(0)))
	if len(s.Design.Diameter) > 1 {
		row("Ø of the centre line, open end", r.mm(c.Diameter(c.Turns())))
	}
	row("length over the plate, centre line", r.mm(c.Top()))
	row("overall Ø", r.mm(g.Widest))
	row("riser: Ø × height", bought(s.Design.PinDiameter())+" × "+r.mm(c.Riser()))
	row("conductor Ø", bought(s.Design.Conductor.Diameter)+" "+s.material())
	if w := s.Design.Conductor.Wall; w > 0 {
		row("tube wall", bought(w))
	}
	if i := s.Design.Insulation; i.Thickness > 0 {
		row("coat: thickness, permittivity", bought(i.Thickness)+", "+shortest(i.Permittivity))
	}
	s.formerRows(row)
	if k.Length() > 0 {
		row("cut the wire to", fixed(1e3*k.Length(), 0))
	}
	row("wire, plate to open end", r.mm(c.WireLength()))
	row("mass of the conductor", grams(g.ConductorMass))
	row("ground", s.groundWords())
	if s.Design.Ground.Finite() {
		row("ground of", s.sheetName())
		row("mass with the ground", grams(g.Mass))
	}
	return t
}

// grams is a mass with its unit, three digits and more of it.
func grams(kg float64) string {
	if kg < 0.001 {
		return fixed(1e6*kg, 1) + " mg"
	}
	return fixed(1e3*kg, 1) + " g"
}

func (s *sheet) material() string {
	if s.Design.Conductor.Material.Name != "" {
		return s.Design.Conductor.Material.Name
	}
	return fmt.Sprintf("%.3g MS/m", s.Design.Conductor.Material.Conductivity/1e6)
}

// springBack is by how much hard copper opens after winding: practice.
const springBack = 0.15

// formerRows are the diameters to wind on.
func (s *sheet) formerRows(row func(what, drawn string)) {
	r := s.Resolution
	if s.former.combs {
		row("former", "combs, see template")
		return
	}
	low, high := s.former.Diameter(0)/1e3, s.former.Diameter(1e3*s.Curve.Top())/1e3
	both := func(share float64) string {
		if s.former.cone() {
			return r.mm(low*share) + " to " + r.mm(high*share)
		}
		return r.mm(low * share)
	}
	row("former Ø, conductor on it", both(1))
	row("trial mandrel Ø, hard copper", both(1-springBack))
}

// windingNotes are what a workshop must know beyond the numbers.
func (s *sheet) windingNotes() []string {
	notes := []string{
		fmt.Sprintf("Every dimension was rounded to %s, the rounded design was read back and answered again by the full-wave model: rounding moves the gain by %+.3f dB where it moves most.", s.Resolution, s.Moved),
		"Spring-back: a free winding of hard copper opens by about 15 % when it leaves the mandrel (practice, not a promise). Wind one trial turn on the trial mandrel, measure it, and choose the mandrel from that. Soft wire, or wire held on its former, needs no smaller mandrel.",
		fmt.Sprintf("The cut length holds %.0f mm to solder at the feed and %.0f mm to trim: cut the open end to its station last, and cap it.", 1e3*feedAllowance, 1e3*trimAllowance),
	}
	if coil, need := s.stock.Coil, cuts(s.Curve, s.Design.Feed.Strip.Turns, s.Design.Feed.Pin > 0).Length(); coil > 0 && need > coil {
		notes = append(notes, fmt.Sprintf("A coil of %s holds %s mm, less than the cut length: leave out some of the allowance.", s.stock.Name, fixed(1e3*coil, 0)))
	}
	return notes
}
