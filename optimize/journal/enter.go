package journal

import (
	"math"
	"slices"

	"turnwise/optimize"
)

// member is what dominance needs of a row.
type member struct {
	candidate int
	aims      []float64
}

// dominates is strict and transitive: of equals the lower candidate wins.
func (m *member) dominates(o *member) bool {
	better := m.candidate < o.candidate
	for i, a := range m.aims {
		switch {
		case a > o.aims[i]:
			return false
		case a < o.aims[i]:
			better = true
		}
	}
	return better
}

// admit adds a row to a front unless a member dominates it. The old slice is
// left as it was.
func admit(members []member, m member) ([]member, bool) {
	for i := range members {
		if members[i].dominates(&m) {
			return members, false
		}
	}
	next := make([]member, 0, len(members)+1)
	for i := range members {
		if !m.dominates(&members[i]) {
			next = append(next, members[i])
		}
	}
	return append(next, m), true
}

// ranks reports whether dominance means anything for the evaluation: it is
// feasible and all its aims are numbers.
func ranks(e *optimize.Evaluation) bool {
	v := e.Value()
	return v.Feasible() && !slices.ContainsFunc(e.Aims, math.IsNaN)
}

// enter reports whether nothing on record of its rung dominates the
// evaluation, and notes it if so.
func (w *Writer) enter(e *optimize.Evaluation) bool {
	if !ranks(e) {
		return false
	}
	next, ok := admit(w.fronts[e.Rung], member{e.ID, slices.Clone(e.Aims)})
	w.fronts[e.Rung] = next
	return ok
}

// remember reads back what the file holds of models and fronts.
func (w *Writer) remember() error {
	w.models, w.fronts, w.grown = map[string]int64{}, map[int][]member{}, grown{}
	for e, err := range w.entries("entered = 1 AND seq > ?", "seq", 0) {
		if err != nil {
			return err
		}
		w.fronts[e.Rung], _ = admit(w.fronts[e.Rung], member{e.ID, e.Aims})
		w.grown.take(&e.Evaluation, w.header.finest())
	}
	return w.rememberGrowth()
}
