package workshop

import (
	"math"

	"turnwise/cmd/internal/workshop/drawing"
)

// smith is a Smith chart, whole or a part of it, at a place.
type smith struct {
	centre drawing.Point // of the picture, mm
	radius float64       // mm from the centre of the whole chart to its rim
	shown  float64       // mm: radius of the picture; the rest is cut off
	about  complex128    // the reflection in the middle of the picture
}

// point is where a reflection lies.
func (s smith) point(g complex128) drawing.Point {
	g -= s.about
	return s.centre.Plus(real(g)*s.radius, imag(g)*s.radius)
}

// window is the square about the picture.
func (s smith) window() drawing.Window {
	return drawing.Window{Min: s.centre.Plus(-s.shown, -s.shown), Max: s.centre.Plus(s.shown, s.shown)}
}

// lines are the resistances and reactances of the grid, relative to the
// reference.
var lines = []float64{0.2, 0.5, 1, 2, 5}

// grid draws rim, resistance circles, reactance arcs and circles of equal
// VSWR.
func (s smith) grid(d *drawing.Drawing, dense bool) {
	g := new(drawing.Drawing)
	values := lines
	if dense {
		values = []float64{0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1, 1.2, 1.4, 1.6, 1.8, 2, 2.5, 3, 3.5, 4, 5, 6, 8, 10}
	}
	g.Circle(drawing.Outline, s.point(0), s.radius)
	g.Line(drawing.Grid, s.point(-1), s.point(1))
	for _, r := range values {
		g.Circle(drawing.Grid, s.point(complex(r/(1+r), 0)), s.radius/(1+r))
	}
	for _, x := range values {
		s.reactance(g, x)
		s.reactance(g, -x)
	}
	d.Place(g.Within(s.window()), 0, 0)
}

// reactance draws the arc of one reactance inside the rim.
func (s smith) reactance(d *drawing.Drawing, x float64) {
	const n = 160
	points := make([]drawing.Point, n+1)
	for i := range points {
		// Resistance from 0 to infinity, evenly spread over the arc.
		u := float64(i) / n
		z := complex(math.Tan(u*math.Pi/2*0.9999), x)
		points[i] = s.point((z - 1) / (z + 1))
	}
	d.Add(drawing.Polyline{Layer: drawing.Grid, Points: points})
}

// equal draws the circle of one VSWR.
func (s smith) equal(d *drawing.Drawing, vswr float64) {
	one := new(drawing.Drawing)
	one.Circle(drawing.Check, s.point(0), s.radius*(vswr-1)/(vswr+1))
	d.Place(one.Within(s.window()), 0, 0)
}

// trace draws a curve of reflections.
func (s smith) trace(d *drawing.Drawing, l drawing.Layer, gs []complex128) {
	points := make([]drawing.Point, len(gs))
	for i, g := range gs {
		points[i] = s.point(g)
	}
	one := new(drawing.Drawing)
	one.Add(drawing.Polyline{Layer: l, Points: points})
	d.Place(one.Within(s.window()), 0, 0)
}
