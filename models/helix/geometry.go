package helix

import "math"

// Geometry is what the winding alone decides, SI.
type Geometry struct {
	Length     float64 // m, z of the highest point of the centre line
	WireLength float64 // m, riser included
	// Widest is the overall diameter, m: the winding's greatest with its
	// conductor (a coat and a strip counted), or the plate or cup if that is
	// wider.
	Widest float64
	// Mass is the conductor's and the plate's or cup's, kg. Coat, former and
	// what a strip differs from wire are not in it, nor is an infinite plane.
	Mass float64
	// ConductorMass is the conductor's part, kg: the winding as round wire or
	// tube, a riser of another diameter as solid wire.
	ConductorMass float64
	// BendRadius is the least along the winding, m; the corner on the riser
	// is a joint and does not count.
	BendRadius float64
}

// Geometry gives the overall figures of the curve.
func (c *Curve) Geometry() Geometry {
	foot := c.section
	if c.pin != c.conductor {
		foot = math.Pi / 4 * c.pin * c.pin
	}
	conductor := c.density * (c.section*(c.wire-c.height) + foot*c.height)
	return Geometry{
		Length:        c.Top(),
		WireLength:    c.wire,
		Widest:        c.widest(),
		Mass:          conductor + c.ground.Mass(),
		ConductorMass: conductor,
		BendRadius:    1 / c.sharpest(),
	}
}

// widest looks at the ends of pieces only: a law never leaves the range of
// its knots.
func (c *Curve) widest() float64 {
	w := 2*c.pieces[0].r[0] + c.pin
	for i := range c.pieces {
		p := &c.pieces[i]
		thick := c.conductor + 2*c.coat
		if p.from < c.strip.Turns-sameBreak {
			thick = max(thick, c.strip.Width)
		}
		a, _, _ := p.radius(0)
		b, _, _ := p.radius(p.to - p.from)
		w = max(w, 2*a+thick, 2*b+thick)
	}
	if c.ground.Finite() {
		w = max(w, c.ground.Diameter)
	}
	return w
}

// sharpest is the greatest curvature of the winding.
func (c *Curve) sharpest() float64 {
	most := 0.0
	for i := range c.pieces {
		p := &c.pieces[i]
		if p.uniform {
			most = max(most, p.curvature(0))
			continue
		}
		least := golden(0, p.to-p.from, func(x float64) float64 { return -p.curvature(x) })
		most = max(most, -least)
	}
	return most
}
