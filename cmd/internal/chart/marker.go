package chart

import (
	"image/color"
	"math"
)

// Marker is the shape of a point.
type Marker int

// The markers.
const (
	Disc Marker = iota
	Square
	Triangle
	Diamond
	Cross
)

// corners of the markers of straight sides, about the middle, for radius 1;
// areas are near to the disc's.
var corners = map[Marker][]at{
	Square:   {{-0.88, -0.88}, {0.88, -0.88}, {0.88, 0.88}, {-0.88, 0.88}},
	Triangle: {{-1.1, -0.75}, {1.1, -0.75}, {0, 1.25}},
	Diamond:  {{-1.25, 0}, {0, -1.25}, {1.25, 0}, {0, 1.25}},
}

// mark draws a marker: solid, or hollow with a white inside.
func (b brush) mark(m Marker, p at, radius float64, tone color.Color, hollow bool) {
	if m == Cross {
		b.stroke(strong, tone, nil)
		b.line(at{p.x - radius, p.y - radius}, at{p.x + radius, p.y + radius})
		b.line(at{p.x - radius, p.y + radius}, at{p.x + radius, p.y - radius})
		return
	}
	inside := tone
	if hollow {
		inside = paper
	}
	outline := make([]at, 0, 5)
	for _, q := range corners[m] {
		outline = append(outline, at{p.x + radius*q.x, p.y + radius*q.y})
	}
	if m == Disc {
		b.disc(p, radius, inside)
	} else {
		b.fill(inside, outline...)
	}
	b.stroke(1.2, tone, nil)
	if m == Disc {
		b.arc(p, radius, 0, 2*math.Pi)
	} else {
		b.line(append(outline, outline[0], outline[1])...)
	}
}

// ringed draws the outline of a marker alone, so that one sees what lies in
// it.
func (b brush) ringed(m Marker, p at, radius float64, tone color.Color) {
	b.stroke(1.6, tone, nil)
	if m == Disc {
		b.arc(p, radius, 0, 2*math.Pi)
		return
	}
	var outline []at
	for _, q := range corners[m] {
		outline = append(outline, at{p.x + radius*q.x, p.y + radius*q.y})
	}
	b.line(append(outline, outline[0], outline[1])...)
}
