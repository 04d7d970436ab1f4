package drawing

import "math"

// Window is a rectangle with its sides along the axes.
type Window struct{ Min, Max Point }

// Width and Height are the sides.
func (w Window) Width() float64 { return w.Max.X - w.Min.X }

// Height is the side along y.
func (w Window) Height() float64 { return w.Max.Y - w.Min.Y }

// Holds reports whether a point lies inside or on the edge.
func (w Window) Holds(p Point) bool {
	return p.X >= w.Min.X && p.X <= w.Max.X && p.Y >= w.Min.Y && p.Y <= w.Max.Y
}

// Grown is the window with every side moved outwards.
func (w Window) Grown(by float64) Window {
	return Window{w.Min.Plus(-by, -by), w.Max.Plus(by, by)}
}

// Overlaps reports whether two windows have an inside in common.
func (w Window) Overlaps(o Window) bool {
	return w.Min.X < o.Max.X && o.Min.X < w.Max.X && w.Min.Y < o.Max.Y && o.Min.Y < w.Max.Y
}

func (w Window) with(o Window) Window {
	return Window{
		Point{math.Min(w.Min.X, o.Min.X), math.Min(w.Min.Y, o.Min.Y)},
		Point{math.Max(w.Max.X, o.Max.X), math.Max(w.Max.Y, o.Max.Y)},
	}
}

func around(points []Point) Window {
	w := Window{points[0], points[0]}
	for _, p := range points[1:] {
		w = w.with(Window{p, p})
	}
	return w
}

// Within is what of the drawing lies inside the window: lines are cut at its
// edge, arcs become chains, a text stays whole where any of it is inside.
func (d *Drawing) Within(w Window) *Drawing {
	out := new(Drawing)
	for _, e := range d.Entities {
		out.Add(e.within(w)...)
	}
	return out
}

func (l Line) bounds() Window     { return around([]Point{l.A, l.B}) }
func (a Arc) bounds() Window      { return around(a.chain()) }
func (p Polyline) bounds() Window { return around(p.Points) }

func (t Text) bounds() Window {
	c := t.Corners()
	return around(c[:])
}

func (l Line) within(w Window) []Entity {
	a, b, ok := w.cut(l.A, l.B)
	if !ok {
		return nil
	}
	return []Entity{Line{l.Layer, a, b}}
}

func (a Arc) within(w Window) []Entity {
	b := a.bounds()
	if w.Holds(b.Min) && w.Holds(b.Max) {
		return []Entity{a}
	}
	return Polyline{Layer: a.Layer, Points: a.chain()}.within(w)
}

func (p Polyline) within(w Window) []Entity {
	b := p.bounds()
	if w.Holds(b.Min) && w.Holds(b.Max) {
		return []Entity{p}
	}
	if p.Filled {
		return nil // half a dot or arrowhead tells nothing
	}
	points := p.Points
	if p.Closed {
		points = append(points[:len(points):len(points)], points[0])
	}
	var out []Entity
	var run []Point
	flush := func() {
		if len(run) > 1 {
			out = append(out, Polyline{Layer: p.Layer, Points: run, Width: p.Width})
		}
		run = nil
	}
	for i := 1; i < len(points); i++ {
		from, to, ok := w.cut(points[i-1], points[i])
		if !ok {
			flush()
			continue
		}
		if len(run) == 0 || run[len(run)-1] != from {
			flush()
			run = []Point{from}
		}
		run = append(run, to)
	}
	flush()
	return out
}

func (t Text) within(w Window) []Entity {
	if t.bounds().Overlaps(w) {
		return []Entity{t}
	}
	return nil
}

// cut is the part of a straight line inside the window: the stretch of its
// parameter that every side leaves over.
func (w Window) cut(a, b Point) (Point, Point, bool) {
	from, to := 0.0, 1.0
	inside := func(start, step, low, high float64) bool {
		if step == 0 {
			return start >= low && start <= high
		}
		in, out := (low-start)/step, (high-start)/step
		if in > out {
			in, out = out, in
		}
		from, to = math.Max(from, in), math.Min(to, out)
		return from < to
	}
	if !inside(a.X, b.X-a.X, w.Min.X, w.Max.X) || !inside(a.Y, b.Y-a.Y, w.Min.Y, w.Max.Y) {
		return a, b, false
	}
	at := func(t float64) Point { return Point{a.X + t*(b.X-a.X), a.Y + t*(b.Y-a.Y)} }
	start, end := a, b
	if from > 0 {
		start = at(from)
	}
	if to < 1 {
		end = at(to)
	}
	return start, end, true
}
