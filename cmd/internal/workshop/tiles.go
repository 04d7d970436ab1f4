package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
)

// The bands about a tile, mm: room for check bars and words at the left and
// bottom, and what printers cannot print on.
const (
	tileLeft   = 18.0
	tileBottom = 22.0
	tileEdge   = 10.0
	overlap    = 10.0 // of neighbouring tiles
)

// tiling is a drawing cut into pages.
type tiling struct {
	landscape     bool
	width, height float64 // of a cell, mm
	columns, rows int
	origin        drawing.Point
}

// newTiling takes the way of the paper that needs fewer pages.
func newTiling(b drawing.Window) tiling {
	upright, across := tilingOf(b, false), tilingOf(b, true)
	if across.count() < upright.count() {
		return across
	}
	return upright
}

func tilingOf(b drawing.Window, landscape bool) tiling {
	page := drawing.Page{Landscape: landscape}
	width, height := page.Size()
	t := tiling{
		landscape: landscape,
		width:     width - tileLeft - tileEdge - overlap,
		height:    height - tileBottom - tileEdge - overlap,
	}
	t.columns = max(int(math.Ceil(b.Width()/t.width)), 1)
	t.rows = max(int(math.Ceil(b.Height()/t.height)), 1)
	spare := drawing.Point{X: float64(t.columns)*t.width - b.Width(), Y: float64(t.rows)*t.height - b.Height()}
	t.origin = b.Min.Plus(-spare.X/2, -spare.Y/2)
	return t
}

// count is the number of cells.
func (t tiling) count() int { return t.columns * t.rows }

// cell is a cell of the tiling without its overlap.
func (t tiling) cell(column, row int) drawing.Window {
	at := t.origin.Plus(float64(column)*t.width, float64(row)*t.height)
	return drawing.Window{Min: at, Max: at.Plus(t.width, t.height)}
}

// templatePages are the template's pages, row by row from the top. A page
// that would be empty is left away.
func templatePages(d *drawing.Drawing, name string) []*drawing.Page {
	t := newTiling(d.Bounds())
	var pages []*drawing.Page
	for row := t.rows - 1; row >= 0; row-- {
		for column := range t.columns {
			if p := t.page(d, column, row, name); p != nil {
				pages = append(pages, p)
			}
		}
	}
	return pages
}

// page draws one tile with its overlap, match marks and check bars.
func (t tiling) page(d *drawing.Drawing, column, row int, name string) *drawing.Page {
	cell := t.cell(column, row)
	window := cell.Grown(overlap / 2)
	part := d.Within(window)
	if len(part.Entities) == 0 {
		return nil
	}
	x, y := tileLeft-window.Min.X, tileBottom-window.Min.Y
	p := &drawing.Page{Landscape: t.landscape, Inset: new(drawing.Drawing), Frame: drawing.Window{Min: window.Min.Plus(x, y), Max: window.Max.Plus(x, y)}}
	p.Inset.Place(part, x, y)
	t.match(p, column, row, x, y)
	checkBar(&p.Drawing, drawing.Point{X: 13, Y: tileBottom}, 90)
	checkBar(&p.Drawing, drawing.Point{X: tileLeft, Y: 13}, 0)
	words := fmt.Sprintf("%s: row %d of %d from the top, column %d of %d. Print at 100 %%.", name, t.rows-row, t.rows, column+1, t.columns)
	p.Add(drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: tileLeft, Y: 8}, Size: 2.6, S: drawing.Fit(words, 180, 2.6, false)})
	if t.count() > 1 {
		p.Add(drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: tileLeft + bar + 5, Y: 12.5}, Size: 2.4, S: "lay equal letters on each other; trim at the dashes"})
	}
	return p
}

// match draws the cell's border, where the tile is trimmed, and a lettered
// mark on every corner it shares with a neighbour.
func (t tiling) match(p *drawing.Page, column, row int, x, y float64) {
	if t.count() == 1 {
		return
	}
	cell := t.cell(column, row)
	low, high := cell.Min.Plus(x, y), cell.Max.Plus(x, y)
	side := func(shared bool, a, b drawing.Point) {
		if shared {
			p.Line(drawing.Axis, a, b)
		}
	}
	corners := [4]drawing.Point{low, {X: high.X, Y: low.Y}, high, {X: low.X, Y: high.Y}}
	side(row > 0, corners[0], corners[1])
	side(column < t.columns-1, corners[1], corners[2])
	side(row < t.rows-1, corners[2], corners[3])
	side(column > 0, corners[3], corners[0])
	for i, at := range corners {
		j, k := column, row
		if i == 1 || i == 2 {
			j++
		}
		if i >= 2 {
			k++
		}
		if edge := (j == 0 || j == t.columns) && (k == 0 || k == t.rows); edge {
			continue // a corner of the whole, shared with nobody
		}
		p.Circle(drawing.Check, at, 2)
		p.Cross(drawing.Check, at, 4)
		p.Add(drawing.Text{Layer: drawing.Lettering, At: at.Plus(1.2, 2.2), Size: 2.6, Bold: true, S: letters(k*(t.columns+1) + j)})
	}
}

// letters counts A … Z, AA, AB …
func letters(n int) string {
	s := ""
	for ; n >= 0; n = n/26 - 1 {
		s = string(rune('A'+n%26)) + s
	}
	return s
}
