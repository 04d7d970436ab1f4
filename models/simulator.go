package models

import (
	"context"
	"errors"
	"fmt"
	"math"
	"time"
)

// Outputs says which answers a question asks for, as a set of bits.
type Outputs uint

// What can be asked. Axis is always answered: impedance, partial gains,
// axial ratio and efficiency. The others cost more and come only when asked.
const (
	Axis    Outputs = 1 << iota
	Cone            // axial ratio and partial gain over the question's cone
	Cuts            // beamwidth, sidelobe, peak directivity, front to back
	Balance         // power balance
	Spread          // impedance with the voltage spread over the riser
	Pattern         // the cuts themselves
)

// Question is what a simulator is asked about a design.
type Question struct {
	Hz      []float64 // rising
	Outputs Outputs
	Cone    float64 // rad, half-angle about the axis, for the Cone output
}

// Check names what cannot be answered: frequencies have to be positive and
// rising, a cone that is asked about within a quarter turn of the axis.
func (q *Question) Check() error {
	if len(q.Hz) == 0 {
		return errors.New("no frequency was asked for; give at least one")
	}
	last := 0.0
	for _, hz := range q.Hz {
		if !(hz > last) || math.IsInf(hz, 0) {
			return fmt.Errorf("a frequency of %g Hz after %g Hz cannot be answered; positive ones, rising, are due", hz, last)
		}
		last = hz
	}
	if q.Outputs&Cone != 0 && !(q.Cone > 0 && q.Cone <= math.Pi/2) {
		return fmt.Errorf("a cone of %g rad about the axis cannot be answered; above 0 and at most π/2 is due", q.Cone)
	}
	return nil
}

// Simulator answers questions about designs. It is safe for concurrent use,
// answers the same question with the same bits, and stops soon after ctx
// ends. A design it cannot answer is an error that names the dimension, the
// bound and a remedy; it never panics on a design.
type Simulator interface {
	Simulate(ctx context.Context, d Design, q Question) (Response, error)
	// Identity is name, version and settings: equal identities promise equal
	// answers, so it is part of what makes a stored answer reusable.
	Identity() string
}

// Response is an answer: one sample per frequency of the question, in its
// order.
type Response struct {
	Samples []Sample `json:"samples"`
	// Answered names the outputs that the samples hold; fields of an output
	// that was not answered are zero and mean nothing.
	Answered Outputs `json:"answered"`
	// Indicative is set where impedance and axial ratio are rules of thumb:
	// shown, but no aim or limit may stand on them unasked.
	Indicative bool `json:"indicative,omitzero"`
	// Statement says in a sentence what the model is and what it is worth.
	// It goes with the model's identity and is not stored with each answer.
	Statement string `json:"-"`
	// Warnings name every way in which the design leaves the model's range.
	Warnings []string `json:"warnings,omitempty"`
	// Took is how long the model took, where the answer was long on its way
	// for other reasons; 0: as long as the answer. With an error too.
	Took time.Duration `json:"-"`
}

// Circular holds one quantity for each sense of circular polarisation.
type Circular struct {
	Right float64 `json:"right"`
	Left  float64 `json:"left"`
}

// Of picks the value of one sense; the unset sense counts as right.
func (c Circular) Of(s Sense) float64 {
	if s == Left {
		return c.Left
	}
	return c.Right
}

// Sample is the answer at one frequency.
type Sample struct {
	Hz float64

	// Axis.
	Port        complex128 // Ω, at the opening in the plane, z = 0
	Input       complex128 // Ω, at the connector, after the transformer
	Gain        Circular   // partial gains on the axis, power ratios; conductor loss counted, mismatch not
	AxialRatio  float64    // dB on the axis, 0 to 60
	Sense       Sense      // the sense on the axis; 0: linear (30 dB and more)
	Directivity float64    // total, on the axis, power ratio
	Efficiency  float64    // radiated over accepted, 0 to 1

	// Cone.
	ConeAxialRatio Circular // dB, highest over the cone; a direction in the other sense counts as 60
	EdgeGain       Circular // lowest partial gain over the cone, power ratio

	// Cuts.
	PeakDirectivity float64 // total, highest of any direction of the cuts, power ratio
	Beamwidth       float64 // rad, half-power about the axis, mean over 12 planes
	Sidelobe        float64 // dB below the peak, negative, −60 where there is none
	RearGain        float64 // highest total gain within 30° of the rear axis, power ratio; 0 without a rear (infinite plane)

	// Balance and Spread.
	PowerBalance float64    // (radiated + lost) / accepted
	SpreadPort   complex128 // Ω, the port with its voltage spread over the riser

	// Pattern.
	Pattern []Cut
}

// Cut is a far-field cut through the axis.
type Cut struct {
	Plane float64 `json:"plane_rad"` // azimuth of the half-plane of positive angles
	Rays  []Ray   `json:"rays"`
}

// Ray is one direction of a cut.
type Ray struct {
	Angle      float64  `json:"angle_rad"`      // from the axis, negative on the far side
	Gain       Circular `json:"gain"`           // partial gains, power ratios
	AxialRatio float64  `json:"axial_ratio_db"` // 0 to 60
}
