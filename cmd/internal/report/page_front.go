package report

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"html/template"
	"math"
	"slices"
	"strconv"
	"strings"

	"turnwise/cmd/internal/chart"
	"turnwise/cmd/internal/folder"
	"turnwise/objectives"
	"turnwise/optimize/programme"
)

// frontView is the front as points and as a table. The script reads the
// table: there is no second copy of the figures.
type frontView struct {
	Near    bool
	Lead    string
	Columns []column
	Rows    []row
	// XColumn and YColumn are the axes to begin with.
	XColumn, YColumn string
	Wide, Narrow     template.HTML
	Misses           []miss
}

// column is one column of the table under the name of front.csv.
type column struct {
	Name, Head, Unit string
	Extra            bool // hidden until all columns are asked for
	Number           bool
}

type row struct {
	ID, Sheet string // Sheet is the id of its sheet, empty for none
	Knee      bool
	Chosen    bool
	Notes     string
	Cells     []cell
}

// cell is a value as a person reads it and as front.csv holds it.
type cell struct {
	Text, Value string
	Extra       bool
	Number      bool
}

// miss is a design of an empty front with the limits that it breaks.
type miss struct {
	ID     string
	Broken []pair
}

func (r *Run) frontView() (frontView, error) {
	t := r.listed()
	records, err := csv.NewReader(bytes.NewReader(t.CSV(r.empty()))).ReadAll()
	if err != nil {
		return frontView{}, fmt.Errorf("the front's table: %w", err)
	}
	v := frontView{Near: r.empty(), Columns: r.columns(t, records[0])}
	for i := range t.Members {
		v.Rows = append(v.Rows, r.row(&t.Members[i], v.Columns, records[i+1]))
	}
	x, y := r.axes()
	v.XColumn, v.YColumn = objectives.Figures[x].Column, objectives.Figures[y].Column
	if len(t.Members) > 0 {
		v.Wide = inline(r.frontChart(chart.Wide), "The front: "+r.axisLabel(y)+" against "+r.axisLabel(x))
		v.Narrow = inline(r.frontChart(chart.Small), "The front: "+r.axisLabel(y)+" against "+r.axisLabel(x))
	}
	if r.empty() {
		v.Misses = r.misses()
	}
	v.Lead = r.frontLead()
	return v, nil
}

func inline(f chart.Figure, label string) template.HTML { return template.HTML(chart.SVG(f, label)) }

func (r *Run) frontLead() string {
	n := len(r.Table.Members)
	switch {
	case r.empty():
		return "No design met every limit. These miss them least; each limit that is broken stands below the table with its distance."
	case len(r.Problem.Aims) == 1:
		return fmt.Sprintf("%s the best by the one aim.", plural(n, "design is", "designs are"))
	}
	return fmt.Sprintf("%s of which none is better than another on every aim: more of one costs some of another.", plural(n, "design,", "designs,"))
}

// columns are the columns of front.csv; those that matter for the choice are
// shown from the start.
func (r *Run) columns(t *folder.Table, names []string) []column {
	shown := FrontColumns(&r.Problem.Spec)
	cols := make([]column, len(names))
	for i, name := range names {
		c := column{Name: name, Head: named(name), Extra: true, Number: true}
		switch f, isFigure := objectives.FigureByName(name); {
		case i == 0:
			c.Head, c.Extra, c.Number = "design", false, false
		case i <= len(t.Varied):
			c.Head, c.Unit = variedHead(name)
			c.Extra = name != string(objectives.Turns) && name != string(objectives.Conductor)
			c.Number = name != string(objectives.Conductor)
		case isFigure:
			c.Head, c.Unit = figureName(f), unitMark(f)
			c.Extra = !slices.Contains(shown, f)
		default:
			c.Number = name == "seed" || name == "violation"
			c.Extra = name != "violation"
		}
		cols[i] = c
	}
	return cols
}

// unitMark is the unit that a figure is shown in, as print has it.
func unitMark(f objectives.Figure) string {
	if u := shownUnit(f); u != "deg" {
		return u
	}
	return "°"
}

// variedHead is a varied quantity's heading and the unit it is shown in.
func variedHead(name string) (head, unit string) {
	switch {
	case strings.HasSuffix(name, "_m"):
		return named(strings.TrimSuffix(name, "_m")), "mm"
	case strings.HasSuffix(name, "_ohm"):
		return named(strings.TrimSuffix(name, "_ohm")), "Ω"
	}
	return named(name), ""
}

func (r *Run) row(m *folder.Member, cols []column, values []string) row {
	out := row{ID: m.ID, Knee: m.ID == r.Knee, Chosen: r.Chosen[m.ID], Notes: strings.Join(r.notes(m), ", ")}
	if r.hasSheet(m.ID) {
		out.Sheet = m.ID
	}
	for i, c := range cols {
		out.Cells = append(out.Cells, cell{Text: cellText(c, values[i]), Value: values[i], Extra: c.Extra, Number: c.Number})
	}
	return out
}

// cellText is a cell as a person reads it.
func cellText(c column, value string) string {
	x, err := strconv.ParseFloat(value, 64)
	f, isFigure := objectives.FigureByName(c.Name)
	switch {
	case value == "":
		return "–"
	case isFigure && err == nil:
		return saidAmount(f, x)
	case c.Unit == "mm" && err == nil:
		return minus(strconv.FormatFloat(x*1e3, 'f', 2, 64))
	case c.Name == "violation" && err == nil:
		return strconv.FormatFloat(x, 'f', 3, 64)
	case c.Name == "checked":
		return map[string]string{"true": "yes", "false": "no"}[value]
	case c.Name == string(objectives.Turns) && err == nil:
		return trimmed(x, 3)
	}
	return value
}

// notes say what is special about a design.
func (r *Run) notes(m *folder.Member) []string {
	var notes []string
	if r.Chosen[m.ID] {
		notes = append(notes, "chosen")
	}
	if m.ID == r.Knee {
		notes = append(notes, "knee")
	}
	if r.Origin[m.ID] == programme.Start {
		notes = append(notes, "given to start from")
	}
	if !m.Checked && !r.empty() {
		notes = append(notes, "unchecked")
	}
	return notes
}

func (r *Run) hasSheet(id string) bool {
	return slices.ContainsFunc(r.Sheets, func(s Sheet) bool { return s.Member.ID == id })
}

// axes are the figures of the front's picture: the first aim upwards, the
// second to the right; beside a single aim, length, or gain beside length.
func (r *Run) axes() (x, y objectives.Figure) {
	aims := r.Problem.Aims
	y = aims[0].Figure
	switch {
	case len(aims) > 1:
		return aims[1].Figure, y
	case y == objectives.Length:
		return objectives.Gain, y
	}
	return objectives.Length, y
}

// scale is a figure in the unit it is shown in.
func scale(f objectives.Figure, x float64) float64 {
	if u := shownUnit(f); u == "mm" || u == "g" {
		return x * 1e3
	}
	return x
}

func (r *Run) axisLabel(f objectives.Figure) string { return withUnit(figureName(f), unitMark(f)) }

func withUnit(name, unit string) string {
	if unit == "" {
		return name
	}
	return name + ", " + unit
}

// frontChart is the front as a picture; a member that lacks one of the two
// figures is left out.
func (r *Run) frontChart(width float64) *chart.Scatter {
	x, y := r.axes()
	s := &chart.Scatter{Width: width}
	var xs, ys []float64
	for i := range r.listed().Members {
		m := &r.listed().Members[i]
		p := chart.Point{X: scale(x, m.Figures[x]), Y: scale(y, m.Figures[y])}
		if math.IsNaN(p.X) || math.IsNaN(p.Y) {
			continue
		}
		p.Tip = fmt.Sprintf("%s: %s %s, %s %s", m.ID, figureName(y), said(y, m.Figures[y]), figureName(x), said(x, m.Figures[x]))
		if r.hasSheet(m.ID) {
			p.Href = "#sheet-" + m.ID
		}
		switch {
		case r.Chosen[m.ID]:
			p.Ring, p.Label = chart.ChosenRing, "chosen"
		case m.ID == r.Knee:
			p.Ring, p.Label = chart.KneeRing, "knee"
		}
		if r.Chosen[m.ID] && m.ID == r.Knee {
			p.Label = "chosen, the knee"
		}
		s.Points = append(s.Points, p)
		xs, ys = append(xs, p.X), append(ys, p.Y)
	}
	s.X, s.Y = chart.Around(r.axisLabel(x), xs...), chart.Around(r.axisLabel(y), ys...)
	return s
}

// misses says which limits the nearest designs break, and by how much.
func (r *Run) misses() []miss {
	var out []miss
	if r.Near == nil {
		return nil
	}
	for i := range r.Near.Members {
		m := &r.Near.Members[i]
		one := miss{ID: m.ID}
		for _, l := range r.Problem.Limits {
			if x := m.Figures[l.Figure]; room(l, x) < 0 {
				one.Broken = append(one.Broken, pair{figureName(l.Figure), fmt.Sprintf("%s, %s is due: %s", said(l.Figure, x), limitWords(l), roomWords(l.Figure, room(l, x)))})
			}
		}
		out = append(out, one)
	}
	return out
}
