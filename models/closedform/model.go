// Package closedform holds the published hand formulas of the axial-mode
// helix, one file a family, and a simulator made of them: good to about a
// decibel inside their range and answered in microseconds.
package closedform

import (
	"context"
	"fmt"
	"math"
	"sync"

	"turnwise/models"
	"turnwise/models/helix"
)

// Statement is what the model says of itself with every answer.
const Statement = "closed form, ±1 dB (1 sigma) inside 11.5–14.5°, 0.85 < C < 1.2, 3–12 turns, ±1.6 dB elsewhere, nearly blind to taper"

// Model is the simulator. Non-uniform windings enter through their mean
// circumference and their length alone: an extension of ours, not published.
// It is safe for concurrent use; the zero Model is not.
type Model struct{ curves *sync.Pool }

// New is the closed-form simulator.
func New() *Model {
	return &Model{curves: &sync.Pool{New: func() any { return new(helix.Curve) }}}
}

var _ models.Simulator = (*Model)(nil)

// Identity names the formulas' version.
func (*Model) Identity() string { return "closed-form 1" }

// Simulate answers everything but power balance and port spread.
func (m *Model) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	if err := q.Check(); err != nil {
		return models.Response{}, fmt.Errorf("closed form: %w", err)
	}
	curve := m.curves.Get().(*helix.Curve)
	defer m.curves.Put(curve)
	if err := curve.Wind(&d); err != nil {
		return models.Response{}, err
	}
	w := measure(&d, curve)
	r := models.Response{
		Samples:    make([]models.Sample, len(q.Hz)),
		Answered:   models.Axis | q.Outputs&(models.Cone|models.Cuts|models.Pattern),
		Indicative: true,
		Statement:  Statement,
	}
	for i, hz := range q.Hz {
		if err := ctx.Err(); err != nil {
			return models.Response{}, err
		}
		w.sample(&r.Samples[i], hz, q)
	}
	r.Warnings = w.warnings(q.Hz)
	return r, nil
}

// winding is what the formulas see of a design. Lengths in m.
type winding struct {
	d             *models.Design
	turns         float64
	circumference float64 // mean over the turns
	length        float64 // of the winding along the axis
	wire          float64
	lead          []step
}

// step is a short piece of the lead, as a line over the plane.
type step struct{ impedance, length float64 }

func measure(d *models.Design, c *helix.Curve) winding {
	w := winding{d: d, turns: c.Turns(), wire: c.WireLength(), length: c.Top() - d.Feed.Height}
	w.circumference = math.Pi * meanDiameter(c)
	if l := d.Feed.Lead; l.Turns > 0 {
		const steps = 16
		a := d.Conductor.Diameter / 2
		for i := range steps {
			from, to := l.Turns*float64(i)/steps, l.Turns*float64(i+1)/steps
			w.lead = append(w.lead, step{models.WireOverPlane(a, c.Height((from+to)/2)), c.Arc(to) - c.Arc(from)})
		}
	}
	return w
}

// meanDiameter is (1/N)∫D dt: three-point Gauss between the breaks of the
// law, exact for its cubics.
func meanDiameter(c *helix.Curve) float64 {
	sum, last := 0.0, 0.0
	add := func(from, to float64) {
		mid, half := (from+to)/2, (to-from)/2
		x := half * math.Sqrt(0.6)
		sum += half / 9 * (5*c.Diameter(mid-x) + 8*c.Diameter(mid) + 5*c.Diameter(mid+x))
	}
	for _, t := range c.Breaks() {
		if t > last && t < c.Turns() {
			add(last, t)
			last = t
		}
	}
	add(last, c.Turns())
	return sum / c.Turns()
}

// The pitch angles to which the gain formula holds a winding's own.
const (
	leastPitch = 10 * math.Pi / 180
	mostPitch  = 16 * math.Pi / 180
)

// at gives circumference and length in wavelengths, and the mean pitch.
func (w *winding) at(hz float64) (c, l, pitch float64) {
	wavelength := models.LightSpeed / hz
	return w.circumference / wavelength, w.length / wavelength, math.Atan2(w.length, w.turns*w.circumference)
}

// gain is the directivity on the axis, a power ratio.
func (w *winding) gain(hz float64) float64 {
	c, l, pitch := w.at(hz)
	pitch = math.Min(math.Max(pitch, leastPitch), mostPitch)
	peak := peakCircumference(w.turns)
	u := c / peak
	// At the peak's frequency the same winding is l/u wavelengths long.
	return KingWongPeak(w.turns, peak, l/u/w.turns, pitch) * offPeak(w.turns, u)
}

// efficiency is what the skin effect leaves of a current that travels evenly
// along the whole wire into the terminal resistance.
func (w *winding) efficiency(hz float64) float64 {
	c, _, _ := w.at(hz)
	lost := real(w.d.Conductor.Material.RoundWireImpedance(w.d.Conductor.Diameter/2, hz)) * w.wire
	r := PeripheralFeedResistance(c)
	return r / (r + lost)
}

// port is the terminal resistance seen through the lead.
func (w *winding) port(hz float64) complex128 {
	c, _, _ := w.at(hz)
	z := complex(PeripheralFeedResistance(c), 0)
	for i := len(w.lead) - 1; i >= 0; i-- {
		s := w.lead[i]
		z = models.Transformer{Impedance: s.impedance, Length: s.length}.Input(z, hz)
	}
	return z
}

// sample answers one frequency.
func (w *winding) sample(s *models.Sample, hz float64, q models.Question) {
	c, l, pitch := w.at(hz)
	ratio := KrausAxialRatio(w.turns)
	cross := (ratio - 1) / (ratio + 1)
	s.Hz = hz
	s.Port = w.port(hz)
	s.Input = w.d.Feed.Transformer.Input(s.Port, hz)
	s.Efficiency = w.efficiency(hz)
	s.Directivity = w.gain(hz)
	s.Gain = w.both(s.Directivity*s.Efficiency, cross)
	s.AxialRatio, s.Sense = models.AxialRatio(s.Gain)
	spacing := l / w.turns
	if q.Outputs&models.Cone != 0 {
		w.cone(s, q.Cone, spacing, ratio)
	}
	if q.Outputs&models.Cuts != 0 {
		s.PeakDirectivity = s.Directivity
		s.Beamwidth = math.Min(KingWongBeamwidth(w.turns, c, spacing, pitch), math.Pi)
		s.Sidelobe = sidelobe(w.turns, spacing)
	}
	if q.Outputs&models.Pattern != 0 {
		s.Pattern = w.pattern(s, spacing, ratio)
	}
}

// both are the partial gains of a co-polar gain and a ratio of amplitudes.
func (w *winding) both(gain, cross float64) models.Circular {
	if w.d.Handedness == models.Left {
		return models.Circular{Left: gain, Right: gain * cross * cross}
	}
	return models.Circular{Right: gain, Left: gain * cross * cross}
}

// axialRatioAt is the axial ratio away from the axis, as a ratio: the hand
// rule's on the axis, times the foreshortening 1/cos θ of a plane circular
// current seen from theta. Indicative at best.
func axialRatioAt(ratio, theta float64) float64 {
	return ratio / math.Max(math.Cos(theta), 1e-3)
}

// cone answers the cone about the axis in steps of a degree or less.
func (w *winding) cone(s *models.Sample, half, spacing, ratio float64) {
	steps := max(1, int(math.Ceil(half*180/math.Pi)))
	lowest := 1.0
	for i := range steps + 1 {
		e := HansenWoodyard(w.turns, spacing, half*float64(i)/float64(steps))
		lowest = math.Min(lowest, e*e)
	}
	s.EdgeGain = models.Circular{Right: s.Gain.Right * lowest, Left: s.Gain.Left * lowest}
	db := math.Min(20*math.Log10(axialRatioAt(ratio, half)), models.AxialRatioCap)
	s.ConeAxialRatio = models.Circular{Right: db, Left: models.AxialRatioCap}
	if w.d.Handedness == models.Left {
		s.ConeAxialRatio = models.Circular{Left: db, Right: models.AxialRatioCap}
	}
}

// pattern gives two cuts, alike by symmetry, in steps of a degree.
func (w *winding) pattern(s *models.Sample, spacing, ratio float64) []models.Cut {
	co := s.Gain.Of(w.d.Handedness)
	cuts := make([]models.Cut, 0, 2)
	for _, plane := range []float64{0, math.Pi / 2} {
		cut := models.Cut{Plane: plane}
		for deg := -90; deg <= 90; deg++ {
			theta := float64(deg) * math.Pi / 180
			e := HansenWoodyard(w.turns, spacing, math.Abs(theta))
			r := axialRatioAt(ratio, theta)
			ray := models.Ray{Angle: theta, Gain: w.both(co*e*e, (r-1)/(r+1))}
			ray.AxialRatio, _ = models.AxialRatio(ray.Gain)
			cut.Rays = append(cut.Rays, ray)
		}
		cuts = append(cuts, cut)
	}
	return cuts
}

func warn(format string, a ...any) string { return fmt.Sprintf(format, a...) }

// warnings name every way in which the winding leaves the formulas' range at
// the middle of the sweep.
func (w *winding) warnings(hz []float64) []string {
	c, _, pitch := w.at(hz[len(hz)/2])
	out := krausRange(w.turns, c, pitch*180/math.Pi)
	if w.turns > 35 {
		out = append(out, warn("%.4g turns: the gain fit was measured for 5 to 35", w.turns))
	}
	if len(w.d.Diameter) > 1 || len(w.d.Spacing) > 1 {
		out = append(out, "the winding is not uniform: the formulas see its mean circumference and its length only")
	}
	if k := w.d.Ground.Kind; k == models.Disc || k == models.Cup {
		out = append(out, "the plate is not in the formulas: they hold for grounds of 0.75 wavelengths and more")
	}
	if w.d.Insulation.Thickness > 0 {
		out = append(out, "the insulation is not in the formulas")
	}
	return out
}
