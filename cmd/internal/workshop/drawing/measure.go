package drawing

import (
	"math"
	"strings"
	"sync"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"codeberg.org/go-pdf/fpdf"
)

const (
	family       = "sans"
	pointsPerMM  = 72 / 25.4
	ascentShare  = 0.74 // of the font's size, capitals and figures
	descentShare = 0.21
)

// addFonts gives a document the two faces of every drawing.
func addFonts(f *fpdf.Fpdf) {
	f.AddUTF8FontFromBytes(family, "", liberationsansregular.TTF)
	f.AddUTF8FontFromBytes(family, "B", liberationsansbold.TTF)
}

func setFont(f *fpdf.Fpdf, bold bool, size float64) {
	style := ""
	if bold {
		style = "B"
	}
	f.SetFont(family, style, size*pointsPerMM)
}

// ruler measures text; a document of its own, so that what is only measured
// is not embedded.
var ruler struct {
	sync.Mutex
	f *fpdf.Fpdf
}

// Width is how long a text runs, mm.
func Width(s string, size float64, bold bool) float64 {
	ruler.Lock()
	defer ruler.Unlock()
	if ruler.f == nil {
		ruler.f = fpdf.New("P", "mm", "A4", "")
		addFonts(ruler.f)
	}
	setFont(ruler.f, bold, size)
	return ruler.f.GetStringWidth(s)
}

// start is the left end of the text's baseline.
func (t Text) start() Point {
	switch t.Align {
	case Middle:
		return t.At.Toward(t.Angle, -Width(t.S, t.Size, t.Bold)/2)
	case Right:
		return t.At.Toward(t.Angle, -Width(t.S, t.Size, t.Bold))
	}
	return t.At
}

// Corners are the corners of the text's body, from the lower left one on,
// counter-clockwise.
func (t Text) Corners() [4]Point {
	s := t.start()
	low, width, high := s.Toward(t.Angle-90, descentShare*t.Size), Width(t.S, t.Size, t.Bold), (ascentShare+descentShare)*t.Size
	right := low.Toward(t.Angle, width)
	return [4]Point{low, right, right.Toward(t.Angle+90, high), low.Toward(t.Angle+90, high)}
}

// Lines breaks a text at spaces so that no line runs longer than the width,
// mm. A word that is longer alone stays whole.
func Lines(s string, width, size float64, bold bool) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(s) {
		longer := strings.TrimSpace(line + " " + word)
		if line != "" && Width(longer, size, bold) > width {
			lines = append(lines, line)
			longer = word
		}
		line = longer
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}

// leading is the distance of lines in font sizes.
const leading = 1.3

// Paragraph writes a text broken into lines below a place, its first
// baseline one line down, and gives the height it takes.
func (d *Drawing) Paragraph(at Point, width, size float64, s string) float64 {
	return d.paragraph(at, width, size, false, s)
}

// Heading is a bold line below a place; it gives the height it takes.
func (d *Drawing) Heading(at Point, width, size float64, s string) float64 {
	return d.paragraph(at, width, size, true, s) + 0.4*size
}

func (d *Drawing) paragraph(at Point, width, size float64, bold bool, s string) float64 {
	lines := Lines(s, width, size, bold)
	for i, line := range lines {
		d.Add(Text{Layer: Lettering, At: at.Plus(0, -leading*size*float64(i+1)), Size: size, Bold: bold, S: line})
	}
	return leading * size * float64(len(lines))
}

// Fit is the text, cut short with an ellipsis where it runs longer than the
// width, mm.
func Fit(s string, width, size float64, bold bool) string {
	if Width(s, size, bold) <= width {
		return s
	}
	runes := []rune(s)
	n := int(math.Ceil(float64(len(runes)) * width / Width(s, size, bold)))
	for n > 0 && Width(string(runes[:n])+"…", size, bold) > width {
		n--
	}
	return string(runes[:n]) + "…"
}
