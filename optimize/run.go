package optimize

import (
	"context"
	"fmt"
	"slices"
	"time"

	"turnwise/optimize/front"
)

// Options say how a search is run. Only Evaluations, Stagnation and the
// searcher decide what is found; the rest decides how soon.
type Options struct {
	Workers int
	// Evaluations is the budget, counted from candidate 0; 0: none.
	Evaluations int
	// Finest is the rung whose answers make the front.
	Finest int
	// For is how long this run may take; Until is when it must end. Zero: no
	// such limit.
	For   time.Duration
	Until time.Time
	// Timeout is the longest that one evaluation may take; 0: no limit.
	Timeout time.Duration
	// Grace is how long evaluations that run may go on after a stop, before
	// they are cancelled; 0: 30 s.
	Grace      time.Duration
	Stagnation Stagnation
	// Record takes finished evaluations, those that wait together, from one
	// goroutine. A searcher is told of an evaluation only after it is on
	// record. An error ends the run.
	Record func([]Evaluation) error
	// Progress is told how the run stands, a few times a second, from one
	// goroutine.
	Progress func(Progress)
}

// Stagnation ends a run whose last Evaluations have gained less than Share
// of the hypervolume. The zero Stagnation never does.
type Stagnation struct {
	Evaluations int
	Share       float64
}

// Reason is why a run ended.
type Reason string

// The reasons.
const (
	BudgetSpent   Reason = "the evaluations are spent"
	SearcherDone  Reason = "the searcher is done"
	TimeSpent     Reason = "the time is spent"
	Deadline      Reason = "the time of day is reached"
	Stagnated     Reason = "the front has stopped growing"
	Stopped       Reason = "a signal came"
	MostlyFailing Reason = "most evaluations fail"
	CannotRecord  Reason = "evaluations cannot be recorded"
)

// Final reports whether the run has come to the end it was to have, so that
// its front is to be settled.
func (r Reason) Final() bool {
	switch r {
	case BudgetSpent, SearcherDone, TimeSpent, Deadline, Stagnated:
		return true
	}
	return false
}

// Result is what a run found.
type Result struct {
	// Evaluations in candidate order. A run that a clock or a signal ended
	// may lack some of the last batch.
	Evaluations []Evaluation
	Reason      Reason
	Explanation string // the searcher's own word, or what failed; may be empty
	// New counts what this run evaluated; the rest was told by the past.
	New int
}

// Progress is how a run stands.
type Progress struct {
	Done, Budget int
	Failed       int
	Stage        string
	Rate         float64       // evaluations per second of this run; 0: not known yet
	Left         time.Duration // until the first limit; 0: not known
	Front        int
	Hypervolume  float64   // of the front, against the worst of each aim seen
	Best         []float64 // of each aim, minimise form; nil: nothing feasible
}

// The failure rule: of so many evaluations in a row, so many may fail.
const (
	failureWindow = 50
	failureMost   = 25
)

const defaultGrace = 30 * time.Second

// Run asks the searcher, has its candidates evaluated and tells it, until it
// is done or a limit is reached. Evaluations of the past are told where their
// candidate comes up again and are never evaluated anew; an ask that differs
// from the past is an error that names the candidate. What is found does not
// depend on the number of workers.
//
// The first end of ctx stops the run softly: nothing new is handed out, and
// what runs is finished within the grace.
func Run(ctx context.Context, ev Evaluator, s Searcher, past []Evaluation, o Options) (Result, error) {
	if o.Workers < 1 {
		o.Workers = 1
	}
	if o.Grace <= 0 {
		o.Grace = defaultGrace
	}
	r := &run{ev: ev, o: o, began: time.Now(), past: map[int]Evaluation{}, asked: map[string]int{}}
	for i := range past {
		r.past[past[i].ID] = past[i]
	}
	err := r.loop(ctx, s)
	slices.SortFunc(r.all, func(a, b Evaluation) int { return a.ID - b.ID })
	return Result{Evaluations: r.all, Reason: r.reason, Explanation: r.why, New: r.fresh}, err
}

// run is the state of one Run.
type run struct {
	ev    Evaluator
	o     Options
	began time.Time

	past    map[int]Evaluation
	asked   map[string]int // the first candidate that asked a point, by key
	next    int            // candidate
	all     []Evaluation   // in order of batches; whole batches are in order
	fresh   int
	failed  int
	archive front.Archive
	marks   []mark
	shown   time.Time

	reason Reason
	why    string
}

// mark is the hypervolume's reference to look back to: the front when so many
// evaluations were done.
type mark struct {
	done   int
	points [][]float64
}

func (r *run) loop(ctx context.Context, s Searcher) error {
	for {
		if r.ended(ctx) {
			return nil
		}
		batch := s.Ask()
		if len(batch) == 0 {
			r.reason = SearcherDone
			if e, ok := s.(Explainer); ok {
				r.why = e.Explain()
			}
			return nil
		}
		asked := len(batch)
		if o := r.o.Evaluations; o > 0 {
			batch = batch[:min(len(batch), o-r.next)]
		}
		told, err := r.batch(ctx, batch)
		if err != nil {
			return err
		}
		if len(told) == asked {
			s.Tell(told)
		}
	}
}

// ended reports whether a limit is reached, and sets the reason.
func (r *run) ended(ctx context.Context) bool {
	switch {
	case r.reason != "":
	case r.o.Evaluations > 0 && r.next >= r.o.Evaluations:
		r.reason = BudgetSpent
	case r.mostlyFailing():
		r.reason = MostlyFailing
	case r.stagnated():
		r.reason = Stagnated
	default:
		r.reason = r.clock(ctx)
	}
	return r.reason != ""
}

// clock is the reason that a signal or a clock gives, if any.
func (r *run) clock(ctx context.Context) Reason {
	switch {
	case ctx.Err() != nil:
		return Stopped
	case r.o.For > 0 && time.Since(r.began) >= r.o.For:
		return TimeSpent
	case !r.o.Until.IsZero() && !time.Now().Before(r.o.Until):
		return Deadline
	}
	return ""
}

// mostlyFailing looks at the last evaluations in candidate order.
func (r *run) mostlyFailing() bool {
	if len(r.all) < failureWindow {
		return false
	}
	failed, reason := 0, ""
	for _, e := range r.all[len(r.all)-failureWindow:] {
		if e.Status != OK {
			failed++
			reason = e.Err
		}
	}
	if failed > failureMost {
		r.why = fmt.Sprintf("%d of the last %d failed, the latest because: %s", failed, failureWindow, reason)
	}
	return failed > failureMost
}

// stagnated compares the front with the one that stood the rule's number of
// evaluations ago, on axes scaled to today's.
func (r *run) stagnated() bool {
	rule := r.o.Stagnation
	if rule.Evaluations <= 0 || r.archive.Len() == 0 {
		return false
	}
	now := r.archive.Aims()
	r.marks = append(r.marks, mark{done: len(r.all), points: now})
	for len(r.marks) > 1 && r.marks[1].done <= len(r.all)-rule.Evaluations {
		r.marks = r.marks[1:]
	}
	old := r.marks[0]
	if old.done > len(r.all)-rule.Evaluations {
		return false
	}
	axes := front.Span(now)
	reference := front.UnitReference(len(now[0]))
	volume := front.Hypervolume(axes.Units(now), reference)
	return front.Hypervolume(axes.Units(old.points), reference) > volume*(1-rule.Share)
}

// batch gets a batch answered. What comes back is whole unless the run is to
// end, with the reason set.
func (r *run) batch(ctx context.Context, batch []Candidate) ([]Evaluation, error) {
	out := make([]Evaluation, len(batch))
	var open []int
	twins := map[int]int{} // place in the batch: place of the same question
	here := map[string]int{}
	for i := range batch {
		c := batch[i]
		c.ID = r.next + i
		out[i].Candidate = c
		key := fmt.Sprintf("%d %s", c.Rung, c.Point.Key())
		if e, ok := r.past[c.ID]; ok {
			if e.Rung != c.Rung || e.Point.Key() != c.Point.Key() {
				return nil, fmt.Errorf("candidate %d was %v on record and is %v now: the record belongs to another search", c.ID, e.Point, c.Point)
			}
			e.From = c.From
			out[i] = e
		} else if at, ok := r.asked[key]; ok {
			out[i] = r.again(r.all[at], c)
		} else if at, ok := here[key]; ok {
			twins[i] = at
		} else {
			open = append(open, i)
		}
		if _, ok := here[key]; !ok {
			here[key] = i
		}
	}
	done, err := r.evaluate(ctx, out, open)
	for i := range out {
		at, twin := twins[i]
		if twin && done[at] {
			out[i] = r.again(out[at], out[i].Candidate)
		}
		done[i] = done[i] || twin && done[at]
	}
	if err == nil {
		err = r.recordReused(out, done)
	}
	return r.take(out, done), err
}

// again is the evaluation of a question that was answered before.
func (r *run) again(e Evaluation, c Candidate) Evaluation {
	e.Candidate, e.Reused, e.Duration, e.Answers = c, true, 0, nil
	return e
}

// recordReused records the answers of a batch that came from memory.
func (r *run) recordReused(out []Evaluation, done []bool) error {
	if r.o.Record == nil {
		return nil
	}
	var late []Evaluation
	for i := range out {
		if _, old := r.past[out[i].ID]; done[i] && out[i].Reused && !old {
			late = append(late, out[i])
		}
	}
	if len(late) == 0 {
		return nil
	}
	return r.recorded(late)
}

func (r *run) recorded(es []Evaluation) error {
	if r.o.Record == nil {
		return nil
	}
	if err := r.o.Record(es); err != nil {
		r.reason, r.why = CannotRecord, err.Error()
		return err
	}
	return nil
}

// take adds what is done of a batch to the run, in candidate order.
func (r *run) take(out []Evaluation, done []bool) []Evaluation {
	told := out[:0]
	for i := range out {
		if !done[i] {
			continue
		}
		e := out[i]
		e.Answers = nil
		if e.Status != OK {
			r.failed++
		}
		if e.Rung >= r.o.Finest {
			r.archive.Insert(e.ID, e.Value())
		}
		key := fmt.Sprintf("%d %s", e.Rung, e.Point.Key())
		if _, ok := r.asked[key]; !ok {
			r.asked[key] = len(r.all)
		}
		r.all = append(r.all, e)
		told = append(told, e)
	}
	r.next += len(out)
	if len(told) == len(out) {
		for i := range told {
			delete(r.past, told[i].ID)
		}
	}
	r.show(told)
	return told
}

// finished is an evaluation that came back from a worker.
type finished struct {
	at int
	Evaluation
}

// evaluate has the open places of a batch answered by the workers and
// recorded as they come back. done tells which places hold an answer.
func (r *run) evaluate(ctx context.Context, out []Evaluation, open []int) (done []bool, err error) {
	done = make([]bool, len(out))
	for i := range out {
		done[i] = out[i].Status != ""
	}
	if len(open) == 0 {
		return done, nil
	}
	w := r.hire(ctx, out, open)
	defer w.dismiss()
	for group := range w.groups() {
		es := make([]Evaluation, len(group))
		for k, f := range group {
			es[k] = f.Evaluation
		}
		if err == nil {
			err = r.recorded(es)
		}
		if err != nil {
			w.stop()
			continue
		}
		for _, f := range group {
			out[f.at], done[f.at] = f.Evaluation, true
			r.fresh++
		}
		r.show(es)
	}
	if r.reason == "" {
		r.reason = w.why()
	}
	return done, err
}

// show tells how the run stands, a few times a second at the most. recent
// are the evaluations that finished last.
func (r *run) show(recent []Evaluation) {
	const every = 200 * time.Millisecond
	now := time.Now()
	if r.o.Progress == nil || len(recent) == 0 || now.Sub(r.shown) < every {
		return
	}
	r.shown = now
	p := Progress{
		Done: len(r.all), Budget: r.o.Evaluations, Failed: r.failed, Stage: recent[len(recent)-1].From,
		Front: r.archive.Len(), Hypervolume: r.archive.Hypervolume(), Best: bests(r.archive.Aims()),
	}
	if over := now.Sub(r.began).Seconds(); over > 0 && r.fresh > 1 {
		p.Rate = float64(r.fresh) / over
	}
	p.Left = r.left(p, now)
	r.o.Progress(p)
}

// left is the time until the first limit is reached, 0 where none is known.
func (r *run) left(p Progress, now time.Time) time.Duration {
	var left time.Duration
	sooner := func(d time.Duration) {
		if d > 0 && (left == 0 || d < left) {
			left = d
		}
	}
	if p.Budget > 0 && p.Rate > 0 {
		sooner(time.Duration(float64(p.Budget-p.Done) / p.Rate * float64(time.Second)))
	}
	if r.o.For > 0 {
		sooner(r.o.For - now.Sub(r.began))
	}
	if !r.o.Until.IsZero() {
		sooner(r.o.Until.Sub(now))
	}
	return left
}

func bests(points [][]float64) []float64 {
	if len(points) == 0 {
		return nil
	}
	return front.Span(points).Ideal
}
