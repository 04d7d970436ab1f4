package chart

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"image"
	"image/color"
	"math"
	"strconv"
	"strings"

	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
)

// SVG is the figure as a document of its own or as part of a page: no style
// sheet and no style attribute, so that it passes a strict content policy;
// generic fonts, each text held to the width it was laid out for, so that no
// browser's font makes it leave its place. Label is what a screen reader says.
func SVG(f Figure, label string) []byte {
	w, h := f.Size()
	s := newSVG(h)
	role := "img"
	if _, links := f.(*Scatter); links {
		role = "group" // an image has nothing inside that could be reached
	}
	fmt.Fprintf(&s.b, `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 %s %s" width="%s" height="%s" role="%s" font-family="Arial, Helvetica, 'Liberation Sans', sans-serif" fill="none">`,
		num(w), num(h), num(w), num(h), role)
	s.b.WriteString("<title>" + escape(label) + "</title>")
	f.Draw(s)
	s.b.WriteString("</svg>")
	return s.b.Bytes()
}

// matrix is an affine map: x' = a x + c y + e, y' = b x + d y + f.
type matrix struct{ a, b, c, d, e, f float64 }

var identity = matrix{a: 1, d: 1}

// after is the map that does n first.
func (m matrix) after(n matrix) matrix {
	return matrix{
		m.a*n.a + m.c*n.b, m.b*n.a + m.d*n.b,
		m.a*n.c + m.c*n.d, m.b*n.c + m.d*n.d,
		m.a*n.e + m.c*n.f + m.e, m.b*n.e + m.d*n.f + m.f,
	}
}

func (m matrix) of(p vg.Point) (x, y float64) {
	return m.a*float64(p.X) + m.c*float64(p.Y) + m.e, m.b*float64(p.X) + m.d*float64(p.Y) + m.f
}

type state struct {
	width float64
	dash  []vg.Length
	from  vg.Length
	color color.Color
	m     matrix
}

// svg is a canvas that writes presentation attributes alone.
type svg struct {
	b      bytes.Buffer
	height float64
	state
	stack []state
}

var _ vg.Canvas = (*svg)(nil)

func newSVG(height float64) *svg {
	return &svg{height: height, state: state{width: 1, color: color.Black, m: identity}}
}

func (s *svg) SetLineWidth(w vg.Length)                  { s.width = float64(w) }
func (s *svg) SetLineDash(d []vg.Length, from vg.Length) { s.dash, s.from = d, from }
func (s *svg) Push()                                     { s.stack = append(s.stack, s.state) }
func (s *svg) Translate(p vg.Point)                      { s.m = s.m.after(matrix{1, 0, 0, 1, float64(p.X), float64(p.Y)}) }
func (s *svg) Scale(x, y float64)                        { s.m = s.m.after(matrix{a: x, d: y}) }

func (s *svg) Rotate(rad float64) {
	sin, cos := math.Sincos(rad)
	s.m = s.m.after(matrix{cos, sin, -sin, cos, 0, 0})
}

func (s *svg) Pop() {
	last := len(s.stack) - 1
	s.state, s.stack = s.stack[last], s.stack[:last]
}

func (s *svg) SetColor(c color.Color) {
	if c == nil {
		c = color.Black
	}
	s.color = c
}

// point writes where a point comes to lie, with y downwards.
func (s *svg) point(p vg.Point) string {
	x, y := s.m.of(p)
	return num(x) + " " + num(s.height-y)
}

func (s *svg) Stroke(p vg.Path) {
	if s.width <= 0 || len(p) == 0 {
		return
	}
	fmt.Fprintf(&s.b, `<path d="%s" stroke="%s" stroke-width="%s"`, s.path(p), hex(s.color), num(s.width))
	if o := opacity(s.color); o < 1 {
		fmt.Fprintf(&s.b, ` stroke-opacity="%s"`, num(o))
	}
	if len(s.dash) > 0 {
		parts := make([]string, len(s.dash))
		for i, d := range s.dash {
			parts[i] = num(float64(d))
		}
		fmt.Fprintf(&s.b, ` stroke-dasharray="%s"`, strings.Join(parts, " "))
		if s.from != 0 {
			fmt.Fprintf(&s.b, ` stroke-dashoffset="%s"`, num(float64(s.from)))
		}
	}
	s.b.WriteString(` stroke-linejoin="round"/>`)
}

func (s *svg) Fill(p vg.Path) {
	if len(p) == 0 {
		return
	}
	fmt.Fprintf(&s.b, `<path d="%s" fill="%s"`, s.path(p), hex(s.color))
	if o := opacity(s.color); o < 1 {
		fmt.Fprintf(&s.b, ` fill-opacity="%s"`, num(o))
	}
	s.b.WriteString("/>")
}

func (s *svg) path(p vg.Path) string {
	var b strings.Builder
	for i, c := range p {
		switch c.Type {
		case vg.MoveComp:
			b.WriteString("M" + s.point(c.Pos))
		case vg.LineComp:
			if i > 0 && p[i-1].Type == vg.LineComp {
				b.WriteString(" " + s.point(c.Pos))
			} else {
				b.WriteString("L" + s.point(c.Pos))
			}
		case vg.ArcComp:
			s.arc(&b, c, i == 0)
		case vg.CurveComp:
			letter := "Q"
			if len(c.Control) == 2 {
				letter = "C"
			}
			b.WriteString(letter)
			for _, q := range c.Control {
				b.WriteString(s.point(q) + " ")
			}
			b.WriteString(s.point(c.Pos))
		case vg.CloseComp:
			b.WriteString("Z")
		}
	}
	return b.String()
}

// arc writes an arc in pieces of at most a third of a circle, since one SVG
// arc cannot be a whole one.
func (s *svg) arc(b *strings.Builder, c vg.PathComp, first bool) {
	on := func(angle float64) vg.Point {
		sin, cos := math.Sincos(angle)
		return vg.Point{X: c.Pos.X + vg.Length(float64(c.Radius)*cos), Y: c.Pos.Y + vg.Length(float64(c.Radius)*sin)}
	}
	b.WriteString(map[bool]string{true: "M", false: "L"}[first] + s.point(on(c.Start)))
	n := max(1, int(math.Ceil(math.Abs(c.Angle)/(2*math.Pi/3)-1e-9)))
	radius := float64(c.Radius) * math.Sqrt(math.Abs(s.m.a*s.m.d-s.m.b*s.m.c))
	sweep := "0"
	if c.Angle < 0 {
		sweep = "1"
	}
	for i := 1; i <= n; i++ {
		fmt.Fprintf(b, "A%s %s 0 0 %s %s", num(radius), num(radius), sweep, s.point(on(c.Start+c.Angle*float64(i)/float64(n))))
	}
}

func (s *svg) FillString(f font.Face, p vg.Point, text string) {
	if f.Font.Size == 0 || text == "" {
		return
	}
	x, y := s.m.of(p)
	fmt.Fprintf(&s.b, `<text x="%s" y="%s" font-size="%s" textLength="%s" lengthAdjust="spacingAndGlyphs" fill="%s"`,
		num(x), num(s.height-y), num(float64(f.Font.Size)), num(float64(f.Width(text))), hex(s.color))
	if turn := -math.Atan2(s.m.b, s.m.a) * 180 / math.Pi; math.Abs(turn) > 1e-9 {
		fmt.Fprintf(&s.b, ` transform="rotate(%s %s %s)"`, num(turn), num(x), num(s.height-y))
	}
	s.b.WriteString(">" + escape(text) + "</text>")
}

// DrawImage is part of the canvas; no figure holds a picture.
func (s *svg) DrawImage(vg.Rectangle, image.Image) { panic("chart: pictures are not drawn") }

// begin and end enclose what is drawn in a link with a tip.
func (s *svg) begin(href, tip string) {
	if href == "" {
		s.b.WriteString("<g>")
	} else {
		fmt.Fprintf(&s.b, `<a href="%s">`, escape(href))
	}
	s.b.WriteString("<title>" + escape(tip) + "</title>")
}

func (s *svg) end(href string) {
	if href == "" {
		s.b.WriteString("</g>")
	} else {
		s.b.WriteString("</a>")
	}
}

// num is a number to a hundredth of a unit.
func num(x float64) string {
	x = math.Round(x*100) / 100
	if x == 0 {
		return "0"
	}
	return strconv.FormatFloat(x, 'f', -1, 64)
}

func hex(c color.Color) string {
	n := color.NRGBAModel.Convert(c).(color.NRGBA)
	return fmt.Sprintf("#%02x%02x%02x", n.R, n.G, n.B)
}

func opacity(c color.Color) float64 {
	return float64(color.NRGBAModel.Convert(c).(color.NRGBA).A) / 255
}

func escape(text string) string {
	var b bytes.Buffer
	xml.EscapeText(&b, []byte(text))
	return b.String()
}
