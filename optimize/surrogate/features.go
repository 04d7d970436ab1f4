package surrogate

import (
	"math"

	"turnwise/optimize/space"
)

// features lays points out for the surfaces: every variable that can move
// and has an order once, from 0 to 1; every choice as one coordinate a name,
// so that two different names lie 1 apart.
type features struct {
	space   space.Space
	ordered []int // variables with an order
	choices []int
	size    int
}

func newFeatures(s space.Space) features {
	f := features{space: s}
	for i := range s {
		switch v := &s[i]; {
		case v.From == v.To:
		case v.Kind == space.Choice:
			f.choices = append(f.choices, i)
			f.size += v.Levels()
		default:
			f.ordered = append(f.ordered, i)
			f.size++
		}
	}
	return f
}

// of gives the point's features, first those with an order.
func (f *features) of(p space.Point) []float64 {
	u := make([]float64, f.size)
	for k, i := range f.ordered {
		v := &f.space[i]
		u[k] = (p[i] - v.From) / (v.To - v.From)
	}
	at := len(f.ordered)
	for _, i := range f.choices {
		u[at+int(p[i])] = math.Sqrt2 / 2
		at += f.space[i].Levels()
	}
	return u
}
