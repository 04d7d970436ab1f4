package surrogate

import "math"

// copied is an output as a straight function of a figure that is learned: a
// limit and an aim are often the same figure.
type copied struct {
	figure        int
	offset, scale float64
}

// rounding is the part of a figure's range that is taken for rounding.
const rounding = 1e-9

// distinct gives the outputs that are no copies of earlier ones, and every
// output in terms of those.
func distinct(outputs [][]float64) (figures [][]float64, all []copied) {
	for _, values := range outputs {
		c, ok := find(figures, values)
		if !ok {
			c = copied{figure: len(figures), scale: 1}
			figures = append(figures, values)
		}
		all = append(all, c)
	}
	return figures, all
}

// find looks for a figure that the values are a copy of.
func find(figures [][]float64, values []float64) (copied, bool) {
	for k, f := range figures {
		if c, ok := straight(f, values); ok {
			c.figure = k
			return c, true
		}
	}
	return copied{}, false
}

// straight is the line through the ends of x that takes all of x to y.
func straight(x, y []float64) (copied, bool) {
	low, high := 0, 0
	for i := range x {
		if x[i] < x[low] {
			low = i
		}
		if x[i] > x[high] {
			high = i
		}
	}
	if x[low] == x[high] {
		return copied{}, false
	}
	c := copied{scale: (y[high] - y[low]) / (x[high] - x[low])}
	c.offset = y[low] - c.scale*x[low]
	most := rounding * math.Max(math.Abs(y[high]), math.Abs(y[low]))
	for i := range x {
		if math.Abs(c.offset+c.scale*x[i]-y[i]) > most {
			return copied{}, false
		}
	}
	return c, true
}
