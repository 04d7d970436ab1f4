package main

import (
	"fmt"
	"strings"
	"time"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/optimize"
)

// summary prints the run's folder, why it stopped and the best of each aim.
func (ses *session) summary(r optimize.Result, settled optimize.Settled, t *folder.Table, took time.Duration) error {
	w := ses.s.out
	fmt.Fprintf(w, "%s: %s on the front, from %d evaluations in %s; %s\n", ses.folder.Dir, counted(len(t.Members), "design"), len(r.Evaluations), brief(took), r.Reason)
	fmt.Fprintf(w, "found by      %s\n", strings.Join(byStage(settled.Front), ", "))
	failedCount, reused := 0, 0
	for i := range r.Evaluations {
		if r.Evaluations[i].Status != optimize.OK {
			failedCount++
		}
		if r.Evaluations[i].Reused {
			reused++
		}
	}
	fmt.Fprintf(w, "evaluations   %d failed, %d asked twice; %d confirmations besides\n", failedCount, reused, settled.Checks)
	if n := ses.reused.Load(); n > 0 {
		fmt.Fprintf(w, "reused        %d answers of other runs\n", n)
	}
	for i := range settled.Left {
		if e := &settled.Left[i]; e.Status != optimize.OK {
			fmt.Fprintf(w, "left          candidate %d was not confirmed: %s\n", e.ID, firstLine(e.Err))
		}
	}
	if r.Explanation != "" {
		fmt.Fprintf(w, "note          %s\n", r.Explanation)
	}
	if len(t.Members) == 0 {
		return unmet("nothing met the limits; %s holds the ten designs that miss them least", ses.folder.Path(folder.NearFile))
	}
	if when := grownBy(history(r.Evaluations, ses.problem)); when != "" {
		fmt.Fprintf(w, "hypervolume   %s\n", when)
	}
	for _, a := range ses.problem.Aims {
		best := &t.Members[0]
		for i := range t.Members {
			if m := &t.Members[i]; a.Cost(m.Figures[a.Figure]) < a.Cost(best.Figures[a.Figure]) {
				best = m
			}
		}
		var rest []string
		for _, other := range ses.problem.Aims {
			if other.Figure != a.Figure {
				rest = append(rest, other.Figure.String()+" "+report.Quantity(other.Figure, best.Figures[other.Figure]))
			}
		}
		line := fmt.Sprintf("best          %s %s: %s", a.Figure, report.Quantity(a.Figure, best.Figures[a.Figure]), best.ID)
		if len(rest) > 0 {
			line += ", with " + strings.Join(rest, ", ")
		}
		fmt.Fprintln(w, line)
	}
	fmt.Fprintf(w, "front         %s\n", ses.folder.Path(folder.FrontFile))
	_, err := fmt.Fprintf(w, "next          turnwise choose %s --at-least gain=%.0f\n", ses.folder.Dir, middleGain(t))
	return failed(err)
}

// byStage says how many members each stage found, most first in the order of
// stages.
func byStage(members []optimize.Member) []string {
	counts := map[string]int{}
	var order []string
	for i := range members {
		from := members[i].From
		if counts[from] == 0 {
			order = append(order, from)
		}
		counts[from]++
	}
	if len(order) == 0 {
		return []string{"none"}
	}
	parts := make([]string, len(order))
	for i, from := range order {
		parts[i] = fmt.Sprintf("%s %d", from, counts[from])
	}
	return parts
}

// middleGain is a gain that some members reach and some do not.
func middleGain(t *folder.Table) float64 {
	return t.Members[len(t.Members)/2].Figures[0] - 0.5
}

func firstLine(s string) string {
	line, _, _ := strings.Cut(s, "\n")
	return line
}

// counted is a number with its noun.
func counted(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}
