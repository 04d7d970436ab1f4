package journal

import (
	"math"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"turnwise/optimize"
)

func TestTail(t *testing.T) {
	w := create(t, header())
	clock := time.Date(2026, 3, 1, 22, 0, 0, 0, time.UTC)
	w.now = func() time.Time { return clock }
	tail := w.Tail()
	tail.now = func() time.Time { return clock }
	p, err := tail.Poll(ctx)
	must(t, err)
	if p.Evaluations != 0 || p.Rate != 0 || p.Alive || len(p.Best) != 2 || p.Best[0].Entry != nil {
		t.Errorf("of an empty journal: %+v", p)
	}
	// A first session of one a second, a pause, a second one of four.
	must(t, w.Decide(Start, nil))
	id := 0
	step := func(e optimize.Evaluation, d time.Duration) {
		clock = clock.Add(d)
		must(t, w.Record([]optimize.Evaluation{e}))
		id++
	}
	for range 10 {
		e := sample(id, float64(id), 1, 0)
		e.From = "sample"
		step(e, time.Second)
	}
	if p, err = tail.Poll(ctx); err != nil || math.Abs(p.Rate-1) > 1e-9 {
		t.Errorf("rate %v of one a second, %v", p.Rate, err)
	}
	clock = clock.Add(time.Hour)
	must(t, w.Decide(Start, nil))
	step(failed(id, optimize.Failed, "b"), time.Second/4)
	step(failed(id, optimize.TimedOut, "c"), time.Second/4)
	step(failed(id, optimize.Failed, "a"), time.Second/4)
	step(failed(id, optimize.Failed, "a"), time.Second/4)
	step(sample(id, 50, 0.1, 0.1), time.Second/4)
	reused := sample(id, 3, 0.5, 0)
	reused.Reused = true
	step(reused, time.Second/4)
	must(t, w.RecordFinal([]optimize.Evaluation{sample(3, 99, 0.01, 0)}))
	p, err = tail.Poll(ctx)
	must(t, err)
	want := Progress{
		Counts: Counts{Evaluations: 16, OK: 12, Failed: 3, TimedOut: 1, Reused: 1, Feasible: 11, Final: 1, Decisions: 2},
		Seq:    17, Rate: 4, Simulated: 15 * 1234567, Front: 2,
		First: time.Date(2026, 3, 1, 22, 0, 1, 0, time.UTC), Last: clock,
		Started:  time.Date(2026, 3, 1, 23, 0, 10, 0, time.UTC),
		Failures: []Reason{{optimize.Failed, "a", 2}, {optimize.Failed, "b", 1}, {optimize.TimedOut, "c", 1}},
		Stages:   []Stage{{"sample", 10, 10, 0.625}, {"genetic", 6, 2, 0.375}},
	}
	if d := cmp.Diff(want, p, cmpopts.IgnoreFields(Progress{}, "Best", "Decisions"), cmpopts.EquateApprox(0, 1e-9)); d != "" {
		t.Errorf("progress (-want +got)\n%s", d)
	}
	if g, l := p.Best[0].Entry, p.Best[1].Entry; g.ID != 9 || l.ID != 15 || p.Best[1].Aim != "length" {
		t.Errorf("best gain by %d, best length by %d", g.ID, l.ID)
	}
	// A writer that hangs is slow, one that has gone keeps its rate.
	clock = clock.Add(10 * time.Second)
	if p, err = tail.Poll(ctx); err != nil || math.Abs(p.Rate-4) > 1e-9 {
		t.Errorf("rate %v of a writer that is gone, %v", p.Rate, err)
	}
	held, err := Lock(w.dir())
	must(t, err)
	defer held.Release()
	p, err = tail.Poll(ctx)
	if must(t, err); !p.Alive || math.Abs(p.Rate-5/11.25) > 1e-9 {
		t.Errorf("alive %v, rate %v of a writer that hangs", p.Alive, p.Rate)
	}
	// The rate is of late: 400 more at ten a second.
	for range 400 {
		step(sample(id, 1, 2, 0), time.Second/10)
	}
	if p, err = tail.Poll(ctx); err != nil || math.Abs(p.Rate-10) > 1e-6 {
		t.Errorf("rate %v, %v", p.Rate, err)
	}
	fresh, err := w.Tail().Poll(ctx)
	must(t, err)
	if d := cmp.Diff(p, fresh, bits, cmpopts.IgnoreFields(Progress{}, "Rate")); d != "" {
		t.Errorf("a tail that began late sees something else (-polled +fresh)\n%s", d)
	}
}
