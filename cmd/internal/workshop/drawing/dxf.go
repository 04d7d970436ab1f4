package drawing

import (
	"bytes"
	"fmt"
	"strconv"
	"strings"
)

// DXF writes the drawing as a DXF of release 12 (AC1009) in millimetres. A
// comment at its head says what it is.
func (d *Drawing) DXF(comment string) []byte {
	var w dxfWriter
	w.head(comment, d.layers())
	for _, e := range d.Entities {
		w.entity(e)
	}
	return w.end()
}

// Line3D writes a chain of points in space, mm, as a DXF polyline on the
// layer of the winding.
func Line3D(comment string, points [][3]float64) []byte {
	var w dxfWriter
	w.head(comment, []Layer{Winding})
	const spatial = 8
	w.polylineHead(Winding, spatial)
	const spatialVertex = 32
	for _, p := range points {
		w.vertex(Winding, p[0], p[1], p[2], spatialVertex)
	}
	w.pair(0, "SEQEND")
	return w.end()
}

// layers lists the layers in use, in their order.
func (d *Drawing) layers() []Layer {
	used := map[Layer]bool{}
	for _, e := range d.Entities {
		used[layerOf(e)] = true
	}
	var out []Layer
	for _, l := range layers {
		if used[l] {
			out = append(out, l)
		}
	}
	return out
}

// dxfWriter writes pairs of a group code and a value.
type dxfWriter struct{ b bytes.Buffer }

func (w *dxfWriter) pair(code int, value string) {
	fmt.Fprintf(&w.b, "%3d\r\n%s\r\n", code, value)
}

func (w *dxfWriter) number(code int, x float64) { w.pair(code, micrometres(x)) }

func (w *dxfWriter) point(code int, x, y, z float64) {
	w.number(code, x)
	w.number(code+10, y)
	w.number(code+20, z)
}

func (w *dxfWriter) head(comment string, used []Layer) {
	w.pair(999, dxfText(comment))
	w.pair(0, "SECTION")
	w.pair(2, "HEADER")
	w.pair(9, "$ACADVER")
	w.pair(1, "AC1009")
	w.pair(0, "ENDSEC")
	w.pair(0, "SECTION")
	w.pair(2, "TABLES")
	w.pair(0, "TABLE")
	w.pair(2, "LTYPE")
	w.pair(70, "1")
	w.pair(0, "LTYPE")
	w.pair(2, "CONTINUOUS")
	w.pair(70, "0")
	w.pair(3, "Solid line")
	w.pair(72, "65")
	w.pair(73, "0")
	w.number(40, 0)
	w.pair(0, "ENDTAB")
	w.pair(0, "TABLE")
	w.pair(2, "LAYER")
	w.pair(70, strconv.Itoa(len(used)))
	for _, l := range used {
		w.pair(0, "LAYER")
		w.pair(2, string(l))
		w.pair(70, "0")
		w.pair(62, strconv.Itoa(l.ink().dxf))
		w.pair(6, "CONTINUOUS")
	}
	w.pair(0, "ENDTAB")
	w.pair(0, "ENDSEC")
	w.pair(0, "SECTION")
	w.pair(2, "ENTITIES")
}

func (w *dxfWriter) end() []byte {
	w.pair(0, "ENDSEC")
	w.pair(0, "EOF")
	return w.b.Bytes()
}

func (w *dxfWriter) start(kind string, l Layer) {
	w.pair(0, kind)
	w.pair(8, string(l))
}

func (w *dxfWriter) entity(e Entity) {
	switch e := e.(type) {
	case Line:
		w.start("LINE", e.Layer)
		w.point(10, e.A.X, e.A.Y, 0)
		w.point(11, e.B.X, e.B.Y, 0)
	case Arc:
		w.arc(e)
	case Polyline:
		w.polyline(e)
	case Text:
		w.text(e)
	}
}

func (w *dxfWriter) arc(a Arc) {
	kind := "ARC"
	if a.Sweep == 360 {
		kind = "CIRCLE"
	}
	w.start(kind, a.Layer)
	w.point(10, a.Centre.X, a.Centre.Y, 0)
	w.number(40, a.Radius)
	if kind == "ARC" {
		w.number(50, a.From)
		w.number(51, a.From+a.Sweep)
	}
}

func (w *dxfWriter) polylineHead(l Layer, flags int) {
	w.start("POLYLINE", l)
	w.pair(66, "1")
	w.point(10, 0, 0, 0)
	w.pair(70, strconv.Itoa(flags))
}

func (w *dxfWriter) vertex(l Layer, x, y, z float64, flags int) {
	w.start("VERTEX", l)
	w.point(10, x, y, z)
	w.pair(70, strconv.Itoa(flags))
}

func (w *dxfWriter) polyline(p Polyline) {
	flags := 0
	if p.Closed {
		flags = 1
	}
	w.polylineHead(p.Layer, flags)
	for _, q := range p.Points {
		w.vertex(p.Layer, q.X, q.Y, 0, 0)
	}
	w.pair(0, "SEQEND")
}

// capitals is a font's height of capitals, by which DXF sizes text.
const capitals = 0.7

func (w *dxfWriter) text(t Text) {
	w.start("TEXT", t.Layer)
	w.point(10, t.At.X, t.At.Y, 0)
	w.number(40, capitals*t.Size)
	w.pair(1, dxfText(t.S))
	w.number(50, t.Angle)
	if t.Align != Left {
		w.pair(72, strconv.Itoa(int(t.Align)))
		w.point(11, t.At.X, t.At.Y, 0)
	}
}

// dxfText writes a text in the characters of release 12: its own codes for
// diameter, degree and plus-minus, and code points for all others.
func dxfText(s string) string {
	var b strings.Builder
	for _, r := range s {
		switch {
		case r == 'Ø':
			b.WriteString("%%c")
		case r == '°':
			b.WriteString("%%d")
		case r == '±':
			b.WriteString("%%p")
		case r >= ' ' && r < 0x7f:
			b.WriteRune(r)
		case r < ' ':
			b.WriteByte(' ')
		default:
			fmt.Fprintf(&b, "\\U+%04X", r)
		}
	}
	return b.String()
}
