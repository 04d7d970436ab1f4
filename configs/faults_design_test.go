package configs

import "testing"

func TestSoundDesignIsSound(t *testing.T) {
	if _, err := ParseDesign("d.yaml", []byte(soundDesign), YAML); err != nil {
		t.Fatal(err)
	}
}

func TestFaultsOfADesign(t *testing.T) {
	for _, c := range []faultCase{
		{"turns missing", []string{"turns: 8.25\n", ""}, one(1, "turns", "is missing", "turns: 8.25")},
		{"turns zero", []string{"turns: 8.25", "turns: 0"}, one(2, "turns", "0 is out of range", "from 0.1 to 1000")},
		{"turns of a length", []string{"turns: 8.25", "turns: 8 mm"}, one(2, "turns", `"mm" is no unit of a number of turns`, "0.25 turn")},
		{"a law of nothing", []string{"[58 mm, 58 mm, 46 mm]", "[]"}, one(3, "diameter", "a list of 0", "1 to 16 lengths")},
		{"a law without end", []string{"[34 mm]", "[" + long("34 mm, ", 17) + "]"}, one(4, "spacing", "a list of 17", "1 to 16 lengths")},
		{"two knots wrong", []string{"[58 mm, 58 mm, 46 mm]", "[58, 58 mm, -46 mm]"},
			[]expected{{3, "diameter", `"58" has no unit`, "58 mm"}, {3, "diameter", "-46 mm is out of range", "from 0.01 mm"}}},
		{"a law of laws", []string{"[34 mm]", "[[34 mm]]"}, one(4, "spacing", "is a list", "58 mm")},
		{"a law in a block", []string{"[34 mm]", "{from: 34 mm}"}, one(4, "spacing", "is a block of keys", "58 mm")},
		{"wavelengths", []string{"[34 mm]", "0.2 wl"}, one(4, "spacing", "wavelengths have no size here", "58 mm")},
		{"no hand", []string{"handedness: right\n", ""}, one(1, "handedness", "is missing", "right or left")},
		{"a hand unknown", []string{"handedness: right", "handedness: clockwise"},
			[]expected{{5, "handedness", `"clockwise" is not known`, "right or left"}}},
		{"no conductor", []string{"conductor: {stock: \"2 mm copper wire\", diameter: 2 mm, material: copper}\n", ""}, one(1, "conductor", "is missing", "conductor: {diameter: 2 mm")},
		{"a conductor in no catalogue", []string{`{stock: "2 mm copper wire", diameter: 2 mm, material: copper}`, `{stock: "2 mm cheese"}`}, one(6, "conductor.stock", `"2 mm cheese" is in no catalogue`, `"AWG 12 copper"`)},
		{"a conductor without size", []string{`{stock: "2 mm copper wire", diameter: 2 mm, material: copper}`, "{material: copper}"}, one(6, "conductor.diameter", "is missing", "2 mm")},
		{"a conductor of no metal", []string{", material: copper}", "}"}, one(6, "conductor.material", "is missing", "conductivity and density")},
		{"a wall", []string{", material: copper}", ", wall: 1.1 mm, material: copper}"}, one(6, "conductor.wall", "more than half the diameter", "solid wire")},
		{"milli for mega", []string{"material: copper}", "conductivity: 58 mS/m, density: 8.9 g/cm3}"}, one(6, "conductor.conductivity", `"mS/m" is no unit of a conductivity`, "did you mean MS/m?")},
		{"permeability", []string{"material: copper}", "conductivity: 58 MS/m, density: 8.9 g/cm3, permeability: 0}"}, one(6, "conductor.permeability", "0 is out of range", "from 0.5 to 100000")},
		{"half an insulation", []string{", permittivity: 2.3", ""}, one(7, "insulation.permittivity", "is missing", "permittivity: 2.3")},
		{"less than air", []string{"permittivity: 2.3", "permittivity: 0.9"}, one(7, "insulation.permittivity", "0.9 is out of range", "from 1 to 100")},
		{"no riser", []string{"  height: 5 mm\n", ""}, one(8, "feed.height", "is missing", "5 mm")},
		{"half a lead", []string{"{turns: 0.5, spacing: 8 mm, shape: flat}", "{turns: 0.5}"}, one(12, "feed.lead", "has only one of turns and spacing", "write both")},
		{"a lead of no shape", []string{"shape: flat", "shape: round"}, one(12, "feed.lead.shape", `"round" is not known`, "ramp or flat")},
		{"half a strip", []string{"{turns: 0.25, width: 5 mm}", "{width: 5 mm}"}, one(13, "feed.strip", "has only one of turns and width", "write both")},
		{"a strip of no width", []string{"width: 5 mm", "width: 0 mm"}, one(13, "feed.strip.width", "0 mm is out of range", "0.01 mm")},
		{"half a transformer", []string{"{impedance: 85 ohm, length: 44 mm, velocity: 0.9}", "{impedance: 85 ohm}"}, one(14, "feed.transformer", "has only one of impedance and length", "write both")},
		{"faster than light", []string{"velocity: 0.9", "velocity: 1.1"}, one(14, "feed.transformer.velocity", "1.1 is out of range", "to 1")},
		{"a transformer that is none", []string{"{impedance: 85 ohm, length: 44 mm, velocity: 0.9}", "yes"}, one(14, "feed.transformer", "is text", "impedance, length, velocity")},
		{"an impedance in mm", []string{"  impedance: 50 ohm", "  impedance: 50 mm"}, one(11, "feed.impedance", `"mm" is no unit of an impedance`, "50 ohm")},
		{"milliohms", []string{"  impedance: 50 ohm", "  impedance: 50 Kohm"}, one(11, "feed.impedance", `"Kohm" is no unit of an impedance`, "did you mean kohm?")},
		{"a cup without rim", []string{", rim: 60 mm", ""}, one(15, "ground.rim", "is missing", "60 mm")},
		{"a disc without size", []string{"{kind: cup, diameter: 150 mm, rim: 60 mm}", "{kind: disc}"}, one(15, "ground.diameter", "is missing", "200 mm")},
		{"a ground unknown", []string{"kind: cup", "kind: cone"}, one(15, "ground.kind", `"cone" is not known`, "infinite, disc or cup")},
		{"a band of no width", []string{"to: 1.70 GHz", "to: 1.66 GHz"}, one(16, "band.samples", "zero width", "samples: 1")},
		{"a sense unknown", []string{"sense: right", "sense: 1"}, one(17, "sense", `"1" is not known`, "right or left")},
		{"a key of briefs", []string{"sense: right", "aims: []"}, one(17, "aims", "is no key here", "it should be title")},
		{"a key twice", []string{"sense: right", "sense: right\nsense: left"}, one(18, "sense", "a second time, first on line 17", "keep one")},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, err := ParseDesign("d.yaml", []byte(edit(t, soundDesign, c.edit...)), YAML)
			checkFaults(t, err, "d.yaml", c.want...)
		})
	}
}

// Faults name the line in every format: that of the value, or of the block
// that lacks something.
func TestLinesInEveryFormat(t *testing.T) {
	for format, text := range map[Format]string{
		YAML: `# a comment
title: lines
turns:
  - 8
diameter: [58 mm,
  46]
spacing: 34
handedness: right
conductor:

  material: coper

feed: {height: 5 mm, impedance: 50 mm}
hight: 3
`,
		JSON: `
{"title": "lines",
"turns": [
8],
"diameter": ["58 mm",
"46"],
"spacing": 34,
"handedness": "right",
"conductor": {

"material": "coper"
},
"feed": {"height": "5 mm", "impedance": "50 mm"},
"hight": 3}
`,
		TOML: `# a comment
title = "lines"
turns = [
8]
diameter = ["58 mm",
"46"]
spacing = 34
handedness = "right"
hight = 3

conductor.material = "coper"

feed = {height = "5 mm", impedance = "50 mm"}
`,
	} {
		t.Run(string(format), func(t *testing.T) {
			_, err := ParseDesign("d", []byte(text), format)
			want := []expected{
				{3, "turns", "is a list", "0.25 turn"},
				{6, "diameter", `"46" has no unit`, "58 mm"},
				{7, "spacing", `"34" has no unit`, "58 mm"},
				{9, "conductor.diameter", "is missing", "2 mm"},
				{11, "conductor.material", `"coper" is not known`, "did you mean copper?"},
				{13, "feed.impedance", "is no unit of an impedance", "50 ohm"},
				{14, "hight", "is no key here", "it should be"},
			}
			if format == TOML { // whose dotted keys open a block, and whose other keys come before
				want[3].line = 11
				want = []expected{want[0], want[1], want[2], {9, "hight", "is no key here", "it should be"}, want[3], want[4], want[5]}
			}
			checkFaults(t, err, "d", want...)
		})
	}
}

func TestAnEmptyDesignLacksEverything(t *testing.T) {
	_, err := ParseDesign("d.yaml", []byte("title: nothing yet\n"), YAML)
	var want []expected
	for _, key := range []string{"turns", "diameter", "spacing", "conductor", "feed"} {
		want = append(want, expected{1, key, "is missing", "write for example " + key + ": "})
	}
	checkFaults(t, err, "d.yaml", append(want, expected{1, "handedness", "is missing", "right or left"})...)
}
