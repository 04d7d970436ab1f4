package drawing

// Column is a column of a table.
type Column struct {
	Title string
	Width float64 // mm
	Align Align
}

// Table is ruled rows under a header.
type Table struct {
	Columns []Column
	Rows    [][]string
	Size    float64 // of the font, mm
	Row     float64 // height of a row, mm
}

// Width is the table's width, mm.
func (t *Table) Width() float64 {
	sum := 0.0
	for _, c := range t.Columns {
		sum += c.Width
	}
	return sum
}

// Height is the table's height with its header, mm.
func (t *Table) Height() float64 { return t.Row * float64(len(t.Rows)+1) }

// Table draws a table below a place.
func (d *Drawing) Table(at Point, t *Table) {
	width, height := t.Width(), t.Height()
	for i := range len(t.Rows) + 2 {
		l := Grid
		if i < 2 || i == len(t.Rows)+1 {
			l = Outline
		}
		y := at.Y - t.Row*float64(i)
		d.Add(Polyline{Layer: l, Width: 0.13, Points: []Point{{at.X, y}, {at.X + width, y}}})
	}
	x := at.X
	for i, c := range t.Columns {
		d.Add(Polyline{Layer: Grid, Width: 0.13, Points: []Point{{x, at.Y}, {x, at.Y - height}}})
		d.cell(Point{x, at.Y}, t, c, c.Title, true)
		for j, row := range t.Rows {
			if i < len(row) {
				d.cell(Point{x, at.Y - t.Row*float64(j+1)}, t, c, row[i], false)
			}
		}
		x += c.Width
	}
	d.Add(Polyline{Layer: Grid, Width: 0.13, Points: []Point{{x, at.Y}, {x, at.Y - height}}})
}

// cellMargin is kept free at both sides of a cell, mm.
const cellMargin = 1.0

func (d *Drawing) cell(corner Point, t *Table, c Column, s string, bold bool) {
	if s == "" {
		return
	}
	s = Fit(s, c.Width-2*cellMargin+0.5, t.Size, bold)
	x := corner.X + cellMargin
	switch c.Align {
	case Middle:
		x = corner.X + c.Width/2
	case Right:
		x = corner.X + c.Width - cellMargin
	}
	d.Add(Text{Layer: Lettering, At: Point{x, corner.Y - t.Row/2 - 0.33*t.Size}, Size: t.Size, Align: c.Align, Bold: bold, S: s})
}
