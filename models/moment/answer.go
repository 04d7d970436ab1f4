package moment

import (
	"fmt"
	"math"
	"math/cmplx"

	"turnwise/models"
)

// mostImbalance is the miss of the power balance beyond which an answer is
// refused.
const mostImbalance = 0.01

// visit implements visitor: it reads one frequency's sample.
func (w *worker) visit(_ *work, i int) error {
	s, q := &w.samples[i], &w.question
	accepted, lost := w.accepted(0, 1), w.lost()
	s.Hz = w.hz
	s.Port = 1 / w.admittance(0, 0)
	s.Input = w.design.Feed.Transformer.Input(s.Port, w.hz)
	if !(accepted > 0) || !finite(s.Port) || !finite(s.Input) || !(lost < accepted) {
		return fmt.Errorf("full wave: no physical solution at %.6g GHz: port %.4g Ω, %.3g W accepted, %.3g W lost at 1 V", w.hz/1e9, s.Port, accepted, lost)
	}
	s.Efficiency = 1 - lost/accepted
	per := 4 * math.Pi / accepted // from intensity to gain
	axis := w.intensity(direction{0, 1, 0, 1})
	s.Gain = scaled(axis, per)
	s.Directivity = total(axis) * per / s.Efficiency
	s.AxialRatio, s.Sense = models.AxialRatio(axis)
	if q.Outputs&models.Cone != 0 {
		w.cone(s, q.Cone, per)
	}
	if q.Outputs&models.Cuts != 0 {
		w.cuts(s, per, q.Outputs&models.Pattern != 0)
	}
	if q.Outputs&models.Spread != 0 {
		s.SpreadPort = 1 / w.admittance(1, 1)
	}
	if q.Outputs&models.Balance != 0 {
		s.PowerBalance = (w.radiated() + lost) / accepted
		if !(math.Abs(s.PowerBalance-1) <= mostImbalance) {
			return fmt.Errorf("full wave: the power balance at %.6g GHz misses: %.4g of the accepted power is radiated or lost, within 1 %% is due", w.hz/1e9, s.PowerBalance)
		}
	}
	return nil
}

func finite(z complex128) bool { return !cmplx.IsNaN(z) && !cmplx.IsInf(z) }

func scaled(c models.Circular, f float64) models.Circular {
	return models.Circular{Right: c.Right * f, Left: c.Left * f}
}

// Directions that answers are read from.
const (
	coneAzimuths = 12
	coneStep     = 3 * math.Pi / 180 // widest step from the axis to the cone's edge
	planes       = 12
	rays         = 90 // from the axis to the plane's horizon
	rear         = 30 // steps about the rear axis that count as the rear
)

// cone answers axial ratio and gain from the axis to the cone's edge.
func (w *worker) cone(s *models.Sample, half, per float64) {
	s.EdgeGain = s.Gain
	s.ConeAxialRatio = sensed(s.Gain)
	steps := int(math.Ceil(half/coneStep - 1e-9))
	for i := 1; i <= steps; i++ {
		for a := range coneAzimuths {
			u := scaled(w.intensity(toward(half*float64(i)/float64(steps), 2*math.Pi*float64(a)/coneAzimuths)), per)
			ratio := sensed(u)
			s.EdgeGain.Right = min(s.EdgeGain.Right, u.Right)
			s.EdgeGain.Left = min(s.EdgeGain.Left, u.Left)
			s.ConeAxialRatio.Right = max(s.ConeAxialRatio.Right, ratio.Right)
			s.ConeAxialRatio.Left = max(s.ConeAxialRatio.Left, ratio.Left)
		}
	}
}

// sensed is an axial ratio for whoever wants the one sense or the other; a
// field of the other sense counts as the cap.
func sensed(u models.Circular) models.Circular {
	db, sense := models.AxialRatio(u)
	switch sense {
	case models.Right:
		return models.Circular{Right: db, Left: models.AxialRatioCap}
	case models.Left:
		return models.Circular{Right: models.AxialRatioCap, Left: db}
	}
	return models.Circular{Right: db, Left: db}
}

// cuts answers beamwidth, sidelobe, peak and rear gain from planes through the
// axis, down to the infinite plane or around a plate, and keeps the rays where
// they were asked for.
func (w *worker) cuts(s *models.Sample, per float64, keep bool) {
	const step = math.Pi / 2 / rays
	rays := rays
	if w.wound.Plate.Finite() {
		rays *= 2
	}
	axis := s.Directivity * s.Efficiency
	peak, lobe, width := axis, 0.0, 0.0
	s.RearGain = 0
	if keep {
		s.Pattern = make([]models.Cut, planes)
	}
	for p := range planes {
		azimuth := math.Pi * float64(p) / planes
		if keep {
			s.Pattern[p] = models.Cut{Plane: azimuth, Rays: make([]models.Ray, 2*rays+1)}
			s.Pattern[p].Rays[rays] = ray(0, s.Gain)
		}
		for side := range 2 {
			reading := halfCut{axis: axis, last: axis}
			sign := float64(1 - 2*side)
			for i := 1; i <= rays; i++ {
				theta := step * float64(i)
				u := scaled(w.around(toward(sign*theta, azimuth)), per)
				reading.see(theta, total(u))
				if i >= 180-rear {
					s.RearGain = max(s.RearGain, total(u))
				}
				if keep {
					s.Pattern[p].Rays[rays+i*int(sign)] = ray(sign*theta, u)
				}
			}
			peak = max(peak, reading.peak)
			lobe = max(lobe, reading.lobe)
			width += reading.half(step * float64(rays))
		}
	}
	s.PeakDirectivity = peak / s.Efficiency
	s.Beamwidth = width / planes
	s.Sidelobe = -60
	if lobe > 0 {
		s.Sidelobe = max(-60, 10*math.Log10(lobe/peak))
	}
}

func ray(angle float64, u models.Circular) models.Ray {
	r := models.Ray{Angle: angle, Gain: u}
	r.AxialRatio, _ = models.AxialRatio(u)
	return r
}

// halfCut reads one half of a cut, ray by ray away from the axis.
type halfCut struct {
	axis float64
	last float64 // the ray before
	at   float64 // its angle
	edge float64 // half-power angle, once passed
	down bool    // the ray before was lower than the one before it
	past bool    // the first minimum lies behind
	peak float64
	lobe float64 // highest beyond the first minimum
}

// halfPower is 3.0103 dB.
const halfPower = 0.5

func (h *halfCut) see(theta, power float64) {
	h.peak = max(h.peak, power)
	if level := halfPower * h.axis; h.edge == 0 && power < level {
		// Between the rays the level in decibels is all but straight.
		t := math.Log(h.last/level) / math.Log(h.last/power)
		h.edge = h.at + t*(theta-h.at)
	}
	if h.down && power > h.last {
		h.past = true
	}
	if h.past {
		h.lobe = max(h.lobe, power)
	}
	h.down = power < h.last
	h.last, h.at = power, theta
}

// half is the half-power angle; most, where the power stays above.
func (h *halfCut) half(most float64) float64 {
	if h.edge == 0 {
		return most
	}
	return h.edge
}
