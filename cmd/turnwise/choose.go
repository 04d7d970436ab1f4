package main

import (
	"errors"
	"fmt"
	"io/fs"
	"math"
	"os"
	"strconv"
	"strings"

	"github.com/spf13/cobra"

	"turnwise/cmd/internal/folder"
	"turnwise/cmd/internal/report"
	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize/front"
)

// choice is what choose is asked for.
type choice struct {
	run             string
	atLeast, atMost []string
	least           string
	out             string
	json            bool
}

func chooseCommand(s streams) *cobra.Command {
	var c choice
	cmd := &cobra.Command{
		Use:   "choose RUN",
		Short: "Picks one design of a front and writes its design file",
		Long: `Picks the shortest design on a run's front that meets the targets (or the one
with the least of another figure), says why, and writes its design file.
Targets are in the units of front.csv: --at-least gain=12 --at-most vswr=1.8.
Without targets it picks the front's knee.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(_ *cobra.Command, args []string) error {
			c.run = args[0]
			return choose(s, c)
		},
	}
	f := cmd.Flags()
	f.StringArrayVar(&c.atLeast, "at-least", nil, "FIGURE=VALUE that must be reached (repeatable)")
	f.StringArrayVar(&c.atMost, "at-most", nil, "FIGURE=VALUE that must not be passed (repeatable)")
	f.StringVar(&c.least, "least", "length", "the figure to have the least of")
	f.StringVar(&c.out, "out", "", "where the design file goes (default RUN/chosen-ID.yaml)")
	f.BoolVar(&c.json, "json", false, "say what was chosen as JSON")
	return cmd
}

func choose(s streams, c choice) error {
	f, err := folder.Open(c.run)
	if err != nil {
		return wrong(err)
	}
	targets, err := c.targets()
	if err != nil {
		return wrong(err)
	}
	figure, ok := objectives.FigureByName(c.least)
	if !ok {
		return wrong(unknownFigure("--least", c.least))
	}
	t, err := folder.ReadTable(f.Path(folder.FrontFile))
	if err != nil {
		return wrong(err)
	}
	if len(t.Members) == 0 {
		return unmet("the front of %s is empty: nothing met the limits; %s holds the nearest misses", c.run, f.Path(folder.NearFile))
	}
	brief, err := configs.ReadBrief(f.Path(folder.BriefFile))
	if err != nil {
		return wrong(err)
	}
	rows := figureRows(t)
	at, knee := front.Least(rows, int(figure), targets...), false
	if len(targets) == 0 && c.least == "length" {
		if k := kneeOf(&brief.Spec, rows); k >= 0 {
			at, knee = k, true
		}
	}
	if at < 0 {
		near := front.Nearest(rows, targets...)
		return unmet("no design on the front of %s meets %s; the nearest is %s with %s", c.run, c.words(), t.Members[near].ID, describe(&t.Members[near], targets))
	}
	return c.hand(s, f, t, &brief.Spec, at, figure, targets, knee)
}

// hand writes the chosen design and says why it was chosen.
func (c choice) hand(s streams, f folder.Folder, t *folder.Table, spec *objectives.Spec, at int, figure objectives.Figure, targets []front.Target, knee bool) error {
	m := &t.Members[at]
	d, err := configs.ReadDesign(f.Path(folder.DesignsDir, m.ID+".yaml"))
	if err != nil {
		return wrong(fmt.Errorf("the front names %s, but its design file is missing or broken: %w", m.ID, err))
	}
	d.Title = spec.Title
	if d.Title == "" {
		d.Title = m.ID
	}
	path := c.out
	if path == "" {
		path = f.Path("chosen-" + m.ID + ".yaml")
	} else if _, err := os.Lstat(path); !errors.Is(err, fs.ErrNotExist) {
		return wrongf("%s exists already; name another file with --out", path)
	}
	if err := folder.WriteFile(path, configs.WriteDesign(d)); err != nil {
		return failed(err)
	}
	why := explain(t, at, figure, targets, knee)
	if !m.Checked {
		fmt.Fprintf(s.err, "warning: %s is not checked: its figures are the search's own, not yet confirmed over a fine sweep\n", m.ID)
	}
	if c.json {
		o := report.MemberJSON(t, m)
		o["design_file"], o["why"] = path, why
		return failed(writeJSON(s.out, o))
	}
	fmt.Fprintln(s.out, why)
	if err := report.WriteTable(s.out, &folder.Table{Varied: t.Varied, Members: t.Members[at : at+1]}, report.FrontColumns(spec)); err != nil {
		return failed(err)
	}
	_, err = fmt.Fprintf(s.out, "design file: %s\n", path)
	return failed(err)
}

// explain says in two sentences why a member was chosen.
func explain(t *folder.Table, at int, figure objectives.Figure, targets []front.Target, knee bool) string {
	m := &t.Members[at]
	var b strings.Builder
	if knee {
		fmt.Fprintf(&b, "%s is the knee of the front's %d designs: moving on from it in either direction gives up more of one aim than it gains of another.", m.ID, len(t.Members))
	} else {
		meeting := 0
		for i := range t.Members {
			if meets(&t.Members[i], targets) {
				meeting++
			}
		}
		fmt.Fprintf(&b, "%s has the least %s (%s) of the %d designs, of %d on the front, that meet %s.", m.ID, objectives.Figures[figure].Name,
			report.Quantity(figure, m.Figures[figure]), meeting, len(t.Members), targetWords(targets))
	}
	fmt.Fprintf(&b, " It has %s", describe(m, targets))
	if runner := runnerUp(t, at, figure, targets); runner >= 0 && !knee {
		r := &t.Members[runner]
		fmt.Fprintf(&b, "; the next, %s, has a %s of %s", r.ID, objectives.Figures[figure].Name, report.Quantity(figure, r.Figures[figure]))
	}
	b.WriteString(".")
	return b.String()
}

// describe names the member's figures under the targets with the room that
// is left, or gain and length where there are none.
func describe(m *folder.Member, targets []front.Target) string {
	if len(targets) == 0 {
		return fmt.Sprintf("a gain of %s in a length of %s", report.Quantity(objectives.Gain, m.Figures[objectives.Gain]), report.Quantity(objectives.Length, m.Figures[objectives.Length]))
	}
	var parts []string
	for _, g := range targets {
		f := objectives.Figure(g.Column)
		word := "to spare"
		room := g.Headroom(m.Figures[:])
		if room < 0 {
			word = "short"
		}
		parts = append(parts, fmt.Sprintf("%s %s (%s %s)", f, report.Quantity(f, m.Figures[f]), report.Quantity(f, math.Abs(room)), word))
	}
	return strings.Join(parts, ", ")
}

func meets(m *folder.Member, targets []front.Target) bool {
	for _, g := range targets {
		if !g.Met(m.Figures[:]) {
			return false
		}
	}
	return true
}

// runnerUp is the next best member that meets the targets, −1 without one.
func runnerUp(t *folder.Table, at int, figure objectives.Figure, targets []front.Target) int {
	best := -1
	for i := range t.Members {
		m := &t.Members[i]
		if i != at && meets(m, targets) && !math.IsNaN(m.Figures[figure]) && (best < 0 || m.Figures[figure] < t.Members[best].Figures[figure]) {
			best = i
		}
	}
	return best
}

// kneeOf is the knee of a front of two and more aims, −1 for one aim.
func kneeOf(s *objectives.Spec, rows [][]float64) int {
	if len(s.Aims) < 2 {
		return -1
	}
	points := make([][]float64, len(rows))
	for i, row := range rows {
		for _, a := range s.Aims {
			points[i] = append(points[i], a.Cost(row[a.Figure]))
		}
	}
	for _, p := range points {
		for _, x := range p {
			if math.IsNaN(x) {
				return -1
			}
		}
	}
	return front.Knee(points)
}

func figureRows(t *folder.Table) [][]float64 {
	rows := make([][]float64, len(t.Members))
	for i := range rows {
		rows[i] = t.Members[i].Figures[:]
	}
	return rows
}

// targets reads the --at-least and --at-most options, all faults at once.
func (c choice) targets() ([]front.Target, error) {
	var ts []front.Target
	var faults []error
	read := func(option string, texts []string, most bool) {
		for _, text := range texts {
			t, err := readTarget(option, text, most)
			if err != nil {
				faults = append(faults, err)
				continue
			}
			ts = append(ts, t)
		}
	}
	read("--at-least", c.atLeast, false)
	read("--at-most", c.atMost, true)
	return ts, errors.Join(faults...)
}

func readTarget(option, text string, most bool) (front.Target, error) {
	name, value, ok := strings.Cut(text, "=")
	if !ok {
		return front.Target{}, fmt.Errorf("%s %s: wants FIGURE=VALUE, such as gain=12", option, text)
	}
	f, known := objectives.FigureByName(strings.TrimSpace(name))
	if !known {
		return front.Target{}, unknownFigure(option, name)
	}
	x, err := strconv.ParseFloat(strings.TrimSpace(value), 64)
	if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
		return front.Target{}, fmt.Errorf("%s %s: %q is not a number; give it in the unit of the column %s, without the unit", option, text, value, objectives.Figures[f].Column)
	}
	return front.Target{Column: int(f), Bound: x, Most: most, Scale: objectives.Figures[f].Scale}, nil
}

func unknownFigure(option, name string) error {
	var names []string
	for _, f := range objectives.Figures {
		names = append(names, f.Name)
	}
	return fmt.Errorf("%s: there is no figure %q; the figures are %s", option, name, strings.Join(names, ", "))
}

// words are the targets as they were asked for.
func (c choice) words() string {
	ts, err := c.targets()
	if err != nil {
		return "the targets"
	}
	return targetWords(ts)
}

func targetWords(ts []front.Target) string {
	if len(ts) == 0 {
		return "no target in particular"
	}
	var parts []string
	for _, t := range ts {
		f := objectives.Figure(t.Column)
		bound := "at least"
		if t.Most {
			bound = "at most"
		}
		parts = append(parts, fmt.Sprintf("%s %s %s", f, bound, report.Quantity(f, t.Bound)))
	}
	return strings.Join(parts, " and ")
}
