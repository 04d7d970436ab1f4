package workshop

import (
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
	"turnwise/models/helix"
)

// seam is the azimuth, degrees from the riser towards +y, at which the
// template's edges meet: between two station lines.
const seam = -45.0

// conical is how far a winding's radius may stray from a straight line over
// its height, m, for a cone to serve as its former.
const conical = 0.05e-3

// former is the surface that the conductor lies on, a cylinder or a cone, or
// where there is none such, four combs that hold it. Millimetres.
type former struct {
	curve  *helix.Curve
	hand   float64
	under  float64 // from the conductor's centre line to the surface
	radius float64 // of the centre line's cone at height 0
	slope  float64 // its radius by height
	combs  bool
}

// newFormer fits a former to a winding.
func newFormer(d *models.Design, c *helix.Curve) *former {
	f := &former{curve: c, hand: float64(d.Handedness), under: 1e3 * (d.Conductor.Diameter/2 + d.Insulation.Thickness)}
	var ok bool
	f.radius, f.slope, ok = straightProfile(c)
	f.combs = !ok
	return f
}

// straightProfile is the straight line of radius over height that the
// winding strays least from at its ends' slope, in mm; ok is false where it
// strays too far.
func straightProfile(c *helix.Curve) (radius, slope float64, ok bool) {
	bottom, top := c.Height(0), c.Top()
	if rise := top - bottom; rise > 1e-9 {
		slope = (c.Diameter(c.Turns()) - c.Diameter(0)) / 2 / rise
	}
	low, high := math.Inf(1), math.Inf(-1)
	n := int(math.Ceil(c.Turns() * 32))
	for i := range n + 1 {
		t := c.Turns() * float64(i) / float64(n)
		start := c.Diameter(t)/2 - slope*c.Height(t)
		low, high = math.Min(low, start), math.Max(high, start)
	}
	return 1e3 * (low + high) / 2, slope, (high-low)/2 <= conical
}

// cone reports whether the surface is a cone; else it is a cylinder.
func (f *former) cone() bool { return math.Abs(f.slope) > 1e-6 }

// tilt is the angle of the surface against the axis, radians, positive where
// it widens away from the plate.
func (f *former) tilt() float64 { return math.Atan(f.slope) }

// surface is the former's radius at a height.
func (f *former) surface(z float64) float64 {
	return f.radius + f.slope*z - f.under/math.Cos(f.tilt())
}

// Diameter is the former's diameter at a height, mm.
func (f *former) Diameter(z float64) float64 { return 2 * f.surface(z) }

// touch is where the conductor touches the surface at t, as its height and
// azimuth in degrees from the seam, 0 to 360, towards +y.
func (f *former) touch(t float64) (z, azimuth float64) {
	z = 1e3*f.curve.Height(t) + f.under*math.Sin(f.tilt())
	azimuth = math.Mod(f.hand*360*t-seam, 360)
	if azimuth < 0 {
		azimuth += 360
	}
	return z, azimuth
}

// flat unrolls a place of the surface: its height and its azimuth in degrees
// from the seam. Seen from outside, with the open end up, azimuth towards +y
// runs to the right.
func (f *former) flat(z, azimuth float64) drawing.Point {
	if !f.cone() {
		return drawing.Point{X: f.surface(z) * azimuth * math.Pi / 180, Y: z}
	}
	sin := math.Sin(f.tilt())
	along := f.surface(z) / math.Abs(sin) // from the apex
	turn := math.Abs(sin) * (azimuth - 180)
	apex := f.apex()
	if sin > 0 {
		return apex.Toward(90-turn, along)
	}
	return apex.Toward(-90+turn, along)
}

// apex is where the cone's apex lies on the flat: on the axis of the
// template, so that the middle of the plate's edge is at the origin.
func (f *former) apex() drawing.Point {
	along := f.surface(0) / math.Abs(math.Sin(f.tilt()))
	if f.slope > 0 {
		return drawing.Point{Y: -along}
	}
	return drawing.Point{Y: along}
}

// roll wraps a place of the flat back onto the former and gives the
// conductor's centre line over it, mm: the inverse of touch and flat.
func (f *former) roll(p drawing.Point) r3.Vec {
	z, azimuth := p.Y, p.X/f.surface(0)*180/math.Pi
	if f.cone() {
		apex, sin := f.apex(), math.Sin(f.tilt())
		along := apex.Distance(p)
		turn := math.Atan2(p.X, math.Copysign(1, f.slope)*(p.Y-apex.Y)) * 180 / math.Pi
		azimuth = 180 + turn/math.Abs(sin)
		// The surface's radius is straight over height: undo it.
		z = (along*math.Abs(sin) - f.surface(0)) / f.slope
	}
	sin, cos := math.Sincos((azimuth + seam) * math.Pi / 180)
	r := f.surface(z) + f.under*math.Cos(f.tilt())
	return r3.Vec{X: r * cos, Y: r * sin, Z: z - f.under*math.Sin(f.tilt())}
}

// overhang is how far the former goes past the open end, mm.
const overhang = 10.0

// head is the height at which the former ends; a cone that would come to its
// point before that ends blunt.
func (f *former) head() float64 {
	head := 1e3*f.curve.Top() + overhang
	if !f.combs && f.slope < 0 {
		const blunt = 1.0 // mm of radius
		head = math.Min(head, (f.surface(0)-blunt)/-f.slope)
	}
	return head
}
