package drawing

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"strconv"
	"strings"
)

// SVG writes the drawing at 1:1, one unit to the millimetre, with a margin
// about it. Every layer is a group of its name; y runs downwards there.
func (d *Drawing) SVG(margin float64) []byte {
	w := d.Bounds().Grown(margin)
	s := svgWriter{origin: Point{w.Min.X, w.Max.Y}}
	width, height := micrometres(w.Width()), micrometres(w.Height())
	fmt.Fprintf(&s.b, "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n")
	fmt.Fprintf(&s.b, "<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"%smm\" height=\"%smm\" viewBox=\"0 0 %s %s\">\n", width, height, width, height)
	for _, l := range layers {
		s.layer(l, d)
	}
	s.b.WriteString("</svg>\n")
	return s.b.Bytes()
}

// micrometres is a number of millimetres to the micrometre.
func micrometres(x float64) string {
	s := strconv.FormatFloat(x, 'f', 3, 64)
	s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	if s == "-0" {
		return "0"
	}
	return s
}

type svgWriter struct {
	b      bytes.Buffer
	origin Point
}

func (s *svgWriter) layer(l Layer, d *Drawing) {
	k := l.ink()
	open := false
	for _, e := range d.Entities {
		if layerOf(e) != l {
			continue
		}
		if !open {
			colour := fmt.Sprintf("#%02x%02x%02x", k.r, k.g, k.b)
			fmt.Fprintf(&s.b, "<g id=\"%s\" fill=\"none\" stroke=\"%s\" stroke-width=\"%s\"%s>\n", l, colour, micrometres(k.width), dashes(k.dash))
			open = true
		}
		s.entity(e, k)
	}
	if open {
		s.b.WriteString("</g>\n")
	}
}

func dashes(dash []float64) string {
	if len(dash) == 0 {
		return ""
	}
	texts := make([]string, len(dash))
	for i, x := range dash {
		texts[i] = micrometres(x)
	}
	return " stroke-dasharray=\"" + strings.Join(texts, " ") + "\""
}

func layerOf(e Entity) Layer {
	switch e := e.(type) {
	case Line:
		return e.Layer
	case Arc:
		return e.Layer
	case Polyline:
		return e.Layer
	case Text:
		return e.Layer
	}
	panic("drawing: an entity without a layer")
}

func (s *svgWriter) pair(p Point) (x, y string) {
	return micrometres(p.X - s.origin.X), micrometres(s.origin.Y - p.Y)
}

func (s *svgWriter) entity(e Entity, k ink) {
	switch e := e.(type) {
	case Line:
		x1, y1 := s.pair(e.A)
		x2, y2 := s.pair(e.B)
		fmt.Fprintf(&s.b, "<line x1=\"%s\" y1=\"%s\" x2=\"%s\" y2=\"%s\"/>\n", x1, y1, x2, y2)
	case Arc:
		if e.Sweep == 360 {
			x, y := s.pair(e.Centre)
			fmt.Fprintf(&s.b, "<circle cx=\"%s\" cy=\"%s\" r=\"%s\"/>\n", x, y, micrometres(e.Radius))
			return
		}
		s.arc(e)
	case Polyline:
		s.polyline(e, k)
	case Text:
		s.text(e, k)
	}
}

func (s *svgWriter) arc(a Arc) {
	x1, y1 := s.pair(a.Centre.Toward(a.From, a.Radius))
	x2, y2 := s.pair(a.Centre.Toward(a.From+a.Sweep, a.Radius))
	large := 0
	if a.Sweep > 180 {
		large = 1
	}
	r := micrometres(a.Radius)
	fmt.Fprintf(&s.b, "<path d=\"M %s %s A %s %s 0 %d 0 %s %s\"/>\n", x1, y1, r, r, large, x2, y2)
}

func (s *svgWriter) polyline(p Polyline, k ink) {
	name, paint := "polyline", ""
	if p.Closed {
		name = "polygon"
	}
	if p.Filled {
		paint = fmt.Sprintf(" fill=\"#%02x%02x%02x\" stroke=\"none\"", k.r, k.g, k.b)
	}
	if p.Width > 0 {
		paint += " stroke-width=\"" + micrometres(p.Width) + "\""
	}
	texts := make([]string, len(p.Points))
	for i, q := range p.Points {
		x, y := s.pair(q)
		texts[i] = x + "," + y
	}
	fmt.Fprintf(&s.b, "<%s points=\"%s\"%s/>\n", name, strings.Join(texts, " "), paint)
}

func (s *svgWriter) text(t Text, k ink) {
	x, y := s.pair(t.At)
	anchor := [...]string{"start", "middle", "end"}[t.Align]
	weight, turn := "", ""
	if t.Bold {
		weight = " font-weight=\"bold\""
	}
	if t.Angle != 0 {
		turn = fmt.Sprintf(" transform=\"rotate(%s %s %s)\"", micrometres(-t.Angle), x, y)
	}
	fmt.Fprintf(&s.b, "<text x=\"%s\" y=\"%s\" font-family=\"Liberation Sans, sans-serif\" font-size=\"%s\" text-anchor=\"%s\" fill=\"#%02x%02x%02x\" stroke=\"none\"%s%s>",
		x, y, micrometres(t.Size), anchor, k.r, k.g, k.b, weight, turn)
	// A buffer takes everything it is given.
	_ = xml.EscapeText(&s.b, []byte(t.S))
	s.b.WriteString("</text>\n")
}
