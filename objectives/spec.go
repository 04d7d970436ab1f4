// Package objectives is where physics meets search: the figures read from a
// response, the aims and limits put on them, the screens that geometry alone
// decides, and the [Problem] that turns a point into a score.
package objectives

import (
	"slices"

	"turnwise/models"
)

// Spec is what is asked for, resolved and in SI: which dimensions vary, what
// stays, and what is wanted of the figures.
type Spec struct {
	Title string
	Band  models.Band
	// Base holds what does not vary, and the sense, reflector and impedance.
	// Its Sense is the antenna's own, after the reflector has been thought of.
	Base  models.Design
	Vary  []Vary  // in the order of the constants below
	Stock []Stock // at least one; a conductor that does not vary is the only row
	Aims  []Aim   // 1 to 4
	// Limits on figures, in the order of the figures.
	Limits          []Limit
	Cone            float64 // rad
	TrustIndicative bool
	Margins         Margins
}

// Asks reports whether an aim or a limit is about the figure.
func (s *Spec) Asks(f Figure) bool {
	return slices.ContainsFunc(s.Aims, func(a Aim) bool { return a.Figure == f }) || slices.ContainsFunc(s.Limits, func(l Limit) bool { return l.Figure == f })
}

// Quantity names a dimension that may vary, as a brief does.
type Quantity string

// The quantities that may vary, in the order of columns and points. Diameter
// and Spacing vary as laws, one variable a knot.
const (
	Turns                Quantity = "turns"
	Diameter             Quantity = "diameter"
	Spacing              Quantity = "spacing"
	Conductor            Quantity = "conductor"
	FeedHeight           Quantity = "feed_height"
	LeadTurns            Quantity = "lead_turns"
	LeadSpacing          Quantity = "lead_spacing"
	Pin                  Quantity = "pin"
	StripTurns           Quantity = "strip_turns"
	StripWidth           Quantity = "strip_width"
	TransformerImpedance Quantity = "transformer_impedance"
	TransformerLength    Quantity = "transformer_length"
	GroundDiameter       Quantity = "ground_diameter"
	GroundRim            Quantity = "ground_rim"
)

// Quantities lists them in order.
var Quantities = []Quantity{
	Turns, Diameter, Spacing, Conductor, FeedHeight, LeadTurns, LeadSpacing, Pin,
	StripTurns, StripWidth, TransformerImpedance, TransformerLength, GroundDiameter, GroundRim,
}

// Vary is one quantity that varies. Bounds in SI (turns for Turns, LeadTurns
// and StripTurns); Step 0 is a continuum; Knots is 1 unless the quantity is a
// law; Conductor has no bounds, its choices are the stock.
type Vary struct {
	Quantity Quantity
	From, To float64
	Step     float64
	Knots    int
}

// Stock is a conductor that can be bought. Coil and LeastBendRadius are 0
// where there is no limit.
type Stock struct {
	Name            string
	Diameter        float64 // m
	Wall            float64 // m, of a tube; 0: solid
	Material        models.Material
	Insulation      models.Insulation
	Coil            float64 // m of wire in one piece
	LeastBendRadius float64 // m, of the centre line
}

// Aim is a figure to push as far as it goes.
type Aim struct {
	Figure Figure
	Most   bool // most is wanted; else least
}

// Limit is a bound that a figure must keep.
type Limit struct {
	Figure  Figure
	AtLeast bool    // at least Value; else at most
	Value   float64 // in the unit of the figure's column
}

// Margins are half-widths of the manufacturing spread, SI; 0: exact.
type Margins struct {
	Diameter, Spacing, FeedHeight float64
	// Percentile at which aims and limits must hold, 0 to 100; 0 is the
	// worst of the perturbed designs.
	Percentile float64
}

// Any reports whether any dimension spreads.
func (m Margins) Any() bool { return m.Diameter > 0 || m.Spacing > 0 || m.FeedHeight > 0 }
