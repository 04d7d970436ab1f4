package chart

import (
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"image/png"
	"io"
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"golang.org/x/image/font/sfnt"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/recorder"
)

// winding is a tapered helix of the given length and diameters, mm.
func winding(turns, length, from, to float64, right bool) *Winding {
	w := &Winding{Diameter: 3, Right: right, Length: fmt.Sprintf("length %.1f mm", length), AtFeed: "Ø 72.1 mm at the feed, on the wire's centre line", AtOpenEnd: "Ø 50.2 mm at the open end", Turn: "anticlockwise going away from you: left-handed"}
	w.Wire = append(w.Wire, [3]float64{from / 2, 0, 0})
	n := int(turns * 36)
	for i := range n + 1 {
		u := float64(i) / float64(n)
		r := (from + u*(to-from)) / 2
		a := 2 * math.Pi * turns * u
		if !right {
			a = -a
		}
		w.Wire = append(w.Wire, [3]float64{r * math.Cos(a), r * math.Sin(a), 5 + u*(length-5)})
	}
	return w
}

// trimmed is a trim chart of reflections near a place, so far apart.
func trimmed(about complex128, apart float64) *Trim {
	trace := func(by complex128) (g []complex128) {
		for k := range 5 {
			g = append(g, about+by*complex(apart, 0)+cmplx.Rect(0.3*apart, 0.4*float64(k-2)))
		}
		return g
	}
	t := &Trim{Reference: 50, Marks: [2]string{"1660 MHz", "1680 MHz"}, Notes: []string{"To take it back: riser height, lower by 0.80 mm.", "VSWR at 1680 MHz: measured 3.74, after that about 3.30, predicted 3.30."},
		Traces: []Reach{{Name: "predicted", G: trace(0)}, {Name: "measured", G: trace(1), Open: true}, {Name: "band at 1680 MHz", G: trace(-0.3i), Ring: true}, {Name: "explained by 1", G: trace(0.9), Tipped: true}}}
	from := t.Traces[0].G[2]
	for i, by := range []complex128{0.9, 0.5 + 0.3i, 0.5 + 0.28i, -0.2} {
		name := []string{"riser height +0.80 mm", "height at ½ turn −2.00 mm", "height at ¼ turn −0.31 mm", "permittivity of the insulation −0.2"}[i]
		t.Arrows = append(t.Arrows, Arrow{From: from, To: from + by*complex(apart, 0), Name: name, Says: "explains 91 % of the difference"})
	}
	return t
}

// paired has the longest names that there are.
func paired(t *Trim) *Trim {
	t.Arrows[0].Name = "spacing at the start of the lead +5.00 mm and permittivity of the insulation −0.26"
	return t
}

// figures are one of each kind, with the awkward ones among them.
func figures() map[string]Figure {
	xs := []float64{1.6, 1.65, 1.7, 1.75}
	long := winding(14, 560, 72, 50, true)
	short := winding(3, 60, 280, 280, false)
	short.AtOpenEnd = ""
	cup := winding(5, 200, 70, 60, true)
	cup.Plate, cup.Rim = 160, 60
	near := &Scatter{X: Around("length, mm", 205, 235), Y: Around("gain, dBic", 12.59, 12.64), Width: Small}
	front := &Scatter{X: Around("length, mm", 96, 564), Y: Around("gain, dBic", 9.8, 15.1), Width: Wide}
	for i := range 60 {
		p := Point{X: 96 + 7.8*float64(i), Y: 9.8 + 0.088*float64(i), Tip: fmt.Sprint("design ", i)}
		if i%6 == 0 {
			p.Href = "#sheet"
		}
		switch i {
		case 59:
			p.Ring, p.Label = KneeRing, "knee"
		case 20:
			p.Ring, p.Label = ChosenRing, "chosen"
		}
		front.Points = append(front.Points, p)
	}
	near.Points = []Point{{X: 212, Y: 12.6, Tip: "a<b & \"c\""}, {X: 235, Y: 12.64, Ring: ChosenRing, Label: "chosen, the knee"}}
	cut := Cut{Name: "right-hand, wanted"}
	other := Cut{Name: "left-hand, unwanted"}
	whole := Cut{Name: "right-hand, wanted"}
	for a := -180.0; a <= 180; a++ {
		level := 40 * (math.Cos(a*math.Pi/180) - 1)
		whole.Angles, whole.Level = append(whole.Angles, a), append(whole.Level, level)
		if math.Abs(a) <= 90 {
			cut.Angles, cut.Level = append(cut.Angles, a), append(cut.Level, level)
			other.Angles, other.Level = append(other.Angles, a), append(other.Level, level-20)
		}
	}
	sides := [2]string{"azimuth 270°", "azimuth 90°"}
	marks := [3]string{"1.66 GHz", "1.68 GHz", "1.7 GHz"}
	z := []complex128{80 + 10i, 90, 100 - 10i, 120 - 20i}
	return map[string]Figure{
		"trim":               trimmed(0.54-0.12i, 0.02),
		"trim, pair":         paired(trimmed(-0.1+0.1i, 0.03)),
		"trim, whole":        trimmed(0.1+0.2i, 0.6),
		"trim, at the rim":   trimmed(-0.95+0.1i, 0.08),
		"trim, open circuit": trimmed(0.9+0.05i, 0.15),
		"trim, one frequency": &Trim{Reference: 75, Marks: [2]string{"", "434 MHz"}, Notes: []string{"No difference to explain."},
			Traces: []Reach{{Name: "predicted", G: []complex128{0.2}}, {Name: "measured", G: []complex128{0.2}, Open: true}}},
		"lines": &Lines{
			X: Axis{Label: "frequency, GHz", Min: 1.6, Max: 1.75}, Y: Axis{Label: "gain in the wanted sense, dBic", Min: 8, Max: 14},
			Series: []Series{{"gain", xs, []float64{12, 13, 13.2, 4}}, {"realised gain, with mismatch", xs, []float64{11, math.NaN(), 12, 3}}},
			Limits: []Limit{{From: 1.66, To: 1.70, Value: 9, AtLeast: true, Label: "gain ≥ 9 dBic"}, {From: 1.5, To: 1.9, Value: 13.9, Label: "gain ≤ 13.9 dBic"}},
			Band:   [2]float64{1.66, 1.70},
		},
		"planes": &Lines{
			X: Axis{Label: "angle from the axis, °", Min: -45, Max: 45, Step: 15}, Y: Axis{Label: "axial ratio, dB", Max: 8},
			Series: []Series{{Name: "azimuth 0°"}, {Name: "azimuth 45°"}, {Name: "azimuth 90°"}, {Name: "azimuth 135°"}},
		},
		"history": &Lines{
			X: Axis{Label: "evaluations", Max: 12000}, Y: Axis{Label: "hypervolume, % of the final", Max: 100},
			Series:   []Series{{X: []float64{0, 6000, 12000}, Y: []float64{0, 90, 100}}},
			Sections: []Section{{"sample", 400}, {"genetic", 9000}, {"simplex", 12000}},
		},
		"front": front, "near": near,
		"smith": &Smith{Reference: 50, VSWR: 2, Label: "VSWR ≤ 2", Traces: []Trace{
			{Name: "at the connector", Z: z, In: [2]int{1, 2}, Marks: marks}, {Name: "at the port", Z: z, In: [2]int{1, 2}, Marks: marks}}},
		"smith, one frequency": &Smith{Reference: 75, Traces: []Trace{{Name: "at the port", Z: z[:1], Marks: [3]string{1: "434 MHz"}}}},
		"polar":                &Polar{Cuts: []Cut{cut, other}, Floor: -30, Rim: "rim: 13.42 dBic, at 1.68 GHz", Sides: sides},
		"polar, whole":         &Polar{Cuts: []Cut{whole}, Floor: -30, Rim: "rim: 13.42 dBic, at 1.68 GHz", Sides: sides},
		"bars": &Bars{Names: [2]string{"of the evaluations", "of the front"}, Groups: []Group{
			{"start", [2]float64{0.01, 0}, [2]string{"100", "0"}}, {"genetic", [2]float64{0.7, 1}, [2]string{"7000", "200"}}}},
		"bars, one whole": &Bars{Names: [2]string{1: "of the variance of axial ratio in the cone"}, Groups: []Group{
			{"diameter", [2]float64{0, 0.99}, [2]string{"", "99 %"}}, {"lead spacing", [2]float64{0, 0.01}, [2]string{"", "1 %"}}}},
		"dots": &Dots{Label: "directivity at mid-band, dBi", Mark: 13.4, MarkName: "full-wave: 13.40 dBi", Rows: []Dot{
			{"Kraus 1949", 14.8, "+1.40 dB"}, {"Kraus later", 13.8, "+0.40 dB"}, {"King & Wong 1980", 13.2, "−0.20 dB"}}},
		"side": SideView{long, Wide}, "side, small": SideView{long, Small}, "side, short": SideView{short, Wide},
		"side, short and small": SideView{short, Small}, "side, cup": SideView{cup, Wide},
		"feed": FeedView{long}, "feed, left": FeedView{short}, "feed, cup": FeedView{cup},
		"titled": Titled{"A title that is much too long for a figure of the small width, and is cut", FeedView{long}},
	}
}

// box is where a line of text stands.
type box struct {
	text                     string
	left, bottom, right, top float64
}

// texts draws a figure and finds its lines of text.
func texts(t *testing.T, f Figure) []box {
	t.Helper()
	var c recorder.Canvas
	f.Draw(&c)
	var boxes []box
	for _, a := range c.Actions {
		s, ok := a.(*recorder.FillString)
		if !ok {
			continue
		}
		fc := face(float64(s.Size))
		x, y := float64(s.Point.X), float64(s.Point.Y)
		boxes = append(boxes, box{s.String, x, y - 0.22*float64(s.Size), x + float64(fc.Width(s.String)), y + 0.74*float64(s.Size)})
	}
	if len(boxes) == 0 {
		t.Fatal("nothing is written on it")
	}
	return boxes
}

// No label leaves its figure or runs into another.
func TestLabelsHaveRoom(t *testing.T) {
	for name, f := range figures() {
		t.Run(name, func(t *testing.T) {
			w, h := f.Size()
			boxes := texts(t, f)
			for i, b := range boxes {
				if b.left < 0 || b.bottom < 0 || b.right > w || b.top > h {
					t.Errorf("%q spans %.1f to %.1f, %.1f to %.1f on a figure of %g by %g", b.text, b.left, b.right, b.bottom, b.top, w, h)
				}
				for _, o := range boxes[:i] {
					if b.left < o.right && o.left < b.right && b.bottom < o.top-0.5 && o.bottom < b.top-0.5 {
						t.Errorf("%q runs into %q", b.text, o.text)
					}
				}
			}
		})
	}
}

// Nothing is drawn outside a figure.
func TestStrokesStayInside(t *testing.T) {
	for name, f := range figures() {
		t.Run(name, func(t *testing.T) {
			w, h := f.Size()
			var c recorder.Canvas
			f.Draw(&c)
			for _, a := range c.Actions {
				var path vg.Path
				switch a := a.(type) {
				case *recorder.Stroke:
					path = a.Path
				case *recorder.Fill:
					path = a.Path
				}
				for _, p := range path {
					x, y := float64(p.Pos.X), float64(p.Pos.Y)
					if p.Type != vg.ArcComp && p.Type != vg.CloseComp && (x < -0.5 || y < -0.5 || x > w+0.5 || y > h+0.5) {
						t.Fatalf("drawn at %.1f, %.1f on a figure of %g by %g", x, y, w, h)
					}
				}
			}
		})
	}
}

// Every character has its glyph.
func TestGlyphs(t *testing.T) {
	var buffer sfnt.Buffer
	for name, f := range figures() {
		for _, b := range texts(t, f) {
			for _, r := range b.text {
				fc := face(10)
				if i, err := fc.Face.GlyphIndex(&buffer, r); err != nil || i == 0 {
					t.Errorf("%s: %q has no glyph for %q", name, b.text, r)
				}
			}
		}
	}
}

// An SVG is well-formed, carries no style that a strict policy would refuse,
// says its label first, and holds every text to its width.
func TestSVG(t *testing.T) {
	for name, f := range figures() {
		t.Run(name, func(t *testing.T) {
			text := SVG(f, "a <label> & more")
			d := xml.NewDecoder(bytes.NewReader(text))
			first, labels := "", 0
			for {
				token, err := d.Token()
				if errors.Is(err, io.EOF) {
					break
				}
				if err != nil {
					t.Fatal(err)
				}
				if s, ok := token.(xml.StartElement); ok {
					held := false
					for _, a := range s.Attr {
						if a.Name.Local == "style" || a.Name.Local == "id" || strings.HasPrefix(a.Name.Local, "on") {
							t.Errorf("<%s> has the attribute %s", s.Name.Local, a.Name.Local)
						}
						held = held || a.Name.Local == "textLength"
						if strings.Contains(a.Value, "NaN") || strings.Contains(a.Value, "Inf") {
							t.Errorf("<%s %s=%q>", s.Name.Local, a.Name.Local, a.Value)
						}
					}
					if s.Name.Local == "text" {
						if labels++; !held {
							t.Error("a text is not held to its width")
						}
					}
				}
				if c, ok := token.(xml.CharData); ok && first == "" {
					first = string(c)
				}
			}
			if first != "a <label> & more" {
				t.Errorf("the label reads %q", first)
			}
			if want := len(texts(t, f)); labels != want {
				t.Errorf("%d texts, %d are drawn", labels, want)
			}
			if !bytes.Equal(text, SVG(f, "a <label> & more")) {
				t.Error("the same figure gave other bytes")
			}
		})
	}
}

func TestPNG(t *testing.T) {
	for name, f := range figures() {
		t.Run(name, func(t *testing.T) {
			text, err := PNG(f)
			if err != nil {
				t.Fatal(err)
			}
			picture, err := png.Decode(bytes.NewReader(text))
			if err != nil {
				t.Fatal(err)
			}
			w, h := f.Size()
			if got := picture.Bounds().Size(); math.Abs(float64(got.X)-2*w) > 1 || math.Abs(float64(got.Y)-2*h) > 1 {
				t.Errorf("%v dots for %g by %g units", got, w, h)
			}
			if r, g, b, a := picture.At(1, 1).RGBA(); r != 0xffff || g != 0xffff || b != 0xffff || a != 0xffff {
				t.Error("the corner is not white")
			}
			again, err := PNG(f)
			if err != nil || !bytes.Equal(text, again) {
				t.Errorf("the same figure gave other bytes (%v)", err)
			}
		})
	}
}

// The canvas turns, shifts and scales as gonum's do.
func TestSVGTransforms(t *testing.T) {
	s := newSVG(100)
	s.Push()
	s.Translate(vg.Point{X: 10, Y: 20})
	s.Rotate(math.Pi / 2)
	s.Scale(2, 3)
	x, y := s.m.of(vg.Point{X: 5, Y: 1})
	if math.Abs(x-7) > 1e-12 || math.Abs(y-30) > 1e-12 {
		t.Errorf("(5, 1) came to (%g, %g), want (7, 30)", x, y)
	}
	s.FillString(font.Face{Font: face(10).Font, Face: face(10).Face}, vg.Point{}, "up")
	if !strings.Contains(s.b.String(), `transform="rotate(-90 10 80)"`) {
		t.Errorf("a turned text reads %s", s.b.String())
	}
	s.Pop()
	if s.m != identity {
		t.Error("Pop did not bring the map back")
	}
}

// A whole circle survives the SVG's arcs, which cannot be one.
func TestSVGCircle(t *testing.T) {
	s := newSVG(100)
	brush{s}.arc(at{50, 50}, 40, 0, 2*math.Pi)
	path := s.b.String()
	if got := strings.Count(path, "A40 40 0 0 0"); got != 3 {
		t.Errorf("%d arcs in %s, want 3", got, path)
	}
	if !strings.Contains(path, "M90 50") || !strings.Contains(path, `0 0 0 90 50"`) {
		t.Errorf("the circle does not close: %s", path)
	}
}
