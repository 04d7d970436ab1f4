package optimize

import (
	"context"
	"errors"
	"fmt"
	"math"
	"runtime"
	"time"
)

// answer evaluates one candidate and is the one door that turns whatever
// happens into an evaluation with a status: errors, panics, time limits, and
// aims or limits that are not plain numbers.
func answer(ctx context.Context, ev Evaluator, c Candidate, limit time.Duration) Evaluation {
	began := time.Now()
	mine := ctx
	if limit > 0 {
		var cancel context.CancelFunc
		mine, cancel = context.WithTimeout(ctx, limit)
		defer cancel()
	}
	score, err := guarded(mine, ev, c)
	e := Evaluation{Candidate: c, Score: score, Status: OK, Duration: time.Since(began)}
	if score.Took > 0 {
		e.Duration, e.Score.Took = score.Took, 0
	}
	if err == nil {
		err = plain(score)
	}
	switch {
	case err == nil:
	case mine.Err() != nil && ctx.Err() == nil:
		e.Status, e.Err = TimedOut, fmt.Sprintf("not answered within %v", limit)
	case errors.Is(err, context.DeadlineExceeded) && ctx.Err() == nil:
		e.Status, e.Err = TimedOut, err.Error() // a time limit of the model's own
	default:
		e.Status, e.Err = Failed, err.Error()
	}
	if e.Status != OK {
		e.Score = Score{Answers: score.Answers}
	}
	return e
}

// guarded turns a panic into an error that says where it came from.
func guarded(ctx context.Context, ev Evaluator, c Candidate) (s Score, err error) {
	defer func() {
		if p := recover(); p != nil {
			stack := make([]byte, 2048)
			stack = stack[:runtime.Stack(stack, false)]
			err = fmt.Errorf("the evaluation of candidate %d at %v panicked: %v\n%s", c.ID, c.Point, p, stack)
		}
	}()
	return ev.Evaluate(ctx, c)
}

// plain refuses aims and limits that are not plain numbers.
func plain(s Score) error {
	for i, x := range s.Aims {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return fmt.Errorf("aim %d came out as %v", i+1, x)
		}
	}
	for i, x := range s.Limits {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return fmt.Errorf("limit %d came out as %v", i+1, x)
		}
	}
	return nil
}
