package external

import (
	"encoding/json"
	"fmt"
	"reflect"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
)

const everything = models.Axis | models.Cone | models.Cuts | models.Balance | models.Spread | models.Pattern

// asking is a question for some outputs at one frequency, with a
// transformer in the design.
func asking(o models.Outputs) *question {
	d := winding(4)
	d.Feed.Transformer = models.Transformer{Impedance: 80, Length: 0.05, Velocity: 1}
	return &question{Design: d, Hz: []float64{1e9}, outputs: o | models.Axis}
}

// kept is a sample as models keep it, every output answered.
func kept(t *rapid.T) models.Sample {
	x := func(what string, lo, hi float64) float64 { return rapid.Float64Range(lo, hi).Draw(t, what) }
	z := func(what string) complex128 { return complex(x(what, 1, 500), x(what, -500, 500)) }
	circular := func(what string, lo, hi float64) models.Circular {
		return models.Circular{Right: x(what, lo, hi), Left: x(what, lo, hi)}
	}
	s := models.Sample{
		Hz: 1e9, Port: z("port"), Input: z("input"), Gain: circular("gain", 1e-6, 100), Directivity: x("directivity", 1e-3, 100), Efficiency: x("efficiency", 0, 1),
		ConeAxialRatio: circular("cone", 0.1, 60), EdgeGain: circular("edge", 1e-6, 100), PeakDirectivity: x("peak", 1, 100), Beamwidth: x("beamwidth", 0.1, 3),
		Sidelobe: x("sidelobe", -60, -0.1), RearGain: x("rear", 0, 3), PowerBalance: x("balance", 0.9, 1.1), SpreadPort: z("spread"),
	}
	s.AxialRatio, s.Sense = models.AxialRatio(s.Gain)
	ray := models.Ray{Angle: x("angle", -3, 3), Gain: circular("ray", 1e-6, 100)}
	ray.AxialRatio, _ = models.AxialRatio(ray.Gain)
	s.Pattern = []models.Cut{{Plane: x("plane", 0, 3), Rays: []models.Ray{ray}}}
	return s
}

// A sample in the form in which models keep it is an answer, bit for bit.
func TestKeptSampleIsAnAnswer(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		want := kept(t)
		text, err := json.Marshal(want)
		if err != nil {
			t.Fatal(err)
		}
		r, err := readAnswer(fmt.Appendf(nil, `{"id":7,"samples":[%s],"warnings":["w"]}`, text), 7, asking(everything))
		if err != nil {
			t.Fatal(err)
		}
		if !reflect.DeepEqual(r, models.Response{Samples: []models.Sample{want}, Answered: everything, Warnings: []string{"w"}}) {
			t.Fatalf("read %+v\nwant %+v", r, want)
		}
	})
}

const least = `{"hz":1e9,"port_ohm":[120,-30],"gain":{"right":8,"left":0.08},"directivity":9,"efficiency":0.95}`

func answering(sample string) string { return `{"id":7,"samples":[` + sample + `]}` }

// What can be left away is worked out.
func TestLeastAnswer(t *testing.T) {
	q := asking(models.Axis)
	r, err := readAnswer([]byte(answering(least)), 7, q)
	if err != nil {
		t.Fatal(err)
	}
	want := models.Sample{Hz: 1e9, Port: 120 - 30i, Gain: models.Circular{Right: 8, Left: 0.08}, Directivity: 9, Efficiency: 0.95, Sense: models.Right}
	want.Input = q.Design.Feed.Transformer.Input(want.Port, 1e9)
	want.AxialRatio, _ = models.AxialRatio(want.Gain)
	if !reflect.DeepEqual(r.Samples[0], want) {
		t.Errorf("read %+v\nwant %+v", r.Samples[0], want)
	}
	// Outputs that were not asked are not looked at.
	more := strings.Replace(least, `"hz"`, `"beamwidth_rad":"wide","pattern":null,"hz"`, 1)
	if r, err := readAnswer([]byte(answering(more)), 7, q); err != nil || !reflect.DeepEqual(r.Samples[0], want) {
		t.Errorf("with more than was asked: %+v, %v", r, err)
	}
}

func TestWrongAnswers(t *testing.T) {
	put := func(old, now string) string { return answering(strings.Replace(least, old, now, 1)) }
	add := func(keys string) string { return put(`"hz"`, keys+`,"hz"`) }
	for _, c := range []struct {
		text, words string
		o           models.Outputs
	}{
		{text: ``, words: "no answer: the text ends inside the value"},
		{text: `7`, words: "without an id where the answer to question 7"},
		{text: `{"id":7`, words: "broken: the text ends inside the value"},
		{text: `{"id":"7"}`, words: `answered question "7" where`},
		{text: `{"id":6,"samples":[]}`, words: "answered question 6 where question 7"},
		{text: `{"id":7.5}`, words: "answered question 7.5 where"},
		{text: `{"id":7,"id":7}`, words: "id stands twice"},
		{text: `{"id":7}`, words: "samples is missing; it should be a list of 1 samples"},
		{text: `{"id":7,"samples":[]}`, words: "samples is a list of 0"},
		{text: `{"id":7,"samples":{}}`, words: "samples is an object"},
		{text: `{"id":7,"samples":[1]}`, words: "samples[0] is 1; it should be an object"},
		{text: `{"id":7,"samples":[` + least + `,` + least + `]}`, words: "samples are 2; 1 are due"},
		{text: answering(least) + `{}`, words: "more text after the end"},
		{text: `{"id":7,"error":""}`, words: `error is ""`},
		{text: `{"id":7,"error":5}`, words: "error is 5"},
		{text: `{"id":7,"error":"no","samples":[]}`, words: "samples is no field"},
		{text: `{"id":7,"error":"` + strings.Repeat("ab", 5000) + `"}`, words: "abab"},
		{text: `{"id":7,"samples":[` + least + `],"warnings":[1]}`, words: "warnings[0] is 1"},
		{text: `{"id":7,"samples":[` + least + `],"warnings":[` + strings.Repeat(`"w",`, 20) + `"w"]}`, words: "warnings has 21 texts"},
		{text: `{"id":7,"samples":[` + strings.Repeat("0,", 1e6) + `0]}`, words: "more than a million values"},
		{text: put(`1e9`, `1.1e9`), words: "samples[0].hz is 1.1e+09; 1e+09 was asked"},
		{text: put(`[120,-30]`, `[120]`), words: "port_ohm should be resistance and reactance"},
		{text: put(`[120,-30]`, `[0,0]`), words: "port_ohm should be resistance and reactance"},
		{text: put(`120`, `Infinity`), words: "port_ohm[0] is Infinity"},
		{text: put(`120`, `1e999`), words: "port_ohm[0] is 1e999"},
		{text: put(`"left":0.08`, `"left":-1`), words: "gain.left is -1"},
		{text: put(`,"left":0.08`, ``), words: "gain.left is missing"},
		{text: put(`"left"`, `"Left"`), words: "gain.Left is no field"},
		{text: put(`0.95`, `1.2`), words: "efficiency is 1.2; it should be a number from 0 to 1"},
		{text: put(`"directivity":9`, `"directivity":0`), words: "directivity is 0"},
		{text: add(`"axial_ratio_db":5`), words: "axial_ratio_db is 5; gain makes it 1.743"},
		{text: add(`"sense":-1`), words: "sense is not the sense of gain, which is 1"},
		{text: add(`"efficency":1`), words: "efficency is no field"},
		{text: answering(least), o: models.Cone, words: "cone_axial_ratio_db is missing"},
		{text: answering(least), o: models.Cuts, words: "beamwidth_rad is missing"},
		{text: answering(least), o: models.Balance, words: "power_balance is missing"},
		{text: answering(least), o: models.Spread, words: "spread_port_ohm is missing"},
		{text: answering(least), o: models.Pattern, words: "pattern is missing"},
		{text: add(`"cone_axial_ratio_db":{"right":61,"left":60},"edge_gain":{"right":1,"left":1}`), o: models.Cone, words: "cone_axial_ratio_db.right is 61"},
		{text: add(`"peak_directivity":9,"beamwidth_rad":1,"sidelobe_db":9`), o: models.Cuts, words: "sidelobe_db is 9"},
		{text: add(`"pattern":[{"plane_rad":0,"rays":[{"angle_rad":9,"gain":{"right":1,"left":0}}]}]`), o: models.Pattern, words: "pattern[0].rays[0].angle_rad is 9"},
	} {
		_, err := readAnswer([]byte(c.text), 7, asking(c.o))
		if err == nil || !strings.Contains(err.Error(), c.words) {
			t.Errorf("%.200s\nread with %v; want %q", c.text, err, c.words)
		} else if len(err.Error()) > mostReason+100 {
			t.Errorf("%.200s\nan error of %d bytes", c.text, len(err.Error()))
		}
	}
}

// FuzzAnswer: whatever a program writes is an error or a sound answer.
func FuzzAnswer(f *testing.F) {
	full := reply(&wire{ID: 7, Hz: []float64{1e9}, Outputs: wordsOf(everything), Cone: 0.2, Design: struct {
		Turns      float64   `json:"turns"`
		Spacing    []float64 `json:"spacing_m"`
		Handedness string    `json:"handedness"`
	}{4, []float64{0.066}, "left"}})
	for _, seed := range []string{full, answering(least), `{"id":7,"error":"no"}`, full[:len(full)/2], strings.ReplaceAll(full, "60", "NaN"), `{"id":8}`} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, text []byte) {
		for _, o := range []models.Outputs{models.Axis, everything} {
			r, err := readAnswer(text, 7, asking(o))
			if err != nil {
				if len(r.Samples) != 0 || err.Error() == "" {
					t.Errorf("%q: %+v beside the error %q", text, r, err)
				}
				continue
			}
			if !json.Valid(text) || len(r.Samples) != 1 || r.Answered != o {
				t.Errorf("%q is taken as %+v", text, r)
			}
			if _, err := json.Marshal(r); err != nil {
				t.Errorf("%q is taken, and cannot be kept: %v", text, err)
			}
			s := r.Samples[0]
			if s.Port == 0 || s.Directivity <= 0 || s.Efficiency < 0 || s.Efficiency > 1 || s.Gain.Right < 0 || s.Gain.Left < 0 ||
				o == everything && (s.SpreadPort == 0 || len(s.Pattern) == 0 || s.Sidelobe > 0) {
				t.Errorf("%q is taken as %+v", text, s)
			}
		}
	})
}

func TestTail(t *testing.T) {
	var w tail
	for i := range 3000 {
		fmt.Fprintf(&w, "line %d\n", i)
	}
	_, _ = w.Write([]byte("half a letter \xc3"))
	lines := strings.Split(w.String(), "\n")
	if len(lines) != tailLines || lines[tailLines-1] != "half a letter" || lines[tailLines-2] != "line 2999" {
		t.Errorf("%q", lines)
	}
	_, _ = w.Write([]byte(strings.Repeat("x", 10*tailBytes)))
	if w.String() != strings.Repeat("x", tailBytes) {
		t.Errorf("%d bytes", len(w.String()))
	}
}
