package main

import (
	"context"
	"fmt"
	"strings"
	"sync"
	"sync/atomic"
	"time"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/journal"
	"turnwise/optimize/programme"
)

// session is one command's part of a run: its folder, its journal and what
// is searched for.
type session struct {
	s       streams
	set     configs.Settings
	brief   configs.Brief
	from    string // the brief's file
	problem *objectives.Problem
	until   time.Time
	timeout time.Duration

	folder  folder.Folder
	lock    *journal.Held
	book    *journal.Writer
	others  []*journal.Reader // runs whose answers may be reused
	asks    bool              // of the journal, whatever was kept since the start
	kept    sync.Map          // keys of the questions answered since the start
	planned []int             // of the run, then of each extension
	past    []optimize.Evaluation
	used    time.Duration // by earlier sessions
	done    bool          // the run was finished before
	written time.Time     // when front.csv was last
	so      front.Archive
	reused  atomic.Int64 // answers taken from other runs
	all     []optimize.Evaluation
}

// Details of decisions, as the journal keeps them.
type startDetail struct {
	Planned int    `json:"planned"`
	Workers int    `json:"workers"`
	Program string `json:"program"`
}

type extensionDetail struct {
	Planned int `json:"planned"` // in all, from now on
}

type stopDetail struct {
	Reason      string  `json:"reason"`
	Evaluations int     `json:"evaluations"`
	Seconds     float64 `json:"seconds"` // that it took
}

func sum(ns []int) int {
	total := 0
	for _, n := range ns {
		total += n
	}
	return total
}

// close lets go of the models, the journals and the lock.
func (ses *session) close() {
	closeModels(ses.problem)
	for _, r := range ses.others {
		r.Close()
	}
	if ses.book != nil {
		ses.book.Close()
	}
	if ses.lock != nil {
		ses.lock.Release()
	}
	ses.others, ses.book, ses.lock = nil, nil, nil
}

// dearFrom is how long an evaluation takes from which on the learned searcher
// pays: below it, its own time counts.
const dearFrom = 300 * time.Millisecond

// learnedMost is how many evaluations of a stage the learned searcher has in
// full-wave searches. It takes time of its own for each, also where a resumed
// run repeats itself; what it has found by then the genetic searcher takes
// many times as long to find. Other models are cheaper than that, or say by
// their time that they are dear.
const learnedMost = 1000

// learnedOwn is about how long the learned searcher takes for one of them, on
// two cores of a common server.
const learnedOwn = 15 * time.Millisecond

// learns reports whether the learned searcher leads a search whose
// evaluations are not dear.
func learns(p *objectives.Problem) bool {
	d := p.Domain()
	return p.Finest().Model == configs.FullWave && d.Traits != nil && d.Finest == 0
}

// searcher is the programme of the run.
func (ses *session) searcher() *programme.Search {
	c := programme.Config{
		Plan: ses.planned, Sample: ses.brief.Search.Sample, Genetic: ses.brief.Search.Genetic, Simplex: ses.brief.Search.Simplex,
		Seed: ses.brief.Seed, Seeds: ses.problem.HandSeeds(20), DearFrom: dearFrom,
	}
	if learns(ses.problem) {
		c.Learned = learnedMost
	}
	for i, d := range ses.brief.Starts {
		pt, notes := ses.problem.Layout.Point(d)
		for _, note := range notes {
			fmt.Fprintf(ses.s.err, "%s: %s\n", ses.brief.StartFrom[i], note)
		}
		c.Start = append(c.Start, pt)
	}
	return programme.New(ses.problem.Domain(), c)
}

// run searches to the end of the budget, settles the front and says so.
func (ses *session) run(ctx context.Context) error {
	if ses.done {
		return ses.already()
	}
	ses.problem.Memory = ses
	if err := ses.problem.Recollect(ctx, ses.past); err != nil {
		return failed(fmt.Errorf("%s: %w", ses.folder.Dir, err))
	}
	for _, u := range ses.problem.Unapplied {
		fmt.Fprintf(ses.s.err, "%s is set aside: the model only indicates it; trust_indicative: true in the brief applies it\n", u)
	}
	fmt.Fprintf(ses.s.err, "searching in %s, %s planned, %s\n", ses.folder.Dir, counted(sum(ses.planned), "evaluation"), counted(ses.set.Workers, "worker"))
	show := newProgress(ses.s)
	searcher := ses.searcher()
	defer searcher.Close()
	began := time.Now()
	ses.all = finest(ses.past, ses.problem)
	for i := range ses.all {
		ses.so.Insert(ses.all[i].ID, ses.all[i].Value())
	}
	r, err := optimize.Run(ctx, ses.problem, searcher, ses.past, ses.options(show))
	show.end()
	if err != nil {
		ses.stop(r, time.Since(began), false)
		return failed(fmt.Errorf("%w; to go on: %s", err, ses.goOn()))
	}
	if !r.Reason.Final() {
		return ses.interrupted(r, time.Since(began))
	}
	return ses.finish(ctx, r, began)
}

// options are how the loop runs.
func (ses *session) options(show *progress) optimize.Options {
	o := optimize.Options{
		Workers: ses.set.Workers, Evaluations: sum(ses.planned), Finest: len(ses.problem.Rungs()) - 1, For: ses.set.For, Until: ses.until, Timeout: ses.timeout,
		Stagnation: optimize.Stagnation(ses.brief.Budget.Stagnation),
		Record: func(es []optimize.Evaluation) error {
			if err := ses.book.Record(es); err != nil {
				return err
			}
			return ses.keep(es)
		},
		Progress: func(p optimize.Progress) { show.show(ses.standing(p)) },
	}
	if t := ses.brief.Budget.Time; t > 0 {
		left := max(t-ses.used, time.Millisecond)
		if o.For == 0 || left < o.For {
			o.For = left
		}
	}
	return o
}

// standing is the loop's progress in a person's units.
func (ses *session) standing(p optimize.Progress) standing {
	s := standing{stage: p.Stage, done: p.Done, total: p.Budget, rate: p.Rate, left: p.Left, front: p.Front, failed: p.Failed}
	if p.Best != nil {
		var best []string
		for i, a := range ses.problem.Aims {
			best = append(best, a.Figure.String()+" "+report.Quantity(a.Figure, a.Cost(p.Best[i])))
		}
		s.best = strings.Join(best, ", ")
		s.hypervolume = p.Hypervolume
	}
	return s
}
