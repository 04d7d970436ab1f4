package main

import (
	"context"
	"errors"
	"fmt"
	"math"
	"slices"
	"strings"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/journal"
)

func frontCommand(s streams) *cobra.Command {
	var csv, json bool
	var brief string
	c := &cobra.Command{
		Use:   "front RUN",
		Short: "Shows a run's front",
		Long: `Shows the front of a run as a table, also while the search is still going on.
--brief ranks everything that the run has computed anew, under the aims and
limits of another brief, and simulates nothing.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(c *cobra.Command, args []string) error {
			if csv && json {
				return wrongf("--csv and --json exclude each other")
			}
			return showFront(c.Context(), s, args[0], brief, csv, json)
		},
	}
	c.Flags().BoolVar(&csv, "csv", false, "print the bytes of front.csv")
	c.Flags().BoolVar(&json, "json", false, "print JSON")
	c.Flags().StringVar(&brief, "brief", "", "rank under the aims and limits of this brief")
	return c
}

func showFront(ctx context.Context, s streams, run, newBrief string, csv, json bool) error {
	f, err := folder.Open(run)
	if err != nil {
		return wrong(err)
	}
	brief, err := configs.ReadBrief(f.Path(folder.BriefFile))
	if err != nil {
		return wrong(err)
	}
	spec := &brief.Spec
	var t *folder.Table
	if newBrief == "" {
		t, err = folder.ReadTable(f.Path(folder.FrontFile))
	} else {
		t, spec, err = rank(ctx, f, brief, newBrief)
	}
	if err != nil {
		return wrong(err)
	}
	switch {
	case csv:
		_, err = s.out.Write(t.CSV(false))
	case json:
		err = report.WriteTableJSON(s.out, t)
	default:
		err = report.WriteTable(s.out, t, report.FrontColumns(spec))
	}
	if err != nil {
		return failed(err)
	}
	if len(t.Members) == 0 {
		return unmet("the front of %s is empty: nothing met the limits", run)
	}
	return nil
}

// rank makes the front of everything a run has computed under the aims and
// limits of another brief.
func rank(ctx context.Context, f folder.Folder, own configs.Brief, path string) (*folder.Table, *objectives.Spec, error) {
	other, err := configs.ReadBrief(path)
	if err != nil {
		return nil, nil, err
	}
	spec := own.Spec
	spec.Aims, spec.Limits, spec.TrustIndicative = other.Spec.Aims, other.Spec.Limits, other.Spec.TrustIndicative
	p, err := unaskedProblem(own, spec)
	if err != nil {
		return nil, nil, err
	}
	r, err := journal.Read(f.Path(folder.JournalFile))
	if err != nil {
		return nil, nil, err
	}
	defer r.Close()
	all, checked, err := everything(ctx, r)
	if err != nil {
		return nil, nil, err
	}
	members, err := ranked(p, all, checked, other.FrontAtMost)
	if err != nil {
		return nil, nil, err
	}
	return folder.NewTable(p, members, own.Seed), &p.Spec, nil
}

// everything is what a run has computed, a candidate once: its confirmed
// figures where there are any.
func everything(ctx context.Context, r *journal.Reader) (all []optimize.Evaluation, checked []bool, err error) {
	past, err := r.Past(ctx)
	if err != nil {
		return nil, nil, err
	}
	final, err := r.Final(ctx)
	if err != nil {
		return nil, nil, err
	}
	last := len(r.Header().Models) - 1
	past = slices.DeleteFunc(past, func(e optimize.Evaluation) bool { return e.Rung < last })
	confirmed := map[int]int{}
	for i := range final {
		confirmed[final[i].ID] = i
	}
	checked = make([]bool, len(past))
	for i := range past {
		if k, ok := confirmed[past[i].ID]; ok {
			past[i], checked[i] = final[k], true
		}
	}
	return past, checked, nil
}

// ranked scores the recorded figures anew. Figures that the run never
// computed cannot be ranked by: they are named.
func ranked(p *objectives.Problem, all []optimize.Evaluation, checked []bool, most int) ([]optimize.Member, error) {
	values := make([]front.Value, len(all))
	missing := map[objectives.Figure]int{}
	answered := 0
	for i := range all {
		if all[i].Status != optimize.OK {
			values[i].Unknown = true
			continue
		}
		answered++
		var row objectives.Row
		copy(row[:], all[i].Figures)
		all[i].Score = p.ScoreOf(row, nil)
		values[i] = all[i].Value()
		for _, f := range p.Judged() {
			if math.IsNaN(row[f]) {
				missing[f]++
				values[i].Unknown = true
			}
		}
	}
	var faults []error
	for _, f := range p.Judged() {
		if answered > 0 && missing[f] == answered {
			faults = append(faults, fmt.Errorf("%s was not computed in this run; it can be ranked by what it has: %s", f, strings.Join(known(all), ", ")))
		}
	}
	if err := errors.Join(faults...); err != nil {
		return nil, err
	}
	var members []optimize.Member
	for _, i := range front.Thinned(values, most) {
		members = append(members, optimize.Member{Evaluation: all[i], Checked: checked[i]})
	}
	return members, nil
}

// known names the figures that the run has computed.
func known(all []optimize.Evaluation) []string {
	var names []string
	for f := range objectives.Figures {
		for i := range all {
			if all[i].Status == optimize.OK && !math.IsNaN(all[i].Figures[f]) {
				names = append(names, objectives.Figures[f].Name)
				break
			}
		}
	}
	return names
}
