// Package report is what a person reads of a run or a simulation: tables,
// text and JSON.
package report

import (
	"encoding/json"
	"fmt"
	"io"
	"math"
	"slices"
	"text/tabwriter"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
)

// Simulation is one design's answer with all that is shown beside it.
type Simulation struct {
	Design   models.Design
	Model    string
	Fidelity string
	Response models.Response
	Geometry helix.Geometry
	Figures  objectives.Row
	// ExcessPhase is E at the band's upper end.
	ExcessPhase float64
	// Hand holds the hand formulas' figures at mid-band.
	Hand HandFigures
	// DesignJSON is the design in the form of a design file's keys.
	DesignJSON any
	// Warnings of the program's own, before the model's.
	Warnings []string
}

// HandFigures are the figures of the published hand formulas.
type HandFigures struct {
	Kraus1949    float64
	KrausLate    float64
	KingWong     float64
	BeamwidthDeg float64
	AxialRatioDB float64
	Resistance   float64
}

// MarshalJSON writes null where a formula, far outside its range, has no
// number to give.
func (h HandFigures) MarshalJSON() ([]byte, error) {
	return json.Marshal(struct {
		Kraus1949    number `json:"kraus_1949_dbi"`
		KrausLate    number `json:"kraus_late_dbi"`
		KingWong     number `json:"king_wong_dbi"`
		BeamwidthDeg number `json:"beamwidth_deg"`
		AxialRatioDB number `json:"axial_ratio_db"`
		Resistance   number `json:"resistance_ohm"`
	}{number(h.Kraus1949), number(h.KrausLate), number(h.KingWong), number(h.BeamwidthDeg), number(h.AxialRatioDB), number(h.Resistance)})
}

// number is a JSON number, or null where it does not apply.
type number float64

// known reports whether it is a number.
func (n number) known() bool { return !math.IsNaN(float64(n)) && !math.IsInf(float64(n), 0) }

func (n number) MarshalJSON() ([]byte, error) {
	if !n.known() {
		return []byte("null"), nil
	}
	return json.Marshal(float64(n))
}

// sweepRow is one frequency, as simulate --json writes it.
type sweepRow struct {
	Hz              float64 `json:"frequency_hz"`
	R               number  `json:"resistance_ohm"`
	X               number  `json:"reactance_ohm"`
	InR             number  `json:"input_resistance_ohm"`
	InX             number  `json:"input_reactance_ohm"`
	VSWR            number  `json:"vswr"`
	Directivity     number  `json:"directivity_dbi"`
	PeakDirectivity number  `json:"peak_directivity_dbi"`
	Gain            number  `json:"gain_dbic"`
	RealisedGain    number  `json:"realised_gain_dbic"`
	AxialRatio      number  `json:"axial_ratio_db"`
	Sense           string  `json:"sense"`
	Efficiency      number  `json:"efficiency"`
	Beamwidth       number  `json:"beamwidth_deg"`
	Sidelobe        number  `json:"sidelobe_db"`
	FrontToBack     number  `json:"front_to_back_db"`
	PortSpread      number  `json:"port_spread_pct"`
	PowerBalance    number  `json:"power_balance"`
}

// rows reads the sweep of a simulation.
func (s *Simulation) rows() []sweepRow {
	out := make([]sweepRow, len(s.Response.Samples))
	for i := range out {
		out[i] = s.row(&s.Response.Samples[i])
	}
	return out
}

func (s *Simulation) row(a *models.Sample) sweepRow {
	none := number(math.NaN())
	wanted := s.Design.Wanted()
	vswr := models.VSWR(a.Input, s.Design.Feed.Impedance)
	gain := objectives.Decibels(a.Gain.Of(wanted))
	r := sweepRow{
		Hz: a.Hz,
		R:  number(real(a.Port)), X: number(imag(a.Port)),
		InR: number(real(a.Input)), InX: number(imag(a.Input)),
		VSWR: number(vswr), Gain: number(gain),
		RealisedGain: number(gain + objectives.Decibels(objectives.Transmission(vswr))),
		Directivity:  number(objectives.Decibels(a.Directivity)),
		AxialRatio:   number(a.AxialRatio), Efficiency: number(a.Efficiency),
		PeakDirectivity: none, Beamwidth: none, Sidelobe: none, FrontToBack: none, PortSpread: none, PowerBalance: none,
		Sense: senseWord(a.Sense),
	}
	has := s.Response.Answered
	if has&models.Cuts != 0 {
		r.PeakDirectivity = number(objectives.Decibels(a.PeakDirectivity))
		r.Beamwidth = number(a.Beamwidth * 180 / math.Pi)
		r.Sidelobe = number(a.Sidelobe)
		if a.RearGain > 0 {
			r.FrontToBack = number(gain - objectives.Decibels(a.RearGain))
		}
	}
	if has&models.Balance != 0 {
		r.PowerBalance = number(a.PowerBalance)
	}
	if has&models.Spread != 0 {
		r.PortSpread = number(models.PortSpread(a))
	}
	return r
}

func senseWord(s models.Sense) string {
	if s == 0 {
		return "linear"
	}
	return s.String()
}

// WriteJSON writes the object that simulate --json promises.
func (s *Simulation) WriteJSON(w io.Writer) error {
	figures := map[string]number{}
	for f, x := range s.Figures {
		figures[objectives.Figures[f].Column] = number(x)
	}
	g := s.Geometry
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	return e.Encode(struct {
		Design   any               `json:"design"`
		Model    string            `json:"model"`
		Fidelity *string           `json:"fidelity"`
		Figures  map[string]number `json:"figures"`
		Geometry map[string]number `json:"geometry"`
		Warnings []string          `json:"warnings"`
		Hand     HandFigures       `json:"hand_formulas"`
		Sweep    []sweepRow        `json:"sweep"`
	}{
		Design: s.DesignJSON, Model: s.Model, Fidelity: orNull(s.Fidelity), Figures: figures,
		Geometry: map[string]number{
			"length_m": number(g.Length), "wire_length_m": number(g.WireLength), "widest_m": number(g.Widest),
			"mass_kg": number(g.Mass), "bend_radius_m": number(g.BendRadius), "excess_phase": number(s.ExcessPhase),
		},
		Warnings: append([]string{}, s.warnings()...), Hand: s.Hand, Sweep: s.rows(),
	})
}

func orNull(text string) *string {
	if text == "" {
		return nil
	}
	return &text
}

// warnings are the program's, the model's, and its statement last.
func (s *Simulation) warnings() []string {
	return append(append(append([]string{}, s.Warnings...), s.Response.Warnings...), s.Response.Statement)
}

// WriteText writes the simulation for a person.
func (s *Simulation) WriteText(w io.Writer) error {
	g := s.Geometry
	d := &s.Design
	fmt.Fprintf(w, "%s: %.4g turns, %s-handed, %s conductor %.4g mm\n", titleOr(d.Title, "design"), d.Turns, d.Handedness, d.Conductor.Material.Name, d.Conductor.Diameter*1e3)
	fmt.Fprintf(w, "on %s\n", GroundWords(d.Ground))
	fmt.Fprintf(w, "length %.1f mm, widest %.1f mm, wire %.4g m, mass %s, least bend radius %.1f mm\n",
		g.Length*1e3, g.Widest*1e3, g.WireLength, massWords(g), g.BendRadius*1e3)
	fmt.Fprintf(w, "excess phase %.2f at the band's upper end (gain peaks at 0.3 to 0.5 and falls off a cliff past 0.6)\n\n", s.ExcessPhase)
	mark := ""
	if s.Response.Indicative {
		mark = "*"
	}
	if err := s.writeSweep(w, mark); err != nil {
		return err
	}
	if mark != "" {
		fmt.Fprintf(w, "* indicative only\n")
	}
	s.writeHand(w)
	for _, warning := range append(append([]string{}, s.Warnings...), s.Response.Warnings...) {
		fmt.Fprintf(w, "warning: %s\n", warning)
	}
	_, err := fmt.Fprintf(w, "%s\n", s.Response.Statement)
	return err
}

// writeSweep is a row a frequency; the front to back ratio has a column where
// anything has a rear.
func (s *Simulation) writeSweep(w io.Writer, mark string) error {
	rows := s.rows()
	rear := slices.ContainsFunc(rows, func(r sweepRow) bool { return r.FrontToBack.known() })
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', tabwriter.AlignRight)
	optional := func(text string) string {
		if !rear {
			return ""
		}
		return text + "\t"
	}
	fmt.Fprintf(t, "MHz\tgain dBic\trealised%s\tAR dB%s\tsense\tVSWR%s\tport Ω%s\tefficiency\tbeamwidth°\tsidelobe dB\t%sbalance\t\n", mark, mark, mark, mark, optional("front/back dB"))
	for _, r := range rows {
		fmt.Fprintf(t, "%.6g\t%s\t%s\t%s\t%s\t%s\t%s\t%s\t%s\t%s\t%s%s\t\n", r.Hz/1e6, short(r.Gain, 2), short(r.RealisedGain, 2), short(r.AxialRatio, 2),
			r.Sense, short(r.VSWR, 2), ohms(r.R, r.X), short(r.Efficiency, 4), short(r.Beamwidth, 1), short(r.Sidelobe, 1), optional(short(r.FrontToBack, 1)), short(r.PowerBalance, 4))
	}
	return t.Flush()
}

// massWords is the whole mass, and what the conductor has of it where a plate
// or cup has the rest.
func massWords(g helix.Geometry) string {
	text := fmt.Sprintf("%.4g g", g.Mass*1e3)
	if g.ConductorMass < g.Mass {
		text += fmt.Sprintf(" (the conductor %.4g g)", g.ConductorMass*1e3)
	}
	return text
}

// writeHand sets the hand formulas beside the model's mid-band answer.
func (s *Simulation) writeHand(w io.Writer) {
	mid := s.row(&s.Response.Samples[len(s.Response.Samples)/2])
	fmt.Fprintf(w, "\nhand formulas at mid-band, and how far they are from this answer:\n")
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	line := func(name string, x float64, unit string, answer number) {
		difference := "–"
		if away := number(x) - answer; away.known() {
			difference = fmt.Sprintf("%+.2f", float64(away))
		}
		fmt.Fprintf(t, "  %s\t%s %s\t%s\n", name, short(number(x), 2), unit, difference)
	}
	line("Kraus 1949, 15 C²NS", s.Hand.Kraus1949, "dBi", mid.Directivity)
	line("Kraus later, 12 C²NS", s.Hand.KrausLate, "dBi", mid.Directivity)
	line("King & Wong 1980", s.Hand.KingWong, "dBi", mid.Directivity)
	line("beamwidth (Kraus)", s.Hand.BeamwidthDeg, "°", mid.Beamwidth)
	line("axial ratio (Kraus)", s.Hand.AxialRatioDB, "dB", mid.AxialRatio)
	line("resistance (Kraus)", s.Hand.Resistance, "Ω", mid.R)
	t.Flush()
	fmt.Fprintln(w)
}

func short(x number, digits int) string {
	if !x.known() {
		return "–"
	}
	return fmt.Sprintf("%.*f", digits, float64(x))
}

// ohms is an impedance as a person reads it.
func ohms(r, x number) string {
	if !r.known() || !x.known() {
		return "–"
	}
	return fmt.Sprintf("%.1f %+.1fj", float64(r), float64(x))
}

func titleOr(title, otherwise string) string {
	if title == "" {
		return otherwise
	}
	return title
}
