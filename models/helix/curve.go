package helix

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
)

// sameBreak is the distance in turns below which two breaks are one.
const sameBreak = 1e-9

// Curve is the centre line of a design's wire: a straight riser from the
// plane and the winding that starts on its top. Once wound it only answers,
// so any number of goroutines may ask; winding it again needs it alone.
type Curve struct {
	turns, height float64
	hand          float64 // +1 right, −1 left
	pieces        []piece
	breaks        []float64
	panels        []panel
	wire          float64 // arc length from the foot of the riser to the open end
	leastGap      float64 // lower bound of the turns' clearance, m

	conductor, coat, pin float64 // m: diameter, thickness, riser's diameter
	section              float64 // m², of the conductor's metal
	density              float64
	strip                models.Strip
	ground               models.Ground

	// Room that is used again at the next winding.
	fitter            fitter
	diameter, spacing []cubic
}

// piece is a stretch of the winding on which radius and height are
// polynomials in x = t − from.
type piece struct {
	from, to float64
	r        [4]float64
	z        [8]float64
	degree   int  // of z
	uniform  bool // constant radius and spacing
}

// Point is a point of the centre line.
type Point struct {
	Pos       r3.Vec  // m
	Tangent   r3.Vec  // unit, towards the open end
	Speed     float64 // ds/dt, m per turn
	Curvature float64 // 1/m
}

// Wind gives the centre line of a design. Its error names every fault of the
// design's dimensions, each with its remedy.
func Wind(d *models.Design) (*Curve, error) {
	c := new(Curve)
	if err := c.Wind(d); err != nil {
		return nil, err
	}
	return c, nil
}

// Wind makes c the centre line of d, using the room c already has: it
// allocates nothing in steady state for laws of one or two knots. After an
// error c is not to be used until it is wound again.
func (c *Curve) Wind(d *models.Design) error {
	if err := Check(d); err != nil {
		return err
	}
	c.turns, c.height, c.hand = d.Turns, d.Feed.Height, float64(d.Handedness)
	c.conductor, c.coat, c.pin = d.Conductor.Diameter, max(d.Insulation.Thickness, 0), d.PinDiameter()
	c.section, c.leastGap = d.Conductor.Section(), leastGap(d)
	c.density, c.strip, c.ground = d.Conductor.Material.Density, d.Feed.Strip, d.Ground
	c.diameter = c.fitter.fit(c.diameter[:0], d.Diameter, d.Turns)
	c.spacing = c.fitter.fit(c.spacing[:0], d.Spacing, d.Turns)
	c.cut(&d.Feed)
	c.join(d.Feed.Lead)
	c.measure()
	return c.cupped()
}

// cupped refuses a winding that touches or passes through the wall of its cup.
func (c *Curve) cupped() error {
	if gap := c.rim(); gap <= c.conductor/2+c.coat {
		return fmt.Errorf("ground.diameter: the winding comes to %.3g m of the cup's wall, centre line; a wider cup or a lower rim is due", gap)
	}
	return nil
}

// cut collects the breaks, in order and each once.
func (c *Curve) cut(f *models.Feed) {
	b := c.breaks[:0]
	for _, q := range c.diameter {
		b = append(b, q.from)
	}
	for _, q := range c.spacing {
		b = append(b, q.from)
	}
	if f.Lead.Turns > 0 {
		b = append(b, f.Lead.Turns)
		if f.Lead.Shape == models.Flat {
			b = append(b, f.Lead.Turns+blend)
		}
	}
	if f.Strip.Turns > 0 {
		b = append(b, f.Strip.Turns)
	}
	slices.Sort(b)
	kept := b[:0]
	last := 0.0
	for _, t := range b {
		if t-last > sameBreak && c.turns-t > sameBreak {
			kept = append(kept, t)
			last = t
		}
	}
	c.breaks = kept
}

// join lays the pieces between the breaks, each starting at the height where
// the one before it ends.
func (c *Curve) join(l models.Lead) {
	c.pieces = c.pieces[:0]
	from, z := 0.0, c.height
	for i := range len(c.breaks) + 1 {
		to := c.turns
		if i < len(c.breaks) {
			to = c.breaks[i]
		}
		p := piece{from: from, to: to}
		mid := (from + to) / 2
		p.r = at(c.diameter, mid).about(from)
		for k := range p.r {
			p.r[k] /= 2
		}
		p.climb(z, c.climb(l, from, mid))
		c.pieces = append(c.pieces, p)
		from, z = to, p.height(to-from)
	}
}

// blend is the stretch, in turns, over which a flat lead passes into the
// spacing law.
const blend = 0.25

// climb is the spacing polynomial in x = t − from of the piece about mid.
func (c *Curve) climb(l models.Lead, from, mid float64) [7]float64 {
	var s [7]float64
	law := at(c.spacing, mid).about(from)
	flat := l.Shape == models.Flat
	switch {
	case l.Turns <= 0 || mid > l.Turns && !flat || mid > l.Turns+blend:
		copy(s[:], law[:])
	case mid < l.Turns && flat:
		s[0] = l.Spacing
	case mid < l.Turns:
		// Ramp: straight from the lead's spacing to the law's at its end.
		slope := (at(c.spacing, l.Turns).value(l.Turns) - l.Spacing) / l.Turns
		s[0], s[1] = l.Spacing+slope*from, slope
	default:
		// Flat, blending: s₀ + (S − s₀)·u²(3 − 2u), u = (t − T)/blend.
		w := cubic{from: l.Turns, c: [4]float64{0, 0, 3 / (blend * blend), -2 / (blend * blend * blend)}}
		weight := w.about(from)
		law[0] -= l.Spacing
		for i, a := range law {
			for j, b := range weight {
				s[i+j] += a * b
			}
		}
		s[0] += l.Spacing
	}
	return s
}

// climb sets the height from its start and the spacing polynomial.
func (p *piece) climb(start float64, s [7]float64) {
	p.z[0], p.degree = start, 1
	for k, v := range s {
		p.z[k+1] = v / float64(k+1)
		if v != 0 {
			p.degree = k + 1
		}
	}
	p.uniform = p.degree == 1 && p.r[1] == 0 && p.r[2] == 0 && p.r[3] == 0
}

// radius is r with its first two derivatives at x.
func (p *piece) radius(x float64) (r, dr, ddr float64) {
	c := &p.r
	r = c[0] + x*(c[1]+x*(c[2]+x*c[3]))
	dr = c[1] + x*(2*c[2]+x*3*c[3])
	ddr = 2*c[2] + x*6*c[3]
	return r, dr, ddr
}

// height is z at x.
func (p *piece) height(x float64) float64 {
	z := p.z[p.degree]
	for k := p.degree - 1; k >= 0; k-- {
		z = z*x + p.z[k]
	}
	return z
}

// rise is z with its first two derivatives at x.
func (p *piece) rise(x float64) (z, dz, ddz float64) {
	for k := p.degree; k >= 0; k-- {
		ddz = ddz*x + dz
		dz = dz*x + z
		z = z*x + p.z[k]
	}
	return z, dz, 2 * ddz
}

// speed is ds/dt at x.
func (p *piece) speed(x float64) float64 {
	r, dr, _ := p.radius(x)
	_, dz, _ := p.rise(x)
	w := 2 * math.Pi * r
	return math.Sqrt(w*w + dr*dr + dz*dz)
}

// curvature at x, from |r' × r”|/|r'|³ in cylindrical components.
func (p *piece) curvature(x float64) float64 {
	r, dr, ddr := p.radius(x)
	_, dz, ddz := p.rise(x)
	return bend(r, dr, ddr, dz, ddz)
}

func bend(r, dr, ddr, dz, ddz float64) float64 {
	const w = 2 * math.Pi
	v := r3.Vec{X: dr, Y: w * r, Z: dz}
	a := r3.Vec{X: ddr - w*w*r, Y: 2 * w * dr, Z: ddz}
	n := r3.Norm(v)
	return r3.Norm(r3.Cross(v, a)) / (n * n * n)
}

// on finds the piece that holds t and the place x on it. Beyond the ends the
// winding's ends are meant.
func (c *Curve) on(t float64) (*piece, float64) {
	t = min(max(t, 0), c.turns)
	i := len(c.pieces) - 1
	for i > 0 && c.pieces[i].from > t {
		i--
	}
	p := &c.pieces[i]
	return p, t - p.from
}

// At is the point of the winding at parameter t in turns; t beyond an end
// gives that end.
func (c *Curve) At(t float64) Point {
	p, x := c.on(t)
	r, dr, ddr := p.radius(x)
	z, dz, ddz := p.rise(x)
	w := 2 * math.Pi * r
	t = p.from + x
	// Whole turns are taken off first, so that a whole turn is exactly one.
	sin, cos := math.Sincos(2 * math.Pi * (t - math.Floor(t)))
	sin *= c.hand
	speed := math.Sqrt(w*w + dr*dr + dz*dz)
	return Point{
		Pos: r3.Vec{X: r * cos, Y: r * sin, Z: z},
		Tangent: r3.Vec{
			X: (dr*cos - c.hand*w*sin) / speed,
			Y: (dr*sin + c.hand*w*cos) / speed,
			Z: dz / speed,
		},
		Speed:     speed,
		Curvature: bend(r, dr, ddr, dz, ddz),
	}
}

// AtArc is the point at arc length s from the foot of the riser, which has
// the riser's points too; there Speed is 1 and Curvature 0.
func (c *Curve) AtArc(s float64) Point {
	if s < c.height {
		return Point{Pos: r3.Vec{X: c.pieces[0].r[0], Z: max(s, 0)}, Tangent: r3.Vec{Z: 1}, Speed: 1}
	}
	return c.At(c.Parameter(s))
}

// Turns is the winding's number of turns.
func (c *Curve) Turns() float64 { return c.turns }

// Diameter is the diameter law at t, m.
func (c *Curve) Diameter(t float64) float64 {
	p, x := c.on(t)
	r, _, _ := p.radius(x)
	return 2 * r
}

// Spacing is dz/dt at t, m per turn, the lead included.
func (c *Curve) Spacing(t float64) float64 {
	p, x := c.on(t)
	_, dz, _ := p.rise(x)
	return dz
}

// Height is z at t, m.
func (c *Curve) Height(t float64) float64 {
	p, x := c.on(t)
	return p.height(x)
}

// Top is the z of the highest point of the centre line, m. Spacing is never
// negative, so that is the open end.
func (c *Curve) Top() float64 { return c.Height(c.turns) }

// Riser is the length of the riser, m.
func (c *Curve) Riser() float64 { return c.height }

// Breaks lists the t strictly inside the winding, rising, where some
// derivative of the curve or the equivalent radius jumps: the knots of laws,
// the ends of a lead and of its blend, the end of a strip. It is the curve's
// own; read it only.
func (c *Curve) Breaks() []float64 { return c.breaks }
