package main

import (
	"context"
	"fmt"
	"time"

	"turnwise/cmd/internal/folder"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/journal"
)

// reuse opens the journals of other runs.
func (ses *session) reuse(dirs []string) error {
	for _, dir := range dirs {
		f, err := folder.Open(dir)
		if err != nil {
			return wrong(fmt.Errorf("--reuse: %w", err))
		}
		r, err := journal.Read(f.Path(folder.JournalFile))
		if err != nil {
			return wrong(fmt.Errorf("--reuse: %w", err))
		}
		ses.others = append(ses.others, r)
		ses.asks = true
	}
	return nil
}

// Recall finds an answer in the journal, or in those of other runs; the
// problem's memory. A new run's journal holds what was kept since it began.
func (ses *session) Recall(key string) ([]byte, bool) {
	if _, kept := ses.kept.Load(key); !kept && !ses.asks {
		return nil, false
	}
	if a, ok, err := ses.book.Answer(context.Background(), key); ok && err == nil {
		return a.Response, true
	}
	for _, r := range ses.others {
		if a, ok, err := r.Answer(context.Background(), key); ok && err == nil {
			ses.reused.Add(1)
			return a.Response, true
		}
	}
	return nil, false
}

// keep takes recorded evaluations into the front that is written on the way,
// at every improvement and at most once a second.
func (ses *session) keep(es []optimize.Evaluation) error {
	better := false
	for i := range es {
		e := es[i]
		for k := range e.Answers {
			ses.kept.Store(e.Answers[k].Key, nil)
		}
		e.Answers = nil
		if e.Rung < len(ses.problem.Rungs())-1 {
			continue
		}
		ses.all = append(ses.all, e)
		better = ses.so.Insert(e.ID, e.Value()) || better
	}
	if !better || time.Since(ses.written) < time.Second {
		return nil
	}
	ses.written = time.Now()
	return ses.folder.WriteFront(folder.NewTable(ses.problem, ses.soFar(), ses.brief.Seed))
}

// keepFinal records a confirmation.
func (ses *session) keepFinal(e optimize.Evaluation) error {
	if err := ses.book.RecordFinal([]optimize.Evaluation{e}); err != nil {
		return err
	}
	for k := range e.Answers {
		ses.kept.Store(e.Answers[k].Key, nil)
	}
	return nil
}

// soFar is the front of everything that is known, unchecked.
func (ses *session) soFar() []optimize.Member {
	values := make([]front.Value, len(ses.all))
	for i := range ses.all {
		values[i] = ses.all[i].Value()
	}
	var members []optimize.Member
	for _, i := range front.Thinned(values, ses.brief.FrontAtMost) {
		members = append(members, optimize.Member{Evaluation: ses.all[i]})
	}
	return members
}

// finest are the evaluations by the finest model.
func finest(all []optimize.Evaluation, p *objectives.Problem) []optimize.Evaluation {
	var out []optimize.Evaluation
	for i := range all {
		if all[i].Rung >= len(p.Rungs())-1 {
			out = append(out, all[i])
		}
	}
	return out
}
