package objectives_test

import (
	"context"
	"encoding/json"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// tones answers with plain functions of frequency, so that every figure can
// be worked out by hand.
type tones struct {
	gain       func(hz float64) float64 // dBic in the winding's own sense
	axialRatio float64
	sense      models.Sense
	port       complex128
	fail       error
	asked      *[]models.Question
	rearless   bool // as formulas are
}

func (s tones) Identity() string { return "tones 1" }

func (s tones) Simulate(_ context.Context, d models.Design, q models.Question) (models.Response, error) {
	if s.asked != nil {
		*s.asked = append(*s.asked, q)
	}
	if s.fail != nil {
		return models.Response{}, s.fail
	}
	r := models.Response{Answered: models.Axis | q.Outputs}
	for _, hz := range q.Hz {
		g := math.Pow(10, s.gain(hz)/10)
		a := models.Sample{Hz: hz, Port: s.port, Input: s.port, AxialRatio: s.axialRatio, Sense: s.sense, Efficiency: 0.9, Directivity: g / 0.9}
		a.Gain = models.Circular{Right: g, Left: g / 100}
		a.ConeAxialRatio = models.Circular{Right: s.axialRatio + 1, Left: 60}
		a.EdgeGain = models.Circular{Right: g / 2, Left: g / 200}
		a.Beamwidth, a.Sidelobe, a.PeakDirectivity = 0.5, -12, g/0.9
		if d.Ground.Finite() && !s.rearless {
			a.RearGain = g / 100
		}
		r.Samples = append(r.Samples, a)
	}
	return r, nil
}

func flat(dbic float64) func(float64) float64 { return func(float64) float64 { return dbic } }

var copper = models.Material{Name: "copper", Conductivity: 58e6, Density: 8890, Permeability: 1}

// spec is a brief of every kind of variable: real, stepped, a choice, laws.
func spec() objectives.Spec {
	return objectives.Spec{
		Title: "test",
		Band:  models.Band{From: 0.98e9, To: 1.02e9, Samples: 5},
		Base:  models.Design{Handedness: models.Right, Feed: models.Feed{Impedance: 50, Height: 6e-3}},
		Vary: []objectives.Vary{
			{Quantity: objectives.Turns, From: 3, To: 12, Step: 0.25, Knots: 1},
			{Quantity: objectives.Diameter, From: 0.06, To: 0.13, Knots: 3},
			{Quantity: objectives.Spacing, From: 0.03, To: 0.09, Knots: 2},
			{Quantity: objectives.Conductor, Knots: 1},
			{Quantity: objectives.FeedHeight, From: 5e-3, To: 15e-3, Knots: 1},
		},
		Stock: []objectives.Stock{
			{Name: "thin", Diameter: 2e-3, Material: copper, Coil: 3},
			{Name: "thick", Diameter: 4e-3, Material: copper, LeastBendRadius: 0.04},
		},
		Aims: []objectives.Aim{{Figure: objectives.Gain, Most: true}, {Figure: objectives.Length}},
		Limits: []objectives.Limit{
			{Figure: objectives.AxialRatio, Value: 2},
			{Figure: objectives.VSWR, Value: 2},
			{Figure: objectives.Length, Value: 0.9},
		},
		Cone: 0.2,
	}
}

func problem(t *testing.T, s objectives.Spec, sim models.Simulator) *objectives.Problem {
	t.Helper()
	p, err := objectives.NewProblem(s, objectives.Rung{Simulator: sim, Model: "tones"})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// uniform is a canonical point that passes the screens of spec: 6 turns of
// 95 mm and 68 mm a turn.
func uniform(p *objectives.Problem, more ...float64) space.Point {
	return p.Layout.Space.Canonical(append(space.Point{6, 0.095, 0.095, 0.095, 0.068, 0.068, 1, 6e-3}, more...))
}

func TestLayoutNamesColumns(t *testing.T) {
	p := problem(t, spec(), tones{gain: flat(10)})
	var names []string
	for _, c := range p.Layout.Columns {
		names = append(names, c.Name)
	}
	want := "turns diameter_1_m diameter_2_m diameter_3_m spacing_1_m spacing_2_m conductor feed_height_m"
	if got := strings.Join(names, " "); got != want {
		t.Errorf("columns %q, want %q", got, want)
	}
}

// A point read back from the design it makes is the same point.
func TestLayoutRoundTrip(t *testing.T) {
	s := spec()
	p := problem(t, s, tones{gain: flat(10)})
	rapid.Check(t, func(t *rapid.T) {
		u := make([]float64, len(p.Layout.Space))
		for i := range u {
			u[i] = rapid.Float64Range(0, 1).Draw(t, "u")
		}
		pt := p.Layout.Space.FromUnit(u)
		d := p.Layout.Design(pt)
		back, notes := p.Layout.Point(d)
		if len(notes) != 0 || back.Key() != pt.Key() {
			t.Fatalf("point %v came back as %v (%v)", pt, back, notes)
		}
	})
}

// A thicker conductor needs a higher feed, which its choice brings with it: no
// choice of stock alone makes a point that the screens reject for its feed.
func TestFeedHeightBeginsWhereTheConductorAllows(t *testing.T) {
	s := spec()
	s.Stock[1].Diameter = 5e-3
	p := problem(t, s, tones{gain: flat(10)})
	conductor := slices.IndexFunc(p.Layout.Columns, func(c objectives.Column) bool { return c.Quantity == objectives.Conductor })
	feed := slices.IndexFunc(p.Layout.Columns, func(c objectives.Column) bool { return c.Quantity == objectives.FeedHeight })
	low := p.Layout.Space[feed].From
	raised := false
	for i, stock := range p.Stock {
		pt := make(space.Point, len(p.Layout.Space))
		pt[conductor], pt[feed] = float64(i), low
		got, want := p.Layout.Space.Canonical(pt)[feed], math.Max(low, objectives.LeastFeedHeight(stock.Diameter))
		if math.Abs(got-want) > objectives.LengthGrid {
			t.Errorf("%s: the feed height begins at %g, want %g", stock.Name, got, want)
		}
		raised = raised || got > low
	}
	if !raised {
		t.Errorf("no stock of the test raises the feed above %g", low)
	}
}

func TestLayoutFollowsForeignDesign(t *testing.T) {
	p := problem(t, spec(), tones{gain: flat(10)})
	d := models.Design{
		Turns: 20, Diameter: models.Law{0.08, 0.1}, Spacing: models.Law{0.05}, Handedness: models.Left,
		Conductor: models.Conductor{Diameter: 3.6e-3, Material: copper}, Feed: models.Feed{Height: 6e-3, Impedance: 50},
	}
	pt, notes := p.Layout.Point(d)
	want := space.Point{12, 0.08, 0.09, 0.1, 0.05, 0.05, 1, 6e-3}
	if pt.Key() != want.Key() {
		t.Errorf("point %v, want %v", pt, want)
	}
	if len(notes) != 2 || !strings.Contains(notes[0], "turns") || !strings.Contains(notes[1], "handedness") {
		t.Errorf("notes %q: want one on turns, one on handedness", notes)
	}
}

func TestEveryQuantityHasItsSlot(t *testing.T) {
	s := spec()
	s.Vary = nil
	for i, q := range objectives.Quantities {
		s.Vary = append(s.Vary, objectives.Vary{Quantity: q, From: 0.001 * float64(i+1), To: 1, Knots: 1})
	}
	l := objectives.NewLayout(&s)
	pt := make(space.Point, len(l.Space))
	for i := range pt {
		pt[i] = l.Space[i].From
	}
	d := l.Design(pt)
	got := []float64{d.Turns, d.Diameter[0], d.Spacing[0], 0, d.Feed.Height, d.Feed.Lead.Turns, d.Feed.Lead.Spacing, d.Feed.Pin, d.Feed.Strip.Turns,
		d.Feed.Strip.Width, d.Feed.Transformer.Impedance, d.Feed.Transformer.Length, d.Ground.Diameter, d.Ground.Rim}
	for i, x := range got {
		if x != pt[i] {
			t.Errorf("%s is %g in the design, %g in the point", objectives.Quantities[i], x, pt[i])
		}
	}
}

func TestEvaluateReadsFigures(t *testing.T) {
	// 10 dBic at 1 GHz, 0.1 dB less for every 10 MHz above, the same more below.
	sim := tones{gain: func(hz float64) float64 { return 10 - (hz-1e9)/1e8 }, axialRatio: 1.5, sense: models.Right, port: 100}
	p := problem(t, spec(), sim)
	got, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
	if err != nil {
		t.Fatal(err)
	}
	mismatch := 10 * math.Log10(1-1.0/9) // |Γ| = 1/3 at 100 Ω into 50 Ω
	for f, want := range map[objectives.Figure]float64{
		objectives.Gain: 9.8, objectives.RealisedGain: 9.8 + mismatch, objectives.AxialRatio: 1.5, objectives.VSWR: 2, objectives.Efficiency: 0.9,
		objectives.Length: 6e-3 + 6*0.068,
	} {
		if math.Abs(got.Figures[f]-want) > 1e-9 {
			t.Errorf("%s is %.10g, want %.10g", f, got.Figures[f], want)
		}
	}
	if got.Aims[0] != -got.Figures[objectives.Gain] || got.Aims[1] != got.Figures[objectives.Length] {
		t.Errorf("aims %v are not the figures in minimise form", got.Aims)
	}
	if math.Abs(got.Limits[0]+0.5) > 1e-9 || math.Abs(got.Limits[1]) > 1e-9 || got.Limits[2] >= 0 {
		t.Errorf("limits %v: want −0.5, 0 and met", got.Limits)
	}
	if !math.IsNaN(got.Figures[objectives.Beamwidth]) || !math.IsNaN(got.Figures[objectives.GainBandwidth]) {
		t.Error("figures that nobody asked for were answered")
	}
}

func TestWrongSenseCountsAsSixty(t *testing.T) {
	p := problem(t, spec(), tones{gain: flat(10), axialRatio: 1, sense: models.Left, port: 50})
	got, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
	if err != nil || got.Figures[objectives.AxialRatio] != 60 {
		t.Errorf("axial ratio %v (%v), want 60 in the wrong sense", got.Figures[objectives.AxialRatio], err)
	}
}

func TestConfirmAnswersEveryFigure(t *testing.T) {
	var asked []models.Question
	// Falls 1 dB for 50 MHz either side: 10 % of 1 GHz within 1 dB.
	sim := tones{gain: func(hz float64) float64 { return 10 - math.Abs(hz-1e9)/5e7 }, axialRatio: 1, sense: models.Right, port: 100, asked: &asked}
	p := problem(t, spec(), sim)
	got, err := p.Confirm(context.Background(), uniform(p), true)
	if err != nil {
		t.Fatal(err)
	}
	for f, x := range got.Figures {
		if math.IsNaN(x) && objectives.Figure(f) != objectives.FrontToBack {
			t.Errorf("%s was not answered", objectives.Figures[f].Name)
		}
	}
	for f, want := range map[objectives.Figure]float64{
		objectives.GainBandwidth: 10, objectives.VSWRBandwidth: 20, objectives.Beamwidth: 0.5 * 180 / math.Pi, objectives.Sidelobe: -12,
		objectives.AxialRatioCone: 2, objectives.EdgeGain: 9.6 - 10*math.Log10(2),
		// The band's upper end, 20 MHz above the middle, has 9.6 dBic; 1 dB
		// less stands 70 MHz above the middle: 1.07/1.02.
		objectives.Headroom: 100 * (1.07/1.02 - 1),
	} {
		if math.Abs(got.Figures[f]-want) > 1e-6 {
			t.Errorf("%s is %.10g, want %.10g", f, got.Figures[f], want)
		}
	}
	if hz := asked[0].Hz; len(hz) != 17 || hz[0] != 0.98e9 || hz[16] != 1.02e9 || asked[0].Outputs&models.Balance == 0 {
		t.Errorf("the confirming sweep has %d frequencies and outputs %b", len(hz), asked[0].Outputs)
	}
}

func TestFineSweepKeepsSamples(t *testing.T) {
	b := models.Band{From: 1.66e9, To: 1.70e9, Samples: 5}
	fine := objectives.FineSweep(b)
	at := map[float64]bool{}
	for i, hz := range fine {
		at[math.Round(hz)] = true
		if i > 0 && hz-fine[i-1] > 0.0025*b.Mid()*(1+1e-9) {
			t.Errorf("step %g Hz is wider than 0.25 %%", hz-fine[i-1])
		}
	}
	for _, hz := range b.Hz() {
		if !at[math.Round(hz)] {
			t.Errorf("the band's sample %g Hz is not in the fine sweep", hz)
		}
	}
	if got := objectives.FineSweep(models.Band{From: 1e9, To: 1e9, Samples: 1}); len(got) != 1 {
		t.Errorf("one frequency became %d", len(got))
	}
}

func TestHeadroomKnowsLimits(t *testing.T) {
	s := spec()
	s.Aims = []objectives.Aim{{Figure: objectives.Headroom, Most: true}}
	s.Limits = []objectives.Limit{{Figure: objectives.Gain, AtLeast: true, Value: 9.5}}
	fall := tones{gain: func(hz float64) float64 { return 10 - (hz-1e9)/1e8 }, sense: models.Right, port: 50}
	for _, c := range []struct {
		name string
		sim  tones
		want float64
	}{
		{"limit first", fall, 100 * (1.05/1.02 - 1)},
		{"never", tones{gain: flat(10), sense: models.Right, port: 50}, 20},
		{"broken at once", tones{gain: flat(9), sense: models.Right, port: 50}, 0},
		{"failing", tones{gain: flat(10), fail: errors.New("no answer")}, math.NaN()},
	} {
		p := problem(t, s, c.sim)
		got, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
		if c.sim.fail != nil {
			if !errors.Is(err, c.sim.fail) {
				t.Errorf("%s: error %v", c.name, err)
			}
			continue
		}
		if err != nil || math.Abs(got.Figures[objectives.Headroom]-c.want) > 1e-6 {
			t.Errorf("%s: headroom %v (%v), want %v", c.name, got.Figures[objectives.Headroom], err, c.want)
		}
	}
}

func TestIndicativeModelIsNotHeldToMatch(t *testing.T) {
	sim := tones{gain: flat(10), axialRatio: 5, sense: models.Right, port: 150}
	rung := objectives.Rung{Simulator: sim, Model: "tones", Indicative: true}
	s := spec()
	s.Aims = append(s.Aims, objectives.Aim{Figure: objectives.VSWR})
	p, err := objectives.NewProblem(s, rung)
	if err != nil {
		t.Fatal(err)
	}
	if len(p.Aims) != 2 || len(p.Limits) != 1 || len(p.Unapplied) != 3 {
		t.Errorf("%d aims, %d limits, unapplied %q", len(p.Aims), len(p.Limits), p.Unapplied)
	}
	got, err := p.Confirm(context.Background(), uniform(p), true)
	if err != nil {
		t.Fatal(err)
	}
	for f, x := range got.Figures {
		if objectives.Figures[f].Match != math.IsNaN(x) && objectives.Figure(f) != objectives.FrontToBack {
			t.Errorf("%s: %v", objectives.Figures[f].Name, x)
		}
	}
	s.TrustIndicative = true
	if p, err = objectives.NewProblem(s, rung); err != nil || len(p.Aims) != 3 || len(p.Limits) != 3 {
		t.Errorf("trusted: %d aims, %d limits (%v)", len(p.Aims), len(p.Limits), err)
	}
	s.TrustIndicative = false
	s.Aims = s.Aims[2:]
	if _, err := objectives.NewProblem(s, rung); !errors.Is(err, objectives.ErrNoAims) {
		t.Errorf("no aim left: error %v", err)
	}
	if _, err := objectives.NewProblem(s); err == nil {
		t.Error("a problem without a model was made")
	}
}

func TestScreenReasons(t *testing.T) {
	s := spec()
	s.Limits = append(s.Limits, objectives.Limit{Figure: objectives.Widest, Value: 0.12}, objectives.Limit{Figure: objectives.BendRadius, AtLeast: true, Value: 0.035})
	p := problem(t, s, tones{gain: flat(10)})
	for _, c := range []struct {
		name string
		pt   space.Point
		want string
	}{
		{"passes", space.Point{6, 0.095, 0.095, 0.095, 0.068, 0.068, 1, 6e-3}, ""},
		{"too long", space.Point{12, 0.095, 0.095, 0.095, 0.09, 0.09, 1, 6e-3}, "length"},
		{"too wide", space.Point{6, 0.12, 0.12, 0.12, 0.068, 0.068, 1, 6e-3}, "widest"},
		{"coil too short", space.Point{12, 0.095, 0.095, 0.095, 0.05, 0.05, 0, 6e-3}, "coil of thin holds 3 m"},
		{"bent too sharply", space.Point{6, 0.065, 0.065, 0.065, 0.068, 0.068, 1, 6e-3}, "thick takes 40 mm"},
		{"riser too short", space.Point{6, 0.095, 0.095, 0.095, 0.068, 0.068, 1, 5e-3}, ""},
	} {
		v, reason := p.Screen(p.Layout.Space.Canonical(c.pt))
		if (v > 0) != (c.want != "") || !strings.Contains(reason, c.want) {
			t.Errorf("%s: violation %g, reason %q", c.name, v, reason)
		}
	}
}

func TestScreenOfWhatCannotBeWound(t *testing.T) {
	s := spec()
	s.Stock[1].Diameter = 11e-3
	s.Vary[2].From = 0.005
	p := problem(t, s, tones{gain: flat(10)})
	v, reason := p.Screen(space.Point{6, 0.095, 0.095, 0.095, 0.012, 0.012, 1, 15e-3})
	if v <= 0 || !strings.Contains(reason, "neighbouring turns") {
		t.Errorf("touching turns: violation %g, reason %q", v, reason)
	}
	if v, reason = p.Screen(space.Point{6, 0.095, 0.095, 0.095, 0.09, 0.09, 1, 6e-3}); v <= 0 || !strings.Contains(reason, "above the plane") {
		t.Errorf("no air below: violation %g, reason %q", v, reason)
	}
	s.Vary = append(s.Vary, objectives.Vary{Quantity: objectives.LeadTurns, From: 1, To: 20, Knots: 1}, objectives.Vary{Quantity: objectives.LeadSpacing, From: 0.01, To: 0.02, Knots: 1})
	p = problem(t, s, tones{gain: flat(10)})
	if v, reason = p.Screen(space.Point{6, 0.095, 0.095, 0.095, 0.068, 0.068, 0, 6e-3, 15, 0.01}); v <= 0 || reason == "" {
		t.Errorf("a lead longer than the winding: violation %g, reason %q", v, reason)
	}
}

func TestHandSeedsPassScreens(t *testing.T) {
	p := problem(t, spec(), tones{gain: flat(10)})
	seeds := p.HandSeeds(12)
	if len(seeds) == 0 || len(seeds) > 12 {
		t.Fatalf("%d seeds", len(seeds))
	}
	seen := map[string]bool{}
	for _, pt := range seeds {
		if v, reason := p.Screen(pt); v > 0 {
			t.Errorf("seed %v does not pass: %s", pt, reason)
		}
		if p.Layout.Space.Canonical(pt).Key() != pt.Key() || seen[pt.Key()] {
			t.Errorf("seed %v is not canonical, or stands twice", pt)
		}
		seen[pt.Key()] = true
	}
}

func TestMarginsTakeTheWorst(t *testing.T) {
	s := spec()
	s.Margins = objectives.Margins{Diameter: 1e-3, Spacing: 1e-3, FeedHeight: 1e-3}
	var asked []models.Question
	p := problem(t, s, tones{gain: flat(10), sense: models.Right, port: 50, asked: &asked})
	got, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
	if err != nil {
		t.Fatal(err)
	}
	if len(asked) != 7 {
		t.Errorf("%d windings were simulated, want 7", len(asked))
	}
	// The worst of the one-at-a-time shifts: spacing 1 mm wider a turn.
	if want := 6e-3 + 6*0.069; math.Abs(got.Figures[objectives.Length]-want) > 1e-9 {
		t.Errorf("length %g, want %g", got.Figures[objectives.Length], want)
	}
}

type shelf map[string][]byte

func (s shelf) Recall(key string) ([]byte, bool) { r, ok := s[key]; return r, ok }

func TestMemoryAnswersTheSameQuestion(t *testing.T) {
	var asked []models.Question
	p := problem(t, spec(), tones{gain: flat(10), axialRatio: 1, sense: models.Right, port: 80 - 20i, asked: &asked})
	known := shelf{}
	p.Memory = known
	first, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
	if err != nil || len(first.Answers) != 1 {
		t.Fatalf("%d answers (%v)", len(first.Answers), err)
	}
	known[first.Answers[0].Key] = first.Answers[0].Response
	second, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
	if err != nil || len(asked) != 1 {
		t.Fatalf("the question was asked %d times (%v)", len(asked), err)
	}
	for f := range first.Figures {
		if math.Float64bits(first.Figures[f]) != math.Float64bits(second.Figures[f]) {
			t.Errorf("%s: %v first, %v from memory", objectives.Figures[f].Name, first.Figures[f], second.Figures[f])
		}
	}
	known[first.Answers[0].Key] = []byte(`{"Samples": tr`)
	if _, err = p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)}); err != nil || len(asked) != 2 {
		t.Errorf("a torn answer: asked %d times (%v)", len(asked), err)
	}
}

func TestQuestionKeysDiffer(t *testing.T) {
	q := models.Question{Hz: []float64{1e9, 2e9}, Outputs: models.Axis, Cone: 0.1}
	base := objectives.QuestionKey("a", q, "m")
	change := func(f func(*models.Question)) string {
		v := models.Question{Hz: append([]float64(nil), q.Hz...), Outputs: q.Outputs, Cone: q.Cone}
		f(&v)
		return objectives.QuestionKey("a", v, "m")
	}
	for name, key := range map[string]string{
		"design": objectives.QuestionKey("b", q, "m"), "model": objectives.QuestionKey("a", q, "n"),
		"frequency": change(func(v *models.Question) { v.Hz[1]++ }), "outputs": change(func(v *models.Question) { v.Outputs |= models.Cuts }),
		"cone": change(func(v *models.Question) { v.Outputs |= models.Cone }),
	} {
		if key == base {
			t.Errorf("another %s gives the same key", name)
		}
	}
	if change(func(v *models.Question) { v.Cone = 0.3 }) != base {
		t.Error("the cone counts although nobody asked for it")
	}
}

func TestFailedSimulationIsAnError(t *testing.T) {
	for name, sim := range map[string]tones{
		"error":    {gain: flat(10), fail: errors.New("the riser is too short")},
		"infinite": {gain: flat(math.Inf(1)), port: 50},
	} {
		p := problem(t, spec(), sim)
		if _, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)}); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
	p := problem(t, spec(), tones{gain: flat(10)})
	bad := uniform(p)
	bad[1] = math.NaN()
	if _, err := p.Evaluate(context.Background(), optimize.Candidate{Point: bad}); err == nil {
		t.Error("a NaN diameter: no error")
	}
}

func TestFiguresAreFoundByNameAndColumn(t *testing.T) {
	for i, f := range objectives.Figures {
		byName, ok1 := objectives.FigureByName(f.Name)
		byColumn, ok2 := objectives.FigureByName(f.Column)
		if !ok1 || !ok2 || int(byName) != i || int(byColumn) != i || f.Scale <= 0 || f.Words == "" {
			t.Errorf("figure %d: %+v", i, f)
		}
		if f.Unit != objectives.Ratio && !strings.Contains(f.Column, "_") {
			t.Errorf("column %s does not end in its unit %s", f.Column, f.Unit)
		}
	}
	if _, ok := objectives.FigureByName("loudness"); ok {
		t.Error("an unknown figure was found")
	}
}

// plated is a brief whose antennas stand on a plate, with front to back as an
// aim.
func plated() objectives.Spec {
	s := spec()
	s.Base.Ground = models.Ground{Kind: models.Disc, Diameter: 0.3}
	s.Aims = []objectives.Aim{{Figure: objectives.FrontToBack, Most: true}}
	return s
}

func TestFrontToBackOfAPlate(t *testing.T) {
	falling := func(hz float64) float64 { return 10 - hz/1e9 }
	var asked []models.Question
	p := problem(t, plated(), tones{gain: falling, sense: models.Right, port: 50, asked: &asked})
	got, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
	if err != nil || math.Abs(got.Figures[objectives.FrontToBack]-20) > 1e-9 || math.Abs(got.Aims[0]+20) > 1e-9 {
		t.Errorf("front to back %v, aim %v (%v), want 20 dB", got.Figures[objectives.FrontToBack], got.Aims, err)
	}
	if len(asked) != 1 || asked[0].Outputs&models.Cuts == 0 {
		t.Errorf("asked %+v, cuts are not among it", asked)
	}
}

// What has no rear has no front to back: the figure stays empty, an aim at it
// has no answer, and on a rung below the finest it says nothing.
func TestNoFrontToBackWithoutARear(t *testing.T) {
	ctx := context.Background()
	infinite := problem(t, spec(), tones{gain: flat(10), axialRatio: 1, sense: models.Right, port: 50})
	if got, err := infinite.Confirm(ctx, uniform(infinite), true); err != nil || !math.IsNaN(got.Figures[objectives.FrontToBack]) {
		t.Errorf("over an infinite plane: %v (%v)", got.Figures[objectives.FrontToBack], err)
	}
	formulas := tones{gain: flat(10), axialRatio: 1, sense: models.Right, port: 50, rearless: true}
	s := plated()
	aimed := problem(t, s, formulas)
	for name, ask := range map[string]func() (optimize.Score, error){
		"a candidate": func() (optimize.Score, error) { return aimed.Evaluate(ctx, optimize.Candidate{Point: uniform(aimed)}) },
		"a member":    func() (optimize.Score, error) { return aimed.Confirm(ctx, uniform(aimed), true) },
	} {
		if _, err := ask(); err == nil || !strings.Contains(err.Error(), "front_to_back does not apply") {
			t.Errorf("%s of a model without a rear: error %v", name, err)
		}
	}
	full := formulas
	full.rearless = false
	ladder, err := objectives.NewProblem(s, objectives.Rung{Simulator: formulas, Model: "toy"}, objectives.Rung{Simulator: full, Model: "toy"})
	if err != nil {
		t.Fatal(err)
	}
	for rung, want := range []float64{0, -20} {
		got, err := ladder.Evaluate(ctx, optimize.Candidate{Point: uniform(ladder), Rung: rung})
		if err != nil || math.Abs(got.Aims[0]-want) > 1e-9 {
			t.Errorf("rung %d of a ladder: aim %v (%v), want %g", rung, got.Aims, err, want)
		}
	}
}

// A plate counts in width and mass, and its dimensions vary in steps.
func TestGroundThatVaries(t *testing.T) {
	s := plated()
	s.Base.Ground = models.Ground{Kind: models.Cup}
	s.Vary = append(s.Vary,
		objectives.Vary{Quantity: objectives.GroundDiameter, From: 0.2, To: 0.4, Step: 0.05, Knots: 1},
		objectives.Vary{Quantity: objectives.GroundRim, From: 0.02, To: 0.08, Step: 0.02, Knots: 1})
	p := problem(t, s, tones{gain: flat(10), sense: models.Right, port: 50})
	n := len(p.Layout.Columns)
	if a, b := p.Layout.Columns[n-2].Name, p.Layout.Columns[n-1].Name; a != "ground_diameter_m" || b != "ground_rim_m" {
		t.Errorf("the last columns are %s and %s", a, b)
	}
	pt := uniform(p, 0.262, 0.0301)
	d := p.Layout.Design(pt)
	if math.Abs(d.Ground.Diameter-0.25) > 1e-12 || math.Abs(d.Ground.Rim-0.04) > 1e-12 {
		t.Errorf("on the steps: %+v", d.Ground)
	}
	got, err := p.Evaluate(context.Background(), optimize.Candidate{Point: pt})
	if err != nil {
		t.Fatal(err)
	}
	bare := d
	bare.Ground = models.Ground{}
	wire, err := helix.Wind(&bare)
	if err != nil {
		t.Fatal(err)
	}
	if w := got.Figures[objectives.Widest]; math.Abs(w-0.25) > 1e-12 {
		t.Errorf("widest %g", w)
	}
	if m, want := got.Figures[objectives.Mass], wire.Geometry().Mass+d.Ground.Mass(); math.Abs(m-want) > 1e-12 || d.Ground.Mass() < 0.1 {
		t.Errorf("mass %g, want %g", m, want)
	}
	back, notes := p.Layout.Point(d)
	if back.Key() != pt.Key() || len(notes) != 0 {
		t.Errorf("%v came back as %v: %q", pt, back, notes)
	}
	if _, notes = p.Layout.Point(bare); !strings.Contains(strings.Join(notes, "\n"), "taken as cup") {
		t.Errorf("an infinite ground among cups: %q", notes)
	}
}

// A winding needs air beside its cup's wall.
func TestScreenOfACup(t *testing.T) {
	s := plated()
	s.Vary[1].To = 0.2
	s.Base.Ground = models.Ground{Kind: models.Cup, Diameter: 0.196, Rim: 0.6}
	p := problem(t, s, tones{gain: flat(10)})
	for _, c := range []struct {
		diameter float64
		want     string
	}{
		{0.095, ""},
		{0.1899, ""}, // 3.05 mm from the wall: 2 of radius and 1 of air
		{0.191, "2.5 mm from the cup's wall, centre line; 3 mm is the least"},
		{0.1935, "wider cup or a lower rim"},
	} {
		v, reason := p.Screen(p.Layout.Space.Canonical(space.Point{6, 0.095, 0.095, c.diameter, 0.068, 0.068, 1, 6e-3}))
		if (v > 0) != (c.want != "") || !strings.Contains(reason, c.want) {
			t.Errorf("a winding %g m wide at its end: violation %g, reason %q", c.diameter, v, reason)
		}
	}
}

// Where a taper may vary, seeds that grow away from the plane stand beside
// the uniform ones; where none may, there are only those.
func TestHandSeedsGrowWhereATaperMayVary(t *testing.T) {
	for _, knots := range []int{1, 2, 3} {
		s := spec()
		s.Limits = nil
		s.Vary[1].Knots, s.Vary[2].From = knots, 0.02
		p := problem(t, s, tones{gain: flat(10)})
		grow, uniform := 0, 0
		for _, pt := range p.HandSeeds(20) {
			d := p.Layout.Design(pt).Diameter
			switch last := len(d) - 1; {
			case d[last] == d[0]:
				uniform++
			case slices.IsSorted(d):
				grow++
			default:
				t.Errorf("%d knots: a seed of diameters %v", knots, d)
			}
		}
		if uniform == 0 || (grow > 0) != (knots > 1) {
			t.Errorf("%d knots: %d seeds grow, %d are uniform", knots, grow, uniform)
		}
	}
}

// Hand seeds stand on the least plate of the hand rules, so that they have
// room to stand.
func TestHandSeedsOnAPlate(t *testing.T) {
	s := plated()
	s.Base.Ground.Diameter = 0
	s.Vary = append(s.Vary, objectives.Vary{Quantity: objectives.GroundDiameter, From: 0.05, To: 0.6, Step: 0.05, Knots: 1})
	p := problem(t, s, tones{gain: flat(10)})
	seeds := p.HandSeeds(3)
	if len(seeds) != 3 {
		t.Fatalf("%d seeds", len(seeds))
	}
	for _, pt := range seeds { // 0.75 wavelengths at 1 GHz are 225 mm
		if g := pt[len(pt)-1]; math.Abs(g-0.2) > 1e-12 && math.Abs(g-0.25) > 1e-12 {
			t.Errorf("a seed stands on %g m", g)
		}
	}
}

// A stored response reads back to the same bits.
func TestResponseSurvivesJSON(t *testing.T) {
	r, err := tones{gain: flat(10.123456789), axialRatio: 1 / 3.0, sense: models.Right, port: 123.4 - 56.7i}.Simulate(context.Background(), models.Design{}, models.Question{Hz: []float64{1.7e9}, Outputs: models.Cuts})
	if err != nil {
		t.Fatal(err)
	}
	text, err := json.Marshal(&r)
	if err != nil {
		t.Fatal(err)
	}
	var back models.Response
	if err := json.Unmarshal(text, &back); err != nil {
		t.Fatal(err)
	}
	if a, b := r.Samples[0], back.Samples[0]; a.Port != b.Port || a.Gain != b.Gain || a.AxialRatio != b.AxialRatio || a.Hz != b.Hz || back.Answered != r.Answered {
		t.Errorf("%+v came back as %+v", a, b)
	}
}
