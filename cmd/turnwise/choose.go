package main

import (
	"context"
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
	"turnwise/models"
	"turnwise/models/closedform"
	"turnwise/models/helix"
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
	polish          bool
	evaluations     int
}

func chooseCommand(s streams) *cobra.Command {
	var c choice
	cmd := &cobra.Command{
		Use:   "choose RUN",
		Short: "Picks one design of a front and writes its design file",
		Long: `Picks the shortest design on a run's front that meets the targets (or the one
with the least of another figure), says why, and writes its design file.
Targets are in the units of front.csv: --at-least gain=12 --at-most vswr=1.8.
Without targets it picks the front's knee. --refine searches on from there for
less of that figure under the same targets, limits and margins.`,
		Args: arguments(cobra.ExactArgs(1)),
		RunE: func(cmd *cobra.Command, args []string) error {
			c.run = args[0]
			return choose(cmd.Context(), s, c)
		},
	}
	f := cmd.Flags()
	f.StringArrayVar(&c.atLeast, "at-least", nil, "FIGURE=VALUE that must be reached (repeatable)")
	f.StringArrayVar(&c.atMost, "at-most", nil, "FIGURE=VALUE that must not be passed (repeatable)")
	f.StringVar(&c.least, "least", "length", "the figure to have the least of")
	f.StringVar(&c.out, "out", "", "where the design file goes (default RUN/chosen-ID.yaml)")
	f.BoolVar(&c.json, "json", false, "say what was chosen as JSON")
	f.BoolVar(&c.polish, "refine", false, "search on from the chosen design for less of the figure")
	f.IntVar(&c.evaluations, "evaluations", 600, "of the refinement")
	return cmd
}

func choose(ctx context.Context, s streams, c choice) error {
	if c.evaluations < 1 || c.evaluations > mostRefinement {
		return wrongf("--evaluations %d: give 1 to %d", c.evaluations, mostRefinement)
	}
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
	if !c.polish {
		return c.hand(s, f, f, t, &brief, at, figure, targets, knee)
	}
	if len(targets) == 0 {
		return wrongf("--refine needs a target that must stay met, such as --at-least gain=12")
	}
	inner, refined, err := c.refine(ctx, s, f, t, brief, at, figure, targets)
	if err != nil {
		return err
	}
	if best := front.Least(figureRows(refined), int(figure), targets...); best >= 0 && refined.Members[best].Figures[figure] < t.Members[at].Figures[figure] {
		fmt.Fprintln(s.err, gained(&t.Members[at], &refined.Members[best], figure))
		return c.hand(s, f, inner, refined, &brief, best, figure, targets, false)
	}
	fmt.Fprintf(s.err, "the refinement found nothing with less %s\n", figure)
	return c.hand(s, f, f, t, &brief, at, figure, targets, knee)
}

// hand writes the chosen design of the run in f into home, and says why it
// was chosen.
func (c choice) hand(s streams, home, f folder.Folder, t *folder.Table, brief *configs.Brief, at int, figure objectives.Figure, targets []front.Target, knee bool) error {
	m, spec := &t.Members[at], &brief.Spec
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
		path = home.Path("chosen-" + m.ID + ".yaml")
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
	hand, err := handLength(&d, spec.Band.Mid(), m.Figures[objectives.Gain])
	if err != nil {
		return failed(err)
	}
	if c.json {
		o := report.MemberJSON(t, m)
		o["design_file"], o["why"], o["hand_formula_length_m"] = path, why, hand
		return failed(writeJSON(s.out, o))
	}
	fmt.Fprintln(s.out, why)
	fmt.Fprintln(s.out)
	near := t.Members[max(at-1, 0):min(at+2, len(t.Members))]
	if err := report.WriteTable(s.out, &folder.Table{Varied: t.Varied, Members: near}, report.FrontColumns(spec)); err != nil {
		return failed(err)
	}
	if len(near) > 1 {
		fmt.Fprintf(s.out, "(%s with its neighbours on the front)\n", m.ID)
	}
	fmt.Fprintln(s.out)
	for _, l := range spec.Limits {
		if x := m.Figures[l.Figure]; !math.IsNaN(x) {
			fmt.Fprintf(s.out, "limit        %s\n", marginWords(l, x))
		}
	}
	if x := m.Figures[objectives.Headroom]; !math.IsNaN(x) {
		fmt.Fprintf(s.out, "headroom     %.1f %%: so far may every dimension grow before the gain falls 1 dB or a limit breaks\n", x)
	}
	fmt.Fprintf(s.out, "by hand      15 C²NS promises this gain in %.0f mm; this design has %.0f mm\n", hand*1e3, m.Figures[objectives.Length]*1e3)
	_, err = fmt.Fprintf(s.out, "design file  %s\n", path)
	return failed(err)
}

// marginWords says how far a limit is kept.
func marginWords(l objectives.Limit, x float64) string {
	bound, room := "at most", l.Value-x
	if l.AtLeast {
		bound, room = "at least", x-l.Value
	}
	return fmt.Sprintf("%s %s, %s %s: %s to spare", l.Figure, report.Quantity(l.Figure, x), bound, report.Quantity(l.Figure, l.Value), report.Quantity(l.Figure, room))
}

// handLength is the length, m, that the common hand formula would give a
// winding of the design's mean circumference for a gain in dBi.
func handLength(d *models.Design, hz, gain float64) (float64, error) {
	curve, err := helix.Wind(d)
	if err != nil {
		return 0, err
	}
	return closedform.Kraus1949Length(curve, hz, math.Pow(10, gain/10)), nil
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
		those := fmt.Sprintf("of the %d designs, of %d on the front, that meet", meeting, len(t.Members))
		if meeting == 1 {
			those = "and is the only design on the front to meet"
		}
		fmt.Fprintf(&b, "%s has the least %s (%s) %s %s.", m.ID, objectives.Figures[figure].Name, report.Quantity(figure, m.Figures[figure]), those, targetWords(targets))
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
