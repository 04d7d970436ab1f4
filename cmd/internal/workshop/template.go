package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
)

// template is the 1:1 drawing that is wrapped round the former, or of the
// combs where no sheet of paper can be.
func template(s *Settled) *drawing.Drawing {
	d := new(drawing.Drawing)
	f := newFormer(&s.Design, s.Curve)
	if f.combs {
		combs(d, s, f)
	} else {
		wrap(d, s, f)
	}
	return withLegend(d, s, f)
}

// withLegend sets the legend below the template or beside it, where it takes
// less paper.
func withLegend(d *drawing.Drawing, s *Settled, f *former) *drawing.Drawing {
	b := d.Bounds()
	below, beside := new(drawing.Drawing), new(drawing.Drawing)
	below.Place(d, 0, 0)
	beside.Place(d, 0, 0)
	legend(below, s, f, drawing.Point{X: b.Min.X, Y: b.Min.Y - 8})
	legend(beside, s, f, drawing.Point{X: b.Max.X + 12, Y: b.Max.Y})
	if newTiling(beside.Bounds()).count() < newTiling(below.Bounds()).count() {
		return beside
	}
	return below
}

// tab is the strip to glue under the other edge, mm.
const tab = 8.0

// wrap draws the unrolled surface.
func wrap(d *drawing.Drawing, s *Settled, f *former) {
	head := f.head()
	edge := func(l drawing.Layer, from, to [2]float64) {
		d.Add(drawing.Polyline{Layer: l, Points: f.chain(from, to)})
	}
	edge(drawing.Outline, [2]float64{0, 0}, [2]float64{0, 360})
	edge(drawing.Outline, [2]float64{head, 0}, [2]float64{head, 360})
	edge(drawing.Outline, [2]float64{0, 0}, [2]float64{head, 0})
	edge(drawing.Outline, [2]float64{0, 360}, [2]float64{head, 360})
	f.glue(d, head)
	for quarter := range 4 {
		a := math.Mod(90*float64(quarter)*f.hand-seam+360, 360)
		edge(drawing.Axis, [2]float64{0, a}, [2]float64{head, a})
		d.Add(drawing.Text{Layer: drawing.Lettering, At: f.flat(head-4, a).Plus(1, 0), Size: 2.6, S: fmt.Sprintf("%d°", 90*quarter)})
	}
	f.wind(d, s)
	f.marks(d, s)
}

// chain unrolls a line that is straight in height and azimuth.
func (f *former) chain(from, to [2]float64) []drawing.Point {
	n := 1
	if f.cone() && from[1] != to[1] {
		n = 180
	}
	points := make([]drawing.Point, n+1)
	for i := range points {
		u := float64(i) / float64(n)
		points[i] = f.flat(from[0]+u*(to[0]-from[0]), from[1]+u*(to[1]-from[1]))
	}
	return points
}

// lean is the direction from one point of the flat to another, degrees.
func (f *former) lean(a, b drawing.Point) float64 {
	return math.Atan2(b.Y-a.Y, b.X-a.X) * 180 / math.Pi
}

// glue draws the tab along the right edge.
func (f *former) glue(d *drawing.Drawing, head float64) {
	low, high := f.flat(0, 360), f.flat(head, 360)
	along := f.lean(low, high)
	a, b := low.Toward(along-60, tab), high.Toward(along-120, tab)
	d.Line(drawing.Axis, low, a)
	d.Line(drawing.Axis, a, b)
	d.Line(drawing.Axis, b, high)
	middle := drawing.Point{X: (a.X + b.X + low.X + high.X) / 4, Y: (a.Y + b.Y + low.Y + high.Y) / 4}
	d.Add(drawing.Text{Layer: drawing.Lettering, At: middle.Toward(along-90, 0.9), Size: 2.6, Angle: along, Align: drawing.Middle, S: "glue under the other edge"})
}

// perTurn is how many points draw a turn.
const perTurn = 180

// wind draws the winding line and the riser's foot line, broken at the seam.
func (f *former) wind(d *drawing.Drawing, s *Settled) {
	c := f.curve
	_, start := f.touch(0)
	d.Line(drawing.Winding, f.flat(0, start), f.flat(1e3*c.Height(0), start))
	strip := s.Design.Feed.Strip.Turns
	for _, part := range f.parts(c.Turns(), strip) {
		l := drawing.Winding
		if part[1] <= strip+1e-9 {
			l = drawing.Strip
		}
		n := max(int(math.Ceil((part[1]-part[0])*perTurn)), 1)
		points := make([]drawing.Point, n+1)
		middle := (part[0] + part[1]) / 2
		_, azimuth := f.touch(middle)
		for i := range points {
			t := part[0] + (part[1]-part[0])*float64(i)/float64(n)
			z, _ := f.touch(t)
			points[i] = f.flat(z, azimuth+f.hand*360*(t-middle)) // on the seam: this part's edge
		}
		d.Add(drawing.Polyline{Layer: l, Points: points})
	}
}

// parts cut the winding at the seam and where the strip ends.
func (f *former) parts(turns, strip float64) [][2]float64 {
	ends := []float64{0}
	next := -seam / 360 // of a left-handed winding, which reaches the seam sooner
	if f.hand > 0 {
		next = 1 + seam/360
	}
	for ; next < turns-1e-9; next++ {
		if strip > ends[len(ends)-1]+1e-9 && strip < next-1e-9 {
			ends = append(ends, strip)
		}
		ends = append(ends, next)
	}
	if strip > ends[len(ends)-1]+1e-9 && strip < turns-1e-9 {
		ends = append(ends, strip)
	}
	ends = append(ends, turns)
	parts := make([][2]float64, len(ends)-1)
	for i := range parts {
		parts[i] = [2]float64{ends[i], ends[i+1]}
	}
	return parts
}

// holeRadius lets the conductor through, mm.
func (f *former) holeRadius() float64 { return f.under + 0.15 }

// marks draws a cross at every station, with its turn and height, and a hole
// where the winding starts and ends.
func (f *former) marks(d *drawing.Drawing, s *Settled) {
	for _, m := range stations(s.Curve, s.Resolution) {
		z, a := f.touch(m.T)
		at := f.flat(z, a)
		d.Cross(drawing.Station, at, 2)
		up := f.lean(f.flat(z-1, a), f.flat(z+1, a)) - 90
		label := fmt.Sprintf("%s: z %s", shortest(m.T), s.Resolution.shown(m.Z))
		// On the side where the winding comes from, above it.
		align := drawing.Right
		if f.hand < 0 {
			align = drawing.Left
		}
		place := at.Toward(up, -f.hand).Toward(up+90, 1)
		d.Add(drawing.Text{Layer: drawing.Lettering, At: place, Size: 2.2, Angle: up, Align: align, S: label})
		if m.T == 0 || m.T == s.Curve.Turns() {
			d.Circle(drawing.Hole, at, f.holeRadius())
		}
	}
}

// combs draws four flat combs, one for each quarter of azimuth, which stand
// on the plate along the axis and hold the wire in their notches.
func combs(d *drawing.Drawing, s *Settled, f *former) {
	widest := 0.0
	for _, m := range stations(s.Curve, s.Resolution) {
		widest = math.Max(widest, 1e3*m.Radius)
	}
	pitch := widest + f.under + 25
	for quarter := range 4 {
		at := drawing.Point{X: pitch * float64(quarter)}
		f.comb(d, s, at, float64(quarter)*0.25)
	}
}

// comb is the comb at so many turns' azimuth: its axis is a vertical line.
func (f *former) comb(d *drawing.Drawing, s *Settled, at drawing.Point, quarter float64) {
	c, head := f.curve, f.head()
	d.Line(drawing.Axis, at, at.Plus(0, head))
	n := int(math.Ceil(c.Turns() * 16))
	profile := []drawing.Point{at, at.Plus(500*c.Diameter(0), 0)}
	for i := range n + 1 {
		t := c.Turns() * float64(i) / float64(n)
		profile = append(profile, at.Plus(500*c.Diameter(t), 1e3*c.Height(t)))
	}
	profile = append(profile, at.Plus(500*c.Diameter(c.Turns()), head), at.Plus(0, head))
	d.Add(drawing.Polyline{Layer: drawing.Outline, Points: profile})
	for _, m := range stations(c, s.Resolution) {
		if math.Abs(m.T-math.Floor(m.T)-quarter) > 1e-9 {
			continue
		}
		notch := at.Plus(1e3*m.Radius, 1e3*c.Height(m.T))
		d.Circle(drawing.Hole, notch, f.holeRadius())
		d.Cross(drawing.Station, notch, f.under+1)
		d.Add(drawing.Text{Layer: drawing.Lettering, At: notch.Plus(-f.under-2, -0.8), Size: 2.2, Align: drawing.Right,
			S: fmt.Sprintf("%s: z %s", shortest(m.T), s.Resolution.shown(m.Z))})
	}
	d.Add(drawing.Text{Layer: drawing.Lettering, At: at.Plus(1.5, 3), Size: 2.6, S: fmt.Sprintf("%.0f°", 360*quarter)})
}

// bar is the length of a check bar, mm.
const bar = 100.0

// checkBar draws a line of exactly 100 mm with its end ticks, along 0 or 90
// degrees.
func checkBar(d *drawing.Drawing, at drawing.Point, angle float64) {
	end := at.Toward(angle, bar)
	if angle == 90 {
		end = at.Plus(0, bar) // to the last bit
	}
	d.Line(drawing.Check, at, end)
	for _, p := range []drawing.Point{at, end} {
		d.Line(drawing.Check, p.Toward(angle+90, 1.5), p.Toward(angle-90, 1.5))
	}
	d.Add(drawing.Text{Layer: drawing.Lettering, At: at.Toward(angle, bar/2).Toward(angle+90, 1), Size: 2.4, Angle: angle, Align: drawing.Middle, S: "100 mm: measure me"})
}

// legend says below a place what the template is and how to wrap it, with
// check bars.
func legend(d *drawing.Drawing, s *Settled, f *former, at drawing.Point) {
	checkBar(d, at.Plus(0, -bar), 90)
	checkBar(d, at.Plus(6, -bar), 0)
	y := 0.0
	for i, line := range templateWords(s, f) {
		if i == 0 {
			y += d.Heading(at.Plus(8, -y), 92, 3.2, line)
			continue
		}
		y += d.Paragraph(at.Plus(8, -y), 92, 2.6, line) + 1
	}
}

func templateWords(s *Settled, f *former) []string {
	r := s.Resolution
	out := []string{
		fmt.Sprintf("Winding template 1:1, design %s", s.Design.ID()),
		fmt.Sprintf("Wind %s-handed: %s.", s.Design.Handedness, threadWord(s.Design.Handedness)),
	}
	switch {
	case f.combs:
		out = append(out, "The winding's profile is neither cylinder nor cone, so no flat sheet wraps it: cut four combs instead. Each stands on the plate with its straight side on the axis, at the azimuth it is marked with, counted from the riser in the direction of winding. The conductor lies in the notches; circles are holes on its centre line. Relieve the 0° comb for the riser.")
	case f.cone():
		out = append(out, fmt.Sprintf("For a conical former, Ø %s mm at the plate and Ø %s mm at %s mm, on whose surface the conductor lies.",
			r.mm(f.Diameter(0)/1e3), r.mm(f.Diameter(1e3*s.Curve.Top())/1e3), r.mm(s.Curve.Top())))
	default:
		out = append(out, fmt.Sprintf("For a cylindrical former of Ø %s mm, on whose surface the conductor lies.", r.mm(f.Diameter(0)/1e3)))
	}
	if !f.combs {
		out = append(out, "Wrap it print side out, the lower edge on the plate, the 0° line at the riser. The line is where the conductor touches the former; crosses are stations with turns and height z of the centre line, circles are holes.")
	}
	return append(out, "Lengths in millimetres. Check both 100 mm bars before use.")
}
