package report

import (
	"bytes"
	"encoding/json"
	"encoding/xml"
	"errors"
	"io"
	"math"
	"strings"
	"testing"

	"turnwise/cmd/internal/workshop"
	"turnwise/models"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// TestToleranceUnanswered: copies and ends without an answer are said, and
// what there is no number for is null.
func TestToleranceUnanswered(t *testing.T) {
	var row objectives.Row
	for i := range row {
		row[i] = math.NaN()
	}
	row[objectives.Gain] = 9
	limit := objectives.Limit{Figure: objectives.Gain, AtLeast: true, Value: 8}
	r := Tolerance{
		Study: &tolerance.Study{Samples: 3, Spreads: tolerance.Spreads{1e-3}, Distribution: tolerance.Uniform},
		Result: &tolerance.Result{
			Limits: []objectives.Limit{limit}, Figures: []objectives.Figure{objectives.Gain, objectives.VSWR}, Nominal: tolerance.Copy{Figures: row},
			Copies: make([]tolerance.Copy, 3), Failures: []tolerance.Failure{{Reason: "too thin", Count: 3}},
			Yield: tolerance.Yield{Share: math.NaN(), High: 1}, LimitYield: []tolerance.Yield{{Share: math.NaN(), High: 1}},
			Sensitivities: []tolerance.Sensitivity{{Dimension: tolerance.Diameter, HalfWidth: 1e-3, Err: "too thin"}},
			Statement:     "it is worth this much", Warnings: []string{"and no more"},
		},
	}
	for i := range r.Result.Copies {
		r.Result.Copies[i].Err = "too thin"
	}
	var text, object bytes.Buffer
	if err := errors.Join(r.WriteText(&text), r.WriteJSON(&object)); err != nil {
		t.Fatal(err)
	}
	for _, due := range []string{"no answer from 3 of 3 copies", "too thin", "yield – of copies", "no answer at an end", "warning: and no more\nit is worth this much\n"} {
		if !strings.Contains(text.String(), due) {
			t.Errorf("%q is not in\n%s", due, &text)
		}
	}
	var o struct {
		Yield    *float64 `json:"yield_pct"`
		High     *float64 `json:"yield_high_pct"`
		Failures []struct{ Count int }
		Figures  map[string]map[string]*float64
		Warnings []string
	}
	if err := json.Unmarshal(object.Bytes(), &o); err != nil {
		t.Fatal(err)
	}
	if o.Yield != nil || *o.High != 100 || o.Failures[0].Count != 3 || o.Figures["vswr"]["p50"] != nil || *o.Figures["gain_dbic"]["designed"] != 9 || len(o.Warnings) != 2 {
		t.Errorf("%s", &object)
	}
}

func TestSmallChange(t *testing.T) {
	for _, c := range []struct {
		f    objectives.Figure
		x    float64
		want string
	}{
		{objectives.Gain, 0.0866, "+0.087"}, {objectives.Gain, -1.26, "−1.3"}, {objectives.Gain, -1e-5, "0"}, {objectives.Length, -0.0018, "−1.8"},
		{objectives.Length, 0.1234, "+123"}, {objectives.VSWR, 0, "0"},
	} {
		if got := smallChange(c.f, c.x); got != c.want {
			t.Errorf("%s by %g: %q, want %q", c.f, c.x, got, c.want)
		}
	}
}

// comparison is one of a few frequencies, the last measurement farthest off.
func comparison(n int) *Comparison {
	d := models.Design{Feed: models.Feed{Impedance: 50}}
	c := &Comparison{Study: &tolerance.Study{Design: d, Samples: 40}, Copies: 39, Outside: 2, Allowance: 0.02, Failures: []tolerance.Failure{{Reason: "too thin", Count: 1}},
		Explanations: workshop.Explanations{Single: []workshop.Explanation{
			{Shifts: []workshop.Shift{{Name: "riser height", By: 1e-3, Undo: "lower"}}, Left: 0.7},
			{Shifts: []workshop.Shift{{Name: "permittivity of the insulation", By: -0.2, Plain: true}}, Left: 0.9}}}}
	for i := range n {
		c.Hz = append(c.Hz, 1e9+1e7*float64(i))
		c.Predicted = append(c.Predicted, complex(0.1, 0))
		c.Measured = append(c.Measured, complex(0.1, 0.01*float64(i+1)))
		c.Reach = append(c.Reach, 0.025)
		c.At = append(c.At, i)
		for k := range c.Explanations.Single {
			e := &c.Explanations.Single[k]
			e.Added = append(e.Added, complex(0.002*float64(k+1), 0.01*float64(i+1)))
		}
	}
	return c
}

// TestComparison: judged at each frequency, the worst one named, what is only
// half explained called so.
func TestComparison(t *testing.T) {
	c := comparison(4)
	var text, object bytes.Buffer
	if err := errors.Join(c.WriteText(&text), c.WriteJSON(&object)); err != nil {
		t.Fatal(err)
	}
	if c.Left() != 2 {
		t.Errorf("%d of 4 are outside, want 2", c.Left())
	}
	for _, due := range []string{"FAIL: the measured reflection leaves the tolerance band at 2 of 4 frequencies, most at 1030 MHz: 0.040 away, 0.025 allowed", "2 outside the band left aside",
		"no single dimension explains half", "riser height +1.00 mm", "lower by 1.00 mm", "permittivity of the insulation −0.2", "wind anew", "no answer from 1 of 40 copies: too thin"} {
		if !strings.Contains(text.String(), due) {
			t.Errorf("%q is not in\n%s", due, &text)
		}
	}
	var o struct {
		Passes       bool
		Sweep        []struct{ Inside bool }
		Explanations []struct {
			ByM *float64 `json:"by_m"`
			By  *float64
		}
	}
	if err := json.Unmarshal(object.Bytes(), &o); err != nil {
		t.Fatal(err)
	}
	if o.Passes || !o.Sweep[1].Inside || o.Sweep[2].Inside || *o.Explanations[0].ByM != 1e-3 || o.Explanations[0].By != nil || o.Explanations[1].ByM != nil || *o.Explanations[1].By != -0.2 {
		t.Errorf("%s", &object)
	}
	// The band's VSWR is that of the disc around the prediction.
	low, high := c.bandVSWR(0)
	if math.Abs(low-1.075/0.925) > 1e-12 || math.Abs(high-1.125/0.875) > 1e-12 {
		t.Errorf("band from VSWR %g to %g", low, high)
	}
}

// TestComparisonOfPairs: where one dimension leaves much, pairs stand under it,
// what a fitter can do to both beside them; the best pair leads the picture.
func TestComparisonOfPairs(t *testing.T) {
	c := comparison(4)
	single := c.Explanations.Single
	c.Explanations.Pairs = []workshop.Explanation{
		{Shifts: []workshop.Shift{single[0].Shifts[0], {Name: "line section", By: -2e-3, Undo: "lengthen"}}, Left: 0.04, Added: single[0].Added},
		{Shifts: []workshop.Shift{single[0].Shifts[0], single[1].Shifts[0]}, Left: 1.2, Added: single[1].Added},
	}
	var text, object bytes.Buffer
	if err := errors.Join(c.WriteText(&text), c.WriteJSON(&object)); err != nil {
		t.Fatal(err)
	}
	for _, due := range []string{"one alone leaves 70 % of it; two at once", "riser height +1.00 mm and line section −2.00 mm", "96 %", "lower by 1.00 mm, lengthen by 2.00 mm", "nothing"} {
		if !strings.Contains(text.String(), due) {
			t.Errorf("%q is not in\n%s", due, &text)
		}
	}
	var o struct {
		Pairs []struct {
			By       float64 `json:"by_m"`
			Explains float64 `json:"explains_pct"`
			Second   struct {
				Dimension string
				Undo      *string
			}
		}
	}
	if err := json.Unmarshal(object.Bytes(), &o); err != nil {
		t.Fatal(err)
	}
	if p := o.Pairs[0]; p.By != 1e-3 || p.Explains != 96 || p.Second.Dimension != "line section" || *p.Second.Undo != "lengthen" || o.Pairs[1].Second.Undo != nil {
		t.Errorf("%s", &object)
	}
	svg := strings.ReplaceAll(string(c.SVG()), "\u00a0", " ")
	for _, due := range []string{"explains 96 % of the difference", "To take it back: riser height, lower by"} {
		if !strings.Contains(svg, due) {
			t.Errorf("%q is not in the picture", due)
		}
	}
}

// TestOverlay: a picture of any number of frequencies, well formed, the same
// every time, whatever the reflection.
func TestOverlay(t *testing.T) {
	for _, n := range []int{1, 2, 50} {
		c := comparison(n)
		c.Measured[0] = 1
		c.Predicted[n-1] = 1
		svg := c.SVG()
		if !bytes.Equal(svg, c.SVG()) {
			t.Errorf("%d: two pictures of the same differ", n)
		}
		d := xml.NewDecoder(bytes.NewReader(svg))
		for {
			if _, err := d.Token(); errors.Is(err, io.EOF) {
				break
			} else if err != nil {
				t.Fatalf("%d: %v", n, err)
			}
		}
		for _, bad := range []string{"NaN", "Inf"} {
			if strings.Contains(string(svg), bad) {
				t.Errorf("%d: %s in the picture", n, bad)
			}
		}
		for _, due := range []string{"predicted", "measured", "tolerance band", "explained", "VSWR", "Ω"} {
			if !strings.Contains(string(svg), due) {
				t.Errorf("%d: no %q in the picture", n, due)
			}
		}
	}
}
