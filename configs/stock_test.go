package configs

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"turnwise/models"
	"turnwise/objectives"
)

// stockOf reads the rows that a stock entry stands for.
func stockOf(t testing.TB, entry string) []objectives.Stock {
	t.Helper()
	return readBrief(t, edit(t, soundBrief, "{catalogue: awg, from: 8, to: 12, material: copper, coil: 10 m}", entry), YAML).Spec.Stock[2:]
}

func names(rows []objectives.Stock) string {
	var out []string
	for _, r := range rows {
		out = append(out, r.Name)
	}
	return strings.Join(out, ", ")
}

func catalogueByName(t testing.TB, name string) *catalogue {
	t.Helper()
	for i := range catalogues {
		if catalogues[i].name == name {
			return &catalogues[i]
		}
	}
	t.Fatalf("no catalogue %s", name)
	return nil
}

func TestWireGauges(t *testing.T) {
	// ASTM B258, to the micrometre.
	for gauge, mm := range map[float64]float64{8: 3.264, 10: 2.588, 12: 2.053, 14: 1.628} {
		if d, wall := awg.size(gauge); d != math.Round(mm*1000)/1e6 || wall != 0 {
			t.Errorf("AWG %v: %v m with a wall of %v, want %v mm solid", gauge, d, wall, mm)
		}
	}
	// ASTM B258: 39 equal ratios lie between No. 36, 0.0050 in, and No. 0000,
	// 0.4600 in; No. 0 is three below the latter.
	ratio := math.Pow(0.46/0.005, 1.0/39)
	want := 0.46 * 25.4e-3 / math.Pow(ratio, 3)
	for _, g := range awg.gauges {
		if d, _ := awg.size(g); math.Abs(d-want) > 0.51e-6 {
			t.Errorf("AWG %v: %v m, want %v", g, d, want)
		}
		want /= ratio
	}
	if n := len(awg.gauges); n != 31 || awg.gauges[0] != 0 || awg.gauges[n-1] != 30 {
		t.Errorf("gauges are %v", awg.gauges)
	}
}

func TestMetricSeries(t *testing.T) {
	for _, c := range []struct {
		name string
		wall float64 // m
		mm   []float64
	}{
		// IEC 60317, series R20 (memory).
		{"metric-wire", 0, []float64{0.5, 0.56, 0.63, 0.71, 0.8, 0.9, 1.0, 1.12, 1.25, 1.4, 1.6, 1.8, 2.0, 2.24, 2.5, 2.8, 3.15, 3.55, 4.0, 4.5, 5.0}},
		// EN 1057 and ASTM B88M, outer diameters; the wall of 1 mm from memory.
		{"metric-tube", 1e-3, []float64{6, 8, 10, 12, 15, 18, 22, 28}},
	} {
		rows := catalogueByName(t, c.name)
		if len(rows.gauges) != len(c.mm) {
			t.Fatalf("%s has %d sizes, want %d", c.name, len(rows.gauges), len(c.mm))
		}
		for i, mm := range c.mm {
			d, wall := rows.size(rows.gauges[i])
			if d != math.Round(mm*1000)/1e6 || wall != c.wall {
				t.Errorf("%s %d: %v m with a wall of %v, want %v mm with %v", c.name, i, d, wall, mm, c.wall)
			}
		}
	}
}

// Conductivities and densities of handbooks (memory), worth ±5 %.
func TestMaterials(t *testing.T) {
	published := map[string][2]float64{ // MS/m, g/cm³; 0: no value at hand
		"copper": {58.0, 8.89}, // International Annealed Copper Standard, IEC 60028
		"brass":  {16, 0},      // C26000
		"silver": {62, 0}, "aluminium": {35.4, 0}, "stainless": {1.4, 0},
	}
	for _, m := range Materials {
		if m.Permeability < 1 || m.Conductivity <= 0 || m.Density <= 0 {
			t.Errorf("%+v cannot be", m)
		}
		for i, got := range []float64{m.Conductivity / 1e6, m.Density / 1e3} {
			if want := published[m.Name][i]; want > 0 && math.Abs(got/want-1) > 0.05 {
				t.Errorf("%s: %v, want %v", m.Name, got, want)
			}
		}
		delete(published, m.Name)
	}
	if len(published) > 0 {
		t.Errorf("no material for %v", published)
	}
	if m, ok := material("unobtainium"); ok {
		t.Errorf("found %+v", m)
	}
}

func TestRangesOfCatalogues(t *testing.T) {
	for entry, want := range map[string]string{
		"{catalogue: awg, from: 8, to: 10, material: copper}":                      "AWG 8 copper, AWG 9 copper, AWG 10 copper",
		"{catalogue: awg, from: 29, material: brass}":                              "AWG 29 brass, AWG 30 brass",
		"{catalogue: awg, to: 1, material: copper}":                                "AWG 0 copper, AWG 1 copper",
		"{catalogue: awg, from: 9.5, to: 11, material: copper}":                    "AWG 10 copper, AWG 11 copper",
		"{catalogue: metric-wire, from: 1 mm, to: 1.25 mm, material: silver}":      "1 mm wire silver, 1.12 mm wire silver, 1.25 mm wire silver",
		"{catalogue: metric-tube, from: 0.5 in, to: 15 mm, material: copper}":      "15 mm tube copper",
		"{catalogue: metric-tube, from: 6 mm, to: 6 mm, material: aluminium}":      "6 mm tube aluminium",
		"{catalogue: awg, from: 8, to: 8, conductivity: 8 MS/m, density: 8 g/cm3}": "AWG 8 custom",
	} {
		if got := names(stockOf(t, entry)); got != want {
			t.Errorf("%s: %s, want %s", entry, got, want)
		}
	}
	if rows := stockOf(t, "{catalogue: metric-wire, material: copper}"); len(rows) != 21 {
		t.Errorf("a whole catalogue is %d rows", len(rows))
	}
}

func TestWhatAStockRowHolds(t *testing.T) {
	copper, _ := material("copper")
	coat := models.Insulation{Thickness: 0.0002, Permittivity: 2.3}
	for entry, want := range map[string]objectives.Stock{
		"{catalogue: metric-tube, from: 8 mm, to: 8 mm, material: copper, coil: 5 m, least_bend_radius: 30 mm, insulation: {thickness: 0.2 mm, permittivity: 2.3}}": {
			Name: "8 mm tube copper", Diameter: 0.008, Wall: 0.001, Material: copper, Coil: 5, LeastBendRadius: 0.03, Insulation: coat,
		},
		"{diameter: 1/8 in, material: copper}": {},
		"{diameter: 0.125 in, material: copper}": {
			Name: "3.175 mm copper", Diameter: 0.003175, Material: copper,
		},
		"{name: ' mine ', diameter: 3 mm, wall: 1.5 mm, conductivity: 1.35 MS/m, density: 7900 kg/m3, permeability: 1.02, insulation: {thickness: 0.2 mm, permittivity: 2.3}}": {
			Name: "mine", Diameter: 0.003, Wall: 0.0015, Material: models.Material{Conductivity: 1.35e6, Density: 7900, Permeability: 1.02}, Insulation: coat,
		},
		"{diameter: 3 mm, conductivity: 1.35 MS/m, density: 7.9 g/cm3, insulation: {thickness: 0 mm, permittivity: 2.3}}": {
			Name: "3 mm", Diameter: 0.003, Material: models.Material{Conductivity: 1.35e6, Density: 7900, Permeability: 1},
		},
	} {
		if want.Name == "" { // a fraction is no number
			_, err := ParseBrief("b.yaml", []byte(edit(t, soundBrief, "{catalogue: awg, from: 8, to: 12, material: copper, coil: 10 m}", entry)), YAML)
			checkFaults(t, err, "b.yaml", expected{18, "stock[3].diameter", `"/8 in" is no unit of a length`, "58 mm"})
			continue
		}
		equal(t, entry, stockOf(t, entry), []objectives.Stock{want})
	}
}

// Every row of every catalogue is a conductor that a design file may name,
// whatever the case, and that reads back as itself.
func TestEveryRowByName(t *testing.T) {
	seen := map[string]bool{}
	for i := range catalogues {
		for _, g := range catalogues[i].gauges {
			for _, m := range Materials {
				row := catalogues[i].row(g, m)
				if seen[row.Name] {
					t.Errorf("two rows are called %s", row.Name)
				}
				seen[row.Name] = true
				text := edit(t, soundDesign, `{stock: "2 mm copper wire", diameter: 2 mm, material: copper}`, fmt.Sprintf("{stock: %q}", strings.ToUpper(row.Name)))
				d, err := ParseDesign("d.yaml", []byte(text), YAML)
				if err != nil {
					t.Fatal(err)
				}
				equal(t, row.Name, d.Conductor, row.Conductor())
				equal(t, "read back", reread(t, d), d)
			}
		}
	}
}

// A conductor that a brief fixes is its only row, by name, by numbers or by
// what a catalogue calls it.
func TestFixedConductor(t *testing.T) {
	for conductor, want := range map[string]objectives.Stock{
		"{stock: AWG 12 copper}":                                       {Name: "AWG 12 copper", Diameter: 0.002053},
		"{diameter: 2 mm, material: copper}":                           {Name: "2 mm copper", Diameter: 0.002},
		"{stock: mine, diameter: 2 mm, wall: 0.5 mm, material: brass}": {Name: "mine", Diameter: 0.002, Wall: 0.0005},
		"{diameter: 2 mm, conductivity: 9 MS/m, density: 8 g/cm3}":     {Name: "2 mm", Diameter: 0.002},
	} {
		var kept []string
		for _, line := range strings.Split(soundBrief, "\n") {
			if line != "stock:" && !strings.HasPrefix(line, "  - {name") && !strings.HasPrefix(line, "  - name: thin") && !strings.HasPrefix(line, "  - {cat") &&
				line != "    diameter: 2 mm" && line != "    material: copper" && line != "    coil: 3 m" && line != "  conductor: stock" {
				kept = append(kept, line)
			}
		}
		br := readBrief(t, edit(t, strings.Join(kept, "\n"), "  handedness: right\n", "  conductor: "+conductor+"\n"), YAML)
		if len(br.Spec.Stock) != 1 {
			t.Fatalf("%s: %d rows", conductor, len(br.Spec.Stock))
		}
		got := br.Spec.Stock[0]
		if got.Name != want.Name || got.Diameter != want.Diameter || got.Wall != want.Wall || got.Material.Conductivity <= 0 {
			t.Errorf("%s: %+v, want %+v", conductor, got, want)
		}
		rereadBrief(t, br, "fixed.yaml")
	}
}
