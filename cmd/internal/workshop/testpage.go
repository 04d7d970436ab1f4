package workshop

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/workshop/drawing"
	"turnwise/models"
	"turnwise/objectives"
)

// testPage says what to expect on the analyser: VSWR over the band, figures
// at its samples, and the trim chart.
func (s *sheet) testPage() leaf {
	l := newLeaf("test page: what to expect", "")
	y := top
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Expected VSWR at the connector")
	p := s.vswrPlot(drawing.Point{X: left + 13, Y: y - 63})
	p.frame(&l.Drawing)
	s.vswrCurve(&l.Drawing, p)
	t := s.bandTable()
	l.Table(drawing.Point{X: left + 99, Y: y - 3}, t)
	y -= math.Max(75, t.Height()+6)
	y -= l.Paragraph(drawing.Point{X: left, Y: y}, across, small, s.testWords()) + 2
	y -= l.Heading(drawing.Point{X: left, Y: y}, across, heading, "Trim chart at mid-band, "+megahertz(s.trim.Hz)+" MHz")
	s.trimCharts(&l.Drawing, drawing.Point{X: left, Y: y - 3})
	return l
}

func megahertz(hz float64) string { return shortest(math.Round(hz/1e3) / 1e3) }

// vswrPlot lays the chart out.
func (s *sheet) vswrPlot(at drawing.Point) plot {
	w := s.Wide.Samples
	highest := 1.0
	for i := range w {
		highest = math.Max(highest, s.vswr(&w[i]))
	}
	most := math.Min(math.Max(2, math.Ceil(highest*2)/2), 10)
	return plot{at: at, width: 78, height: 58,
		x: ticked("frequency, MHz", w[0].Hz/1e6, w[len(w)-1].Hz/1e6, 8), y: ticked("VSWR", 1, most, 5)}
}

func (s *sheet) vswr(a *models.Sample) float64 { return models.VSWR(a.Input, s.Design.Feed.Impedance) }

// vswrCurve draws the expected curve and shades the band's ends.
func (s *sheet) vswrCurve(d *drawing.Drawing, p plot) {
	points := make([]drawing.Point, len(s.Wide.Samples))
	for i := range points {
		a := &s.Wide.Samples[i]
		points[i] = p.point(a.Hz/1e6, s.vswr(a))
	}
	for _, hz := range []float64{s.Design.Band.From, s.Design.Band.To} {
		q := p.point(hz/1e6, p.y.from)
		d.Line(drawing.Second, q, q.Plus(0, p.height))
	}
	p.curve(d, drawing.Trace, points)
}

// bandTable lists the band's own samples, at most nine of them.
func (s *sheet) bandTable() *drawing.Table {
	t := &drawing.Table{Size: small, Row: 4.8, Columns: []drawing.Column{
		{Title: "MHz", Width: 17, Align: drawing.Right}, {Title: "Z, Ω", Width: 24, Align: drawing.Right}, {Title: "VSWR", Width: 13, Align: drawing.Right},
		{Title: "measured", Width: 16}, {Title: "dBic", Width: 11, Align: drawing.Right},
	}}
	samples := s.Response.Samples
	parts := min(max(s.Design.Band.Samples, 1), 9) - 1
	for i := range parts + 1 {
		at := 0
		if parts > 0 {
			at = (i*(len(samples)-1) + parts/2) / parts
		}
		t.Rows = append(t.Rows, s.bandRow(&samples[at]))
	}
	return t
}

func (s *sheet) bandRow(a *models.Sample) []string {
	return []string{megahertz(a.Hz), fmt.Sprintf("%.1f %+.1fj", real(a.Input), imag(a.Input)), fixed(s.vswr(a), 2), "", fixed(objectives.Decibels(a.Gain.Of(s.Design.Wanted())), 2)}
}

func (s *sheet) testWords() string {
	words := fmt.Sprintf("Calibrate at the connector's reference plane, point the antenna at open sky, no person or metal within two wavelengths (%.2g m). Z is at the connector against %s Ω; the band lies between the two upright lines. Gain is on the axis in the wanted sense, over an infinite plane. Inside its range the model is worth about 0.05 dB in gain and 10 %% in impedance; a real plate, a former and tolerances come on top.",
		2*s.wavelength(), shortest(s.Design.Feed.Impedance))
	if len(s.Response.Warnings) > 0 {
		words += " The design leaves the model's range: see the last sheet."
	}
	return words
}

// The two charts of the trim page, mm.
const (
	wholeRadius = 33.0
	closeRadius = 38.0
	longest     = 22.0 // of the longest arrow on the enlarged chart
)

// trimCharts draws the whole Smith chart and beside it the part about
// mid-band with the arrows enlarged, below a place.
func (s *sheet) trimCharts(d *drawing.Drawing, at drawing.Point) {
	band := make([]complex128, len(s.Response.Samples))
	for i := range band {
		band[i] = models.Reflection(s.Response.Samples[i].Input, s.Design.Feed.Impedance)
	}
	whole := smith{centre: at.Plus(wholeRadius+9, -wholeRadius-4), radius: wholeRadius, shown: wholeRadius}
	whole.grid(d, false)
	whole.equal(d, 2)
	whole.trace(d, drawing.Trace, band)
	s.arrows(d, whole, false)
	d.Disc(drawing.Outline, whole.point(s.trim.Reflection), 0.8)
	for _, name := range []struct {
		g    complex128
		text string
		up   float64
	}{{-1, "0", -0.9}, {1, "∞", -0.9}, {0, shortest(s.trim.Reference), 0.8}} {
		p := whole.point(name.g)
		align, x := drawing.Left, 1.2
		if name.g == -1 {
			align, x = drawing.Right, -1.2
		}
		d.Add(drawing.Text{Layer: drawing.Lettering, At: p.Plus(x, name.up), Size: small, Align: align, S: name.text})
	}
	d.Add(drawing.Text{Layer: drawing.Lettering, At: whole.centre.Plus(0, -wholeRadius-4), Size: small, Align: drawing.Middle, S: "whole chart; inner circle: VSWR 2"})

	near := smith{centre: at.Plus(across-closeRadius-22, -closeRadius-1), radius: s.zoom(), shown: closeRadius, about: s.trim.Reflection}
	near.grid(d, true)
	near.equal(d, 2)
	near.trace(d, drawing.Trace, band)
	s.arrows(d, near, true)
	d.Disc(drawing.Outline, near.centre, 0.8)
	w := near.window()
	d.Rectangle(drawing.Outline, w.Min, w.Width(), w.Height())
	d.Add(drawing.Text{Layer: drawing.Lettering, At: drawing.Point{X: near.centre.X, Y: w.Min.Y - 4}, Size: small, Align: drawing.Middle,
		S: fmt.Sprintf("about mid-band, enlarged %.0f times; arrows for ±1 mm", near.radius/wholeRadius)})
	s.arrowKey(d, drawing.Point{X: at.X, Y: math.Min(w.Min.Y, whole.centre.Y-wholeRadius) - 7})
}

// zoom is the radius of the enlarged chart, so that its longest arrow has
// its length.
func (s *sheet) zoom() float64 {
	most := 0.0
	for _, m := range s.trim.Moves {
		most = math.Max(most, math.Max(abs(m.Up), abs(m.Down)))
	}
	if most == 0 {
		return wholeRadius
	}
	return math.Max(longest/most, wholeRadius)
}

func abs(g complex128) float64 { return math.Hypot(real(g), imag(g)) }

// arrows draws what a millimetre of each move does: up or longer in one
// colour, down or shorter in the other.
func (s *sheet) arrows(d *drawing.Drawing, c smith, numbered bool) {
	from := c.point(s.trim.Reflection)
	var labels []drawing.Point
	for i, m := range s.trim.Moves {
		for _, way := range []struct {
			g     complex128
			layer drawing.Layer
			sign  string
		}{{m.Up, drawing.Second, "+"}, {m.Down, drawing.Trace, "−"}} {
			if way.g == 0 {
				continue
			}
			to := c.point(s.trim.Reflection + way.g)
			d.Add(drawing.Polyline{Layer: way.layer, Points: []drawing.Point{from, to}, Width: 0.25})
			if !numbered {
				continue
			}
			angle := math.Atan2(to.Y-from.Y, to.X-from.X) * 180 / math.Pi
			d.Head(way.layer, to, angle, math.Min(2.2, from.Distance(to)))
			at := freePlace(from, angle, from.Distance(to)+2.6, labels)
			labels = append(labels, at)
			d.Add(drawing.Text{Layer: drawing.Lettering, At: at.Plus(0, -0.8), Size: small, Align: drawing.Middle, S: way.sign + fmt.Sprint(i+1)})
		}
	}
}

// freePlace is a place for an arrow's label along its angle, at least so far
// out, that keeps off the labels already there.
func freePlace(from drawing.Point, angle, distance float64, labels []drawing.Point) drawing.Point {
	const apart, least = 4.5, 6.0
	distance = math.Max(distance, least)
	for {
		at := from.Toward(angle, distance)
		free := true
		for _, l := range labels {
			free = free && at.Distance(l) >= apart
		}
		if free {
			return at
		}
		distance += apart / 3
	}
}

// arrowKey names the arrows.
func (s *sheet) arrowKey(d *drawing.Drawing, at drawing.Point) {
	t := &drawing.Table{Size: small, Row: 4.4, Columns: []drawing.Column{{Title: "arrow", Width: 12, Align: drawing.Middle}, {Title: "moved by ±1 mm", Width: 38}, {Title: "which stands for", Width: across - 50}}}
	for i, m := range s.trim.Moves {
		stands := m.Stands
		if m.Down == 0 {
			stands += "; no room to " + m.Less + " it by 1 mm"
		}
		if m.Up == 0 {
			stands += "; no room to " + m.More + " it by 1 mm"
		}
		t.Rows = append(t.Rows, []string{fmt.Sprint(i + 1), m.Name, stands})
	}
	d.Table(at, t)
}
