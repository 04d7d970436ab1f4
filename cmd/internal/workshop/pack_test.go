package workshop

import (
	"bytes"
	"compress/zlib"
	"context"
	"encoding/csv"
	"errors"
	"io"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/helix"
)

func fileOf(t *testing.T, files []File, name string) []byte {
	t.Helper()
	for _, f := range files {
		if f.Name == name {
			return f.Data
		}
	}
	t.Fatalf("no %s", name)
	return nil
}

// pageStreams are the pages of a PDF: the deflated streams that set a line
// width.
func pageStreams(t *testing.T, pdf []byte) []string {
	t.Helper()
	var out []string
	for rest := pdf; ; {
		_, after, ok := bytes.Cut(rest, []byte("stream\n"))
		if !ok {
			return out
		}
		if z, err := zlib.NewReader(bytes.NewReader(after)); err == nil {
			if text, err := io.ReadAll(z); err == nil && bytes.Contains(text, []byte(" w\n")) {
				out = append(out, string(text))
			}
		}
		_, rest, _ = bytes.Cut(after, []byte("endstream"))
	}
}

// TestSameBytes: the same design gives the same bytes, file by file.
func TestSameBytes(t *testing.T) {
	for _, name := range []string{"cone"} {
		var packs [2][]File
		for i := range packs {
			files, err := Pack(context.Background(), fullWave(t, "draft"), settle(t, antennas[name]), nil, Power{Watts: 10})
			if err != nil {
				t.Fatal(err)
			}
			packs[i] = files
		}
		for i, f := range packs[0] {
			if !bytes.Equal(f.Data, packs[1][i].Data) {
				t.Errorf("%s: two packs differ in %s", name, f.Name)
			}
			if len(f.Data) == 0 {
				t.Errorf("%s: %s is empty", name, f.Name)
			}
		}
	}
}

// TestDesignFile: the pack's design file is the design that was drawn.
func TestDesignFile(t *testing.T) {
	for name, d := range antennas {
		s := sheetOf(t, d, Power{})
		back, err := configs.ParseDesign("design.yaml", s.File, configs.YAML)
		if err != nil || back.Hash() != s.Design.Hash() || back.Band != s.Design.Band || back.FeedsReflector != d.FeedsReflector {
			t.Errorf("%s: reads back as %s, drawn was %s (%v)", name, back.ID(), s.Design.ID(), err)
		}
		if !strings.Contains(words(s.pages()), s.Design.ID()) {
			t.Errorf("%s: the sheet does not name design %s", name, s.Design.ID())
		}
	}
}

// TestCentreLine reads the CSV back: every point on the winding, its running
// length that of the chain through the points.
func TestCentreLine(t *testing.T) {
	for name, d := range antennas {
		c, err := helix.Wind(&d)
		if err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(bytes.NewReader(centreLineCSV(c))).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		var last [5]float64
		length := 0.0
		for i, row := range rows[1:] {
			var v [5]float64
			for j := range v {
				if v[j], err = strconv.ParseFloat(row[j], 64); err != nil {
					t.Fatal(err)
				}
			}
			p := c.AtArc(v[1]).Pos
			if away := math.Hypot(math.Hypot(p.X-v[2], p.Y-v[3]), p.Z-v[4]); away > 1e-6 {
				t.Fatalf("%s: row %d lies %g m from the winding", name, i+1, away)
			}
			if i > 0 {
				length += math.Hypot(math.Hypot(v[2]-last[2], v[3]-last[3]), v[4]-last[4])
			}
			last = v
		}
		if want := c.WireLength(); math.Abs(length-want) > 5e-4*want || math.Abs(last[1]-want) > 1e-7 || math.Abs(last[4]-c.Top()) > 1e-7 {
			t.Errorf("%s: %g m of chords, wire %g m, last row %v", name, length, want, last)
		}
		dxf := string(centreLineDXF(c, "test"))
		if n := strings.Count(dxf, "\r\nVERTEX\r\n"); n != len(rows)-1 {
			t.Errorf("%s: %d points in the DXF, %d in the CSV", name, n, len(rows)-1)
		}
	}
}

// TestWriteDir writes a folder whole or not at all.
func TestWriteDir(t *testing.T) {
	base := t.TempDir()
	dir := filepath.Join(base, "pack")
	files := []File{{"a.txt", []byte("one")}, {"b.txt", []byte("two")}}
	if err := WriteDir(dir, files); err != nil {
		t.Fatal(err)
	}
	if got, err := os.ReadFile(filepath.Join(dir, "b.txt")); err != nil || string(got) != "two" {
		t.Errorf("%q, %v", got, err)
	}
	if info, err := os.Stat(dir); err != nil || info.Mode().Perm() != 0o755 {
		t.Errorf("the folder's mode is %v (%v)", info.Mode(), err)
	}
	if err := WriteDir(dir, files); !errors.Is(err, fs.ErrExist) {
		t.Errorf("over a folder that is there: %v", err)
	}
	if err := WriteDir(filepath.Join(base, "broken"), []File{{"no/such.txt", nil}}); err == nil {
		t.Error("a file that cannot be written was written")
	}
	if err := WriteDir(filepath.Join(base, "nowhere", "pack"), files); err == nil {
		t.Error("written into a folder that is not there")
	}
	entries, err := os.ReadDir(base)
	if err != nil || len(entries) != 1 {
		t.Errorf("%v is left behind (%v)", entries, err)
	}
}

// TestBill: the parts add up, and each design has what it needs.
func TestBill(t *testing.T) {
	for name, d := range antennas {
		s := sheetOf(t, d, Power{})
		rows, err := csv.NewReader(bytes.NewReader(s.billCSV())).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		have := map[string][]string{}
		for i, r := range rows[1:] {
			if r[0] != strconv.Itoa(i+1) {
				t.Errorf("%s: item %s in line %d", name, r[0], i+1)
			}
			have[r[1]] = r
		}
		for part, due := range map[string]bool{
			"conductor": true, "ground": true, "former": true, "connector": true, "end cap": true,
			"riser": d.Feed.Pin > 0 || d.Feed.Strip.Turns > 0, "strip": d.Feed.Strip.Turns > 0, "rim": d.Ground.Kind == models.Cup, "line section": d.Feed.Transformer.Impedance > 0,
		} {
			if (have[part] != nil) != due {
				t.Errorf("%s: a %s is due: %t; the bill has %v", name, part, due, have[part])
			}
		}
		k := cuts(s.Curve, s.Design.Feed.Strip.Turns, s.Design.Feed.Pin > 0)
		if sum := k.Wire + k.Riser + k.Strip; math.Abs(sum-s.Curve.WireLength()) > 1e-12 {
			t.Errorf("%s: pieces of %g m, wire of %g m", name, sum, s.Curve.WireLength())
		}
		length, err := strconv.ParseFloat(have["conductor"][4], 64)
		if extra := length - k.Wire; err != nil || extra < feedAllowance+trimAllowance-1e-9 || extra > feedAllowance+trimAllowance+1e-3 {
			t.Errorf("%s: cut to %g m for %g m of wire (%v)", name, length, k.Wire, err)
		}
	}
}

// TestGroundParts: cut out and bent, the parts of a cup have its inside and,
// but for the sheet's thickness, its mass.
func TestGroundParts(t *testing.T) {
	d := antennas["cone"]
	d.Ground = models.Ground{Kind: models.Cup, Diameter: 0.12, Rim: 0.04, Thickness: 0.8e-3, Material: models.Material{Name: "brass", Conductivity: 16e6, Density: 8530}}
	s := &sheet{Settled: &Settled{Design: d, Resolution: Fine}}
	parts := s.groundParts()
	if len(parts) != 2 {
		t.Fatalf("%d parts of a cup", len(parts))
	}
	base, strip := parts[0], parts[1]
	if base.Diameter != 0.12 || base.Description != "cup's base of 0.8 mm brass sheet" {
		t.Errorf("base %+v", base)
	}
	// Its neutral line is a circle of the inside and one thickness.
	if inside := strip.Length/math.Pi - 0.8e-3; math.Abs(inside-0.12) > 1e-12 || strip.Description != "strip of 0.8 mm brass sheet, 40.80 mm wide" {
		t.Errorf("inside %g m across, %+v", inside, strip)
	}
	if mass, model := base.Mass+strip.Mass, d.Ground.Mass(); mass < model || mass > 1.02*model {
		t.Errorf("parts of %g kg for a cup of %g kg", mass, model)
	}
	s.Design.Ground.Kind = models.Disc
	if parts = s.groundParts(); len(parts) != 1 || parts[0].Description != "plate of 0.8 mm brass sheet" || math.Abs(parts[0].Mass-s.Design.Ground.Mass()) > 1e-15 {
		t.Errorf("parts of a disc: %+v", parts)
	}
}

// TestFlatStrip bends the flat pattern up: a strip on the right helicoid has
// edges as long as the pattern's arcs, to the second order in its width.
func TestFlatStrip(t *testing.T) {
	d := antennas["cylinder"]
	for _, strip := range []models.Strip{{Turns: 0.25, Width: 0.004}, {Turns: 0.5, Width: 0.006}, {Turns: 0.75, Width: 0.003}} {
		d.Feed.Strip = strip
		c, err := helix.Wind(&d)
		if err != nil {
			t.Fatal(err)
		}
		s := &sheet{Settled: &Settled{Design: d, Curve: c, Resolution: Coarse}}
		p := s.flatStrip()
		rise := d.Spacing[0] / (2 * math.Pi)
		for _, side := range []float64{-0.5, 0, 0.5} {
			radius := d.Diameter[0]/2 + side*strip.Width
			bent := 2 * math.Pi * strip.Turns * math.Hypot(radius, rise)
			flat := p.angle * math.Pi / 180 * (p.radius + side*strip.Width)
			if math.Abs(flat/bent-1) > 0.002 {
				t.Errorf("%+v, edge at %+.1f widths: %.3f mm flat, %.3f mm bent", strip, side, 1e3*flat, 1e3*bent)
			}
		}
	}
}
