package configs

import (
	"regexp"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// fuzzFormats are what the second argument of the fuzz targets chooses among.
var fuzzFormats = []Format{YAML, TOML, JSON}

// checkRefusal wants an error to name its file in every fault.
func checkRefusal(t failer, err error, file string, others bool) {
	for _, f := range allFaults(t, err) {
		checkMessage(t, &f)
		if f.File != file && !(others && f.File != "") {
			t.Fatalf("%v names the file %q, want %q", &f, f.File, file)
		}
		if !strings.HasPrefix(f.Error(), plain(f.File)) {
			t.Fatalf("%v does not begin with its file", &f)
		}
	}
}

// anyBrief wants bytes to be refused in so many words, or to give a brief
// that reads back as itself.
func anyBrief(t failer, data []byte, format Format) {
	t.Helper()
	const file = "any.yaml"
	b, err := ParseBrief(file, data, format)
	if err != nil {
		checkRefusal(t, err, file, strings.Contains(string(data), "start_from"))
		return
	}
	rereadBrief(t, b, file)
}

// anyDesign wants bytes to be refused in so many words, or to give a design
// that is written and read without change from then on.
func anyDesign(t failer, data []byte, format Format) {
	t.Helper()
	const file = "any.yaml"
	d, err := ParseDesign(file, data, format)
	if err != nil {
		checkRefusal(t, err, file, false)
		return
	}
	reread(t, d)
}

func FuzzBrief(f *testing.F) {
	f.Fuzz(func(t *testing.T, data []byte, format uint8) {
		anyBrief(t, data, fuzzFormats[int(format)%len(fuzzFormats)])
	})
}

func FuzzDesign(f *testing.F) {
	f.Fuzz(func(t *testing.T, data []byte, format uint8) {
		anyDesign(t, data, fuzzFormats[int(format)%len(fuzzFormats)])
	})
}

// odd are values that a slip of the pen, a script or malice may put in the
// place of any other.
var odd = strings.Split("|~|0|-1|1|2.5|1e30|1e-30|1e400|.nan|-.inf|NaN mm|0 mm|0.0004 mm|1 um|11 um|1e-45 m|99.9999999 m|100 m|1e30 mm|58|58,5 mm|0.2 wl|1 wl|1e9 wl|1.7GHz|1.7 GZ|3 %|99.99999999999 %|"+
	"0.0001 deg|90 deg|1 rad|0.1 ohm|49.999 ohm|1 s|1.0005 s|3 years|right|left|most|stock|true|no|copper|AWG 12 copper|infinite|closed-form|external|[]|{}|[~]|[58 mm]|[1, [2]]|{from: 1, to: 2}|{from: 3 mm, to: 3 mm, step: 1 mm}|"+
	"{kind: disc}|{turns: 0, spacing: 0 mm}|{impedance: 80 ohm, length: 0 mm}|{at_least: 0, at_most: 0}|[{figure: mass, want: least}]|*x|&x y|!t 3|'|\"|\x00|\xff|- x|? x|x: y|# x|\t", "|")

// spoil puts odd values in the place of some, and drops or repeats lines.
func spoil(t *rapid.T, text string) []byte {
	lines := strings.SplitAfter(text, "\n")
	for range rapid.IntRange(1, 3).Draw(t, "slips") {
		i := rapid.IntRange(0, len(lines)-1).Draw(t, "line")
		values := oddPlace.FindAllStringSubmatchIndex(lines[i], -1)
		switch kind := rapid.IntRange(0, 9).Draw(t, "kind"); {
		case kind == 0:
			lines[i] = ""
		case kind == 1:
			lines[i] += lines[i]
		case len(values) > 0:
			at := rapid.SampledFrom(values).Draw(t, "place")
			lines[i] = lines[i][:at[2]] + rapid.SampledFrom(odd).Draw(t, "value") + lines[i][at[3]:]
		}
	}
	return []byte(strings.Join(lines, ""))
}

// oddPlace is a value of a key, alone on its line or between braces.
var oddPlace = regexp.MustCompile(`: ([^,{}\n]+|\{.*\}|)`)

func TestSpoiltBriefs(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) { anyBrief(t, spoil(t, soundBrief), YAML) })
}

func TestSpoiltDesigns(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) { anyDesign(t, spoil(t, soundDesign), YAML) })
}
