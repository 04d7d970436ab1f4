package report

import (
	"encoding/xml"
	"errors"
	"io"
	"math"
	"strings"
	"testing"

	"turnwise/cmd/internal/folder"
	"turnwise/models"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// studied is a study of four copies, one without an answer, held to a gain
// and a VSWR; VSWR decides.
func studied() *Tolerance {
	row := func(gain, vswr float64) tolerance.Copy {
		var c tolerance.Copy
		for i := range c.Figures {
			c.Figures[i] = math.NaN()
		}
		c.Figures[objectives.Gain], c.Figures[objectives.VSWR] = gain, vswr
		return c
	}
	change := func(up, down, share float64) tolerance.Change {
		return tolerance.Change{Up: up, Down: down, Share: share}
	}
	return &Tolerance{
		Study: &tolerance.Study{Samples: 4, Seed: 1, Distribution: tolerance.Uniform, Rung: objectives.Rung{Model: "full-wave", Fidelity: "standard"},
			Spec: objectives.Spec{Band: models.Band{From: 1.66e9, To: 1.7e9}}},
		From: [tolerance.DimensionCount]string{"brief", "default", "default", "default"},
		Result: &tolerance.Result{
			Limits:  []objectives.Limit{{Figure: objectives.Gain, AtLeast: true, Value: 8}, {Figure: objectives.VSWR, Value: 2}},
			Figures: []objectives.Figure{objectives.Gain, objectives.VSWR}, Unapplied: []string{"the limit on sidelobe"},
			Nominal: row(9, 1.8), Copies: []tolerance.Copy{row(8.5, 1.7), row(9, 1.9), row(9.5, 2.3), {Err: "too <thin>"}}, Answered: 3,
			Failures: []tolerance.Failure{{Reason: "too <thin>", Count: 1}}, Deciding: 1,
			Yield: tolerance.Yield{Share: 2. / 3, Low: 0.15, High: 0.954}, LimitYield: []tolerance.Yield{{Share: 1, Low: 0.301, High: 1}, {Share: 2. / 3, Low: 0.15, High: 0.954}},
			Sensitivities: []tolerance.Sensitivity{
				{Dimension: tolerance.FeedHeight, HalfWidth: 0.2e-3, Changes: []tolerance.Change{change(0, 0, 0.1), change(-0.3, 0.25, 0.9)}},
				{Dimension: tolerance.Diameter, HalfWidth: 0.5e-3, Changes: []tolerance.Change{change(0.2, -0.2, 0.9), change(-0.1, 0.09, 0.1)}},
				{Dimension: tolerance.Spacing, HalfWidth: 0.3e-3, Err: "too close"},
			},
			Adjustments: []tolerance.Adjustment{{Name: "riser height", Way: "lower", By: -0.4e-3, Before: 2.3, After: 1.62, Limit: 2,
				Untrimmed: tolerance.Yield{Share: 2. / 3}, Trimmed: tolerance.Yield{Share: 1}, Down: 2}},
		},
	}
}

// plain is a section as it is read, filled into the page of an otherwise bare
// sheet; it also holds the page to well-formed XML.
func plain(t *testing.T, v *toleranceView) string {
	t.Helper()
	var whole strings.Builder
	if err := pageTemplate.Execute(&whole, &page{Sheets: []sheetView{{ID: "0123456789", Tolerance: v}}}); err != nil {
		t.Fatal(err)
	}
	_, section, found := strings.Cut(whole.String(), `<div class="tolerance">`)
	if !found {
		return ""
	}
	section, _, _ = strings.Cut(section, `<details class="screen">`)
	var text []string
	d := xml.NewDecoder(strings.NewReader(`<div>` + section))
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			return strings.ReplaceAll(strings.Join(text, " "), noBreak, " ")
		}
		if err != nil {
			t.Fatal(err)
		}
		if words, ok := token.(xml.CharData); ok && strings.TrimSpace(string(words)) != "" {
			text = append(text, strings.TrimSpace(string(words)))
		}
	}
}

// TestToleranceSection: each number stands in its row, the dimension that
// moves the deciding figure most comes first, and what has no answer is said.
func TestToleranceSection(t *testing.T) {
	s := &Sheet{Member: &folder.Member{ID: "0123456789"}, Tolerance: studied()}
	v := s.toleranceView()
	charts := s.toleranceChart()
	if len(charts) != 1 || charts[0].Indicative {
		t.Fatalf("charts %+v", charts)
	}
	figure := charts[0].view()
	v.Chart = &figure
	text := plain(t, v)
	for _, due := range []string{
		"What workshop errors do Yield 66.7 % (15.0 to 95.4) of 4 copies keep every limit; 95 % confidence, Wilson 1927.",
		"off by a uniform error within its half-width, seed 1; full-wave standard over 1.66 to 1.7 GHz.",
		"Set aside: the limit on sidelobe", "No answer from 1 of 4 copies, counted in the interval both ways: too <thin>",
		"gain ≥ 8 dBic +1.00 dB 100.0 % 30.1 to 100.0 %", "VSWR ≤ 2 +0.20 66.7 % 15.0 to 95.4 %",
		// 5 and 95 % of three values lie a tenth of a step inside the outer ones.
		"gain, dBic 9.00 8.55 9.00 9.45", "VSWR 1.80 1.72 1.90 2.26",
		"Tightest dimension first, by its share of the variance of VSWR",
		"feed height ±0.2 mm, default −0.3 / +0.25 90 % diameter ±0.5 mm, brief −0.1 / +0.09 10 % spacing ±0.3 mm, default no answer at an end: too close",
		"Trim the riser height. On a poor copy (95 % are no worse), lower by 0.40 mm: VSWR 2.30 becomes 1.62. Within VSWR 2 are 67 % of the copies as made, about 100 % once each is trimmed.",
		"share, %", "of the variance of VSWR",
	} {
		if !strings.Contains(text, due) {
			t.Errorf("%q is not in\n%s", due, text)
		}
	}
}

// TestToleranceSectionBare: nobody asked, nothing could be studied, nothing to
// be held to and every dimension exact.
func TestToleranceSectionBare(t *testing.T) {
	member := &folder.Member{ID: "0123456789"}
	if text := plain(t, (&Sheet{Member: member}).toleranceView()); text != "" {
		t.Errorf("a section without a study: %s", text)
	}
	none := &Sheet{Member: member, ToleranceErr: "the design itself: too thin"}
	if text := plain(t, none.toleranceView()); !strings.Contains(text, "The copies could not be studied: the design itself: too thin") || strings.Contains(text, "Yield") {
		t.Errorf("a failed study reads %s", text)
	}
	bare := studied()
	bare.Result.Limits, bare.Result.LimitYield, bare.Result.Deciding, bare.Result.Sensitivities, bare.Result.Adjustments = nil, nil, -1, nil, nil
	s := &Sheet{Member: member, Tolerance: bare}
	text := plain(t, s.toleranceView())
	if !strings.Contains(text, "there is no yield") || strings.Contains(text, "Wilson") || strings.Contains(text, "adjustment") || strings.Contains(text, "Tightest") || len(s.toleranceChart()) != 0 {
		t.Errorf("a study without limits and errors reads %s", text)
	}
}
