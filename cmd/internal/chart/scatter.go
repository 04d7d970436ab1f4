package chart

import (
	"gonum.org/v1/plot/vg"
)

// Scatter is a front: designs as points over two figures.
type Scatter struct {
	X, Y   Axis
	Points []Point
	Width  float64 // Small or Wide
}

// Point is one design. Sheet points are solid and links; the others hollow.
type Point struct {
	X, Y  float64
	Tip   string // what a pointer or a screen reader is told
	Href  string // of its sheet; empty: none
	Label string // written beside it: knee, chosen
	Ring  Ring
}

// Ring is what a point of note is set in.
type Ring int

// The rings.
const (
	NoRing Ring = iota
	KneeRing
	ChosenRing
)

// Size implements Figure.
func (s *Scatter) Size() (w, h float64) {
	if s.Width == Wide {
		return Wide, 400
	}
	return Small, 300
}

// Draw implements Figure.
func (s *Scatter) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := s.Size()
	f := newFrame(w, h, s.X, s.Y, s.legend().rows())
	f.draw(b)
	for pass := range 2 {
		for i := range s.Points {
			if p := &s.Points[i]; (p.Href != "") == (pass == 1) {
				b.linked(p.Href, p.Tip, func() { s.point(b, f, p) })
			}
		}
	}
	for i := range s.Points {
		s.label(b, f, &s.Points[i])
	}
	s.legend().draw(b, at{edge, h - edge - textSize*0.75})
}

func (s *Scatter) legend() *legend {
	g := &legend{room: s.Width - 2*edge}
	sheets, others, knee, chosen := 0, 0, false, false
	for _, p := range s.Points {
		if p.Href != "" {
			sheets++
		} else {
			others++
		}
		knee, chosen = knee || p.Ring == KneeRing, chosen || p.Ring == ChosenRing
	}
	if sheets > 0 {
		g.mark("with a sheet", pens[0], false)
	}
	if others > 0 {
		g.mark("without", pens[0], true)
	}
	if knee {
		g.mark("knee", pen{tone: ink, marker: Diamond}, true)
	}
	if chosen {
		g.mark("chosen", pen{tone: pens[1].tone, marker: Square}, true)
	}
	return g
}

func (s *Scatter) point(b brush, f frame, p *Point) {
	q := f.place(p.X, p.Y)
	switch p.Ring {
	case KneeRing:
		b.mark(Diamond, q, 8, ink, true)
	case ChosenRing:
		b.mark(Square, q, 8.5, pens[1].tone, true)
	}
	b.mark(Disc, q, 3.6, pens[0].tone, p.Href == "")
}

// label writes a point's label where it stays inside the frame.
func (s *Scatter) label(b brush, f frame, p *Point) {
	if p.Label == "" {
		return
	}
	q := f.place(p.X, p.Y)
	a, dx := left, 13.0
	if q.x+dx+textWidth(p.Label, textSize) > f.right {
		a, dx = right, -13
	}
	b.haloed(p.Label, at{q.x + dx, max(q.y-14, f.bottom+4)}, textSize, a, ink)
}
