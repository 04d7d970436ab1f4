package chart

import (
	"image/color"
	"math"
	"strings"
	"sync"
	"unicode/utf8"

	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/font/liberation"
	"gonum.org/v1/plot/vg"
)

// at is a place on a figure.
type at struct{ x, y float64 }

func (p at) vg() vg.Point { return vg.Point{X: vg.Length(p.x), Y: vg.Length(p.y)} }

// The few tones that everything is drawn in; all but the pens' are greys.
var (
	ink   = color.NRGBA{0x1b, 0x27, 0x33, 0xff}
	quiet = color.NRGBA{0x55, 0x62, 0x6e, 0xff}
	rule  = color.NRGBA{0x9a, 0xa5, 0xaf, 0xff}
	grid  = color.NRGBA{0xdf, 0xe4, 0xe8, 0xff}
	wash  = color.NRGBA{0xec, 0xf1, 0xf5, 0xff}
	paper = color.NRGBA{0xff, 0xff, 0xff, 0xff}
	alarm = color.NRGBA{0xa6, 0x1c, 0x1c, 0xff}
)

// pen is how one of several things is told from the others: by tone, dash
// and marker at once, so that it survives grey print and any eye.
type pen struct {
	tone   color.NRGBA
	dash   []vg.Length
	marker Marker
}

// Tones after Okabe and Ito, 2008, darkened until thin lines read on white.
var pens = []pen{
	{tone: color.NRGBA{0x00, 0x5a, 0x9c, 0xff}, marker: Disc},
	{tone: color.NRGBA{0xc2, 0x4a, 0x00, 0xff}, marker: Square, dash: []vg.Length{6, 3}},
	{tone: color.NRGBA{0x00, 0x7a, 0x5a, 0xff}, marker: Triangle, dash: []vg.Length{2, 2.5}},
	{tone: color.NRGBA{0x8a, 0x3a, 0x78, 0xff}, marker: Diamond, dash: []vg.Length{8, 3, 2, 3}},
}

// Sizes of text and strokes.
const (
	titleSize = 12.0
	textSize  = 11.0
	tickSize  = 10.0

	hairline = 0.6
	thin     = 1.0
	strong   = 1.8
)

// align is the part of a text's width that lies left of its anchor.
type align float64

const (
	left   align = 0
	centre align = 0.5
	right  align = 1
)

// brush draws on a canvas in the words of this package.
type brush struct{ c vg.Canvas }

var faces = sync.OnceValue(func() *font.Cache { return font.NewCache(liberation.Collection()) })

func face(size float64) font.Face {
	return faces().Lookup(font.Font{Typeface: "Liberation", Variant: "Sans"}, vg.Length(size))
}

// textWidth is the width of a line of text.
func textWidth(text string, size float64) float64 {
	f := face(size)
	return float64(f.Width(text))
}

// fitted is the text, cut where it would be wider than room.
func fitted(text string, size, room float64) string {
	if textWidth(text, size) <= room {
		return text
	}
	for text != "" {
		_, n := utf8.DecodeLastRuneInString(text)
		text = text[:len(text)-n]
		if textWidth(text+"…", size) <= room {
			break
		}
	}
	return text + "…"
}

// wrapped breaks a text into lines at its plain spaces, each as long as room
// allows.
func wrapped(text string, size, room float64) []string {
	var lines []string
	line := ""
	for word := range strings.SplitSeq(text, " ") {
		switch longer := line + " " + word; {
		case line == "":
			line = word
		case textWidth(longer, size) <= room:
			line = longer
		default:
			lines, line = append(lines, line), word
		}
	}
	return append(lines, line)
}

// text writes a line with its baseline at p.
func (b brush) text(text string, p at, size float64, a align, tone color.Color) {
	p.x -= float64(a) * textWidth(text, size)
	b.c.SetColor(tone)
	b.c.FillString(face(size), p.vg(), text)
}

// haloed writes a line on a white ground, over whatever was drawn there.
func (b brush) haloed(text string, p at, size float64, a align, tone color.Color) {
	w := textWidth(text, size)
	x := p.x - float64(a)*w
	b.fill(paper, at{x - 1.5, p.y - 2.5}, at{x + w + 1.5, p.y - 2.5}, at{x + w + 1.5, p.y + size*0.78}, at{x - 1.5, p.y + size*0.78})
	b.text(text, p, size, a, tone)
}

// stroke sets what lines look like.
func (b brush) stroke(width float64, tone color.Color, dash []vg.Length) {
	b.c.SetLineWidth(vg.Length(width))
	b.c.SetColor(tone)
	b.c.SetLineDash(dash, 0)
}

// line strokes a polyline as it was last set.
func (b brush) line(points ...at) {
	if len(points) < 2 {
		return
	}
	b.c.Stroke(polyline(points))
}

// fill fills a polygon.
func (b brush) fill(tone color.Color, points ...at) {
	p := polyline(points)
	p.Close()
	b.c.SetColor(tone)
	b.c.Fill(p)
}

func polyline(points []at) vg.Path {
	p := make(vg.Path, 0, len(points)+1)
	for i, q := range points {
		if i == 0 {
			p.Move(q.vg())
		} else {
			p.Line(q.vg())
		}
	}
	return p
}

// arc strokes a part of a circle.
func (b brush) arc(centre at, radius, from, sweep float64) {
	var p vg.Path
	p.Move(at{centre.x + radius*math.Cos(from), centre.y + radius*math.Sin(from)}.vg())
	p.Arc(centre.vg(), vg.Length(radius), from, sweep)
	b.c.Stroke(p)
}

// disc fills a circle.
func (b brush) disc(centre at, radius float64, tone color.Color) {
	var p vg.Path
	p.Move(at{centre.x + radius, centre.y}.vg())
	p.Arc(centre.vg(), vg.Length(radius), 0, 2*math.Pi)
	p.Close()
	b.c.SetColor(tone)
	b.c.Fill(p)
}

// arrow draws an arrowhead with its tip at p, pointing in a direction.
func (b brush) arrow(tip at, direction, size float64, tone color.Color) {
	wing := func(turn float64) at {
		return at{tip.x - size*math.Cos(direction+turn), tip.y - size*math.Sin(direction+turn)}
	}
	b.fill(tone, tip, wing(0.38), wing(-0.38))
}

// linker is a canvas that can make a link of what is drawn on it.
type linker interface {
	begin(href, tip string)
	end(href string)
}

// linked draws something as a link with a tip where the canvas has such.
func (b brush) linked(href, tip string, draw func()) {
	if l, ok := b.c.(linker); ok {
		l.begin(href, tip)
		defer l.end(href)
	}
	draw()
}
