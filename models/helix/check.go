package helix

import (
	"errors"
	"fmt"
	"math"
	"strconv"

	"turnwise/models"
)

// Bounds of what is taken for an antenna at all; outside them a dimension is
// a slip of the pen.
const (
	leastTurns = 1e-3
	mostTurns  = 1000
	mostKnots  = 64
	mostLength = 1e3  // m
	leastSize  = 1e-9 // m
)

// Check tells every fault of a design's dimensions at once, each with the
// key of the design file, what is wrong and what would be right. It says
// nothing of whether the design is any good.
func Check(d *models.Design) error {
	var f faults
	f.winding(d)
	f.conductor(d)
	f.feed(&d.Feed, d.Turns)
	f.ground(d)
	if len(f) == 0 {
		return nil
	}
	return errors.Join(f...)
}

// faults collects what is wrong.
type faults []error

func (f *faults) add(key, format string, args ...any) {
	*f = append(*f, fmt.Errorf(key+": "+format, args...))
}

func bad(v float64) bool { return math.IsNaN(v) || math.IsInf(v, 0) }

// size demands a length above nothing and below the absurd.
func (f *faults) size(key string, v float64, example string) bool {
	if bad(v) || v < leastSize || v > mostLength {
		f.add(key, "%s m cannot be; a length above zero and up to %g m is due, such as %s", text(v), mostLength, example)
		return false
	}
	return true
}

// span demands a number from lo to hi, both allowed.
func (f *faults) span(key string, v, lo, hi float64, unit, example string) bool {
	if bad(v) || v < lo || v > hi {
		f.add(key, "%s%s cannot be; from %g to %g%s is due, such as %s", text(v), unit, lo, hi, unit, example)
		return false
	}
	return true
}

func text(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

func (f *faults) winding(d *models.Design) {
	switch {
	case bad(d.Turns) || d.Turns <= 0:
		f.add("turns", "%s cannot be wound; a number above zero is due, such as 8.25", text(d.Turns))
	case d.Turns < leastTurns || d.Turns > mostTurns:
		f.add("turns", "%s is no antenna; from %g to %d is due, such as 8.25", text(d.Turns), leastTurns, mostTurns)
	}
	f.law("diameter", d.Diameter, "58 mm")
	f.law("spacing", d.Spacing, "34 mm")
	if d.Handedness != models.Right && d.Handedness != models.Left {
		f.add("handedness", "not stated; right or left is due")
	}
	if d.Sense != 0 && d.Sense != models.Right && d.Sense != models.Left {
		f.add("sense", "%d is no sense; right, left or nothing is due", d.Sense)
	}
}

// law demands knots that are lengths. Laws stay between their knots, so a
// law with good knots is good everywhere.
func (f *faults) law(key string, l models.Law, example string) {
	switch {
	case len(l) == 0:
		f.add(key, "missing; one value or a law of several is due, such as [%s]", example)
	case len(l) > mostKnots:
		f.add(key, "%d knots are too many; at most %d are due", len(l), mostKnots)
	}
	for i, v := range l {
		if bad(v) || v < leastSize || v > mostLength {
			f.size(key+"["+strconv.Itoa(i+1)+"]", v, example)
		}
	}
}

// narrowest is the least knot of a law that is a length at all, +Inf without
// any.
func narrowest(l models.Law) float64 {
	least := math.Inf(1)
	for _, v := range l {
		if v >= leastSize {
			least = min(least, v)
		}
	}
	return least
}

func (f *faults) conductor(d *models.Design) {
	c := &d.Conductor
	if f.size("conductor.diameter", c.Diameter, "2 mm") && c.Diameter >= narrowest(d.Diameter) {
		f.add("conductor.diameter", "%s m is as wide as the winding's least diameter, %s m; a thinner conductor or a wider winding is due",
			text(c.Diameter), text(narrowest(d.Diameter)))
	}
	if w := c.Wall; bad(w) || w < 0 || w > 0 && 2*w > c.Diameter {
		f.add("conductor.wall", "%s m cannot be; at most half the diameter is due, or 0 for a solid wire", text(w))
	}
	f.material("conductor", &c.Material, "58 MS/m (copper)", "8.9 g/cm3 (copper)")
	if t := d.Insulation.Thickness; t != 0 {
		f.span("insulation.thickness", t, 0, mostLength, " m", "0.3 mm")
		f.span("insulation.permittivity", d.Insulation.Permittivity, 1, 1000, "", "2.3")
	}
}

// material demands a metal that conducts and weighs something.
func (f *faults) material(key string, m *models.Material, conducts, weighs string) {
	if bad(m.Conductivity) || m.Conductivity <= 0 {
		f.add(key+".conductivity", "%s S/m cannot be; a value above zero is due, such as %s", text(m.Conductivity), conducts)
	}
	if bad(m.Density) || m.Density <= 0 {
		f.add(key+".density", "%s kg/m³ cannot be; a value above zero is due, such as %s", text(m.Density), weighs)
	}
	if m.Permeability != 0 {
		f.span(key+".permeability", m.Permeability, 1e-3, 1e6, "", "1")
	}
}

func (f *faults) feed(d *models.Feed, turns float64) {
	f.size("feed.height", d.Height, "5 mm")
	if d.Pin != 0 {
		f.size("feed.pin", d.Pin, "1.27 mm")
	}
	if bad(d.Impedance) || d.Impedance <= 0 {
		f.add("feed.impedance", "%s Ω cannot be; a value above zero is due, such as 50 ohm", text(d.Impedance))
	}
	if d.Lead.Turns != 0 {
		f.lead(&d.Lead, turns)
	}
	if t := d.Strip.Turns; t != 0 {
		if f.span("feed.strip.turns", t, leastTurns, mostTurns, "", "0.25") && t > turns {
			f.add("feed.strip.turns", "%s is more than the winding's %s turns; at most that is due", text(t), text(turns))
		}
		f.size("feed.strip.width", d.Strip.Width, "5 mm")
	}
	f.transformer(&d.Transformer)
}

func (f *faults) lead(l *models.Lead, turns float64) {
	sound := f.span("feed.lead.turns", l.Turns, leastTurns, mostTurns, "", "0.5")
	f.span("feed.lead.spacing", l.Spacing, 0, mostLength, " m", "8 mm")
	need, what := l.Turns, ""
	switch l.Shape {
	case models.Ramp, "":
	case models.Flat:
		need, what = need+blend, " (a flat lead's quarter turn counted)"
	default:
		f.add("feed.lead.shape", "%q is unknown; ramp or flat is due", string(l.Shape))
		return
	}
	// The sum of two decimals may round past the decimal that it is.
	if sound && need > turns+sameBreak {
		f.add("feed.lead.turns", "%s turns%s are longer than the winding's %s turns; a shorter lead or more turns are due",
			text(need), what, text(turns))
	}
}

func (f *faults) transformer(t *models.Transformer) {
	if t.Impedance == 0 {
		return
	}
	if bad(t.Impedance) || t.Impedance < 0 {
		f.add("feed.transformer.impedance", "%s Ω cannot be; a value above zero is due, such as 85 ohm", text(t.Impedance))
	}
	f.span("feed.transformer.length", t.Length, 0, mostLength, " m", "44 mm")
	if t.Velocity != 0 && (bad(t.Velocity) || t.Velocity < 1e-3 || t.Velocity > 1) {
		f.add("feed.transformer.velocity", "%s of the speed of light cannot be; above 0 and at most 1 is due, such as 0.7", text(t.Velocity))
	}
}

// ground also demands that the parts do not touch where they must not.
func (f *faults) ground(d *models.Design) {
	g := &d.Ground
	if pin := d.Feed.Pin; len(d.Diameter) > 0 && pin >= d.Diameter[0] && d.Diameter[0] >= leastSize {
		f.add("feed.pin", "the riser is %s m thick and the winding %s m wide where it starts; a thinner one is due", text(pin), text(d.Diameter[0]))
	}
	if h, c := d.Feed.Height, d.Conductor.Diameter; d.Feed.Strip.Turns == 0 && h >= leastSize && c >= leastSize && h <= c/2 {
		f.add("feed.height", "at %s m a conductor %s m thick touches the plane; more than half its diameter is due", text(h), text(c))
	}
	switch g.Kind {
	case models.Infinite, "":
		return
	case models.Disc:
	case models.Cup:
		f.size("ground.rim", g.Rim, "60 mm")
	default:
		f.add("ground.kind", "%q is unknown; infinite, disc or cup is due", string(g.Kind))
		return
	}
	f.sheet(g)
	if !f.size("ground.diameter", g.Diameter, "200 mm") || len(d.Diameter) == 0 {
		return
	}
	if need := LeastGround(d); g.Diameter <= need {
		f.add("ground.diameter", "%s m does not reach round the feed's opening, at the foot of the riser; more than %s m is due", text(g.Diameter), text(need))
	}
}

// LeastGround is the diameter, m, that a disc or cup has to exceed to hold
// the feed's opening. The design needs to have a diameter.
func LeastGround(d *models.Design) float64 { return d.Diameter[0] + models.Opening*d.PinDiameter() }

// sheet looks at what a disc or cup is made of, where it is said.
func (f *faults) sheet(g *models.Ground) {
	if g.Thickness != 0 {
		f.size("ground.thickness", g.Thickness, "1 mm")
	}
	m := g.Metal()
	f.material("ground", &m, "35.4 MS/m (aluminium)", "2.7 g/cm3 (aluminium)")
}
