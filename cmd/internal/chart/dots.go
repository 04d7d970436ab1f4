package chart

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// Dots sets several answers to one question beside the one that counts.
type Dots struct {
	Label string // of the axis, with its unit
	Rows  []Dot
	// Mark is the answer that counts, ruled through all rows.
	Mark     float64
	MarkName string
}

// Dot is one answer; its text is written beside it.
type Dot struct {
	Name  string
	Value float64
	Text  string
}

const dotHeight = 26.0

// Size implements Figure.
func (d *Dots) Size() (w, h float64) {
	return Small, 2*edge + 3*rowHeight + dotHeight*float64(len(d.Rows))
}

// Draw implements Figure.
func (d *Dots) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := d.Size()
	names, texts := 0.0, 0.0
	values := []float64{d.Mark}
	for _, r := range d.Rows {
		names = math.Max(names, textWidth(r.Name, textSize))
		texts = math.Max(texts, textWidth(r.Text, tickSize))
		values = append(values, r.Value)
	}
	axis := Around(d.Label, values...)
	x0, x1 := edge+names+12, w-edge-texts-12
	x := func(v float64) float64 { return x0 + (x1-x0)*(v-axis.Min)/(axis.Max-axis.Min) }
	bottom := edge + 2*rowHeight
	top := bottom + dotHeight*float64(len(d.Rows))
	ticks, decimals := Ticks(axis.Min, axis.Max, 5)
	for _, t := range ticks {
		b.stroke(hairline, grid, nil)
		b.line(at{x(t), bottom}, at{x(t), top})
		b.text(tickText(t, decimals), at{x(t), bottom - tickRoom - tickSize*0.75}, tickSize, centre, quiet)
	}
	b.stroke(1.4, ink, nil)
	b.line(at{x(d.Mark), bottom}, at{x(d.Mark), top})
	half := textWidth(d.MarkName, tickSize) / 2
	b.text(d.MarkName, at{math.Min(math.Max(x(d.Mark), edge+half), w-edge-half), h - edge - tickSize}, tickSize, centre, ink)
	for i, r := range d.Rows {
		y := top - dotHeight*(float64(i)+0.5)
		p := pens[i%len(pens)]
		b.text(r.Name, at{edge, y - textSize*0.35}, textSize, left, ink)
		b.stroke(thin, p.tone, nil)
		b.line(at{x(d.Mark), y}, at{x(r.Value), y})
		b.mark(p.marker, at{x(r.Value), y}, 4, p.tone, false)
		b.text(r.Text, at{w - edge, y - tickSize*0.35}, tickSize, right, quiet)
	}
	b.text(axis.Label, at{(x0 + x1) / 2, edge}, textSize, centre, ink)
}
