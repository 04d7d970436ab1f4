package main

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strconv"
	"strings"
	"sync"
	"sync/atomic"
	"time"

	"github.com/spf13/cobra"

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
	asks    bool              // of the journal, whatever was kept in this session
	kept    sync.Map          // keys of the questions answered in this session
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
	Seconds     float64 `json:"seconds"` // that this session took
}

// decided reads the evaluations planned and the last reason for stopping out
// of a run's decisions.
func decided(ds []journal.Decision) (planned int, stopped string) {
	for _, d := range ds {
		var x struct {
			Planned int    `json:"planned"`
			Reason  string `json:"reason"`
		}
		if json.Unmarshal(d.Detail, &x) != nil {
			continue
		}
		planned = max(planned, x.Planned)
		if d.Kind == journal.Stop {
			stopped = x.Reason
		}
	}
	return planned, stopped
}

// begin makes the files of a new run. A start that fails leaves no folder.
func (ses *session) begin() (err error) {
	defer func() {
		if err != nil {
			ses.close()
			os.RemoveAll(ses.folder.Dir)
			err = failed(err)
		}
	}()
	if ses.lock, err = journal.Lock(ses.folder.Dir); err != nil {
		return err
	}
	if err = ses.keepStarts(); err != nil {
		return err
	}
	if err = folder.WriteFile(ses.folder.Path(folder.BriefFile), ses.resolved()); err != nil {
		return err
	}
	if ses.book, err = journal.Create(ses.folder.Path(folder.JournalFile), ses.header()); err != nil {
		return err
	}
	if err = ses.folder.WriteFront(folder.NewTable(ses.problem, nil, ses.brief.Seed)); err != nil {
		return err
	}
	return ses.book.Decide(journal.Start, startDetail{ses.planned[0], ses.set.Workers, version})
}

// keepStarts copies the designs to start from into the run, so that its brief
// goes on to name them.
func (ses *session) keepStarts() error {
	names := make([]string, len(ses.brief.StartFrom))
	for i, name := range ses.brief.StartFrom {
		if !filepath.IsAbs(name) {
			name = filepath.Join(filepath.Dir(ses.from), name)
		}
		data, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		if i == 0 {
			if err := os.MkdirAll(ses.folder.Path(folder.StartsDir), 0o755); err != nil {
				return err
			}
		}
		names[i] = folder.StartsDir + "/" + strconv.Itoa(i+1) + filepath.Ext(name)
		if err := folder.WriteFile(ses.folder.Path(names[i]), data); err != nil {
			return err
		}
	}
	ses.brief.StartFrom = names
	return nil
}

// resolved is the brief as the run keeps it: defaults filled in.
func (ses *session) resolved() []byte {
	b := ses.brief
	return append([]byte("# The brief of this run, as it was read.\n"), b.Write()...)
}

func (ses *session) header() journal.Header {
	p := ses.problem
	host, _ := os.Hostname()
	h := journal.Header{
		Brief: string(ses.resolved()), Digest: ses.brief.Digest(), Program: "turnwise " + version, Seed: ses.brief.Seed,
		Machine: fmt.Sprintf("%s, %s/%s, %d processors", host, runtime.GOOS, runtime.GOARCH, runtime.NumCPU()),
		Models:  identities(p),
	}
	for i := range p.Layout.Space {
		h.Variables = append(h.Variables, journal.Variable{Name: p.Layout.Space[i].Name, Choices: p.Layout.Space[i].Choices})
	}
	for _, f := range objectives.Figures {
		h.Figures = append(h.Figures, f.Column)
	}
	for _, a := range p.Aims {
		h.Aims = append(h.Aims, a.Figure.String())
	}
	for _, l := range p.Limits {
		bound := "_at_most"
		if l.AtLeast {
			bound = "_at_least"
		}
		h.Limits = append(h.Limits, l.Figure.String()+bound)
	}
	return h
}

// reopen goes on with the run in a folder.
func (ses *session) reopen(c *cobra.Command, o searchOptions) error {
	dir, _ := c.Flags().GetString("run")
	if dir == "" {
		dir = os.Getenv("TURNWISE_RUN")
	}
	if dir == "" {
		return wrongf("--resume needs to know the run: name its folder with --run")
	}
	ses.asks = true
	var err error
	if ses.folder, err = folder.Open(dir); err != nil {
		return wrong(err)
	}
	if ses.brief, err = configs.ReadBrief(ses.folder.Path(folder.BriefFile)); err != nil {
		return wrong(err)
	}
	own := ses.brief
	if o.brief != "" {
		given, err := configs.ReadBrief(o.brief)
		if err != nil {
			return wrong(err)
		}
		given.Budget = own.Budget
		ses.brief = given
	}
	if ses.set, err = configs.Resolve(c.Flags(), &ses.brief); err != nil {
		return wrong(err)
	}
	asked := 0
	if f := c.Flags().Lookup("evaluations"); f.Changed || os.Getenv("TURNWISE_EVALUATIONS") != "" {
		asked = ses.set.Evaluations
	}
	ses.set.Apply(&ses.brief)
	ses.brief.Budget.Evaluations = own.Budget.Evaluations
	if differ := configs.Diff(&own, &ses.brief); len(differ) > 0 {
		return wrongf("the run in %s belongs to another brief: %s differ; go on with the brief it has, or start a new run", dir, strings.Join(differ, ", "))
	}
	if ses.problem, err = newProblem(ses.brief, ses.brief.Spec); err != nil {
		return wrong(fmt.Errorf("%s: %w", dir, err))
	}
	if ses.lock, err = journal.Lock(dir); err != nil {
		if errors.Is(err, journal.ErrLocked) {
			return wrong(err)
		}
		return failed(err)
	}
	if err := ses.recall(c.Context(), asked); err != nil {
		ses.close()
		return err
	}
	return nil
}

// recall reads what earlier sessions left, and extends the plan when more
// evaluations are asked for than it has.
func (ses *session) recall(ctx context.Context, asked int) error {
	var err error
	if ses.book, err = journal.Open(ses.folder.Path(folder.JournalFile)); err != nil {
		return failed(err)
	}
	if h := ses.book.Header(); h.Digest != ses.brief.Digest() || !slices.Equal(h.Models, identities(ses.problem)) {
		return wrongf("the journal in %s was written for another brief or another version of the model: start a new run", ses.folder.Dir)
	}
	ds, err := ses.book.Decisions(ctx)
	if err != nil {
		return failed(err)
	}
	for _, d := range ds {
		var x struct {
			Planned int     `json:"planned"`
			Seconds float64 `json:"seconds"`
		}
		if err := json.Unmarshal(d.Detail, &x); err != nil {
			return failed(fmt.Errorf("the journal's decision %d cannot be read: %w", d.Seq, err))
		}
		switch d.Kind {
		case journal.Start:
			if len(ses.planned) == 0 {
				ses.planned = []int{x.Planned}
			}
		case journal.Extension:
			ses.planned = append(ses.planned, x.Planned-sum(ses.planned))
			ses.done = false
		case journal.Stop:
			ses.used += time.Duration(x.Seconds * float64(time.Second))
		case journal.Finish:
			ses.done = true
		}
	}
	if len(ses.planned) == 0 {
		return failed(fmt.Errorf("the journal in %s knows no start of its run", ses.folder.Dir))
	}
	if ses.past, err = ses.book.Past(ctx); err != nil {
		return failed(err)
	}
	if asked > sum(ses.planned) {
		ses.planned = append(ses.planned, asked-sum(ses.planned))
		ses.done = false
		return failed(ses.book.Decide(journal.Extension, extensionDetail{asked}))
	}
	if ses.set.For > 0 || !ses.until.IsZero() {
		// More time for a run that a clock stopped.
		ses.done = ses.done && len(ses.past) >= sum(ses.planned)
	}
	if !ses.done {
		return failed(ses.book.Decide(journal.Start, startDetail{ses.planned[0], ses.set.Workers, version}))
	}
	return nil
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
// problem's memory. A new run's journal holds what this session kept.
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

// dearFrom is how long an evaluation takes from which on the learned searcher
// pays: below it, its own time counts.
const dearFrom = 300 * time.Millisecond

// searcher is the programme of the run.
func (ses *session) searcher() *programme.Search {
	c := programme.Config{
		Plan: ses.planned, Sample: ses.brief.Search.Sample, Genetic: ses.brief.Search.Genetic, Simplex: ses.brief.Search.Simplex,
		Seed: ses.brief.Seed, Seeds: ses.problem.HandSeeds(20), DearFrom: dearFrom,
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

// identities are those of the models, cheapest first.
func identities(p *objectives.Problem) []string {
	var out []string
	for _, r := range p.Rungs() {
		out = append(out, r.Simulator.Identity())
	}
	return out
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

// stop records why this session ended.
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

// already ends the resumption of a run that had come to its end.
func (ses *session) already() error {
	t, err := folder.ReadTable(ses.folder.Path(folder.FrontFile))
	if err != nil {
		return failed(err)
	}
	fmt.Fprintf(ses.s.err, "the run in %s is finished; --evaluations with a larger number extends it\n", ses.folder.Dir)
	if len(t.Members) == 0 {
		return unmet("nothing met the limits; %s holds the nearest misses", ses.folder.Path(folder.NearFile))
	}
	_, err = fmt.Fprintln(ses.s.out, ses.folder.Dir)
	return failed(err)
}
