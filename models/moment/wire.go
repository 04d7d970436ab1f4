package moment

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"
)

// Curve is a smooth centre line. Its parameter is whatever suits it; only
// the direction and the points count.
type Curve interface {
	// At gives the point at t, m, and its derivative by t, m per unit of t,
	// which is nowhere zero.
	At(t float64) (at, derivative r3.Vec)
}

// Wire is one smooth piece of round conductor. Pieces whose ends meet in a
// point are joined there: the current passes on, its slope may jump. An end
// on the plane of an antenna over a plane is connected to the plane. Every
// other end is open and its current zero.
type Wire struct {
	Curve    Curve
	From, To float64 // the stretch of the curve's parameter, From < To

	// Radius is the conductor's, m, unless RadiusAt gives it by the curve's
	// parameter (a strip's equivalent radius, for one).
	Radius   float64
	RadiusAt func(t float64) float64

	// Loss is the conductor's series impedance, Ω/m, at a frequency in Hz;
	// nil: none.
	Loss func(hz float64) complex128
	// Coat is a thin dielectric coat.
	Coat Coat

	// Elements is how many pieces the splines of the current have; 0 leaves
	// it to the fidelity: by the wavelength, and by how much the wire turns.
	Elements int
}

// Coat is a thin dielectric coat on a wire. Zero thickness: none.
type Coat struct {
	Thickness    float64 // m
	Permittivity float64 // relative
}

// Antenna is a set of wires with its ports, in free space, over an infinite
// perfectly conducting plane at z = 0 or over a finite plate there.
type Antenna struct {
	Wires []Wire
	Plane bool
	Plate Plate // in the plane's place; zero: the infinite plane
	Ports []Port
}

// Port is where a voltage is applied.
type Port struct {
	Kind PortKind
	Wire int     // index into the antenna's wires
	At   float64 // centre of a gap, by the curve's parameter
	Gap  float64 // its width along the wire, m
	// Ratio is the outer over the inner radius of a coaxial opening; 0 is
	// read as [models.Opening], an air line of 50 Ω.
	Ratio float64
}

// PortKind is how a port's field is spread.
type PortKind int

// The kinds of port. A GapPort spreads its voltage evenly over a stretch of
// a wire, a SpreadPort over the whole wire: their current is the mean over
// the stretch. A FrillPort is a coaxial opening in the plane at the wire's
// start (magnetic frill: Tsai 1972; Butler and Tsai 1973), which stands on
// the plane upright: its current is that at the foot.
const (
	GapPort PortKind = iota
	SpreadPort
	FrillPort
)

// check tells what is wrong with an antenna's description.
func (a *Antenna) check() error {
	var errs []error
	fault := func(format string, args ...any) { errs = append(errs, fmt.Errorf(format, args...)) }
	if len(a.Wires) == 0 {
		fault("antenna: no wire; at least one is due")
	}
	for i := range a.Wires {
		w := &a.Wires[i]
		switch {
		case w.Curve == nil:
			fault("wire %d: no curve", i)
		case !(w.From < w.To) || math.IsInf(w.From, 0) || math.IsInf(w.To, 0):
			fault("wire %d: parameter from %g to %g; a rising finite stretch is due", i, w.From, w.To)
		}
		if w.RadiusAt == nil && !(w.Radius > 0 && w.Radius < math.MaxFloat64) {
			fault("wire %d: radius %g m; above zero is due", i, w.Radius)
		}
		if c := w.Coat; c.Thickness != 0 && !(c.Thickness > 0 && c.Permittivity >= 1) {
			fault("wire %d: coat of %g m, permittivity %g; a thickness above zero and a permittivity from 1 are due", i, c.Thickness, c.Permittivity)
		}
	}
	for i, p := range a.Ports {
		switch {
		case p.Wire < 0 || p.Wire >= len(a.Wires):
			fault("port %d: on wire %d of %d", i, p.Wire, len(a.Wires))
		case p.Kind == FrillPort && !a.Plane:
			fault("port %d: a coaxial opening needs the plane", i)
		case p.Kind == GapPort && !(p.Gap > 0):
			fault("port %d: gap of %g m; above zero is due", i, p.Gap)
		}
	}
	return errors.Join(append(errs, a.Plate.check(a.Plane))...)
}

// Straight is the straight line from A (t = 0) to B (t = 1).
type Straight struct{ A, B r3.Vec }

// At implements [Curve].
func (s Straight) At(t float64) (at, derivative r3.Vec) {
	d := r3.Sub(s.B, s.A)
	return r3.Add(s.A, r3.Scale(t, d)), d
}

// Arc is a circle about Centre in the plane of the orthogonal unit vectors U
// and V: t in radians from U towards V.
type Arc struct {
	Centre, U, V r3.Vec
	Radius       float64
}

// At implements [Curve].
func (c Arc) At(t float64) (at, derivative r3.Vec) {
	sin, cos := math.Sincos(t)
	at = r3.Add(c.Centre, r3.Add(r3.Scale(c.Radius*cos, c.U), r3.Scale(c.Radius*sin, c.V)))
	derivative = r3.Add(r3.Scale(-c.Radius*sin, c.U), r3.Scale(c.Radius*cos, c.V))
	return at, derivative
}
