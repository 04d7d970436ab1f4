package folder

import (
	"bytes"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/objectives"
)

// figureHeader is the contract of the columns that are always there.
const figureHeader = "gain_dbic,realised_gain_dbic,axial_ratio_db,axial_ratio_cone_db,edge_gain_dbic,gain_bandwidth_pct,headroom_pct," +
	"vswr,vswr_bandwidth_pct,beamwidth_deg,sidelobe_db,efficiency,front_to_back_db," +
	"length_m,widest_m,wire_length_m,mass_kg,bend_radius_m,model,fidelity,checked,seed"

// One row of every kind of cell, byte for byte.
func TestCSV(t *testing.T) {
	nan := math.NaN()
	table := &Table{
		Varied: []string{"turns", "diameter_1_m", "spacing_1_m", "conductor", "feed_height_m"},
		Members: []Member{
			{
				ID: "0123456789", Varied: []string{"8.25", "0.058", "0.034", "2.0 mm copper", "0.005"},
				Figures: objectives.Row{
					12.34567891, -0.5, 60, nan, math.Inf(-1), 20, 0, 1000, 7.25, 33.3333333333, -60, 0.99, nan,
					0.285500000001, 0.06, 1.52e-7, 123456789, 0.0299999996,
				},
				Model: "full-wave", Fidelity: "standard", Checked: true, Seed: 18446744073709551615,
			},
			{ID: "abcdef0123", Varied: []string{"3", "0.1", "0.034", `rod, 1/8"`, ""}, Figures: nothing(), Model: "closed-form", Violation: 0.123456789},
		},
	}
	front := "id,turns,diameter_1_m,spacing_1_m,conductor,feed_height_m," + figureHeader + "\n" +
		"0123456789,8.25,0.058,0.034,2.0 mm copper,0.005," +
		"12.34568,-0.5,60,,,20,0,1000,7.25,33.33333,-60,0.99,,0.2855,0.06,0.000000152,123456800,0.03," +
		"full-wave,standard,true,18446744073709551615\n" +
		`abcdef0123,3,0.1,0.034,"rod, 1/8""",,` + strings.Repeat(",", objectives.FigureCount) + "closed-form,,false,0\n"
	if got := string(table.CSV(false)); got != front {
		t.Errorf("front.csv\n%s\nwant\n%s", got, front)
	}
	near := strings.ReplaceAll(strings.ReplaceAll(strings.ReplaceAll(front, "seed\n", "seed,violation\n"), "15\n", "15,0\n"), "false,0\n", "false,0,0.1234568\n")
	if got := string(table.CSV(true)); got != near {
		t.Errorf("near.csv\n%s\nwant\n%s", got, near)
	}
}

func nothing() (r objectives.Row) {
	for f := range r {
		r[f] = math.NaN()
	}
	return r
}

// Every quantity that may vary, in the contract's order, laws numbered also
// for one knot.
func TestVariedColumns(t *testing.T) {
	s := objectives.Spec{Stock: []objectives.Stock{{Name: "wire"}}}
	for _, q := range objectives.Quantities {
		s.Vary = append(s.Vary, objectives.Vary{Quantity: q, From: 0.1, To: 0.2, Knots: 1})
	}
	s.Vary[1].Knots = 3
	got := emptyTable(&objectives.Problem{Spec: s, Layout: objectives.NewLayout(&s)}).header(false)
	want := "id,turns,diameter_1_m,diameter_2_m,diameter_3_m,spacing_1_m,conductor,feed_height_m,lead_turns,lead_spacing_m,pin_m," +
		"strip_turns,strip_width_m,transformer_impedance_ohm,transformer_length_m,ground_diameter_m,ground_rim_m," + figureHeader
	if strings.Join(got, ",") != want {
		t.Errorf("columns %v\nwant %s", got, want)
	}
}

func TestNoMembersIsAHeaderOnly(t *testing.T) {
	table := &Table{Varied: []string{"turns"}}
	if got, want := string(table.CSV(false)), "id,turns,"+figureHeader+"\n"; got != want {
		t.Errorf("%q, want %q", got, want)
	}
}

func TestFigureText(t *testing.T) {
	for _, x := range []struct {
		x    float64
		want string
	}{
		{0, "0"}, {math.Copysign(0, -1), "0"}, {1, "1"}, {12.5, "12.5"}, {1.23456749, "1.234567"}, {1.2345678, "1.234568"}, {-9.99999996, "-10"},
		{1e-9, "0.000000001"}, {1.5e21, "1500000000000000000000"}, {123456.78949, "123456.8"},
		{math.NaN(), ""}, {math.Inf(1), ""}, {math.Inf(-1), ""},
	} {
		if got := figureText(x.x); got != x.want {
			t.Errorf("%v is written %q, want %q", x.x, got, x.want)
		}
	}
}

// Seven significant digits: no closer number of seven digits there is, no
// exponent, and what is read back is written alike.
func TestFigureTextReadsBack(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64Range(-1e12, 1e12).Draw(t, "x")
		text := figureText(x)
		back, err := strconv.ParseFloat(text, 64)
		if err != nil || strings.ContainsAny(text, "eE") {
			t.Fatalf("%v is written %q", x, text)
		}
		if math.Abs(back-x) > 0.5000001e-6*math.Abs(x) {
			t.Errorf("%v is written %s", x, text)
		}
		if figureText(back) != text {
			t.Errorf("%s is written again as %s", text, figureText(back))
		}
		digits := strings.Trim(strings.ReplaceAll(strings.TrimLeft(text, "-"), ".", ""), "0")
		if len(digits) > 7 {
			t.Errorf("%s has %d digits", text, len(digits))
		}
	})
}

func TestVariedTextReadsBackExactly(t *testing.T) {
	for x, want := range map[float64]string{8.25: "8.25", 0.058: "0.058", 3: "3", 1e-6: "0.000001", 0.30000000000000004: "0.30000000000000004"} {
		if got := VariedText(x); got != want {
			t.Errorf("%v is written %q, want %q", x, got, want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		x := rapid.Float64().Filter(func(x float64) bool { return !math.IsInf(x, 0) && !math.IsNaN(x) }).Draw(t, "x")
		text := VariedText(x)
		if back, err := strconv.ParseFloat(text, 64); err != nil || back != x || strings.ContainsAny(text, "eE") {
			t.Errorf("%v is written %q", x, text)
		}
	})
}

// tables draws tables as a search writes them: every figure a number of its
// own or none.
var tables = rapid.Custom(func(t *rapid.T) *Table {
	table := &Table{Varied: []string{"turns", "diameter_1_m", "conductor"}}
	number := func(name string) float64 {
		if rapid.IntRange(0, 4).Draw(t, name+" is none") == 0 {
			return math.NaN()
		}
		x, _ := strconv.ParseFloat(figureText(rapid.Float64Range(-1000, 1000).Draw(t, name)), 64)
		return x
	}
	for range rapid.IntRange(0, 4).Draw(t, "members") {
		m := Member{
			ID: rapid.StringMatching(`[0-9a-f]{10}`).Draw(t, "id"),
			Varied: []string{
				VariedText(rapid.Float64Range(0, 100).Draw(t, "turns")), VariedText(rapid.Float64Range(0, 1).Draw(t, "diameter")),
				rapid.StringMatching(`[a-z0-9 ,"'/;µéλ\n]*`).Draw(t, "conductor"),
			},
			Model:    rapid.SampledFrom([]string{"closed-form", "full-wave", "external"}).Draw(t, "model"),
			Fidelity: rapid.SampledFrom([]string{"", "draft", "standard", "fine"}).Draw(t, "fidelity"),
			Checked:  rapid.Bool().Draw(t, "checked"), Seed: rapid.Uint64().Draw(t, "seed"),
		}
		for f := range m.Figures {
			m.Figures[f] = number(objectives.Figures[f].Name)
		}
		table.Members = append(table.Members, m)
	}
	return table
})

func TestReadingIsTheInverseOfWriting(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		want := tables.Draw(t, "table")
		text := want.CSV(false)
		got, err := ParseTable(text)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got.CSV(false), text) || !slices.Equal(got.Varied, want.Varied) {
			t.Fatalf("read and written again:\n%s\nwant\n%s", got.CSV(false), text)
		}
		for i, m := range got.Members {
			w := want.Members[i]
			if m.ID != w.ID || !slices.Equal(m.Varied, w.Varied) || m.Model != w.Model || m.Fidelity != w.Fidelity || m.Checked != w.Checked || m.Seed != w.Seed {
				t.Errorf("read %+v, want %+v", m, w)
			}
			for f, x := range m.Figures {
				if x != w.Figures[f] && !(math.IsNaN(x) && math.IsNaN(w.Figures[f])) {
					t.Errorf("%s read as %v, want %v", objectives.Figures[f].Name, x, w.Figures[f])
				}
			}
		}
	})
}

// A file cut short anywhere but between rows, or at the end of a number, is
// refused; never is it read as something that was not in it.
func TestCutShort(t *testing.T) {
	whole := &Table{Varied: []string{"turns", "conductor"}, Members: []Member{
		{ID: "0123456789", Varied: []string{"8.25", `a "fine", wire`}, Figures: nothing(), Model: "full-wave", Fidelity: "fine", Checked: true, Seed: 77},
		{ID: "0123456789", Varied: []string{"8.25", "wire"}, Figures: objectives.Row{1.5, 2}, Model: "full-wave", Fidelity: "fine", Seed: 7},
	}}
	text := whole.CSV(false)
	for n := range text {
		got, err := ParseTable(text[:n])
		if err != nil {
			continue
		}
		if again := got.CSV(false); !bytes.HasPrefix(text, bytes.TrimSuffix(again, []byte("\n"))) {
			t.Errorf("cut at %d it reads as\n%s", n, again)
		}
	}
}

func TestBrokenTables(t *testing.T) {
	sound := &Table{Varied: []string{"turns", "conductor"}}
	for i := range 3 {
		sound.Members = append(sound.Members, Member{ID: "012345678" + strconv.Itoa(i), Varied: []string{"8.25", "wire"}, Figures: nothing(), Model: "full-wave", Fidelity: "fine", Seed: 7})
		sound.Members[i].Figures[objectives.Gain] = 12.5
	}
	text := string(sound.CSV(false))
	lines := strings.SplitAfter(text, "\n")
	second := func(from, to string) string {
		changed := strings.Replace(lines[2], from, to, 1)
		if changed == lines[2] {
			t.Fatalf("nothing of %q in %q", from, lines[2])
		}
		return lines[0] + lines[1] + changed + lines[3]
	}
	header := func(from, to string) string { return strings.Replace(text, from, to, 1) }
	for _, x := range []struct {
		name, text string
		words      []string
	}{
		{"nothing", "", []string{"not a front's table", "header"}},
		{"another table", "a,b,c\n1,2,3\n", []string{"not a front's table", "header"}},
		{"a quote in the header", "\"id,turns\n", []string{"line"}},
		{"a column of another name", header("gain_dbic", "gain_dbi"), []string{"line 1", `"gain_dbi"`, `"gain_dbic"`}},
		{"columns changed about", header("model,fidelity", "fidelity,model"), []string{"line 1", `"fidelity"`, `"model"`}},
		{"no id column", header("id,", "name,"), []string{"line 1", "column 1", `"id"`}},
		{"nearest misses", string(sound.CSV(true)), []string{"line 1"}},
		{"a cell too few", second(",wire", ""), []string{"line 3", "wrong number of fields"}},
		{"a cell too many", second(",wire", ",wire,wire"), []string{"line 3", "wrong number of fields"}},
		{"an open quote", second("wire", `"wire`), []string{"line 3"}},
		{"a stray quote", second("wire", `wi"re`), []string{"line 3", `"`}},
		{"a word for a figure", second("12.5", "twelve"), []string{"line 3", "gain_dbic", `"twelve" is not a number`}},
		{"no number for a figure", second("12.5", "NaN"), []string{"line 3", "gain_dbic", `"NaN" is not a number`}},
		{"an endless figure", second("12.5", "-Inf"), []string{"line 3", "gain_dbic", `"-Inf" is not a number`}},
		{"an overflow", second("12.5", "1e999"), []string{"line 3", "gain_dbic", `"1e999" is not a number`}},
		{"a word for turns", second("8.25", "many"), []string{"line 3", "turns", `"many" is not a number`}},
		{"neither checked nor not", second("false", "perhaps"), []string{"line 3", "checked", `"perhaps"`}},
		{"a fraction for a seed", second(",7\n", ",7.5\n"), []string{"line 3", "seed", `"7.5" is not a whole number`}},
		{"a seed below zero", second(",7\n", ",-7\n"), []string{"line 3", "seed", `"-7" is not a whole number`}},
		{"no id", second("0123456781", ""), []string{"line 3", `id: ""`}},
		{"an id that leads elsewhere", second("0123456781", "../../../x"), []string{"line 3", `id: "../../../x"`}},
		{"an id of other letters", second("0123456781", "012345678G"), []string{"line 3", "10 hexadecimal digits"}},
		{"a fault after a cell of two lines", strings.Replace(second("12.5", "twelve"), ",wire,", ",\"wi\nre\",", 1), []string{"line 4", "gain_dbic"}},
	} {
		_, err := ParseTable([]byte(x.text))
		if err == nil {
			t.Errorf("%s: no error", x.name)
			continue
		}
		for _, w := range x.words {
			if !strings.Contains(err.Error(), w) {
				t.Errorf("%s: %q says nothing of %q", x.name, err, w)
			}
		}
	}
}

func TestReadTable(t *testing.T) {
	path := filepath.Join(t.TempDir(), "front.csv")
	if _, err := ReadTable(path); err == nil || !strings.Contains(err.Error(), path) || !strings.Contains(err.Error(), "no such file") {
		t.Errorf("missing file: %v", err)
	}
	if err := os.WriteFile(path, []byte("nonsense"), 0o644); err != nil {
		t.Fatal(err)
	}
	if _, err := ReadTable(path); err == nil || !strings.HasPrefix(err.Error(), path+": ") {
		t.Errorf("broken file: %v", err)
	}
	table := &Table{Varied: []string{"turns"}, Members: []Member{{ID: "0123456789", Varied: []string{"8"}, Figures: nothing()}}}
	if err := os.WriteFile(path, table.CSV(false), 0o644); err != nil {
		t.Fatal(err)
	}
	if got, err := ReadTable(path); err != nil || len(got.Members) != 1 || got.Members[0].ID != "0123456789" {
		t.Errorf("read %+v, %v", got, err)
	}
}
