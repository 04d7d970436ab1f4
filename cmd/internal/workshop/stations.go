package workshop

import (
	"math"

	"turnwise/models/helix"
)

// station is a place of the winding that a workshop measures.
type station struct {
	T       float64 // turns from the start of the winding
	Azimuth float64 // degrees from the riser, in the direction of winding, 0 to 360
	Z       int     // height over the plane, in steps of the resolution
	Step    int     // rise since the station before, or since the plane
	Radius  float64 // m, of the centre line
	Wire    float64 // m of wire from the plane, riser included
}

// stations are the quarter turns of a winding, its start and its open end.
// Heights are rounded first and steps are their differences, so that the
// steps as printed add up to the length as printed.
func stations(c *helix.Curve, r Resolution) []station {
	var out []station
	last := 0
	add := func(t float64) {
		s := station{
			T: t, Azimuth: 360 * (t - math.Floor(t)),
			Z: r.steps(c.Height(t)), Radius: c.Diameter(t) / 2, Wire: c.Arc(t),
		}
		s.Step, last = s.Z-last, s.Z
		out = append(out, s)
	}
	const quarter, same = 0.25, 1e-9
	n := int(math.Ceil(c.Turns()/quarter - same))
	for i := range n {
		add(quarter * float64(i))
	}
	add(c.Turns())
	return out
}

// Allowances of wire beyond the calculated length, m.
const (
	feedAllowance = 0.010 // to solder into the connector
	trimAllowance = 0.015 // to cut off at the open end when all else is done
)

// cut is what is cut to length, m.
type cut struct {
	Wire  float64 // round wire of the winding, and of the riser where that is the same wire
	Riser float64 // a riser of its own; 0: none
	Strip float64 // along its middle; 0: none
}

// cuts part the running length into the pieces that make it up.
func cuts(c *helix.Curve, stripTurns float64, ownPin bool) cut {
	k := cut{Wire: c.WireLength()}
	if stripTurns > 0 {
		k.Strip = c.Arc(stripTurns) - c.Riser()
		k.Wire -= k.Strip
	}
	if ownPin || stripTurns > 0 {
		k.Riser = c.Riser()
		k.Wire -= k.Riser
	}
	return k
}

// Length is what to cut of the round wire, rounded up to a millimetre. A wire
// that starts on a strip or pin laps as far as the feed's allowance.
func (k cut) Length() float64 {
	if k.Wire < 1e-9 {
		return 0
	}
	return math.Ceil((k.Wire+feedAllowance+trimAllowance)*1e3-1e-6) / 1e3
}
