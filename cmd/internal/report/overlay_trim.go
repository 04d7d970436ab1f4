package report

import (
	"fmt"
	"strings"

	"turnwise/cmd/internal/chart"
	"turnwise/cmd/internal/workshop"
	"turnwise/objectives/tolerance"
)

// mostArrows is the number of explanations that are drawn.
const mostArrows = 4

// explained is the best explanation's reflection at the frequencies of At; nil
// where there is none.
func (c *Comparison) explained() []complex128 {
	best := c.Explanations.Best()
	if best == nil {
		return nil
	}
	out := make([]complex128, len(c.At))
	for i, k := range c.At {
		out[i] = c.Predicted[k] + best.Added[i]
	}
	return out
}

// trim is the trim chart: where what best explains the difference takes the
// prediction, and the next few.
func (c *Comparison) trim() chart.Figure {
	t := &chart.Trim{
		Reference: c.Study.Design.Feed.Impedance,
		Marks:     [2]string{c.mhz(0), c.mhz(c.mid())},
		Traces: []chart.Reach{
			{Name: "predicted", G: c.Predicted},
			{Name: "measured", G: c.Measured, Open: true},
			{Name: "band at " + c.mhz(c.mid()), G: c.ring(), Ring: true},
		},
	}
	if len(c.Hz) == 1 {
		t.Marks[0] = ""
	}
	if g := c.explained(); g != nil {
		t.Traces = append(t.Traces, chart.Reach{Name: "explained by 1", G: g, Tipped: true})
	}
	for _, e := range c.drawn() {
		from := c.Predicted[c.mid()]
		t.Arrows = append(t.Arrows, chart.Arrow{From: from, To: from + e.Added[len(e.Added)/2], Name: held.Replace(e.Words()), Says: held.Replace(explains(e))})
	}
	for _, n := range c.trimNotes() {
		t.Notes = append(t.Notes, held.Replace(n))
	}
	return t
}

// drawn are the explanations that have an arrow, the best first.
func (c *Comparison) drawn() []*workshop.Explanation {
	best := c.Explanations.Best()
	if best == nil {
		return nil
	}
	out := []*workshop.Explanation{best}
	for i := range c.Explanations.Single {
		if e := &c.Explanations.Single[i]; e != best && len(out) < mostArrows {
			out = append(out, e)
		}
	}
	return out
}

// held keeps a number and its unit on one line.
var held = strings.NewReplacer(" mm", "\u00a0mm", " %", "\u00a0%", " MHz", "\u00a0MHz")

// explains says how much of the difference an explanation is worth.
func explains(e *workshop.Explanation) string {
	return fmt.Sprintf("explains %s of the difference", worth(e))
}

// trimNotes say what brings the predicted match back.
func (c *Comparison) trimNotes() []string {
	e := c.Explanations.Best()
	if e == nil {
		return []string{"No difference to explain."}
	}
	note := "To take it back: " + undo(e) + "."
	if !e.Mendable() {
		if e = c.fitters(); e == nil {
			return []string{note}
		}
		note += fmt.Sprintf(" Without winding: %s; makes good %s.", undo(e), worth(e))
	}
	mid := c.mid()
	after := tolerance.VSWR(c.Measured[mid] - e.Added[len(e.Added)/2])
	return []string{note, fmt.Sprintf("VSWR at %s: measured %.2f, after that about %.2f, predicted %.2f.", c.mhz(mid), tolerance.VSWR(c.Measured[mid]), after, tolerance.VSWR(c.Predicted[mid]))}
}

// undo says how an explanation is taken back, and at what.
func undo(e *workshop.Explanation) string {
	if !e.Mendable() {
		return e.UndoWords()
	}
	var words []string
	for i := range e.Shifts {
		words = append(words, e.Shifts[i].Name+", "+e.Shifts[i].UndoWords())
	}
	return strings.Join(words, "; ")
}

// fitters is the best explanation that a fitter can take back and that is
// worth anything; nil where there is none.
func (c *Comparison) fitters() *workshop.Explanation {
	for i := range c.Explanations.Single {
		if e := &c.Explanations.Single[i]; e.Mendable() && e.Left < 1 {
			return e
		}
	}
	return nil
}
