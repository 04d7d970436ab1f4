package drawing

import (
	"bytes"
	"fmt"
	"time"

	"codeberg.org/go-pdf/fpdf"
)

// A4 in millimetres, upright.
const (
	A4Width  = 210.0
	A4Height = 297.0
)

// Page is an A4 page; its drawing's origin is the lower left corner.
type Page struct {
	Drawing
	Landscape bool
	// Inset is drawn first, cut off at its frame.
	Inset *Drawing
	Frame Window
}

// Size is the page's width and height, mm.
func (p *Page) Size() (width, height float64) {
	if p.Landscape {
		return A4Height, A4Width
	}
	return A4Width, A4Height
}

// noDate stands where a PDF has its dates, so that the same pages are always
// the same bytes.
var noDate = time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC)

// PDF writes the pages as one document, one unit of a drawing to the
// millimetre.
func PDF(title string, pages []*Page) ([]byte, error) {
	f := fpdf.New("P", "mm", "A4", "")
	f.SetCreationDate(noDate)
	f.SetModificationDate(noDate)
	f.SetCatalogSort(true)
	f.SetTitle(title, true)
	f.SetProducer("turnwise", true)
	f.SetAutoPageBreak(false, 0)
	f.SetMargins(0, 0, 0)
	f.SetLineCapStyle("round")
	f.SetLineJoinStyle("round")
	addFonts(f)
	for _, p := range pages {
		way := "P"
		if p.Landscape {
			way = "L"
		}
		f.AddPageFormat(way, fpdf.SizeType{Wd: A4Width, Ht: A4Height})
		_, height := p.Size()
		w := pdfWriter{f: f, height: height}
		w.inset(p)
		for _, e := range p.Entities {
			w.entity(e)
		}
	}
	var b bytes.Buffer
	if err := f.Output(&b); err != nil {
		return nil, fmt.Errorf("PDF: %w", err)
	}
	return b.Bytes(), nil
}

// pdfWriter puts entities on a page whose y runs downwards.
type pdfWriter struct {
	f      *fpdf.Fpdf
	height float64
}

func (w pdfWriter) down(p Point) (x, y float64) { return p.X, w.height - p.Y }

func (w pdfWriter) use(l Layer, width float64) {
	k := l.ink()
	if width == 0 {
		width = k.width
	}
	w.f.SetLineWidth(width)
	w.f.SetDrawColor(k.r, k.g, k.b)
	w.f.SetFillColor(k.r, k.g, k.b)
	w.f.SetDashPattern(k.dash, 0)
}

func (w pdfWriter) inset(p *Page) {
	if p.Inset == nil {
		return
	}
	x, y := w.down(Point{p.Frame.Min.X, p.Frame.Max.Y})
	w.f.ClipRect(x, y, p.Frame.Width(), p.Frame.Height(), false)
	for _, e := range p.Inset.Entities {
		w.entity(e)
	}
	w.f.ClipEnd()
}

func (w pdfWriter) entity(e Entity) {
	switch e := e.(type) {
	case Line:
		w.use(e.Layer, 0)
		w.chain([]Point{e.A, e.B}, "D")
	case Arc:
		w.use(e.Layer, 0)
		w.chain(e.chain(), "D")
	case Polyline:
		w.polyline(e)
	case Text:
		w.text(e)
	}
}

func (w pdfWriter) chain(points []Point, style string) {
	w.f.MoveTo(w.down(points[0]))
	for _, p := range points[1:] {
		w.f.LineTo(w.down(p))
	}
	w.f.DrawPath(style)
}

func (w pdfWriter) polyline(p Polyline) {
	w.use(p.Layer, p.Width)
	points, style := p.Points, "D"
	if p.Closed {
		points = append(points[:len(points):len(points)], points[0])
	}
	if p.Filled {
		style = "F"
	}
	w.chain(points, style)
}

func (w pdfWriter) text(t Text) {
	k := t.Layer.ink()
	w.f.SetTextColor(k.r, k.g, k.b)
	setFont(w.f, t.Bold, t.Size)
	x, y := w.down(t.start())
	if t.Angle == 0 {
		w.f.Text(x, y, t.S)
		return
	}
	w.f.TransformBegin()
	w.f.TransformRotate(t.Angle, x, y)
	w.f.Text(x, y, t.S)
	w.f.TransformEnd()
}
