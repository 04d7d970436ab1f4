package main

import (
	"context"
	"fmt"
	"io"
	"strings"
	"text/tabwriter"
	"time"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/models/remote"
	"turnwise/objectives"
	"turnwise/optimize/journal"
)

// watchEvery is how often a watched search is looked at.
const watchEvery = 2 * time.Second

func watchCommand(s streams) *cobra.Command {
	var json, once bool
	c := &cobra.Command{
		Use:   "watch RUN",
		Short: "Follows a running search from another terminal",
		Long: `Shows how the search in a run's folder stands: progress, rate, time left, best
per aim, front so far, failures by reason. It ends with the search; --once
looks a single time.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			return watch(c.Context(), s, args[0], once, json)
		},
	}
	c.Flags().BoolVar(&json, "json", false, "print one JSON object a look")
	c.Flags().BoolVar(&once, "once", false, "look once")
	return c
}

func watch(ctx context.Context, s streams, run string, once, json bool) error {
	f, err := folder.Open(run)
	if err != nil {
		return wrong(err)
	}
	r, err := journal.Read(f.Path(folder.JournalFile))
	if err != nil {
		return wrong(err)
	}
	defer r.Close()
	tail := r.Tail()
	for {
		p, err := tail.Poll(ctx)
		if err != nil {
			return failed(err)
		}
		v := newView(run, r.Header(), &p)
		if p.Alive {
			v.Queue = readStanding(f)
		}
		if json {
			err = writeJSON(s.out, v)
		} else {
			err = v.write(s.out)
		}
		if err != nil {
			return failed(err)
		}
		if once || !p.Alive {
			return nil
		}
		select {
		case <-ctx.Done():
			return nil
		case <-time.After(watchEvery):
		}
	}
}

// view is how a search stands, as watch shows it.
type view struct {
	Run         string        `json:"run"`
	Running     bool          `json:"running"`
	Holder      string        `json:"holder,omitempty"`
	Evaluations int           `json:"evaluations"`
	Planned     int           `json:"planned"`
	Rate        float64       `json:"rate_per_s"`
	Left        float64       `json:"left_s"`
	Front       int           `json:"front"`
	Failed      int           `json:"failed"`
	TimedOut    int           `json:"timed_out"`
	Feasible    int           `json:"feasible"`
	Best        []viewBest    `json:"best"`
	Failures    []viewFailure `json:"failures"`
	Stages      []viewStage   `json:"stages"`
	Stopped     string        `json:"stopped,omitempty"`
	// Queue is set while other machines answer.
	Queue *remote.Standing `json:"queue,omitempty"`
}

type viewBest struct {
	Aim       string   `json:"aim"`
	Value     *float64 `json:"value"`
	Candidate int      `json:"candidate"`
}

type viewFailure struct {
	Status string `json:"status"`
	Reason string `json:"reason"`
	Times  int    `json:"times"`
}

type viewStage struct {
	Name        string  `json:"name"`
	Evaluations int     `json:"evaluations"`
	Share       float64 `json:"share"`
}

func newView(run string, h journal.Header, p *journal.Progress) *view {
	v := &view{
		Run: run, Running: p.Alive, Evaluations: p.Evaluations, Rate: p.Rate, Front: p.Front, Failed: p.Failed, TimedOut: p.TimedOut,
		Feasible: p.Feasible, Best: []viewBest{}, Failures: []viewFailure{}, Stages: []viewStage{},
	}
	v.Planned, v.Stopped = decided(p.Decisions)
	if p.Alive {
		v.Holder, v.Stopped = p.Holder.String(), ""
	}
	if p.Rate > 0 && v.Planned > p.Evaluations && p.Alive {
		v.Left = float64(v.Planned-p.Evaluations) / p.Rate
	}
	for i, b := range p.Best {
		one := viewBest{Aim: b.Aim}
		if f, ok := objectives.FigureByName(h.Aims[i]); ok && b.Entry != nil {
			x := b.Entry.Figures[f]
			one.Aim, one.Value, one.Candidate = objectives.Figures[f].Column, &x, b.Entry.ID
		}
		v.Best = append(v.Best, one)
	}
	for _, r := range p.Failures {
		v.Failures = append(v.Failures, viewFailure{string(r.Status), r.Reason, r.Times})
	}
	for _, st := range p.Stages {
		v.Stages = append(v.Stages, viewStage{st.Name, st.Evaluations, st.Share})
	}
	return v
}

// write shows the view to a person.
func (v *view) write(w io.Writer) error {
	state := "runs: " + v.Holder
	if !v.Running {
		state = "does not run now"
		if v.Stopped != "" {
			state = "stopped: " + v.Stopped
		}
	}
	fmt.Fprintf(w, "%s  %s\n", v.Run, state)
	line := fmt.Sprintf("  %d of %d evaluations", v.Evaluations, v.Planned)
	if v.Rate > 0 {
		line += fmt.Sprintf(", %s/s", significant(v.Rate))
	}
	if v.Left > 0 {
		line += ", " + clock(time.Duration(v.Left*float64(time.Second))) + " left"
	}
	fmt.Fprintf(w, "%s\n  front %d, feasible %d, failed %d, timed out %d\n", line, v.Front, v.Feasible, v.Failed, v.TimedOut)
	var stages []string
	for _, st := range v.Stages {
		stages = append(stages, fmt.Sprintf("%s %d", st.Name, st.Evaluations))
	}
	fmt.Fprintf(w, "  stages: %s\n", strings.Join(stages, ", "))
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	for _, b := range v.Best {
		f, ok := objectives.FigureByName(b.Aim)
		if !ok || b.Value == nil {
			fmt.Fprintf(t, "  best %s\tnone feasible yet\n", b.Aim)
			continue
		}
		fmt.Fprintf(t, "  best %s\t%s\tcandidate %d\n", f, report.Quantity(f, *b.Value), b.Candidate)
	}
	for _, r := range v.Failures {
		fmt.Fprintf(t, "  %s\t%d times\t%s\n", r.Status, r.Times, r.Reason)
	}
	if v.Queue != nil {
		writeStanding(t, v.Queue)
	}
	return t.Flush()
}
