package journal

import (
	"encoding/json"
	"errors"
	"fmt"
	"strings"
	"time"
)

// Header is what is known of a run before its first evaluation. It never
// changes; what changes from one session to the next is a decision.
type Header struct {
	Brief   string // the resolved brief, whole
	Digest  string // of everything in the brief that decides an answer
	Program string // version
	Seed    uint64
	Machine string
	Models  []string // identity of the simulator of each rung, cheapest first

	Variables []Variable // of a point, in its order
	Figures   []string   // column names, with units
	Aims      []string   // at least one
	Limits    []string

	Created time.Time // set by Create
}

// Variable names one coordinate of a point. Choices, where there are any,
// are what its whole numbers stand for.
type Variable struct {
	Name    string   `json:"name"`
	Choices []string `json:"choices,omitempty"`
}

// finest is the rung whose figures make the front.
func (h *Header) finest() int { return max(len(h.Models)-1, 0) }

// numbers is how many doubles a row holds.
func (h *Header) numbers() int {
	return len(h.Variables) + len(h.Figures) + len(h.Aims) + len(h.Limits)
}

// check names everything that would make the views ambiguous or unreadable.
func (h *Header) check() error {
	var faults []error
	if len(h.Aims) == 0 {
		faults = append(faults, errors.New("journal: header without aims: name at least one"))
	}
	if n := h.numbers(); n > 1000 {
		faults = append(faults, fmt.Errorf("journal: header with %d numbers a row: at most 1000", n))
	}
	seen := map[string]bool{}
	for _, c := range h.columns() {
		name := strings.ToLower(c.name)
		switch {
		case name == "" || strings.ContainsAny(name, "\x00\""):
			faults = append(faults, fmt.Errorf("journal: header name %q: give it a name without quotes", c.name))
		case seen[name]:
			faults = append(faults, fmt.Errorf("journal: header name %q stands twice: names must differ, also from the journal's own columns", c.name))
		}
		seen[name] = true
	}
	return errors.Join(faults...)
}

// column is one column of the view evaluations and how it is computed.
type column struct{ name, from string }

// columns lists the view's columns in order.
func (h *Header) columns() []column {
	cs := []column{
		{"seq", "e.seq"}, {"candidate", "e.candidate"},
		{"kind", "CASE e.final WHEN 1 THEN 'final' ELSE 'search' END"},
		{"rung", "e.rung"}, {"stage", "e.stage"}, {"status", "e.status"}, {"reason", "e.reason"},
	}
	for i, v := range h.Variables {
		cs = append(cs, column{v.Name, v.expression(fmt.Sprintf("e.p%d", i+1))})
	}
	list := func(prefix, letter string, names []string) {
		for i, n := range names {
			cs = append(cs, column{prefix + n, fmt.Sprintf("e.%s%d", letter, i+1)})
		}
	}
	list("", "f", h.Figures)
	list("aim_", "a", h.Aims)
	list("limit_", "l", h.Limits)
	return append(cs, []column{
		{"violation", "e.violation"},
		{"feasible", "coalesce(e.violation <= 0, 0)"},
		{"model", "m.identity"}, {"design", "w.design"}, {"question", "w.key"},
		{"duration_s", "e.duration_ns / 1e9"},
		{"reused", "e.reused"},
		{"finished", isoTime("e.finished_us")},
	}...)
}

// expression shows a choice as its text.
func (v *Variable) expression(col string) string {
	if len(v.Choices) == 0 {
		return col
	}
	var b strings.Builder
	b.WriteString("CASE " + col)
	for i, c := range v.Choices {
		fmt.Fprintf(&b, " WHEN %d THEN %s", i, text(c))
	}
	b.WriteString(" END")
	return b.String()
}

// text is a literal of SQL.
func text(s string) string { return "'" + strings.ReplaceAll(s, "'", "''") + "'" }

func isoTime(us string) string {
	return "strftime('%Y-%m-%dT%H:%M:%fZ', " + us + " / 1e6, 'unixepoch')"
}

// list writes a list as JSON; an empty one as [].
func list[T any](l []T) string {
	if len(l) == 0 {
		return "[]"
	}
	b, err := json.Marshal(l)
	if err != nil {
		panic("journal: a header's list cannot be written: " + err.Error())
	}
	return string(b)
}

// unlist is the inverse of list.
func unlist[T any](s string) ([]T, error) {
	var l []T
	err := json.Unmarshal([]byte(s), &l)
	if len(l) == 0 {
		l = nil
	}
	return l, err
}
