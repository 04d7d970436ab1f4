package workshop

import (
	"context"
	"fmt"
	"os"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/models/moment"
	"turnwise/objectives"
)

// fullWave is the model of the tests, a draft unless more is asked for.
func fullWave(t testing.TB, f moment.Fidelity) objectives.Rung {
	t.Helper()
	solver, err := moment.New(f)
	if err != nil {
		t.Fatal(err)
	}
	return objectives.Rung{Simulator: solver, Model: configs.FullWave, Fidelity: string(f)}
}

func copper(diameter float64) models.Conductor {
	return models.Conductor{Diameter: diameter, Material: models.Material{Name: "copper", Conductivity: 58e6, Density: 8890, Permeability: 1}}
}

// The antennas of the tests: a cylinder; a left-handed cone for a reflector
// with strip, pin, coat, line section and cup; a free profile with a lead on
// a plate; a large one; and one that ends within its first turn's neighbour.
var antennas = map[string]models.Design{
	"cylinder": {
		Title: "bench piece", Turns: 6, Diameter: models.Law{0.056}, Spacing: models.Law{0.040}, Handedness: models.Right, Conductor: copper(0.002),
		Feed: models.Feed{Height: 0.005, Impedance: 50}, Band: models.Band{From: 1.66e9, To: 1.70e9, Samples: 3},
	},
	"cone": {
		Title: "narrow tube, tapered, with everything on it", Turns: 9.3737, Diameter: models.Law{0.041237, 0.052111}, Spacing: models.Law{0.02533}, Handedness: models.Left,
		Conductor: copper(0.0016), Insulation: models.Insulation{Thickness: 0.0002, Permittivity: 2.3},
		Feed: models.Feed{Height: 0.00423, Pin: 0.00127, Impedance: 50, Strip: models.Strip{Turns: 0.253, Width: 0.00502},
			Transformer: models.Transformer{Impedance: 85.373, Length: 0.03033, Velocity: 0.7}},
		Ground: models.Ground{Kind: models.Cup, Diameter: 0.12, Rim: 0.04}, Band: models.Band{From: 2.03e9, To: 2.10e9, Samples: 5}, FeedsReflector: true,
	},
	"funnel": {
		Title: "narrows away from the plate", Turns: 5.5, Diameter: models.Law{0.066, 0.048}, Spacing: models.Law{0.03}, Handedness: models.Right, Conductor: copper(0.003),
		Feed: models.Feed{Height: 0.006, Impedance: 50}, Band: models.Band{From: 1.66e9, To: 1.66e9, Samples: 1},
	},
	"free": {
		Title: "free profile", Turns: 8.25, Diameter: models.Law{0.058, 0.058, 0.046}, Spacing: models.Law{0.034}, Handedness: models.Right, Conductor: copper(0.002),
		Feed:   models.Feed{Height: 0.005, Impedance: 50, Lead: models.Lead{Turns: 0.5, Spacing: 0.008, Shape: models.Flat}},
		Ground: models.Ground{Kind: models.Disc, Diameter: 0.2}, Band: models.Band{From: 1.66e9, To: 1.70e9, Samples: 5},
	},
	"large": {
		Title: strings.Repeat("a title that runs on and on ", 5), Turns: 25, Diameter: models.Law{0.22}, Spacing: models.Law{0.15}, Handedness: models.Left,
		Conductor: copper(0.010), Feed: models.Feed{Height: 0.025, Impedance: 50}, Band: models.Band{From: 434e6, To: 434e6, Samples: 1},
	},
	"short": {
		Turns: 0.9, Diameter: models.Law{0.05}, Spacing: models.Law{0.03}, Handedness: models.Left, Conductor: copper(0.002),
		Feed: models.Feed{Height: 0.006, Impedance: 75}, Band: models.Band{From: 1.95e9, To: 1.97e9, Samples: 11},
	},
}

// settle makes a design ready to be drawn.
func settle(t testing.TB, d models.Design) *Settled {
	t.Helper()
	s, err := Settle(context.Background(), fullWave(t, moment.Draft), d, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// drawn keeps what was drawn before.
var drawn = map[string]*sheet{}

// sheetOf is a design's sheet.
func sheetOf(t testing.TB, d models.Design, p Power) *sheet {
	t.Helper()
	key := d.Hash()
	if s, ok := drawn[key]; ok {
		again := *s
		again.power = p
		return &again
	}
	drawn[key] = newSheet(t, d)
	return sheetOf(t, d, p)
}

func newSheet(t testing.TB, d models.Design) *sheet {
	t.Helper()
	s := settle(t, d)
	chart, err := newTrimChart(context.Background(), fullWave(t, moment.Draft), &s.Design, s.Curve)
	if err != nil {
		t.Fatal(err)
	}
	return &sheet{Settled: s, former: newFormer(&s.Design, s.Curve), trim: chart, stock: stockOf(&s.Design, nil)}
}

// texts are all lines of writing of a page.
func texts(d *drawing.Drawing) []drawing.Text {
	var out []drawing.Text
	for _, e := range d.Entities {
		if t, ok := e.(drawing.Text); ok {
			out = append(out, t)
		}
	}
	return out
}

// words is all the writing of a sheet, one space between lines.
func words(pages []*drawing.Page) string {
	var b strings.Builder
	for _, p := range pages {
		for _, t := range texts(&p.Drawing) {
			b.WriteString(t.S + " ")
		}
	}
	return b.String()
}

// TestLayout: on no sheet does writing lie on writing or outside the frame.
func TestLayout(t *testing.T) {
	for name, d := range antennas {
		for i, p := range sheetOf(t, d, Power{Watts: 10, Limit: 5}).pages() {
			for _, fault := range layoutFaults(p) {
				t.Errorf("%s, sheet %d: %s", name, i+1, fault)
			}
		}
	}
}

// TestLayoutOfAny draws windings of all kinds with everything that can be
// said of one, on the answers of another.
func TestLayoutOfAny(t *testing.T) {
	canned := sheetOf(t, antennas["cone"], Power{})
	rapid.Check(t, func(t *rapid.T) {
		d := wound.Draw(t, "design")
		d.Title, d.Band, d.FeedsReflector, d.Sense = "any", antennas["cone"].Band, true, -d.Handedness
		d.Conductor.Wall, d.Insulation = 0.0003, models.Insulation{Thickness: 0.0002, Permittivity: 2.3}
		d.Feed.Transformer = antennas["cone"].Feed.Transformer
		d.Ground = models.Ground{
			Kind:     rapid.SampledFrom([]models.GroundKind{models.Infinite, models.Disc, models.Cup}).Draw(t, "ground"),
			Diameter: rapid.Float64Range(0.45, 0.9).Draw(t, "ground Ø"), Rim: rapid.Float64Range(0.01, 0.4).Draw(t, "rim"),
		}
		c, err := helix.Wind(&d)
		if err != nil {
			t.Fatal(err)
		}
		settled := *canned.Settled
		settled.Design, settled.Curve, settled.Resolution = d, c, rapid.SampledFrom([]Resolution{Coarse, Fine}).Draw(t, "resolution")
		settled.Response.Warnings = []string{strings.Repeat("a long warning of how the model ends ", 6), strings.Repeat("and another one ", 12), "and a third"}
		s := &sheet{Settled: &settled, former: newFormer(&d, c), trim: canned.trim, power: Power{Watts: 1234.5, Limit: 0.123},
			margins: objectives.Margins{Diameter: 0.0005, Spacing: 0.0003, FeedHeight: 0.0002}, stock: objectives.Stock{Name: "a stock with a long name", Coil: 0.01}}
		for i, p := range s.pages() {
			for _, fault := range layoutFaults(p) {
				t.Errorf("sheet %d: %s", i+1, fault)
			}
		}
	})
}

// layoutFaults says what of a page lies where it must not.
func layoutFaults(p *drawing.Page) []string {
	frame := drawing.Window{Min: drawing.Point{X: frameLeft, Y: frameBottom}, Max: drawing.Point{X: drawing.A4Width - frameRight, Y: drawing.A4Height - frameTop}}
	var faults []string
	all := texts(&p.Drawing)
	boxes := make([]drawing.Window, len(all))
	for j, a := range all {
		boxes[j] = boxOf(a)
		if box := boxes[j]; !frame.Holds(box.Min) || !frame.Holds(box.Max) {
			faults = append(faults, fmt.Sprintf("%q leaves the frame: %.1f", a.S, box))
		}
		for k, b := range all[:j] {
			if boxes[j].Overlaps(boxes[k]) {
				faults = append(faults, fmt.Sprintf("%q lies on %q", a.S, b.S))
			}
		}
	}
	if b := p.Bounds().Grown(-0.01); !frame.Holds(b.Min) || !frame.Holds(b.Max) {
		faults = append(faults, fmt.Sprintf("drawn from %.1f to %.1f, outside the frame", b.Min, b.Max))
	}
	return faults
}

// boxOf is a text's body, without the leading that lines may share.
func boxOf(t drawing.Text) drawing.Window {
	one := new(drawing.Drawing)
	one.Add(t)
	return one.Bounds().Grown(-0.05 * t.Size)
}

// TestCautions holds the wording against the README's.
func TestCautions(t *testing.T) {
	readme, err := os.ReadFile("../../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	plain := strings.Join(strings.Fields(string(readme)), " ")
	for _, c := range Cautions {
		if !strings.Contains(plain, c) {
			t.Errorf("the README does not say %q", c)
		}
	}
	all := words(sheetOf(t, antennas["cylinder"], Power{}).pages())
	for _, c := range Cautions {
		if !strings.Contains(all, c) {
			t.Errorf("the sheet does not say %q", c)
		}
	}
}

// TestMirror: the mirror image of a design has every word and arrow of
// handedness turned round, and nothing else of its numbers changed.
func TestMirror(t *testing.T) {
	for _, name := range []string{"cylinder", "cone", "free", "short"} {
		d := antennas[name]
		other := d
		other.Handedness = -d.Handedness
		a, b := sheetOf(t, d, Power{}), sheetOf(t, other, Power{})
		right, left := a, b
		if d.Handedness == models.Left {
			right, left = b, a
		}
		if got, want := arrows(right), flipped(arrows(left)); !same(got, want) {
			t.Errorf("%s: arrows\n%.3f of the right-handed, and of the left-handed in the mirror\n%.3f", name, got, want)
		}
		checkStrands(t, name, right, -1)
		checkStrands(t, name, left, 1)
		r, l := words(right.pages())+legendOf(right), words(left.pages())+legendOf(left)
		for _, pair := range [][2]string{
			{"right-handed: LIKE an ordinary screw thread", "left-handed: OPPOSITE to an ordinary screw thread"},
			{"the wire runs anticlockwise", "the wire runs clockwise"},
			{"(anticlockwise seen from the open end)", "(clockwise seen from the open end)"},
			{"radiates right-hand circular", "radiates left-hand circular"},
		} {
			if n := strings.Count(r, pair[0]); n == 0 || strings.Count(l, pair[1]) != n || strings.Contains(l, pair[0]) || strings.Contains(r, pair[1]) {
				t.Errorf("%s: %q %d times on the right-handed sheet, %q %d times on the left-handed", name, pair[0], n, pair[1], strings.Count(l, pair[1]))
			}
		}
		turned := strings.NewReplacer("right", "left", "LIKE", "OPPOSITE to", "left", "right", "OPPOSITE to", "LIKE", "anticlockwise", "clockwise", "clockwise", "anticlockwise",
			left.Design.ID(), right.Design.ID(), left.Original, right.Original)
		if d.FeedsReflector && (!strings.Contains(r, "feeds a reflector, which reverses the sense") || !strings.Contains(l, "feeds a reflector, which reverses the sense")) {
			t.Errorf("%s: no word of the reflector", name)
		}
		if got := turned.Replace(strings.Join(HandWords(&left.Design), " ")); got != strings.Join(HandWords(&right.Design), " ") {
			t.Errorf("%s: %q", name, got)
		}
	}
}

func legendOf(s *sheet) string {
	return strings.Join(templateWords(s.Settled, s.former), " ")
}

// arrows are the winding arrows of the end view and of the unrolled first
// turn, as the offset from tail to tip.
func arrows(s *sheet) []drawing.Point {
	end, _ := s.endView(27)
	first, _ := s.firstTurn(150, 80)
	var out []drawing.Point
	for i, d := range []*drawing.Drawing{end, first} {
		for _, e := range d.Entities {
			p, ok := e.(drawing.Polyline)
			if !ok || !p.Filled || p.Layer != drawing.Winding {
				continue
			}
			tail := drawing.Point{X: (p.Points[1].X + p.Points[2].X) / 2, Y: (p.Points[1].Y + p.Points[2].Y) / 2}
			way := drawing.Point{X: p.Points[0].X - tail.X, Y: p.Points[0].Y - tail.Y}
			if i == 1 { // unrolled: the mirror is upright
				way.X, way.Y = way.Y, way.X
			}
			out = append(out, way)
		}
	}
	return out
}

// checkStrands: on the side view, whose axis runs to the right, the near
// strands of an ordinary screw run down and those of its mirror image up.
func checkStrands(t *testing.T, name string, s *sheet, way float64) {
	side, _ := s.sideView(150, 75)
	seen := 0
	for _, e := range side.Entities {
		if p, ok := e.(drawing.Polyline); ok && p.Layer == drawing.Winding && p.Filled {
			seen++
			if rise := p.Points[0].Y - p.Points[1].Y; rise*way <= 0 || p.Points[0].X <= (p.Points[1].X+p.Points[2].X)/2 {
				t.Errorf("%s, %s-handed: an arrow on a near strand rises by %.2f mm", name, s.Design.Handedness, rise)
			}
		}
	}
	if seen == 0 {
		t.Errorf("%s: no arrow on the side view", name)
	}
}

// flipped is what a mirror through the axis and the riser shows.
func flipped(ps []drawing.Point) []drawing.Point {
	out := make([]drawing.Point, len(ps))
	for i, p := range ps {
		out[i] = drawing.Point{X: p.X, Y: -p.Y}
	}
	return out
}

func same(a, b []drawing.Point) bool {
	if len(a) != len(b) || len(a) < 2 {
		return false
	}
	for i := range a {
		if a[i].Distance(b[i]) > 1e-9 {
			return false
		}
	}
	return true
}
