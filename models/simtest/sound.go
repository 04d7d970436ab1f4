package simtest

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"strconv"

	"turnwise/models"
)

// bits is an answer as text: equal texts are equal bits. It fails where the
// answer holds NaN or an infinity.
func bits(r models.Response) (string, error) {
	text, err := json.Marshal(&r)
	return strconv.Quote(r.Statement) + string(text), err
}

// sound tells every way in which an answer is not what its question asked
// for, or is no antenna's.
func sound(r *models.Response, q models.Question) error {
	if _, err := bits(*r); err != nil {
		return fmt.Errorf("the answer cannot be stored: %w", err)
	}
	if len(r.Samples) != len(q.Hz) {
		return fmt.Errorf("%d samples for %d frequencies", len(r.Samples), len(q.Hz))
	}
	if r.Answered&models.Axis == 0 || r.Answered&^everything != 0 {
		return fmt.Errorf("answered outputs are %b; the axis is always among them, and what is none is not", r.Answered)
	}
	if r.Statement == "" {
		return errors.New("the answer does not say what the model is worth")
	}
	for i := range r.Samples {
		s := &r.Samples[i]
		if s.Hz != q.Hz[i] {
			return fmt.Errorf("sample %d is for %g Hz, asked were %g", i, s.Hz, q.Hz[i])
		}
		var f findings
		f.axis(s)
		f.others(s, r.Answered)
		if err := errors.Join(f...); err != nil {
			return fmt.Errorf("at %g Hz: %w", s.Hz, err)
		}
	}
	return nil
}

// findings collects what is wrong with a sample.
type findings []error

// within demands a number from lo to hi.
func (f *findings) within(what string, x, lo, hi float64) {
	if !(x >= lo && x <= hi) {
		*f = append(*f, fmt.Errorf("%s is %g, outside %g to %g", what, x, lo, hi))
	}
}

// absent demands what a field that was not answered holds.
func (f *findings) absent(what string, there bool) {
	if there {
		*f = append(*f, fmt.Errorf("%s is set, but is not answered", what))
	}
}

// above is the least number above nothing, most the largest.
const (
	above = math.SmallestNonzeroFloat64
	most  = math.MaxFloat64
)

func (f *findings) impedance(what string, z complex128) {
	f.within("the resistance "+what, real(z), -most, most)
	f.within("the reactance "+what, imag(z), -most, most)
	if z == 0 {
		*f = append(*f, fmt.Errorf("no impedance %s", what))
	}
}

func (f *findings) circular(what string, c models.Circular, hi float64) {
	f.within("right "+what, c.Right, 0, hi)
	f.within("left "+what, c.Left, 0, hi)
}

// ratio demands that an axial ratio is that of the gains beside it.
func (f *findings) ratio(what string, db float64, gain models.Circular) {
	f.within(what, db, 0, models.AxialRatioCap)
	own, sense := models.AxialRatio(gain)
	if math.Abs(own-db) > 0.1 && sense != 0 {
		*f = append(*f, fmt.Errorf("%s is %g dB, the gains beside it make %g dB", what, db, own))
	}
}

func (f *findings) axis(s *models.Sample) {
	f.impedance("of the port", s.Port)
	f.impedance("of the input", s.Input)
	f.circular("gain", s.Gain, most)
	f.within("gain of both senses", s.Gain.Right+s.Gain.Left, above, most)
	f.ratio("axial ratio", s.AxialRatio, s.Gain)
	if _, own := models.AxialRatio(s.Gain); s.Sense != own {
		*f = append(*f, fmt.Errorf("the sense is %q, the gains say %q", s.Sense, own))
	}
	f.within("directivity", s.Directivity, above, most)
	f.within("efficiency", s.Efficiency, above, 1+1e-9)
}

// others judges the outputs beside the axis: there where answered, nothing
// where not.
func (f *findings) others(s *models.Sample, answered models.Outputs) {
	if answered&models.Cone != 0 {
		f.circular("axial ratio over the cone", s.ConeAxialRatio, models.AxialRatioCap)
		f.within("axial ratio over the cone", max(s.ConeAxialRatio.Right, s.ConeAxialRatio.Left), above, models.AxialRatioCap)
		f.circular("gain at the edge", s.EdgeGain, most)
	} else {
		f.absent("the cone", s.ConeAxialRatio != models.Circular{} || s.EdgeGain != models.Circular{})
	}
	if answered&models.Cuts != 0 {
		f.within("peak directivity", s.PeakDirectivity, s.Directivity*(1-1e-6), most)
		f.within("beamwidth", s.Beamwidth, above, 2*math.Pi)
		f.within("sidelobe", s.Sidelobe, -60, 0)
		f.within("rear gain", s.RearGain, 0, most)
	} else {
		f.absent("what cuts tell", s.PeakDirectivity != 0 || s.Beamwidth != 0 || s.Sidelobe != 0 || s.RearGain != 0)
	}
	if answered&models.Balance != 0 {
		f.within("power balance", s.PowerBalance, above, most)
	} else {
		f.absent("the power balance", s.PowerBalance != 0)
	}
	if answered&models.Spread != 0 {
		f.impedance("of the spread port", s.SpreadPort)
	} else {
		f.absent("the spread port", s.SpreadPort != 0)
	}
	if answered&models.Pattern != 0 {
		f.pattern(s.Pattern)
	} else {
		f.absent("the pattern", s.Pattern != nil)
	}
}

func (f *findings) pattern(cuts []models.Cut) {
	f.within("number of cuts", float64(len(cuts)), 1, most)
	for _, c := range cuts {
		f.within("plane of a cut", c.Plane, -2*math.Pi, 2*math.Pi)
		f.within("number of directions", float64(len(c.Rays)), 1, most)
		for _, r := range c.Rays {
			f.within("angle of a direction", r.Angle, -math.Pi-1e-9, math.Pi+1e-9)
			f.circular("gain in a direction", r.Gain, most)
			f.ratio("axial ratio in a direction", r.AxialRatio, r.Gain)
		}
	}
}

// rear demands that nothing lies behind an infinite plane.
func rear(d *models.Design, r *models.Response) error {
	if d.Ground.Finite() {
		return nil
	}
	for i := range r.Samples {
		s := &r.Samples[i]
		if s.RearGain != 0 {
			return fmt.Errorf("at %g Hz: the rear gain is %g; an infinite plane has no rear", s.Hz, s.RearGain)
		}
		for _, c := range s.Pattern {
			for _, ray := range c.Rays {
				if math.Abs(ray.Angle) > math.Pi/2+1e-9 {
					return fmt.Errorf("at %g Hz: a direction %g rad from the axis lies behind an infinite plane", s.Hz, ray.Angle)
				}
			}
		}
	}
	return nil
}
