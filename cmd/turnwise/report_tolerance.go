package main

import (
	"context"
	"fmt"
	"maps"
	"runtime"
	"slices"

	"turnwise/cmd/internal/report"
	"turnwise/objectives/tolerance"
)

// studySheets studies copies of the chosen designs, of the knee where none of
// the front is chosen. A design that cannot be studied says so on its sheet.
func studySheets(ctx context.Context, s streams, r *report.Run, copies int) error {
	sheets := toStudy(r)
	tellUnstudied(s, r, len(sheets))
	for _, sheet := range sheets {
		bar := newProgress(s)
		err := studySheet(ctx, r, sheet, copies, counting(bar))
		bar.end()
		if ctx.Err() != nil {
			return stopped(ctx.Err())
		}
		if err != nil {
			sheet.ToleranceErr = firstLine(err.Error())
		}
	}
	return nil
}

// tellUnstudied says what no copies are made of: chosen designs without a
// sheet, as refined ones are, and a front with nothing to study.
func tellUnstudied(s streams, r *report.Run, studied int) {
	for _, id := range slices.Sorted(maps.Keys(r.Chosen)) {
		if !slices.ContainsFunc(r.Sheets, func(sheet report.Sheet) bool { return sheet.Member.ID == id }) {
			fmt.Fprintf(s.err, "%s is chosen but has no sheet, so that the report tells of no copies of it; turnwise tolerance does\n", id)
		}
	}
	if studied == 0 {
		fmt.Fprintln(s.err, "no copies were made: no design with a sheet is chosen, and the front has no knee")
	}
}

// toStudy are the sheets of the chosen designs, else that of the knee.
func toStudy(r *report.Run) []*report.Sheet {
	var chosen, knee []*report.Sheet
	for i := range r.Sheets {
		sheet := &r.Sheets[i]
		if r.Chosen[sheet.Member.ID] {
			chosen = append(chosen, sheet)
		}
		if sheet.Member.ID == r.Knee {
			knee = append(knee, sheet)
		}
	}
	if len(chosen) > 0 {
		return chosen
	}
	return knee
}

// studySheet draws copies as tolerance does by default, by the run's own brief
// and finest model.
func studySheet(ctx context.Context, r *report.Run, sheet *report.Sheet, copies int, progress func(done, total, failed int)) error {
	o := spreading{distribution: string(tolerance.Uniform), samples: copies, seed: 1, workers: runtime.NumCPU()}
	st, from, err := o.study(&r.Brief.Spec)
	if err != nil {
		return err
	}
	st.Design, st.Spec, st.Rung, st.Progress = sheet.Member.Design, r.Brief.Spec, r.Problem.Finest(), progress
	res, err := st.Run(ctx)
	if err != nil {
		return err
	}
	sheet.Tolerance = &report.Tolerance{Study: &st, Result: res, From: from}
	return nil
}
