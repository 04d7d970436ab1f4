package report

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"turnwise/cmd/internal/folder"
	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/front"
)

func TestWords(t *testing.T) {
	band := models.Band{From: 1.66e9, To: 1.70e9, Samples: 5}
	most := func(f objectives.Figure, x float64) objectives.Limit { return objectives.Limit{Figure: f, Value: x} }
	least := func(f objectives.Figure, x float64) objectives.Limit {
		return objectives.Limit{Figure: f, Value: x, AtLeast: true}
	}
	for _, c := range []struct{ got, want string }{
		{bandWords(band), "1.66 to 1.7 GHz"},
		{bandWords(models.Band{From: 434e6, To: 434e6, Samples: 1}), "434 MHz"},
		{frequency(433.92e6, models.Band{From: 433e6, To: 435e6}), "433.92 MHz"},
		{limitWords(most(objectives.Length, 0.9)), "at most 900 mm"},
		{limitWords(least(objectives.Gain, 12.5)), "at least 12.5 dBic"},
		{limitMark(most(objectives.VSWR, 2)), "VSWR ≤ 2"},
		{limitMark(most(objectives.Beamwidth, 40)), "beamwidth ≤ 40°"},
		{limitMark(most(objectives.Sidelobe, -12)), "sidelobe ≤ −12 dB"},
		{limitMark(most(objectives.Mass, 0.25)), "mass ≤ 250 g"},
		{roomWords(objectives.Gain, room(least(objectives.Gain, 12), 11.25)), "−0.75 dB"},
		{roomWords(objectives.VSWR, room(most(objectives.VSWR, 2), 1.5)), "+0.50"},
		{said(objectives.Sidelobe, -11.5), "−11.50 dB"},
		{said(objectives.FrontToBack, math.NaN()), "–"},
		{figureName(objectives.VSWRBandwidth), "VSWR bandwidth"},
		{lawWords(models.Law{0.0721, 0.05}), "72.1 → 50 mm"},
		{threadWords(models.Left), "opposite to an ordinary screw thread"},
		{GroundWords(models.Ground{Kind: models.Cup, Diameter: 0.15, Rim: 0.06}), "a cup 150 mm across with a rim of 60 mm, 1 mm aluminium"},
		{GroundWords(models.Ground{Kind: models.Disc, Diameter: 0.2, Thickness: 1.5e-3, Material: models.Material{Name: "brass", Density: 8530}}), "a disc 200 mm across, 1.5 mm brass"},
		{GroundWords(models.Ground{Kind: models.Disc, Material: models.Material{Density: 2660}}), "a disc, 1 mm metal of 2.66 g/cm³"},
		{GroundWords(models.Ground{Kind: models.Infinite, Thickness: 1}), "an infinite ground plane"},
		{massWords(helix.Geometry{Mass: 0.085, ConductorMass: 0.0352}), "85 g (the conductor 35.2 g)"},
		{massWords(helix.Geometry{Mass: 0.0352, ConductorMass: 0.0352}), "35.2 g"},
		{trimmed(-0.0001, 3), "0"},
		{signed(-0.001), "+0.00"},
		{and([]string{"a", "b", "c"}), "a, b and c"},
		{spell(90 * time.Minute), "1 h 30 min"},
		{spell(75 * time.Second), "1 min 15 s"},
	} {
		if c.got != c.want {
			t.Errorf("%q, want %q", c.got, c.want)
		}
	}
}

// pickTable is a front of random gains and lengths.
func pickTable(random *rand.Rand, n int) (*objectives.Problem, *folder.Table) {
	p := &objectives.Problem{Spec: objectives.Spec{Aims: []objectives.Aim{{Figure: objectives.Gain, Most: true}, {Figure: objectives.Length}}}}
	tb := &folder.Table{}
	for i := range n {
		m := folder.Member{ID: fmt.Sprintf("%010x", i)}
		m.Figures[objectives.Gain], m.Figures[objectives.Length] = 8+8*random.Float64(), 0.1+random.Float64()
		tb.Members = append(tb.Members, m)
	}
	return p, tb
}

// The picked ascend without repetition, are as many as may be, and hold those
// named and the best of each aim.
func TestPick(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(0, 40).Draw(t, "n")
		most := rapid.IntRange(4, 14).Draw(t, "most")
		p, tb := pickTable(rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1)), n)
		var named []string
		for range min(n, 2) {
			named = append(named, tb.Members[rapid.IntRange(0, n-1).Draw(t, "named")].ID)
		}
		got := Pick(p, tb, append(named, "not there"), most)
		if len(got) != min(n, most) || !slices.IsSorted(got) || len(slices.Compact(slices.Clone(got))) != len(got) {
			t.Fatalf("picked %v of %d, %d at the most", got, n, most)
		}
		has := func(is func(m *folder.Member) bool) bool {
			return slices.ContainsFunc(got, func(i int) bool { return is(&tb.Members[i]) })
		}
		for _, id := range named {
			if !has(func(m *folder.Member) bool { return m.ID == id }) {
				t.Fatalf("%s, which was named, is not picked", id)
			}
		}
		for _, a := range p.Aims {
			best := math.Inf(1)
			for i := range tb.Members {
				best = math.Min(best, a.Cost(tb.Members[i].Figures[a.Figure]))
			}
			if n > 0 && !has(func(m *folder.Member) bool { return a.Cost(m.Figures[a.Figure]) == best }) {
				t.Fatalf("the best by %s is not picked", a.Figure)
			}
		}
	})
}

// On a straight front the picked lie evenly: no two neighbours are farther
// apart than twice the even distance.
func TestPickSpreads(t *testing.T) {
	p, tb := pickTable(rand.New(rand.NewPCG(1, 1)), 121)
	for i := range tb.Members {
		tb.Members[i].Figures[objectives.Gain], tb.Members[i].Figures[objectives.Length] = 8+0.05*float64(i), 0.1+0.005*float64(i)
	}
	got := Pick(p, tb, nil, 13)
	for i := 1; i < len(got); i++ {
		if got[i]-got[i-1] > 20 {
			t.Errorf("picked %v: a gap of %d", got, got[i]-got[i-1])
		}
	}
}

func evaluation(id int, from string, aims ...float64) optimize.Evaluation {
	e := optimize.Evaluation{Status: optimize.OK}
	e.ID, e.From, e.Aims = id, from, aims
	return e
}

// Two points of a unit square's corners, then a better one: worked by hand
// with the reference at 1.1.
func TestHistory(t *testing.T) {
	failed := optimize.Evaluation{Status: optimize.Failed}
	broken := evaluation(1, "sample", -5, -5)
	broken.Limits = []float64{0.5}
	past := []optimize.Evaluation{failed, broken, evaluation(2, "sample", 0, 1), evaluation(3, "genetic", 1, 0), evaluation(4, "genetic", 0.5, 0.5)}
	for i := range past {
		past[i].ID = i
	}
	// In strips of the first aim, from the right.
	ends := 0.1*1.1 + 1*0.1
	whole := 0.1*1.1 + 0.5*0.6 + 0.5*0.1
	want := []float64{0, 0, 0, 1.1 * 0.1 / whole, ends / whole, 1}
	steps := History(past)
	if len(steps) != len(want) {
		t.Fatalf("%d steps, want %d", len(steps), len(want))
	}
	for i, s := range steps {
		if s.Evaluations != i || math.Abs(s.Share-want[i]) > 1e-12 {
			t.Errorf("step %d: %d evaluations, share %g, want %g", i, s.Evaluations, s.Share, want[i])
		}
	}
	if History(past[:2]) != nil {
		t.Error("a history of nothing feasible")
	}
}

// A history never falls, ends at 1 and stays about as long as it should.
func TestHistoryRises(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		random := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 2))
		aims := rapid.IntRange(1, 4).Draw(t, "aims")
		past := make([]optimize.Evaluation, rapid.IntRange(1, 700).Draw(t, "n"))
		for i := range past {
			past[i] = evaluation(i, "sample")
			for range aims {
				past[i].Aims = append(past[i].Aims, random.NormFloat64())
			}
		}
		steps := History(past)
		if n := len(steps); n > 2*historySteps+2 || steps[n-1].Evaluations != len(past) || steps[n-1].Share != 1 {
			t.Fatalf("%d steps to %+v", n, steps[n-1])
		}
		for i := 1; i < len(steps); i++ {
			if steps[i].Share < steps[i-1].Share-1e-12 {
				t.Fatalf("step %d falls from %g to %g", i, steps[i-1].Share, steps[i].Share)
			}
		}
	})
}

// Counting agrees with the exact volume as far as its points tell: within
// four standard deviations of 4000 draws.
func TestCountedAgreesWithExact(t *testing.T) {
	random := rand.New(rand.NewPCG(5, 5))
	for aims := 1; aims <= 4; aims++ {
		whole := 1.0
		archive, cloud := front.NewArchive(front.UnitReference(aims)), newCounted(aims)
		for range aims {
			whole *= 1 + front.Margin
		}
		for i := range 30 {
			at := make([]float64, aims)
			for k := range at {
				at[k] = random.Float64()
			}
			archive.Insert(i, front.Value{Aims: at})
			cloud.insert(i, at)
			want := archive.Hypervolume() / whole
			got := cloud.volume() / cloudPoints
			if off := math.Abs(got - want); off > 4*math.Sqrt(want*(1-want)/cloudPoints) {
				t.Errorf("%d aims, %d points: counted %g, exact %g", aims, i+1, got, want)
			}
		}
	}
}

func TestStages(t *testing.T) {
	past := []optimize.Evaluation{evaluation(0, "start"), evaluation(1, "sample"), evaluation(2, "sample"), evaluation(3, "genetic"), evaluation(4, "sample")}
	got := Stages(past, map[string]int{"sample": 3, "genetic": 1})
	want := []Stage{{"start", 1, 0}, {"sample", 3, 3}, {"genetic", 1, 1}}
	if !slices.Equal(got, want) {
		t.Errorf("%+v, want %+v", got, want)
	}
	if got, want := Stretches(past), []Stretch{{"start", 1}, {"sample", 3}, {"genetic", 4}, {"sample", 5}}; !slices.Equal(got, want) {
		t.Errorf("%+v, want %+v", got, want)
	}
}

// sheet is a sheet of two frequencies.
func sheet() *Sheet {
	d := models.Design{Turns: 6, Diameter: models.Law{0.06}, Spacing: models.Law{0.04}, Handedness: models.Right, Feed: models.Feed{Height: 5e-3, Impedance: 50}}
	r := models.Response{Answered: models.Axis | models.Balance}
	for _, hz := range []float64{1.66e9, 1.7e9} {
		r.Samples = append(r.Samples, models.Sample{Hz: hz, Port: 100 + 20i, Input: 75, Gain: models.Circular{Right: 20, Left: 0.1}, AxialRatio: 1.2, Sense: models.Right, Directivity: 20.2, Efficiency: 0.99, PowerBalance: 1.0002})
	}
	return &Sheet{Member: &folder.Member{ID: "0123456789", Design: d}, Simulation: &Simulation{Design: d, Model: "full-wave", Response: r, DesignJSON: map[string]any{}}, Band: [3]int{0, 0, 1}}
}

// The sweep's columns and values are those of simulate --json; what does not
// apply is an empty cell.
func TestSweepCSV(t *testing.T) {
	s := sheet()
	text, err := s.SweepCSV()
	if err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(bytes.NewReader(text)).ReadAll()
	if err != nil || len(rows) != 3 {
		t.Fatalf("%d rows (%v)", len(rows), err)
	}
	var b bytes.Buffer
	if err := s.Simulation.WriteJSON(&b); err != nil {
		t.Fatal(err)
	}
	var whole struct{ Sweep []map[string]any }
	if err := json.Unmarshal(b.Bytes(), &whole); err != nil {
		t.Fatal(err)
	}
	for i, want := range whole.Sweep {
		if len(want) != len(rows[0]) {
			t.Fatalf("%d columns, the JSON has %d names", len(rows[0]), len(want))
		}
		for k, name := range rows[0] {
			x, known := want[name]
			text := ""
			if number, ok := x.(float64); ok {
				encoded, _ := json.Marshal(number)
				text = string(encoded)
			} else if x != nil {
				text = x.(string)
			}
			if got := rows[i+1][k]; !known || got != text {
				t.Errorf("%s of row %d is %q, the JSON says %v", name, i+1, got, x)
			}
		}
	}
	if beamwidth := rows[1][slices.Index(rows[0], "beamwidth_deg")]; beamwidth != "" {
		t.Errorf("the beamwidth, which was not answered, reads %q", beamwidth)
	}
}

// A miss says each limit that is broken, none that is kept, and how far off.
func TestMisses(t *testing.T) {
	p := &objectives.Problem{Spec: objectives.Spec{Limits: []objectives.Limit{
		{Figure: objectives.Gain, AtLeast: true, Value: 14}, {Figure: objectives.VSWR, Value: 2}, {Figure: objectives.Length, Value: 0.3}}}}
	m := folder.Member{ID: "0123456789"}
	m.Figures[objectives.Gain], m.Figures[objectives.VSWR], m.Figures[objectives.Length] = 12.5, 1.4, 0.312
	r := &Run{Problem: p, Table: &folder.Table{}, Near: &folder.Table{Members: []folder.Member{m}}}
	got := fmt.Sprint(r.misses())
	want := "[{0123456789 [{gain 12.50 dBic, at least 14 dBic is due: −1.50 dB} {length 312.0 mm, at most 300 mm is due: −12.0 mm}]}]"
	if got != want {
		t.Errorf("misses %s, want %s", got, want)
	}
}

// What speaks for a simulation is the worst of the band.
func TestBalance(t *testing.T) {
	s := sheet()
	s.Simulation.Response.Samples[1].PowerBalance = 0.9988
	text := fmt.Sprint(s.balance())
	for _, want := range []string{"0.120 %", "at most 1.00 %"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q lacks %q", text, want)
		}
	}
	if strings.Contains(text, "port spread") {
		t.Errorf("%q tells of a port spread, which was not answered", text)
	}
}

// The policy names the hashes of just this style and script.
func TestPolicy(t *testing.T) {
	// The hash of "alert(1)", from: printf 'alert(1)' | openssl dgst -sha256 -binary | base64
	const want = "sha256-bhHHL3z2vDgxUt0W3dWQOrprscmda2Y5pLsLg4GF+pI="
	if got := hashOf("alert(1)"); got != want {
		t.Errorf("hash %s, want %s", got, want)
	}
	if p := policy("a", "alert(1)"); !strings.Contains(p, "script-src '"+want+"'") || !strings.HasPrefix(p, "default-src 'none'") {
		t.Errorf("policy %q", p)
	}
}
