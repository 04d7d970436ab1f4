package report

import (
	"fmt"
	"math"

	"turnwise/cmd/internal/chart"
	"turnwise/models"
	"turnwise/objectives"
)

// Chart is one figure of the report with what is said of it.
type Chart struct {
	Name    string // of its file
	Title   string
	Caption string
	Figure  chart.Figure
	Narrow  chart.Figure // for a telephone, where Figure is wide
	// Indicative marks what the model only indicates.
	Indicative bool
}

func (c *Chart) view() figureView {
	v := figureView{Caption: c.Caption, Wide: inline(c.Figure, c.Title), Indicative: c.Indicative}
	if c.Narrow != nil {
		v.Narrow = inline(c.Narrow, c.Title)
	}
	return v
}

// Charts are all figures of the report, each with the name of its file.
func (r *Run) Charts() []Chart {
	var all []Chart
	if len(r.listed().Members) > 0 {
		all = append(all, Chart{Name: "front", Title: "The front", Figure: r.frontChart(chart.Wide)})
	}
	all = append(all, r.searchCharts()...)
	for i := range r.Sheets {
		s := &r.Sheets[i]
		for _, c := range r.sheetCharts(s) {
			c.Name, c.Title = s.Member.ID+"-"+c.Name, s.Member.ID+": "+c.Title
			all = append(all, c)
		}
	}
	return all
}

// sheetCharts are the figures of one design.
func (r *Run) sheetCharts(s *Sheet) []Chart {
	charts := append(s.drawings(), s.toleranceChart()...)
	if s.Simulation == nil {
		return charts
	}
	charts = append(charts, r.gainChart(s), r.axialRatioChart(s), r.vswrChart(s), r.smithChart(s))
	charts = append(append(charts, r.patternCharts(s)...), r.rearChart(s)...)
	return append(charts, s.lawChart(), s.handChart())
}

// Names of the drawings, which stand apart from the charts.
const (
	sideName = "side"
	feedName = "feed"
)

// drawings show the winding to scale.
func (s *Sheet) drawings() []Chart {
	if len(s.Wire) == 0 {
		return nil
	}
	d := &s.Member.Design
	w := &chart.Winding{
		Diameter: d.Conductor.Diameter * 1e3, Right: d.Handedness != models.Left,
		Length: "length " + said(objectives.Length, s.Member.Figures[objectives.Length]),
		AtFeed: fmt.Sprintf("Ø %s mm on the wire's centre line", trimmed(d.Diameter[0]*1e3, 1)),
		Turn:   "clockwise going away from you: right-handed",
	}
	if n := len(d.Diameter); n > 1 {
		w.AtFeed = fmt.Sprintf("Ø %s mm at the feed, on the wire's centre line", trimmed(d.Diameter[0]*1e3, 1))
		w.AtOpenEnd = fmt.Sprintf("Ø %s mm at the open end", trimmed(d.Diameter[n-1]*1e3, 1))
	}
	if !w.Right {
		w.Turn = "anticlockwise going away from you: left-handed"
	}
	if d.Ground.Finite() {
		w.Plate = d.Ground.Diameter * 1e3
	}
	if d.Ground.Kind == models.Cup {
		w.Rim = d.Ground.Rim * 1e3
	}
	for _, p := range s.Wire {
		w.Wire = append(w.Wire, [3]float64{p[0] * 1e3, p[1] * 1e3, p[2] * 1e3})
	}
	return []Chart{
		{Name: sideName, Title: "The winding from the side", Caption: "From the side, the feed on the left: the near half of each turn dark, the far half pale.",
			Figure: chart.SideView{Winding: w, Width: chart.Wide}, Narrow: chart.SideView{Winding: w, Width: chart.Small}},
		{Name: feedName, Title: "The winding from the feed", Caption: "From behind the plane, along the axis. " + capital(threadWords(d.Handedness)) + ".",
			Figure: chart.FeedView{Winding: w}},
	}
}

// sweep is a column of the sweep.
func (s *Sheet) sweep(of func(sweepRow) number) []float64 {
	rows := s.Simulation.rows()
	out := make([]float64, len(rows))
	for i := range rows {
		out[i] = float64(of(rows[i]))
	}
	return out
}

// inBand is the band's part of a column.
func (s *Sheet) inBand(column []float64) []float64 { return column[s.Band[0] : s.Band[2]+1] }

// overFrequency starts a chart over the sweep, its band tinted.
func (r *Run) overFrequency(s *Sheet, y chart.Axis) *chart.Lines {
	per, unit := frequencyUnit(r.Problem.Band)
	hz := s.sweep(func(w sweepRow) number { return number(w.Hz) })
	b := r.Problem.Band
	l := &chart.Lines{X: chart.Axis{Label: "frequency, " + unit, Min: hz[0] / per, Max: hz[len(hz)-1] / per}, Y: y}
	if l.X.Min == l.X.Max {
		l.X.Min, l.X.Max = l.X.Min*0.99, l.X.Max*1.01
	}
	l.Band = [2]float64{b.From / per, b.To / per}
	return l
}

// add puts a column of the sweep on a chart.
func (s *Sheet) add(l *chart.Lines, per float64, name string, ys []float64) {
	hz := s.sweep(func(w sweepRow) number { return number(w.Hz) })
	for i := range hz {
		hz[i] /= per
	}
	l.Series = append(l.Series, chart.Series{Name: name, X: hz, Y: ys})
}

// limits draws the brief's limits on any of the figures over the band.
func (r *Run) limits(l *chart.Lines, figures ...objectives.Figure) {
	per, _ := frequencyUnit(r.Problem.Band)
	for _, f := range figures {
		for _, m := range r.Brief.Spec.Limits {
			if m.Figure != f {
				continue
			}
			one := chart.Limit{From: r.Problem.Band.From / per, To: r.Problem.Band.To / per, Value: m.Value, AtLeast: m.AtLeast, Label: limitMark(m)}
			if one.From == one.To {
				one.From, one.To = l.X.Min, l.X.Max
			}
			l.Limits = append(l.Limits, one)
		}
	}
}

// limitValues are the values of the brief's limits on the figures.
func (r *Run) limitValues(figures ...objectives.Figure) []float64 {
	var vs []float64
	for _, f := range figures {
		for _, m := range r.Brief.Spec.Limits {
			if m.Figure == f {
				vs = append(vs, m.Value)
			}
		}
	}
	return vs
}

// Decibels outside the band that a chart of gain still shows below the
// band's own least.
const gainBelow = 4.0

func (r *Run) gainChart(s *Sheet) Chart {
	per, _ := frequencyUnit(r.Problem.Band)
	gain := s.sweep(func(w sweepRow) number { return w.Gain })
	realised := s.sweep(func(w sweepRow) number { return w.RealisedGain })
	low, high := extent(s.inBand(gain), s.inBand(realised), r.limitValues(objectives.Gain, objectives.RealisedGain))
	lowest, highest := extent(gain, realised)
	y := chart.Around("gain in the wanted sense, dBic", math.Max(math.Min(low-0.5, lowest), low-gainBelow), math.Max(high, highest)+0.2)
	l := r.overFrequency(s, y)
	s.add(l, per, "gain", gain)
	s.add(l, per, "realised gain, with mismatch", realised)
	r.limits(l, objectives.Gain, objectives.RealisedGain)
	return Chart{Name: "gain", Title: "Gain against frequency", Caption: "Gain on the axis; the band is tinted.", Figure: l}
}

// upward is an axis from a floor that shows the band and its limits, and of
// what lies outside no more than a cap, unless the band itself goes there.
func upward(label string, floor, least, cap float64, band, limits []float64) chart.Axis {
	_, high := extent(band)
	_, limit := extent(limits)
	top := math.Max(math.Max(least, 1.15*high), 1.3*limit)
	if top > cap {
		top = cap
	}
	return chart.Around(label, floor, top)
}

func (r *Run) axialRatioChart(s *Sheet) Chart {
	per, _ := frequencyUnit(r.Problem.Band)
	wanted := s.Member.Design.Wanted()
	ratio := s.sweep(func(w sweepRow) number {
		if w.Sense == (-wanted).String() {
			return number(models.AxialRatioCap)
		}
		return w.AxialRatio
	})
	band := s.inBand(ratio)
	var cone []float64
	if s.Simulation.Response.Answered&models.Cone != 0 {
		for i := range s.Simulation.Response.Samples {
			cone = append(cone, s.Simulation.Response.Samples[i].ConeAxialRatio.Of(wanted))
		}
		band = append(append([]float64{}, band...), s.inBand(cone)...)
	}
	l := r.overFrequency(s, upward("axial ratio, dB", 0, 3, 12, band, r.limitValues(objectives.AxialRatio, objectives.AxialRatioCone)))
	s.add(l, per, "on the axis", ratio)
	if cone != nil {
		s.add(l, per, fmt.Sprintf("worst within %s° of it", trimmed(r.Problem.Cone*180/math.Pi, 2)), cone)
	}
	r.limits(l, objectives.AxialRatio, objectives.AxialRatioCone)
	return Chart{Name: "axial-ratio", Title: "Axial ratio against frequency", Caption: "Axial ratio: 0 dB is circular; a field of the other sense counts as 60 dB.", Figure: l, Indicative: s.Simulation.Response.Indicative}
}

func (r *Run) vswrChart(s *Sheet) Chart {
	per, _ := frequencyUnit(r.Problem.Band)
	vswr := s.sweep(func(w sweepRow) number { return w.VSWR })
	l := r.overFrequency(s, upward("VSWR", 1, 2.5, 10, s.inBand(vswr), r.limitValues(objectives.VSWR)))
	s.add(l, per, "VSWR", vswr)
	r.limits(l, objectives.VSWR)
	return Chart{Name: "vswr", Title: "VSWR against frequency", Figure: l, Indicative: s.Simulation.Response.Indicative,
		Caption: fmt.Sprintf("VSWR against %s Ω at the connector.", trimmed(s.Member.Design.Feed.Impedance, 2))}
}

// smithChart shows the port and, with a transformer, the connector.
func (r *Run) smithChart(s *Sheet) Chart {
	b, d := r.Problem.Band, &s.Member.Design
	c := &chart.Smith{Reference: d.Feed.Impedance}
	marks := [3]string{1: frequency(b.Mid(), b)}
	if b.From < b.To {
		marks[0], marks[2] = frequency(b.From, b), frequency(b.To, b)
	}
	samples := s.Simulation.Response.Samples
	trace := func(name string, of func(*models.Sample) complex128) {
		t := chart.Trace{Name: name, In: [2]int{s.Band[0], s.Band[2]}, Marks: marks}
		for i := range samples {
			t.Z = append(t.Z, of(&samples[i]))
		}
		c.Traces = append(c.Traces, t)
	}
	caption := "Impedance at the port: strong inside the band, thin outside."
	if d.Feed.Transformer.Impedance > 0 {
		trace("at the connector", func(a *models.Sample) complex128 { return a.Input })
		trace("at the port", func(a *models.Sample) complex128 { return a.Port })
		caption = "Impedance at the connector, after the line section, and at the port: strong inside the band, thin outside."
	} else {
		trace("at the port", func(a *models.Sample) complex128 { return a.Port })
	}
	for _, m := range r.Brief.Spec.Limits {
		if m.Figure == objectives.VSWR && !m.AtLeast {
			c.VSWR, c.Label = m.Value, limitMark(m)
		}
	}
	return Chart{Name: "impedance", Title: "Impedance on the Smith chart", Caption: caption, Figure: c, Indicative: s.Simulation.Response.Indicative}
}

// lawChart is how diameter and spacing run along the winding.
func (s *Sheet) lawChart() Chart {
	d := chart.Series{Name: "diameter of the centre line"}
	a := chart.Series{Name: "spacing a turn"}
	for _, p := range s.Laws {
		d.X, d.Y = append(d.X, p[0]), append(d.Y, p[1]*1e3)
		a.X, a.Y = append(a.X, p[0]), append(a.Y, p[2]*1e3)
	}
	_, high := extent(d.Y, a.Y)
	return Chart{
		Name: "laws", Title: "How the winding runs", Caption: "Diameter and spacing from the feed to the open end, the lead included.",
		Figure: &chart.Lines{
			X: chart.Axis{Label: "turns from the feed", Max: s.Member.Design.Turns}, Y: chart.Around("diameter and spacing, mm", 0, high), Series: []chart.Series{d, a},
		},
	}
}

// handChart sets the hand formulas' directivity beside the model's.
func (s *Sheet) handChart() Chart {
	mid := s.Simulation.row(&s.Simulation.Response.Samples[s.Band[1]])
	own := float64(mid.Directivity)
	d := &chart.Dots{Label: "directivity at mid-band, dBi", Mark: own, MarkName: fmt.Sprintf("%s: %s dBi", named(s.Simulation.Model), minus(fmt.Sprintf("%.2f", own)))}
	for _, f := range s.Simulation.handGains() {
		d.Rows = append(d.Rows, chart.Dot{Name: f.name, Value: f.value, Text: signed(f.value-own) + " dB"})
	}
	return Chart{Name: "hand-formulas", Title: "Hand formulas beside the model", Figure: d,
		Caption: "What the formulas of the books say of this winding, and how far they are from the simulation."}
}

// handGains are the hand formulas for gain.
func (s *Simulation) handGains() []struct {
	name  string
	value float64
} {
	return []struct {
		name  string
		value float64
	}{
		{"Kraus 1949", s.Hand.Kraus1949},
		{"Kraus later", s.Hand.KrausLate},
		{"King & Wong 1980", s.Hand.KingWong},
	}
}

// signed is a difference with its sign.
func signed(x float64) string {
	text := fmt.Sprintf("%+.2f", x)
	if text == "-0.00" {
		text = "+0.00"
	}
	return minus(text)
}

// extent is the least and the greatest of the values that are any.
func extent(lists ...[]float64) (low, high float64) {
	low, high = math.Inf(1), math.Inf(-1)
	for _, vs := range lists {
		for _, v := range vs {
			if !math.IsNaN(v) {
				low, high = math.Min(low, v), math.Max(high, v)
			}
		}
	}
	return low, high
}
