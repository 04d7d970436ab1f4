package objectives

import (
	"math"

	"turnwise/models"
	"turnwise/models/helix"
)

// Row holds one value per figure, in the units of their columns; NaN where a
// figure was not asked for or does not apply.
type Row [FigureCount]float64

// emptyRow applies to nothing yet.
func emptyRow() Row {
	var r Row
	for i := range r {
		r[i] = math.NaN()
	}
	return r
}

// gainFloor, dB, is the level below which a gain is no gain at all: it keeps
// every figure a plain number.
const gainFloor = -100

// Decibels is 10 lg of a power ratio, not below −100.
func Decibels(ratio float64) float64 {
	if !(ratio > 1e-10) {
		return gainFloor
	}
	return 10 * math.Log10(ratio)
}

// worst takes a value of a figure where it is worse than what stands.
func (r *Row) worst(f Figure, x float64) {
	if math.IsNaN(r[f]) || (Figures[f].More && x < r[f]) || (!Figures[f].More && x > r[f]) {
		r[f] = x
	}
}

// readBand fills in the figures that a sweep over the band decides: of each,
// the worst sample.
func readBand(row *Row, d *models.Design, r *models.Response) {
	for i := range r.Samples {
		for f, x := range readSample(d, &r.Samples[i], r.Answered) {
			if !math.IsNaN(x) {
				row.worst(Figure(f), x)
			}
		}
	}
}

// readSample gives the figures of one sample.
func readSample(d *models.Design, s *models.Sample, answered models.Outputs) Row {
	row, wanted := emptyRow(), d.Wanted()
	vswr, gain := models.VSWR(s.Input, d.Feed.Impedance), s.Gain.Of(wanted)
	row[Gain] = Decibels(gain)
	row[RealisedGain] = Decibels(gain * Transmission(vswr))
	row[AxialRatio] = sensedAxialRatio(s, wanted)
	row[VSWR] = vswr
	row[Efficiency] = s.Efficiency
	if answered&models.Cone != 0 {
		row[AxialRatioCone] = s.ConeAxialRatio.Of(wanted)
		row[EdgeGain] = Decibels(s.EdgeGain.Of(wanted))
	}
	if answered&models.Cuts != 0 {
		row[Beamwidth] = s.Beamwidth * 180 / math.Pi
		row[Sidelobe] = math.Max(s.Sidelobe, -60)
		if s.RearGain > 0 { // an infinite plane and the hand formulas have no rear
			row[FrontToBack] = Decibels(gain) - Decibels(s.RearGain)
		}
	}
	return row
}

// Transmission is 1 − |Γ|² of a VSWR.
func Transmission(vswr float64) float64 {
	return 4 * vswr / ((vswr + 1) * (vswr + 1))
}

// sensedAxialRatio is the axial ratio on the axis; a sample in the wrong
// sense counts as the cap.
func sensedAxialRatio(s *models.Sample, wanted models.Sense) float64 {
	if s.Sense == -wanted {
		return models.AxialRatioCap
	}
	return s.AxialRatio
}

// WrongSense reports whether any sample radiates the other sense on the axis.
func WrongSense(d *models.Design, r *models.Response) bool {
	for i := range r.Samples {
		if r.Samples[i].Sense == -d.Wanted() {
			return true
		}
	}
	return false
}

// interval is the width of the interval about the middle sample inside which
// level stays at or above zero, crossing points by straight lines between
// samples; 0 if the middle fails. An end that is never left counts to there.
func interval(hz, level []float64) float64 {
	mid := len(hz) / 2
	if level[mid] < 0 {
		return 0
	}
	edge := func(step int) float64 {
		i := mid
		for i+step >= 0 && i+step < len(hz) {
			if level[i+step] < 0 {
				t := level[i] / (level[i] - level[i+step])
				return hz[i] + t*(hz[i+step]-hz[i])
			}
			i += step
		}
		return hz[i]
	}
	return edge(1) - edge(-1)
}

// bandwidthSamples is the number of frequencies of the sweeps that gain
// bandwidth and VSWR bandwidth make of their own.
const bandwidthSamples = 41

// about lists the bandwidth sweep: mid ± share of it.
func about(mid, share float64) []float64 {
	return models.Band{From: mid * (1 - share), To: mid * (1 + share), Samples: bandwidthSamples}.Hz()
}

// Half-widths of the bandwidth sweeps, as shares of mid-band.
const (
	gainReach = 0.2
	vswrReach = 0.1
)

// gainBandwidth is the part about mid-band, in per cent of it, whose gain in
// the wanted sense is within 1 dB of mid-band's; 40 when it reaches both ends
// of its sweep.
func gainBandwidth(d *models.Design, r *models.Response) float64 {
	n := len(r.Samples)
	hz, level := make([]float64, n), make([]float64, n)
	mid := Decibels(r.Samples[n/2].Gain.Of(d.Wanted()))
	for i := range r.Samples {
		hz[i] = r.Samples[i].Hz
		level[i] = 1 - math.Abs(Decibels(r.Samples[i].Gain.Of(d.Wanted()))-mid)
	}
	return 100 * interval(hz, level) / hz[n/2]
}

// vswrBandwidth is the interval about mid-band, in per cent of it, inside
// which the VSWR keeps most, |Γ|² taken as straight between samples.
func vswrBandwidth(d *models.Design, r *models.Response, most float64) float64 {
	n := len(r.Samples)
	hz, level := make([]float64, n), make([]float64, n)
	limit := 1 - Transmission(most)
	for i := range r.Samples {
		hz[i] = r.Samples[i].Hz
		level[i] = limit - (1 - Transmission(models.VSWR(r.Samples[i].Input, d.Feed.Impedance)))
	}
	return 100 * interval(hz, level) / hz[n/2]
}

// Read gives the figures that one sweep over a design's band decides, and
// those of its geometry.
func Read(d *models.Design, g helix.Geometry, r *models.Response) Row {
	row := emptyRow()
	readGeometry(&row, g)
	readBand(&row, d, r)
	return row
}
