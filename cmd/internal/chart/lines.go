package chart

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// Series is one line of a chart. A value that is NaN breaks it. Its place in
// the list of series decides its tone, dash and marker.
type Series struct {
	Name string
	X, Y []float64
}

// Limit is a bound that a line must keep between two values of x.
type Limit struct {
	From, To float64
	Value    float64
	AtLeast  bool // the forbidden side lies below
	Label    string
}

// Lines is a chart of lines over one axis.
type Lines struct {
	X, Y   Axis
	Series []Series
	Limits []Limit
	// Band is tinted, also where it is a single value; zero for none.
	Band [2]float64
	// Sections divide the chart by x, such as the stages of a search: each
	// begins where the one before ended.
	Sections []Section
}

// Section is a named stretch of x up to To.
type Section struct {
	Name string
	To   float64
}

const linesHeight = 232.0

// Size implements Figure.
func (l *Lines) Size() (w, h float64) {
	return Small, linesHeight + rowHeight*float64(l.legend().rows())
}

func (l *Lines) legend() *legend {
	g := &legend{room: Small - 2*edge}
	if len(l.Series) > 1 {
		for i, s := range l.Series {
			g.put(entry{name: s.Name, pen: pens[i%len(pens)], marked: true})
		}
	}
	return g
}

// Draw implements Figure.
func (l *Lines) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := l.Size()
	g := l.legend()
	f := newFrame(w, h, l.X, l.Y, g.rows())
	f.shade(b, l.Band[0], l.Band[1], wash)
	f.draw(b)
	if x := l.Band[0]; x == l.Band[1] && x != 0 {
		b.stroke(4, wash, nil)
		b.line(f.place(x, f.y.Min), f.place(x, f.y.Max))
	}
	l.sections(b, f)
	for _, m := range l.Limits {
		m.draw(b, f)
	}
	for i, s := range l.Series {
		p := pens[i%len(pens)]
		b.stroke(strong, p.tone, p.dash)
		f.curve(b, s.X, s.Y)
		if len(l.Series) > 1 {
			s.mark(b, f, p, i, len(l.Series))
		}
	}
	for _, m := range l.Limits {
		m.name(b, f)
	}
	g.draw(b, at{edge, h - edge - textSize*0.75})
}

// marksOfLine is about how many markers a line carries.
const marksOfLine = 6

// mark puts markers on a line, one of several, where its fellows have none.
func (s *Series) mark(b brush, f frame, p pen, of, several int) {
	every := max(1, len(s.X)/marksOfLine)
	for k := every * (2*of + 1) / (2 * several); k < len(s.X); k += every {
		at := f.place(s.X[k], s.Y[k])
		if f.holds(at) {
			b.mark(p.marker, at, 2.6, p.tone, false)
		}
	}
}

// sections rules the ends of the stretches and names those that have room.
func (l *Lines) sections(b brush, f frame) {
	from := l.X.Min
	for i, s := range l.Sections {
		x0, x1 := f.place(from, 0).x, f.place(math.Min(s.To, l.X.Max), 0).x
		if i < len(l.Sections)-1 {
			b.stroke(hairline, quiet, []vg.Length{3, 3})
			b.line(at{x1, f.bottom}, at{x1, f.top})
		}
		if textWidth(s.Name, tickSize) < x1-x0-4 {
			b.haloed(s.Name, at{(x0 + x1) / 2, f.bottom + 6}, tickSize, centre, quiet)
		}
		from = s.To
	}
}

// draw rules the limit with teeth on its forbidden side.
func (m Limit) draw(b brush, f frame) {
	from, to, seen := f.clipped(f.place(m.From, m.Value), f.place(m.To, m.Value))
	if !seen {
		return
	}
	side := 5.0
	if m.AtLeast {
		side = -side
	}
	b.stroke(hairline, alarm, nil)
	for x := from.x + 2; x < to.x; x += 5 {
		p, q, inside := f.clipped(at{x, from.y}, at{math.Min(x+4, to.x), from.y + side})
		if inside {
			b.line(p, q)
		}
	}
	b.stroke(1.4, alarm, nil)
	b.line(from, to)
}

// name writes the limit's label on its forbidden side, inside the frame.
func (m Limit) name(b brush, f frame) {
	from, to, seen := f.clipped(f.place(m.From, m.Value), f.place(m.To, m.Value))
	if !seen || m.Label == "" {
		return
	}
	w := textWidth(m.Label, tickSize)
	x := math.Min(math.Max((from.x+to.x)/2, f.left+w/2+3), f.right-w/2-3)
	y := from.y + 9
	if m.AtLeast && from.y-18 > f.bottom || y+tickSize > f.top {
		y = from.y - 16
	}
	b.haloed(m.Label, at{x, y}, tickSize, centre, alarm)
}
