package workshop

import (
	"context"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/models/moment"
)

// bend is a winding pressed towards the plate or lifted off it at one place:
// the place moves by so much and the bend fades out to nothing, as a raised
// cosine, over a reach to either side. The rest stays where it was.
type bend struct {
	curve     *helix.Curve
	at, reach float64 // turns
	by        float64 // m, away from the plate
	// also is another bend of the same winding; nil where there is none.
	also *bend
}

// lift is the height the bend adds at t, and its derivative by t.
func (b bend) lift(t float64) (z, dz float64) {
	if b.also != nil {
		z, dz = b.also.lift(t)
	}
	u := (t - b.at) / b.reach
	if math.Abs(u) >= 1 {
		return z, dz
	}
	sin, cos := math.Sincos(math.Pi * u)
	return z + b.by/2*(1+cos), dz - b.by/2*math.Pi/b.reach*sin
}

// At implements [moment.Curve].
func (b bend) At(t float64) (at, derivative r3.Vec) {
	p := b.curve.At(t)
	z, dz := b.lift(t)
	at, derivative = p.Pos, r3.Scale(p.Speed, p.Tangent)
	at.Z += z
	derivative.Z += dz
	return at, derivative
}

// height is the centre line's, at t.
func (b bend) height(t float64) float64 {
	z, _ := b.lift(t)
	return b.curve.Height(t) + z
}

// ports are the impedances at the foot of the riser with the winding bent so.
// The equivalent radii over the plane are the full-wave model's.
func (b bend) ports(ctx context.Context, f moment.Fidelity, d *models.Design, hz []float64) ([]complex128, error) {
	foot := b.curve.At(0).Pos
	pin, a := d.PinDiameter()/2, d.Conductor.Diameter/2
	material := d.Conductor.Material
	loss := func(radius float64) func(float64) complex128 {
		return func(hz float64) complex128 { return material.RoundWireImpedance(radius, hz) }
	}
	coat := moment.Coat{Thickness: d.Insulation.Thickness, Permittivity: d.Insulation.Permittivity}
	riser := moment.Wire{Curve: moment.Straight{A: r3.Vec{X: foot.X, Y: foot.Y}, B: foot}, To: 1, Radius: pin, Loss: loss(pin)}
	if d.Feed.Pin == 0 {
		riser.Coat = coat
	}
	antenna := moment.Antenna{Plane: true, Wires: []moment.Wire{riser}, Ports: []moment.Port{{Kind: moment.FrillPort}}}
	from := 0.0
	if s := d.Feed.Strip; s.Turns > 0 {
		from = min(s.Turns, d.Turns)
		antenna.Wires = append(antenna.Wires, moment.Wire{
			Curve: b, To: from, Loss: loss(s.Width / math.Pi),
			RadiusAt: func(t float64) float64 { return models.StripRadiusOverPlane(s.Width, b.height(t)) },
		})
	}
	if from < d.Turns {
		antenna.Wires = append(antenna.Wires, moment.Wire{
			Curve: b, From: from, To: d.Turns, Loss: loss(a), Coat: coat,
			RadiusAt: func(t float64) float64 { return models.WireRadiusOverPlane(a, b.height(t)) },
		})
	}
	var z []complex128
	err := moment.Analyse(ctx, &antenna, f, hz, func(s *moment.Solution) error {
		z = append(z, 1/s.Admittance(0, 0))
		return nil
	})
	return z, err
}
