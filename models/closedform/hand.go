package closedform

import (
	"fmt"
	"math"

	"turnwise/models"
	"turnwise/models/helix"
)

// Hand holds the hand formulas' figures of a design at one frequency.
type Hand struct {
	Kraus1949    float64 `json:"kraus_1949_dbi"`
	KrausLate    float64 `json:"kraus_late_dbi"`
	KingWong     float64 `json:"king_wong_dbi"`
	BeamwidthDeg float64 `json:"beamwidth_deg"`
	AxialRatioDB float64 `json:"axial_ratio_db"`
	Resistance   float64 `json:"resistance_ohm"`
}

// HandFormulas applies the formulas as one would by hand: to the mean
// circumference and the mean spacing. King & Wong's is the peak gain of a
// winding whose peak lies at hz.
func HandFormulas(d *models.Design, hz float64) (Hand, error) {
	curve, err := helix.Wind(d)
	if err != nil {
		return Hand{}, fmt.Errorf("hand formulas: %w", err)
	}
	w := measure(d, curve)
	c, l, pitch := w.at(hz)
	s := l / w.turns
	decibels := func(ratio float64) float64 { return 10 * math.Log10(ratio) }
	return Hand{
		Kraus1949:    decibels(Kraus1949(w.turns, c, s)),
		KrausLate:    decibels(KrausLate(w.turns, c, s)),
		KingWong:     decibels(KingWongPeak(w.turns, c, s, pitch)),
		BeamwidthDeg: KrausBeamwidth(w.turns, c, s) * 180 / math.Pi,
		AxialRatioDB: 20 * math.Log10(KrausAxialRatio(w.turns)),
		Resistance:   PeripheralFeedResistance(c),
	}, nil
}
