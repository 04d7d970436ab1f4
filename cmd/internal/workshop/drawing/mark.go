package drawing

import "math"

// arrow is the length of an arrowhead, mm.
const arrow = 2.2

// Head draws a filled arrowhead with its point at a place, pointing along an
// angle in degrees.
func (d *Drawing) Head(l Layer, tip Point, angle, size float64) {
	d.Add(Polyline{Layer: l, Closed: true, Filled: true, Points: []Point{
		tip, tip.Toward(angle+180-16, size), tip.Toward(angle+180+16, size),
	}})
}

// Arrow draws a line with a head at its end.
func (d *Drawing) Arrow(l Layer, from, to Point) {
	d.Line(l, from, to)
	d.Head(l, to, angleOf(from, to), min(arrow, from.Distance(to)))
}

func angleOf(a, b Point) float64 { return math.Atan2(b.Y-a.Y, b.X-a.X) * 180 / math.Pi }

// Cross draws an upright cross whose arms reach so far.
func (d *Drawing) Cross(l Layer, at Point, reach float64) {
	d.Line(l, at.Plus(-reach, 0), at.Plus(reach, 0))
	d.Line(l, at.Plus(0, -reach), at.Plus(0, reach))
}

// dimensionText is the size of the figures on dimension lines, mm.
const dimensionText = 2.8

// Measure draws a dimension between two points along an angle, 0 or 90, its
// line moved sideways (to the left of the angle where away is positive) from
// the farther of them. The text stands on it, or past the second point where
// it does not fit between the arrows.
func (d *Drawing) Measure(a, b Point, angle, away float64, text string) {
	side := angle + 90
	if away < 0 {
		side = angle - 90
	}
	reach := math.Abs(away)
	from, to := a.Toward(side, reach), b.Toward(side, reach)
	switch {
	case angle == 0 && away > 0:
		from.Y, to.Y = math.Max(from.Y, to.Y), math.Max(from.Y, to.Y)
	case angle == 0:
		from.Y, to.Y = math.Min(from.Y, to.Y), math.Min(from.Y, to.Y)
	case away > 0:
		from.X, to.X = math.Min(from.X, to.X), math.Min(from.X, to.X)
	default:
		from.X, to.X = math.Max(from.X, to.X), math.Max(from.X, to.X)
	}
	for _, ends := range [][2]Point{{a, from}, {b, to}} {
		way := angleOf(ends[0], ends[1])
		if ends[0].Distance(ends[1]) > 1 {
			d.Line(Dimension, ends[0].Toward(way, 0.7), ends[1].Toward(way, 1.2))
		}
	}
	gap, width := from.Distance(to), Width(text, dimensionText, false)
	along := angleOf(from, to)
	middle := Point{(from.X + to.X) / 2, (from.Y + to.Y) / 2}.Toward(angle+90, 0.7)
	if gap >= 2.5*arrow {
		d.Line(Dimension, from, to)
		d.Head(Dimension, from, along+180, arrow)
		d.Head(Dimension, to, along, arrow)
	} else {
		d.Line(Dimension, from.Toward(along, -2*arrow), to.Toward(along, 2*arrow))
		d.Head(Dimension, from, along, arrow)
		d.Head(Dimension, to, along+180, arrow)
	}
	if gap < width+1 {
		middle = to.Toward(along, 2*arrow+width/2+0.8).Toward(angle+90, 0.7)
		d.Line(Dimension, to, to.Toward(along, 2*arrow+width+1.2))
	}
	d.Add(Text{Layer: Lettering, At: middle, Size: dimensionText, Angle: angle, Align: Middle, S: text})
}

// Leader draws a line from what a note speaks of to the note.
func (d *Drawing) Leader(from, to Point, text string) {
	d.Arrow(Dimension, to, from)
	align, shift := Left, 1.0
	if to.X < from.X {
		align, shift = Right, -1
	}
	d.Add(Text{Layer: Lettering, At: to.Plus(shift, -0.35*dimensionText), Size: dimensionText, Align: align, S: text})
}
