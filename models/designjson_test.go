package models_test

import (
	"encoding/json"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"turnwise/models"
)

// fullDesign has every part a design can have.
func fullDesign() models.Design {
	return models.Design{
		Title: "every part", Turns: 8.25,
		Diameter: models.Law{0.058, 0.058, 0.046}, Spacing: models.Law{0.034},
		Handedness: models.Left,
		Conductor: models.Conductor{Stock: "2.0 mm copper", Diameter: 0.002,
			Material: models.Material{Name: "copper", Conductivity: 58e6, Density: 8890, Permeability: 1}},
		Insulation: models.Insulation{Thickness: 0.0003, Permittivity: 2.3},
		Feed: models.Feed{Height: 0.005, Pin: 0.00127, Impedance: 50,
			Lead:        models.Lead{Turns: 0.5, Spacing: 0.008, Shape: models.Flat},
			Strip:       models.Strip{Turns: 0.25, Width: 0.005},
			Transformer: models.Transformer{Impedance: 85, Length: 0.044, Velocity: 0.66}},
		Ground: models.Ground{Kind: models.Cup, Diameter: 0.15, Rim: 0.06, Thickness: 0.0008,
			Material: models.Material{Name: "brass", Conductivity: 16e6, Density: 8530, Permeability: 1}},
		Band:  models.Band{From: 1.66e9, To: 1.70e9, Samples: 5},
		Sense: models.Right, FeedsReflector: true,
	}
}

const fullText = `{"title":"every part","turns":8.25,"diameter_m":[0.058,0.058,0.046],"spacing_m":[0.034],"handedness":"left",` +
	`"conductor":{"stock":"2.0 mm copper","diameter_m":0.002,"material":"copper","conductivity_s_per_m":58000000,"density_kg_per_m3":8890,"permeability":1},` +
	`"insulation":{"thickness_m":0.0003,"permittivity":2.3},` +
	`"feed":{"height_m":0.005,"pin_m":0.00127,"impedance_ohm":50,"lead":{"turns":0.5,"spacing_m":0.008,"shape":"flat"},"strip":{"turns":0.25,"width_m":0.005},"transformer":{"impedance_ohm":85,"length_m":0.044,"velocity":0.66}},` +
	`"ground":{"kind":"cup","diameter_m":0.15,"rim_m":0.06,"thickness_m":0.0008,"material":"brass","conductivity_s_per_m":16000000,"density_kg_per_m3":8530,"permeability":1},"band":{"from_hz":1660000000,"to_hz":1700000000,"samples":5},"sense":"right","feeds_reflector":true}`

func TestDesignJSONText(t *testing.T) {
	text, err := json.Marshal(fullDesign())
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(fullText, string(text)); diff != "" {
		t.Errorf("text (-want +got):\n%s", diff)
	}
	var back models.Design
	if err := json.Unmarshal([]byte(fullText), &back); err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(fullDesign(), back); diff != "" {
		t.Errorf("read back (-want +got):\n%s", diff)
	}
}

// What a design leaves to its defaults must be spelt out for a reader who
// knows none of them.
func TestDesignJSONWritesDefaults(t *testing.T) {
	d := fullDesign()
	d.Feed.Pin, d.Feed.Lead.Shape, d.Feed.Transformer.Velocity = 0, "", 0
	d.Conductor.Material.Permeability, d.Ground = 0, models.Ground{}
	text, err := json.Marshal(d)
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{`"pin_m":0.002,`, `"shape":"ramp"`, `"velocity":1}`, `"permeability":1}`, `"ground":{"kind":"infinite"}`} {
		if !strings.Contains(string(text), want) {
			t.Errorf("%s is not in %s", want, text)
		}
	}
	var back models.Design
	if err := json.Unmarshal(text, &back); err != nil {
		t.Fatal(err)
	}
	if back.Canonical() != d.Canonical() {
		t.Errorf("read back as\n%s\nwant\n%s", back.Canonical(), d.Canonical())
	}
}

// A plate's sheet is spelt out as well, and a text without it, from before
// plates had one, is read with the sheet that nobody has to name.
func TestDesignJSONOfAPlainPlate(t *testing.T) {
	d := fullDesign()
	d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2}
	text, err := json.Marshal(d)
	if err != nil {
		t.Fatal(err)
	}
	const sheet = `,"thickness_m":0.001,"material":"aluminium","conductivity_s_per_m":35400000,"density_kg_per_m3":2700,"permeability":1`
	if !strings.Contains(string(text), `"ground":{"kind":"disc","diameter_m":0.2`+sheet+`}`) {
		t.Errorf("the sheet is not in %s", text)
	}
	for name, text := range map[string]string{"spelt out": string(text), "left away": strings.Replace(string(text), sheet, "", 1)} {
		var back models.Design
		if err := json.Unmarshal([]byte(text), &back); err != nil {
			t.Fatal(err)
		}
		if back.Hash() != d.Hash() {
			t.Errorf("%s: read back as\n%s\nwant\n%s", name, back.Canonical(), d.Canonical())
		}
	}
}

func TestDesignJSONRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := drawDesign(t)
		text, err := json.Marshal(d)
		if err != nil {
			t.Fatal(err)
		}
		var back models.Design
		if err := json.Unmarshal(text, &back); err != nil {
			t.Fatalf("%v\n%s", err, text)
		}
		if back.Hash() != d.Hash() {
			t.Fatalf("read back as\n%s\nwant\n%s", back.Canonical(), d.Canonical())
		}
		if back.Band != d.Band || back.Sense != d.Sense || back.Title != d.Title || back.FeedsReflector != d.FeedsReflector || back.Conductor.Stock != d.Conductor.Stock {
			t.Fatalf("what is wanted of the design changed: %+v, want %+v", back, d)
		}
		again, err := json.Marshal(back)
		if err != nil || string(again) != string(text) {
			t.Fatalf("written again as\n%s\nwant\n%s (%v)", again, text, err)
		}
	})
}

func drawDesign(t *rapid.T) models.Design {
	length := func(name string) float64 { return rapid.Float64Range(1e-9, 10).Draw(t, name) }
	some := func(name string) bool { return rapid.Bool().Draw(t, name) }
	law := func(name string) models.Law {
		return rapid.SliceOfN(rapid.Float64Range(-1, 10), 1, 5).Draw(t, name)
	}
	d := models.Design{
		Title: rapid.StringN(0, 20, 80).Draw(t, "title"), Turns: length("turns"),
		Diameter: law("diameter"), Spacing: law("spacing"),
		Handedness: rapid.SampledFrom([]models.Sense{models.Right, models.Left}).Draw(t, "hand"),
		Conductor: models.Conductor{Stock: rapid.SampledFrom([]string{"", "own tube"}).Draw(t, "stock"), Diameter: length("conductor"),
			Material: models.Material{Conductivity: 1e6 * length("conductivity"), Density: 1e3 * length("density"), Permeability: float64(rapid.IntRange(0, 2).Draw(t, "permeability"))}},
		Feed:           models.Feed{Height: length("height"), Impedance: 50},
		Ground:         models.Ground{Kind: rapid.SampledFrom([]models.GroundKind{"", models.Infinite, models.Disc, models.Cup}).Draw(t, "kind"), Diameter: length("ground"), Rim: length("rim")},
		Sense:          rapid.SampledFrom([]models.Sense{0, models.Right, models.Left}).Draw(t, "sense"),
		FeedsReflector: some("reflector"),
	}
	if some("sheet") {
		d.Ground.Thickness = length("thickness")
	}
	if some("metal") {
		d.Ground.Material = models.Material{Conductivity: 1e6 * length("plate conductivity"), Density: 1e3 * length("plate density"), Permeability: float64(rapid.IntRange(0, 2).Draw(t, "plate permeability"))}
	}
	if some("pin") {
		d.Feed.Pin = length("pin")
	}
	if some("insulation") {
		d.Insulation = models.Insulation{Thickness: length("coat"), Permittivity: 2.3}
	}
	if some("lead") {
		d.Feed.Lead = models.Lead{Turns: length("lead"), Spacing: length("lead spacing"), Shape: rapid.SampledFrom([]models.LeadShape{"", models.Ramp, models.Flat}).Draw(t, "shape")}
	}
	if some("strip") {
		d.Feed.Strip = models.Strip{Turns: length("strip"), Width: length("width")}
	}
	if some("transformer") {
		d.Feed.Transformer = models.Transformer{Impedance: length("line"), Length: length("line length"), Velocity: float64(rapid.IntRange(0, 2).Draw(t, "velocity"))}
	}
	if some("band") {
		d.Band = models.Band{From: 1e9 * length("from"), To: 1e9 * length("to"), Samples: rapid.IntRange(0, 99).Draw(t, "samples")}
	}
	return d
}

func TestDesignJSONFaults(t *testing.T) {
	replace := func(old, with string) string {
		if !strings.Contains(fullText, old) {
			t.Fatalf("the test replaces %s, which does not stand in the text", old)
		}
		return strings.Replace(fullText, old, with, 1)
	}
	for _, c := range []struct{ name, text, want string }{
		{"missing", replace(`"turns":8.25,`, ``), "turns is missing; it should be a number in turns"},
		{"nested missing", replace(`"height_m":0.005,`, ``), "feed.height_m is missing; it should be a number in m"},
		{"wrong kind", replace(`"turns":8.25`, `"turns":"8.25 turns"`), `turns is "8.25 turns"; it should be a number in turns`},
		{"not a list", replace(`[0.034]`, `0.034`), "spacing_m is 0.034; it should be a list, each item a number in m"},
		{"empty law", replace(`[0.034]`, `[]`), "spacing_m is a list of 0; it should be a list"},
		{"item of a law", replace(`0.058,0.046]`, `null,0.046]`), "diameter_m[1] is null; it should be a number in m"},
		{"unknown", replace(`"turns":8.25`, `"turns":8.25,"conducter":1`), "conducter is no field of the value; known are title, turns,"},
		{"misspelt", replace(`"pin_m"`, `"pinm"`), "feed.pinm is no field of feed; did you mean pin_m?"},
		{"twice", replace(`"turns":8.25`, `"turns":8.25,"turns":8.25`), "turns stands twice"},
		{"hand", replace(`"handedness":"left"`, `"handedness":"anticlockwise"`), `handedness is "anticlockwise"; it should be one of right, left`},
		{"not a number", replace(`"turns":8.25`, `"turns":NaN`), "turns is NaN; it should be a finite number"},
		{"too large", replace(`"turns":8.25`, `"turns":1e999`), "turns is 1e999; it should be a number that fits 64 bits"},
		{"fraction of a count", replace(`"samples":5`, `"samples":5.5`), "band.samples is 5.5; it should be a whole number"},
		{"rim of a disc", replace(`"kind":"cup"`, `"kind":"disc"`), "ground.rim_m is no field of ground"},
		{"sheet of an infinite plane", replace(`"kind":"cup","diameter_m":0.15,"rim_m":0.06,`, `"kind":"infinite",`), "ground.thickness_m is no field of ground"},
		{"half a metal", replace(`"density_kg_per_m3":8530`, `"densty_kg_per_m3":8530`), "ground.density_kg_per_m3 is missing"},
		{"not an object", `[]`, "the value is a list of 0; it should be an object"},
	} {
		t.Run(c.name, func(t *testing.T) {
			var d models.Design
			err := d.UnmarshalJSON([]byte(c.text))
			if err == nil {
				t.Fatalf("no error; want %q", c.want)
			}
			if !strings.Contains(err.Error(), c.want) {
				t.Errorf("error %q, want %q in it", err, c.want)
			}
		})
	}
}

func TestDesignJSONNeedsAHand(t *testing.T) {
	d := fullDesign()
	d.Handedness = 0
	if text, err := json.Marshal(d); err == nil || !strings.Contains(err.Error(), "right or left") {
		t.Errorf("written as %s with error %v", text, err)
	}
}
