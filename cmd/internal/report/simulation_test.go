package report

import (
	"bytes"
	"encoding/json"
	"errors"
	"maps"
	"math"
	"slices"
	"strings"
	"testing"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
)

// answered is a simulation of one frequency whose every number can be worked
// out in the head: 100 Ω on 50 Ω is a VSWR of 2, of which 8/9 pass.
func answered() *Simulation {
	s := &Simulation{
		Design: models.Design{
			Title: "test", Turns: 8.25, Handedness: models.Right,
			Conductor: models.Conductor{Diameter: 0.002, Material: models.Material{Name: "copper"}},
			Feed:      models.Feed{Impedance: 50},
		},
		Model: "full-wave", Fidelity: "standard",
		Geometry:    helix.Geometry{Length: 0.2855, WireLength: 1.5, Widest: 0.06, Mass: 0.042, ConductorMass: 0.042, BendRadius: 0.03},
		ExcessPhase: 0.35,
		Hand:        HandFigures{Kraus1949: 15.3, KrausLate: 14.4, KingWong: 13.2, BeamwidthDeg: 34.5, AxialRatioDB: 0.424, Resistance: 150},
		DesignJSON:  map[string]any{"turns": 8.25},
		Warnings:    []string{"the program's"},
	}
	s.Response = models.Response{
		Answered: models.Axis | models.Cuts | models.Balance | models.Spread,
		Samples: []models.Sample{{
			Hz: 1.68e9, Port: complex(120, -30), Input: 100, Gain: models.Circular{Right: 10, Left: 0.1},
			AxialRatio: 1.25, Sense: models.Right, Directivity: 20, Efficiency: 0.99,
			PeakDirectivity: 40, Beamwidth: math.Pi / 6, Sidelobe: -12.5, RearGain: 0.1,
			PowerBalance: 1.0005, SpreadPort: complex(120, -18),
		}},
		Warnings: []string{"the model's"}, Statement: "thin wire on an infinite plane",
	}
	for f := range s.Figures {
		s.Figures[f] = float64(f)
	}
	return s
}

// object is what WriteJSON wrote, read again.
func object(t *testing.T, s *Simulation) map[string]any {
	t.Helper()
	var b bytes.Buffer
	if err := s.WriteJSON(&b); err != nil {
		t.Fatal(err)
	}
	var o map[string]any
	if err := json.Unmarshal(b.Bytes(), &o); err != nil {
		t.Fatal(err)
	}
	return o
}

func keysOf(o any) []string { return slices.Sorted(maps.Keys(o.(map[string]any))) }

func wantKeys(t *testing.T, what string, o any, want ...string) {
	t.Helper()
	slices.Sort(want)
	if got := keysOf(o); !slices.Equal(got, want) {
		t.Errorf("%s has the keys %v, want %v", what, got, want)
	}
}

func TestSimulationJSONHasTheContractsKeys(t *testing.T) {
	o := object(t, answered())
	wantKeys(t, "the object", o, "design", "model", "fidelity", "figures", "geometry", "warnings", "hand_formulas", "sweep")
	wantKeys(t, "geometry", o["geometry"], "length_m", "wire_length_m", "widest_m", "mass_kg", "bend_radius_m", "excess_phase")
	wantKeys(t, "hand_formulas", o["hand_formulas"], "kraus_1949_dbi", "kraus_late_dbi", "king_wong_dbi", "beamwidth_deg", "axial_ratio_db", "resistance_ohm")
	wantKeys(t, "a sweep's row", o["sweep"].([]any)[0], "frequency_hz", "resistance_ohm", "reactance_ohm", "input_resistance_ohm",
		"input_reactance_ohm", "vswr", "directivity_dbi", "peak_directivity_dbi", "gain_dbic", "realised_gain_dbic", "axial_ratio_db",
		"sense", "efficiency", "beamwidth_deg", "sidelobe_db", "front_to_back_db", "port_spread_pct", "power_balance")
	wantKeys(t, "figures", o["figures"], "gain_dbic", "realised_gain_dbic", "axial_ratio_db", "axial_ratio_cone_db", "edge_gain_dbic",
		"gain_bandwidth_pct", "headroom_pct", "vswr", "vswr_bandwidth_pct", "beamwidth_deg", "sidelobe_db", "efficiency", "front_to_back_db",
		"length_m", "widest_m", "wire_length_m", "mass_kg", "bend_radius_m")
	if got := o["warnings"]; !slices.Equal(got.([]any), []any{"the program's", "the model's", "thin wire on an infinite plane"}) {
		t.Errorf("warnings %q", got)
	}
	if o["model"] != "full-wave" || o["fidelity"] != "standard" || o["design"].(map[string]any)["turns"] != 8.25 {
		t.Errorf("object %v", o)
	}
}

func TestSimulationJSONValues(t *testing.T) {
	o := object(t, answered())
	row := o["sweep"].([]any)[0].(map[string]any)
	for key, want := range map[string]float64{
		"frequency_hz": 1.68e9, "resistance_ohm": 120, "reactance_ohm": -30, "input_resistance_ohm": 100, "input_reactance_ohm": 0,
		"vswr": 2, "gain_dbic": 10, "realised_gain_dbic": 10 + 10*math.Log10(8.0/9), "axial_ratio_db": 1.25, "efficiency": 0.99,
		"directivity_dbi": 10 * math.Log10(20), "peak_directivity_dbi": 10 * math.Log10(40), "beamwidth_deg": 30, "sidelobe_db": -12.5,
		"front_to_back_db": 20, "power_balance": 1.0005, "port_spread_pct": 1200 / math.Hypot(120, 30),
	} {
		if got, ok := row[key].(float64); !ok || math.Abs(got-want) > 1e-12*(1+math.Abs(want)) {
			t.Errorf("%s is %v, want %v", key, row[key], want)
		}
	}
	if row["sense"] != "right" {
		t.Errorf("sense %v", row["sense"])
	}
	for key, want := range map[string]float64{"length_m": 0.2855, "wire_length_m": 1.5, "widest_m": 0.06, "mass_kg": 0.042, "bend_radius_m": 0.03, "excess_phase": 0.35} {
		if got := o["geometry"].(map[string]any)[key]; got != want {
			t.Errorf("%s is %v, want %v", key, got, want)
		}
	}
	if got := o["hand_formulas"].(map[string]any)["king_wong_dbi"]; got != 13.2 {
		t.Errorf("King & Wong %v", got)
	}
	if got := o["figures"].(map[string]any)["vswr"]; got != float64(objectives.VSWR) {
		t.Errorf("figure vswr is %v", got)
	}
}

// Gain and its kin are read in the sense that is wanted, not in the
// winding's own.
func TestSimulationOfTheOtherSense(t *testing.T) {
	s := answered()
	s.Design.Sense, s.Response.Samples[0].Sense = models.Left, models.Left
	row := object(t, s)["sweep"].([]any)[0].(map[string]any)
	if gain := row["gain_dbic"].(float64); math.Abs(gain+10) > 1e-12 || row["front_to_back_db"] != 0.0 || row["sense"] != "left" {
		t.Errorf("row %v", row)
	}
	s.Response.Samples[0].Sense = 0
	if got := object(t, s)["sweep"].([]any)[0].(map[string]any)["sense"]; got != "linear" {
		t.Errorf("sense %v", got)
	}
}

// What was not asked of the model is null, not a zero that looks like an
// answer.
func TestUnansweredIsNull(t *testing.T) {
	for _, x := range []struct {
		answered models.Outputs
		null     []string
	}{
		{models.Axis, []string{"peak_directivity_dbi", "beamwidth_deg", "sidelobe_db", "front_to_back_db", "port_spread_pct", "power_balance"}},
		{models.Axis | models.Cuts, []string{"port_spread_pct", "power_balance"}},
		{models.Axis | models.Balance, []string{"peak_directivity_dbi", "beamwidth_deg", "sidelobe_db", "front_to_back_db", "port_spread_pct"}},
		{models.Axis | models.Spread, []string{"peak_directivity_dbi", "beamwidth_deg", "sidelobe_db", "front_to_back_db", "power_balance"}},
	} {
		s := answered()
		s.Response.Answered = x.answered
		row := object(t, s)["sweep"].([]any)[0].(map[string]any)
		for key, v := range row {
			if (v == nil) != slices.Contains(x.null, key) {
				t.Errorf("answered %b: %s is %v", x.answered, key, v)
			}
		}
	}
	s := answered()
	s.Response.Samples[0].RearGain = 0 // an infinite plane has no rear
	s.Fidelity = ""
	o := object(t, s)
	if row := o["sweep"].([]any)[0].(map[string]any); row["front_to_back_db"] != nil || row["sidelobe_db"] == nil {
		t.Errorf("row %v", row)
	}
	if o["fidelity"] != nil {
		t.Errorf("fidelity %v", o["fidelity"])
	}
}

// baseless is a simulation none of whose numbers is one.
func baseless(x float64) *Simulation {
	s := answered()
	for f := range s.Figures {
		s.Figures[f] = x
	}
	s.Geometry = helix.Geometry{Length: x, WireLength: x, Widest: x, Mass: x, BendRadius: x}
	s.ExcessPhase = x
	s.Hand = HandFigures{x, x, x, x, x, x}
	s.Response.Samples = []models.Sample{{
		Hz: 1e9, Port: complex(x, x), Input: complex(x, x), Gain: models.Circular{Right: x, Left: x}, AxialRatio: x,
		Directivity: x, Efficiency: x, PeakDirectivity: x, Beamwidth: x, Sidelobe: x, RearGain: x, PowerBalance: x, SpreadPort: complex(x, x),
	}}
	return s
}

func TestSimulationHoldsNoNaN(t *testing.T) {
	for _, x := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		s := baseless(x)
		o := object(t, s)
		for key, v := range o["figures"].(map[string]any) {
			if v != nil {
				t.Errorf("%s is %v", key, v)
			}
		}
		for key, v := range o["hand_formulas"].(map[string]any) {
			if v != nil {
				t.Errorf("%s is %v", key, v)
			}
		}
		// A winding's geometry is always a number: a person reads it as such.
		s.Geometry, s.ExcessPhase = answered().Geometry, answered().ExcessPhase
		var b bytes.Buffer
		if err := s.WriteText(&b); err != nil {
			t.Fatal(err)
		}
		for _, word := range []string{"NaN", "Inf"} {
			if strings.Contains(b.String(), word) {
				t.Errorf("%v is written:\n%s", x, b.String())
			}
		}
	}
}

func TestSimulationText(t *testing.T) {
	s := answered()
	var b bytes.Buffer
	if err := s.WriteText(&b); err != nil {
		t.Fatal(err)
	}
	text := b.String()
	for _, want := range []string{
		"test: 8.25 turns, right-handed, copper conductor 2 mm\non an infinite ground plane\n",
		"length 285.5 mm, widest 60.0 mm, wire 1.5 m, mass 42 g, least bend radius 30.0 mm\n",
		"excess phase 0.35 ",
		"warning: the program's\nwarning: the model's\nthin wire on an infinite plane\n",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("nothing of %q in\n%s", want, text)
		}
	}
	for _, want := range [][]string{
		{"1680", "10.00", "9.49", "1.25", "right", "2.00", "120.0", "-30.0j", "0.9900", "30.0", "-12.5", "20.0", "1.0005"},
		{"Kraus", "1949,", "15", "C²NS", "15.30", "dBi", "+2.29"},
		{"King", "&", "Wong", "1980", "13.20", "dBi", "+0.19"},
		{"beamwidth", "(Kraus)", "34.50", "°", "+4.50"},
		{"resistance", "(Kraus)", "150.00", "Ω", "+30.00"},
	} {
		if !slices.ContainsFunc(strings.Split(text, "\n"), func(line string) bool { return slices.Equal(strings.Fields(line), want) }) {
			t.Errorf("no line %q in\n%s", want, text)
		}
	}
	if strings.Contains(text, "indicative") || strings.Contains(text, "*") {
		t.Errorf("marked as indicative:\n%s", text)
	}
}

// Without a rear there is no column for front to back.
func TestSimulationTextWithoutARear(t *testing.T) {
	s := answered()
	s.Response.Samples[0].RearGain = 0
	var b bytes.Buffer
	if err := s.WriteText(&b); err != nil {
		t.Fatal(err)
	}
	if text := b.String(); strings.Contains(text, "front/back") || !strings.Contains(text, "-12.5   1.0005") {
		t.Errorf("the sweep is\n%s", text)
	}
}

func TestIndicativeIsMarked(t *testing.T) {
	s := answered()
	s.Design.Title = ""
	s.Response.Indicative, s.Response.Answered = true, models.Axis
	var b bytes.Buffer
	if err := s.WriteText(&b); err != nil {
		t.Fatal(err)
	}
	text := b.String()
	for _, want := range []string{"design: 8.25 turns", "VSWR*", "AR dB*", "realised*", "port Ω*", "* indicative only\n"} {
		if !strings.Contains(text, want) {
			t.Errorf("nothing of %q in\n%s", want, text)
		}
	}
	if strings.Contains(text, "gain dBic*") || !strings.Contains(text, "–") {
		t.Errorf("gain is marked, or what was not answered is shown:\n%s", text)
	}
}

// narrow takes so many bytes and no more.
type narrow struct{ left int }

var errFull = errors.New("full")

func (n *narrow) Write(p []byte) (int, error) {
	if len(p) > n.left {
		return n.left, errFull
	}
	n.left -= len(p)
	return len(p), nil
}

// Whoever cannot be written to, wherever it stops, the error comes back.
func TestFailedWritesAreTold(t *testing.T) {
	s := answered()
	var b bytes.Buffer
	if err := s.WriteText(&b); err != nil {
		t.Fatal(err)
	}
	for _, left := range []int{0, b.Len() - 1} {
		if err := s.WriteText(&narrow{left}); !errors.Is(err, errFull) {
			t.Errorf("%d bytes of text: %v", left, err)
		}
	}
	b.Reset()
	if err := s.WriteJSON(&b); err != nil {
		t.Fatal(err)
	}
	for _, left := range []int{0, b.Len() - 1} {
		if err := s.WriteJSON(&narrow{left}); !errors.Is(err, errFull) {
			t.Errorf("%d bytes of JSON: %v", left, err)
		}
	}
}
