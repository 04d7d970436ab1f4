package chart

// legend names pens in rows, as many as a figure's width makes of it.
type legend struct {
	room    float64
	entries []entry
}

type entry struct {
	name string
	pen  pen
	row  int
	x    float64
	bare bool // a marker without a line
	open bool // the marker is hollow
	// marked puts a marker on the line.
	marked bool
}

// Lengths of a legend's parts.
const (
	sampleWidth = 22.0
	sampleRoom  = 5.0
	entryRoom   = 14.0
)

// add appends an entry with a piece of line.
func (g *legend) add(name string, p pen) { g.put(entry{name: name, pen: p}) }

// mark appends an entry with a marker alone.
func (g *legend) mark(name string, p pen, open bool) {
	g.put(entry{name: name, pen: p, bare: true, open: open})
}

func (g *legend) put(e entry) {
	if n := len(g.entries); n > 0 {
		last := g.entries[n-1]
		e.row, e.x = last.row, last.x+last.width()+entryRoom
		if e.x+e.width() > g.room {
			e.row, e.x = last.row+1, 0
		}
	}
	g.entries = append(g.entries, e)
}

func (e entry) sample() float64 {
	if e.bare {
		return 10
	}
	return sampleWidth
}

func (e entry) width() float64 { return e.sample() + sampleRoom + textWidth(e.name, tickSize) }

func (g *legend) rows() int {
	if len(g.entries) == 0 {
		return 0
	}
	return g.entries[len(g.entries)-1].row + 1
}

// draw writes the legend with the first row's baseline at p.
func (g *legend) draw(b brush, p at) {
	for _, e := range g.entries {
		x, y := p.x+e.x, p.y-rowHeight*float64(e.row)
		if e.bare {
			b.mark(e.pen.marker, at{x + 5, y + tickSize*0.33}, 4, e.pen.tone, e.open)
		} else {
			b.stroke(strong, e.pen.tone, e.pen.dash)
			b.line(at{x, y + tickSize*0.33}, at{x + sampleWidth, y + tickSize*0.33})
			if e.marked {
				b.mark(e.pen.marker, at{x + sampleWidth/2, y + tickSize*0.33}, 2.6, e.pen.tone, e.open)
			}
		}
		b.text(e.name, at{x + e.sample() + sampleRoom, y}, tickSize, left, ink)
	}
}
