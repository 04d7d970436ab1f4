package configs

import (
	"errors"
	"fmt"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// soundBrief has every block of a brief, one key a line where a test wants to
// break just one.
const soundBrief = `title: lighthouse link
band:
  from: 1.66 GHz
  to: 1.70 GHz
  samples: 5
sense: right
feeds_reflector: false
feed: {impedance: 50 ohm}
ground: {kind: cup, diameter: 150 mm}
model: full-wave
fidelity: standard
stock:
  - name: thin
    diameter: 2 mm
    material: copper
    coil: 3 m
  - {name: tube, diameter: 4 mm, wall: 0.7 mm, material: brass, least_bend_radius: 12 mm}
  - {catalogue: awg, from: 8, to: 12, material: copper, coil: 10 m}
vary:
  turns: {from: 3, to: 12, step: 0.25}
  diameter:
    from: 0.19 wl
    to: 0.42 wl
    knots: 3
  spacing: {from: 20 mm, to: 60 mm, knots: 2}
  conductor: stock
  feed_height: {from: 4 mm, to: 12 mm}
  ground_rim: {from: 20 mm, to: 60 mm, step: 10 mm}
design:
  handedness: right
  insulation: {thickness: 0.3 mm, permittivity: 2.3}
  feed:
    pin: 1.27 mm
    lead: {turns: 0.5, spacing: 8 mm}
    transformer: {impedance: 85 ohm, length: 44 mm}
aims:
  - {figure: gain, want: most}
  - {figure: length, want: least}
limits:
  gain: {at_least: 8 dBic}
  vswr: {at_most: 2}
  widest: {at_most: 160 mm}
cone: 15 deg
trust_indicative: false
margins: {diameter: 0.5 mm, spacing: 0.3 mm, feed_height: 0.2 mm, at: 95 %}
search: {sample: 10 %, genetic: 70 %, simplex: 20 %}
budget:
  evaluations: 4000
  time: 10 min
  stagnation: {evaluations: 1000, share: 0.1 %}
front: {at_most: 200}
seed: 7
`

// soundDesign has every block of a design file.
const soundDesign = `title: tapered
turns: 8.25
diameter: [58 mm, 58 mm, 46 mm]
spacing: [34 mm]
handedness: right
conductor: {stock: "2 mm copper wire", diameter: 2 mm, material: copper}
insulation: {thickness: 0.3 mm, permittivity: 2.3}
feed:
  height: 5 mm
  pin: 1.27 mm
  impedance: 50 ohm
  lead: {turns: 0.5, spacing: 8 mm, shape: flat}
  strip: {turns: 0.25, width: 5 mm}
  transformer: {impedance: 85 ohm, length: 44 mm, velocity: 0.9}
ground: {kind: cup, diameter: 150 mm, rim: 60 mm}
band: {from: 1.66 GHz, to: 1.70 GHz, samples: 5}
sense: right
feeds_reflector: true
`

// edit is old and new texts in turn; every old one must stand once.
func edit(t testing.TB, text string, pairs ...string) string {
	t.Helper()
	for i := 0; i < len(pairs); i += 2 {
		if n := strings.Count(text, pairs[i]); n != 1 {
			t.Fatalf("%q stands %d times in the text to edit", pairs[i], n)
		}
		text = strings.Replace(text, pairs[i], pairs[i+1], 1)
	}
	return text
}

// long is a text many times over.
func long(text string, times int) string { return strings.Repeat(text, times) }

// manyConductors is so many rows of stock.
func manyConductors(n int) string {
	var b strings.Builder
	for i := range n {
		fmt.Fprintf(&b, "  - {name: wire %d, diameter: 2 mm, material: copper}\n", i)
	}
	return b.String()
}

// expected is one fault: its line and key, and parts of what it says.
type expected struct {
	line         int
	key          string
	what, remedy string
}

// checkFaults holds an error against all the faults that are expected of a
// file, in order.
func checkFaults(t testing.TB, err error, file string, want ...expected) {
	t.Helper()
	var e *Error
	if !errors.As(err, &e) {
		t.Fatalf("got %v, want an *Error", err)
	}
	if len(e.Faults) != len(want) {
		t.Errorf("%d faults, want %d", len(e.Faults), len(want))
	}
	for i := range min(len(e.Faults), len(want)) {
		f, w := &e.Faults[i], want[i]
		if f.File != file || f.Line != w.line || f.Key != w.key || !strings.Contains(f.What, w.what) || !strings.Contains(f.Remedy, w.remedy) {
			t.Errorf("fault %d: want %s:%d %s: …%s…; …%s…", i, file, w.line, w.key, w.what, w.remedy)
		}
		checkMessage(t, f)
	}
	if t.Failed() {
		t.Logf("got:\n%v", err)
	}
}

// checkMessage sees to it that what a person reads names file, line, key and
// remedy, on one line.
func checkMessage(t failer, f *Fault) {
	t.Helper()
	message := f.Error()
	parts := []string{f.File, f.Key, f.What, f.Remedy}
	if f.Line > 0 {
		parts = append(parts, f.File+":"+strconv.Itoa(f.Line)+": ")
	}
	for _, part := range parts {
		if !strings.Contains(message, plain(part)) {
			t.Errorf("%q does not say %q", message, part)
		}
	}
	if f.What == "" || f.Remedy == "" {
		t.Errorf("%q lacks what is wrong or what would be right", message)
	}
	if strings.ContainsAny(message, "\n\x00\x1b\u009b\u2028\u202e") {
		t.Errorf("%q is more than plain text on a line", message)
	}
}

// readBrief reads a brief that must be sound.
func readBrief(t testing.TB, text string, format Format) Brief {
	t.Helper()
	b, err := ParseBrief("brief."+string(format), []byte(text), format)
	if err != nil {
		t.Fatalf("%v\n%s", err, text)
	}
	return b
}

// equal compares two values whole.
func equal(t testing.TB, what string, got, want any) {
	t.Helper()
	if d := cmp.Diff(want, got); d != "" {
		t.Fatalf("%s: (-want +got)\n%s", what, d)
	}
}
