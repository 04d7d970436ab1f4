package journal

import (
	"database/sql"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

func TestViews(t *testing.T) {
	w := create(t, header())
	bad := failed(2, optimize.Failed, "wire too short")
	must(t, w.Record([]optimize.Evaluation{sample(0, 12, 0.5, 0), sample(1, 13, 0.75, 0.25), bad}))
	db, err := sql.Open("sqlite", w.Path())
	must(t, err)
	defer db.Close()
	for query, want := range map[string]string{
		"SELECT candidate, kind, stage, status, turns, conductor, gain_dbic, aim_gain, feasible FROM evaluations WHERE seq = 1": "[0 search genetic ok 8.25 2 mm copper 12 -12 1]",
		"SELECT conductor, axial_ratio_db IS NULL, limit_axial_ratio, violation, feasible FROM evaluations WHERE seq = 2":       "[4 mm o'tube 1 0.25 0.25 0]",
		"SELECT reason, gain_dbic IS NULL, violation IS NULL, feasible, design IS NULL FROM evaluations WHERE seq = 3":          "[wire too short 1 1 0 1]",
		"SELECT model, duration_s, design, question FROM evaluations WHERE seq = 2":                                             fmt.Sprint("[closed-form 1 0.001234567 ", key("d", 1), " ", key("q", 1), "]"),
		"SELECT candidate, response ->> 'id' FROM questions ORDER BY seq DESC LIMIT 1":                                          "[1 1]",
		"SELECT model, response FROM answers WHERE id = 1":                                                                      `[closed-form 1 {"id":0}]`,
		"SELECT * FROM failures":                     "[failed wire too short 1]",
		"SELECT count(*), min(gain_dbic) FROM front": "[1 12]",
	} {
		if got := row(t, db, query); got != want {
			t.Errorf("%s\n\tgives %s\n\twant  %s", query, got, want)
		}
	}
}

func row(t *testing.T, db *sql.DB, query string) string {
	t.Helper()
	rows, err := db.Query(query)
	must(t, err)
	defer rows.Close()
	names, err := rows.Columns()
	must(t, err)
	cells := make([]any, len(names))
	into := make([]any, len(names))
	for i := range cells {
		into[i] = &cells[i]
	}
	if !rows.Next() {
		t.Fatalf("%s: no row, %v", query, rows.Err())
	}
	must(t, rows.Scan(into...))
	return fmt.Sprint(cells)
}

func frontIDs(t testing.TB, r *Reader) []int {
	t.Helper()
	es, err := r.Front(ctx)
	must(t, err)
	var ids []int
	for _, e := range es {
		ids = append(ids, e.ID)
	}
	return ids
}

func TestFinalEvaluationsDecideTheFront(t *testing.T) {
	w := create(t, header())
	must(t, w.Record([]optimize.Evaluation{
		sample(3, 12, 0.5, 0), sample(1, 12, 0.5, 0), sample(0, 11, 0.6, 0), sample(2, 9, 0.3, 0), sample(4, 15, 0.9, 0.1)}))
	if got := frontIDs(t, w.Reader); !slices.Equal(got, []int{1, 2}) {
		t.Errorf("front %v: of the equal 1 and 3 the lower stays, 0 is dominated, 4 breaks a limit", got)
	}
	// 1 breaks its limit in its final evaluation.
	must(t, w.RecordFinal([]optimize.Evaluation{sample(1, 12, 0.5, 0.2), sample(0, 11, 0.6, 0)}))
	must(t, w.RecordFinal([]optimize.Evaluation{sample(0, 11.5, 0.6, 0), failed(2, optimize.Failed, "gone")}))
	if got := frontIDs(t, w.Reader); !slices.Equal(got, []int{3}) {
		t.Errorf("front %v: 3, which 1 had hidden, hides 0; 2 failed", got)
	}
	must(t, w.RecordFinal([]optimize.Evaluation{sample(3, 11, 0.7, 0)}))
	es, err := w.Front(ctx)
	must(t, err)
	if len(es) != 1 || es[0].ID != 0 || !es[0].Final || es[0].Figures[0] != 11.5 {
		t.Errorf("front %+v: the last final evaluation of 0 alone", es)
	}
	finals, err := w.Final(ctx)
	must(t, err)
	var got []float64
	for _, e := range finals {
		if e.Status == optimize.OK {
			got = append(got, float64(e.ID), e.Figures[0])
		}
	}
	if d := cmp.Diff([]float64{0, 11.5, 1, 12, 3, 11}, got); d != "" {
		t.Errorf("final evaluations (-want +got)\n%s", d)
	}
	c, err := w.Counts(ctx)
	if must(t, err); c.Evaluations != 5 || c.Final != 5 {
		t.Errorf("counts %+v", c)
	}
	if past, err := w.Past(ctx); err != nil || len(past) != 5 || past[1].Limits[0] != 0 {
		t.Errorf("the past must not see final evaluations: %+v, %v", past, err)
	}
}

// TestFrontAgainstDefinition compares the view with the definition, over
// reopened journals and refused groups.
func TestFrontAgainstDefinition(t *testing.T) {
	dir := memory(t)
	rapid.Check(t, func(rt *rapid.T) {
		h := Header{Aims: []string{"a", "b", "c"}, Limits: []string{"l"}, Models: []string{"m0", "m1"}}
		w, err := Create(filepath.Join(dir, File), h)
		if err != nil {
			rt.Fatal(err)
		}
		defer func() {
			if err := errors.Join(w.Close(), os.Remove(w.Path())); err != nil {
				rt.Fatal(err)
			}
		}()
		var all []optimize.Evaluation
		grid := rapid.Map(rapid.IntRange(-3, 3), func(i int) float64 { return float64(i) })
		ids := rapid.Permutation([]int{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15}).Draw(rt, "order")
		for len(ids) > 0 {
			n := rapid.IntRange(1, len(ids)).Draw(rt, "group")
			var group []optimize.Evaluation
			for _, id := range ids[:n] {
				group = append(group, optimize.Evaluation{
					Candidate: optimize.Candidate{ID: id, Rung: rapid.IntRange(0, 1).Draw(rt, "rung"), Point: space.Point{}},
					Score: optimize.Score{Aims: rapid.SliceOfN(grid, 3, 3).Draw(rt, "aims"),
						Limits: []float64{grid.Draw(rt, "limit")}},
					Status: optimize.OK})
			}
			ids = ids[n:]
			if rapid.Bool().Draw(rt, "refused") && len(all) > 0 {
				// Same group with a candidate that is there already.
				if w.Record(append(slices.Clone(group), all[0])) == nil {
					rt.Fatal("recorded twice")
				}
			}
			if err := w.Record(group); err != nil {
				rt.Fatal(err)
			}
			all = append(all, group...)
			if rapid.Bool().Draw(rt, "reopen") {
				if err := w.Close(); err != nil {
					rt.Fatal(err)
				}
				if w, err = Open(w.Path()); err != nil {
					rt.Fatal(err)
				}
			}
		}
		slices.SortFunc(all, func(a, b optimize.Evaluation) int { return a.ID - b.ID })
		var want []int
		for i := range all {
			if onFront(all, i) {
				want = append(want, all[i].ID)
			}
		}
		got := frontIDs(t, w.Reader)
		slices.Sort(got)
		if !slices.Equal(got, want) {
			rt.Fatalf("front %v, want %v", got, want)
		}
	})
}

// onFront is the definition of the front, word for word.
func onFront(all []optimize.Evaluation, i int) bool {
	e := &all[i]
	if e.Rung != 1 || front.Violation(e.Limits) > 0 {
		return false
	}
	for k := range all {
		o := &all[k]
		if k == i || o.Rung != 1 || front.Violation(o.Limits) > 0 {
			continue
		}
		noWorse, better := true, false
		for j := range e.Aims {
			noWorse = noWorse && o.Aims[j] <= e.Aims[j]
			better = better || o.Aims[j] < e.Aims[j]
		}
		if noWorse && (better || o.ID < e.ID) {
			return false
		}
	}
	return true
}
