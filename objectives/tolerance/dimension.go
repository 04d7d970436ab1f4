// Package tolerance says what workshop errors do to a design: how many copies
// keep the limits, which dimension is the tightest, and which adjustment
// brings a poor copy's match back. It is computation over a simulator and
// writes nothing.
package tolerance

import (
	"fmt"

	"turnwise/models"
	"turnwise/objectives"
)

// Dimension is one thing that a workshop makes slightly otherwise than drawn.
type Dimension int

// The dimensions. A law is shifted as a whole; the riser takes the winding
// with it; the lead's spacing decides how high its turns stand.
const (
	Diameter Dimension = iota
	Spacing
	Conductor
	FeedHeight
	LeadSpacing
	Permittivity
	DimensionCount int = iota
)

// Info is what is known of a dimension beforehand.
type Info struct {
	Name   string // as a brief's margins write it
	Column string // with its unit, as JSON writes it
	Words  string
	// Default is the half-width where nobody has said one, SI: practice, no
	// source.
	Default float64
	shift   func(d *models.Design, by float64)
	absent  func(d *models.Design) bool
}

// Dimensions describes every dimension, in the order of the constants.
var Dimensions = [DimensionCount]Info{
	Diameter: {Name: "diameter", Column: "diameter_m", Words: "winding diameter", Default: 0.5e-3,
		shift: func(d *models.Design, by float64) { d.Diameter = shifted(d.Diameter, by) }},
	Spacing: {Name: "spacing", Column: "spacing_m", Words: "spacing per turn", Default: 0.3e-3,
		shift: func(d *models.Design, by float64) { d.Spacing = shifted(d.Spacing, by) }},
	Conductor: {Name: "conductor", Column: "conductor_m", Words: "conductor diameter", Default: 0.02e-3,
		shift: func(d *models.Design, by float64) { d.Conductor.Diameter += by }},
	FeedHeight: {Name: "feed_height", Column: "feed_height_m", Words: "riser height", Default: 0.2e-3,
		shift: func(d *models.Design, by float64) { d.Feed.Height += by }},
	LeadSpacing: {Name: "lead_spacing", Column: "lead_spacing_m", Words: "spacing at the start of the lead", Default: 0.3e-3,
		shift:  func(d *models.Design, by float64) { d.Feed.Lead.Spacing += by },
		absent: func(d *models.Design) bool { return d.Feed.Lead.Turns <= 0 }},
	Permittivity: {Name: "permittivity", Column: "permittivity", Words: "permittivity of the insulation", Default: 0.1,
		shift:  func(d *models.Design, by float64) { d.Insulation.Permittivity += by },
		absent: func(d *models.Design) bool { return d.Insulation.Thickness <= 0 }},
}

func (d Dimension) String() string { return Dimensions[d].Name }

// In reports whether a design has the dimension at all.
func (d Dimension) In(design *models.Design) bool {
	absent := Dimensions[d].absent
	return absent == nil || !absent(design)
}

// Shift is the design with the dimension off by so much, SI.
func (d Dimension) Shift(design models.Design, by float64) models.Design {
	if by != 0 {
		Dimensions[d].shift(&design, by)
	}
	return design
}

func shifted(l models.Law, by float64) models.Law {
	out := make(models.Law, len(l))
	for i := range l {
		out[i] = l[i] + by
	}
	return out
}

// Spreads are the half-widths of every dimension, SI; 0 is exact.
type Spreads [DimensionCount]float64

// Defaults are the half-widths where nobody has said any.
func Defaults() Spreads {
	var s Spreads
	for i := range s {
		s[i] = Dimensions[i].Default
	}
	return s
}

// Margins puts what a brief gives in the place of the defaults.
func (s Spreads) Margins(m objectives.Margins) Spreads {
	for d, given := range map[Dimension]float64{Diameter: m.Diameter, Spacing: m.Spacing, FeedHeight: m.FeedHeight} {
		if given > 0 {
			s[d] = given
		}
	}
	return s
}

// Of are the half-widths that a design can have: 0 for what it lacks.
func (s Spreads) Of(design *models.Design) Spreads {
	for i := range s {
		if !Dimension(i).In(design) {
			s[i] = 0
		}
	}
	return s
}

// Any reports whether any dimension spreads.
func (s Spreads) Any() bool { return s != Spreads{} }

// Distribution is how errors lie within a half-width.
type Distribution string

// Uniform errors are equally likely anywhere within the half-width. Normal
// ones have half of it as their standard deviation, so that 95.4 % lie
// within.
const (
	Uniform Distribution = "uniform"
	Normal  Distribution = "normal"
)

// Check refuses a distribution that is none.
func (d Distribution) Check() error {
	if d != Uniform && d != Normal {
		return fmt.Errorf("distribution %q: there is none such; write uniform or normal", string(d))
	}
	return nil
}

// source gives random numbers.
type source interface {
	Float64() float64
	NormFloat64() float64
}

// draw is one error in half-widths.
func (d Distribution) draw(r source) float64 {
	if d == Normal {
		return r.NormFloat64() / 2
	}
	return 2*r.Float64() - 1
}

// variances are those of an error x in half-widths and of its square:
// uniform 1/3 and 1/5 − 1/9, normal σ² and 2σ⁴ with σ = 1/2.
func (d Distribution) variances() (x, square float64) {
	if d == Normal {
		return 1. / 4, 1. / 8
	}
	return 1. / 3, 1./5 - 1./9
}
