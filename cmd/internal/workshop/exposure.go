package workshop

import (
	"fmt"
	"math"

	"turnwise/models"
	"turnwise/objectives"
)

// Power is what a transmitter will put into the antenna.
type Power struct {
	Watts float64 // average, at the connector; 0: not stated
	// Limit is the user's own limit of power density, W/m²; 0: none.
	Limit float64
}

// reflecting is the factor on the power density where ground or a wall
// reflects (OET Bulletin 65, 1997, from memory).
const reflecting = 2.56

// level is a limit of power density, W/m², with whose it is. No value: the
// publication has none at that frequency here.
type level struct {
	Source string
	Value  float64
}

// publicLevels are the published reference levels for the general public, at
// the frequency hz.
func publicLevels(hz float64) []level {
	return []level{
		{"ICNIRP 2020 (Health Phys. 118, 483), general public, whole body", icnirp2020(hz / 1e6)},
		{"47 CFR 1.1310 (OET Bulletin 65, 1997), general population", cfr1310(hz / 1e6)},
	}
}

// icnirp2020 is in W/m², from the frequency in MHz.
func icnirp2020(mhz float64) float64 {
	switch {
	case mhz < 30 || mhz > 300e3:
		return 0
	case mhz <= 400:
		return 2
	case mhz <= 2000:
		return mhz / 200
	}
	return 10
}

// cfr1310 is in W/m² (1 mW/cm² is 10 W/m²), from the frequency in MHz.
func cfr1310(mhz float64) float64 {
	switch {
	case mhz < 300 || mhz > 100e3:
		return 0
	case mhz <= 1500:
		return 10 * mhz / 1500
	}
	return 10
}

// exposure is an estimate of how far the beam reaches before its power
// density has fallen to a level.
type exposure struct {
	Gain float64 // highest total gain in any direction over the band, power ratio
	Far  float64 // 2L²/λ, m: nearer than this the formula does not hold
	Rows []exposureRow
}

type exposureRow struct {
	Level              level
	Clear, Reflected   float64 // m
	ClearIn, ReflectIn bool    // nearer than Far: the formula does not hold
}

// estimateExposure follows R = √(P·G·m/(4πS)), with S at the band's lowest
// frequency.
func estimateExposure(s *Settled, p Power) exposure {
	e := exposure{Far: farField(s)}
	for i := range s.Response.Samples {
		a := &s.Response.Samples[i]
		e.Gain = math.Max(e.Gain, a.PeakDirectivity*a.Efficiency)
	}
	levels := publicLevels(s.Response.Samples[0].Hz)
	if p.Limit > 0 {
		levels = append(levels, level{"your own limit", p.Limit})
	}
	for _, l := range levels {
		row := exposureRow{Level: l}
		if l.Value > 0 {
			row.Clear, row.Reflected = distance(p.Watts, e.Gain, 1, l.Value), distance(p.Watts, e.Gain, reflecting, l.Value)
			row.ClearIn, row.ReflectIn = row.Clear < e.Far, row.Reflected < e.Far
		}
		e.Rows = append(e.Rows, row)
	}
	return e
}

// distance is R = √(P·G·m/(4πS)), m.
func distance(power, gain, factor, density float64) float64 {
	return math.Sqrt(power * gain * factor / (4 * math.Pi * density))
}

// farField is 2L²/λ at the highest frequency, with L the antenna's greatest
// extent: across the corners of the box it fills.
func farField(s *Settled) float64 {
	g := s.Curve.Geometry()
	l2 := g.Length*g.Length + g.Widest*g.Widest
	highest := s.Response.Samples[len(s.Response.Samples)-1].Hz
	return 2 * l2 * highest / models.LightSpeed
}

// words are the estimate's conditions and its result, one paragraph each.
func (e *exposure) words(p Power) []string {
	out := []string{
		fmt.Sprintf("Estimate only, never a clearance certificate: R = √(P·G·m/(4πS)) with P = %s W average at the connector, G = %.1f dBi (the highest total gain in any direction over the band), m = 1 in the clear and %.2f where ground or a wall reflects, S the level at the band's lowest frequency.",
			shortest(p.Watts), objectives.Decibels(e.Gain), reflecting),
		fmt.Sprintf("Nearer than 2L²/λ = %.2f m this formula does not hold. Keep everyone out of the beam to at least that distance, or have the field measured there.", e.Far),
	}
	return out
}
