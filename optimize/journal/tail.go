package journal

import (
	"cmp"
	"context"
	"slices"
	"time"

	"turnwise/optimize"
)

// Tail follows a journal that is being written: each [Tail.Poll] reads only
// what is new. Not safe for concurrent use.
type Tail struct {
	r        *Reader
	p        Progress
	seq      int64
	decision int64
	started  time.Time // of the running session
	recent   []time.Time
	reasons  map[Reason]int
	stages   map[string]*Stage
	fronts   []member
	best     []*Entry
	now      func() time.Time
}

// recentRows is over how many evaluations the rate is taken.
const recentRows = 200

// Progress is how a search stands.
type Progress struct {
	Counts    // Answers and Bytes are not counted
	Seq       int64
	Rate      float64 // evaluations per second of late; 0: not known yet
	Simulated time.Duration
	First     time.Time // evaluation of the run
	Last      time.Time // evaluation or decision
	Started   time.Time // of the latest session
	Front     int       // members so far, before the final evaluations
	Best      []Best
	Failures  []Reason // most frequent first
	Stages    []Stage  // in the order of their first evaluation
	Decisions []Decision
	Holder    Holder
	Alive     bool // the writer runs
}

// Best is the feasible evaluation of the finest rung that is best by an aim.
type Best struct {
	Aim   string
	Entry *Entry // nil: none is feasible yet
}

// Reason is why evaluations failed.
type Reason struct {
	Status optimize.Status
	Reason string
	Times  int
}

// Stage is one stage's share of the evaluations.
type Stage struct {
	Name        string
	Evaluations int
	OK          int
	Share       float64 // of all evaluations, 0 to 1
}

// Tail starts to follow; its first poll reads everything that is there.
func (r *Reader) Tail() *Tail {
	return &Tail{r: r, reasons: map[Reason]int{}, stages: map[string]*Stage{},
		best: make([]*Entry, len(r.header.Aims)), now: time.Now}
}

// Poll takes in what is new and says how the search stands.
func (t *Tail) Poll(ctx context.Context) (Progress, error) {
	t.p.Holder, t.p.Alive = Search(t.r.dir())
	for e, err := range t.r.Since(ctx, t.seq) {
		if err != nil {
			return Progress{}, err
		}
		t.take(&e)
	}
	ds, err := t.r.decisionsSince(ctx, t.decision)
	if err != nil {
		return Progress{}, err
	}
	for _, d := range ds {
		t.decide(d)
	}
	return t.sum(), nil
}

func (t *Tail) take(e *Entry) {
	p := &t.p
	t.seq = e.Seq
	p.Last = later(p.Last, e.Finished)
	if e.Final {
		p.Counts.Final++
		return
	}
	if p.Evaluations == 0 {
		p.First = e.Finished
	}
	p.Evaluations++
	if e.Reused {
		p.Reused++
	} else {
		p.Simulated += e.Duration
	}
	s := t.stages[e.From]
	if s == nil {
		s = &Stage{Name: e.From}
		t.stages[e.From] = s
		p.Stages = append(p.Stages, Stage{Name: e.From})
	}
	s.Evaluations++
	switch e.Status {
	case optimize.OK:
		p.OK++
		s.OK++
		t.rank(e)
	case optimize.TimedOut:
		p.TimedOut++
	default:
		p.Failed++
	}
	if e.Status != optimize.OK {
		t.reasons[Reason{Status: e.Status, Reason: e.Err}]++
	}
	if t.recent = append(t.recent, e.Finished); len(t.recent) > 2*recentRows {
		t.recent = append(t.recent[:0], t.recent[len(t.recent)-recentRows:]...)
	}
}

// rank counts a feasible evaluation and keeps it if it is the best of an aim.
func (t *Tail) rank(e *Entry) {
	if v := e.Value(); !v.Feasible() {
		return
	}
	t.p.Feasible++
	if e.Rung != t.r.header.finest() || !ranks(&e.Evaluation) {
		return
	}
	t.fronts, _ = admit(t.fronts, member{e.ID, e.Aims})
	for i, a := range e.Aims {
		if b := t.best[i]; b == nil || a < b.Aims[i] || a == b.Aims[i] && e.ID < b.ID {
			kept := *e
			t.best[i] = &kept
		}
	}
}

func (t *Tail) decide(d Decision) {
	t.decision = d.Seq
	t.p.Counts.Decisions++
	t.p.Decisions = append(t.p.Decisions, d)
	t.p.Last = later(t.p.Last, d.At)
	if d.Kind == Start {
		t.started = d.At
	}
}

// sum works the poll's result out of what was taken in.
func (t *Tail) sum() Progress {
	p := t.p
	p.Seq, p.Started, p.Front = t.seq, t.started, len(t.fronts)
	p.Rate = t.rate()
	p.Best = nil
	for i, aim := range t.r.header.Aims {
		p.Best = append(p.Best, Best{Aim: aim, Entry: t.best[i]})
	}
	p.Stages = nil
	for _, s := range t.p.Stages {
		s := *t.stages[s.Name]
		s.Share = float64(s.Evaluations) / float64(p.Evaluations)
		p.Stages = append(p.Stages, s)
	}
	p.Failures = nil
	for r, n := range t.reasons {
		r.Times = n
		p.Failures = append(p.Failures, r)
	}
	slices.SortFunc(p.Failures, func(a, b Reason) int {
		return cmp.Or(cmp.Compare(b.Times, a.Times), cmp.Compare(a.Reason, b.Reason), cmp.Compare(a.Status, b.Status))
	})
	p.Decisions = slices.Clone(t.p.Decisions)
	return p
}

// rate is taken over the latest evaluations of the running session, up to
// now while it runs, so that a simulator that hangs is seen.
func (t *Tail) rate() float64 {
	recent := t.recent[max(0, len(t.recent)-recentRows):]
	for len(recent) > 0 && recent[0].Before(t.started) {
		recent = recent[1:]
	}
	if len(recent) < 2 {
		return 0
	}
	end := recent[len(recent)-1]
	span := end.Sub(recent[0])
	// A pause longer than the usual distance counts.
	if idle := t.now().Sub(end); t.p.Alive && idle > span/time.Duration(len(recent)-1) {
		span += idle
	}
	if span <= 0 {
		return 0
	}
	return float64(len(recent)-1) / span.Seconds()
}

func later(a, b time.Time) time.Time {
	if b.After(a) {
		return b
	}
	return a
}
