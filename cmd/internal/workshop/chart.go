package workshop

import (
	"math"

	"turnwise/cmd/internal/workshop/drawing"
)

// axis is one axis of a chart: its range, and how its values are written.
type axis struct {
	title    string
	from, to float64
	step     float64
	digits   int
}

// ticked is an axis over a range with about so many round steps.
func ticked(title string, from, to float64, parts int) axis {
	raw := (to - from) / float64(parts)
	size := math.Pow(10, math.Floor(math.Log10(raw)))
	step := 10 * size
	for _, m := range []float64{1, 2, 5} {
		if m*size >= raw*0.999 {
			step = m * size
			break
		}
	}
	return axis{title: title, from: from, to: to, step: step, digits: max(0, int(-math.Floor(math.Log10(step)+1e-9)))}
}

// ticks are the round values inside the range.
func (a axis) ticks() []float64 {
	var out []float64
	for k := math.Ceil(a.from/a.step - 1e-9); k*a.step <= a.to+1e-9*a.step; k++ {
		out = append(out, k*a.step)
	}
	return out
}

// at is the place of a value on an axis so many millimetres long.
func (a axis) at(x, length float64) float64 { return (x - a.from) / (a.to - a.from) * length }

// plot is a chart with a frame, its lower left corner at a place.
type plot struct {
	at            drawing.Point
	width, height float64
	x, y          axis
}

func (p plot) point(x, y float64) drawing.Point {
	return p.at.Plus(p.x.at(x, p.width), p.y.at(y, p.height))
}

// frame draws grid, ticks and titles.
func (p plot) frame(d *drawing.Drawing) {
	for _, x := range p.x.ticks() {
		q := p.point(x, p.y.from)
		d.Line(drawing.Grid, q, q.Plus(0, p.height))
		d.Add(drawing.Text{Layer: drawing.Lettering, At: q.Plus(0, -3.4), Size: small, Align: drawing.Middle, S: fixed(x, p.x.digits)})
	}
	for _, y := range p.y.ticks() {
		q := p.point(p.x.from, y)
		d.Line(drawing.Grid, q, q.Plus(p.width, 0))
		d.Add(drawing.Text{Layer: drawing.Lettering, At: q.Plus(-1.2, -0.9), Size: small, Align: drawing.Right, S: fixed(y, p.y.digits)})
	}
	d.Rectangle(drawing.Outline, p.at, p.width, p.height)
	d.Add(drawing.Text{Layer: drawing.Lettering, At: p.at.Plus(p.width/2, -7.4), Size: small, Align: drawing.Middle, S: p.x.title})
	d.Add(drawing.Text{Layer: drawing.Lettering, At: p.at.Plus(-9, p.height/2), Size: small, Angle: 90, Align: drawing.Middle, S: p.y.title})
}

// curve draws points, cut at the frame.
func (p plot) curve(d *drawing.Drawing, l drawing.Layer, points []drawing.Point) {
	one := new(drawing.Drawing)
	one.Add(drawing.Polyline{Layer: l, Points: points})
	d.Place(one.Within(drawing.Window{Min: p.at, Max: p.at.Plus(p.width, p.height)}), 0, 0)
}
