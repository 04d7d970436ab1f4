package optimize

import (
	"context"
	"sync"
	"time"

	"turnwise/optimize/front"
)

// Confirmer gives the final word on a candidate: with the finest model over
// a finer sweep, what ranks it; when whole, every other figure as well.
type Confirmer func(ctx context.Context, c Candidate, whole bool) (Score, error)

// Settled is a final front and what became of the others on the way there.
type Settled struct {
	// Front holds the members, by candidate number.
	Front []Member
	// Left holds those that a confirmation took off the front, with the
	// reason where one failed.
	Left []Evaluation
	// Checks counts the confirmations; they are no part of the budget.
	Checks int
}

// Member is one design of a front; Checked says that every figure is
// confirmed, which only an interrupted settling leaves undone.
type Member struct {
	Evaluation
	Checked bool
}

// check is how much of a candidate the final word has been spoken on.
type check int

const (
	unchecked check = iota
	ranked          // what ranks it
	complete        // every figure
)

// SettleOptions is how a front is settled. Most is the number of members at
// the most, 0: all. Kept, where set, gets each confirmation as it comes, one
// call at a time. Progress is told how many of a round's confirmations are
// done.
type SettleOptions struct {
	Most     int
	Workers  int
	Grace    time.Duration // for what runs when ctx ends; 0: 30 s
	Kept     func(Evaluation) error
	Progress func(done, of, round int)
}

// Settle turns all evaluations of a search into its final front: the front
// is thinned to its most telling members, those not yet confirmed are, all
// are ranked again, and so on until every member is confirmed. The result
// does not depend on the number of workers. When ctx ends, nothing new is
// begun, what runs is finished within the grace, and the front as it stands
// comes back with ctx's error.
func Settle(ctx context.Context, all []Evaluation, confirm Confirmer, o SettleOptions) (Settled, error) {
	s := settling{
		all:    append([]Evaluation(nil), all...),
		checks: make([]check, len(all)),
		values: make([]front.Value, len(all)),
		o:      o,
	}
	for i := range s.all {
		s.values[i] = s.all[i].Value()
	}
	for round := 1; ; round++ {
		members := s.members()
		todo, to := s.open(members)
		if len(todo) == 0 {
			return s.settled(members), nil
		}
		if err := s.confirm(ctx, confirm, todo, to, round); err != nil {
			return s.settled(s.members()), err
		}
	}
}

type settling struct {
	all    []Evaluation
	checks []check
	values []front.Value
	count  int
	o      SettleOptions
}

// members is the thinned front of all values as they stand.
func (s *settling) members() []int { return front.Thinned(s.values, s.o.Most) }

// open lists the members that the next round has to confirm, and how far:
// first all that were never confirmed, then the rest of their figures.
func (s *settling) open(members []int) (todo []int, to check) {
	for _, to := range []check{ranked, complete} {
		for _, i := range members {
			if s.checks[i] < to {
				todo = append(todo, i)
			}
		}
		if len(todo) > 0 {
			return todo, to
		}
	}
	return nil, complete
}

// confirm answers one round and takes it in, in candidate order.
func (s *settling) confirm(ctx context.Context, confirm Confirmer, todo []int, to check, round int) error {
	hard, cancel := lingering(ctx, s.o.Grace)
	defer cancel()
	answers := make([]Evaluation, len(todo))
	whole := evaluatorFunc(func(ctx context.Context, c Candidate) (Score, error) { return confirm(ctx, c, to == complete) })
	var (
		mu         sync.Mutex
		next, done int
		fault      error // of keeping
		wg         sync.WaitGroup
	)
	take := func() int {
		mu.Lock()
		defer mu.Unlock()
		if next == len(todo) || ctx.Err() != nil || fault != nil {
			return -1
		}
		next++
		return next - 1
	}
	give := func(k int, e Evaluation) {
		mu.Lock()
		defer mu.Unlock()
		if hard.Err() != nil {
			return // cut off, not answered
		}
		if s.o.Kept != nil && fault == nil {
			fault = s.o.Kept(e)
		}
		answers[k] = e
		done++
		if s.o.Progress != nil {
			s.o.Progress(done, len(todo), round)
		}
	}
	for range max(1, min(s.o.Workers, len(todo))) {
		wg.Go(func() {
			for k := take(); k >= 0; k = take() {
				give(k, answer(hard, whole, s.all[todo[k]].Candidate, 0))
			}
		})
	}
	wg.Wait()
	if fault != nil {
		return fault
	}
	if done < len(todo) {
		return context.Cause(ctx)
	}
	for k, i := range todo {
		answers[k].Answers = nil
		s.all[i], s.checks[i], s.values[i] = answers[k], to, answers[k].Value()
		s.count++
	}
	return nil
}

// settled sums up as things stand.
func (s *settling) settled(members []int) Settled {
	out := Settled{Checks: s.count}
	on := make(map[int]bool, len(members))
	for _, i := range members {
		on[i] = true
		out.Front = append(out.Front, Member{Evaluation: s.all[i], Checked: s.checks[i] == complete})
	}
	for i, c := range s.checks {
		if c > unchecked && !on[i] {
			out.Left = append(out.Left, s.all[i])
		}
	}
	return out
}

type evaluatorFunc func(context.Context, Candidate) (Score, error)

func (f evaluatorFunc) Evaluate(ctx context.Context, c Candidate) (Score, error) { return f(ctx, c) }

// lingering is a context that ends a grace after ctx does.
func lingering(ctx context.Context, grace time.Duration) (context.Context, context.CancelFunc) {
	if grace <= 0 {
		grace = defaultGrace
	}
	hard, cancel := context.WithCancel(context.WithoutCancel(ctx))
	stop := context.AfterFunc(ctx, func() {
		timer := time.AfterFunc(grace, cancel)
		context.AfterFunc(hard, func() { timer.Stop() })
	})
	return hard, func() {
		stop()
		cancel()
	}
}
