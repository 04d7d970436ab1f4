package report

import (
	"fmt"
	"math"
	"strings"

	"turnwise/configs"
	"turnwise/models"
	"turnwise/objectives"
)

// sheetView is one design's sheet.
type sheetView struct {
	ID, Title, Roles string
	Number, Of       int
	Short            string // for the list of sheets
	Figures          []figureRow
	Dimensions       []pair
	Side, Feed       *figureView // the drawings
	Charts           []figureView
	Hand             []handRow
	HandModel        string
	Balance          []pair
	Warnings         []string
	Statement        string
	Repeats          bool // the first sheet states the same
	Indicative       bool
	Tolerance        *toleranceView
	Err              string
	File             string // the design file's text
	Previous, Next   string
}

// figureRow is a figure beside what was asked of it.
type figureRow struct{ Name, Value, Asked, Spare string }

// handRow is a hand formula beside the model.
type handRow struct{ Name, Hand, Own, Difference string }

func (r *Run) sheetView(i int) sheetView {
	s := &r.Sheets[i]
	m := s.Member
	d := m.Design
	d.Title = titleOr(r.Brief.Spec.Title, m.ID)
	v := sheetView{
		ID: m.ID, Number: i + 1, Of: len(r.Sheets), Roles: strings.Join(r.roles(m.ID), ", "), Figures: r.figureRows(s), Dimensions: dimensions(s),
		Err: s.Err, Tolerance: s.toleranceView(), File: string(configs.WriteDesign(d)),
	}
	v.Short = r.short(s)
	if i > 0 {
		v.Previous = r.Sheets[i-1].Member.ID
	}
	if i+1 < len(r.Sheets) {
		v.Next = r.Sheets[i+1].Member.ID
	}
	for _, c := range r.sheetCharts(s) {
		switch figure := c.view(); c.Name {
		case sideName:
			v.Side = &figure
		case feedName:
			v.Feed = &figure
		case toleranceName:
			v.Tolerance.Chart = &figure
		default:
			v.Charts = append(v.Charts, figure)
		}
	}
	if s.Simulation != nil {
		v.Hand, v.HandModel, v.Balance = s.handRows(), named(s.Simulation.Model), s.balance()
		v.Statement, v.Indicative = s.Simulation.Response.Statement, s.Simulation.Response.Indicative
		v.Repeats = i > 0 && r.Sheets[0].Simulation != nil && r.Sheets[0].Simulation.Response.Statement == v.Statement
		v.Warnings = append(append([]string{}, s.Simulation.Warnings...), s.Simulation.Response.Warnings...)
	}
	return v
}

// roles say why a design has a sheet.
func (r *Run) roles(id string) []string {
	var roles []string
	t := r.listed()
	for i := range t.Members {
		if t.Members[i].ID == id {
			roles = r.notes(&t.Members[i])
		}
	}
	if r.empty() {
		return roles
	}
	for _, a := range r.Problem.Aims {
		if r.aimTile(a).Note == id {
			roles = append(roles, aimWords(a))
		}
	}
	return roles
}

// short is a design in a few words: its aims' figures.
func (r *Run) short(s *Sheet) string {
	var parts []string
	for _, a := range r.Problem.Aims {
		parts = append(parts, said(a.Figure, s.Member.Figures[a.Figure]))
	}
	return strings.Join(parts, " · ")
}

// figureRows are all figures of the front's row, those that were judged with
// what was asked.
func (r *Run) figureRows(s *Sheet) []figureRow {
	var rows []figureRow
	for f := range objectives.Figures {
		f := objectives.Figure(f)
		x := s.Member.Figures[f]
		if math.IsNaN(x) {
			continue
		}
		row := figureRow{Name: figureName(f), Value: said(f, x)}
		var asked, spare []string
		for _, a := range r.Problem.Aims {
			if a.Figure == f {
				asked = append(asked, map[bool]string{true: "most", false: "least"}[a.Most])
			}
		}
		for _, l := range r.Problem.Limits {
			if l.Figure != f {
				continue
			}
			asked, spare = append(asked, boundMark(l)), append(spare, roomWords(f, room(l, x)))
		}
		row.Asked, row.Spare = strings.Join(asked, ", "), strings.Join(spare, ", ")
		rows = append(rows, row)
	}
	return rows
}

// dimensions are what a workshop sets.
func dimensions(s *Sheet) []pair {
	d := &s.Member.Design
	conductor := d.Conductor.Stock
	size := millimetres(d.Conductor.Diameter)
	if d.Conductor.Wall > 0 {
		size += ", wall " + millimetres(d.Conductor.Wall)
	}
	if conductor == "" {
		conductor = d.Conductor.Material.Name
	}
	ps := []pair{
		{"turns", trimmed(d.Turns, 3)},
		{"diameter of the centre line", lawWords(d.Diameter)},
		{"spacing a turn", lawWords(d.Spacing)},
		{"winding", fmt.Sprintf("%s-handed, %s", d.Handedness, threadWords(d.Handedness))},
		{"conductor", conductor + " (" + size + ")"},
	}
	if d.Insulation.Thickness > 0 {
		ps = append(ps, pair{"coat", fmt.Sprintf("%s, permittivity %s", millimetres(d.Insulation.Thickness), trimmed(d.Insulation.Permittivity, 3))})
	}
	ps = append(ps, pair{"feed height", millimetres(d.Feed.Height)})
	if d.Feed.Pin > 0 {
		ps = append(ps, pair{"pin", millimetres(d.Feed.Pin)})
	}
	if l := d.Feed.Lead; l.Turns > 0 {
		shape := l.Shape
		if shape == "" {
			shape = models.Ramp
		}
		ps = append(ps, pair{"lead", fmt.Sprintf("%s turns from %s a turn, %s", trimmed(l.Turns, 3), millimetres(l.Spacing), shape)})
	}
	if t := d.Feed.Strip; t.Turns > 0 {
		ps = append(ps, pair{"strip", fmt.Sprintf("%s turns, %s wide", trimmed(t.Turns, 3), millimetres(t.Width))})
	}
	if t := d.Feed.Transformer; t.Impedance > 0 {
		ps = append(ps, pair{"line section", fmt.Sprintf("%s Ω, %s", trimmed(t.Impedance, 2), millimetres(t.Length))})
	}
	ps = append(ps, pair{"stands on", GroundWords(d.Ground)})
	if s.Simulation != nil {
		ps = append(ps, pair{"excess phase at the band's upper end", trimmed(s.Simulation.ExcessPhase, 2)})
	}
	return ps
}

// handRows set the hand formulas beside mid-band's answer.
func (s *Sheet) handRows() []handRow {
	sim := s.Simulation
	mid := sim.row(&sim.Response.Samples[s.Band[1]])
	row := func(name string, hand float64, own number, digits int, unit string) handRow {
		h := handRow{Name: name, Hand: minus(fmt.Sprintf("%.*f%s", digits, hand, unit)), Own: "–", Difference: "–"}
		if !math.IsNaN(float64(own)) {
			h.Own = minus(fmt.Sprintf("%.*f%s", digits, float64(own), unit))
			h.Difference = minus(fmt.Sprintf("%+.*f%s", digits, hand-float64(own), strings.Replace(unit, "dBi", "dB", 1)))
		}
		return h
	}
	return []handRow{
		row("Kraus 1949, 15 C²NS", sim.Hand.Kraus1949, mid.Directivity, 2, " dBi"),
		row("Kraus later, 12 C²NS", sim.Hand.KrausLate, mid.Directivity, 2, " dBi"),
		row("King & Wong 1980, peak", sim.Hand.KingWong, mid.Directivity, 2, " dBi"),
		row("beamwidth, Kraus", sim.Hand.BeamwidthDeg, mid.Beamwidth, 1, "°"),
		row("axial ratio, Kraus", sim.Hand.AxialRatioDB, mid.AxialRatio, 2, " dB"),
		row("resistance, Kraus", sim.Hand.Resistance, mid.R, 1, " Ω"),
	}
}

// balance is what speaks for the simulation itself, the worst of the band.
func (s *Sheet) balance() []pair {
	rows := s.Simulation.rows()[s.Band[0] : s.Band[2]+1]
	worst := func(of func(sweepRow) float64) float64 {
		at := math.NaN()
		for _, w := range rows {
			if x := of(w); math.IsNaN(at) || x > at {
				at = x
			}
		}
		return at
	}
	var ps []pair
	off := worst(func(w sweepRow) float64 { return math.Abs(float64(w.PowerBalance) - 1) })
	if !math.IsNaN(off) {
		into := ""
		if s.Member.Design.Ground.Finite() {
			into = " in all directions"
		}
		ps = append(ps, pair{"power balance", fmt.Sprintf("power radiated%s and power lost account for the accepted power to %.3f %% at every frequency of the band", into, 100*off)})
	}
	lost := worst(func(w sweepRow) float64 { return 1 - float64(w.Efficiency) })
	ps = append(ps, pair{"lost in the conductor", fmt.Sprintf("at most %.2f %% of the accepted power", 100*lost)})
	spread := worst(func(w sweepRow) float64 { return float64(w.PortSpread) })
	if !math.IsNaN(spread) {
		ps = append(ps, pair{"port spread", fmt.Sprintf("the impedance moves by %.1f %% when the voltage is spread over the riser: what the port's model is worth", spread)})
	}
	return ps
}
