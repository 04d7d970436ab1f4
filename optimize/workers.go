package optimize

import (
	"context"
	"sync"
	"time"
)

// workers answer the open places of one batch.
type workers struct {
	r      *run
	hard   context.Context // ends what runs
	cancel context.CancelFunc
	halt   chan struct{} // closed: hand out nothing new
	once   sync.Once
	back   chan finished
	reason Reason
	wg     sync.WaitGroup
	timers []*time.Timer
	off    func() bool
	mu     sync.Mutex // over reason and timers
}

// hire starts the workers. A signal or a clock stops them softly: nothing new
// is handed out, and after the grace what still runs is cancelled.
func (r *run) hire(ctx context.Context, out []Evaluation, open []int) *workers {
	w := &workers{r: r, halt: make(chan struct{}), back: make(chan finished, len(open))}
	w.hard, w.cancel = context.WithCancel(context.WithoutCancel(ctx))
	w.mu.Lock()
	defer w.mu.Unlock()
	w.off = context.AfterFunc(ctx, func() { w.end(Stopped) })
	if r.o.For > 0 {
		w.timers = append(w.timers, time.AfterFunc(r.o.For-time.Since(r.began), func() { w.end(TimeSpent) }))
	}
	if !r.o.Until.IsZero() {
		w.timers = append(w.timers, time.AfterFunc(time.Until(r.o.Until), func() { w.end(Deadline) }))
	}
	places := make(chan int, len(open))
	for _, i := range open {
		places <- i
	}
	close(places)
	for range min(r.o.Workers, len(open)) {
		w.wg.Go(func() { w.work(out, places) })
	}
	go func() {
		w.wg.Wait()
		close(w.back)
	}()
	return w
}

// work answers places until there are no more or the workers are halted. An
// evaluation that was cancelled is no evaluation.
func (w *workers) work(out []Evaluation, places <-chan int) {
	for i := range places {
		select {
		case <-w.halt:
			return
		default:
		}
		e := answer(w.hard, w.r.ev, out[i].Candidate, w.r.o.Timeout)
		if w.hard.Err() != nil {
			return
		}
		w.back <- finished{i, e}
	}
}

// groups gives the finished evaluations, those that wait together.
func (w *workers) groups() func(yield func([]finished) bool) {
	return func(yield func([]finished) bool) {
		for f := range w.back {
			group := []finished{f}
			for more := true; more; {
				select {
				case next, ok := <-w.back:
					if more = ok; ok {
						group = append(group, next)
					}
				default:
					more = false
				}
			}
			if !yield(group) {
				return
			}
		}
	}
}

// end stops the workers for a reason; the first one counts.
func (w *workers) end(why Reason) {
	w.once.Do(func() {
		w.mu.Lock()
		defer w.mu.Unlock()
		w.reason = why
		close(w.halt)
		w.timers = append(w.timers, time.AfterFunc(w.r.o.Grace, w.cancel))
	})
}

// why is the reason they were stopped for, if they were.
func (w *workers) why() Reason {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.reason
}

// stop ends the work at once.
func (w *workers) stop() {
	w.end(CannotRecord)
	w.cancel()
}

// dismiss ends the timers and waits for every worker.
func (w *workers) dismiss() {
	w.off()
	w.cancel()
	w.wg.Wait()
	w.mu.Lock()
	defer w.mu.Unlock()
	for _, t := range w.timers {
		t.Stop()
	}
}
