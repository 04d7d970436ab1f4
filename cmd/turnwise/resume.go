package main

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"slices"
	"strings"
	"time"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/folder"
	"turnwise/configs"
	"turnwise/optimize/journal"
)

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
	if ses.past, err = ses.book.Past(ctx); err != nil {
		return failed(err)
	}
	if len(ses.planned) == 0 {
		if len(ses.past) > 0 {
			return failed(fmt.Errorf("the journal in %s knows no start of its run", ses.folder.Dir))
		}
		// Killed between the journal's making and its first line.
		if err := ses.plan(ctx); err != nil {
			return err
		}
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
