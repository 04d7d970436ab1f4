package chart

import (
	"image/color"
	"math"
)

// frame is the box of a chart with two straight axes.
type frame struct {
	x, y                     Axis
	left, right, bottom, top float64
}

// Room around a frame.
const (
	edge      = 8.0  // of the figure, kept free
	rowHeight = 15.0 // of a line of text
	tickRoom  = 5.0  // between an axis and its numbers
)

// newFrame lays a frame into a figure: the label of y stands over it, so that
// nothing has to be read sideways, the given rows over that; x's label under
// it.
func newFrame(w, h float64, x, y Axis, rows int) frame {
	ticks, decimals := y.ticks(yTicks)
	widest := 0.0
	for _, t := range ticks {
		widest = math.Max(widest, textWidth(tickText(t, decimals), tickSize))
	}
	return frame{x: x, y: y,
		left: edge + widest + tickRoom, right: w - edge - 8,
		bottom: edge + 2*rowHeight, top: h - edge - rowHeight*float64(1+rows) - 4,
	}
}

// Ticks of x lie at least tickApart from each other; y has yTicks at the most.
const (
	tickApart = 45.0
	yTicks    = 7
)

// place is where a pair of values comes to lie.
func (f frame) place(x, y float64) at {
	return at{
		f.left + (f.right-f.left)*(x-f.x.Min)/(f.x.Max-f.x.Min),
		f.bottom + (f.top-f.bottom)*(y-f.y.Min)/(f.y.Max-f.y.Min),
	}
}

// draw rules the frame, its grid and its axes.
func (f frame) draw(b brush) {
	xs, xd := f.x.ticks(int((f.right - f.left) / tickApart))
	ys, yd := f.y.ticks(yTicks)
	b.stroke(hairline, grid, nil)
	for _, x := range xs {
		b.line(f.place(x, f.y.Min), f.place(x, f.y.Max))
	}
	for _, y := range ys {
		b.line(f.place(f.x.Min, y), f.place(f.x.Max, y))
	}
	b.stroke(hairline, rule, nil)
	b.line(at{f.left, f.bottom}, at{f.right, f.bottom}, at{f.right, f.top}, at{f.left, f.top}, at{f.left, f.bottom}, at{f.right, f.bottom})
	for _, x := range xs {
		b.text(tickText(x, xd), at{f.place(x, 0).x, f.bottom - tickRoom - tickSize*0.85}, tickSize, centre, quiet)
	}
	for _, y := range ys {
		b.text(tickText(y, yd), at{f.left - tickRoom, f.place(0, y).y - tickSize*0.35}, tickSize, right, quiet)
	}
	b.text(f.x.Label, at{(f.left + f.right) / 2, edge}, textSize, centre, ink)
	b.text(f.y.Label, at{edge, f.top + 8}, textSize, left, ink)
}

// shade tints the frame between two values of x.
func (f frame) shade(b brush, from, to float64, tone color.Color) {
	from, to = math.Max(from, f.x.Min), math.Min(to, f.x.Max)
	if from < to {
		b.fill(tone, f.place(from, f.y.Min), f.place(to, f.y.Min), f.place(to, f.y.Max), f.place(from, f.y.Max))
	}
}

// clipped is the part of a segment inside the frame.
func (f frame) clipped(p, q at) (at, at, bool) {
	// Liang and Barsky, 1984: the parameters at which the line enters and
	// leaves each side.
	from, to := 0.0, 1.0
	for _, side := range [4][2]float64{
		{p.x - q.x, p.x - f.left}, {q.x - p.x, f.right - p.x},
		{p.y - q.y, p.y - f.bottom}, {q.y - p.y, f.top - p.y},
	} {
		towards, room := side[0], side[1]
		switch {
		case towards == 0 && room < 0:
			return p, q, false
		case towards < 0:
			from = math.Max(from, room/towards)
		case towards > 0:
			to = math.Min(to, room/towards)
		}
	}
	if from > to {
		return p, q, false
	}
	along := func(t float64) at { return at{p.x + t*(q.x-p.x), p.y + t*(q.y-p.y)} }
	return along(from), along(to), true
}

// curve strokes values against x, only what lies inside the frame; a value
// that is none breaks it.
func (f frame) curve(b brush, xs, ys []float64) {
	points := make([]at, len(xs))
	for i := range xs {
		points[i] = f.place(xs[i], ys[i])
	}
	for _, run := range f.runs(points) {
		b.line(run...)
	}
}

// runs are the parts of a polyline inside the frame; a place that is none
// breaks it.
func (f frame) runs(points []at) (runs [][]at) {
	var run []at
	flush := func() {
		if len(run) > 0 {
			runs = append(runs, run)
		}
		run = nil
	}
	for i := 1; i < len(points); i++ {
		if math.IsNaN(points[i-1].y) || math.IsNaN(points[i].y) {
			flush()
			continue
		}
		p, q, inside := f.clipped(points[i-1], points[i])
		if !inside {
			flush()
			continue
		}
		if len(run) == 0 || run[len(run)-1] != p {
			flush()
			run = append(run, p)
		}
		run = append(run, q)
	}
	flush()
	return runs
}

// holds reports whether a place lies inside the frame or on its edge.
func (f frame) holds(p at) bool {
	return p.x >= f.left && p.x <= f.right && p.y >= f.bottom && p.y <= f.top
}
