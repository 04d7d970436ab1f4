package workshop

import (
	"context"
	"encoding/xml"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
	"pgregory.net/rapid"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
	"turnwise/models/helix"
)

// wound is any winding that a cylinder or cone can carry.
var wound = rapid.Custom(func(t *rapid.T) models.Design {
	d := antennas["cylinder"]
	d.Turns = rapid.Float64Range(0.6, 15).Draw(t, "turns")
	d.Handedness = models.Sense(1 - 2*rapid.IntRange(0, 1).Draw(t, "hand"))
	d.Diameter = models.Law{rapid.Float64Range(0.03, 0.2).Draw(t, "diameter")}
	d.Spacing = models.Law{rapid.Float64Range(0.015, 0.06).Draw(t, "spacing")}
	d.Conductor.Diameter = rapid.Float64Range(0.001, 0.006).Draw(t, "conductor")
	d.Feed.Height = rapid.Float64Range(0.004, 0.02).Draw(t, "height")
	if rapid.Bool().Draw(t, "cone") {
		d.Diameter = append(d.Diameter, d.Diameter[0]*rapid.Float64Range(0.5, 1.6).Draw(t, "taper"))
	} else if rapid.Bool().Draw(t, "lead") {
		d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.008, Shape: models.Ramp}
	}
	if rapid.Bool().Draw(t, "strip") {
		d.Feed.Strip = models.Strip{Turns: rapid.Float64Range(0.1, 0.6).Draw(t, "strip turns"), Width: 0.004}
	}
	return d
})

// TestTemplateWraps wraps every winding line of the template round its former
// and finds the centre line over it to 0.1 mm; and all of the centre line is
// there.
func TestTemplateWraps(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := wound.Draw(t, "design")
		c, err := helix.Wind(&d)
		if err != nil {
			t.Fatal(err)
		}
		s := &Settled{Design: d, Curve: c, Resolution: Coarse}
		f := newFormer(&d, c)
		if f.combs {
			t.Fatalf("no former for %v", d.Diameter)
		}
		flat := new(drawing.Drawing)
		f.wind(flat, s)
		length := 0.0
		for _, e := range flat.Entities {
			p, ok := e.(drawing.Polyline)
			if !ok {
				continue // the riser's foot line
			}
			for i, q := range p.Points[1:] {
				last := p.Points[i]
				length += r3.Norm(r3.Sub(f.roll(q), f.roll(last)))
				// Where the chord is farthest from what it stands for.
				middle := drawing.Point{X: (q.X + last.X) / 2, Y: (q.Y + last.Y) / 2}
				for _, on := range []drawing.Point{q, middle} {
					if away := nearestOn(c, f.roll(on)); away > 0.1 {
						t.Fatalf("%v lies %.3f mm from the centre line", on, away)
					}
				}
			}
		}
		if want := 1e3 * (c.WireLength() - c.Riser()); math.Abs(length-want) > 2e-4*want {
			t.Fatalf("the template holds %.2f mm of winding, of %.2f", length, want)
		}
	})
}

// nearestOn is the distance of a place, mm, from the winding at the place's
// azimuth, on the turn that comes nearest.
func nearestOn(c *helix.Curve, at r3.Vec) float64 {
	hand := 1.0
	if c.At(0.01).Pos.Y < 0 {
		hand = -1
	}
	first := math.Mod(hand*math.Atan2(at.Y, at.X)/(2*math.Pi)+1, 1)
	best := math.Inf(1)
	for t := first - 1; t <= c.Turns()+1; t++ {
		best = math.Min(best, r3.Norm(r3.Sub(r3.Scale(1e3, c.At(t).Pos), at)))
	}
	return best
}

// TestTemplateMirror: the mirror image's template is the mirror image.
func TestTemplateMirror(t *testing.T) {
	for _, name := range []string{"cylinder", "cone"} {
		d := antennas[name]
		a := sheetOf(t, d, Power{})
		d.Handedness = -d.Handedness
		b := sheetOf(t, d, Power{})
		for turns := 0.0; turns <= a.Curve.Turns(); turns += 0.03 {
			za, aa := a.former.touch(turns)
			zb, ab := b.former.touch(turns)
			// Both azimuths count from the seam: the mirror is the riser's line.
			if sum := math.Mod(aa+ab+2*seam+720+180, 360) - 180; za != zb || math.Abs(sum) > 1e-6 {
				t.Fatalf("%s: at turn %g the azimuths are %g and %g from the seam", name, turns, aa, ab)
			}
		}
	}
}

// TestProfile tells cylinders, cones and other profiles apart.
func TestProfile(t *testing.T) {
	for name, want := range map[string]struct{ combs, cone bool }{
		"cylinder": {false, false}, "cone": {false, true}, "funnel": {false, true}, "free": {true, true}, "large": {false, false}, "short": {false, false},
	} {
		f := sheetOf(t, antennas[name], Power{}).former
		if f.combs != want.combs || f.cone() != want.cone {
			t.Errorf("%s: combs %t, cone %t", name, f.combs, f.cone())
		}
	}
}

// place is a mark read from a file: its layer, where, and for holes how wide.
type place struct {
	layer  string
	at     drawing.Point
	radius float64
}

// wanted are the marks that a template must have, on the plane the SVG and
// DXF share, from nothing but the curve.
func wanted(s *sheet) []place {
	var out []place
	for _, m := range stations(s.Curve, s.Resolution) {
		z, a := s.former.touch(m.T)
		at := s.former.flat(z, a)
		if !s.former.combs && !s.former.cone() {
			// A cylinder by hand: arc along, height up.
			turn := math.Mod(float64(s.Design.Handedness)*m.T+0.125+1000, 1)
			at = drawing.Point{X: math.Pi * (1e3*s.Curve.Diameter(m.T) - 1e3*s.Design.Conductor.Diameter) * turn, Y: 1e3 * s.Curve.Height(m.T)}
		}
		if s.former.combs {
			widest := 0.0
			for _, n := range stations(s.Curve, s.Resolution) {
				widest = math.Max(widest, 1e3*n.Radius)
			}
			at = drawing.Point{X: math.Round(4*(m.T-math.Floor(m.T)))*(widest+s.former.under+25) + 1e3*m.Radius, Y: 1e3 * s.Curve.Height(m.T)}
		}
		out = append(out, place{layer: "STATIONS", at: at})
		if s.former.combs || m.T == 0 || m.T == s.Curve.Turns() {
			out = append(out, place{"HOLES", at, 1e3*(s.Design.Conductor.Diameter/2+s.Design.Insulation.Thickness) + 0.15})
		}
	}
	return out
}

// TestMarks reads DXF and SVG back: both have every hole and station where it
// belongs, to 0.05 mm, and no other.
func TestMarks(t *testing.T) {
	for _, name := range []string{"cylinder", "cone", "funnel", "free", "large", "short"} {
		s := sheetOf(t, antennas[name], Power{})
		d := template(s.Settled)
		want := wanted(s)
		for format, got := range map[string][]place{"DXF": dxfMarks(t, d.DXF("")), "SVG": svgMarks(t, d.SVG(5), d.Bounds().Grown(5))} {
			if len(got) != len(want) {
				t.Errorf("%s: %d marks in the %s, want %d", name, len(got), format, len(want))
				continue
			}
			for _, w := range want {
				if !holds(got, w) {
					t.Errorf("%s: the %s has no %s at %.3f", name, format, w.layer, w.at)
				}
			}
		}
	}
}

func holds(marks []place, w place) bool {
	for _, m := range marks {
		if m.layer == w.layer && m.at.Distance(w.at) <= 0.05 && math.Abs(m.radius-w.radius) <= 0.05 {
			return true
		}
	}
	return false
}

// dxfMarks finds circles on the layer of holes and crosses on that of
// stations, a cross by its first line.
func dxfMarks(t *testing.T, dxf []byte) []place {
	t.Helper()
	var out []place
	lines := strings.Split(string(dxf), "\r\n")
	number := func(fields map[string]string, code string) float64 {
		x, err := strconv.ParseFloat(fields[code], 64)
		if err != nil {
			t.Fatalf("group %s: %v", code, err)
		}
		return x
	}
	for i := 0; i+1 < len(lines); i += 2 {
		kind := lines[i+1]
		if strings.TrimSpace(lines[i]) != "0" || kind != "LINE" && kind != "CIRCLE" {
			continue
		}
		f := map[string]string{}
		for j := i + 2; strings.TrimSpace(lines[j]) != "0"; j += 2 {
			f[strings.TrimSpace(lines[j])] = lines[j+1]
		}
		a := drawing.Point{X: number(f, "10"), Y: number(f, "20")}
		switch {
		case kind == "CIRCLE" && f["8"] == "HOLES":
			out = append(out, place{"HOLES", a, number(f, "40")})
		case kind == "LINE" && f["8"] == "STATIONS" && f["20"] == f["21"]:
			out = append(out, place{layer: "STATIONS", at: drawing.Point{X: (a.X + number(f, "11")) / 2, Y: a.Y}})
		}
	}
	return out
}

// svgMarks finds the same in the SVG, whose origin is the upper left corner
// of its window.
func svgMarks(t *testing.T, data []byte, w drawing.Window) []place {
	t.Helper()
	var svg struct {
		Groups []struct {
			ID    string `xml:"id,attr"`
			Lines []struct {
				X1 float64 `xml:"x1,attr"`
				Y1 float64 `xml:"y1,attr"`
				X2 float64 `xml:"x2,attr"`
				Y2 float64 `xml:"y2,attr"`
			} `xml:"line"`
			Circles []struct {
				X float64 `xml:"cx,attr"`
				Y float64 `xml:"cy,attr"`
				R float64 `xml:"r,attr"`
			} `xml:"circle"`
		} `xml:"g"`
	}
	if err := xml.Unmarshal(data, &svg); err != nil {
		t.Fatal(err)
	}
	at := func(x, y float64) drawing.Point { return drawing.Point{X: x + w.Min.X, Y: w.Max.Y - y} }
	var out []place
	for _, g := range svg.Groups {
		for _, c := range g.Circles {
			if g.ID == "HOLES" {
				out = append(out, place{"HOLES", at(c.X, c.Y), c.R})
			}
		}
		for _, l := range g.Lines {
			if g.ID == "STATIONS" && l.Y1 == l.Y2 {
				out = append(out, place{layer: "STATIONS", at: at((l.X1+l.X2)/2, l.Y1)})
			}
		}
	}
	return out
}

// TestTiles: the tiles cover the template, and every page is A4 with a bar of
// 100 mm each way, as the PDF's own operators draw it.
func TestTiles(t *testing.T) {
	for name, d := range antennas {
		s := sheetOf(t, d, Power{})
		sheet := template(s.Settled)
		tiles := newTiling(sheet.Bounds())
		whole := tiles.cell(0, 0)
		last := tiles.cell(tiles.columns-1, tiles.rows-1)
		if b := sheet.Bounds(); b.Min.X < whole.Min.X-1e-9 || b.Min.Y < whole.Min.Y-1e-9 || b.Max.X > last.Max.X+1e-9 || b.Max.Y > last.Max.Y+1e-9 {
			t.Errorf("%s: tiles from %v to %v, a template from %v to %v", name, whole.Min, last.Max, b.Min, b.Max)
		}
		pages := templatePages(sheet, "test")
		pdf, err := drawing.PDF("test", pages)
		if err != nil {
			t.Fatal(err)
		}
		content := pageStreams(t, pdf)
		boxes := regexp.MustCompile(`/MediaBox \[0 0 ([\d.]+) ([\d.]+)\]`).FindAllStringSubmatch(string(pdf), -1)
		if len(content) != len(pages) || len(boxes) == 0 {
			t.Fatalf("%s: %d pages, %d of them drawn, %d sizes", name, len(pages), len(content), len(boxes))
		}
		for _, b := range boxes {
			if x, y := number(b[1])*25.4/72, number(b[2])*25.4/72; math.Abs(math.Min(x, y)-210) > 0.1 || math.Abs(math.Max(x, y)-297) > 0.1 {
				t.Errorf("%s: a page of %s by %s points is no A4", name, b[1], b[2])
			}
		}
		for i, text := range content {
			across, up := bars(text)
			if across == 0 || up == 0 {
				t.Errorf("%s, page %d: %d bars of 100 mm across, %d up", name, i+1, across, up)
			}
		}
	}
}

func number(s string) float64 {
	x, _ := strconv.ParseFloat(s, 64)
	return x
}

var stroke = regexp.MustCompile(`(?m)^(-?[\d.]+) (-?[\d.]+) m\s+(-?[\d.]+) (-?[\d.]+) l\s+S`)

// bars counts straight strokes of 100 ± 0.2 mm each way. Only a text that is
// turned may change the scale of what is drawn.
func bars(page string) (across, up int) {
	for _, m := range stroke.FindAllStringSubmatch(unturned(page), -1) {
		dx, dy := (number(m[3])-number(m[1]))*25.4/72, (number(m[4])-number(m[2]))*25.4/72
		switch {
		case math.Abs(math.Abs(dx)-100) <= 0.2 && math.Abs(dy) < 0.01:
			across++
		case math.Abs(math.Abs(dy)-100) <= 0.2 && math.Abs(dx) < 0.01:
			up++
		}
	}
	return across, up
}

// unturned leaves out what stands under a change of coordinates.
func unturned(page string) string {
	return regexp.MustCompile(`(?s)q\s[-\d. ]+cm\s.*?\nQ`).ReplaceAllString(page, "")
}

// TestCombs: a comb of every quarter, its notches on the winding.
func TestCombs(t *testing.T) {
	s := sheetOf(t, antennas["free"], Power{})
	if all := strings.Join(templateWords(s.Settled, s.former), " "); !strings.Contains(all, "four combs") || strings.Contains(all, "Wrap it") {
		t.Errorf("%s", all)
	}
	files, err := Pack(context.Background(), fullWave(t, "draft"), s.Settled, nil, Power{})
	if err != nil {
		t.Fatal(err)
	}
	if bill := string(fileOf(t, files, "bom.csv")); !strings.Contains(bill, "four combs") {
		t.Errorf("%s", bill)
	}
}
