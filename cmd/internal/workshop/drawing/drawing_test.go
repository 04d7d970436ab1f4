package drawing

import (
	"bytes"
	"compress/zlib"
	"encoding/xml"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"golang.org/x/image/font/sfnt"
	"pgregory.net/rapid"
)

// sample has one of everything, on places that are easy to find again.
func sample() *Drawing {
	d := new(Drawing)
	d.Line(Check, Point{10, 20}, Point{110, 20})
	d.Line(Check, Point{10, 20}, Point{10, 120})
	d.Circle(Hole, Point{55.125, 42.25}, 1.5)
	d.Add(Arc{Layer: Outline, Centre: Point{60, 60}, Radius: 10, From: 30, Sweep: 240})
	d.Add(Polyline{Layer: Winding, Points: []Point{{0, 0}, {12.345, 6.789}, {20, 0}}})
	d.Add(Polyline{Layer: Outline, Closed: true, Points: []Point{{0, 0}, {150, 0}, {150, 150}, {0, 150}}})
	d.Add(Text{Layer: Lettering, At: Point{30, 90}, Size: 3, Angle: 90, Align: Right, S: "Ø 58.0 ± 0.1, λ/4 at 90° & <5 Ω>"})
	return d
}

// pairs reads a DXF as its group codes and values.
func pairs(t *testing.T, dxf []byte) [][2]string {
	t.Helper()
	lines := strings.Split(strings.TrimSuffix(string(dxf), "\r\n"), "\r\n")
	if len(lines)%2 != 0 {
		t.Fatalf("%d lines are no pairs", len(lines))
	}
	var out [][2]string
	for i := 0; i < len(lines); i += 2 {
		code := strings.TrimSpace(lines[i])
		if _, err := strconv.Atoi(code); err != nil {
			t.Fatalf("line %d: %q is no group code", i+1, lines[i])
		}
		out = append(out, [2]string{code, lines[i+1]})
	}
	return out
}

// entities are the DXF's, each as its pairs.
func entities(t *testing.T, dxf []byte) []map[string][]string {
	t.Helper()
	var out []map[string][]string
	inside := false
	for _, p := range pairs(t, dxf) {
		switch {
		case p == [2]string{"2", "ENTITIES"}:
			inside = true
		case !inside:
		case p[0] == "0" && p[1] == "ENDSEC":
			inside = false
		case p[0] == "0":
			out = append(out, map[string][]string{"0": {p[1]}})
		default:
			e := out[len(out)-1]
			e[p[0]] = append(e[p[0]], p[1])
		}
	}
	return out
}

func TestDXF(t *testing.T) {
	es := entities(t, sample().DXF("a sample"))
	var kinds []string
	for _, e := range es {
		kinds = append(kinds, e["0"][0])
	}
	want := "LINE LINE CIRCLE ARC POLYLINE VERTEX VERTEX VERTEX SEQEND POLYLINE VERTEX VERTEX VERTEX VERTEX SEQEND TEXT"
	if got := strings.Join(kinds, " "); got != want {
		t.Fatalf("%s\nwant %s", got, want)
	}
	for i, want := range map[int]map[string]string{
		0:  {"8": "CHECK", "10": "10", "20": "20", "11": "110", "21": "20"},
		2:  {"8": "HOLES", "10": "55.125", "20": "42.25", "40": "1.5"},
		3:  {"8": "OUTLINE", "50": "30", "51": "270"},
		4:  {"70": "0"},
		6:  {"8": "WINDING", "10": "12.345", "20": "6.789"},
		9:  {"70": "1"},
		15: {"1": `%%c 58.0 %%p 0.1, \U+03BB/4 at 90%%d & <5 \U+03A9>`, "50": "90", "72": "2", "40": "2.1"},
	} {
		for code, value := range want {
			if got := es[i][code]; len(got) != 1 || got[0] != value {
				t.Errorf("entity %d, group %s: %v, want %s", i, code, got, value)
			}
		}
	}
	// Release 12 knows no layer that its table does not name.
	text := string(sample().DXF(""))
	for _, l := range []Layer{Check, Hole, Outline, Winding, Lettering} {
		if !strings.Contains(text, "LAYER\r\n  2\r\n"+string(l)+"\r\n") {
			t.Errorf("no layer %s in the table", l)
		}
	}
	if !strings.Contains(text, "AC1009") || !strings.HasSuffix(text, "  0\r\nEOF\r\n") {
		t.Error("head or end is missing")
	}
}

func TestLine3D(t *testing.T) {
	es := entities(t, Line3D("line", [][3]float64{{1, 2, 3}, {4.5, -5, 6.25}}))
	if len(es) != 4 || es[0]["70"][0] != "8" || es[2]["30"][0] != "6.25" || es[2]["20"][0] != "-5" || es[2]["70"][0] != "32" {
		t.Errorf("%v", es)
	}
}

// TestSVG reads the SVG back: sizes in millimetres, y from the top.
func TestSVG(t *testing.T) {
	d := sample()
	b := d.Bounds().Grown(5)
	var svg struct {
		Width   string `xml:"width,attr"`
		Height  string `xml:"height,attr"`
		ViewBox string `xml:"viewBox,attr"`
		Groups  []struct {
			ID      string `xml:"id,attr"`
			Circles []struct {
				X float64 `xml:"cx,attr"`
				Y float64 `xml:"cy,attr"`
				R float64 `xml:"r,attr"`
			} `xml:"circle"`
			Texts []string `xml:"text"`
		} `xml:"g"`
	}
	if err := xml.Unmarshal(d.SVG(5), &svg); err != nil {
		t.Fatal(err)
	}
	if want := micrometres(b.Width()); svg.Width != want+"mm" || !strings.HasPrefix(svg.ViewBox, "0 0 "+want+" ") {
		t.Errorf("width %s, view box %s: not one unit to the millimetre", svg.Width, svg.ViewBox)
	}
	found := 0
	for _, g := range svg.Groups {
		for _, c := range g.Circles {
			found++
			if g.ID != string(Hole) || math.Abs(c.X+b.Min.X-55.125) > 0.001 || math.Abs(b.Max.Y-c.Y-42.25) > 0.001 || c.R != 1.5 {
				t.Errorf("circle on %s: %+v", g.ID, c)
			}
		}
		if g.ID == string(Lettering) && (len(g.Texts) != 1 || g.Texts[0] != "Ø 58.0 ± 0.1, λ/4 at 90° & <5 Ω>") {
			t.Errorf("texts %q", g.Texts)
		}
	}
	if found != 1 {
		t.Errorf("%d circles", found)
	}
}

// stroked are the straight strokes of a PDF's pages, in millimetres.
func stroked(t *testing.T, pdf []byte) []Line {
	t.Helper()
	var out []Line
	stroke := regexp.MustCompile(`(?m)^(-?[\d.]+) (-?[\d.]+) m\s+(-?[\d.]+) (-?[\d.]+) l\s+S`)
	for _, page := range streams(t, pdf) {
		for _, m := range stroke.FindAllStringSubmatch(page, -1) {
			var v [4]float64
			for i := range v {
				v[i], _ = strconv.ParseFloat(m[i+1], 64)
				v[i] /= pointsPerMM
			}
			out = append(out, Line{A: Point{v[0], v[1]}, B: Point{v[2], v[3]}})
		}
	}
	return out
}

// streams inflates whatever of a PDF is deflated.
func streams(t *testing.T, pdf []byte) []string {
	t.Helper()
	var out []string
	for rest := pdf; ; {
		_, after, ok := bytes.Cut(rest, []byte("stream\n"))
		if !ok {
			return out
		}
		if z, err := zlib.NewReader(bytes.NewReader(after)); err == nil {
			text, err := io.ReadAll(z)
			if err != nil {
				t.Fatal(err)
			}
			out = append(out, string(text))
		}
		_, rest, _ = bytes.Cut(after, []byte("endstream"))
	}
}

func TestPDF(t *testing.T) {
	pages := []*Page{{Drawing: *sample()}, {Drawing: *sample(), Landscape: true}}
	pdf, err := PDF("sample", pages)
	if err != nil {
		t.Fatal(err)
	}
	across, up := 0, 0
	for _, l := range stroked(t, pdf) {
		const fine = 0.01 // mm: the two decimals of a point
		if math.Abs(l.A.Distance(l.B)-100) > fine {
			continue
		}
		if math.Abs(l.A.X-10) > fine || math.Abs(l.A.Y-20) > fine {
			t.Errorf("a bar starts at %v", l.A)
		}
		if l.A.Y == l.B.Y {
			across++
		} else if l.A.X == l.B.X {
			up++
		}
	}
	if across != 2 || up != 2 {
		t.Errorf("%d bars across and %d up on two pages", across, up)
	}
	again, err := PDF("sample", pages)
	if err != nil || !bytes.Equal(pdf, again) {
		t.Errorf("the same pages are other bytes (%v)", err)
	}
}

// TestInset shows that nothing of an inset passes its frame.
func TestInset(t *testing.T) {
	inner := new(Drawing)
	inner.Write(Point{5, 5}, 3, "cut")
	pdf, err := PDF("inset", []*Page{{Inset: inner, Frame: Window{Point{10, 10}, Point{60, 40}}}})
	if err != nil {
		t.Fatal(err)
	}
	// 10, 40 mm from the lower left corner, 50 by 30 mm, in points.
	if page := streams(t, pdf)[0]; !strings.Contains(page, "28.35 113.39 141.73 -85.04 re W n") {
		t.Errorf("no clipping in %q", page)
	}
}

var point = rapid.Custom(func(t *rapid.T) Point {
	return Point{rapid.Float64Range(-50, 50).Draw(t, "x"), rapid.Float64Range(-50, 50).Draw(t, "y")}
})

// TestWithin tiles the plane and finds every stretch of a chain exactly once.
func TestWithin(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		points := rapid.SliceOfN(point, 2, 8).Draw(t, "points")
		closed := rapid.Bool().Draw(t, "closed")
		d := new(Drawing)
		d.Add(Polyline{Layer: Outline, Points: points, Closed: closed})
		whole := 0.0
		for i := 1; i < len(points); i++ {
			whole += points[i-1].Distance(points[i])
		}
		if closed {
			whole += points[len(points)-1].Distance(points[0])
		}
		sum := 0.0
		size := rapid.Float64Range(9, 60).Draw(t, "size")
		for i := -6; i < 6; i++ {
			for j := -6; j < 6; j++ {
				w := Window{Point{float64(i)*size + 0.1234567, float64(j)*size + 0.7654321}, Point{float64(i+1)*size + 0.1234567, float64(j+1)*size + 0.7654321}}
				for _, e := range d.Within(w).Entities {
					p := e.(Polyline)
					ends := p.Points
					if p.Closed {
						ends = append(ends, ends[0])
					}
					for k, q := range ends {
						if !w.Grown(1e-9).Holds(q) {
							t.Fatalf("%v lies outside %v", q, w)
						}
						if k > 0 {
							sum += ends[k-1].Distance(q)
						}
					}
				}
			}
		}
		if math.Abs(sum-whole) > 1e-6*(1+whole) {
			t.Fatalf("%g mm in the tiles, %g mm in all", sum, whole)
		}
	})
}

// TestLines breaks text so that nothing is lost and nothing is too long.
func TestLines(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		words := rapid.SliceOfN(rapid.StringMatching(`[a-zλΩ°±]{1,12}`), 1, 30).Draw(t, "words")
		s := strings.Join(words, " ")
		lines := Lines(s, 60, 3, false)
		if got := strings.Join(lines, " "); got != s {
			t.Fatalf("%q became %q", s, got)
		}
		for _, l := range lines {
			if Width(l, 3, false) > 60 && strings.Contains(l, " ") {
				t.Fatalf("%q runs %g mm", l, Width(l, 3, false))
			}
		}
	})
}

func TestFit(t *testing.T) {
	if got := Fit("short", 50, 3, false); got != "short" {
		t.Errorf("%q", got)
	}
	long := strings.Repeat("long ", 40)
	if got := Fit(long, 50, 3, false); !strings.HasSuffix(got, "…") || Width(got, 3, false) > 50 || Width(got, 3, false) < 44 {
		t.Errorf("%q is %g mm", got, Width(got, 3, false))
	}
}

// TestGlyphs looks for the signs that a sheet needs in both faces.
func TestGlyphs(t *testing.T) {
	for name, ttf := range map[string][]byte{"regular": liberationsansregular.TTF, "bold": liberationsansbold.TTF} {
		face, err := sfnt.Parse(ttf)
		if err != nil {
			t.Fatal(err)
		}
		for _, r := range "λΩ°±Ø×·√π²³≥∞¼½–−…µ" {
			if i, err := face.GlyphIndex(nil, r); err != nil || i == 0 {
				t.Errorf("%s has no %c (%v)", name, r, err)
			}
		}
	}
}

// TestLayers: every layer of the table has its ink, and no other.
func TestLayers(t *testing.T) {
	if len(layers) != len(inks) {
		t.Errorf("%d layers, %d inks", len(layers), len(inks))
	}
	for _, l := range layers {
		if k := l.ink(); k.width <= 0 || k.dxf < 1 || k.dxf > 255 {
			t.Errorf("%s: %+v", l, k)
		}
	}
}

// TestMeasure draws dimensions with their arrows on the points' ends and the
// text clear of the arrows, whichever way they are measured.
func TestMeasure(t *testing.T) {
	for _, c := range []struct {
		a, b        Point
		angle, away float64
	}{
		{Point{0, 0}, Point{60, 10}, 0, 8}, {Point{60, 10}, Point{0, 0}, 0, 8}, {Point{0, 0}, Point{60, 10}, 0, -8},
		{Point{0, 0}, Point{2, 5}, 0, 8}, {Point{0, 0}, Point{5, 60}, 90, -8}, {Point{0, 0}, Point{5, 2}, 90, 8},
	} {
		d := new(Drawing)
		d.Measure(c.a, c.b, c.angle, c.away, "12.3")
		tips := 0
		for _, e := range d.Entities {
			switch e := e.(type) {
			case Polyline:
				tips++
				along := func(p Point) float64 {
					if c.angle == 0 {
						return p.X
					}
					return p.Y
				}
				tip := along(e.Points[0])
				if math.Abs(tip-along(c.a)) > 1e-9 && math.Abs(tip-along(c.b)) > 1e-9 {
					t.Errorf("%+v: an arrow at %g", c, tip)
				}
			case Text:
				box := e.bounds()
				for _, o := range d.Entities {
					if p, ok := o.(Polyline); ok && box.Overlaps(p.bounds()) {
						t.Errorf("%+v: the text lies on an arrow", c)
					}
				}
			}
		}
		if tips != 2 {
			t.Errorf("%+v: %d arrows", c, tips)
		}
	}
}
