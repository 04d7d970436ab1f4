package optimize_test

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"pgregory.net/rapid"

	"turnwise/optimize"
	"turnwise/optimize/space"
)

// counter asks 0, 1, 2, … in batches; what it is told moves where it goes on,
// so that a wrong past shows.
type counter struct {
	batch, batches int
	offset         float64
	told           [][]optimize.Evaluation
}

func (s *counter) Ask() []optimize.Candidate {
	if len(s.told) == s.batches {
		return nil
	}
	out := make([]optimize.Candidate, s.batch)
	for i := range out {
		out[i] = optimize.Candidate{Point: space.Point{s.offset + float64(len(s.told)*s.batch+i)}, From: "count"}
	}
	return out
}

func (s *counter) Tell(es []optimize.Evaluation) {
	s.told = append(s.told, es)
	for i := range es {
		if es[i].Status == optimize.OK {
			s.offset += es[i].Aims[0] / 1e6
		}
	}
}

func (s *counter) Explain() string { return "counted enough" }

// evaluator is a function as an evaluator.
type evaluator func(ctx context.Context, c optimize.Candidate) (optimize.Score, error)

func (f evaluator) Evaluate(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
	return f(ctx, c)
}

func square(_ context.Context, c optimize.Candidate) (optimize.Score, error) {
	return optimize.Score{Aims: []float64{math.Mod(c.Point[0]*c.Point[0], 17)}}, nil
}

// restless takes a random time over each answer.
func restless(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
	time.Sleep(time.Duration(rand.Intn(int(20 * time.Millisecond))))
	return square(ctx, c)
}

func text(es []optimize.Evaluation) string {
	var b strings.Builder
	for _, e := range es {
		fmt.Fprintf(&b, "%d %s %v %v %s\n", e.ID, e.Point.Key(), e.Status, e.Aims, e.Err)
	}
	return b.String()
}

func run(t *testing.T, ev evaluator, s optimize.Searcher, past []optimize.Evaluation, o optimize.Options) optimize.Result {
	t.Helper()
	r, err := optimize.Run(context.Background(), ev, s, past, o)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func TestSameForAnyWorkers(t *testing.T) {
	var first string
	for _, workers := range []int{1, 2, 8} {
		r := run(t, restless, &counter{batch: 7, batches: 6}, nil, optimize.Options{Workers: workers, Evaluations: 40})
		if r.Reason != optimize.BudgetSpent || len(r.Evaluations) != 40 {
			t.Fatalf("%d workers: %d evaluations, %s", workers, len(r.Evaluations), r.Reason)
		}
		if got := text(r.Evaluations); first == "" {
			first = got
		} else if got != first {
			t.Errorf("%d workers found something else", workers)
		}
	}
}

func TestSearcherDoneSaysWhy(t *testing.T) {
	r := run(t, square, &counter{batch: 3, batches: 2}, nil, optimize.Options{})
	if r.Reason != optimize.SearcherDone || r.Explanation != "counted enough" || len(r.Evaluations) != 6 || !r.Reason.Final() {
		t.Errorf("%+v", r)
	}
}

// A batch that the budget cuts is answered up to it and not told.
func TestBudgetCutsInCandidateOrder(t *testing.T) {
	s := &counter{batch: 10, batches: 5}
	r := run(t, square, s, nil, optimize.Options{Workers: 4, Evaluations: 25})
	if len(r.Evaluations) != 25 || len(s.told) != 2 {
		t.Errorf("%d evaluations, %d batches told", len(r.Evaluations), len(s.told))
	}
	for i, e := range r.Evaluations {
		if e.ID != i {
			t.Fatalf("place %d holds candidate %d", i, e.ID)
		}
	}
}

// A run that goes on from any part of its past ends as the straight run, and
// evaluates nothing twice.
func TestReplayEqualsStraightRun(t *testing.T) {
	straight := run(t, square, &counter{batch: 6, batches: 8}, nil, optimize.Options{Workers: 2})
	rapid.Check(t, func(rt *rapid.T) {
		var past []optimize.Evaluation
		known := map[int]bool{}
		cut := rapid.IntRange(0, 47).Draw(rt, "cut")
		for _, e := range straight.Evaluations {
			// All batches before the cut whole, the cut one in part.
			if e.ID < cut/6*6 || e.ID/6 == cut/6 && rapid.Bool().Draw(rt, "answered") {
				past = append(past, e)
				known[e.ID] = true
			}
		}
		var again atomic.Int32
		r, err := optimize.Run(context.Background(), evaluator(func(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
			if known[c.ID] {
				again.Add(1)
			}
			return square(ctx, c)
		}), &counter{batch: 6, batches: 8}, past, optimize.Options{Workers: 3})
		if err != nil || text(r.Evaluations) != text(straight.Evaluations) || again.Load() > 0 || r.New != 48-len(past) {
			rt.Fatalf("cut %d: %d evaluated again, %d new, error %v", cut, again.Load(), r.New, err)
		}
	})
}

func TestForeignPastIsRefused(t *testing.T) {
	past := []optimize.Evaluation{{Candidate: optimize.Candidate{ID: 2, Point: space.Point{99}}, Status: optimize.OK, Score: optimize.Score{Aims: []float64{1}}}}
	_, err := optimize.Run(context.Background(), evaluator(square), &counter{batch: 4, batches: 1}, past, optimize.Options{})
	if err == nil || !strings.Contains(err.Error(), "candidate 2") {
		t.Errorf("error %v", err)
	}
}

// repeater asks one point again and again.
type repeater struct{ left int }

func (s *repeater) Ask() []optimize.Candidate {
	if s.left == 0 {
		return nil
	}
	s.left--
	c := optimize.Candidate{Point: space.Point{1}}
	return []optimize.Candidate{c, c, {Point: space.Point{1}, Rung: 1}}
}
func (s *repeater) Tell([]optimize.Evaluation) {}

// An identical question is answered once; another rung is another question.
func TestSameQuestionIsAnsweredOnce(t *testing.T) {
	var asked atomic.Int32
	var recorded []optimize.Evaluation
	r := run(t, func(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
		asked.Add(1)
		return square(ctx, c)
	}, &repeater{left: 3}, nil, optimize.Options{Workers: 2, Record: func(es []optimize.Evaluation) error { recorded = append(recorded, es...); return nil }})
	reused := 0
	for _, e := range r.Evaluations {
		if e.Reused {
			reused++
		}
	}
	if asked.Load() != 2 || len(r.Evaluations) != 9 || reused != 7 || len(recorded) != 9 {
		t.Errorf("asked %d times; %d evaluations, %d reused, %d recorded", asked.Load(), len(r.Evaluations), reused, len(recorded))
	}
}

func TestWhateverHappensHasAStatus(t *testing.T) {
	ev := func(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
		switch int(c.Point[0]) {
		case 0:
			return optimize.Score{}, errors.New("the wire touches itself")
		case 1:
			panic("index out of range")
		case 2:
			return optimize.Score{Aims: []float64{math.NaN()}}, nil
		case 3:
			return optimize.Score{Aims: []float64{1}, Limits: []float64{math.Inf(1)}}, nil
		case 4:
			<-ctx.Done()
			return optimize.Score{}, ctx.Err()
		}
		return optimize.Score{Aims: []float64{1}, Figures: []float64{math.NaN()}}, nil
	}
	r := run(t, ev, &counter{batch: 6, batches: 1}, nil, optimize.Options{Workers: 2, Timeout: 20 * time.Millisecond})
	for i, want := range []struct {
		status optimize.Status
		err    string
	}{
		{optimize.Failed, "touches itself"}, {optimize.Failed, "candidate 1 at [1] panicked: index out of range"}, {optimize.Failed, "aim 1 came out as NaN"},
		{optimize.Failed, "limit 1 came out as +Inf"}, {optimize.TimedOut, "not answered within 20ms"}, {optimize.OK, ""},
	} {
		e := r.Evaluations[i]
		v := e.Value()
		if e.Status != want.status || !strings.Contains(e.Err, want.err) || v.Unknown != (e.Status != optimize.OK) {
			t.Errorf("candidate %d: %s, %q", i, e.Status, e.Err)
		}
	}
}

func TestMostlyFailingStops(t *testing.T) {
	r := run(t, func(context.Context, optimize.Candidate) (optimize.Score, error) {
		return optimize.Score{}, errors.New("no licence for air")
	}, &counter{batch: 10, batches: 100}, nil, optimize.Options{Workers: 2})
	if r.Reason != optimize.MostlyFailing || len(r.Evaluations) != 50 || !strings.Contains(r.Explanation, "no licence for air") || r.Reason.Final() {
		t.Errorf("%d evaluations, %s: %s", len(r.Evaluations), r.Reason, r.Explanation)
	}
}

func TestStagnationIsCountedInCandidates(t *testing.T) {
	flat := func(context.Context, optimize.Candidate) (optimize.Score, error) {
		return optimize.Score{Aims: []float64{1, 1}}, nil
	}
	rule := optimize.Stagnation{Evaluations: 30, Share: 0.01}
	for _, workers := range []int{1, 4} {
		r := run(t, flat, &counter{batch: 10, batches: 100}, nil, optimize.Options{Workers: workers, Stagnation: rule})
		if r.Reason != optimize.Stagnated || len(r.Evaluations) != 40 {
			t.Errorf("%d evaluations, %s", len(r.Evaluations), r.Reason)
		}
	}
	falling := func(_ context.Context, c optimize.Candidate) (optimize.Score, error) {
		return optimize.Score{Aims: []float64{-c.Point[0], c.Point[0] * 0.9}}, nil
	}
	r := run(t, falling, &counter{batch: 10, batches: 20}, nil, optimize.Options{Stagnation: rule})
	if r.Reason != optimize.SearcherDone {
		t.Errorf("a front that grows was called stagnant after %d", len(r.Evaluations))
	}
}

func TestFirstSignalFinishesWhatRuns(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	var started, finished atomic.Int32
	r, err := optimize.Run(ctx, evaluator(func(c context.Context, k optimize.Candidate) (optimize.Score, error) {
		if started.Add(1) == 3 {
			cancel()
		}
		time.Sleep(5 * time.Millisecond)
		finished.Add(1)
		return square(c, k)
	}), &counter{batch: 50, batches: 9}, nil, optimize.Options{Workers: 2})
	if err != nil || r.Reason != optimize.Stopped || started.Load() != finished.Load() || len(r.Evaluations) != int(finished.Load()) || len(r.Evaluations) > 6 {
		t.Errorf("%s, error %v: started %d, finished %d, %d evaluations", r.Reason, err, started.Load(), finished.Load(), len(r.Evaluations))
	}
}

func TestGraceEndsWhatHangs(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	r, err := optimize.Run(ctx, evaluator(func(c context.Context, k optimize.Candidate) (optimize.Score, error) {
		cancel()
		<-c.Done()
		return optimize.Score{}, c.Err()
	}), &counter{batch: 5, batches: 1}, nil, optimize.Options{Workers: 2, Grace: 20 * time.Millisecond})
	if err != nil || r.Reason != optimize.Stopped || len(r.Evaluations) != 0 {
		t.Errorf("%s, error %v, %d evaluations of what was cancelled", r.Reason, err, len(r.Evaluations))
	}
}

func TestClocksStop(t *testing.T) {
	slow := func(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
		time.Sleep(2 * time.Millisecond)
		return square(ctx, c)
	}
	const soon = 30 * time.Millisecond
	for _, want := range []optimize.Reason{optimize.TimeSpent, optimize.Deadline} {
		o := optimize.Options{For: soon}
		if want == optimize.Deadline {
			o = optimize.Options{Until: time.Now().Add(soon)}
		}
		r := run(t, slow, &counter{batch: 10, batches: 100000}, nil, o)
		if r.Reason != want || len(r.Evaluations) == 0 || !r.Reason.Final() {
			t.Errorf("%s after %d evaluations, want %s", r.Reason, len(r.Evaluations), want)
		}
	}
}

func TestWhatCannotBeRecordedEndsTheRun(t *testing.T) {
	full := errors.New("no room")
	var kept []optimize.Evaluation
	s := &counter{batch: 10, batches: 9}
	r, err := optimize.Run(context.Background(), evaluator(square), s, nil, optimize.Options{Workers: 3, Record: func(es []optimize.Evaluation) error {
		if len(kept) >= 25 {
			return full
		}
		kept = append(kept, es...)
		return nil
	}})
	if !errors.Is(err, full) || r.Reason != optimize.CannotRecord || len(s.told)*10 > len(kept) {
		t.Errorf("error %v, %s, %d batches told", err, r.Reason, len(s.told))
	}
	on := map[int]bool{}
	for _, e := range kept {
		on[e.ID] = true
	}
	for _, e := range r.Evaluations {
		if !on[e.ID] {
			t.Errorf("candidate %d counts but is not on record", e.ID)
		}
	}
}

func TestProgressIsTold(t *testing.T) {
	var mu sync.Mutex
	var seen []optimize.Progress
	run(t, restless, &counter{batch: 20, batches: 5}, nil, optimize.Options{Workers: 4, Evaluations: 100, For: time.Minute, Until: time.Now().Add(time.Hour), Progress: func(p optimize.Progress) {
		mu.Lock()
		seen = append(seen, p)
		mu.Unlock()
	}})
	if len(seen) == 0 {
		t.Fatal("nothing was told")
	}
	last := seen[len(seen)-1]
	if last.Budget != 100 || last.Done == 0 || last.Stage != "count" || last.Front == 0 || last.Best == nil || last.Left <= 0 {
		t.Errorf("%+v", last)
	}
}

func TestStreamsDiffer(t *testing.T) {
	first := func(seed uint64, name string, id int) int64 { return optimize.Stream(seed, name, id).Int63() }
	if one, again := first(1, "a", 0), first(1, "a", 0); one != again {
		t.Error("one address gave two streams")
	}
	seen := map[int64]bool{}
	for seed := uint64(0); seed < 20; seed++ {
		for _, name := range []string{"a", "b"} {
			for id := range 20 {
				seen[first(seed, name, id)] = true
			}
		}
	}
	if len(seen) != 800 {
		t.Errorf("800 addresses gave %d streams", len(seen))
	}
}

// Settling: confirmations move members, take some off the front, and do not
// depend on workers.
func TestSettleConfirmsEveryMember(t *testing.T) {
	var all []optimize.Evaluation
	for i := range 40 {
		x := float64(i) / 39
		all = append(all, optimize.Evaluation{Candidate: optimize.Candidate{ID: i, Point: space.Point{x}}, Status: optimize.OK, Score: optimize.Score{Aims: []float64{x, 1 - x}, Limits: []float64{-1}}})
	}
	confirm := func(_ context.Context, c optimize.Candidate, whole bool) (optimize.Score, error) {
		x := c.Point[0]
		s := optimize.Score{Aims: []float64{x, 1 - x}, Limits: []float64{-1}, Figures: []float64{math.NaN()}}
		if whole {
			s.Figures[0] = x
		}
		switch {
		case c.ID == 7:
			return s, errors.New("the power balance misses by 3 %")
		case c.ID%5 == 0:
			s.Limits[0] = 0.1 // breaks a limit between samples
		case c.ID%3 == 0:
			s.Aims[1] += 0.2 // and falls behind a neighbour
		}
		return s, nil
	}
	var first string
	for _, workers := range []int{1, 4} {
		var kept int
		s, err := optimize.Settle(context.Background(), all, confirm, optimize.SettleOptions{Most: 12, Workers: workers,
			Kept: func(optimize.Evaluation) error { kept++; return nil }})
		if err != nil || len(s.Front) == 0 || len(s.Front) > 12 || kept != s.Checks {
			t.Fatalf("%d members, %d of %d checks kept, error %v", len(s.Front), kept, s.Checks, err)
		}
		var members []optimize.Evaluation
		for _, m := range s.Front {
			if !m.Checked || m.ID%5 == 0 || m.ID == 7 || math.IsNaN(m.Figures[0]) {
				t.Errorf("candidate %d is a member", m.ID)
			}
			members = append(members, m.Evaluation)
		}
		if got := text(members); first == "" {
			first = got
		} else if got != first {
			t.Errorf("%d workers settle on another front", workers)
		}
		reasons := 0
		for _, e := range s.Left {
			if e.Err != "" {
				reasons++
			}
		}
		if len(s.Left) == 0 || reasons > 1 {
			t.Errorf("%d left, %d with a reason", len(s.Left), reasons)
		}
	}
}

func TestSettleStopsAndFails(t *testing.T) {
	all := []optimize.Evaluation{{Candidate: optimize.Candidate{Point: space.Point{1}}, Status: optimize.OK, Score: optimize.Score{Aims: []float64{1}}}}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	confirm := func(context.Context, optimize.Candidate, bool) (optimize.Score, error) {
		return optimize.Score{Aims: []float64{1}}, nil
	}
	s, err := optimize.Settle(ctx, all, confirm, optimize.SettleOptions{})
	if err == nil || len(s.Front) != 1 || s.Front[0].Checked {
		t.Errorf("stopped: %+v, error %v", s, err)
	}
	full := errors.New("no room")
	if _, err := optimize.Settle(context.Background(), all, confirm, optimize.SettleOptions{Kept: func(optimize.Evaluation) error { return full }}); !errors.Is(err, full) {
		t.Errorf("error %v", err)
	}
}

// BenchmarkLoop is what the loop itself costs: an evaluator that takes no
// time, a searcher that thinks of nothing.
func BenchmarkLoop(b *testing.B) {
	b.ReportAllocs()
	n := 0
	for b.Loop() {
		r, err := optimize.Run(context.Background(), evaluator(square), &counter{batch: 100, batches: 100}, nil, optimize.Options{Workers: 2})
		if err != nil {
			b.Fatal(err)
		}
		n += len(r.Evaluations)
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(n), "ns/evaluation")
}
