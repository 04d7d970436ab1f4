package configs

import "testing"

func TestSoundBriefIsSound(t *testing.T) { readBrief(t, soundBrief, YAML) }

// faultCase breaks a sound file in one place, and expects all that follows
// from it, in the order of the lines.
type faultCase struct {
	name string
	edit []string
	want []expected
}

func checkBriefCases(t *testing.T, cases []faultCase) {
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			_, err := ParseBrief("b.yaml", []byte(edit(t, soundBrief, c.edit...)), YAML)
			checkFaults(t, err, "b.yaml", c.want...)
		})
	}
}

func one(line int, key, what, remedy string) []expected {
	return []expected{{line, key, what, remedy}}
}

func TestFaultsOfTheBand(t *testing.T) {
	checkBriefCases(t, []faultCase{
		{"reversed", []string{"from: 1.66 GHz", "from: 1.71 GHz"}, one(3, "band.from", "lies above the band's upper end", "swap from and to")},
		{"one-sided", []string{"  to: 1.70 GHz\n", ""}, one(2, "band.to", "is missing", "1.70 GHz")},
		{"other side", []string{"  from: 1.66 GHz\n", ""}, one(2, "band.from", "is missing", "1.66 GHz")},
		{"empty", []string{"  from: 1.66 GHz\n  to: 1.70 GHz\n  samples: 5\n", ""}, one(2, "band", "is missing", "band: {from: 1.66 GHz")},
		{"a list", []string{"band:\n  from: 1.66 GHz\n  to: 1.70 GHz\n  samples: 5\n", "band: [1.66 GHz, 1.70 GHz]\n"}, one(2, "band", "is a list", "from, to, samples")},
		{"zero width", []string{"to: 1.70 GHz", "to: 1.66 GHz"}, one(5, "band.samples", "is 5 for a band of zero width", "samples: 1")},
		{"one sample of a width", []string{"samples: 5", "samples: 1"}, one(5, "band.samples", "is 1 for a band with a width", "at least 2")},
		{"no samples", []string{"samples: 5", "samples: 0"}, one(5, "band.samples", "0 is out of range", "from 1 to 10000")},
		{"too many samples", []string{"samples: 5", "samples: 10001"}, one(5, "band.samples", "10001 is out of range", "from 1 to 10000")},
		{"a fraction of a sample", []string{"samples: 5", "samples: 2.5"}, one(5, "band.samples", "2.5 is a fraction", "whole number")},
		{"samples in octal", []string{"samples: 5", "samples: 05"}, one(5, "band.samples", "starts with a zero", "whole number")},
		{"samples in words", []string{"samples: 5", "samples: five"}, one(5, "band.samples", `"five" is not a number`, "whole number")},
		{"samples overflow", []string{"samples: 5", "samples: 9223372036854775808"}, one(5, "band.samples", "out of range", "whole number")},
		{"samples overflow a double", []string{"samples: 5", "samples: 1e17"}, one(5, "band.samples", "out of range", "whole number")},
		{"samples a list", []string{"samples: 5", "samples: [5]"}, one(5, "band.samples", "is a list", "whole number")},
		{"decimal comma", []string{"from: 1.66 GHz", "from: 1,66 GHz"}, one(3, "band.from", `"1,66 GHz" has a decimal comma`, "write 1.66 GHz")},
		{"decimal comma between braces", []string{"band:\n  from: 1.66 GHz\n  to: 1.70 GHz\n  samples: 5\n", "band: {from: 1,66 GHz, to: 1.70 GHz}\n"},
			one(2, "band.from", `"1,66 GHz" has a decimal comma`, "write 1.66 GHz")},
		{"unknown unit", []string{"from: 1.66 GHz", "from: 1.66 GZ"}, one(3, "band.from", `"GZ" is no unit of a frequency`, "did you mean GHz?")},
		{"unit of something else", []string{"from: 1.66 GHz", "from: 1.66 mm"}, one(3, "band.from", `"mm" is no unit of a frequency`, "1.68 GHz")},
		{"millihertz", []string{"from: 1.66 GHz", "from: 1660 mHz"}, one(3, "band.from", "mHz is not what was meant", "write MHz")},
		{"no unit", []string{"from: 1.66 GHz", "from: 1.66e9"}, one(3, "band.from", `"1.66e9" has no unit`, "1.68 GHz")},
		{"unit alone", []string{"from: 1.66 GHz", "from: GHz"}, one(3, "band.from", `"GHz" is not a number with a unit`, "1.68 GHz")},
		{"not a number", []string{"from: 1.66 GHz", "from: NaN GHz"}, one(3, "band.from", "is not a finite number", "1.68 GHz")},
		{"YAML's not a number", []string{"from: 1.66 GHz", "from: .nan"}, one(3, "band.from", "is not a finite number", "1.68 GHz")},
		{"infinite", []string{"from: 1.66 GHz", "from: -Inf GHz"}, one(3, "band.from", "is not a finite number", "1.68 GHz")},
		{"YAML's infinity", []string{"from: 1.66 GHz", "from: -.inf"}, one(3, "band.from", "is not a finite number", "1.68 GHz")},
		{"zero", []string{"from: 1.66 GHz", "from: 0 GHz"}, one(3, "band.from", "0 GHz is out of range", "from 100000 Hz to 1000 GHz")},
		{"negative", []string{"from: 1.66 GHz", "from: -1.66 GHz"}, one(3, "band.from", "-1.66 GHz is out of range", "from 100000 Hz to 1000 GHz")},
		{"absurd", []string{"to: 1.70 GHz", "to: 1e30 GHz"}, one(4, "band.to", "1e30 GHz is out of range", "to 1000 GHz")},
		{"overflow", []string{"to: 1.70 GHz", "to: 1e309 GHz"}, one(4, "band.to", "1e309 is out of all range", "a size that can be built")},
		{"underflow", []string{"to: 1.70 GHz", "to: 1e-99 GHz"}, one(4, "band.to", "1e-99 is out of all range", "a size that can be built")},
		{"true", []string{"to: 1.70 GHz", "to: true"}, one(4, "band.to", "is true or false", "1.68 GHz")},
		{"a list of ends", []string{"to: 1.70 GHz", "to: [1.7 GHz]"}, one(4, "band.to", "is a list", "1.68 GHz")},
		{"unknown key", []string{"samples: 5", "sample: 5"}, one(5, "band.sample", "is no key here", "did you mean samples?")},
	})
}

func TestFaultsOfKeysAndWords(t *testing.T) {
	checkBriefCases(t, []faultCase{
		{"unknown key", []string{"limits:", "limit:"}, one(39, "limit", "is no key here", "did you mean limits?")},
		{"key in capitals", []string{"seed: 7", "SEED: 7"}, one(52, "SEED", "is no key here", "did you mean seed?")},
		{"key like nothing", []string{"front: {at_most: 200}", "front: {colour: 3}"}, one(51, "front.colour", "is no key here", "it should be at_most")},
		{"swapped letters", []string{"feed_height: {", "feed_hieght: {"},
			[]expected{{19, "vary.feed_height", "is missing, and design.feed.height does not fix it", "write design.feed.height: 5 mm"}, {27, "vary.feed_hieght", "is no key here", "did you mean feed_height?"}}},
		{"twice", []string{"seed: 7", "seed: 7\nseed: 8"}, one(53, "seed", "a second time, first on line 52", "keep one")},
		{"twice in a block", []string{"samples: 5", "samples: 5\n  samples: 5"}, one(6, "band.samples", "a second time, first on line 5", "keep one")},
		{"twice between braces", []string{"{at_most: 2}", "{at_most: 2, at_most: 3}"}, one(41, "limits.vswr.at_most", "a second time", "keep one")},
		{"sense missing and no hand", []string{"sense: right\n", "", "  handedness: right\n", ""}, one(1, "sense", "is missing", "right or left")},
		{"sense unknown", []string{"sense: right", "sense: rihgt"}, one(6, "sense", `"rihgt" is not known here`, "did you mean right?")},
		{"the other hand", []string{"sense: right", "sense: left"}, one(30, "design.handedness", "is right, but the antenna has to radiate left", "write left")},
		{"the hand with a dish", []string{"feeds_reflector: false", "feeds_reflector: true"}, one(30, "design.handedness", "the reflector turns that into the other", "write left")},
		{"flag in words", []string{"feeds_reflector: false", "feeds_reflector: no"}, one(7, "feeds_reflector", "is text", "true or false")},
		{"flag a number", []string{"trust_indicative: false", "trust_indicative: 0"}, one(44, "trust_indicative", "is a number", "true or false")},
		{"title too long", []string{"title: lighthouse link", "title: " + long("x", 201)}, one(1, "title", "is too long", "at most 200 letters")},
		{"title of two lines", []string{"title: lighthouse link", `title: "a\nb"`}, one(1, "title", "more than a line", "one line")},
		{"title a block", []string{"title: lighthouse link", "title: {a: b}"}, one(1, "title", "is a block of keys", "it should be text")},
		{"model unknown", []string{"model: full-wave", "model: fullwave"}, one(10, "model", `"fullwave" is not known`, "did you mean full-wave?")},
		{"fidelity unknown", []string{"fidelity: standard", "fidelity: best"}, one(11, "fidelity", `"best" is not known`, "draft, standard or fine")},
		{"ladder empty", []string{"model: full-wave", "model: {ladder: []}"}, one(10, "model.ladder", "not a list with something in it", "[closed-form, full-wave draft")},
		{"ladder holds nothing known", []string{"model: full-wave", "model: {ladder: [closed-form, closed-form fine, full-wave best, x, 3]}"},
			[]expected{{10, "model.ladder[2]", `"closed-form fine" is no model`, "full-wave with draft"}, {10, "model.ladder[3]", `"full-wave best"`, "draft"}, {10, "model.ladder[4]", `"x"`, "draft"}, {10, "model.ladder[5]", `"3"`, "draft"}}},
		{"ladder holds a list", []string{"model: full-wave", "model: {ladder: [[closed-form]]}"}, one(10, "model.ladder", "holds a list", "[closed-form, full-wave draft")},
		{"ladder with a time limit", []string{"model: full-wave", "model: {ladder: [full-wave], timeout: 3 s}"}, one(10, "model.timeout", "external model only", "leave it away")},
		{"ladder beside external", []string{"model: full-wave", "model: {ladder: [full-wave], external: [solve]}"}, one(10, "model.external", "beside a ladder", "keep one")},
		{"model of nothing", []string{"model: full-wave", "model: {timeout: 3 s}"}, one(10, "model.ladder", "is missing", "full-wave")},
		{"external empty", []string{"model: full-wave", "model: {external: []}"}, one(10, "model.external", "not a list with something in it", "[python3, solver.py]")},
		{"external in no time", []string{"model: full-wave", "model: {external: [solve], timeout: 0 s}"}, one(10, "model.timeout", "0 s is out of range", "0.01 s")},
		{"cone", []string{"cone: 15 deg", "cone: 91 deg"}, one(43, "cone", "91 deg is out of range", "from 0.1 deg to 90 deg")},
		{"front of none", []string{"front: {at_most: 200}", "front: {at_most: 0}"}, one(51, "front.at_most", "0 is out of range", "from 1 to 100000")},
		{"front a number", []string{"front: {at_most: 200}", "front: 200"}, one(51, "front", "is a number", "at_most")},
		{"seed negative", []string{"seed: 7", "seed: -7"}, one(52, "seed", "-7 is out of range", "from 0 to 9223372036854775807")},
		{"seed a fraction", []string{"seed: 7", "seed: 7.5"}, one(52, "seed", "7.5 is a fraction", "whole number")},
	})
}

func TestFaultsOfWhatVaries(t *testing.T) {
	checkBriefCases(t, []faultCase{
		{"reversed", []string{"{from: 3, to: 12,", "{from: 12, to: 3,"}, one(20, "vary.turns.from", "lies above to", "swap them")},
		{"reversed in two units", []string{"    from: 0.19 wl", "    from: 80 mm"}, one(22, "vary.diameter.from", "lies above to", "swap them")},
		{"one-sided", []string{"{from: 3, to: 12,", "{from: 3,"}, one(20, "vary.turns.to", "is missing", "turns: {from: 3, to: 12}")},
		{"other side", []string{"    from: 0.19 wl\n", ""}, one(21, "vary.diameter.from", "is missing", "diameter: {from: 20 mm, to: 60 mm}")},
		{"no side", []string{"{from: 3, to: 12, step: 0.25}", "{}"}, []expected{{20, "vary.turns.from", "is missing", "from: 3"}, {20, "vary.turns.to", "is missing", "to: 12"}}},
		{"a value", []string{"{from: 3, to: 12, step: 0.25}", "8"}, one(20, "vary.turns", "is a number", "from, to, step")},
		{"a step that does not divide", []string{"step: 0.25", "step: 0.4"}, one(20, "vary.turns.step", "does not divide the way from 3 to 12", "let it end at 11.8 or 12.2")},
		{"a step of lengths that does not divide", []string{"step: 10 mm", "step: 15 mm"}, one(28, "vary.ground_rim.step", "does not divide the way from 20 mm to 60 mm", "50 mm or 65 mm")},
		{"a step beyond the range", []string{"step: 0.25", "step: 10"}, one(20, "vary.turns.step", "does not divide", "let it end at 3 or 13")},
		{"a step of nothing", []string{"step: 0.25", "step: 0"}, one(20, "vary.turns.step", "0 is out of range", "to 1000")},
		{"a step backwards", []string{"step: 0.25", "step: -0.25"}, one(20, "vary.turns.step", "-0.25 is out of range", "to 1000")},
		{"a million steps", []string{"{from: 20 mm, to: 60 mm, knots: 2}", "{from: 20 mm, to: 60 m, knots: 2, step: 0.001 mm}"}, one(25, "vary.spacing.step", "more than a million values", "leave it away")},
		{"a plate without a step", []string{", step: 10 mm", ""}, one(28, "vary.ground_rim.step", "is missing", "step: 10 mm")},
		{"knots of no law", []string{"to: 12, step: 0.25", "to: 12, knots: 2"}, one(20, "vary.turns.knots", "is no key here", "from, to or step")},
		{"no knots", []string{"knots: 3", "knots: 0"}, one(24, "vary.diameter.knots", "0 is out of range", "from 1 to 16")},
		{"too many knots", []string{"knots: 3", "knots: 17"}, one(24, "vary.diameter.knots", "17 is out of range", "from 1 to 16")},
		{"a fraction of a knot", []string{"knots: 3", "knots: 1.5"}, one(24, "vary.diameter.knots", "1.5 is a fraction", "whole number")},
		{"turns with a unit of length", []string{"{from: 3, to: 12,", "{from: 3 mm, to: 12,"}, one(20, "vary.turns.from", `"mm" is no unit of a number of turns`, "0.25 turn")},
		{"a length without unit", []string{"    from: 0.19 wl", "    from: 0.19"}, one(22, "vary.diameter.from", `"0.19" has no unit`, "58 mm")},
		{"zero", []string{"    from: 0.19 wl", "    from: 0 mm"}, one(22, "vary.diameter.from", "0 mm is out of range", "from 0.01 mm to 100 m")},
		{"negative", []string{"    from: 0.19 wl", "    from: -3 mm"}, one(22, "vary.diameter.from", "-3 mm is out of range", "from 0.01 mm to 100 m")},
		{"absurd", []string{"    to: 0.42 wl", "    to: 1e30 m"}, one(23, "vary.diameter.to", "1e30 m is out of range", "from 0.01 mm to 100 m")},
		{"megametres", []string{"    to: 0.42 wl", "    to: 60 Mm"}, one(23, "vary.diameter.to", "Mm is not what was meant", "write mm")},
		{"a conductor over something", []string{"conductor: stock", "conductor: stocks"}, one(26, "vary.conductor", `"stocks" is not what a conductor can vary over`, "conductor: stock")},
		{"a conductor over a list", []string{"conductor: stock", "conductor: [stock]"}, one(26, "vary.conductor", "is a list", "text")},
		{"and fixed", []string{"  handedness: right\n", "  turns: 8\n"}, one(20, "vary.turns", "varies, but design.turns fixes it", "keep one")},
		{"and fixed below", []string{"    pin: 1.27 mm\n", "    height: 5 mm\n"}, one(27, "vary.feed_height", "varies, but design.feed.height fixes it", "keep one")},
		{"and a conductor fixed", []string{"  handedness: right\n", "  conductor: {diameter: 2 mm, material: copper}\n"},
			[]expected{{26, "vary.conductor", "varies, but design.conductor fixes it", "keep one"}}},
		{"half a strip", []string{"    pin: 1.27 mm\n", "    strip: {turns: 0.25}\n"}, one(19, "vary.strip_width", "is missing: a strip has turns and width", "design.feed.strip.width")},
		{"the other half of a strip", []string{"  conductor: stock\n", "  conductor: stock\n  strip_width: {from: 3 mm, to: 6 mm}\n"},
			one(27, "vary.strip_turns", "is missing: a strip has turns and width", "design.feed.strip.turns")},
		{"a riser too short", []string{"{from: 4 mm, to: 12 mm}", "{from: 1 mm, to: 1.5 mm}"}, one(27, "vary.feed_height.to", "leaves no riser that any conductor can have", "2.5 radii")},
		{"a fixed riser too short", []string{"  feed_height: {from: 4 mm, to: 12 mm}\n", "", "    pin: 1.27 mm\n", "    height: 1.4 mm\n"}, one(32, "design.feed.height", "is too low for every conductor", "2.5 radii")},
		{"a rim without a cup", []string{"{kind: cup, diameter: 150 mm}", "{kind: disc, diameter: 150 mm}"}, one(28, "vary.ground_rim", "varies, but the ground is disc", "{kind: cup}")},
		{"a cup without a size", []string{"{kind: cup, diameter: 150 mm}", "{kind: cup}"}, one(9, "ground.diameter", "is missing", "200 mm")},
		// 33.905 mm and 2.3 times the pin's 1.27 mm.
		{"a cup too small for the foot", []string{"{kind: cup, diameter: 150 mm}", "{kind: cup, diameter: 36.826 mm}"},
			one(9, "ground.diameter", "does not reach round the feed's opening", "more than 36.826 mm")},
		{"cups too small for the foot", []string{"{kind: cup, diameter: 150 mm}", "{kind: cup}", "  ground_rim:", "  ground_diameter: {from: 10 mm, to: 30 mm, step: 10 mm}\n  ground_rim:"},
			one(28, "vary.ground_diameter.to", "does not reach round the feed's opening", "more than 36.826 mm")},
		{"a rim of no height", []string{"{kind: cup, diameter: 150 mm}", "{kind: cup, diameter: 150 mm, rim: 0 mm}", "  ground_rim: {from: 20 mm, to: 60 mm, step: 10 mm}\n", ""},
			one(9, "ground.rim", "0 mm is out of range", "from 0.01 mm")},
		{"rims of no height", []string{"ground_rim: {from: 20 mm", "ground_rim: {from: -20 mm"}, one(28, "vary.ground_rim.from", "-20 mm is out of range", "from 0.01 mm")},
		{"a sheet of no thickness", []string{"diameter: 150 mm}", "diameter: 150 mm, thickness: 0 mm}"}, one(9, "ground.thickness", "0 mm is out of range", "from 0.01 mm to 100 mm")},
		{"a sheet of no metal", []string{"diameter: 150 mm}", "diameter: 150 mm, material: cardboard}"}, one(9, "ground.material", `"cardboard" is not known`, "copper, aluminium")},
		{"half a metal", []string{"diameter: 150 mm}", "diameter: 150 mm, density: 2.7 g/cm3}"}, one(9, "ground.material", "is missing", "conductivity and density")},
		// 30 wavelengths at 1.70 GHz, 176.348 mm, are 5.290 m.
		{"a plate as wide as a field", []string{"{kind: cup, diameter: 150 mm}", "{kind: cup, diameter: 20 m}", "  widest: {at_most: 160 mm}\n", ""}, one(9, "ground.diameter", "beyond 30 wavelengths", "at most 5.29 m")},
		{"a rim that may be a tower", []string{"{from: 20 mm, to: 60 mm, step: 10 mm}", "{from: 1 m, to: 2 m, step: 1 m}"}, one(28, "vary.ground_rim.to", "beyond 10 wavelengths", "at most 1.763 m")},
		{"an infinite sheet", []string{"{kind: cup, diameter: 150 mm}", "{kind: infinite, thickness: 1 mm, material: brass}", "  ground_rim: {from: 20 mm, to: 60 mm, step: 10 mm}\n", ""},
			[]expected{{9, "ground.thickness", "does not go with a ground of kind infinite", "leave it away"}, {9, "ground.material", "does not go with a ground of kind infinite", "leave it away"}}},
		{"a ground of no kind", []string{"{kind: cup, diameter: 150 mm}", "{diameter: 150 mm}"},
			[]expected{{9, "ground.kind", "is missing", "infinite, disc or cup"}}},
		{"a ground of an unknown kind", []string{"{kind: cup, diameter: 150 mm}", "{kind: cone}"}, one(9, "ground.kind", `"cone" is not known here`, "infinite, disc or cup")},
		{"a plane with a size", []string{"{kind: cup, diameter: 150 mm}", "{kind: infinite, diameter: 150 mm}"},
			[]expected{{9, "ground.diameter", "does not go with a ground of kind infinite", "leave it away"}, {28, "vary.ground_rim", "varies, but the ground is infinite", "{kind: cup}"}}},
		{"a disc with a rim", []string{"{kind: cup, diameter: 150 mm}", "{kind: disc, diameter: 150 mm, rim: 3 mm}"},
			[]expected{{9, "ground.rim", "does not go with a ground of kind disc", "leave it away"}, {28, "vary.ground_rim", "varies, but ground.rim fixes it", "keep one"}, {28, "vary.ground_rim", "varies, but the ground is disc", "cup"}}},
	})
}

func TestFaultsOfStock(t *testing.T) {
	const thin = "  - name: thin\n    diameter: 2 mm\n    material: copper\n    coil: 3 m\n"
	checkBriefCases(t, []faultCase{
		{"no diameter", []string{"    diameter: 2 mm\n", ""}, one(13, "stock[1].diameter", "is missing", "diameter: 2 mm")},
		{"no material", []string{"    material: copper\n", ""}, one(13, "stock[1].material", "is missing", "conductivity and density")},
		{"unknown material", []string{"    material: copper\n", "    material: coper\n"}, one(15, "stock[1].material", `"coper" is not known`, "did you mean copper?")},
		{"material and numbers", []string{"    coil: 3 m\n", "    conductivity: 58 MS/m\n"}, one(16, "stock[1].conductivity", "stands beside a material that has its own", "keep either")},
		{"half a material", []string{"    material: copper\n", "    density: 8 g/cm3\n"}, one(13, "stock[1].material", "is missing", "conductivity and density")},
		{"a wall as thick as the tube", []string{"wall: 0.7 mm", "wall: 2.1 mm"}, one(17, "stock[2].wall", "more than half the diameter", "leave it away for solid wire")},
		{"a coil of no length", []string{"coil: 3 m", "coil: 0 m"}, one(16, "stock[1].coil", "0 m is out of range", "from 1 mm to 100000 m")},
		{"a name twice", []string{"{name: tube", "{name: thin"}, one(17, "stock[2]", `names "thin" a second time, first on line 13`, "another name")},
		{"insulation by half", []string{"    coil: 3 m", "    insulation: {thickness: 0.2 mm}"}, one(16, "stock[1].insulation.permittivity", "is missing", "permittivity: 2.3")},
		{"unknown catalogue", []string{"catalogue: awg", "catalogue: swg"}, one(18, "stock[3].catalogue", `"swg" is not known here`, "did you mean awg?")},
		{"catalogue reversed", []string{"from: 8, to: 12", "from: 12, to: 8"}, one(18, "stock[3].from", "lies beyond to", "swap from and to")},
		{"catalogue with a unit", []string{"from: 8, to: 12", "from: 8 mm, to: 12"}, one(18, "stock[3].from", `"mm" follows a plain number`, "the number alone")},
		{"catalogue without a unit", []string{"catalogue: awg", "catalogue: metric-wire"}, one(18, "stock[3].from", `"8" has no unit`, "58 mm")},
		{"catalogue that ends before", []string{"from: 8, to: 12", "from: 31, to: 40"}, one(18, "stock[3].from", "holds no conductor of the catalogue awg", "from AWG 0 to AWG 30")},
		{"catalogue below zero", []string{"from: 8, to: 12", "from: -1, to: 12"}, one(18, "stock[3].from", "-1 is out of range", "from 0")},
		{"a word", []string{thin, "  - thin\n"}, one(13, "stock[1]", "is text", "name, diameter")},
		{"none", []string{thin, "", "  - {name: tube, diameter: 4 mm, wall: 0.7 mm, material: brass, least_bend_radius: 12 mm}\n", "", "  - {catalogue: awg, from: 8, to: 12, material: copper, coil: 10 m}\n", ""},
			one(20, "vary.conductor", "varies over a stock that is not given", "stock: [{name")},
		{"an empty list", []string{thin, "  []\n", "  - {name: tube, diameter: 4 mm, wall: 0.7 mm, material: brass, least_bend_radius: 12 mm}\n", "", "  - {catalogue: awg, from: 8, to: 12, material: copper, coil: 10 m}\n", ""},
			one(12, "stock", "not a list of conductors", "stock: [{name")},
		{"several, and none chosen", []string{"  conductor: stock\n", "", "  - {catalogue: awg, from: 8, to: 12, material: copper, coil: 10 m}\n", ""}, one(12, "stock", "holds several conductors, but the conductor does not vary", "conductor: stock under vary")},
		{"beside a fixed conductor", []string{"  conductor: stock\n", "", "  handedness: right\n", "  conductor: {diameter: 2 mm, material: copper}\n"},
			one(12, "stock", "is given, but design.conductor fixes the conductor", "keep one")},
		{"more than can be kept", []string{thin, manyConductors(201)}, one(12, "stock", "holds 207 conductors", "at most 200")},
	})
}

func TestFaultsOfAimsAndLimits(t *testing.T) {
	const aims = "  - {figure: gain, want: most}\n  - {figure: length, want: least}\n"
	checkBriefCases(t, []faultCase{
		{"no aims", []string{"aims:\n" + aims, ""}, one(1, "aims", "is missing", "1 to 4 aims")},
		{"aims of nothing", []string{aims, ""}, one(36, "aims", "is missing", "1 to 4 aims")},
		{"zero aims", []string{"aims:\n" + aims, "aims: []\n"}, one(36, "aims", "holds 0", "1 to 4 aims")},
		{"five aims", []string{aims, aims + "  - {figure: vswr, want: least}\n  - {figure: mass, want: least}\n  - {figure: beamwidth, want: least}\n"}, one(36, "aims", "holds 5", "1 to 4 aims")},
		{"an aim in words", []string{"aims:\n" + aims, "aims: most gain\n"}, one(36, "aims", "is text, not a list", "figure: gain")},
		{"half an aim", []string{"{figure: gain, want: most}", "{figure: gain}"}, one(37, "aims[1].want", "is missing", "want: most")},
		{"the other half", []string{"{figure: gain, want: most}", "{want: most}"}, one(37, "aims[1].figure", "is missing", "figure: gain")},
		{"an unknown figure", []string{"{figure: gain, want: most}", "{figure: gian, want: most}"}, one(37, "aims[1].figure", `"gian" is not known`, "did you mean gain?")},
		{"an unknown wish", []string{"{figure: gain, want: most}", "{figure: gain, want: max}"}, one(37, "aims[1].want", `"max" is not known`, "most")},
		{"an aim twice", []string{"{figure: length, want: least}", "{figure: gain, want: least}"}, one(38, "aims[2].figure", "gain is an aim already", "keep one")},
		{"an aim that no model answers", []string{"{figure: gain, want: most}", "{figure: front_to_back, want: most}", "{kind: cup, diameter: 150 mm}", "{kind: infinite}", "  ground_rim: {from: 20 mm, to: 60 mm, step: 10 mm}\n", ""},
			one(35, "aims", "front_to_back can be answered by no model", "a ground of kind disc or cup")},
		{"a limit that no model answers", []string{"gain: {at_least: 8 dBic}", "front_to_back: {at_least: 8 dB}", "{kind: cup, diameter: 150 mm}", "{kind: infinite}", "  ground_rim: {from: 20 mm, to: 60 mm, step: 10 mm}\n", ""},
			one(39, "limits.front_to_back", "can be answered by no model", "a ground of kind disc or cup")},
		{"an aim that no formula answers", []string{"{figure: gain, want: most}", "{figure: front_to_back, want: most}", "model: full-wave\nfidelity: standard\n", "model: closed-form\n"},
			one(35, "aims", "front_to_back cannot be answered by the closed-form model", "choose model: full-wave")},
		{"a limit that no formula answers", []string{"gain: {at_least: 8 dBic}", "front_to_back: {at_least: 8 dB}", "model: full-wave\nfidelity: standard\n", "model: {ladder: [full-wave draft, closed-form]}\n"},
			one(39, "limits.front_to_back", "cannot be answered by the closed-form model", "choose model: full-wave")},
		{"contradiction", []string{"{at_least: 8 dBic}", "{at_least: 8 dBic, at_most: 7 dBic}"}, one(40, "limits.gain.at_least", "lies above at_most", "swap them")},
		{"a limit on nothing", []string{"{at_least: 8 dBic}", "{}"}, one(40, "limits.gain", "bounds nothing", "at_most: 11.5 dBic")},
		{"a limit that is a number", []string{"{at_most: 2}", "2"}, one(41, "limits.vswr", "is a number", "at_least, at_most")},
		{"an unknown limit", []string{"  vswr: {", "  vsrw: {"}, one(41, "limits.vsrw", "is no key here", "did you mean vswr?")},
		{"the wrong unit", []string{"{at_least: 8 dBic}", "{at_least: 8 dBi}"}, one(40, "limits.gain.at_least", `"dBi" is no unit of a gain`, "did you mean dBic?")},
		{"a unit where none is", []string{"{at_most: 2}", "{at_most: 2 dB}"}, one(41, "limits.vswr.at_most", `"dB" follows a plain number`, "the number alone")},
		{"no unit where one is", []string{"{at_least: 8 dBic}", "{at_least: 8}"}, one(40, "limits.gain.at_least", `"8" has no unit`, "11.5 dBic")},
		{"a match better than a match", []string{"{at_most: 2}", "{at_most: 0.9}"}, one(41, "limits.vswr.at_most", "can be met by nothing", "larger")},
		{"no width", []string{"{at_most: 160 mm}", "{at_most: 0 mm}"},
			[]expected{{42, "limits.widest.at_most", "can be met by nothing", "larger"}, {42, "limits.widest.at_most", "leaves no room", "raise the limit"}}},
		{"more than all", []string{"gain: {at_least: 8 dBic}", "efficiency: {at_least: 1.1}"}, one(40, "limits.efficiency.at_least", "can be met by nothing", "at most 1")},
		{"absurd", []string{"{at_most: 2}", "{at_most: 1e30}"}, one(41, "limits.vswr.at_most", "1e30 is out of range", "to 1000000")},
		// 0.19 wavelengths at 1.68 GHz, 178.448 mm, are 33.905 mm.
		{"no room across", []string{"{at_most: 160 mm}", "{at_most: 30 mm}", "{kind: cup, diameter: 150 mm}", "{kind: infinite}", "  ground_rim: {from: 20 mm, to: 60 mm, step: 10 mm}\n", ""},
			one(41, "limits.widest.at_most", "needs 33.905 mm", "raise the limit")},
		{"no room for the cup", []string{"{at_most: 160 mm}", "{at_most: 149 mm}"}, one(42, "limits.widest.at_most", "needs 150 mm", "raise the limit")},
		// 1 mm of aluminium: 150 mm across and a rim of 20 mm are 27,096 mm².
		{"a cup too heavy", []string{"  widest: {at_most: 160 mm}", "  mass: {at_most: 70 g}"}, one(42, "limits.mass.at_most", "needs 0.0731", "raise the limit")},
		// Three turns of that diameter are 319.55 mm of wire.
		{"no room in the coil", []string{"  vswr: {at_most: 2}", "  wire_length: {at_most: 300 mm}"}, one(41, "limits.wire_length.at_most", "needs 319.547 mm", "raise the limit")},
		{"no room above the riser", []string{"  vswr: {at_most: 2}", "  length: {at_most: 3 mm}"}, one(41, "limits.length.at_most", "needs 4 mm", "raise the limit")},
		// A riser of 4 mm and three turns of 20 mm.
		{"no room along", []string{"  vswr: {at_most: 2}", "  length: {at_most: 60 mm}", "    lead: {turns: 0.5, spacing: 8 mm}\n", ""}, one(40, "limits.length.at_most", "needs 64 mm", "raise the limit")},
	})
}

func TestFaultsOfTheSearch(t *testing.T) {
	checkBriefCases(t, []faultCase{
		{"shares too many", []string{"genetic: 70 %", "genetic: 80 %"}, one(46, "search", "shares add up to 110 %", "100 %")},
		{"a share left out", []string{", simplex: 20 %", ""}, one(46, "search", "shares add up to 80 %", "100 %")},
		{"nothing to start from", []string{"sample: 10 %, genetic: 70 %", "genetic: 80 %"}, one(46, "search.sample", "is nothing", "a few per cent")},
		{"a share without unit", []string{"sample: 10 %", "sample: 0.1"}, []expected{{46, "search.sample", `"0.1" has no unit`, "10 %"}, {46, "search", "add up to 90 %", "100 %"}}},
		{"no evaluations", []string{"evaluations: 4000\n", "evaluations: 0\n"}, one(48, "budget.evaluations", "0 is out of range", "from 1 to 1000000000")},
		{"a time without unit", []string{"time: 10 min", "time: 10"}, one(49, "budget.time", `"10" has no unit`, "10 min")},
		{"months", []string{"time: 10 min", "time: 10 M"}, one(49, "budget.time", "M is not what was meant", "write min")},
		{"no time", []string{"time: 10 min", "time: 0 min"}, one(49, "budget.time", "0 min is out of range", "from 1 s")},
		{"half a stagnation", []string{"{evaluations: 1000, share: 0.1 %}", "{share: 0.1 %}"}, one(50, "budget.stagnation.evaluations", "is missing", "evaluations: 1000")},
		{"margins of nothing known", []string{"feed_height: 0.2 mm,", "height: 0.2 mm,"}, one(45, "margins.height", "is no key here", "feed_height or at")},
		{"margins beyond reason", []string{"diameter: 0.5 mm", "diameter: 0.5 m"}, one(45, "margins.diameter", "0.5 m is out of range", "to 100 mm")},
		{"margins at the better half", []string{"at: 95 %", "at: 40 %"}, one(45, "margins.at", "40 % is out of range", "from 50 % to 100 %")},
		{"margins at best", []string{"at: 95 %", "at: best"}, one(45, "margins.at", `"best" is not a number with a unit`, "10 %")},
		{"start from a word", []string{"seed: 7", "start_from: own.yaml"}, one(52, "start_from", "is text, not a list", "[own.yaml]")},
		{"start from nothing", []string{"seed: 7", "start_from: [own.yaml, ~]"}, one(52, "start_from", "holds empty", "[own.yaml]")},
	})
}

// Every fault of a file is said at once, whatever block it stands in, in the
// order of the lines.
func TestAllFaultsAtOnce(t *testing.T) {
	text := edit(t, soundBrief,
		"from: 1.66 GHz", "from: 1,66 GHz",
		"sense: right", "sense: up",
		"    diameter: 2 mm\n", "    diametre: 2 mm\n",
		"step: 0.25", "step: 0.4",
		"knots: 3", "knots: 1.5",
		"pin: 1.27 mm", "pin: 1.27",
		"{figure: gain, want: most}", "{figure: gian, want: most}",
		"{at_most: 2}", "{at_most: 0.5}",
		"genetic: 70 %", "genetic: 71 %",
		"time: 10 min", "time: 10 minuets",
		"seed: 7", "seed: 7\nsede: 8",
	)
	_, err := ParseBrief("b.yaml", []byte(text), YAML)
	checkFaults(t, err, "b.yaml",
		expected{3, "band.from", "decimal comma", "1.66 GHz"},
		expected{6, "sense", `"up"`, "right or left"},
		expected{13, "stock[1].diameter", "is missing", "2 mm"},
		expected{14, "stock[1].diametre", "is no key here", "did you mean diameter?"},
		expected{20, "vary.turns.step", "does not divide", "11.8"},
		expected{24, "vary.diameter.knots", "fraction", "whole number"},
		expected{33, "design.feed.pin", "has no unit", "58 mm"},
		expected{37, "aims[1].figure", `"gian"`, "gain"},
		expected{41, "limits.vswr.at_most", "met by nothing", "larger"},
		expected{46, "search", "101 %", "100 %"},
		expected{49, "budget.time", `"minuets"`, "did you mean minutes?"},
		expected{53, "sede", "is no key here", "did you mean seed?"},
	)
}
