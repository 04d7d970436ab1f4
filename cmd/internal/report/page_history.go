package report

import (
	"turnwise/optimize"
	"turnwise/optimize/front"
)

// historySteps is about how many points a history has.
const historySteps = 100

// History replays a search and tells how its front grew: the hypervolume
// over the aims' final span, as a share of what it came to.
func History(past []optimize.Evaluation) []Step {
	values := make([]front.Value, len(past))
	for i := range past {
		values[i] = past[i].Value()
	}
	members := front.Front(values)
	if len(members) == 0 || len(values[members[0]].Aims) > front.MostAims {
		return nil
	}
	last := make([][]float64, len(members))
	for i, m := range members {
		last[i] = values[m].Aims
	}
	axes := front.Span(last)
	archive := front.NewArchive(front.UnitReference(len(last[0])))
	every := max(1, len(past)/historySteps)
	steps := []Step{{}}
	for i, v := range values {
		if v.Feasible() {
			v.Aims = axes.Unit(v.Aims)
			archive.Insert(past[i].ID, v)
		}
		if n := i + 1; n%every == 0 || n == len(values) {
			steps = append(steps, Step{n, archive.Hypervolume()})
		}
	}
	whole := steps[len(steps)-1].Share
	for i := range steps {
		steps[i].Share /= whole
	}
	return steps
}

// Stages tells what each stage of a search cost, in the order of their
// beginnings, and how many members of the front it found.
func Stages(past []optimize.Evaluation, found map[string]int) []Stage {
	at := map[string]int{}
	var stages []Stage
	for i := range past {
		name := past[i].From
		k, known := at[name]
		if !known {
			k = len(stages)
			at[name] = k
			stages = append(stages, Stage{Name: name, Front: found[name]})
		}
		stages[k].Evaluations++
		stages[k].To = i + 1
	}
	return stages
}
