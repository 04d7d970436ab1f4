package configs

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// readers are the two doors that files come in by.
var readers = map[string]func(path string) error{
	"brief":  func(path string) error { _, err := ReadBrief(path); return err },
	"design": func(path string) error { _, err := ReadDesign(path); return err },
}

// Files that hold no brief and no design at all, by what is in them.
func TestFilesThatAreNone(t *testing.T) {
	comments := "# nothing but\n\n# comments\n"
	for _, c := range []struct {
		name, file, content string
		line                int
		what, remedy        string
	}{
		{"empty", "x.yaml", "", 0, "is empty", "'turnwise start' gives a brief"},
		{"empty TOML", "x.toml", "", 0, "is empty", "'turnwise start' gives a brief"},
		{"empty JSON", "x.json", " \n", 0, "is empty", "'turnwise start' gives a brief"},
		{"a mark of UTF-8 alone", "x.yaml", "\ufeff", 0, "is empty", "'turnwise start'"},
		{"comments alone", "x.yaml", comments, 0, "is empty", "'turnwise start'"},
		{"comments alone in TOML", "x.toml", comments, 0, "is empty", "'turnwise start'"},
		{"null", "x.yaml", "~\n", 0, "is empty", "'turnwise start'"},
		{"null JSON", "x.json", "null", 0, "is empty", "'turnwise start'"},
		{"a separator alone", "x.yaml", "---\n", 0, "is empty", "'turnwise start'"},
		{"a word", "x.yaml", "\nhelix\n", 2, "is text, not a block of keys", "lines of key: value"},
		{"a number", "x.json", "\n\n3", 3, "is a number, not a block of keys", "lines of key: value"},
		{"a list", "x.yaml", "- 3\n", 1, "is a list, not a block of keys", "lines of key: value"},
		{"a list of JSON", "x.json", "[1, 2]", 1, "is a list, not a block of keys", "lines of key: value"},
		{"10 MB", "x.yaml", strings.Repeat("# a line of a log\n", 600_000), 0, "is larger than 1 MiB", "name the right file"},
		{"1 MiB and a letter", "x.toml", strings.Repeat("#", largestFile+1), 0, "is larger than 1 MiB", "name the right file"},
		{"binary", "x.yaml", "\x7fELF\x02\x01\x01\x00\x00", 0, "is not a text file", "UTF-8"},
		{"Latin-1", "x.toml", "title = \"h\xe9lice\"\n", 0, "is not a text file", "UTF-8"},
		{"NUL", "x.json", "{\"title\": \"\x00\"}", 0, "is not a text file", "UTF-8"},
		{"UTF-16, little end first", "x.yaml", "\xff\xfet\x00:\x00", 0, "is written in UTF-16", "save it as UTF-8"},
		{"UTF-16, big end first", "x.json", "\xfe\xff\x00{", 0, "is written in UTF-16", "save it as UTF-8"},
		{"a tab for indentation", "x.yaml", "band:\n\tfrom: 1 GHz\n", 2, "is no valid YAML", "indentation"},
		{"a bracket left open", "x.yaml", "title: a\nband: {from: 1 GHz\n", 1, "is no valid YAML", "brackets"},
		{"a quote left open", "x.yaml", "title: \"a\n", 2, "is no valid YAML", "quotes"},
		{"an alias of nothing", "x.yaml", "title: *gone\n", 0, "is no valid YAML: unknown anchor", "brackets"},
		{"a control letter", "x.yaml", "title: \x1b[2J\n", 0, "is no valid YAML", "quotes"},
		{"TOML without quotes", "x.toml", "title = \"a\"\n[band]\nfrom = 1.66 GHz\n", 3, "is no valid TOML", "quotes"},
		{"TOML cut short", "x.toml", "title = \"a\"\nband = {from = \"1 GHz\"", 2, "is no valid TOML", "brackets"},
		{"a TOML key twice", "x.toml", "seed = 1\nseed = 2\n", 2, "is no valid TOML: toml: key seed is already defined", "check"},
		{"a TOML table twice", "x.toml", "[band]\n[feed]\n[band]\n", 3, "is no valid TOML", "check"},
		{"a TOML list and table", "x.toml", "aims = []\n[[aims]]\n", 2, "is no valid TOML", "check"},
		{"JSON cut short", "x.json", "{\"title\":\n\"a\"", 2, "is no valid JSON: unexpected end", "brackets"},
		{"a comma too many", "x.json", "{\n  \"title\": \"a\",\n}", 3, "is no valid JSON", "commas"},
		{"JSON without quotes", "x.json", "{title: 3}", 1, "is no valid JSON", "quotes"},
		{"JSON twice", "x.json", "{}\n{}", 2, "is no valid JSON", "one object"},
		{"JSON with NaN", "x.json", "{\"seed\": NaN}", 1, "is no valid JSON", "quotes"},
		{"YAML in JSON's name", "x.json", "title: a\n", 1, "is no valid JSON", "quotes"},
	} {
		for kind, read := range readers {
			t.Run(c.name+"/"+kind, func(t *testing.T) {
				path := filepath.Join(t.TempDir(), c.file)
				if err := os.WriteFile(path, []byte(c.content), 0o600); err != nil {
					t.Fatal(err)
				}
				checkFaults(t, read(path), path, expected{c.line, "", c.what, c.remedy})
			})
		}
	}
}

func TestPathsThatAreNoFiles(t *testing.T) {
	dir := t.TempDir()
	loop := filepath.Join(dir, "loop.yaml")
	if err := os.Symlink(loop, loop); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ name, path, what, remedy string }{
		{"missing", filepath.Join(dir, "gone.yaml"), "does not exist", "check the name"},
		{"no name", "", "does not exist", "check the name"},
		{"folder", dir, "is a folder", "name a file in it"},
		{"link to itself", loop, "cannot be looked at", "check its name"},
		{"name too long", filepath.Join(dir, strings.Repeat("x", 300)), "cannot be looked at", "check its name"},
	} {
		for kind, read := range readers {
			t.Run(c.name+"/"+kind, func(t *testing.T) {
				checkFaults(t, read(c.path), c.path, expected{0, "", c.what, c.remedy})
			})
		}
	}
}

// A file cut short anywhere is refused in so many words, unless what is left
// is a design by itself, which then reads back.
func TestTruncatedFiles(t *testing.T) {
	for _, format := range []Format{YAML, TOML, JSON} {
		whole := inFormat(t, soundDesign, format)
		for cut := range len(whole) {
			d, err := ParseDesign("d", whole[:cut], format)
			if err == nil {
				reread(t, d)
				continue
			}
			for _, f := range allFaults(t, err) {
				checkMessage(t, &f)
			}
		}
	}
}

// Designs to start from stand beside the brief, and their faults name their
// own file and line.
func TestStartFrom(t *testing.T) {
	dir := t.TempDir()
	write := func(name, text string) string {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	brief := write("brief.yaml", edit(t, soundBrief, "seed: 7", "start_from: [own.yaml, "+write("other.yaml", soundDesign)+"]"))
	own := write("own.yaml", edit(t, soundDesign, "turns: 8.25", "turns: 8"))
	b, err := ReadBrief(brief)
	if err != nil {
		t.Fatal(err)
	}
	if len(b.Starts) != 2 || b.Starts[0].Turns != 8 || b.Starts[1].Turns != 8.25 {
		t.Fatalf("starts from %+v", b.Starts)
	}
	again, err := ParseBrief(filepath.Join(dir, "again.yaml"), b.Write(), YAML)
	if err != nil {
		t.Fatal(err)
	}
	equal(t, "the brief as written", again, b)

	other := again
	other.Starts = append(other.Starts[:1:1], other.Starts[0])
	if other.Digest() == b.Digest() {
		t.Error("another design to start from, but the same digest")
	}

	write("own.yaml", edit(t, soundDesign, "turns: 8.25", "turns: 8 mm", "[34 mm]", "[34]"))
	write("brief.yaml", edit(t, soundBrief, "step: 0.25", "step: 0.4", "seed: 7", "start_from: [own.yaml, gone.yaml]\nseed: -1"))
	_, err = ReadBrief(brief)
	faults := allFaults(t, err)
	checkFaults(t, &Error{faults[:2]}, brief, expected{20, "vary.turns.step", "does not divide", ""}, expected{53, "seed", "out of range", ""})
	checkFaults(t, &Error{faults[2:4]}, own, expected{2, "turns", "no unit", ""}, expected{4, "spacing", "no unit", ""})
	checkFaults(t, &Error{faults[4:]}, filepath.Join(dir, "gone.yaml"), expected{0, "", "does not exist", "check the name"})
}

func TestFormatOf(t *testing.T) {
	for path, want := range map[string]Format{
		"a.yaml": YAML, "a.yml": YAML, "a": YAML, "a.txt": YAML, "a.toml": TOML, "A.TOML": TOML, "a.json": JSON, "a.toml/b.Json": JSON, "a.json/b": YAML,
	} {
		if got := FormatOf(path); got != want {
			t.Errorf("%s: %s, want %s", path, got, want)
		}
	}
}
