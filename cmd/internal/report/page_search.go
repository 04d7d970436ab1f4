package report

import (
	"fmt"
	"html/template"
	"strings"
	"time"

	"turnwise/cmd/internal/chart"
	"turnwise/objectives"
)

// Stage is one stage's part in a search.
type Stage struct {
	Name        string
	Evaluations int
	Front       int // members of the front that it found
}

// Stretch is a part of a search that one stage had: an extended search has
// several of a stage.
type Stretch struct {
	Stage string
	To    int // the number of its last evaluation
}

// Step is how much of the final front's hypervolume was there after so many
// evaluations, 0 to 1.
type Step struct {
	Evaluations int
	Share       float64
}

// searchView is how the front came about.
type searchView struct {
	Lead          string
	Charts        []figureView
	Facts         []pair
	HistoryMissed bool
}

func (r *Run) searchView() searchView {
	s := &r.Search
	v := searchView{Lead: r.searchLead()}
	for _, c := range r.searchCharts() {
		v.Charts = append(v.Charts, c.view())
	}
	v.Facts = []pair{
		{"evaluations", fmt.Sprintf("%d of %d planned", s.Evaluations, s.Planned)},
		{"met every limit", fmt.Sprint(s.Feasible)},
		{"failed", fmt.Sprint(s.Failed)},
		{"timed out", fmt.Sprint(s.TimedOut)},
		{"asked twice", fmt.Sprint(s.Reused)},
		{"confirmations", fmt.Sprint(s.Final)},
		{"seed", fmt.Sprint(r.Brief.Seed)},
		{"model", s.Model},
		{"program", s.Program},
		{"brief", s.Digest},
	}
	return v
}

func (r *Run) searchLead() string {
	s := &r.Search
	took := ""
	if s.Seconds > 0 {
		took = fmt.Sprintf(" after %s", spell(time.Duration(s.Seconds*float64(time.Second))))
	}
	switch {
	case s.Stopped == "":
		return "The search has not come to an end yet."
	case !s.Finished:
		return fmt.Sprintf("The search stopped%s: %s. It can go on with: turnwise search --resume --run %s", took, s.Stopped, r.Name)
	}
	return fmt.Sprintf("The search ended%s: %s. Every member of the front was then simulated again over a fine sweep, and its figures come from that.", took, s.Stopped)
}

// spell is a duration in words.
func spell(d time.Duration) string {
	switch {
	case d >= time.Hour:
		return fmt.Sprintf("%d h %d min", int(d.Hours()), int(d.Minutes())%60)
	case d >= time.Minute:
		return fmt.Sprintf("%d min %d s", int(d.Minutes()), int(d.Seconds())%60)
	}
	return fmt.Sprintf("%.1f s", d.Seconds())
}

// searchCharts are the history and the shares of the stages.
func (r *Run) searchCharts() []Chart {
	var charts []Chart
	if h := r.Search.History; len(h) > 1 {
		charts = append(charts, Chart{
			Name: "hypervolume", Title: "Hypervolume against evaluations",
			Caption: "How much of the aims' space the front so far covers, against what it covers in the end: flat at the end means that going on would have bought little.",
			Figure:  r.historyChart(h),
		})
	}
	if len(r.Search.Stages) > 0 {
		charts = append(charts, Chart{
			Name: "stages", Title: "What each stage cost and found",
			Caption: "Each stage's share of the evaluations beside its share of the final front.",
			Figure:  r.stagesChart(),
		})
	}
	return charts
}

func (r *Run) historyChart(steps []Step) *chart.Lines {
	var s chart.Series
	for _, p := range steps {
		s.X, s.Y = append(s.X, float64(p.Evaluations)), append(s.Y, 100*p.Share)
	}
	l := &chart.Lines{
		X:      chart.Axis{Label: "evaluations", Min: 0, Max: float64(steps[len(steps)-1].Evaluations)},
		Y:      chart.Axis{Label: "hypervolume, % of the final", Min: 0, Max: 100},
		Series: []chart.Series{s},
	}
	for _, part := range r.Search.Stretches {
		l.Sections = append(l.Sections, chart.Section{Name: part.Stage, To: float64(part.To)})
	}
	return l
}

func (r *Run) stagesChart() *chart.Bars {
	b := &chart.Bars{Names: [2]string{"of the evaluations", "of the front"}}
	members := len(r.Table.Members)
	for _, st := range r.Search.Stages {
		g := chart.Group{Name: st.Name, Texts: [2]string{fmt.Sprint(st.Evaluations), fmt.Sprint(st.Front)}}
		g.Shares[0] = float64(st.Evaluations) / float64(max(r.Search.Evaluations, 1))
		g.Shares[1] = float64(st.Front) / float64(max(members, 1))
		b.Groups = append(b.Groups, g)
	}
	return b
}

// tiles are the facts to see first.
func (r *Run) tiles() []tile {
	var tiles []tile
	if r.empty() {
		tiles = append(tiles, tile{"Front", "empty", "nothing met the limits"})
	} else {
		tiles = append(tiles, tile{"Front", plural(len(r.Table.Members), "design", "designs"), fmt.Sprintf("%s looked at closely", plural(len(r.Sheets), "one", "of them"))})
		for _, a := range r.Problem.Aims {
			tiles = append(tiles, r.aimTile(a))
		}
	}
	s := &r.Search
	why := s.Stopped
	if why == "" {
		why = "not finished"
	}
	return append(tiles, tile{"Evaluations", fmt.Sprint(s.Evaluations), capitalFree(why)})
}

func capitalFree(text string) string { return strings.TrimSuffix(text, ".") }

// aimTile is the best of one aim.
func (r *Run) aimTile(a objectives.Aim) tile {
	best := &r.Table.Members[0]
	for i := range r.Table.Members {
		if m := &r.Table.Members[i]; a.Cost(m.Figures[a.Figure]) < a.Cost(best.Figures[a.Figure]) {
			best = m
		}
	}
	return tile{capital(aimWords(a)), said(a.Figure, best.Figures[a.Figure]), best.ID}
}

// figureView is a chart on the page.
type figureView struct {
	Caption      string
	Wide, Narrow template.HTML // Narrow is empty where one drawing serves
	Indicative   bool
}
