package chart

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// Winding is an antenna to scale. Lengths in millimetres; z is the axis, away
// from the ground, and the riser stands on +x.
type Winding struct {
	// Wire is the centre line from the plane to the open end, close enough
	// for straight pieces.
	Wire     [][3]float64
	Diameter float64 // of the conductor
	// Plate is the ground's diameter, 0 for an infinite one; Rim its cup's.
	Plate, Rim float64
	// Right is the hand of the winding.
	Right bool
	// Labels: the length, and the diameters of the centre line at the feed
	// and at the open end (one for a winding of constant diameter).
	Length            string
	AtFeed, AtOpenEnd string
	// Turn says which way it winds.
	Turn string
}

func (d *Winding) top() float64 {
	top := 0.0
	for _, p := range d.Wire {
		top = math.Max(top, p[2])
	}
	return top
}

// deep is how far the antenna reaches along its axis.
func (d *Winding) deep() float64 { return math.Max(d.top()+d.Diameter, d.Rim) }

// wide is half of what the winding needs across its axis, without the plate.
func (d *Winding) wide() float64 {
	r := 0.0
	for _, p := range d.Wire {
		r = math.Max(r, math.Hypot(p[0], p[1]))
	}
	return r + d.Diameter/2
}

// across is half of what the whole antenna needs across its axis.
func (d *Winding) across() float64 { return math.Max(d.wide(), d.Plate/2) }

// wireWidth is the conductor's width on paper, never too thin to see.
func (d *Winding) wireWidth(scale float64) float64 { return math.Max(d.Diameter*scale, 1) }

// SideView is the winding seen across its axis, which points to the right:
// the near half of each turn dark, the far half pale.
type SideView struct {
	*Winding
	Width float64 // Small or Wide
}

// Room around a side view.
const (
	behind      = 22.0 // left of the plane
	beyond      = 12.0 // right of the open end
	planeMargin = 14.0 // of an infinite plane beside the winding
	tallest     = 210.0
)

func (v SideView) scale() float64 {
	return math.Min((v.Width-2*edge-behind-beyond)/v.deep(), (tallest-2*planeMargin)/(2*v.across()))
}

func (v SideView) captionRows() float64 {
	if v.AtOpenEnd == "" {
		return 1
	}
	return 2
}

// Size implements Figure.
func (v SideView) Size() (w, h float64) {
	return v.Width, 2*edge + (v.captionRows()+3)*rowHeight + 10 + 2*planeMargin + 2*v.across()*v.scale()
}

// Draw implements Figure.
func (v SideView) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := v.Size()
	s := v.scale()
	room := w - 2*edge - behind - beyond
	o := at{edge + behind + math.Max(0, (room-v.deep()*s)/2), h - edge - v.captionRows()*rowHeight - 4 - planeMargin - v.across()*s}
	place := func(p [3]float64) at { return at{o.x + p[2]*s, o.y + p[0]*s} }
	v.ground(b, o, s)
	b.stroke(hairline, rule, []vg.Length{8, 3, 2, 3})
	b.line(at{o.x - 6, o.y}, at{math.Min(o.x+v.top()*s+10, w-2), o.y})
	v.strands(b, place, s)
	v.words(b, o, s, w, h)
}

// strands draws the whole wire pale and the near halves dark over it.
func (v SideView) strands(b brush, place func([3]float64) at, s float64) {
	all := make([]at, len(v.Wire))
	for i, p := range v.Wire {
		all[i] = place(p)
	}
	b.stroke(v.wireWidth(s), rule, nil)
	b.line(all...)
	b.stroke(v.wireWidth(s), ink, nil)
	from := 0
	for i := 1; i <= len(all); i++ {
		if i < len(all) && v.Wire[i-1][1]+v.Wire[i][1] >= -1e-9 {
			continue
		}
		b.line(all[from:i]...)
		from = i
	}
}

// ground draws the plane with its back hatched, and the connector behind it.
func (v SideView) ground(b brush, o at, s float64) {
	half := v.across()*s + planeMargin
	if v.Plate > 0 {
		half = v.Plate / 2 * s
	}
	b.stroke(hairline, quiet, nil)
	for y := -half + 2; y < half-3; y += 6 {
		b.line(at{o.x, o.y + y + 5}, at{o.x - 5, o.y + y})
	}
	b.stroke(2, ink, nil)
	if v.Plate == 0 {
		b.line(at{o.x, o.y - half}, at{o.x, o.y + half})
	} else {
		rim := v.Rim * s
		b.line(at{o.x + rim, o.y - half}, at{o.x, o.y - half}, at{o.x, o.y + half}, at{o.x + rim, o.y + half})
	}
	foot := o.y + v.Wire[0][0]*s
	b.stroke(thin, ink, nil)
	for _, side := range []float64{4, -4} {
		b.line(at{o.x, foot + side}, at{o.x - 14, foot + side})
	}
	b.line(at{o.x, foot}, at{o.x - 17, foot})
}

// words are the dimensions and the scale.
func (v SideView) words(b brush, o at, s, w, h float64) {
	row := h - edge - textSize*0.75
	end := o.x + v.top()*s
	b.text(v.AtFeed, at{math.Min(o.x, w-edge-textWidth(v.AtFeed, textSize)), row}, textSize, left, ink)
	if v.AtOpenEnd != "" {
		b.text(v.AtOpenEnd, at{math.Max(end, o.x+textWidth(v.AtOpenEnd, textSize)), row - rowHeight}, textSize, right, ink)
	}
	under := o.y - v.across()*s - planeMargin
	y := under - 12
	b.stroke(hairline, quiet, nil)
	b.line(at{end, o.y - v.wide()*s - 2}, at{end, y - 4})
	b.line(at{o.x, under}, at{o.x, y - 4})
	b.dimension(at{o.x, y}, at{end, y})
	half := textWidth(v.Length, textSize) / 2
	b.haloed(v.Length, at{math.Min(math.Max((o.x+end)/2, edge+half), w-edge-half), y - textSize*0.35}, textSize, centre, ink)
	b.scaleBar(at{edge, edge + 4}, s, w/3)
}

// dimension is a line with an arrowhead at either end.
func (b brush) dimension(p, q at) {
	along := math.Atan2(q.y-p.y, q.x-p.x)
	b.stroke(hairline, quiet, nil)
	b.line(p, q)
	b.arrow(q, along, 6, quiet)
	b.arrow(p, along+math.Pi, 6, quiet)
}

// scaleBar is a round number of millimetres, at most the given width.
func (b brush) scaleBar(p at, scale, most float64) {
	length := math.Pow(10, math.Floor(math.Log10(most/scale)))
	for _, m := range []float64{5, 2} {
		if m*length*scale <= most {
			length *= m
			break
		}
	}
	end := p.x + length*scale
	b.stroke(strong, ink, nil)
	b.line(at{p.x, p.y}, at{end, p.y})
	b.stroke(thin, ink, nil)
	for _, x := range []float64{p.x, end} {
		b.line(at{x, p.y - 3}, at{x, p.y + 3})
	}
	decimals := max(0, -int(math.Floor(math.Log10(length))))
	b.text(tickText(length, decimals)+" mm, to scale", at{end + 6, p.y - tickSize*0.35}, tickSize, left, quiet)
}
