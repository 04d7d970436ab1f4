package moment

import (
	"context"
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
	"turnwise/models/helix"
)

// worker turns one design at a time into wires and answers questions about
// it. It keeps all its room: in steady state it allocates nothing.
type worker struct {
	work
	curve    helix.Curve
	riser    Straight
	winding  winding
	wound    Antenna
	design   *models.Design
	question models.Question
	samples  []models.Sample

	// The wires' properties as functions, bound once.
	round, strip                  func(t float64) float64
	lossRound, lossStrip, lossPin func(hz float64) complex128
}

func newWorker() *worker {
	w := new(worker)
	w.winding.curve = &w.curve
	w.round, w.strip = w.roundRadius, w.stripRadius
	w.lossRound, w.lossStrip, w.lossPin = w.roundLoss, w.stripLoss, w.pinLoss
	return w
}

// mostUnknowns bounds a solution's room and time: its matrix of 2,500
// unknowns takes 100 MB and a minute.
const mostUnknowns = 2500

// answer fills one sample a frequency.
func (w *worker) answer(ctx context.Context, set settings, d *models.Design, q models.Question, samples []models.Sample) error {
	if err := w.curve.Wind(d); err != nil {
		return err
	}
	w.design, w.question, w.samples = d, q, samples
	if err := errors.Join(w.touching(), w.sheltered()); err != nil {
		return err
	}
	if err := w.wires(set, q.Hz[len(q.Hz)-1]); err != nil {
		return err
	}
	return w.sweep(ctx, &w.wound, set, q.Hz, w)
}

// touching refuses a winding that runs into itself.
func (w *worker) touching() error {
	c := &w.design.Conductor
	thick := c.Diameter + 2*max(w.design.Insulation.Thickness, 0)
	if gap := w.curve.ClearancesFrom(2 * thick).Turns; gap <= thick {
		return fmt.Errorf("spacing: neighbouring turns come within %.4g mm of each other, centre to centre, and the conductor with its coat is %.4g mm thick; a wider spacing or a thinner conductor is due",
			gap*1e3, thick*1e3)
	}
	return nil
}

// plateOf is a design's ground.
func plateOf(g models.Ground) Plate {
	switch g.Kind {
	case models.Disc:
		return Plate{Radius: g.Diameter / 2}
	case models.Cup:
		return Plate{Radius: g.Diameter / 2, Rim: g.Rim}
	}
	return Plate{}
}

// sheltered refuses a plate that the winding overhangs so low that the
// plane's current beyond the edge is no outgoing wave.
func (w *worker) sheltered() error {
	p := plateOf(w.design.Ground)
	if !p.Finite() {
		return nil
	}
	d := w.design
	steps := int(math.Ceil(32 * d.Turns))
	for i := range steps + 1 {
		t := d.Turns * float64(i) / float64(steps)
		r, z := w.curve.Diameter(t)/2, w.curve.Height(t)
		if z < overhang*(r-p.Radius) {
			return fmt.Errorf("ground.diameter: the winding, %.4g mm across there, overhangs a plate of %.4g mm at a height of only %.4g mm; a plate as wide as the winding is due", 2e3*r, 2e3*p.Radius, 1e3*z)
		}
	}
	return nil
}

// overhang is how many times as high over a plate as beyond its edge a wire
// must be for the plane's current there to be an outgoing wave on the slanting
// meridian too.
var overhang = 1.5 * math.Tan(slantTurn)

// wires makes riser and winding wires. The winding is cut where a strip
// ends, since the charge may jump there.
func (w *worker) wires(set settings, highest float64) error {
	d := w.design
	foot := w.curve.At(0).Pos
	w.riser = Straight{A: r3.Vec{X: foot.X, Y: foot.Y}, B: foot}
	coat := Coat{Thickness: max(d.Insulation.Thickness, 0), Permittivity: d.Insulation.Permittivity}
	riser := Wire{Curve: &w.riser, To: 1, Radius: d.PinDiameter() / 2, Loss: w.lossPin}
	if d.Feed.Pin == 0 {
		riser.Coat = coat
	}
	riser.Elements = set.elements(0, w.curve.Riser()*highest/models.LightSpeed)
	a := &w.wound
	a.Plane, a.Plate = true, plateOf(d.Ground)
	a.Wires = append(a.Wires[:0], riser)
	from := 0.0
	if s := d.Feed.Strip; s.Turns > 0 {
		from = min(s.Turns, d.Turns)
		a.Wires = append(a.Wires, w.piece(set, highest, 0, from, Wire{RadiusAt: w.strip, Loss: w.lossStrip}))
	}
	if from < d.Turns {
		a.Wires = append(a.Wires, w.piece(set, highest, from, d.Turns, Wire{RadiusAt: w.round, Loss: w.lossRound, Coat: coat}))
	}
	a.Ports = append(a.Ports[:0], Port{Kind: FrillPort})
	if w.question.Outputs&models.Spread != 0 {
		a.Ports = append(a.Ports, Port{Kind: SpreadPort})
	}
	unknowns := 0
	for i := range a.Wires {
		unknowns += a.Wires[i].Elements + set.degree
	}
	if unknowns > mostUnknowns {
		return fmt.Errorf("full wave: %.4g turns of wire, %.3g wavelengths at %.4g GHz, want %d unknowns; at most %d are solved: fewer turns or a lower frequency are due",
			d.Turns, w.curve.WireLength()*highest/models.LightSpeed, highest/1e9, unknowns, mostUnknowns)
	}
	return nil
}

// piece completes the wire between two parameters of the winding.
func (w *worker) piece(set settings, highest, from, to float64, wire Wire) Wire {
	wire.Curve, wire.From, wire.To = &w.winding, from, to
	wire.Elements = set.elements(to-from, (w.curve.Arc(to)-w.curve.Arc(from))*highest/models.LightSpeed)
	return wire
}

// winding is a winding as a [Curve]: its parameter counts turns.
type winding struct{ curve *helix.Curve }

// At implements [Curve].
func (w *winding) At(t float64) (at, derivative r3.Vec) {
	p := w.curve.At(t)
	return p.Pos, r3.Scale(p.Speed, p.Tangent)
}

// roundRadius and stripRadius are the conductor's equivalent radii over the
// plane.
func (w *worker) roundRadius(t float64) float64 {
	return models.WireRadiusOverPlane(w.design.Conductor.Diameter/2, w.curve.Height(t))
}

func (w *worker) stripRadius(t float64) float64 {
	return models.StripRadiusOverPlane(w.design.Feed.Strip.Width, w.curve.Height(t))
}

func (w *worker) roundLoss(hz float64) complex128 {
	c := &w.design.Conductor
	return c.Material.RoundWireImpedance(c.Diameter/2, hz)
}

func (w *worker) pinLoss(hz float64) complex128 {
	return w.design.Conductor.Material.RoundWireImpedance(w.design.PinDiameter()/2, hz)
}

// stripLoss is that of a round wire of the strip's perimeter.
func (w *worker) stripLoss(hz float64) complex128 {
	return w.design.Conductor.Material.RoundWireImpedance(w.design.Feed.Strip.Width/math.Pi, hz)
}
