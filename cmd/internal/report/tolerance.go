package report

import (
	"encoding/json"
	"fmt"
	"io"
	"math"
	"strings"
	"text/tabwriter"

	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// Tolerance is a study of copies and what it found, for people and scripts.
type Tolerance struct {
	Study  *tolerance.Study
	Result *tolerance.Result
	// From says of each half-width who gave it: option, brief or default.
	From [tolerance.DimensionCount]string
}

// HalfWidth is the half-width of a dimension as a person reads it.
func HalfWidth(d tolerance.Dimension, x float64) string {
	if d == tolerance.Permittivity {
		return fmt.Sprintf("%.4g", x)
	}
	return fmt.Sprintf("%.4g mm", x*1e3)
}

// WriteText writes the study for a person.
func (r *Tolerance) WriteText(w io.Writer) error {
	var b strings.Builder
	res, st := r.Result, r.Study
	fmt.Fprintf(&b, "design %s, %d copies, %s errors, seed %d, %s over %.6g to %.6g MHz\n\n", st.Design.ID(), st.Samples, st.Distribution, st.Seed,
		strings.TrimSpace(st.Rung.Model+" "+st.Rung.Fidelity), st.Spec.Band.From/1e6, st.Spec.Band.To/1e6)
	r.spreads(&b)
	for _, u := range res.Unapplied {
		fmt.Fprintf(&b, "set aside: %s (the model only indicates it)\n", u)
	}
	r.yields(&b)
	r.figures(&b)
	r.sensitivities(&b)
	r.adjustments(&b)
	for _, f := range res.Failures {
		fmt.Fprintf(&b, "no answer from %d of %d copies, counted in the interval both ways: %s\n", f.Count, st.Samples, f.Reason)
	}
	writeStatement(&b, res.Warnings, res.Statement)
	_, err := io.WriteString(w, b.String())
	return err
}

// writeStatement says the model's warnings, and what it is worth.
func writeStatement(w io.Writer, warnings []string, statement string) {
	for _, text := range warnings {
		fmt.Fprintf(w, "warning: %s\n", text)
	}
	fmt.Fprintf(w, "%s\n", statement)
}

// stated are the warnings with the statement last, as scripts read them.
func stated(warnings []string, statement string) []string {
	return append(append([]string{}, warnings...), statement)
}

func (r *Tolerance) spreads(w io.Writer) {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintf(t, "dimension\thalf-width\tfrom\n")
	for i, half := range r.Study.Spreads {
		d := tolerance.Dimension(i)
		if d.In(&r.Study.Design) {
			fmt.Fprintf(t, "%s\t±%s\t%s\n", d, HalfWidth(d, half), r.From[i])
		}
	}
	t.Flush()
	fmt.Fprintln(w)
}

// yieldText is a yield in per cent with its interval.
func yieldText(y tolerance.Yield) string {
	if math.IsNaN(y.Share) {
		return "–"
	}
	return fmt.Sprintf("%.1f %% (%.1f to %.1f)", 100*y.Share, 100*y.Low, 100*y.High)
}

func (r *Tolerance) yields(w io.Writer) {
	res := r.Result
	if len(res.Limits) == 0 {
		fmt.Fprintf(w, "the brief has no limits that the model can be held to: no yield\n\n")
		return
	}
	fmt.Fprintf(w, "yield %s of copies keep every limit; 95 %% confidence, Wilson 1927\n", yieldText(res.Yield))
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintf(t, "limit\tas designed\troom\tyield\n")
	for i, l := range res.Limits {
		fmt.Fprintf(t, "%s %s\t%s\t%s\t%s\n", l.Figure, limitWords(l), Quantity(l.Figure, res.Nominal.Figures[l.Figure]), signedAmount(l.Figure, res.Room(i)), yieldText(res.LimitYield[i]))
	}
	t.Flush()
	fmt.Fprintln(w)
}

// signedAmount is a difference of a figure, its sign always said.
func signedAmount(f objectives.Figure, x float64) string {
	sign := "+"
	if x < 0 {
		sign = "−"
	}
	return asDifference(sign+Amount(f, math.Abs(x)), f)
}

// smallChange is a difference of a figure in two digits, its sign always said.
func smallChange(f objectives.Figure, x float64) string {
	x = scale(f, x)
	size := math.Abs(x)
	text := fmt.Sprintf("%.2g", size)
	switch {
	case size < 5e-4:
		return "0"
	case size >= 99:
		text = fmt.Sprintf("%.0f", size)
	}
	if x < 0 {
		return "−" + text
	}
	return "+" + text
}

// asDifference puts the unit of a figure's difference behind a number.
func asDifference(text string, f objectives.Figure) string {
	unit := shownUnit(f)
	if unit == string(objectives.DBic) {
		unit = string(objectives.Decibel)
	}
	return strings.TrimSpace(text + " " + unit)
}

func (r *Tolerance) figures(w io.Writer) {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintf(t, "figure\tas designed\t5 %%\t50 %%\t95 %%\n")
	for _, f := range r.Result.Figures {
		values := r.Result.Values(f)
		fmt.Fprintf(t, "%s\t%s", f, Quantity(f, r.Result.Nominal.Figures[f]))
		for _, share := range percentiles {
			fmt.Fprintf(t, "\t%s", Quantity(f, tolerance.Percentile(values, share)))
		}
		fmt.Fprintln(t)
	}
	t.Flush()
	fmt.Fprintln(w)
}

// percentiles that are told of every figure.
var percentiles = []float64{0.05, 0.5, 0.95}

func (r *Tolerance) sensitivities(w io.Writer) {
	res := r.Result
	if len(res.Sensitivities) == 0 {
		fmt.Fprintf(w, "every dimension is exact: nothing to compare\n\n")
		return
	}
	judges := res.Judges()
	fmt.Fprintf(w, "tightest dimension first, by its share of the variance of %s; for each limit the change of room at plus / minus a half-width, and that share\n", judges[max(res.Deciding, 0)].Figure)
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintf(t, "dimension\thalf-width")
	for _, l := range judges {
		fmt.Fprintf(t, "\t%s", l.Figure)
	}
	fmt.Fprintln(t)
	for _, s := range res.Sensitivities {
		fmt.Fprintf(t, "%s\t±%s", s.Dimension, HalfWidth(s.Dimension, s.HalfWidth))
		if s.Err != "" {
			fmt.Fprintf(t, "\tno answer at an end: %s\n", s.Err)
			continue
		}
		for i, c := range s.Changes {
			f := judges[i].Figure
			fmt.Fprintf(t, "\t%s / %s, %.0f %%", smallChange(f, c.Up), asDifference(smallChange(f, c.Down), f), 100*c.Share)
		}
		fmt.Fprintln(t)
	}
	t.Flush()
	fmt.Fprintln(w)
}

func (r *Tolerance) adjustments(w io.Writer) {
	if len(r.Result.Adjustments) == 0 {
		return
	}
	fmt.Fprintf(w, "adjustment that best recovers VSWR first, shown on a poor copy (95 %% of the copies are no worse)\n")
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintf(t, "adjust\tthat way, so far\tVSWR from\tto\tcopies within VSWR %.4g as made\tafter trimming each\n", r.Result.Adjustments[0].Limit)
	for _, a := range r.Result.Adjustments {
		fmt.Fprintf(t, "%s\t%s\t%.2f\t%.2f\t%.0f %%\tabout %.0f %%\n", a.Name, wayText(a.Way, a.By), a.Before, a.After, 100*a.Untrimmed.Share, 100*a.Trimmed.Share)
	}
	t.Flush()
	fmt.Fprintln(w)
}

// wayText says which way and how far something is moved.
func wayText(way string, by float64) string {
	if by == 0 {
		return "leave as it is"
	}
	return fmt.Sprintf("%s by %.2f mm", way, math.Abs(by)*1e3)
}

// WriteJSON writes the study as one object.
func (r *Tolerance) WriteJSON(w io.Writer) error {
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	return e.Encode(r.object())
}

// object names everything as front.csv does, the unit at the end.
func (r *Tolerance) object() map[string]any {
	st, res := r.Study, r.Result
	widths := map[string]any{}
	for i, half := range st.Spreads {
		if tolerance.Dimension(i).In(&st.Design) {
			widths[tolerance.Dimensions[i].Column] = map[string]any{"half_width": half, "from": r.From[i]}
		}
	}
	o := map[string]any{
		"design_id": st.Design.ID(), "model": st.Rung.Model, "fidelity": orNull(st.Rung.Fidelity),
		"distribution": st.Distribution, "samples": st.Samples, "seed": st.Seed, "answered": res.Answered,
		"half_widths": widths, "limits": r.limitObjects(), "figures": r.figureObjects(), "sensitivities": r.sensitivityObjects(),
		"adjustments": r.adjustmentObjects(), "failures": failureObjects(res.Failures), "warnings": stated(res.Warnings, res.Statement), "set_aside": append([]string{}, res.Unapplied...),
		"yield_pct": nil, "yield_low_pct": nil, "yield_high_pct": nil, "interval": "Wilson 1927, 95 %",
	}
	if len(res.Limits) > 0 {
		putYield(o, "yield", res.Yield)
	}
	return o
}

func putYield(o map[string]any, name string, y tolerance.Yield) {
	o[name+"_pct"], o[name+"_low_pct"], o[name+"_high_pct"] = number(100*y.Share), number(100*y.Low), number(100*y.High)
}

func (r *Tolerance) limitObjects() []map[string]any {
	out := []map[string]any{}
	for i, l := range r.Result.Limits {
		o := map[string]any{"figure": objectives.Figures[l.Figure].Column, "at_most": nil, "at_least": nil, "designed": number(r.Result.Nominal.Figures[l.Figure]), "room": number(r.Result.Room(i))}
		o[map[bool]string{true: "at_least", false: "at_most"}[l.AtLeast]] = l.Value
		putYield(o, "yield", r.Result.LimitYield[i])
		out = append(out, o)
	}
	return out
}

func (r *Tolerance) figureObjects() map[string]any {
	out := map[string]any{}
	for _, f := range r.Result.Figures {
		o := map[string]any{"designed": number(r.Result.Nominal.Figures[f])}
		values := r.Result.Values(f)
		for _, share := range percentiles {
			o[fmt.Sprintf("p%g", 100*share)] = number(tolerance.Percentile(values, share))
		}
		out[objectives.Figures[f].Column] = o
	}
	return out
}

func (r *Tolerance) sensitivityObjects() []map[string]any {
	out := []map[string]any{}
	judges := r.Result.Judges()
	for _, s := range r.Result.Sensitivities {
		o := map[string]any{"dimension": tolerance.Dimensions[s.Dimension].Column, "half_width": s.HalfWidth, "error": orNull(s.Err)}
		changes := map[string]any{}
		for i, c := range s.Changes {
			changes[limitKey(judges[i])] = map[string]any{"per_half_width": number(c.PerHalfWidth()), "plus": number(c.Up), "minus": number(c.Down), "share_pct": number(100 * c.Share)}
		}
		o["room"] = changes
		out = append(out, o)
	}
	return out
}

// limitKey tells the two limits that one figure may have apart.
func limitKey(l objectives.Limit) string {
	return objectives.Figures[l.Figure].Column + map[bool]string{true: "_at_least", false: "_at_most"}[l.AtLeast]
}

func (r *Tolerance) adjustmentObjects() []map[string]any {
	out := []map[string]any{}
	for _, a := range r.Result.Adjustments {
		o := map[string]any{"adjust": a.Name, a.Column: a.By, "vswr_before": number(a.Before), "vswr_after": number(a.After), "vswr_limit": a.Limit, "copies_up": a.Up, "copies_down": a.Down}
		putYield(o, "untrimmed", a.Untrimmed)
		putYield(o, "trimmed", a.Trimmed)
		out = append(out, o)
	}
	return out
}

func failureObjects(fs []tolerance.Failure) []map[string]any {
	out := []map[string]any{}
	for _, f := range fs {
		out = append(out, map[string]any{"reason": f.Reason, "count": f.Count})
	}
	return out
}
