package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
	"turnwise/objectives"
)

// sheet is what every page of the workshop sheet draws from.
type sheet struct {
	*Settled
	former  *former
	trim    *trimChart
	power   Power
	margins objectives.Margins
	stock   objectives.Stock
}

// leaf is a page being drawn: its name and scale stand in the title block.
type leaf struct {
	*drawing.Page
	name, scale string
}

// The frame about a page and the title block inside it, mm.
const (
	frameLeft   = 15.0
	frameRight  = 10.0
	frameTop    = 10.0
	frameBottom = 10.0
	titleHeight = 27.0

	left   = frameLeft + 2
	right  = drawing.A4Width - frameRight - 2
	top    = drawing.A4Height - frameTop - 2
	bottom = frameBottom + titleHeight + 2
	across = right - left
)

// Sizes of text, mm.
const (
	body    = 3.0
	small   = 2.5
	heading = 4.0
)

// pages are the pages of the sheet, in order, with their title blocks.
func (s *sheet) pages() []*drawing.Page {
	leaves := []leaf{s.viewsPage()}
	leaves = append(leaves, s.windingPages()...)
	leaves = append(leaves, s.feedPage())
	if s.Design.Feed.Strip.Turns > 0 {
		leaves = append(leaves, s.stripPage())
	}
	leaves = append(leaves, s.platePage())
	if s.Design.Ground.Kind == models.Cup {
		leaves = append(leaves, s.cupPage())
	}
	leaves = append(leaves, s.testPage(), s.trimPage(), s.cautionsPage())
	pages := make([]*drawing.Page, len(leaves))
	for i, l := range leaves {
		s.titleBlock(l, i+1, len(leaves))
		pages[i] = l.Page
	}
	return pages
}

func newLeaf(name, scale string) leaf {
	l := leaf{Page: new(drawing.Page), name: name, scale: scale}
	l.Rectangle(drawing.Outline, drawing.Point{X: frameLeft, Y: frameBottom}, drawing.A4Width-frameLeft-frameRight, drawing.A4Height-frameTop-frameBottom)
	return l
}

// field is one box of the title block.
type field struct {
	width       float64
	label, text string
}

func (s *sheet) titleBlock(l leaf, number, of int) {
	title := s.Design.Title
	if title == "" {
		title = "untitled"
	}
	scale := l.scale
	if scale == "" {
		scale = "–"
	}
	rows := [][]field{
		{{95, "title", title}, {45, "design", s.Design.ID()}, {45, "sheet", fmt.Sprintf("%d of %d", number, of)}},
		{{95, "this sheet", l.name}, {45, "units", "mm, degrees"}, {45, "scale", scale}},
		{{140, "general tolerance", s.tolerance()}, {45, "rounded from design", s.Original}},
		{{60, "made by", ""}, {60, "checked by", ""}, {65, "date", ""}},
	}
	height := titleHeight / float64(len(rows))
	for i, row := range rows {
		y := frameBottom + titleHeight - height*float64(i+1)
		x := frameLeft
		for _, f := range row {
			l.Rectangle(drawing.Outline, drawing.Point{X: x, Y: y}, f.width, height)
			l.Write(drawing.Point{X: x + 1, Y: y + height - 2.3}, 1.9, f.label)
			l.Write(drawing.Point{X: x + 1, Y: y + 1.3}, body, drawing.Fit(f.text, f.width-2, body, false))
			x += f.width
		}
	}
}

// Tolerances where no brief states its margins, in wavelengths: practice.
const (
	generalTolerance = 0.003
	feedTolerance    = 0.0015
)

// tolerance says how exactly to make what has no tolerance of its own.
func (s *sheet) tolerance() string {
	if m := s.margins; m.Any() {
		return fmt.Sprintf("diameter ±%s, spacing ±%s a turn, riser ±%s (the brief's margins); angles ±2°", bought(m.Diameter), bought(m.Spacing), bought(m.FeedHeight))
	}
	tenth := func(share float64) string {
		return fixed(math.Max(0.1, math.Round(1e4*share*s.wavelength())/10), 1)
	}
	return fmt.Sprintf("±%s; heights of the first turn and the riser ±%s; angles ±2°", tenth(generalTolerance), tenth(feedTolerance))
}

// wavelength at mid-band, m.
func (s *sheet) wavelength() float64 { return models.LightSpeed / s.Design.Band.Mid() }

// scales are those of technical drawings (ISO 5455).
var scales = []struct {
	name  string
	value float64
}{
	{"50:1", 50}, {"20:1", 20}, {"10:1", 10}, {"5:1", 5}, {"2:1", 2}, {"1:1", 1}, {"1:2", 0.5}, {"1:5", 0.2}, {"1:10", 0.1}, {"1:20", 0.05}, {"1:50", 0.02}, {"1:100", 0.01}, {"1:200", 0.005},
	{"1:500", 0.002}, {"1:1000", 0.001}, {"1:10000", 0.0001},
}

// fitScale is the largest scale at which width and height, mm, fit the room.
func fitScale(width, height, room, tall float64) (name string, value float64) {
	for _, s := range scales {
		if width*s.value <= room && height*s.value <= tall {
			return s.name, s.value
		}
	}
	last := scales[len(scales)-1]
	return last.name, last.value
}

// fitted is a page whose picture takes as much of tall, mm, as leaves room for
// the words under it.
func fitted(tall float64, page func(tall float64) (leaf, float64)) leaf {
	for least := tall / 2; ; tall -= 4 {
		if l, y := page(tall); y >= bottom || tall <= least {
			return l
		}
	}
}
