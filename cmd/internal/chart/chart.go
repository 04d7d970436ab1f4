// Package chart draws what a person would rather look at than read: lines
// over frequency, a Smith chart, polar cuts, a front, a winding to scale. It
// knows no antennas: figures take plain numbers and finished labels.
//
// One unit is a point on paper and a pixel on a screen. Every figure is drawn
// on gonum's vector canvas; [SVG] and [PNG] put it on one. The same figure
// always gives the same bytes.
package chart

import (
	"bytes"
	"fmt"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/vgimg"
)

// Figure is something to look at. Draw keeps inside 0 ≤ x ≤ w, 0 ≤ y ≤ h of
// Size; the origin is the lower left corner.
type Figure interface {
	Size() (w, h float64)
	Draw(c vg.Canvas)
}

// Widths of figures: Small ones stand beside each other and can be read on a
// telephone, Wide ones take a page's whole width.
const (
	Small = 340.0
	Wide  = 680.0
)

// dotsPerInch gives a PNG two dots a unit.
const dotsPerInch = 144

// PNG is the figure as a picture on white.
func PNG(f Figure) ([]byte, error) {
	w, h := f.Size()
	c := vgimg.NewWith(vgimg.UseWH(vg.Length(w), vg.Length(h)), vgimg.UseDPI(dotsPerInch))
	f.Draw(c)
	var b bytes.Buffer
	if _, err := (vgimg.PngCanvas{Canvas: c}).WriteTo(&b); err != nil {
		return nil, fmt.Errorf("cannot make a picture: %w", err)
	}
	return b.Bytes(), nil
}

// Titled is a figure with a title over it, for a file that stands alone.
type Titled struct {
	Title string
	Figure
}

// titleHeight is the room of a title, and titleInset its distance from the
// left edge.
const (
	titleHeight = 26.0
	titleInset  = 8.0
)

// Size implements Figure.
func (t Titled) Size() (w, h float64) {
	w, h = t.Figure.Size()
	return w, h + titleHeight
}

// Draw implements Figure.
func (t Titled) Draw(c vg.Canvas) {
	w, h := t.Figure.Size()
	b := brush{c}
	b.text(fitted(t.Title, titleSize, w-2*titleInset), at{titleInset, h + 8}, titleSize, left, ink)
	t.Figure.Draw(c)
}
