package helix

import (
	"math"
	"slices"
	"strings"
	"testing"

	"turnwise/models"
)

func TestSoundDesigns(t *testing.T) {
	for name, d := range windings() {
		if err := Check(&d); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
	for name, change := range map[string]func(*models.Design){
		"64 knots":                 func(d *models.Design) { d.Diameter = repeat(0.058, 64) },
		"fewest turns":             func(d *models.Design) { d.Turns = 0.001 },
		"most turns":               func(d *models.Design) { d.Turns = 1000 },
		"no wanted sense":          func(d *models.Design) { d.Sense = 0 },
		"the other wanted sense":   func(d *models.Design) { d.Sense = models.Left },
		"tube of no bore":          func(d *models.Design) { d.Conductor.Wall = 0.001 },
		"magnetic conductor":       func(d *models.Design) { d.Conductor.Material.Permeability = 100 },
		"coat of air":              func(d *models.Design) { d.Insulation = models.Insulation{Thickness: 0.001, Permittivity: 1} },
		"lead that does not rise":  func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 1, Spacing: 0} },
		"lead of the whole":        func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: d.Turns, Spacing: 0.01} },
		"flat lead of the whole":   func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 8, Spacing: 0.01, Shape: models.Flat} },
		"strip of the whole":       func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: d.Turns, Width: 0.005} },
		"strip low over the plane": func(d *models.Design) { d.Feed.Strip, d.Feed.Height = models.Strip{Turns: 1, Width: 0.005}, 0.0009 },
		"transformer":              func(d *models.Design) { d.Feed.Transformer = models.Transformer{Impedance: 85, Length: 0.044} },
		"transformer of a cable":   func(d *models.Design) { d.Feed.Transformer = models.Transformer{Impedance: 85, Velocity: 0.66} },
		"length without an impedance is no transformer": func(d *models.Design) { d.Feed.Transformer.Length = math.NaN() },
		"disc": func(d *models.Design) { d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.0627} },
		"thick brass disc": func(d *models.Design) {
			d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2, Thickness: 0.003, Material: models.Material{Conductivity: 16e6, Density: 8530}}
		},
		"cup": func(d *models.Design) { d.Ground = models.Ground{Kind: models.Cup, Diameter: 0.15, Rim: 0.06} },
	} {
		d := plain()
		change(&d)
		if err := Check(&d); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

// A flat lead may end with the winding, also where the decimals of both add
// up past it in binary: 0.032 + 0.25 > 0.282.
func TestFlatLeadUpToTheEnd(t *testing.T) {
	for mm := 1; mm <= 4000; mm++ {
		d := plain()
		d.Turns = float64(mm+250) / 1000
		d.Feed.Lead = models.Lead{Turns: float64(mm) / 1000, Spacing: 0.008, Shape: models.Flat}
		c := wind(t, d)
		if n := len(c.Breaks()); n != 1 {
			t.Fatalf("lead of %d/1000 turns: breaks %v", mm, c.Breaks())
		}
	}
}

// One fault each: the key it is told under, and words of what is wrong and
// what would be right.
func TestFaults(t *testing.T) {
	for _, x := range []struct {
		name   string
		change func(*models.Design)
		key    string
		words  []string
	}{
		{"no turns", func(d *models.Design) { d.Turns = 0 }, "turns", []string{"0 cannot be wound", "such as 8.25"}},
		{"turns of a slip", func(d *models.Design) { d.Turns = 1e-4 }, "turns", []string{"0.0001 is no antenna", "from 0.001 to 1000"}},
		{"too many turns", func(d *models.Design) { d.Turns = 1001 }, "turns", []string{"1001 is no antenna", "from 0.001 to 1000"}},
		{"no diameter", func(d *models.Design) { d.Diameter = nil }, "diameter", []string{"missing", "[58 mm]"}},
		{"no spacing", func(d *models.Design) { d.Spacing = models.Law{} }, "spacing", []string{"missing", "[34 mm]"}},
		{"too many knots", func(d *models.Design) { d.Spacing = repeat(0.03, 65) }, "spacing", []string{"65 knots", "at most 64"}},
		{"one bad knot of three", func(d *models.Design) { d.Diameter = models.Law{0.05, -0.06, 0.05} }, "diameter[2]",
			[]string{"-0.06 m cannot be", "above zero", "58 mm"}},
		{"a flat spacing", func(d *models.Design) { d.Spacing = models.Law{0} }, "spacing[1]", []string{"0 m cannot be", "34 mm"}},
		{"no handedness", func(d *models.Design) { d.Handedness = 0 }, "handedness", []string{"right or left"}},
		{"strange handedness", func(d *models.Design) { d.Handedness = 2 }, "handedness", []string{"right or left"}},
		{"strange sense", func(d *models.Design) { d.Sense = -3 }, "sense", []string{"-3 is no sense", "right, left or nothing"}},
		{"conductor wider than the winding", func(d *models.Design) { d.Conductor.Diameter, d.Feed.Height = 0.06, 0.1 }, "conductor.diameter",
			[]string{"0.06 m", "0.058 m", "thinner conductor or a wider winding"}},
		{"conductor as wide as a waist", func(d *models.Design) { d.Diameter = models.Law{0.05, 0.002, 0.05} }, "conductor.diameter",
			[]string{"least diameter, 0.002 m"}},
		{"wall thicker than the tube", func(d *models.Design) { d.Conductor.Wall = 0.0011 }, "conductor.wall",
			[]string{"0.0011 m cannot be", "half the diameter", "0 for a solid wire"}},
		{"no conductivity", func(d *models.Design) { d.Conductor.Material.Conductivity = 0 }, "conductor.conductivity", []string{"0 S/m", "58 MS/m"}},
		{"no density", func(d *models.Design) { d.Conductor.Material.Density = 0 }, "conductor.density", []string{"0 kg/m³", "8.9 g/cm3"}},
		{"permeability of a slip", func(d *models.Design) { d.Conductor.Material.Permeability = 1e7 }, "conductor.permeability", []string{"1e+07", "from 0.001 to 1e+06", "such as 1"}},
		{"coat of less than nothing", func(d *models.Design) { d.Insulation = models.Insulation{Thickness: -0.001, Permittivity: 2} }, "insulation.thickness",
			[]string{"-0.001 m cannot be", "0.3 mm"}},
		{"coat lighter than vacuum", func(d *models.Design) { d.Insulation = models.Insulation{Thickness: 0.001, Permittivity: 0.5} }, "insulation.permittivity",
			[]string{"0.5 cannot be", "from 1 to 1000", "2.3"}},
		{"no riser", func(d *models.Design) { d.Feed.Height = 0 }, "feed.height", []string{"0 m cannot be", "5 mm"}},
		{"conductor on the plane", func(d *models.Design) { d.Feed.Height = 0.001 }, "feed.height", []string{"0.002 m thick touches the plane", "more than half its diameter"}},
		{"riser thicker than the winding", func(d *models.Design) { d.Feed.Pin = 0.058 }, "feed.pin", []string{"0.058 m thick", "a thinner one"}},
		{"riser of less than nothing", func(d *models.Design) { d.Feed.Pin = -0.001 }, "feed.pin", []string{"-0.001 m cannot be", "1.27 mm"}},
		{"no impedance", func(d *models.Design) { d.Feed.Impedance = 0 }, "feed.impedance", []string{"0 Ω", "50 ohm"}},
		{"lead shorter than any", func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: -0.5, Spacing: 0.01} }, "feed.lead.turns", []string{"-0.5 cannot be", "such as 0.5"}},
		{"lead that falls", func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: -0.01} }, "feed.lead.spacing", []string{"-0.01 m cannot be", "8 mm"}},
		{"lead of unknown shape", func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.01, Shape: "round"} }, "feed.lead.shape",
			[]string{`"round" is unknown`, "ramp or flat"}},
		{"ramp longer than the winding", func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 8.26, Spacing: 0.01} }, "feed.lead.turns",
			[]string{"8.26 turns are longer than the winding's 8.25", "a shorter lead or more turns"}},
		{"flat lead longer than the winding", func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 8.01, Spacing: 0.01, Shape: models.Flat} }, "feed.lead.turns",
			[]string{"8.26 turns (a flat lead's quarter turn counted) are longer"}},
		{"strip longer than the winding", func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 8.5, Width: 0.005} }, "feed.strip.turns",
			[]string{"8.5 is more than the winding's 8.25", "at most that"}},
		{"strip of less than nothing", func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: -1, Width: 0.005} }, "feed.strip.turns", []string{"-1 cannot be", "0.25"}},
		{"strip of no width", func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 0.25} }, "feed.strip.width", []string{"0 m cannot be", "5 mm"}},
		{"transformer of less than nothing", func(d *models.Design) { d.Feed.Transformer.Impedance = -85 }, "feed.transformer.impedance", []string{"-85 Ω", "85 ohm"}},
		{"transformer that shortens", func(d *models.Design) { d.Feed.Transformer = models.Transformer{Impedance: 85, Length: -0.1} }, "feed.transformer.length",
			[]string{"-0.1 m cannot be", "44 mm"}},
		{"transformer faster than light", func(d *models.Design) { d.Feed.Transformer = models.Transformer{Impedance: 85, Velocity: 1.1} }, "feed.transformer.velocity",
			[]string{"1.1 of the speed of light", "above 0 and at most 1", "0.7"}},
		{"unknown ground", func(d *models.Design) { d.Ground.Kind = "moon" }, "ground.kind", []string{`"moon" is unknown`, "infinite, disc or cup"}},
		{"disc of no size", func(d *models.Design) { d.Ground.Kind = models.Disc }, "ground.diameter", []string{"0 m cannot be", "200 mm"}},
		{"cup of no rim", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Cup, Diameter: 0.15} }, "ground.rim", []string{"0 m cannot be", "60 mm"}},
		{"disc smaller than the opening", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.0626} }, "ground.diameter",
			[]string{"0.0626 m does not reach round the feed's opening", "more than 0.0626 m is due"}},
		{"sheet of less than nothing", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2, Thickness: -1e-3} }, "ground.thickness",
			[]string{"-0.001 m cannot be", "1 mm"}},
		{"plate that weighs nothing", func(d *models.Design) {
			d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2, Material: models.Material{Conductivity: 16e6}}
		}, "ground.density", []string{"0 kg/m³ cannot be", "2.7 g/cm3"}},
		{"plate that does not conduct", func(d *models.Design) {
			d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2, Material: models.Material{Density: 2700}}
		}, "ground.conductivity", []string{"0 S/m cannot be", "35.4 MS/m"}},
	} {
		d := plain()
		x.change(&d)
		faults := faultsOf(&d)
		if len(faults) != 1 {
			t.Errorf("%s: %d faults, want one: %q", x.name, len(faults), faults)
			continue
		}
		if keyOf(faults[0]) != x.key {
			t.Errorf("%s: told under %q, want %s", x.name, faults[0], x.key)
		}
		for _, w := range x.words {
			if !strings.Contains(faults[0], w) {
				t.Errorf("%s: %q says nothing of %q", x.name, faults[0], w)
			}
		}
	}
}

// faultsOf are the lines of Check's error; Wind refuses with the same.
func faultsOf(d *models.Design) []string {
	err := Check(d)
	if err == nil {
		return nil
	}
	if c, e := Wind(d); c != nil || e == nil || e.Error() != err.Error() {
		panic("Wind and Check disagree")
	}
	return strings.Split(err.Error(), "\n")
}

func keyOf(fault string) string {
	key, _, _ := strings.Cut(fault, ": ")
	return key
}

// dimensions are all numbers of a design, each with its key; lead, strip,
// transformer, coat and cup are there.
func dimensions() []struct {
	key   string
	place func(*models.Design) *float64
} {
	type d = models.Design
	return []struct {
		key   string
		place func(*d) *float64
	}{
		{"turns", func(d *d) *float64 { return &d.Turns }},
		{"diameter[1]", func(d *d) *float64 { return &d.Diameter[0] }},
		{"diameter[3]", func(d *d) *float64 { return &d.Diameter[2] }},
		{"spacing[2]", func(d *d) *float64 { return &d.Spacing[1] }},
		{"conductor.diameter", func(d *d) *float64 { return &d.Conductor.Diameter }},
		{"conductor.conductivity", func(d *d) *float64 { return &d.Conductor.Material.Conductivity }},
		{"conductor.density", func(d *d) *float64 { return &d.Conductor.Material.Density }},
		{"conductor.wall", func(d *d) *float64 { return &d.Conductor.Wall }},
		{"conductor.permeability", func(d *d) *float64 { return &d.Conductor.Material.Permeability }},
		{"insulation.thickness", func(d *d) *float64 { return &d.Insulation.Thickness }},
		{"insulation.permittivity", func(d *d) *float64 { return &d.Insulation.Permittivity }},
		{"feed.height", func(d *d) *float64 { return &d.Feed.Height }},
		{"feed.pin", func(d *d) *float64 { return &d.Feed.Pin }},
		{"feed.impedance", func(d *d) *float64 { return &d.Feed.Impedance }},
		{"feed.lead.turns", func(d *d) *float64 { return &d.Feed.Lead.Turns }},
		{"feed.lead.spacing", func(d *d) *float64 { return &d.Feed.Lead.Spacing }},
		{"feed.strip.turns", func(d *d) *float64 { return &d.Feed.Strip.Turns }},
		{"feed.strip.width", func(d *d) *float64 { return &d.Feed.Strip.Width }},
		{"feed.transformer.impedance", func(d *d) *float64 { return &d.Feed.Transformer.Impedance }},
		{"feed.transformer.length", func(d *d) *float64 { return &d.Feed.Transformer.Length }},
		{"feed.transformer.velocity", func(d *d) *float64 { return &d.Feed.Transformer.Velocity }},
		{"ground.diameter", func(d *d) *float64 { return &d.Ground.Diameter }},
		{"ground.rim", func(d *d) *float64 { return &d.Ground.Rim }},
		{"ground.thickness", func(d *d) *float64 { return &d.Ground.Thickness }},
		{"ground.conductivity", func(d *d) *float64 { return &d.Ground.Material.Conductivity }},
		{"ground.permeability", func(d *d) *float64 { return &d.Ground.Material.Permeability }},
		{"ground.density", func(d *d) *float64 { return &d.Ground.Material.Density }},
	}
}

// whole is a design with a value under every key.
func whole() models.Design {
	d := rich()
	d.Diameter, d.Spacing = slices.Clone(d.Diameter), slices.Clone(d.Spacing)
	d.Conductor.Wall = 0.0003
	d.Conductor.Material.Permeability = 1
	d.Insulation = models.Insulation{Thickness: 0.0003, Permittivity: 2.3}
	d.Feed.Transformer = models.Transformer{Impedance: 85, Length: 0.044, Velocity: 0.9}
	d.Ground = models.Ground{Kind: models.Cup, Diameter: 0.15, Rim: 0.06, Thickness: 0.001, Material: models.Material{Conductivity: 35.4e6, Density: 2700}}
	return d
}

func TestNoDimensionTakesWhatIsNoNumber(t *testing.T) {
	d := whole()
	if err := Check(&d); err != nil {
		t.Fatal(err)
	}
	for _, x := range dimensions() {
		for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), -1, -1e300} {
			d := whole()
			*x.place(&d) = v
			if faults := faultsOf(&d); !slices.ContainsFunc(faults, func(f string) bool { return keyOf(f) == x.key }) {
				t.Errorf("%s of %g: %q", x.key, v, faults)
			}
		}
	}
}

// Zero means absent for some keys and is a fault of the others.
func TestZero(t *testing.T) {
	absent := []string{"conductor.wall", "conductor.permeability", "insulation.thickness", "feed.pin", "feed.lead.turns",
		"feed.lead.spacing", "feed.strip.turns", "feed.transformer.impedance", "feed.transformer.length", "feed.transformer.velocity",
		"ground.thickness", "ground.permeability"}
	for _, x := range dimensions() {
		d := whole()
		*x.place(&d) = 0
		told := slices.ContainsFunc(faultsOf(&d), func(f string) bool { return keyOf(f) == x.key })
		if want := !slices.Contains(absent, x.key); told != want {
			t.Errorf("%s of 0: fault %t, want %t", x.key, told, want)
		}
	}
}

// Material's numbers and an impedance have no upper end; all else has.
func TestAbsurdSizes(t *testing.T) {
	endless := []string{"conductor.conductivity", "conductor.density", "feed.impedance", "feed.transformer.impedance",
		"ground.conductivity", "ground.density"}
	for _, x := range dimensions() {
		d := whole()
		*x.place(&d) = 1e9
		told := slices.ContainsFunc(faultsOf(&d), func(f string) bool { return keyOf(f) == x.key })
		if want := !slices.Contains(endless, x.key); told != want {
			t.Errorf("%s of 1e9: fault %t, want %t", x.key, told, want)
		}
	}
}

// An empty design has many faults, and they are told together.
func TestAllFaultsAtOnce(t *testing.T) {
	got := faultsOf(&models.Design{})
	var keys []string
	for _, f := range got {
		keys = append(keys, keyOf(f))
	}
	want := []string{"turns", "diameter", "spacing", "handedness", "conductor.diameter", "conductor.conductivity", "conductor.density", "feed.height", "feed.impedance"}
	if !slices.Equal(keys, want) {
		t.Errorf("faults of nothing: %v, want %v", keys, want)
	}

	d := whole()
	for _, x := range dimensions() {
		*x.place(&d) = math.NaN()
	}
	d.Handedness, d.Sense, d.Feed.Lead.Shape, d.Ground.Kind = 0, 7, "round", models.Cup
	told := map[string]bool{}
	for _, f := range faultsOf(&d) {
		told[keyOf(f)] = true
	}
	for _, x := range dimensions() {
		if !told[x.key] {
			t.Errorf("nothing is said of %s", x.key)
		}
	}
	for _, key := range []string{"handedness", "sense", "feed.lead.shape"} {
		if !told[key] {
			t.Errorf("nothing is said of %s", key)
		}
	}
}
