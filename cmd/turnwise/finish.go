package main

import (
	"context"
	"fmt"
	"time"

	"turnwise/cmd/internal/folder"
	"turnwise/optimize"
	"turnwise/optimize/journal"
)

// stop records why the search ended.
func (ses *session) stop(r optimize.Result, took time.Duration, finished bool) error {
	err := ses.book.Decide(journal.Stop, stopDetail{string(r.Reason), len(r.Evaluations), took.Seconds()})
	if err == nil && finished {
		err = ses.book.Decide(journal.Finish, nil)
	}
	return err
}

// goOn is the command that goes on with the run.
func (ses *session) goOn() string { return "turnwise search --resume --run " + ses.folder.Dir }

// interrupted writes what there is of a run that did not come to its end.
func (ses *session) interrupted(r optimize.Result, took time.Duration) error {
	ses.all = finest(r.Evaluations, ses.problem)
	if err := ses.stop(r, took, false); err != nil {
		return failed(err)
	}
	t := folder.NewTable(ses.problem, ses.soFar(), ses.brief.Seed)
	if err := ses.folder.WriteResult(t, folder.NearTable(ses.problem, ses.all, ses.brief.Seed)); err != nil {
		return failed(err)
	}
	fmt.Fprintf(ses.s.err, "stopped after %d evaluations: %s", len(r.Evaluations), r.Reason)
	if r.Explanation != "" {
		fmt.Fprintf(ses.s.err, " (%s)", r.Explanation)
	}
	fmt.Fprintf(ses.s.err, "; the front so far, unchecked, has %s. Go on with:\n  %s\n", counted(len(t.Members), "design"), ses.goOn())
	if r.Reason == optimize.Stopped {
		return stopped(context.Canceled)
	}
	return failed(fmt.Errorf("%s: %s", r.Reason, r.Explanation))
}

// finish settles the front, writes it and says what was found.
func (ses *session) finish(ctx context.Context, r optimize.Result, began time.Time) error {
	show := newProgress(ses.s)
	answered := finest(r.Evaluations, ses.problem)
	settled, err := optimize.Settle(ctx, answered, ses.confirm, optimize.SettleOptions{
		Most: ses.brief.FrontAtMost, Workers: ses.set.Workers,
		Kept: ses.keepFinal,
		Progress: func(done, of, round int) {
			show.show(standing{stage: fmt.Sprintf("confirming the front, round %d", round), done: done, total: of, front: of})
		},
	})
	show.end()
	if err != nil && ctx.Err() != nil {
		r.Reason = optimize.Stopped
		return ses.interrupted(r, time.Since(began))
	}
	if err != nil {
		return failed(err)
	}
	t := folder.NewTable(ses.problem, settled.Front, ses.brief.Seed)
	if err := ses.folder.WriteResult(t, folder.NearTable(ses.problem, answered, ses.brief.Seed)); err != nil {
		return failed(err)
	}
	if err := ses.stop(r, time.Since(began), true); err != nil {
		return failed(err)
	}
	err = ses.summary(r, settled, t, time.Since(began))
	ses.report(ctx)
	return err
}

// confirm is the final word on a candidate.
func (ses *session) confirm(ctx context.Context, c optimize.Candidate, whole bool) (optimize.Score, error) {
	return ses.problem.Confirm(ctx, c.Point, whole)
}
