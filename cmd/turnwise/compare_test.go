package main

import (
	"context"
	"encoding/json"
	"math"
	"math/cmplx"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/moment"
)

// compared is what compare prints, as far as these tests read it.
type compared struct {
	Sweep []struct {
		Hz      float64 `json:"frequency_hz"`
		Re      float64 `json:"predicted_reflection_real"`
		Im      float64 `json:"predicted_reflection_imaginary"`
		Allowed float64
	}
	Explanations []struct {
		Dimension string
		By        float64 `json:"by_m"`
		Explains  float64 `json:"explains_pct"`
	}
}

// comparing the bench piece with another like it, of the given handedness and
// changes: what is printed, and the picture.
func comparedWith(t *testing.T, handedness string, changes ...string) (c compared, svg string) {
	t.Helper()
	dir := t.TempDir()
	text, err := os.ReadFile("testdata/helix.yaml")
	if err != nil {
		t.Fatal(err)
	}
	drawn := strings.Replace(string(text), "handedness: right", "handedness: "+handedness, 1)
	write := func(name, text string) string {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return path
	}
	design, made := write("drawn.yaml", drawn), write("made.yaml", strings.NewReplacer(changes...).Replace(drawn))
	measured, picture := filepath.Join(dir, "made.s1p"), filepath.Join(dir, "picture.svg")
	command(t, exitDone, "simulate", made, "--samples", "9", "--touchstone", measured)
	out := command(t, exitUnmet, "compare", design, "--measured", measured, "--json", "--chart", picture)
	if err := json.Unmarshal([]byte(out), &c); err != nil {
		t.Fatal(err)
	}
	data, err := os.ReadFile(picture)
	if err != nil {
		t.Fatal(err)
	}
	return c, string(data)
}

// places are the places that a path of the picture goes through.
func places(t *testing.T, path string) []complex128 {
	t.Helper()
	numbers := regexp.MustCompile(`-?[0-9.]+`).FindAllString(path, -1)
	var out []complex128
	for i := 0; i+1 < len(numbers); i += 2 {
		x, err1 := strconv.ParseFloat(numbers[i], 64)
		y, err2 := strconv.ParseFloat(numbers[i+1], 64)
		if err1 != nil || err2 != nil {
			t.Fatal(err1, err2)
		}
		out = append(out, complex(x, -y))
	}
	return out
}

func found(t *testing.T, svg, pattern string) []string {
	t.Helper()
	m := regexp.MustCompile(pattern).FindStringSubmatch(svg)
	if m == nil {
		t.Fatalf("%s is not in the picture", pattern)
	}
	return m
}

// TestComparePicture: a riser that came out too long is named, with its
// amount; on the trim chart its arrow leads from the predicted reflection to
// that of the design with that riser, in the scale that the tolerance band's
// circle gives.
func TestComparePicture(t *testing.T) {
	c, svg := comparedWith(t, "right", "height: 5 mm", "height: 7 mm")
	best := c.Explanations[0]
	if best.Dimension != "riser height" || math.Abs(best.By-2e-3) > 0.1e-3 || best.Explains < 98 {
		t.Fatalf("%+v", best)
	}
	mid := c.Sweep[len(c.Sweep)/2]
	predicted := complex(mid.Re, mid.Im)

	ring := places(t, found(t, svg, `<path d="([^"]*)"[^>]* stroke-width="1.2" stroke-dasharray="2 2.5"`)[1])
	var middle complex128
	for _, p := range ring[1:] { // it ends where it began
		middle += p / complex(float64(len(ring)-1), 0)
	}
	scale := cmplx.Abs(ring[0]-middle) / mid.Allowed

	arrow := found(t, svg, `<title>riser height \+[0-9.]+\x{a0}mm explains [0-9]+\x{a0}% of the difference</title><path d="([^"]*)" fill="[^"]*"/><path d="([^"]*)"`)
	tip, shaft := places(t, arrow[1])[0], places(t, arrow[2])
	if cmplx.Abs(shaft[0]-middle) > 0.1 {
		t.Errorf("the arrow begins at %.2f, predicted is at %.2f", shaft[0], middle)
	}
	d, err := configs.ReadDesign("testdata/helix.yaml")
	if err != nil {
		t.Fatal(err)
	}
	d.Feed.Height += best.By
	solver, err := moment.New(moment.Standard)
	if err != nil {
		t.Fatal(err)
	}
	r, err := solver.Simulate(context.Background(), d, models.Question{Hz: []float64{mid.Hz}, Outputs: models.Axis})
	if err != nil {
		t.Fatal(err)
	}
	want := models.Reflection(r.Samples[0].Input, d.Feed.Impedance) - predicted
	if got := (tip - middle) / complex(scale, 0); cmplx.Abs(got-want) > 0.01*cmplx.Abs(want) {
		t.Errorf("the arrow leads %.4f away, the longer riser %.4f", got, want)
	}
	for _, due := range []string{">1  riser height +", "To take it back: riser height, lower by", "resistance and reactance, Ω; enlarged ", "explained by 1"} {
		if !strings.Contains(strings.ReplaceAll(svg, "\u00a0", " "), due) {
			t.Errorf("%q is not in the picture", due)
		}
	}
}

// TestCompareMirrored: a mirrored piece of a mirrored design is the same piece.
func TestCompareMirrored(t *testing.T) {
	_, right := comparedWith(t, "right", "height: 5 mm", "height: 8 mm")
	_, left := comparedWith(t, "left", "height: 5 mm", "height: 8 mm")
	if right != left {
		t.Error("mirrored, the picture is another")
	}
}
