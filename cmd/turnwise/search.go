package main

import (
	"context"
	"errors"
	"fmt"
	"time"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/folder"
	"turnwise/configs"
)

// searchOptions are the options of search that no setting covers.
type searchOptions struct {
	brief   string // empty: the demonstration, or the folder's own on resume
	until   string
	resume  bool
	timeout time.Duration
	reuse   []string // folders of other runs
	spread  spread
}

func searchCommand(s streams) *cobra.Command {
	var o searchOptions
	c := &cobra.Command{
		Use:   "search [BRIEF]",
		Short: "Searches for the antennas that a brief asks for",
		Long: `Searches for the designs that a brief asks for and leaves a run folder: the
front as CSV, a design file for each member, and a journal of everything that
was computed. Without a brief it runs the built-in demonstration.

The first interrupt stops the search softly: what runs is finished, everything
is written, and the command that goes on is printed. A second one stops at
once; the journal stays whole.`,
		Args: arguments(cobra.MaximumNArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			if len(args) == 1 {
				o.brief = args[0]
			}
			return search(c, s, o)
		},
	}
	f := c.Flags()
	f.String("run", "", "the run's folder (default run-BRIEF-N, the first free N)")
	f.String("evaluations", "", "how many evaluations, on resume the new total")
	f.String("for", "", "how long this command may search, such as 8h")
	f.StringVar(&o.until, "until", "", "the time of day to stop at, such as 07:00")
	f.String("workers", "", "how many evaluations at a time (default the number of processors)")
	f.String("seed", "", "seed of everything random (default the brief's, or 1)")
	f.String("fidelity", "", "draft, standard or fine, of the full-wave model")
	f.DurationVar(&o.timeout, "timeout", 0, "the longest that one evaluation may take, such as 30s (default no limit)")
	f.StringArrayVar(&o.reuse, "reuse", nil, "take answers to the same questions from another run's folder (repeatable)")
	f.BoolVar(&o.resume, "resume", false, "go on with the run in --run")
	o.spread.flags(f)
	return c
}

// search runs a new search, or goes on with one.
func search(c *cobra.Command, s streams, o searchOptions) error {
	until, err := parseUntil(o.until, time.Now())
	if err != nil {
		return wrong(err)
	}
	if o.timeout < 0 {
		return wrongf("--timeout %v: write a time above zero, such as 30s", o.timeout)
	}
	ses := &session{s: s, until: until, timeout: o.timeout}
	defer ses.close()
	far, err := o.spread.open(c.Context(), s)
	if err != nil {
		return err
	}
	defer far.close()
	if far != nil && o.timeout > 0 {
		return wrongf("--timeout counts the wait for a worker too, which --serve and --queue make a long one: leave it away")
	}
	if err := ses.reuse(o.reuse); err != nil {
		return err
	}
	if o.resume {
		err = ses.reopen(c, o)
	} else {
		err = ses.open(c, o)
	}
	if err != nil {
		return err
	}
	if err := far.join(c, ses); err != nil {
		return err
	}
	return ses.run(c.Context())
}

// parseUntil is the next time that the clock shows the given time of day;
// zero where none is given.
func parseUntil(text string, now time.Time) (time.Time, error) {
	if text == "" {
		return time.Time{}, nil
	}
	t, err := time.Parse("15:04", text)
	if err != nil {
		return time.Time{}, fmt.Errorf("--until %s: write a time of day, such as 07:00", text)
	}
	at := time.Date(now.Year(), now.Month(), now.Day(), t.Hour(), t.Minute(), 0, 0, now.Location())
	if !at.After(now) {
		at = at.AddDate(0, 0, 1)
	}
	return at, nil
}

// open starts a new run: everything is checked before anything is written.
func (ses *session) open(c *cobra.Command, o searchOptions) error {
	name := configs.DefaultScenario + ".yaml"
	var err error
	if o.brief == "" {
		ses.brief, err = configs.ReadScenario(configs.DefaultScenario)
	} else {
		name, ses.from = o.brief, o.brief
		ses.brief, err = configs.ReadBrief(o.brief)
	}
	if err != nil {
		return wrong(err)
	}
	if ses.set, err = configs.Resolve(c.Flags(), &ses.brief); err != nil {
		return wrong(err)
	}
	ses.set.Apply(&ses.brief)
	if ses.problem, err = newProblem(ses.brief, ses.brief.Spec); err != nil {
		return wrong(fmt.Errorf("%s: %w", name, err))
	}
	dir := ses.set.Run
	if dir == "" {
		if dir, err = folder.Next(name); err != nil {
			return failed(err)
		}
	}
	if err := ses.plan(c.Context()); err != nil {
		return err
	}
	ses.folder, err = folder.Create(dir)
	if errors.Is(err, folder.ErrExists) {
		return wrong(fmt.Errorf("%w; go on with it by --resume --run %s, or name another folder with --run", err, dir))
	}
	if err != nil {
		return failed(err)
	}
	return ses.begin()
}

// plan settles how many evaluations a new run plans. With only a time to go
// by, it is what timing says fits; it is kept with the run and never changes.
func (ses *session) plan(ctx context.Context) error {
	budget := &ses.brief.Budget
	limit := ses.set.For
	if limit == 0 || budget.Time > 0 && budget.Time < limit {
		limit = budget.Time
	}
	if limit == 0 && !ses.until.IsZero() {
		limit = time.Until(ses.until)
	}
	switch {
	case budget.Evaluations > 0:
		ses.planned = []int{budget.Evaluations}
	case limit > 0:
		one, err := timeEvaluation(ctx, ses.problem)
		if err != nil {
			return failed(fmt.Errorf("the model answers none of the first designs: %w", err))
		}
		ses.planned = []int{timedPlan(ses.problem, limit, one, ses.set.Workers)}
	default:
		ses.planned = []int{configs.DefaultEvaluations}
	}
	return nil
}
