package report

import (
	"encoding/json"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"
	"text/tabwriter"

	"turnwise/cmd/internal/folder"
	"turnwise/objectives"
)

// FrontColumns picks the figures worth a column on a screen: those under
// aims, then those under limits, then gain, length and mass.
func FrontColumns(s *objectives.Spec) []objectives.Figure {
	var fs []objectives.Figure
	add := func(f objectives.Figure) {
		if !slices.Contains(fs, f) {
			fs = append(fs, f)
		}
	}
	for _, a := range s.Aims {
		add(a.Figure)
	}
	for _, l := range s.Limits {
		add(l.Figure)
	}
	for _, f := range []objectives.Figure{objectives.Gain, objectives.Length, objectives.Mass} {
		add(f)
	}
	return fs
}

// WriteTable writes a front for a person: id, what is bought and turned, and
// the figures named.
func WriteTable(w io.Writer, t *folder.Table, figures []objectives.Figure) error {
	tw := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	shown := shownColumns(t)
	fmt.Fprint(tw, "id")
	for _, i := range shown {
		fmt.Fprintf(tw, "\t%s", t.Varied[i])
	}
	for _, f := range figures {
		fmt.Fprintf(tw, "\t%s", heading(f))
	}
	fmt.Fprintln(tw)
	for i := range t.Members {
		m := &t.Members[i]
		fmt.Fprint(tw, m.ID)
		for _, c := range shown {
			fmt.Fprintf(tw, "\t%s", m.Varied[c])
		}
		for _, f := range figures {
			fmt.Fprintf(tw, "\t%s", Amount(f, m.Figures[f]))
		}
		if !m.Checked {
			fmt.Fprint(tw, "\tunchecked")
		}
		fmt.Fprintln(tw)
	}
	return tw.Flush()
}

// shownColumns are the varied quantities that mean something at a glance.
func shownColumns(t *folder.Table) []int {
	var shown []int
	for i, name := range t.Varied {
		switch {
		case name == string(objectives.Turns), name == string(objectives.Conductor), strings.HasPrefix(name, "ground_"):
			shown = append(shown, i)
		}
	}
	return shown
}

// heading is a figure with the unit that Amount shows it in.
func heading(f objectives.Figure) string {
	name := objectives.Figures[f].Name
	if unit := shownUnit(f); unit != "" {
		return name + " " + unit
	}
	return name
}

// shownUnit is the unit a person reads a figure in: millimetres and grams for
// what a workshop handles.
func shownUnit(f objectives.Figure) string {
	switch objectives.Figures[f].Unit {
	case objectives.Metre:
		if f == objectives.WireLength {
			return "m"
		}
		return "mm"
	case objectives.Kilogram:
		return "g"
	}
	return string(objectives.Figures[f].Unit)
}

// Amount is a figure's value as a person reads it, without its unit.
func Amount(f objectives.Figure, x float64) string {
	if math.IsNaN(x) {
		return "–"
	}
	switch shownUnit(f) {
	case "mm":
		return strconv.FormatFloat(x*1e3, 'f', 1, 64)
	case "g":
		return strconv.FormatFloat(x*1e3, 'f', 1, 64)
	case "m":
		return strconv.FormatFloat(x, 'f', 3, 64)
	case "%", "deg":
		return strconv.FormatFloat(x, 'f', 1, 64)
	}
	if f == objectives.Efficiency {
		return strconv.FormatFloat(x, 'f', 4, 64)
	}
	return strconv.FormatFloat(x, 'f', 2, 64)
}

// Quantity is a figure's value with its unit, as a person reads it.
func Quantity(f objectives.Figure, x float64) string {
	if unit := shownUnit(f); unit != "" && !math.IsNaN(x) {
		return Amount(f, x) + " " + unit
	}
	return Amount(f, x)
}

// WriteTableJSON writes a front for a script: a list of objects with the
// columns of front.csv.
func WriteTableJSON(w io.Writer, t *folder.Table) error {
	list := make([]map[string]any, len(t.Members))
	for i := range t.Members {
		list[i] = MemberJSON(t, &t.Members[i])
	}
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	return e.Encode(list)
}

// MemberJSON is one design of a front under the names of front.csv.
func MemberJSON(t *folder.Table, m *folder.Member) map[string]any {
	o := map[string]any{"id": m.ID, "model": m.Model, "fidelity": orNull(m.Fidelity), "checked": m.Checked, "seed": m.Seed}
	for i, name := range t.Varied {
		if name == string(objectives.Conductor) {
			o[name] = m.Varied[i]
		} else if x, err := strconv.ParseFloat(m.Varied[i], 64); err == nil {
			o[name] = x
		} else {
			o[name] = nil
		}
	}
	for f, x := range m.Figures {
		o[objectives.Figures[f].Column] = number(x)
	}
	return o
}
