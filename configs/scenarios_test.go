package configs

import (
	"math"
	"slices"
	"strings"
	"testing"

	"turnwise/models"
)

func TestBuiltInBriefs(t *testing.T) {
	all := Scenarios()
	if len(all) == 0 || all[0].Name != DefaultScenario {
		t.Fatalf("the built-in briefs are %v, not the default first", all)
	}
	digests := map[string]string{}
	for _, s := range all {
		t.Run(s.Name, func(t *testing.T) {
			br, err := ReadScenario(s.Name)
			if err != nil {
				t.Fatal(err)
			}
			if s.Summary == "" || strings.HasPrefix(s.Summary, "#") || br.Spec.Title == "" {
				t.Errorf("summary %q, title %q", s.Summary, br.Spec.Title)
			}
			rereadBrief(t, br, s.Name+".yaml")
			if other, twice := digests[br.Digest()]; twice {
				t.Errorf("has the digest of %s", other)
			}
			digests[br.Digest()] = s.Name
		})
	}
}

func TestUnknownScenario(t *testing.T) {
	_, err := ReadScenario("baloon-downlink")
	checkFaults(t, err, "", expected{0, "scenario", `"baloon-downlink" is no built-in brief`, "did you mean balloon-downlink?"})
	_, err = ScenarioText("../brief")
	checkFaults(t, err, "", expected{0, "scenario", `"../brief" is no built-in brief`, "it should be balloon-downlink, "})
}

// What is left away is filled in as the contract says.
func TestDefaults(t *testing.T) {
	br := readBrief(t, `
band: {from: 1.66 GHz, to: 1.70 GHz}
sense: left
vary: {turns: {from: 3, to: 12}, diameter: {from: 40 mm, to: 60 mm}}
design: {spacing: 34 mm, conductor: {diameter: 2 mm, material: copper}, feed: {height: 5 mm}}
aims: [{figure: gain, want: most}]
`, YAML)
	s := &br.Spec
	if s.Band.Samples != 5 || br.Seed != 1 || br.FrontAtMost != 200 || s.Base.Feed.Impedance != 50 || s.Base.Ground.Kind != models.Infinite || s.Base.Handedness != models.Left || s.Vary[1].Knots != 1 {
		t.Errorf("resolved as\n%s", br.Write())
	}
	if degrees(s.Cone) != 15 {
		t.Errorf("a cone of %v rad", s.Cone)
	}
	equal(t, "ladder", br.Ladder, []Rung{{FullWave, "standard"}})
	equal(t, "shares", br.Search, Shares{0.1, 0.7, 0.2})
	equal(t, "budget", br.Budget, Budget{})
	rereadBrief(t, br, "b.yaml")
}

// A lead and a line section that vary whole have a shape and a velocity all
// the same.
func TestDefaultsOfTheFeed(t *testing.T) {
	br := readBrief(t, edit(t, soundBrief,
		"    lead: {turns: 0.5, spacing: 8 mm}\n    transformer: {impedance: 85 ohm, length: 44 mm}\n", "",
		"  conductor: stock\n", "  conductor: stock\n  lead_turns: {from: 0, to: 1}\n  lead_spacing: {from: 0 mm, to: 9 mm}\n  transformer_impedance: {from: 60 ohm, to: 90 ohm}\n  transformer_length: {from: 0 mm, to: 50 mm}\n"), YAML)
	equal(t, "lead", br.Spec.Base.Feed.Lead, models.Lead{Shape: models.Ramp})
	equal(t, "transformer", br.Spec.Base.Feed.Transformer, models.Transformer{Velocity: 1})
	rereadBrief(t, br, "b.yaml")
}

// One frequency is a band of its own.
func TestOneFrequency(t *testing.T) {
	for _, band := range []string{"{from: 1.68 GHz, to: 1.68 GHz}", "{from: 1.68 GHz, to: 1680 MHz, samples: 1}"} {
		br := readBrief(t, edit(t, soundBrief, "band:\n  from: 1.66 GHz\n  to: 1.70 GHz\n  samples: 5\n", "band: "+band+"\n"), YAML)
		equal(t, band, br.Spec.Band, models.Band{From: 1.68e9, To: 1.68e9, Samples: 1})
	}
}

// The antenna's own sense is the other one where it feeds a reflector, and
// its winding follows.
func TestSenses(t *testing.T) {
	for _, c := range []struct {
		sense, reflector, hand string
		own                    models.Sense
	}{
		{"sense: right\n", "false", "", models.Right},
		{"sense: right\n", "true", "", models.Left},
		{"sense: left\n", "true", "  handedness: right\n", models.Right},
		{"", "false", "  handedness: left\n", models.Left},
		{"", "true", "  handedness: left\n", models.Left},
	} {
		text := edit(t, soundBrief, "sense: right\n", c.sense, "  handedness: right\n", c.hand, "feeds_reflector: false", "feeds_reflector: "+c.reflector)
		br := readBrief(t, text, YAML)
		if b := br.Spec.Base; b.Sense != c.own || b.Handedness != c.own || b.FeedsReflector != (c.reflector == "true") {
			t.Errorf("%+v: radiates %s, wound %s", c, b.Sense, b.Handedness)
		}
		rereadBrief(t, br, "b.yaml")
	}
}

// Wavelengths are those at mid-band, and land on the micrometre.
func TestWavelengths(t *testing.T) {
	br := readBrief(t, edit(t, soundBrief, "    from: 0.19 wl", "    from: 0.2wl", "    to: 0.42 wl", "    to: 0.4 WL"), YAML)
	v := br.Spec.Vary[1]
	if mid := models.LightSpeed / 1.68e9; v.From != onGrid(0.2*mid, Length) || v.To != onGrid(0.4*mid, Length) {
		t.Errorf("from %v to %v at a wavelength of %v", v.From, v.To, mid)
	}
}

// A step in wavelengths divides the range as it was written; the upper end
// follows the rounded steps, and stays where it was asked for as nearly as
// they can have it.
func TestSteps(t *testing.T) {
	for _, c := range []struct {
		quantity string
		steps    float64
		to       float64
	}{
		{"diameter: {from: 0.2 wl, to: 0.3 wl, step: 0.01 wl}", 10, 0.053534},
		{"diameter: {from: 0.19 wl, to: 0.42 wl, step: 0.01 wl}", 23, 0.074948},
		{"diameter: {from: 0.2 wl, to: 0.3 wl, step: 0.001 wl}", 100, 0.053534},
		{"diameter: {from: 0.2 wl, to: 53.69 mm, step: 1 mm}", 18, 0.05369},
		{"diameter: {from: 20 mm, to: 60.0004 mm, step: 10 mm}", 4, 0.06},
		{"diameter: {from: 20 mm, to: 20 mm, step: 10 mm}", 0, 0.02},
		{"turns: {from: 3, to: 12, step: 0.0005}", 9000, 12},
		{"turns: {from: 0.1, to: 1.3, step: 0.1}", 12, 1.3},
	} {
		text := edit(t, soundBrief, "    from: 0.19 wl\n    to: 0.42 wl\n    knots: 3\n", "", "  turns: {from: 3, to: 12, step: 0.25}\n  diameter:\n", "  "+c.quantity+"\n")
		at := 0
		if strings.HasPrefix(c.quantity, "turns") {
			text = edit(t, text, "  spacing: {", "  diameter: {from: 40 mm, to: 60 mm}\n  spacing: {")
		} else {
			text, at = edit(t, text, "  spacing: {", "  turns: {from: 3, to: 12}\n  spacing: {"), 1
		}
		br := readBrief(t, text, YAML)
		v := br.Spec.Vary[at]
		d := varied[v.Quantity].d
		if v.To != onGrid(v.From+c.steps*v.Step, d) || math.Abs(v.To-c.to) > c.steps*0.5/gridsPerUnit[d] {
			t.Errorf("%s: from %v to %v by %v", c.quantity, v.From, v.To, v.Step)
		}
		rereadBrief(t, br, "b.yaml")
	}
}

// What the remedy says is taken.
func TestRemedyOfAStep(t *testing.T) {
	spoilt := edit(t, soundBrief, "    from: 0.19 wl", "    from: 0.2 wl", "    to: 0.42 wl", "    to: 55 mm", "    knots: 3\n", "    step: 1 mm\n")
	_, err := ParseBrief("b.yaml", []byte(spoilt), YAML)
	checkFaults(t, err, "b.yaml", expected{24, "vary.diameter.step", "does not divide the way from 35.69 mm to 55 mm", "let it end at 54.69 mm or 55.69 mm"})
	for _, end := range []string{"54.69 mm", "55.69 mm"} {
		readBrief(t, edit(t, spoilt, "    to: 55 mm", "    to: "+end), YAML)
	}
}

// Where the band is wrong, wavelengths have no size: nothing that rests on
// one is held against the file.
func TestAWrongBandIsOneFault(t *testing.T) {
	for _, change := range [][2]string{
		{"from: 1.66 GHz", "from: 1.66 GZ"}, {"from: 1.66 GHz", "from: 9 GHz"}, {"from: 1.66 GHz", "from: 0 GHz"},
	} {
		_, err := ParseBrief("b.yaml", []byte(edit(t, soundBrief, change[0], change[1], "    from: 0.19 wl", "    from: 40 mm", "    to: 0.42 wl", "    to: 0.25 wl", "{from: 20 mm, to: 60 mm, knots: 2}", "{from: 0.2 wl, to: 60 mm}", "vswr: {at_most: 2}", "length: {at_most: 120 mm}")), YAML)
		if faults := allFaults(t, err); len(faults) != 1 || faults[0].Key != "band.from" {
			t.Errorf("%s:\n%v", change[1], err)
		}
	}
}

// Everything that decides an answer counts in the digest, and Diff names it;
// the budget, comments, order and format count for nothing.
func TestDigestAndDiff(t *testing.T) {
	base := readBrief(t, soundBrief, YAML)
	digest := base.Digest()
	if len(digest) != 64 || digest != base.Digest() {
		t.Fatalf("the digest is %s, then %s", digest, base.Digest())
	}
	same := map[string]Brief{
		"comments": readBrief(t, "# a remark\n"+soundBrief, YAML),
		"JSON":     readBrief(t, string(inFormat(t, soundBrief, JSON)), JSON),
		"order":    readBrief(t, edit(t, soundBrief, "title: lighthouse link\n", "", "seed: 7\n", "seed: 7\ntitle: lighthouse link\n"), YAML),
		"units":    readBrief(t, edit(t, soundBrief, "coil: 3 m", "coil: 300 cm", "to: 1.70 GHz", "to: 1700 MHz"), YAML),
		"budget":   readBrief(t, edit(t, soundBrief, "  evaluations: 4000\n", "  evaluations: 5000\n", "  time: 10 min\n", "", "share: 0.1 %", "share: 0.2 %"), YAML),
	}
	for name, b := range same {
		if d := Diff(&base, &b); b.Digest() != digest || len(d) > 0 {
			t.Errorf("%s: another digest, or %v differ", name, d)
		}
	}
	for _, c := range []struct {
		edit []string
		keys string
	}{
		{[]string{"title: lighthouse link", "title: another"}, "title"},
		{[]string{"title: lighthouse link\n", ""}, "title"},
		{[]string{"to: 1.70 GHz", "to: 1.71 GHz", "    from: 0.19 wl", "    from: 30 mm", "    to: 0.42 wl", "    to: 60 mm"}, "band.to vary.diameter"},
		{[]string{"sense: right\n", "", "  handedness: right\n", "  handedness: left\n"}, "design.handedness sense"},
		{[]string{"sense: right\n", "", "feeds_reflector: false", "feeds_reflector: true"}, "feeds_reflector sense"},
		{[]string{"feed: {impedance: 50 ohm}", "feed: {impedance: 75 ohm}"}, "feed.impedance"},
		{[]string{"diameter: 150 mm", "diameter: 160 mm"}, "ground.diameter"},
		{[]string{"model: full-wave", "model: closed-form"}, "fidelity model"},
		{[]string{"fidelity: standard", "fidelity: fine"}, "fidelity"},
		{[]string{"coil: 3 m", "coil: 4 m"}, "stock"},
		{[]string{"from: 3, to: 12", "from: 4, to: 12"}, "vary.turns"},
		{[]string{"  feed_height: {from: 4 mm, to: 12 mm}\n", "", "    pin: 1.27 mm\n", "    pin: 1.27 mm\n    height: 5 mm\n"}, "design.feed vary.feed_height"},
		{[]string{"permittivity: 2.3", "permittivity: 2.2"}, "design.insulation"},
		{[]string{"{figure: length, want: least}", "{figure: mass, want: least}"}, "aims"},
		{[]string{"vswr: {at_most: 2}", "vswr: {at_most: 2.5}"}, "limits.vswr"},
		{[]string{"  vswr: {at_most: 2}\n", ""}, "limits.vswr"},
		{[]string{"cone: 15 deg", "cone: 16 deg"}, "cone"},
		{[]string{"trust_indicative: false", "trust_indicative: true"}, "trust_indicative"},
		{[]string{"at: 95 %", "at: worst"}, "margins.at"},
		{[]string{"margins: {diameter: 0.5 mm, spacing: 0.3 mm, feed_height: 0.2 mm, at: 95 %}\n", ""}, "margins.at margins.diameter margins.feed_height margins.spacing"},
		{[]string{"sample: 10 %, genetic: 70 %", "sample: 20 %, genetic: 60 %"}, "search.genetic search.sample"},
		{[]string{"{at_most: 200}", "{at_most: 100}"}, "front.at_most"},
		{[]string{"seed: 7", "seed: 8"}, "seed"},
	} {
		b := readBrief(t, edit(t, soundBrief, c.edit...), YAML)
		if b.Digest() == digest {
			t.Errorf("%q: the same digest", c.edit)
		}
		want := strings.Fields(c.keys)
		if got, back := Diff(&base, &b), Diff(&b, &base); !slices.Equal(got, want) || !slices.Equal(back, want) {
			t.Errorf("%q: %v differ, and %v the other way, want %v", c.edit, got, back, want)
		}
	}
}

// Margins and coats of nothing are none, so that a brief reads back.
func TestNothingIsNone(t *testing.T) {
	br := readBrief(t, edit(t, soundBrief,
		"margins: {diameter: 0.5 mm, spacing: 0.3 mm, feed_height: 0.2 mm, at: 95 %}", "margins: {diameter: 0.0001 mm, at: 95 %}",
		"thickness: 0.3 mm", "thickness: 0 mm", "lead: {turns: 0.5, spacing: 8 mm}", "lead: {turns: 0, spacing: 0 mm}"), YAML)
	if br.Spec.Margins.Percentile != 0 || br.Spec.Base.Insulation != (models.Insulation{}) || br.Spec.Base.Feed.Lead.Turns != 0 {
		t.Errorf("%+v, %+v", br.Spec.Margins, br.Spec.Base)
	}
	rereadBrief(t, br, "b.yaml")
}

// Parts of a hundred are kept to the digits that are written.
func TestPartsReadBack(t *testing.T) {
	br := readBrief(t, edit(t, soundBrief,
		"{sample: 10 %, genetic: 70 %, simplex: 20 %}", "{sample: 33.3333333333333 %, genetic: 33.3333333333333 %, simplex: 33.3333333333334 %}",
		"share: 0.1 %", "share: 0.123456789012345 %", "time: 10 min", "time: 12345678.9012345 s"), YAML)
	rereadBrief(t, br, "b.yaml")
}

// A riser may vary from below what its conductor needs, as long as it ends
// above.
func TestRiserThatMayBeLongEnough(t *testing.T) {
	readBrief(t, edit(t, soundBrief, "{from: 4 mm, to: 12 mm}", "{from: 1 mm, to: 12 mm}"), YAML)
}

func TestModels(t *testing.T) {
	for model, want := range map[string][]Rung{
		"full-wave":                          {{FullWave, "standard"}},
		"closed-form":                        {{Model: ClosedForm}},
		"{ladder: [full-wave draft]}":        {{FullWave, "draft"}},
		"{ladder: [closed-form, full-wave]}": {{Model: ClosedForm}, {FullWave, "standard"}},
		"{ladder: [closed-form, full-wave draft, full-wave fine]}": {{Model: ClosedForm}, {FullWave, "draft"}, {FullWave, "fine"}},
		`{external: [python3, "solve it.py", 3], timeout: 90 s}`:   {{Model: ExternalModel}},
		"{external: [solve]}": {{Model: ExternalModel}},
	} {
		br := readBrief(t, edit(t, soundBrief, "model: full-wave", "model: "+model), YAML)
		equal(t, model, br.Ladder, want)
		rereadBrief(t, br, "b.yaml")
		if want[0].Model != ExternalModel {
			continue
		}
		seconds, words := 60.0, []string{"solve"}
		if strings.Contains(model, "90 s") {
			seconds, words = 90, []string{"python3", "solve it.py", "3"}
		}
		if br.External.Timeout.Seconds() != seconds || !slices.Equal(br.External.Command, words) {
			t.Errorf("%s: %+v", model, br.External)
		}
	}
}
