package report

import (
	"bytes"
	"encoding/json"
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"turnwise/cmd/internal/folder"
	"turnwise/objectives"
)

// aTable is a front of two, the second unchecked and with empty cells.
func aTable() *folder.Table {
	t := &folder.Table{Varied: []string{"turns", "diameter_1_m", "conductor"}}
	first := folder.Member{ID: "0123456789", Varied: []string{"8.25", "0.058", "2.0 mm copper"}, Model: "full-wave", Fidelity: "standard", Checked: true, Seed: 7}
	second := folder.Member{ID: "abcdef0123", Varied: []string{"3", "0.1", "12"}, Model: "closed-form", Seed: 1<<63 + 1}
	for f := range first.Figures {
		first.Figures[f], second.Figures[f] = float64(f)+0.5, math.NaN()
	}
	first.Figures[objectives.Length], first.Figures[objectives.Mass] = 0.28551, 0.0421
	t.Members = []folder.Member{first, second}
	return t
}

func TestFrontColumns(t *testing.T) {
	for _, x := range []struct {
		name string
		spec objectives.Spec
		want []objectives.Figure
	}{
		{"aims, limits, then the rest", objectives.Spec{
			Aims:   []objectives.Aim{{Figure: objectives.Widest}, {Figure: objectives.Gain, Most: true}},
			Limits: []objectives.Limit{{Figure: objectives.VSWR}},
		}, []objectives.Figure{objectives.Widest, objectives.Gain, objectives.VSWR, objectives.Length, objectives.Mass}},
		{"each once", objectives.Spec{
			Aims:   []objectives.Aim{{Figure: objectives.Gain, Most: true}, {Figure: objectives.Length}},
			Limits: []objectives.Limit{{Figure: objectives.Length}, {Figure: objectives.AxialRatio}},
		}, []objectives.Figure{objectives.Gain, objectives.Length, objectives.AxialRatio, objectives.Mass}},
		{"nothing asked", objectives.Spec{}, []objectives.Figure{objectives.Gain, objectives.Length, objectives.Mass}},
	} {
		if got := FrontColumns(&x.spec); !slices.Equal(got, x.want) {
			t.Errorf("%s: %v, want %v", x.name, got, x.want)
		}
	}
}

func TestWriteTable(t *testing.T) {
	var b bytes.Buffer
	if err := WriteTable(&b, aTable(), []objectives.Figure{objectives.Gain, objectives.Length, objectives.VSWR, objectives.Mass}); err != nil {
		t.Fatal(err)
	}
	want := "" +
		"id          turns  conductor      gain dBic  length mm  vswr  mass g\n" +
		"0123456789  8.25   2.0 mm copper  0.50       285.5      7.50  42.1\n" +
		"abcdef0123  3      12             –          –          –     –  unchecked\n"
	if got := b.String(); got != want {
		t.Errorf("table\n%s\nwant\n%s", got, want)
	}
	if err := WriteTable(&narrow{10}, aTable(), nil); !errors.Is(err, errFull) {
		t.Errorf("to a full disk: %v", err)
	}
}

// What the antenna stands on is bought as well.
func TestWriteTableOfGrounds(t *testing.T) {
	table := aTable()
	table.Varied[1], table.Varied[2] = "feed_height_m", "ground_diameter_m"
	table.Members[0].Varied[2], table.Members[1].Varied[2] = "0.15", "0.2"
	var b bytes.Buffer
	if err := WriteTable(&b, table, nil); err != nil {
		t.Fatal(err)
	}
	want := "id          turns  ground_diameter_m\n0123456789  8.25   0.15\nabcdef0123  3      0.2  unchecked\n"
	if got := b.String(); got != want {
		t.Errorf("table\n%s\nwant\n%s", got, want)
	}
}

func TestAmounts(t *testing.T) {
	for _, x := range []struct {
		figure   objectives.Figure
		x        float64
		amount   string
		quantity string
	}{
		{objectives.Gain, 12.3456, "12.35", "12.35 dBic"},
		{objectives.AxialRatio, 1.999, "2.00", "2.00 dB"},
		{objectives.VSWR, 1.5, "1.50", "1.50"},
		{objectives.GainBandwidth, 12.34, "12.3", "12.3 %"},
		{objectives.Beamwidth, 34.56, "34.6", "34.6 deg"},
		{objectives.Efficiency, 0.98765, "0.9877", "0.9877"},
		{objectives.Length, 0.28554, "285.5", "285.5 mm"},
		{objectives.WireLength, 1.50049, "1.500", "1.500 m"},
		{objectives.BendRadius, 0.0299, "29.9", "29.9 mm"},
		{objectives.Mass, 0.04216, "42.2", "42.2 g"},
		{objectives.Sidelobe, -12.5, "-12.50", "-12.50 dB"},
	} {
		if got := Amount(x.figure, x.x); got != x.amount {
			t.Errorf("%s: amount %q, want %q", x.figure, got, x.amount)
		}
		if got := Quantity(x.figure, x.x); got != x.quantity {
			t.Errorf("%s: quantity %q, want %q", x.figure, got, x.quantity)
		}
	}
	for f := range objectives.Figure(objectives.FigureCount) {
		if got, with := Amount(f, math.NaN()), Quantity(f, math.NaN()); got != "–" || with != "–" {
			t.Errorf("%s that does not apply is %q, with its unit %q", f, got, with)
		}
	}
}

// A front's JSON has the columns of front.csv, each once, under their names.
func TestTableJSON(t *testing.T) {
	table := aTable()
	var b bytes.Buffer
	if err := WriteTableJSON(&b, table); err != nil {
		t.Fatal(err)
	}
	d := json.NewDecoder(&b)
	d.UseNumber()
	var list []map[string]any
	if err := d.Decode(&list); err != nil {
		t.Fatal(err)
	}
	header, _, _ := strings.Cut(string(table.CSV(false)), "\n")
	for _, o := range list {
		wantKeys(t, "a member", o, strings.Split(header, ",")...)
	}
	number := func(s string) any { return json.Number(s) }
	for key, want := range map[string]any{
		"id": "0123456789", "turns": number("8.25"), "diameter_1_m": number("0.058"), "conductor": "2.0 mm copper", "gain_dbic": number("0.5"),
		"length_m": number("0.28551"), "model": "full-wave", "fidelity": "standard", "checked": true, "seed": number("7"),
	} {
		if list[0][key] != want {
			t.Errorf("%s is %v, want %v", key, list[0][key], want)
		}
	}
	// A stock's name stays a name though it looks like a number, a seed keeps
	// all its digits, and what does not apply is null.
	for key, want := range map[string]any{
		"conductor": "12", "seed": number("9223372036854775809"), "gain_dbic": nil, "bend_radius_m": nil, "fidelity": nil, "checked": false,
	} {
		if list[1][key] != want {
			t.Errorf("%s is %v, want %v", key, list[1][key], want)
		}
	}
}

func TestTableJSONOfNothing(t *testing.T) {
	var b bytes.Buffer
	if err := WriteTableJSON(&b, &folder.Table{}); err != nil || strings.TrimSpace(b.String()) != "[]" {
		t.Errorf("%q, %v", b.String(), err)
	}
	if err := WriteTableJSON(&narrow{3}, aTable()); !errors.Is(err, errFull) {
		t.Errorf("to a full disk: %v", err)
	}
}

// An empty cell of a varied quantity is not applicable: null, no empty text.
func TestTableJSONOfEmptyCells(t *testing.T) {
	table := aTable()
	table.Members[0].Varied = []string{"", "", ""}
	o := MemberJSON(table, &table.Members[0])
	if o["turns"] != nil || o["diameter_1_m"] != nil || o["conductor"] != "" {
		t.Errorf("turns %v, diameter %v, conductor %q", o["turns"], o["diameter_1_m"], o["conductor"])
	}
}
