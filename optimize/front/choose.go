package front

import "math"

// Target is a bound on one column of a table: of figures, say.
type Target struct {
	Column int
	Bound  float64
	// Most makes the bound an upper one; otherwise the column must reach it.
	Most bool
	// Scale is a difference that matters, in the column's unit, by which
	// shortfalls are compared. 0 stands for 1.
	Scale float64
}

// Headroom is by how much a row is inside the target, negative when it misses
// it, in the column's unit; NaN where the column does not apply.
func (t Target) Headroom(row []float64) float64 {
	if t.Most {
		return t.Bound - row[t.Column]
	}
	return row[t.Column] - t.Bound
}

// Met reports whether a row meets the target. A column that does not apply
// meets none.
func (t Target) Met(row []float64) bool { return t.Headroom(row) >= 0 }

// Least finds the row that has the least of one column among those that meet
// every target: the first of equals; −1 when no row does. Rows where the
// column does not apply are left out. For the most, see [Greatest].
func Least(rows [][]float64, column int, targets ...Target) int {
	return pick(rows, column, 1, targets)
}

// Greatest is as [Least], for the greatest value of the column.
func Greatest(rows [][]float64, column int, targets ...Target) int {
	return pick(rows, column, -1, targets)
}

func pick(rows [][]float64, column int, sign float64, targets []Target) int {
	best, at := math.Inf(1), -1
	for i, row := range rows {
		x := sign * row[column]
		if !math.IsNaN(x) && (at < 0 || x < best) && shortfall(row, targets) == 0 {
			best, at = x, i
		}
	}
	return at
}

// Nearest finds the row that misses the targets by the least sum of scaled
// shortfalls, the first of equals; −1 when there are no rows.
func Nearest(rows [][]float64, targets ...Target) int {
	best, at := math.Inf(1), -1
	for i, row := range rows {
		if s := shortfall(row, targets); at < 0 || s < best {
			best, at = s, i
		}
	}
	return at
}

// shortfall is 0 where every target is met and infinite where one does not
// apply.
func shortfall(row []float64, targets []Target) float64 {
	sum := 0.0
	for _, t := range targets {
		scale := t.Scale
		if scale == 0 {
			scale = 1
		}
		switch h := t.Headroom(row); {
		case math.IsNaN(h):
			return math.Inf(1)
		case h < 0:
			sum -= h / scale
		}
	}
	return sum
}

// Knee finds the member of a front where giving up a little of one aim stops
// buying much of another: the one that lies farthest on the good side of the
// flat surface through the ends of the scaled axes, the first of equals; −1
// when there are no points.
//
// Source: Das, Structural Optimization 18, 107, 1999 (memory), with the axes
// scaled by the points' own span.
func Knee(points [][]float64) int {
	if len(points) == 0 {
		return -1
	}
	axes := Span(points)
	best, at := math.Inf(1), -1
	for i, p := range points {
		sum := 0.0
		for _, u := range axes.Unit(p) {
			sum += u
		}
		if at < 0 || sum < best {
			best, at = sum, i
		}
	}
	return at
}
