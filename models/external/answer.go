package external

import (
	"bytes"
	"errors"
	"fmt"
	"math"
	"strconv"

	"turnwise/models"
	"turnwise/models/internal/jsontree"
)

// outOfStep is a line that is no answer to the question that was asked.
type outOfStep struct{ what string }

func (o *outOfStep) Error() string { return o.what }

// Bounds of what a program may say.
const (
	mostReason   = 2000 // bytes, of an error that is passed on
	mostWarnings = 20
	longWarning  = 1000 // bytes
	mostCommas   = 1e6  // in a line: about as many values
)

// readAnswer reads the line that answers a question. An error is an
// [outOfStep] where the line is not this question's; else it is the program's
// own, or says everything that is wrong with the answer.
func readAnswer(text []byte, id uint64, q *question) (models.Response, error) {
	if bytes.Count(text, []byte{','}) > mostCommas {
		return models.Response{}, &outOfStep{"wrote a line of more than a million values"}
	}
	v, broken := jsontree.Parse(text)
	if err := checkID(&v, id); err != nil {
		if broken != nil {
			err.what = "wrote a line that is no answer: " + broken.Error() + ": " + clip(text, 80)
		}
		return models.Response{}, err
	}
	if broken != nil {
		return models.Response{}, fmt.Errorf("the answer is broken: %w", broken)
	}
	var faults jsontree.Faults
	f := jsontree.Read(v, "", &faults)
	f.Number("id", power)
	if f.Has("error") {
		reason := f.Text("error", mostLine)
		f.Done()
		return models.Response{}, errors.Join(faults.Err(), failure(reason))
	}
	r := models.Response{Answered: q.outputs, Warnings: f.Texts("warnings", longWarning)}
	if len(r.Warnings) > mostWarnings {
		faults.Add("warnings has %d texts; at most %d are due", len(r.Warnings), mostWarnings)
	}
	s := reader{&faults, q}
	r.Samples = s.samples(f)
	f.Done()
	if err := faults.Err(); err != nil {
		return models.Response{}, fmt.Errorf("the answer is wrong: %w", err)
	}
	return r, nil
}

// failure is what the program says went wrong.
func failure(reason string) error {
	if len(reason) > mostReason {
		reason = clip([]byte(reason), mostReason)
	}
	if reason == "" {
		return nil
	}
	return errors.New(reason)
}

// checkID demands the number of the question.
func checkID(v *jsontree.Value, id uint64) *outOfStep {
	got, ok := v.Find("id")
	switch {
	case !ok:
		return &outOfStep{fmt.Sprintf("wrote a line without an id where the answer to question %d was due", id)}
	case got.Kind != jsontree.Number || got.Number != float64(id):
		return &outOfStep{fmt.Sprintf("answered question %s where question %d was asked", show(got), id)}
	}
	return nil
}

func show(v *jsontree.Value) string {
	if v.Kind == jsontree.Number {
		return strconv.FormatFloat(v.Number, 'g', -1, 64)
	}
	return strconv.Quote(v.Text)
}

// What numbers of a sample may be.
var (
	ohms       = jsontree.Range{Low: -math.MaxFloat64, High: math.MaxFloat64, Unit: "ohm"}
	power      = jsontree.Range{Low: 0, High: math.MaxFloat64}
	positive   = jsontree.Range{Low: math.SmallestNonzeroFloat64, High: math.MaxFloat64}
	share      = jsontree.Range{Low: 0, High: 1}
	axialRatio = jsontree.Range{Low: 0, High: models.AxialRatioCap, Unit: "dB"}
	belowPeak  = jsontree.Range{Low: -60, High: 0, Unit: "dB"}
	turn       = jsontree.Range{Low: 0, High: 2 * math.Pi, Unit: "rad"}
	halfTurn   = jsontree.Range{Low: -math.Pi - 1e-9, High: math.Pi + 1e-9, Unit: "rad"}
)

// reader reads the samples of an answer.
type reader struct {
	faults *jsontree.Faults
	q      *question
}

func (r reader) samples(f *jsontree.Fields) []models.Sample {
	items := f.List("samples", 1, fmt.Sprintf("a list of %d samples", len(r.q.Hz)))
	if items != nil && len(items) != len(r.q.Hz) {
		r.faults.Add("samples are %d; %d are due, one for each frequency", len(items), len(r.q.Hz))
		return nil
	}
	out := make([]models.Sample, len(items))
	for i, item := range items {
		out[i] = r.sample(jsontree.Read(item, fmt.Sprintf("samples[%d]", i), r.faults), r.q.Hz[i])
	}
	return out
}

// sample reads one sample: the keys of [models.Sample] as JSON.
func (r reader) sample(f *jsontree.Fields, hz float64) models.Sample {
	if got := f.Number("hz", positive); math.Abs(got-hz) > 1e-9*hz {
		r.faults.Add("%s is %g; %g was asked", f.Where("hz"), got, hz)
	}
	s := models.Sample{
		Hz:          hz,
		Port:        r.impedance(f, "port_ohm"),
		Gain:        r.circular(f, "gain", power),
		Directivity: f.Number("directivity", positive),
		Efficiency:  f.Number("efficiency", share),
	}
	s.Input = r.q.Design.Feed.Transformer.Input(s.Port, hz)
	if f.Has("input_ohm") {
		s.Input = r.impedance(f, "input_ohm")
	}
	s.AxialRatio, s.Sense = r.axialRatio(f, s.Gain)
	if f.Has("sense") && models.Sense(f.Whole("sense", -1, 1)) != s.Sense {
		r.faults.Add("%s is not the sense of gain, which is %d", f.Where("sense"), s.Sense)
	}
	if r.asked(f, models.Cone, "cone_axial_ratio_db", "edge_gain") {
		s.ConeAxialRatio = r.circular(f, "cone_axial_ratio_db", axialRatio)
		s.EdgeGain = r.circular(f, "edge_gain", power)
	}
	if r.asked(f, models.Cuts, "peak_directivity", "beamwidth_rad", "sidelobe_db", "rear_gain") {
		s.PeakDirectivity = f.Number("peak_directivity", positive)
		s.Beamwidth = f.Number("beamwidth_rad", turn)
		s.Sidelobe = f.Number("sidelobe_db", belowPeak)
		s.RearGain = f.NumberOr("rear_gain", power, 0)
	}
	if r.asked(f, models.Balance, "power_balance") {
		s.PowerBalance = f.Number("power_balance", power)
	}
	if r.asked(f, models.Spread, "spread_port_ohm") {
		s.SpreadPort = r.impedance(f, "spread_port_ohm")
	}
	if r.asked(f, models.Pattern, "pattern") {
		s.Pattern = r.pattern(f)
	}
	f.Done()
	return s
}

// asked reports whether an output was asked. Where it was not, its keys may
// be there and are not looked at.
func (r reader) asked(f *jsontree.Fields, o models.Outputs, keys ...string) bool {
	if r.q.outputs&o != 0 {
		return true
	}
	for _, k := range keys {
		f.Has(k)
	}
	return false
}

func (r reader) impedance(f *jsontree.Fields, key string) complex128 {
	parts := f.Numbers(key, ohms)
	switch {
	case len(parts) == 2 && (parts[0] != 0 || parts[1] != 0):
		return complex(parts[0], parts[1])
	case len(parts) > 0:
		r.faults.Add("%s should be resistance and reactance, not both zero", f.Where(key))
	}
	return 0
}

func (r reader) circular(f *jsontree.Fields, key string, of jsontree.Range) models.Circular {
	o := f.Object(key)
	c := models.Circular{Right: o.Number("right", of), Left: o.Number("left", of)}
	o.Done()
	return c
}

// axialRatio is that of the gains. One that is given must agree, and counts.
func (r reader) axialRatio(f *jsontree.Fields, gain models.Circular) (db float64, sense models.Sense) {
	db, sense = models.AxialRatio(gain)
	if !f.Has("axial_ratio_db") {
		return db, sense
	}
	given := f.Number("axial_ratio_db", axialRatio)
	if sense != 0 && math.Abs(given-db) > 0.1 {
		r.faults.Add("%s is %g; gain makes it %.4g", f.Where("axial_ratio_db"), given, db)
	}
	return given, sense
}

func (r reader) pattern(f *jsontree.Fields) []models.Cut {
	var cuts []models.Cut
	for i, item := range f.List("pattern", 1, "a list of cuts") {
		c := jsontree.Read(item, fmt.Sprintf("%s[%d]", f.Where("pattern"), i), r.faults)
		cut := models.Cut{Plane: c.Number("plane_rad", halfTurn)}
		for k, ray := range c.List("rays", 1, "a list of directions") {
			o := jsontree.Read(ray, fmt.Sprintf("%s[%d]", c.Where("rays"), k), r.faults)
			one := models.Ray{Angle: o.Number("angle_rad", halfTurn), Gain: r.circular(o, "gain", power)}
			one.AxialRatio, _ = r.axialRatio(o, one.Gain)
			o.Done()
			cut.Rays = append(cut.Rays, one)
		}
		c.Done()
		cuts = append(cuts, cut)
	}
	return cuts
}
