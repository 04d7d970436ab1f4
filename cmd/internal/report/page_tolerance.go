package report

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"turnwise/cmd/internal/chart"
	"turnwise/objectives"
	"turnwise/objectives/tolerance"
)

// toleranceView is what workshop errors do to a sheet's design.
type toleranceView struct {
	Err            string // why there is no more than this
	Yield, Lead    string
	Notes          []string // what else is to be known of the copies
	Limits         []yieldRow
	Figures        []spreadRow
	Judge, JudgeIn string // what ranks the dimensions, and the unit of its changes
	Dimensions     []dimensionRow
	Adjustment     string
	Chart          *figureView
}

// yieldRow is how many copies keep one limit.
type yieldRow struct{ Limit, Spare, Share, Interval string }

// spreadRow is how one figure lies among the copies.
type spreadRow struct {
	Name, Designed string
	Percentiles    []string
}

// noBreak is a space that no line ends at.
const noBreak = "\u00a0"

// dimensionRow is what one dimension does alone.
type dimensionRow struct{ Name, HalfWidth, From, Change, Share, Err string }

// toleranceView is nil where nobody asked for a study.
func (s *Sheet) toleranceView() *toleranceView {
	t := s.Tolerance
	switch {
	case s.ToleranceErr != "":
		return &toleranceView{Err: s.ToleranceErr}
	case t == nil:
		return nil
	}
	st, res := t.Study, t.Result
	v := &toleranceView{
		Lead: fmt.Sprintf("Every dimension of a copy is off by %s error within its half-width, seed %d; %s over %s.",
			map[tolerance.Distribution]string{tolerance.Uniform: "a uniform", tolerance.Normal: "a normal"}[st.Distribution], st.Seed,
			strings.TrimSpace(st.Rung.Model+" "+st.Rung.Fidelity), bandWords(st.Spec.Band)),
		Notes: t.notes(), Limits: t.yieldRows(), Figures: t.spreadRows(), Dimensions: t.dimensionRows(), Adjustment: t.adjustmentWords(),
	}
	judge := t.judge()
	v.Judge, v.JudgeIn = figureName(judge.Figure), asDifference("", judge.Figure)
	if len(res.Limits) > 0 {
		v.Yield = fmt.Sprintf("%s of %s", yieldText(res.Yield), plural(st.Samples, "copy", "copies"))
	}
	return v
}

// judge is the limit that ranks the dimensions.
func (r *Tolerance) judge() objectives.Limit { return r.Result.Judges()[max(r.Result.Deciding, 0)] }

// notes are limits that no copy is held to and copies without an answer.
func (r *Tolerance) notes() []string {
	var notes []string
	if len(r.Result.Limits) == 0 {
		notes = append(notes, "The brief has no limits that the model can be held to: there is no yield.")
	}
	for _, u := range r.Result.Unapplied {
		notes = append(notes, fmt.Sprintf("Set aside: %s (the model only indicates it).", u))
	}
	for _, f := range r.Result.Failures {
		notes = append(notes, fmt.Sprintf("No answer from %d of %s, counted in the interval both ways: %s", f.Count, plural(r.Study.Samples, "copy", "copies"), f.Reason))
	}
	return notes
}

func (r *Tolerance) yieldRows() []yieldRow {
	var rows []yieldRow
	for i, l := range r.Result.Limits {
		y := r.Result.LimitYield[i]
		row := yieldRow{Limit: limitMark(l), Spare: roomWords(l.Figure, r.Result.Room(i)), Share: "–", Interval: fmt.Sprintf("%.1f to %.1f %%", 100*y.Low, 100*y.High)}
		if !math.IsNaN(y.Share) {
			row.Share = fmt.Sprintf("%.1f %%", 100*y.Share)
		}
		rows = append(rows, row)
	}
	return rows
}

func (r *Tolerance) spreadRows() []spreadRow {
	var rows []spreadRow
	for _, f := range r.Result.Figures {
		row := spreadRow{Name: figureName(f), Designed: saidAmount(f, r.Result.Nominal.Figures[f])}
		if u := unitMark(f); u != "" {
			row.Name += ", " + u
		}
		values := r.Result.Values(f)
		for _, share := range percentiles {
			row.Percentiles = append(row.Percentiles, saidAmount(f, tolerance.Percentile(values, share)))
		}
		rows = append(rows, row)
	}
	return rows
}

func (r *Tolerance) dimensionRows() []dimensionRow {
	var rows []dimensionRow
	by, f := max(r.Result.Deciding, 0), r.judge().Figure
	for _, s := range r.Result.Sensitivities {
		row := dimensionRow{Name: named(s.Dimension.String()), HalfWidth: strings.ReplaceAll("±"+HalfWidth(s.Dimension, s.HalfWidth), " ", noBreak), From: r.From[s.Dimension], Err: s.Err}
		if s.Err == "" {
			c := s.Changes[by]
			row.Change, row.Share = smallChange(f, c.Up)+" / "+smallChange(f, c.Down), fmt.Sprintf("%.0f %%", 100*c.Share)
		}
		rows = append(rows, row)
	}
	return rows
}

// adjustmentWords tell of the adjustment that recovers VSWR best.
func (r *Tolerance) adjustmentWords() string {
	if len(r.Result.Adjustments) == 0 {
		return ""
	}
	a := &r.Result.Adjustments[0]
	if a.Up+a.Down == 0 {
		return "Nothing that can be trimmed on a finished copy brings its VSWR back."
	}
	return fmt.Sprintf("Trim the %s. On a poor copy (95 %% are no worse), %s: VSWR %.2f becomes %.2f. Within VSWR %s are %.0f %% of the copies as made, about %.0f %% once each is trimmed.",
		a.Name, wayText(a.Way, a.By), a.Before, a.After, trimmed(a.Limit, 2), 100*a.Untrimmed.Share, 100*a.Trimmed.Share)
}

// toleranceName is the chart of the dimensions, which stands with their table.
const toleranceName = "tolerance"

// toleranceChart sets the dimensions beside each other, where any moves the
// figure that ranks them.
func (s *Sheet) toleranceChart() []Chart {
	if s.Tolerance == nil {
		return nil
	}
	res, name := s.Tolerance.Result, figureName(s.Tolerance.judge().Figure)
	by := max(res.Deciding, 0)
	b := &chart.Bars{Names: [2]string{1: "of the variance of " + name}}
	for _, one := range res.Sensitivities {
		if one.Err != "" {
			continue
		}
		share := one.Changes[by].Share
		b.Groups = append(b.Groups, chart.Group{Name: named(one.Dimension.String()), Shares: [2]float64{1: share}, Texts: [2]string{1: fmt.Sprintf("%.0f %%", 100*share)}})
	}
	if !slices.ContainsFunc(b.Groups, func(g chart.Group) bool { return g.Shares[1] > 0 }) {
		return nil
	}
	return []Chart{{Name: toleranceName, Title: "What each dimension's error does", Figure: b,
		Caption:    fmt.Sprintf("Each dimension's share of the variance of %s, all taken as independent.", name),
		Indicative: objectives.Figures[s.Tolerance.judge().Figure].Match && s.Tolerance.Study.Rung.Indicative}}
}
