package journal

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"turnwise/optimize"
	"turnwise/optimize/space"
)

var ctx = context.Background()

func header() Header {
	return Header{
		Brief: "title: kite camera\n", Digest: "d1", Program: "0.1", Seed: math.MaxUint64, Machine: "two cores",
		Models: []string{"closed-form 1"},
		Variables: []Variable{{Name: "turns"}, {Name: "diameter_1_m"},
			{Name: "conductor", Choices: []string{"2 mm copper", "4 mm o'tube"}}},
		Figures: []string{"gain_dbic", "axial_ratio_db", "length_m"},
		Aims:    []string{"gain", "length"},
		Limits:  []string{"axial_ratio"},
	}
}

func key(parts ...any) string {
	sum := sha256.Sum256(fmt.Append(nil, parts...))
	return hex.EncodeToString(sum[:])
}

// sample is an evaluation that header describes; gain and length in their
// own directions, the axial ratio's excess over its limit.
func sample(id int, gain, length, excess float64) optimize.Evaluation {
	return optimize.Evaluation{
		Candidate: optimize.Candidate{ID: id, Point: space.Point{8.25, 0.058, float64(id % 2)}, From: "genetic"},
		Score: optimize.Score{
			Figures: []float64{gain, math.NaN(), length},
			Aims:    []float64{-gain, length},
			Limits:  []float64{excess},
			Answers: []optimize.Answer{{Key: key("q", id), Design: key("d", id), Model: "closed-form 1",
				Response: fmt.Appendf(nil, `{"id":%d}`, id)}},
		},
		Status: optimize.OK, Duration: 1234567,
	}
}

func failed(id int, status optimize.Status, reason string) optimize.Evaluation {
	e := sample(id, 0, 0, 0)
	e.Score = optimize.Score{}
	e.Status, e.Err = status, reason
	return e
}

func create(t testing.TB, h Header) *Writer {
	t.Helper()
	w, err := Create(filepath.Join(t.TempDir(), File), h)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { w.Close() })
	return w
}

func must(t testing.TB, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

// bits compares evaluations by the bits of their numbers, any NaN equal to
// any other, without answers.
var bits = cmp.Options{
	cmp.Comparer(func(a, b float64) bool {
		return math.IsNaN(a) && math.IsNaN(b) || math.Float64bits(a) == math.Float64bits(b)
	}),
	cmpopts.IgnoreFields(optimize.Score{}, "Answers"),
	cmpopts.EquateEmpty(),
}

func TestPastIsWhatWasRecorded(t *testing.T) {
	w := create(t, header())
	evs := []optimize.Evaluation{
		sample(2, 12.5, 0.9, -0.1),
		sample(0, math.Copysign(0, -1), math.Nextafter(0.3, 1), 5e-324),
		failed(3, optimize.Failed, "the winding meets itself: raise spacing_1_m"),
		sample(1, math.MaxFloat64, -1e15, math.Copysign(0, -1)),
		failed(4, optimize.TimedOut, "no answer within 30 s"),
	}
	evs[3].Reused = true
	must(t, w.Record(evs[:3]))
	must(t, w.Record(evs[3:]))
	want := slices.Clone(evs)
	slices.SortFunc(want, func(a, b optimize.Evaluation) int { return a.ID - b.ID })
	for _, reopen := range []bool{false, true} {
		if reopen {
			must(t, w.Close())
			var err error
			w, err = Open(w.Path())
			must(t, err)
			defer w.Close()
		}
		past, err := w.Past(ctx)
		must(t, err)
		if d := cmp.Diff(want, past, bits); d != "" {
			t.Errorf("reopened %v: past differs (-want +got)\n%s", reopen, d)
		}
		h := w.Header()
		if d := cmp.Diff(header(), h, cmpopts.IgnoreFields(Header{}, "Created")); d != "" || time.Since(h.Created) > time.Hour {
			t.Errorf("header, made %v, differs (-want +got)\n%s", h.Created, d)
		}
	}
	var order []int
	for e, err := range w.Since(ctx, 1) {
		must(t, err)
		order = append(order, e.ID)
	}
	if !slices.Equal(order, []int{0, 3, 1, 4}) {
		t.Errorf("recorded after the first: candidates %v", order)
	}
	c, err := w.Counts(ctx)
	must(t, err)
	want2 := Counts{Evaluations: 5, OK: 3, Failed: 1, TimedOut: 1, Reused: 1, Feasible: 2, Answers: 3, Bytes: c.Bytes}
	if c != want2 || c.Bytes < 4096 {
		t.Errorf("counts %+v, want %+v", c, want2)
	}
}

func TestAnswersAreStoredOnce(t *testing.T) {
	w := create(t, header())
	shared := optimize.Answer{Key: key("shared"), Design: key("d"), Model: "full-wave 2", Response: []byte(`{"z":[50,0.1]}`)}
	unanswered := optimize.Answer{Key: key("hard"), Design: key("hard design"), Model: "full-wave 2"}
	a, b, c := sample(0, 1, 1, 0), sample(1, 2, 2, 0), failed(2, optimize.TimedOut, "slow")
	a.Answers = append(a.Answers, shared)
	b.Answers = []optimize.Answer{shared, shared}
	c.Answers = []optimize.Answer{unanswered}
	must(t, w.Record([]optimize.Evaluation{a, b, c}))
	got, found, err := w.Answer(ctx, shared.Key)
	if err != nil || !found || !cmp.Equal(got, shared) {
		t.Errorf("answer %+v, %v, %v", got, found, err)
	}
	if _, found, err := w.Answer(ctx, unanswered.Key); found || err != nil {
		t.Errorf("a question without an answer: found %v, %v", found, err)
	}
	n, err := w.Counts(ctx)
	if must(t, err); n.Answers != 2 {
		t.Errorf("%d answers stored, want 2", n.Answers)
	}
	qs, err := w.Questions(ctx, 3)
	if must(t, err); !cmp.Equal(qs, c.Answers) {
		t.Errorf("questions of the failed one: %+v", qs)
	}
	// It may be answered later.
	unanswered.Response = []byte("{}")
	d := sample(3, 3, 3, 0)
	d.Answers = []optimize.Answer{unanswered}
	must(t, w.Record([]optimize.Evaluation{d}))
	if got, found, err := w.Answer(ctx, unanswered.Key); !found || err != nil || !cmp.Equal(got, unanswered) {
		t.Errorf("late answer %+v, %v, %v", got, found, err)
	}
	qs, err = w.Questions(ctx, 2)
	if must(t, err); !cmp.Equal(qs, b.Answers) {
		t.Errorf("questions %+v, want %+v", qs, b.Answers)
	}
}

func TestRefusesWhatTheHeaderDoesNotDescribe(t *testing.T) {
	w := create(t, header())
	for name, spoil := range map[string]func(*optimize.Evaluation){
		"coordinates":    func(e *optimize.Evaluation) { e.Point = e.Point[:2] },
		"figures":        func(e *optimize.Evaluation) { e.Figures = append(e.Figures, 1) },
		"aims":           func(e *optimize.Evaluation) { e.Aims = nil },
		"limits":         func(e *optimize.Evaluation) { e.Limits = nil },
		"infinite":       func(e *optimize.Evaluation) { e.Figures[1] = math.Inf(-1) },
		"unknown status": func(e *optimize.Evaluation) { e.Status = "perhaps" },
	} {
		e := sample(1, 1, 1, 0)
		spoil(&e)
		err := w.Record([]optimize.Evaluation{sample(0, 1, 1, 0), e})
		if err == nil || !strings.Contains(err.Error(), name) || !strings.Contains(err.Error(), "candidate 1") {
			t.Errorf("%s: error %v", name, err)
		}
	}
	must(t, w.Record([]optimize.Evaluation{sample(0, 1, 1, 0)}))
	if err := w.Record([]optimize.Evaluation{sample(1, 1, 1, 0), sample(0, 1, 1, 0)}); err == nil {
		t.Error("a candidate was recorded twice")
	}
	past, err := w.Past(ctx)
	if must(t, err); len(past) != 1 {
		t.Errorf("%d evaluations on record, want 1: a refused group must leave nothing", len(past))
	}
	must(t, w.Record([]optimize.Evaluation{sample(1, 1, 1, 0)}))
}

func TestHeaderIsChecked(t *testing.T) {
	dir := t.TempDir()
	for want, spoil := range map[string]func(*Header){
		"without aims":   func(h *Header) { h.Aims = nil },
		`"turns" stands`: func(h *Header) { h.Figures = append(h.Figures, "turns") },
		`"SEQ" stands`:   func(h *Header) { h.Variables[0].Name = "SEQ" },
		"without quotes": func(h *Header) { h.Limits = []string{`a"b`} },
		"at most 1000":   func(h *Header) { h.Figures = make([]string, 1000) },
	} {
		h := header()
		spoil(&h)
		if _, err := Create(filepath.Join(dir, File), h); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: error %v", want, err)
		}
	}
	if names, err := os.ReadDir(dir); err != nil || len(names) > 0 {
		t.Errorf("left behind %v, %v", names, err)
	}
}

func TestDecisions(t *testing.T) {
	w := create(t, header())
	w.now = func() time.Time { return time.UnixMicro(1_700_000_000_123_456) }
	must(t, w.Decide(Start, map[string]int{"workers": 2}))
	must(t, w.Record([]optimize.Evaluation{sample(0, 1, 1, 0)}))
	must(t, w.Decide(Stop, nil))
	at := time.UnixMicro(1_700_000_000_123_456).UTC()
	ds, err := w.Decisions(ctx)
	must(t, err)
	want := []Decision{{1, Start, []byte(`{"workers":2}`), 0, at}, {2, Stop, []byte("null"), 1, at}}
	if d := cmp.Diff(want, ds); d != "" {
		t.Errorf("decisions (-want +got)\n%s", d)
	}
	if err := w.Decide("odd", math.NaN()); err == nil {
		t.Error("a detail without a JSON form was taken")
	}
	var seen string
	must(t, w.db.QueryRow("SELECT at FROM decisions WHERE kind = 'stop'").Scan(&seen))
	if seen != "2023-11-14T22:13:20.123Z" {
		t.Errorf("the view gives %q", seen)
	}
}

func TestPlaces(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "odd ?#%25 é name")
	path := filepath.Join(dir, File)
	var wrong *Error
	if _, err := Create(path, header()); !errors.Is(err, fs.ErrNotExist) || !errors.As(err, &wrong) {
		t.Errorf("no folder: %v", err)
	}
	must(t, os.Mkdir(dir, 0o755))
	for _, open := range []func() error{
		func() error { _, err := Open(path); return err },
		func() error { _, err := Read(path); return err },
	} {
		if err := open(); !errors.Is(err, fs.ErrNotExist) || !errors.As(err, &wrong) {
			t.Errorf("no journal: %v", err)
		}
	}
	w, err := Create(path, header())
	must(t, err)
	must(t, w.Record([]optimize.Evaluation{sample(0, 1, 1, 0)}))
	if _, err := Create(path, header()); !errors.Is(err, fs.ErrExist) {
		t.Errorf("a second journal: %v", err)
	}
	must(t, w.Close())
	names, err := filepath.Glob(filepath.Join(filepath.Dir(dir), "*", "*"))
	if must(t, err); len(names) != 1 {
		t.Errorf("a closed journal is one file, found %v", names)
	}
	r, err := Read(path)
	must(t, err)
	defer r.Close()
	if past, err := r.Past(ctx); err != nil || len(past) != 1 {
		t.Errorf("%d evaluations, %v", len(past), err)
	}
	if err := r.Verify(ctx); err != nil {
		t.Error(err)
	}
}

func TestForeignFiles(t *testing.T) {
	w := create(t, header())
	path := w.Path()
	for _, test := range []struct {
		statement string
		want      error
	}{
		{"PRAGMA user_version = 2", ErrNewer},
		{"PRAGMA application_id = 7", ErrForeign}, // whatever its version
	} {
		_, err := w.db.Exec(test.statement)
		must(t, err)
		if _, err := Read(path); !errors.Is(err, test.want) {
			t.Errorf("%s: reading gives %v", test.statement, err)
		}
		if _, err := Open(path); !errors.Is(err, test.want) {
			t.Errorf("%s: opening gives %v", test.statement, err)
		}
	}
	text := filepath.Join(t.TempDir(), File)
	must(t, os.WriteFile(text, []byte(strings.Repeat("no database\n", 500)), 0o644))
	if _, err := Open(text); !errors.Is(err, ErrDamaged) {
		t.Errorf("a text file: %v", err)
	}
	if _, err := Open(t.TempDir()); !errors.Is(err, ErrForeign) {
		t.Errorf("a folder: %v", err)
	}
}

// TestRoundTrip records random groups, reopening at random, and compares
// what comes back.
func TestRoundTrip(t *testing.T) {
	dir := memory(t)
	runs := 0
	number := rapid.OneOf(rapid.Float64(), rapid.SampledFrom([]float64{0, math.Copysign(0, -1), math.NaN(), 1, -7, 1e300}))
	vector := func(n int) *rapid.Generator[[]float64] { return rapid.SliceOfN(number, n, n) }
	rapid.Check(t, func(t *rapid.T) {
		runs++
		h := Header{Aims: make([]string, rapid.IntRange(1, 4).Draw(t, "aims"))}
		h.Limits = make([]string, rapid.IntRange(0, 3).Draw(t, "limits"))
		h.Figures = make([]string, rapid.IntRange(0, 5).Draw(t, "figures"))
		h.Variables = make([]Variable, rapid.IntRange(0, 4).Draw(t, "variables"))
		for i := range h.Variables {
			h.Variables[i].Name = fmt.Sprint("v", i)
		}
		for letter, names := range map[string][]string{"a": h.Aims, "l": h.Limits, "f": h.Figures} {
			for i := range names {
				names[i] = fmt.Sprint(letter, i)
			}
		}
		w, err := Create(filepath.Join(dir, fmt.Sprint(runs)), h)
		if err != nil {
			t.Fatal(err)
		}
		var want []optimize.Evaluation
		ids := rapid.SliceOfNDistinct(rapid.IntRange(0, 99), 0, 12, rapid.ID[int]).Draw(t, "candidates")
		for len(ids) > 0 {
			n := rapid.IntRange(1, len(ids)).Draw(t, "group")
			var group []optimize.Evaluation
			for _, id := range ids[:n] {
				e := optimize.Evaluation{
					Candidate: optimize.Candidate{ID: id, Rung: rapid.IntRange(0, 2).Draw(t, "rung"),
						Point: vector(len(h.Variables)).Draw(t, "point"), From: rapid.String().Draw(t, "stage")},
					Status:   rapid.SampledFrom([]optimize.Status{optimize.OK, optimize.Failed, optimize.TimedOut}).Draw(t, "status"),
					Duration: time.Duration(rapid.Int64().Draw(t, "duration")),
					Reused:   rapid.Bool().Draw(t, "reused"),
				}
				if e.Status != optimize.OK {
					e.Err = rapid.String().Draw(t, "reason")
				}
				if e.Status == optimize.OK || rapid.Bool().Draw(t, "scored") {
					e.Figures = vector(len(h.Figures)).Draw(t, "figures")
					e.Aims = vector(len(h.Aims)).Draw(t, "aims")
					e.Limits = vector(len(h.Limits)).Draw(t, "limits")
				}
				group = append(group, e)
			}
			ids = ids[n:]
			if err := w.Record(group); err != nil {
				t.Fatal(err)
			}
			want = append(want, group...)
			if rapid.Bool().Draw(t, "reopen") {
				if err := w.Close(); err != nil {
					t.Fatal(err)
				}
				if w, err = Open(w.Path()); err != nil {
					t.Fatal(err)
				}
			}
		}
		slices.SortFunc(want, func(a, b optimize.Evaluation) int { return a.ID - b.ID })
		past, err := w.Past(ctx)
		if err != nil {
			t.Fatal(err)
		}
		if d := cmp.Diff(want, past, bits); d != "" {
			t.Fatalf("past differs (-want +got)\n%s", d)
		}
		if err := w.Close(); err != nil {
			t.Fatal(err)
		}
		os.Remove(w.Path())
	})
}

// TestPaging streams more rows than one query fetches, while rows are added.
func TestPaging(t *testing.T) {
	w := create(t, header())
	const n = 2*pageRows + 17
	group := make([]optimize.Evaluation, n)
	for i := range group {
		group[i] = sample(n-1-i, 1, 1, 1)
	}
	must(t, w.Record(group[:n-1]))
	seen := 0
	for e, err := range w.Since(ctx, 0) {
		must(t, err)
		if seen == 0 {
			must(t, w.Record(group[n-1:]))
		}
		if e.ID != n-1-seen {
			t.Fatalf("row %d is candidate %d", seen, e.ID)
		}
		seen++
	}
	if seen != n {
		t.Errorf("%d rows, want %d", seen, n)
	}
	past, err := w.Past(ctx)
	must(t, err)
	for i := range past {
		if past[i].ID != i {
			t.Fatalf("place %d holds candidate %d", i, past[i].ID)
		}
	}
	if len(past) != n {
		t.Errorf("%d past, want %d", len(past), n)
	}
	stopped, cancel := context.WithCancel(ctx)
	cancel()
	if _, err := w.Past(stopped); !errors.Is(err, context.Canceled) {
		t.Errorf("after cancelling: %v", err)
	}
}
