package report

import (
	"encoding/json"
	"fmt"
	"io"
	"math"
	"math/cmplx"
	"slices"
	"strings"
	"text/tabwriter"

	"turnwise/cmd/internal/workshop"
	"turnwise/objectives/tolerance"
)

// Comparison is a measured reflection on the predicted one.
type Comparison struct {
	Study *tolerance.Study
	// Copies is how many were answered; Failures says why others were not.
	Copies   int
	Failures []tolerance.Failure
	// Statement is what the model says of itself, Warnings of the design.
	Statement string
	Warnings  []string
	// At each measured frequency in the band, against the design's reference.
	Hz                  []float64
	Predicted, Measured []complex128
	// Reach is how far from the prediction a reflection may lie: as far as the
	// copies do, and the allowance for the measurement more.
	Reach        []float64
	Allowance    float64
	Outside      int // measured frequencies that the file has beyond the band
	Explanations workshop.Explanations
	At           []int // of Hz, the frequencies that explanations were simulated at
}

// away is how far the measured reflection lies from the predicted one.
func (c *Comparison) away(i int) float64 { return cmplx.Abs(c.Measured[i] - c.Predicted[i]) }

// Left counts the frequencies at which the measurement leaves the band.
func (c *Comparison) Left() int {
	n := 0
	for i := range c.Hz {
		if c.away(i) > c.Reach[i] {
			n++
		}
	}
	return n
}

// farthest is the frequency at which the measurement takes most of its room.
func (c *Comparison) farthest() int {
	worst := 0
	for i := range c.Hz {
		if c.away(i)-c.Reach[i] > c.away(worst)-c.Reach[worst] {
			worst = i
		}
	}
	return worst
}

// bandVSWR is the lowest and the highest VSWR of the band at a frequency.
func (c *Comparison) bandVSWR(i int) (low, high float64) {
	g := cmplx.Abs(c.Predicted[i])
	return tolerance.VSWR(complex(math.Max(0, g-c.Reach[i]), 0)), tolerance.VSWR(complex(g+c.Reach[i], 0))
}

// mostRows is the number of frequencies that a person is shown.
const mostRows = 11

// WriteText writes the comparison for a person.
func (c *Comparison) WriteText(w io.Writer) error {
	var b strings.Builder
	st := c.Study
	fmt.Fprintf(&b, "design %s, %s, against %d measured frequencies from %.6g to %.6g MHz", st.Design.ID(), strings.TrimSpace(st.Rung.Model+" "+st.Rung.Fidelity), len(c.Hz), c.Hz[0]/1e6, c.Hz[len(c.Hz)-1]/1e6)
	if c.Outside > 0 {
		fmt.Fprintf(&b, "; %d outside the band left aside", c.Outside)
	}
	fmt.Fprintf(&b, "\ntolerance band of %d copies, %s errors, seed %d, and %.3g of reflection for the measurement\n\n", c.Copies, st.Distribution, st.Seed, c.Allowance)
	t := tabwriter.NewWriter(&b, 0, 0, 2, ' ', tabwriter.AlignRight)
	fmt.Fprintf(t, "MHz\tVSWR predicted\tband\tmeasured\treflection away\tallowed\t\t\n")
	for _, i := range workshop.Thinned(len(c.Hz), mostRows) {
		low, high := c.bandVSWR(i)
		verdict := "inside"
		if c.away(i) > c.Reach[i] {
			verdict = "OUTSIDE"
		}
		fmt.Fprintf(t, "%.6g\t%.2f\t%.2f to %.2f\t%.2f\t%.3f\t%.3f\t%s\t\n", c.Hz[i]/1e6, tolerance.VSWR(c.Predicted[i]), low, high, tolerance.VSWR(c.Measured[i]), c.away(i), c.Reach[i], verdict)
	}
	t.Flush()
	k := c.farthest()
	if n := c.Left(); n > 0 {
		fmt.Fprintf(&b, "\nFAIL: the measured reflection leaves the tolerance band at %d of %d frequencies, most at %.6g MHz: %.3f away, %.3f allowed\n", n, len(c.Hz), c.Hz[k]/1e6, c.away(k), c.Reach[k])
	} else {
		fmt.Fprintf(&b, "\nPASS: the measured reflection keeps inside the tolerance band; nearest its edge at %.6g MHz: %.3f away, %.3f allowed\n", c.Hz[k]/1e6, c.away(k), c.Reach[k])
	}
	c.explanations(&b)
	for _, f := range c.Failures {
		fmt.Fprintf(&b, "no answer from %d of %d copies: %s\n", f.Count, st.Samples, f.Reason)
	}
	b.WriteString("\n")
	writeStatement(&b, c.Warnings, c.Statement)
	_, err := io.WriteString(w, b.String())
	return err
}

// explanations lists what would explain the difference.
func (c *Comparison) explanations(w io.Writer) {
	if c.Explanations.Best() == nil {
		fmt.Fprintf(w, "\nno difference to explain\n")
		return
	}
	if c.Explanations.Single[0].Left > 0.5 {
		fmt.Fprintf(w, "\nno single dimension explains half of the difference; the nearest, each alone, by least squares over the band:\n")
	} else {
		fmt.Fprintf(w, "\nwhat best explains the difference, each alone, by least squares over the band:\n")
	}
	listExplanations(w, c.Explanations.Single)
	if len(c.Explanations.Pairs) > 0 {
		fmt.Fprintf(w, "\none alone leaves %.0f %% of it; two at once, of which a rule should confirm one before anything is moved:\n", 100*c.Explanations.Single[0].Left)
		listExplanations(w, c.Explanations.Pairs)
	}
}

func listExplanations(w io.Writer, list []workshop.Explanation) {
	t := tabwriter.NewWriter(w, 0, 0, 2, ' ', 0)
	fmt.Fprintf(t, "the antenna is as if\texplains\tto take it back")
	if len(list[0].Shifts) == 1 {
		fmt.Fprint(t, "\twhat was moved")
	}
	fmt.Fprintln(t)
	for i := range list {
		e := &list[i]
		fmt.Fprintf(t, "%s\t%s\t%s", e.Words(), worth(e), e.UndoWords())
		if len(e.Shifts) == 1 {
			fmt.Fprint(t, "\t", e.Shifts[0].Stands)
		}
		fmt.Fprintln(t)
	}
	t.Flush()
}

// worth is the part of the difference that an explanation explains.
func worth(e *workshop.Explanation) string {
	if e.Left >= 1 {
		return "nothing"
	}
	return fmt.Sprintf("%.0f %%", 100*(1-e.Left))
}

// WriteJSON writes the comparison as one object.
func (c *Comparison) WriteJSON(w io.Writer) error {
	type row struct {
		Hz        float64 `json:"frequency_hz"`
		Predicted number  `json:"predicted_vswr"`
		Low       number  `json:"band_low_vswr"`
		High      number  `json:"band_high_vswr"`
		Measured  number  `json:"measured_vswr"`
		PredictRe number  `json:"predicted_reflection_real"`
		PredictIm number  `json:"predicted_reflection_imaginary"`
		MeasureRe number  `json:"measured_reflection_real"`
		MeasureIm number  `json:"measured_reflection_imaginary"`
		Away      number  `json:"away"`
		Allowed   number  `json:"allowed"`
		Inside    bool    `json:"inside"`
	}
	rows := make([]row, len(c.Hz))
	for i, hz := range c.Hz {
		low, high := c.bandVSWR(i)
		p, m := c.Predicted[i], c.Measured[i]
		rows[i] = row{hz, number(tolerance.VSWR(p)), number(low), number(high), number(tolerance.VSWR(m)), number(real(p)), number(imag(p)), number(real(m)), number(imag(m)), number(c.away(i)), number(c.Reach[i]), c.away(i) <= c.Reach[i]}
	}
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	return e.Encode(map[string]any{
		"design_id": c.Study.Design.ID(), "model": c.Study.Rung.Model, "fidelity": orNull(c.Study.Rung.Fidelity),
		"reference_ohm": c.Study.Design.Feed.Impedance, "copies": c.Copies, "distribution": c.Study.Distribution, "seed": c.Study.Seed,
		"failures": failureObjects(c.Failures), "allowance": c.Allowance, "left_aside": c.Outside,
		"warnings": stated(c.Warnings, c.Statement), "passes": c.Left() == 0, "outside": c.Left(), "sweep": rows, "explanations": shiftObjects(c.Explanations.Single), "pairs": shiftObjects(c.Explanations.Pairs),
	})
}

// shiftObject is a change of one dimension as JSON; the second of a pair hangs
// on the first, which carries what both explain.
type shiftObject struct {
	Name     string       `json:"dimension"`
	By       *number      `json:"by_m"`
	Plain    *number      `json:"by"`
	Explains *number      `json:"explains_pct,omitempty"`
	OrMore   bool         `json:"or_more"`
	Undo     *string      `json:"undo"`
	Stands   string       `json:"moved"`
	Second   *shiftObject `json:"second,omitempty"`
}

func shiftObjects(list []workshop.Explanation) []*shiftObject {
	out := make([]*shiftObject, len(list))
	for i := range list {
		explains := number(100 * (1 - list[i].Left))
		var o *shiftObject
		for _, s := range slices.Backward(list[i].Shifts) {
			by := number(s.By)
			o = &shiftObject{Name: s.Name, By: &by, OrMore: s.OrMore, Undo: orNull(s.Undo), Stands: s.Stands, Second: o}
			if s.Plain {
				o.By, o.Plain = nil, &by
			}
		}
		o.Explains, out[i] = &explains, o
	}
	return out
}
