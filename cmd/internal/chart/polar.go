package chart

import (
	"math"
	"strconv"

	"gonum.org/v1/plot/vg"
)

// Polar is a cut of a pattern: angle from the axis, which points up, against
// a level in decibels, linear in decibels from Floor at the middle to 0 at
// the rim.
type Polar struct {
	Cuts  []Cut
	Floor float64 // dB, negative
	// Rim says what 0 dB is.
	Rim string
	// Sides name the half-planes left and right of the axis.
	Sides [2]string
}

// Cut is one line of a polar chart: angles in degrees from −180 to 180,
// positive to the right, levels in dB below the rim.
type Cut struct {
	Name          string
	Angles, Level []float64
}

// PolarRadius is the part of the rim's radius at which a level lies.
func PolarRadius(level, floor float64) float64 {
	if math.IsNaN(level) {
		return 0
	}
	return math.Min(math.Max(1-level/floor, 0), 1)
}

// Heights of a polar chart, and the room around its rim for angles.
const (
	polarRoom = 20.0
	polarFoot = 14.0
)

// A cut carries a marker every so many rays, except near the middle, where
// they would crowd.
const (
	markEvery   = 24
	leastMarked = 0.25
)

// half reports whether nothing lies behind the plane.
func (p *Polar) half() bool {
	for _, c := range p.Cuts {
		for _, a := range c.Angles {
			if math.Abs(a) > 90+1e-6 {
				return false
			}
		}
	}
	return true
}

func (p *Polar) radius() float64 { return Small/2 - edge - polarRoom - 10 }

// Size implements Figure.
func (p *Polar) Size() (w, h float64) {
	h = 2*edge + rowHeight*float64(2+p.legend().rows()) + polarRoom + p.radius() + polarFoot
	if !p.half() {
		h += p.radius()
	}
	return Small, h
}

func (p *Polar) legend() *legend {
	g := &legend{room: Small - 2*edge}
	for i, c := range p.Cuts {
		g.put(entry{name: c.Name, pen: pens[i%len(pens)], marked: true})
	}
	return g
}

// Draw implements Figure.
func (p *Polar) Draw(c vg.Canvas) {
	b := brush{c}
	w, h := p.Size()
	g := p.legend()
	o := at{w / 2, h - edge - rowHeight*float64(g.rows()) - polarRoom - p.radius()}
	p.rule(b, o)
	for i, cut := range p.Cuts {
		n := pens[i%len(pens)]
		points := make([]at, len(cut.Angles))
		for k, a := range cut.Angles {
			sin, cos := math.Sincos(a * math.Pi / 180)
			r := p.radius() * PolarRadius(cut.Level[k], p.Floor)
			points[k] = at{o.x + r*sin, o.y + r*cos}
		}
		b.stroke(strong, n.tone, n.dash)
		b.line(points...)
		for k := markEvery / 2 * (i + 1); k < len(points); k += markEvery {
			if PolarRadius(cut.Level[k], p.Floor) > leastMarked {
				b.mark(n.marker, points[k], 2.6, n.tone, false)
			}
		}
	}
	p.levels(b, o)
	b.text("dB below the rim, against the angle from the axis, °", at{w / 2, edge + rowHeight}, textSize, centre, ink)
	b.text(p.Rim, at{w / 2, edge}, tickSize, centre, quiet)
	g.draw(b, at{edge, h - edge - textSize*0.75})
}

// rule draws rings every 10 dB and spokes every 30°.
func (p *Polar) rule(b brush, o at) {
	reach := math.Pi / 2
	if !p.half() {
		reach = math.Pi
	}
	radius := p.radius()
	for level := 0.0; level > p.Floor; level -= 10 {
		b.stroke(hairline, grid, nil)
		if level == 0 {
			b.stroke(thin, rule, nil)
		}
		b.arc(o, radius*PolarRadius(level, p.Floor), math.Pi/2-reach, 2*reach)
	}
	for angle := -180; angle <= 180; angle += 30 {
		a := float64(angle) * math.Pi / 180
		if math.Abs(a) > reach+1e-9 || angle == -180 {
			continue
		}
		sin, cos := math.Sincos(a)
		b.stroke(hairline, grid, nil)
		b.line(o, at{o.x + radius*sin, o.y + radius*cos})
		text := strconv.Itoa(max(angle, -angle))
		b.text(text+"°", at{o.x + (radius+5)*sin, o.y + (radius+7)*cos - tickSize*0.35}, tickSize, align(0.5-0.5*sin), quiet)
	}
	p.sides(b, o)
}

// levels name the rings.
func (p *Polar) levels(b brush, o at) {
	for level := -10.0; level > p.Floor; level -= 10 {
		r := p.radius() * PolarRadius(level, p.Floor)
		b.haloed(tickText(level, 0), at{o.x + 3 + r*0.26, o.y + r*0.966 - tickSize*0.35}, 9, centre, quiet)
	}
}

// sides name the half-planes.
func (p *Polar) sides(b brush, o at) {
	radius, y := p.radius(), o.y-polarFoot
	if p.half() {
		b.text(p.Sides[0], at{o.x - radius, y}, tickSize, left, quiet)
		b.text(p.Sides[1], at{o.x + radius, y}, tickSize, right, quiet)
		return
	}
	b.text(p.Sides[0], at{edge, y - radius}, tickSize, left, quiet)
	b.text(p.Sides[1], at{2*o.x - edge, y - radius}, tickSize, right, quiet)
}
