package main

import (
	"context"
	"fmt"
	"path/filepath"
	"runtime"
	"slices"
	"sort"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize/front"
)

// A refinement starts from so many members of the front at most, and takes so
// many evaluations at most.
const (
	refineStarts   = 10
	mostRefinement = 1_000_000
)

// refine searches on from the chosen design and its likes for less of the
// figure under the targets: a run of its own inside the run's folder, with
// the brief's limits and margins and the targets as limits. It gives that
// run's front.
func (c choice) refine(ctx context.Context, s streams, f folder.Folder, t *folder.Table, brief configs.Brief, at int, figure objectives.Figure, targets []front.Target) (folder.Folder, *folder.Table, error) {
	var none folder.Folder
	from := f.Path(folder.BriefFile)
	b := brief
	b.Spec.Title += ", refined"
	b.Spec.Aims = []objectives.Aim{{Figure: figure}}
	b.Spec.Limits = withTargets(brief.Spec.Limits, targets)
	b.StartFrom, b.Starts = nil, nil
	for _, i := range likes(t, at, figure, targets) {
		name := filepath.Join(folder.DesignsDir, t.Members[i].ID+".yaml")
		d, err := configs.ReadDesign(f.Path(name))
		if err != nil {
			return none, nil, wrong(err)
		}
		b.StartFrom, b.Starts = append(b.StartFrom, name), append(b.Starts, d)
	}
	b.Search = configs.Shares{Sample: 0.05, Genetic: 0.35, Simplex: 0.6}
	b.Budget = configs.Budget{Evaluations: c.evaluations}
	problem, err := newProblem(b, b.Spec)
	if err != nil {
		return none, nil, wrong(err)
	}
	inner := streams{out: s.err, err: s.err, live: s.live}
	ses := &session{s: inner, brief: b, from: from, problem: problem, planned: []int{c.evaluations}}
	ses.set = configs.Settings{Workers: runtime.NumCPU(), Seed: b.Seed}
	defer ses.close()
	if ses.folder, err = folder.CreateBeside(f, "refined-"+t.Members[at].ID); err != nil {
		return none, nil, failed(err)
	}
	if err := ses.begin(); err != nil {
		return none, nil, err
	}
	if err := ses.run(ctx); err != nil {
		return none, nil, err
	}
	refined, err := folder.ReadTable(ses.folder.Path(folder.FrontFile))
	return ses.folder, refined, failed(err)
}

// withTargets are a brief's limits and the targets; of two on one side of a
// figure the tighter stays.
func withTargets(limits []objectives.Limit, targets []front.Target) []objectives.Limit {
	out := slices.Clone(limits)
	for _, g := range targets {
		l := objectives.Limit{Figure: objectives.Figure(g.Column), AtLeast: !g.Most, Value: g.Bound}
		i := slices.IndexFunc(out, func(o objectives.Limit) bool { return o.Figure == l.Figure && o.AtLeast == l.AtLeast })
		switch {
		case i < 0:
			out = append(out, l)
		case l.AtLeast:
			out[i].Value = max(out[i].Value, l.Value)
		default:
			out[i].Value = min(out[i].Value, l.Value)
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].Figure < out[j].Figure })
	return out
}

// likes are the chosen member and those that meet the targets with the next
// least of the figure.
func likes(t *folder.Table, at int, figure objectives.Figure, targets []front.Target) []int {
	var rest []int
	for i := range t.Members {
		if i != at && meets(&t.Members[i], targets) {
			rest = append(rest, i)
		}
	}
	sort.SliceStable(rest, func(i, j int) bool {
		return t.Members[rest[i]].Figures[figure] < t.Members[rest[j]].Figures[figure]
	})
	return append([]int{at}, rest[:min(len(rest), refineStarts-1)]...)
}

// gained says what a refinement brought.
func gained(before, after *folder.Member, figure objectives.Figure) string {
	return fmt.Sprintf("refined: %s %s, from %s of %s", figure, report.Quantity(figure, after.Figures[figure]), report.Quantity(figure, before.Figures[figure]), before.ID)
}
