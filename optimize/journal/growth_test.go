package journal

import (
	"database/sql"
	"math"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"turnwise/optimize"
	"turnwise/optimize/front"
)

// search is a run of evaluations of every kind, their aims drawn from a
// stream so that the front grows for long.
func search(n int) (es []optimize.Evaluation) {
	rng := optimize.Stream(1, "growth", 0)
	for id := range n {
		far := 1 + rng.Float64()*rng.Float64()/(1+float64(id)/50)
		turn := rng.Float64() * math.Pi / 2
		e := sample(id, 0, 0, rng.Float64()-0.7)
		e.Aims = []float64{far * math.Cos(turn), far * math.Sin(turn)}
		if id%17 == 3 {
			e = failed(id, optimize.Failed, "on purpose")
		}
		es = append(es, e)
	}
	return es
}

func growth(t *testing.T, r *Reader) []Growth {
	t.Helper()
	all, err := r.Growth(ctx)
	must(t, err)
	return all
}

// Every row is what the front of all evaluations so far measures.
func TestGrowthIsTheFrontsMeasure(t *testing.T) {
	w := create(t, header())
	es := search(400)
	for i := 0; i < len(es); i += 37 {
		must(t, w.Record(es[i:min(i+37, len(es))]))
	}
	must(t, w.Decide(Stop, nil))
	all := growth(t, w.Reader)
	if n := len(all); n < 50 || n > 200 || all[0].Evaluations != 1 || all[n-1].Evaluations != len(es) {
		t.Fatalf("%d rows, from %v to %v", n, all[0], all[n-1])
	}
	for k, g := range all {
		if k > 0 && !(g.Hypervolume >= all[k-1].Hypervolume) {
			t.Errorf("the hypervolume fell to %g after %d evaluations", g.Hypervolume, g.Evaluations)
		}
		var points [][]float64
		var values []front.Value
		for i := range es[:g.Evaluations] {
			values = append(values, es[i].Value())
			if v := values[i]; v.Feasible() {
				points = append(points, v.Aims)
			}
		}
		want := Growth{Evaluations: g.Evaluations, Front: len(front.Front(values))}
		if len(points) > 0 {
			want.Reference = front.Span(points).Nadir
			want.Hypervolume = front.Hypervolume(points, want.Reference)
		}
		if d := cmp.Diff(want, g, cmpopts.EquateApprox(1e-12, 1e-12)); d != "" {
			t.Errorf("after %d evaluations (-want +got)\n%s", g.Evaluations, d)
		}
	}
}

// A journal that is closed and gone on with, and one that was begun without
// growth, hold what an unbroken one holds.
func TestGrowthGoesOn(t *testing.T) {
	es := search(300)
	whole := create(t, header())
	must(t, whole.Record(es))
	want := growth(t, whole.Reader)
	for name, between := range map[string]string{"as it is": "", "begun without": "DROP TABLE growth"} {
		w := create(t, header())
		must(t, w.Record(es[:130]))
		if between != "" {
			_, err := w.db.Exec(between)
			must(t, err)
			early := growth(t, w.Reader)
			if last := early[len(early)-1]; last.Evaluations != 130 || last.Front == 0 {
				t.Errorf("%s: read before it is gone on with, its last row is %+v", name, last)
			}
		}
		must(t, w.Close())
		w, err := Open(w.Path())
		must(t, err)
		defer w.Close()
		must(t, w.Record(es[130:]))
		if d := cmp.Diff(want, growth(t, w.Reader)); d != "" {
			t.Errorf("%s (-want +got)\n%s", name, d)
		}
	}
}

// What a failed transaction counted is forgotten.
func TestGrowthOfWhatWasRefused(t *testing.T) {
	w := create(t, header())
	es := search(20)
	must(t, w.Record(es[:10]))
	if err := w.Record(append(es[10:15:15], es[0])); err == nil {
		t.Fatal("a candidate was recorded twice")
	}
	must(t, w.Record(es[10:]))
	all := growth(t, w.Reader)
	if got := all[len(all)-1].Evaluations; got != 20 || len(all) != 20 {
		t.Errorf("%d rows up to %d evaluations, want 20", len(all), got)
	}
}

// Four aims are counted but not measured.
func TestGrowthOfManyAims(t *testing.T) {
	h := header()
	h.Aims = []string{"a", "b", "c", "d"}
	w := create(t, h)
	e := sample(0, 1, 1, 0)
	e.Aims = []float64{1, 2, 3, 4}
	must(t, w.Record([]optimize.Evaluation{e}))
	if g := growth(t, w.Reader); len(g) != 1 || g[0].Front != 1 || !math.IsNaN(g[0].Hypervolume) {
		t.Errorf("growth %+v", g)
	}
}

// The table is plain to read with any client.
func TestGrowthTable(t *testing.T) {
	w := create(t, header())
	must(t, w.Record(search(3)))
	db, err := sql.Open("sqlite", w.Path())
	must(t, err)
	defer db.Close()
	if got := row(t, db, "SELECT count(*), max(evaluations), json_valid(reference) FROM growth"); got != "[3 3 1]" {
		t.Errorf("the table holds %s", got)
	}
}
