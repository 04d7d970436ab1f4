package chart

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// FeedView is the winding seen from the feed, along the axis: from behind the
// plane towards the open end, the riser at the top.
type FeedView struct{ *Winding }

const (
	feedDrawing = 150.0 // height of the drawing at the most
	arrowRoom   = 16.0  // around the winding, for its arrow
)

func (v FeedView) scale() float64 {
	reach := v.wide()
	if v.Plate > 0 {
		reach = v.across()
	}
	return feedDrawing / 2 / reach
}

// Size implements Figure.
func (v FeedView) Size() (w, h float64) {
	return Small, 2*edge + 3*rowHeight + 14 + feedDrawing + 2*arrowRoom
}

// Draw implements Figure.
func (v FeedView) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := v.Size()
	s := v.scale()
	o := at{w / 2, h - edge - rowHeight - arrowRoom - feedDrawing/2 - 2}
	if v.Plate > 0 {
		b.stroke(thin, rule, nil)
		b.arc(o, v.Plate/2*s, 0, 2*math.Pi)
	}
	b.stroke(hairline, rule, []vg.Length{8, 3, 2, 3})
	reach := v.wide()*s + 8
	b.line(at{o.x - reach, o.y}, at{o.x + reach, o.y})
	b.line(at{o.x, o.y - reach}, at{o.x, o.y + reach})
	v.wire(b, o, s)
	v.turn(b, o, s)
	foot := at{o.x + v.Wire[0][1]*s, o.y + v.Wire[0][0]*s}
	b.mark(Disc, foot, 3.5, pens[1].tone, false)
	// Beside the riser where the arrow is not.
	if v.Right {
		b.text("feed", at{foot.x - 9, foot.y + 5}, tickSize, right, ink)
	} else {
		b.text("feed", at{foot.x + 9, foot.y + 5}, tickSize, left, ink)
	}
	b.text(v.Turn, at{w / 2, edge + rowHeight + 6}, textSize, centre, ink)
	b.scaleBar(at{edge, edge + 4}, s, w/4)
}

// wire draws the winding from the open end to the feed, what is nearer
// darker.
func (v FeedView) wire(b brush, o at, s float64) {
	points := make([]at, len(v.Wire))
	for i, p := range v.Wire {
		points[i] = at{o.x + p[1]*s, o.y + p[0]*s}
	}
	// The first turn lies nearest.
	first := 1
	for turned := 0.0; first < len(v.Wire)-1 && turned < 2*math.Pi; first++ {
		p, q := v.Wire[first], v.Wire[first+1]
		turned += math.Abs(math.Atan2(p[0]*q[1]-p[1]*q[0], p[0]*q[0]+p[1]*q[1]))
	}
	b.stroke(v.wireWidth(s), rule, nil)
	b.line(points[first:]...)
	b.stroke(v.wireWidth(s), ink, nil)
	b.line(points[:first+1]...)
	b.disc(points[len(points)-1], v.wireWidth(s)/2, rule)
}

// turn is the arrow outside the winding that says which way it goes.
func (v FeedView) turn(b brush, o at, s float64) {
	const from, sweep = 15 * math.Pi / 180, 75 * math.Pi / 180
	r := v.wide()*s + 10
	hand := 1.0
	if !v.Right {
		hand = -1
	}
	angle := func(turned float64) float64 { return math.Pi/2 - hand*turned }
	b.stroke(strong, pens[1].tone, nil)
	b.arc(o, r, angle(from), -hand*(sweep-from))
	tip := angle(sweep)
	b.arrow(at{o.x + r*math.Cos(tip) - hand*(-math.Sin(tip))*5, o.y + r*math.Sin(tip) - hand*math.Cos(tip)*5}, tip-hand*math.Pi/2, 11, pens[1].tone)
}
