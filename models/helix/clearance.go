package helix

import (
	"math"
	"slices"

	"turnwise/models"
)

// Clearance is how close the centre line comes to itself and to the ground, m.
type Clearance struct {
	// Turns is the least distance, centre to centre, between points of the
	// winding half a turn to one and a half turns apart. It is +Inf for a
	// winding of less than half a turn, which has no neighbours.
	Turns float64
	// Plane is the least height of the winding above the plane. Spacing is
	// never negative, so that is where the winding starts.
	Plane float64
	// Rim is the least distance to a cup's wall, taken for a sheet of no
	// thickness; +Inf without a cup.
	Rim float64
}

// The neighbourhood of a point, in turns further on.
const (
	nearest  = 0.5
	farthest = 1.5
)

// Clearances finds the closest approaches. Points a turn apart are searched
// from every stretch between breaks, first evenly, then closing in; the
// nearest point of the next turn lies a little before a whole turn, since
// the winding climbs. Laws that wave more than once a turn may hide an
// approach closer by up to a few parts in a thousand.
func (c *Curve) Clearances() Clearance { return c.ClearancesFrom(math.Inf(1)) }

// ClearancesFrom is [Curve.Clearances] for who only asks whether the turns are
// at least so far apart, m: where that is plain, Turns is a lower bound.
func (c *Curve) ClearancesFrom(enough float64) Clearance {
	out := Clearance{Turns: math.Inf(1), Plane: c.height, Rim: c.rim()}
	if c.turns < nearest {
		return out
	}
	if c.leastGap >= enough {
		out.Turns = c.leastGap
		return out
	}
	var room [64]float64
	ends := append(room[:0], 0, c.turns-nearest, max(c.turns-1, 0))
	for _, b := range c.breaks {
		ends = append(ends, b, b-1)
	}
	slices.Sort(ends)
	for i, a := range ends[:len(ends)-1] {
		b := ends[i+1]
		if a < 0 || b > c.turns-nearest || b-a <= sameBreak {
			continue
		}
		p, _ := c.on((a + b) / 2)
		q, _ := c.on((a+b)/2 + 1)
		if p == q && p.uniform {
			out.Turns = min(out.Turns, c.gap(a))
			continue
		}
		out.Turns = min(out.Turns, golden(a, b, c.gap))
	}
	if math.IsInf(out.Turns, 1) { // half a turn exactly
		out.Turns = c.gap(0)
	}
	return out
}

// leastGap is a lower bound of the turns' clearance. Points 1 ∓ δ/2π turns
// apart, δ ≤ π, differ in height by S(1 − δ/2π) or more and across the axis by
// 2r sin(δ/2) ≥ 2rδ/π, with the least spacing S and the least radius r; the
// sum of the squares is least at Sb/√(a² + b²), a = S/2π, b = 2r/π.
func leastGap(d *models.Design) float64 {
	s, r := slices.Min(d.Spacing), slices.Min(d.Diameter)/2
	if d.Feed.Lead.Turns > 0 {
		s = min(s, d.Feed.Lead.Spacing)
	}
	a, b := s/(2*math.Pi), 2*r/math.Pi
	return s * b / math.Hypot(a, b)
}

// rim is the least distance between the winding and the wall of a cup.
func (c *Curve) rim() float64 {
	least := math.Inf(1)
	if c.ground.Kind != models.Cup {
		return least
	}
	for i := range c.pieces {
		p := &c.pieces[i]
		least = min(least, golden(0, p.to-p.from, func(x float64) float64 {
			r, _, _ := p.radius(x)
			return math.Hypot(r-c.ground.Diameter/2, max(p.height(x)-c.ground.Rim, 0))
		}))
	}
	return least
}

// gap is the distance from t to the nearest point half a turn to one and a
// half turns further on.
func (c *Curve) gap(t float64) float64 {
	p, x := c.on(t)
	r, _, _ := p.radius(x)
	z := p.height(x)
	// apart is half the squared distance at τ further on, and its first two
	// derivatives.
	apart := func(tau float64) (f, df, ddf float64) {
		q, y := c.on(t + tau)
		s, ds, dds := q.radius(y)
		h, dh, ddh := q.rise(y)
		h -= z
		const w = 2 * math.Pi
		sin, cos := math.Sincos(w * (tau - math.Floor(tau)))
		f = (r*r+s*s+h*h)/2 - r*s*cos
		df = s*ds + h*dh - r*ds*cos + w*r*s*sin
		ddf = ds*ds + s*dds + dh*dh + h*ddh - r*dds*cos + 2*w*r*ds*sin + w*w*r*s*cos
		return f, df, ddf
	}
	value := func(tau float64) float64 { f, _, _ := apart(tau); return f }
	least := lowest(nearest, min(farthest, c.turns-t), value, func(lo, tau, hi float64) float64 {
		return newton(lo, tau, hi, apart)
	})
	return math.Sqrt(2 * max(least, 0))
}

// newton is the least value of f between lo and hi by Newton's steps from x,
// held in a shrinking bracket; f gives its first two derivatives too.
func newton(lo, x, hi float64, f func(float64) (y, dy, ddy float64)) float64 {
	best := math.Inf(1)
	for range 30 {
		y, dy, ddy := f(x)
		best = min(best, y)
		if dy > 0 {
			hi = x
		} else {
			lo = x
		}
		next := x - dy/ddy
		if ddy <= 0 || next < lo || next > hi {
			next = (lo + hi) / 2
		}
		if math.Abs(next-x) < 1e-7 {
			break
		}
		x = next
	}
	return best
}
