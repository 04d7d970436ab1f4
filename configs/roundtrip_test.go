package configs

import (
	"encoding/json"
	"errors"
	"os"
	"path/filepath"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/pelletier/go-toml/v2"
	"go.yaml.in/yaml/v3"
	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/objectives"
	"turnwise/optimize/space"
)

// failer is what both kinds of test have to fail with.
type failer interface {
	Helper()
	Errorf(format string, a ...any)
	Fatalf(format string, a ...any)
}

// rereadBrief writes a brief and reads it back, and wants it unchanged.
func rereadBrief(t failer, b Brief, name string) {
	t.Helper()
	text := b.Write()
	again, err := ParseBrief(name, text, YAML)
	if err != nil {
		t.Fatalf("what was written does not read: %v\n%s", err, text)
	}
	if d := cmp.Diff(b, again); d != "" {
		t.Fatalf("what was written reads as another brief (-was +is):\n%s\n%s", d, text)
	}
	if b.Digest() != again.Digest() || len(Diff(&b, &again)) > 0 {
		t.Fatalf("an equal brief has another digest, or differs in %v", Diff(&b, &again))
	}
}

// reread writes a design and reads it back. What is read is on the grid of
// written designs, so a second time changes nothing.
func reread(t failer, d models.Design) models.Design {
	t.Helper()
	text := WriteDesign(d)
	again, err := ParseDesign("written", text, YAML)
	if err != nil {
		t.Fatalf("what was written does not read: %v\n%s", err, text)
	}
	if second := WriteDesign(again); string(second) != string(text) {
		t.Fatalf("a design read back is written as another:\n%s\n%s", text, second)
	}
	return again
}

func TestBriefsReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) { rereadBrief(t, drawBrief(t), "drawn.yaml") })
}

func TestDesignsReadBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := drawDesign(t)
		again := reread(t, d)
		if diff := cmp.Diff(d, again); diff != "" {
			t.Fatalf("what was written reads as another design (-was +is):\n%s\n%s", diff, WriteDesign(d))
		}
		if d.Hash() != again.Hash() {
			t.Fatalf("an equal design has another hash")
		}
	})
}

// A design between the multiples of the grid is written on it, at most half
// a step away.
func TestWritingRounds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := drawDesign(t)
		shift := rapid.Float64Range(-0.49, 0.49)
		off := d
		off.Diameter = append(models.Law(nil), d.Diameter...)
		off.Turns += 1e-3 * shift.Draw(t, "turns")
		off.Diameter[0] += 1e-6 * shift.Draw(t, "diameter")
		off.Feed.Height += 1e-6 * shift.Draw(t, "height")
		off.Feed.Impedance += 1e-2 * shift.Draw(t, "impedance")
		off.Conductor.Diameter += 1e-6 * shift.Draw(t, "wire")
		if d.Feed.Lead.Shape != "" {
			off.Feed.Lead.Turns += 1e-3 * shift.Draw(t, "lead")
			off.Feed.Lead.Spacing += 1e-6 * shift.Draw(t, "lead")
		}
		if diff := cmp.Diff(d, reread(t, off)); diff != "" {
			t.Fatalf("(-on the grid +read):\n%s", diff)
		}
	})
}

// Whatever point a search may reach is a design whose file reads back.
func TestEveryPointIsADesignFile(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		br := drawBrief(t)
		layout := objectives.NewLayout(&br.Spec)
		unit := make(space.Point, len(layout.Space))
		for i := range unit {
			unit[i] = rapid.Float64Range(0, 1).Draw(t, "unit")
		}
		d := layout.Design(layout.Space.FromUnit(unit))
		again := reread(t, d)
		if d.Canonical() != again.Canonical() {
			t.Fatalf("read back as another design:\n%s\n%s", d.Canonical(), again.Canonical())
		}
	})
}

// inFormat is a YAML text in another format.
func inFormat(t testing.TB, text string, format Format) []byte {
	t.Helper()
	var all map[string]any
	if err := yaml.Unmarshal([]byte(text), &all); err != nil {
		t.Fatal(err)
	}
	out, err := []byte(text), error(nil)
	switch format {
	case JSON:
		out, err = json.MarshalIndent(all, "", "\t")
	case TOML:
		out, err = toml.Marshal(all)
	}
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// The same content is the same brief in every format.
func TestFormatsReadEqual(t *testing.T) {
	texts := map[string]string{"sound": soundBrief}
	for _, s := range Scenarios() {
		text, err := ScenarioText(s.Name)
		if err != nil {
			t.Fatal(err)
		}
		texts[s.Name] = string(text)
	}
	for name, text := range texts {
		want := readBrief(t, text, YAML)
		for _, format := range []Format{TOML, JSON} {
			equal(t, name+" as "+string(format), readBrief(t, string(inFormat(t, text, format)), format), want)
		}
	}
	want, err := ParseDesign("d.yaml", []byte(soundDesign), YAML)
	if err != nil {
		t.Fatal(err)
	}
	for _, format := range []Format{TOML, JSON} {
		got, err := ParseDesign("d", inFormat(t, soundDesign, format), format)
		if err != nil {
			t.Fatal(err)
		}
		equal(t, string(format), got, want)
	}
	if diff := cmp.Diff(want, reread(t, want)); diff != "" {
		t.Fatal(diff)
	}
}

// TOML and JSON as people write them by hand.
func TestFormatsByHand(t *testing.T) {
	want, err := ParseDesign("d.yaml", []byte("turns: 8\ndiameter: 58 mm\nspacing: [34 mm, 30 mm]\nhandedness: right\nconductor: {stock: AWG 12 copper}\nfeed: {height: 5 mm, strip: {turns: 0.25, width: 5 mm}}\ntitle: \"\U0001F4E1 a/b\"\n"), YAML)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		format Format
		text   string
	}{
		{TOML, `# a comment
title = "\U0001F4E1 a/b"
turns = 8.0
diameter = '58 mm'
spacing = [
  "34 mm", # feed end
  "30 mm",
]
handedness = """right"""
feed.strip = { turns = 0.25, width = "5 mm" }
feed.height = "5 mm"
[conductor]
stock = "AWG 12 copper"
`},
		{TOML, "\ufefftitle=\"\U0001F4E1 a/b\"\r\nturns=8\r\ndiameter=[\"58 mm\"]\r\nspacing=[\"34 mm\",\"30 mm\"]\r\nhandedness=\"right\"\r\n[feed]\r\nheight=\"5 mm\"\r\n[feed.strip]\r\nturns=2_5e-2\r\nwidth=\"5 mm\"\r\n[conductor]\r\nstock=\"awg 12 COPPER\"\r\n"},
		{JSON, "{\"turns\":8,\"diameter\":\"58 mm\",\"spacing\":[\"34 mm\",\"30 mm\"],\"handedness\":\"right\",\"conductor\":{\"stock\":\"AWG 12 copper\"},\"feed\":{\"height\":\"5 mm\",\"strip\":{\"turns\":25e-2,\"width\":\"5 mm\"}},\"title\":\"\\ud83d\\udce1 a\\/b\"}"},
		{YAML, "---\n\"turns\": 8.0\n'diameter': [\"58 mm\"]\nspacing:\n- 34 mm\n- 30 mm\nhandedness: >-\n  right\nconductor: {stock: \"AWG 12 copper\"}\nfeed:\n    height: 5mm\n    strip: {turns: .25 turn, width: 0.5 cm}\ntitle: \U0001F4E1 a/b\n...\n"},
	} {
		got, err := ParseDesign("d", []byte(c.text), c.format)
		if err != nil {
			t.Errorf("%v\n%s", err, c.text)
			continue
		}
		equal(t, c.text, got, want)
	}
}

func allFaults(t failer, err error) []Fault {
	t.Helper()
	var e *Error
	if !errors.As(err, &e) {
		t.Fatalf("got %v, want an *Error", err)
	}
	return e.Faults
}

// A brief written to a file is found by its format.
func TestReadBriefByName(t *testing.T) {
	want := readBrief(t, soundBrief, YAML)
	for _, format := range []Format{YAML, TOML, JSON} {
		path := filepath.Join(t.TempDir(), "brief."+string(format))
		if err := os.WriteFile(path, inFormat(t, soundBrief, format), 0o600); err != nil {
			t.Fatal(err)
		}
		got, err := ReadBrief(path)
		if err != nil {
			t.Fatal(err)
		}
		equal(t, path, got, want)
	}
}
