// Package drawing holds flat drawings in millimetres, x to the right and y
// upwards, and writes them as pages of a PDF, as SVG and as DXF R12. What is
// drawn does not know what it is written as.
package drawing

import "math"

// Point is a place on a drawing, mm.
type Point struct{ X, Y float64 }

// Plus is the point moved by x and y.
func (p Point) Plus(x, y float64) Point { return Point{p.X + x, p.Y + y} }

// Toward is the point at a distance in a direction, degrees
// counter-clockwise from x.
func (p Point) Toward(angle, distance float64) Point {
	sin, cos := math.Sincos(angle * math.Pi / 180)
	return Point{p.X + distance*cos, p.Y + distance*sin}
}

// Distance is how far two points are apart.
func (p Point) Distance(q Point) float64 { return math.Hypot(q.X-p.X, q.Y-p.Y) }

// Entity is a Line, an Arc, a Polyline or a Text.
type Entity interface {
	// moved is the entity shifted by x and y.
	moved(x, y float64) Entity
	// within is what of the entity lies inside a window.
	within(w Window) []Entity
	// bounds is the least window that holds the entity.
	bounds() Window
}

// Line is a straight line.
type Line struct {
	Layer Layer
	A, B  Point
}

// Arc is part of a circle from an angle on, counter-clockwise, both in
// degrees. A sweep of 360 is the whole circle.
type Arc struct {
	Layer       Layer
	Centre      Point
	Radius      float64
	From, Sweep float64
}

// Polyline is a chain of straight lines.
type Polyline struct {
	Layer  Layer
	Points []Point
	Closed bool
	Filled bool    // with the layer's ink; closed ones only
	Width  float64 // mm; 0: the layer's
}

// Text is one line of writing. Its place is the left end, the middle or the
// right end of its baseline.
type Text struct {
	Layer Layer
	At    Point
	Size  float64 // of the font, mm
	Angle float64 // degrees counter-clockwise
	Align Align
	Bold  bool
	S     string
}

// Align is which part of a text stands at its place.
type Align int

// The alignments.
const (
	Left Align = iota
	Middle
	Right
)

// Drawing is a list of entities, later ones over earlier ones.
type Drawing struct{ Entities []Entity }

// Add puts entities on top.
func (d *Drawing) Add(es ...Entity) { d.Entities = append(d.Entities, es...) }

// Line draws a straight line.
func (d *Drawing) Line(l Layer, a, b Point) { d.Add(Line{l, a, b}) }

// Circle draws a whole circle.
func (d *Drawing) Circle(l Layer, centre Point, radius float64) {
	d.Add(Arc{Layer: l, Centre: centre, Radius: radius, Sweep: 360})
}

// Rectangle draws the outline of a rectangle from its lower left corner.
func (d *Drawing) Rectangle(l Layer, at Point, width, height float64) {
	d.Add(Polyline{Layer: l, Closed: true, Points: []Point{at, at.Plus(width, 0), at.Plus(width, height), at.Plus(0, height)}})
}

// Disc draws a filled circle.
func (d *Drawing) Disc(l Layer, centre Point, radius float64) {
	d.Add(Polyline{Layer: l, Closed: true, Filled: true, Points: Arc{Centre: centre, Radius: radius, Sweep: 360}.chain()})
}

// Write puts a line of text.
func (d *Drawing) Write(at Point, size float64, s string) {
	d.Add(Text{Layer: Lettering, At: at, Size: size, S: s})
}

// Place adds another drawing, shifted by x and y.
func (d *Drawing) Place(other *Drawing, x, y float64) {
	for _, e := range other.Entities {
		d.Add(e.moved(x, y))
	}
}

// Bounds is the least window that holds everything; an empty drawing has the
// zero Window.
func (d *Drawing) Bounds() Window {
	if len(d.Entities) == 0 {
		return Window{}
	}
	w := d.Entities[0].bounds()
	for _, e := range d.Entities[1:] {
		w = w.with(e.bounds())
	}
	return w
}

func (l Line) moved(x, y float64) Entity {
	l.A, l.B = l.A.Plus(x, y), l.B.Plus(x, y)
	return l
}

func (a Arc) moved(x, y float64) Entity {
	a.Centre = a.Centre.Plus(x, y)
	return a
}

func (p Polyline) moved(x, y float64) Entity {
	points := make([]Point, len(p.Points))
	for i, q := range p.Points {
		points[i] = q.Plus(x, y)
	}
	p.Points = points
	return p
}

func (t Text) moved(x, y float64) Entity {
	t.At = t.At.Plus(x, y)
	return t
}

// chord is the greatest distance of a chain from the arc it stands for, mm.
const chord = 0.01

// chain is the arc as points so close together that no eye tells.
func (a Arc) chain() []Point {
	step := 30.0
	if a.Radius > chord {
		step = min(step, 2*math.Acos(1-chord/a.Radius)*180/math.Pi)
	}
	n := max(int(math.Ceil(math.Abs(a.Sweep)/step)), 1)
	points := make([]Point, n+1)
	for i := range points {
		points[i] = a.Centre.Toward(a.From+a.Sweep*float64(i)/float64(n), a.Radius)
	}
	return points
}
