package chart

import (
	"fmt"
	"image/color"
	"math"

	"gonum.org/v1/plot/vg"
)

// Trim is a part of a Smith chart, enlarged until one sees what moves a
// reflection where; beside it what its arrows stand for.
type Trim struct {
	Reference float64 // Ω
	// Traces have their pens by their place, as elsewhere.
	Traces []Reach
	// Arrows are numbered, the first one is drawn strong and written out.
	Arrows []Arrow
	// Notes are paragraphs under the arrows' key.
	Notes []string
	// Marks name the frequencies of the small and of the large markers.
	Marks [2]string
}

// Reach is the course of a reflection over frequency.
type Reach struct {
	Name string
	G    []complex128
	// Ring is one that runs round a place and has no markers; Open has a
	// large hollow marker, a target; Tipped has none where arrows end on it.
	Ring, Open, Tipped bool
}

// Arrow leads from one reflection to another.
type Arrow struct {
	From, To complex128
	// Name is written at the strong arrow and in the key, Says in the key
	// alone.
	Name, Says string
}

// The trim chart's measures.
const (
	trimSide   = 384.0 // of its square window
	trimBeside = 34.0  // room for ohms left and right
	trimUnder  = 14.0  // and below and above
	trimKey    = edge + 2*trimBeside + trimSide + 10
	arrowEntry = 26.0 // of the key, before its words
)

func (t *Trim) keyRoom() float64 { return Wide - edge - trimKey }

// Size implements Figure.
func (t *Trim) Size() (w, h float64) {
	return Wide, 2*edge + 2*trimUnder + trimSide + rowHeight*float64(2+t.legend().rows())
}

func (t *Trim) legend() *legend {
	g := &legend{room: Wide - 2*edge}
	for i, r := range t.Traces {
		p := pens[i%len(pens)]
		switch {
		case r.Ring || r.Tipped:
			g.add(r.Name, p)
		default:
			g.put(entry{name: r.Name, pen: p, marked: true, open: r.Open})
		}
	}
	return g
}

// window is the middle and half the side of what is shown: what happens at
// mid-band, and the traces whole where that does not make it much smaller.
func (t *Trim) window() (middle complex128, half float64) {
	var mid, whole bounds
	for _, r := range t.Traces {
		if !r.Ring {
			mid.add(r.G[len(r.G)/2])
		}
		for _, g := range r.G {
			whole.add(g)
			if r.Ring {
				mid.add(g)
			}
		}
	}
	for _, a := range t.Arrows {
		mid.add(a.From)
		mid.add(a.To)
		whole.add(a.To)
	}
	middle, half = mid.square()
	if m, all := whole.square(); all <= wholeTraces*half {
		middle, half = m, all
	}
	if half *= 1.2; half >= 0.8 {
		return 0, 1.02
	}
	return middle, math.Max(half, leastHalf)
}

// Whole traces are shown where they make the picture no more than wholeTraces
// times as coarse; it is never finer than leastHalf.
const (
	wholeTraces = 2.2
	leastHalf   = 0.005
)

// bounds are those of reflections.
type bounds struct {
	some                   bool
	left, right, low, high float64
}

func (b *bounds) add(g complex128) {
	x, y := real(g), imag(g)
	if !b.some {
		*b = bounds{true, x, x, y, y}
	}
	b.left, b.right, b.low, b.high = math.Min(b.left, x), math.Max(b.right, x), math.Min(b.low, y), math.Max(b.high, y)
}

func (b *bounds) square() (middle complex128, half float64) {
	return complex((b.left+b.right)/2, (b.low+b.high)/2), math.Max(b.right-b.left, b.high-b.low) / 2
}

// Draw implements Figure.
func (t *Trim) Draw(c vg.Canvas) {
	b := brush{c}
	_, h := t.Size()
	middle, half := t.window()
	f := frame{left: edge + trimBeside, right: edge + trimBeside + trimSide, bottom: edge + rowHeight + trimUnder, top: edge + rowHeight + trimUnder + trimSide,
		x: Axis{Min: real(middle) - half, Max: real(middle) + half}, y: Axis{Min: imag(middle) - half, Max: imag(middle) + half}}
	place := func(g complex128) at { return f.place(real(g), imag(g)) }
	var taken labels
	enlarged{f, t.Reference, middle, half}.draw(b, &taken)
	for i, r := range t.Traces {
		r.line(b, f, pens[i%len(pens)], place)
	}
	for i := len(t.Arrows) - 1; i >= 0; i-- {
		t.Arrows[i].draw(b, f, place, i == 0)
	}
	for i, r := range t.Traces {
		r.marks(b, f, pens[i%len(pens)], place)
		taken.along(place, r.G...)
	}
	for _, a := range t.Arrows {
		taken.along(place, a.From, a.To)
	}
	for i := range t.Arrows {
		t.Arrows[i].label(b, f, i, place, &taken)
	}
	b.text("trim chart, "+t.Marks[1], at{edge, f.top + trimUnder + 4}, textSize, left, ink)
	b.text(fmt.Sprintf("resistance and reactance, Ω; enlarged %.3g times", 1/half), at{(f.left + f.right) / 2, edge}, textSize, centre, ink)
	t.key(b, f.top)
	t.legend().draw(b, at{edge, h - edge - textSize*0.75})
}

// line strokes a trace where it is seen.
func (r *Reach) line(b brush, f frame, p pen, place func(complex128) at) {
	points := make([]at, len(r.G))
	for i, g := range r.G {
		points[i] = place(g)
	}
	width := 2.0
	if r.Ring {
		width = 1.2
	}
	b.stroke(width, p.tone, p.dash)
	for _, run := range f.runs(points) {
		b.line(run...)
	}
}

// marks shows the lower end of the band small and its middle large.
func (r *Reach) marks(b brush, f frame, p pen, place func(complex128) at) {
	if r.Ring {
		return
	}
	if first := place(r.G[0]); len(r.G) > 1 && f.holds(first) {
		b.mark(p.marker, first, 2.2, p.tone, false)
	}
	mid := place(r.G[len(r.G)/2])
	switch {
	case r.Tipped || !f.holds(mid):
	case r.Open:
		b.ringed(p.marker, mid, 6.5, p.tone)
	default:
		b.mark(p.marker, mid, 4, p.tone, false)
	}
}

// draw strokes the arrow, its tip where it ends.
func (a *Arrow) draw(b brush, f frame, place func(complex128) at, best bool) {
	from, to := place(a.From), place(a.To)
	p, q, seen := f.clipped(from, to)
	if !seen || from == to {
		return
	}
	width, head, tone := 1.0, 6.0, quiet
	if best {
		width, head, tone = 2.4, 11.0, ink
	}
	direction, length := math.Atan2(to.y-from.y, to.x-from.x), math.Hypot(to.x-from.x, to.y-from.y)
	head = math.Min(head, 0.7*length)
	b.linked("", a.Name+" "+a.Says, func() {
		if q == to {
			q = at{to.x - 0.7*head*math.Cos(direction), to.y - 0.7*head*math.Sin(direction)}
			b.arrow(to, direction, head, tone)
		}
		b.stroke(width, tone, nil)
		b.line(p, q)
	})
}

// label writes the arrow's number beyond its tip, on the nearest free place;
// with its name where it is the first and there is room.
func (a *Arrow) label(b brush, f frame, i int, place func(complex128) at, taken *labels) {
	from, to := place(a.From), place(a.To)
	if !f.holds(to) {
		return
	}
	texts := []string{fmt.Sprint(i + 1)}
	if i == 0 {
		texts = []string{texts[0] + "  " + a.Name, texts[0]}
	}
	toward := math.Atan2(to.y-from.y, to.x-from.x)
	for _, text := range texts {
		if p, ok := taken.beside(f, to, toward, text); ok {
			b.haloed(text, p, tickSize, left, ink)
			return
		}
	}
}

// key lists the arrows and the notes below a height.
func (t *Trim) key(b brush, y float64) {
	y -= textSize
	for i, a := range t.Arrows {
		width, head, tone := 1.0, 6.0, quiet
		if i == 0 {
			width, head, tone = 2.4, 9.0, ink
		}
		tip := at{trimKey + arrowEntry - 6, y + tickSize*0.33}
		b.stroke(width, tone, nil)
		b.line(at{trimKey, tip.y}, at{tip.x - 0.7*head, tip.y})
		b.arrow(tip, 0, head, tone)
		y = t.paragraph(b, fmt.Sprint(i+1, "  ", a.Name), y, arrowEntry, textSize, ink)
		y = t.paragraph(b, a.Says, y, arrowEntry, tickSize, quiet) - 5
	}
	for _, n := range append([]string{t.markNote()}, t.Notes...) {
		y = t.paragraph(b, n, y-6, 0, tickSize, quiet)
	}
}

// markNote says which markers stand for which frequency.
func (t *Trim) markNote() string {
	if t.Marks[0] == "" {
		return "Markers and arrows at " + t.Marks[1] + "."
	}
	return fmt.Sprintf("Small markers at %s, large ones and arrows at %s.", t.Marks[0], t.Marks[1])
}

// paragraph writes wrapped lines from y downwards and returns the next one's.
func (t *Trim) paragraph(b brush, text string, y, inset, size float64, tone color.Color) float64 {
	for _, line := range wrapped(text, size, t.keyRoom()-inset) {
		b.text(line, at{trimKey + inset, y}, size, left, tone)
		y -= rowHeight
	}
	return y
}
