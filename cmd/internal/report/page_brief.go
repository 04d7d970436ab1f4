package report

import (
	"fmt"
	"math"
	"strings"

	"turnwise/models"
	"turnwise/objectives"
)

// briefView is the brief in words.
type briefView struct {
	Wanted  string
	Aims    []string
	Limits  []pair
	Notes   []string
	Varied  [][]string
	Stock   [][]string
	Whole   string // the brief's own text
	Summary string
}

// pair is a name and what is said of it.
type pair struct{ Name, Value string }

func (r *Run) briefView() briefView {
	s := &r.Brief.Spec
	v := briefView{Wanted: wanted(s), Whole: string(r.Brief.Write()), Varied: r.varied(), Stock: stockRows(s)}
	for _, a := range s.Aims {
		v.Aims = append(v.Aims, fmt.Sprintf("%s (%s)", aimWords(a), objectives.Figures[a.Figure].Words))
	}
	for _, l := range s.Limits {
		v.Limits = append(v.Limits, pair{figureName(l.Figure), limitWords(l)})
	}
	if len(r.Problem.Unapplied) > 0 {
		v.Notes = append(v.Notes, fmt.Sprintf("Set aside, since the model only indicates impedance and axial ratio: %s.", strings.ReplaceAll(and(r.Problem.Unapplied), "_", " ")))
	}
	if s.Cone > 0 && (r.judges(objectives.AxialRatioCone) || r.judges(objectives.EdgeGain)) {
		v.Notes = append(v.Notes, fmt.Sprintf("Figures within the cone are taken to %s° from the axis.", trimmed(s.Cone*180/math.Pi, 3)))
	}
	if m := s.Margins; m.Any() {
		v.Notes = append(v.Notes, "Aims and limits hold for the worst of the windings within the workshop's margins: "+and(marginWords(m))+".")
	}
	if n := len(r.Brief.Starts); n > 0 {
		v.Notes = append(v.Notes, plural(n, "design was", "designs were")+" given to start from; on the front they are marked so.")
	}
	v.Summary = fmt.Sprintf("%s that may vary, %s in stock", plural(len(s.Vary), "quantity", "quantities"), plural(len(s.Stock), "conductor", "conductors"))
	return v
}

func (r *Run) judges(f objectives.Figure) bool {
	for _, j := range r.Problem.Judged() {
		if j == f {
			return true
		}
	}
	return false
}

// wanted is the brief in two sentences.
func wanted(s *objectives.Spec) string {
	own := s.Base.Wanted()
	var b strings.Builder
	fmt.Fprintf(&b, "An axial-mode helical antenna for %s", bandWords(s.Band))
	if s.Band.From < s.Band.To {
		fmt.Fprintf(&b, " (mid-band %s, a wavelength of %s mm)", frequency(s.Band.Mid(), s.Band), trimmed(models.LightSpeed/s.Band.Mid()*1e3, 1))
	} else {
		fmt.Fprintf(&b, " (a wavelength of %s mm)", trimmed(models.LightSpeed/s.Band.Mid()*1e3, 1))
	}
	fmt.Fprintf(&b, ", radiating %s-hand circular polarisation", own)
	if s.Base.Handedness != 0 {
		fmt.Fprintf(&b, ", wound %s-handed (%s)", s.Base.Handedness, threadWords(s.Base.Handedness))
	}
	fmt.Fprintf(&b, ", fed at %s Ω, on %s.", trimmed(s.Base.Feed.Impedance, 2), GroundWords(s.Base.Ground))
	if s.Base.FeedsReflector {
		fmt.Fprintf(&b, " It feeds a reflector, which reverses the sense: %s-hand in space needs %s-hand from the antenna, and every figure here is the antenna's own.", -own, own)
	}
	return b.String()
}

func marginWords(m objectives.Margins) []string {
	var parts []string
	for _, one := range []struct {
		name string
		x    float64
	}{{"diameter", m.Diameter}, {"spacing", m.Spacing}, {"feed height", m.FeedHeight}} {
		if one.x > 0 {
			parts = append(parts, fmt.Sprintf("%s ±%s", one.name, millimetres(one.x)))
		}
	}
	return parts
}

// varied lists what may vary: quantity, from, to, step, knots.
func (r *Run) varied() [][]string {
	var rows [][]string
	for _, v := range r.Brief.Spec.Vary {
		name := named(string(v.Quantity))
		if v.Quantity == objectives.Conductor {
			rows = append(rows, []string{name, "from stock", "", "", ""})
			continue
		}
		step, knots := "continuous", ""
		if v.Step > 0 {
			step = "in steps of " + variedWords(v.Quantity, v.Step)
		}
		if v.Quantity.IsLaw() {
			knots = plural(v.Knots, "knot", "knots")
		}
		rows = append(rows, []string{name, variedWords(v.Quantity, v.From), variedWords(v.Quantity, v.To), step, knots})
	}
	return rows
}

// variedWords is a value of a varied quantity with its unit.
func variedWords(q objectives.Quantity, x float64) string {
	switch q {
	case objectives.Turns, objectives.LeadTurns, objectives.StripTurns:
		return trimmed(x, 3) + " turns"
	case objectives.TransformerImpedance:
		return trimmed(x, 2) + " Ω"
	}
	return millimetres(x)
}

func stockRows(s *objectives.Spec) [][]string {
	var rows [][]string
	for _, c := range s.Stock {
		size := millimetres(c.Diameter)
		if c.Wall > 0 {
			size += ", wall " + millimetres(c.Wall)
		}
		coil, bend := "–", "–"
		if c.Coil > 0 {
			coil = trimmed(c.Coil, 3) + " m"
		}
		if c.LeastBendRadius > 0 {
			bend = millimetres(c.LeastBendRadius)
		}
		material := c.Material.Name
		if material == "" {
			material = trimmed(c.Material.Conductivity/1e6, 3) + " MS/m"
		}
		rows = append(rows, []string{c.Name, size, material, coil, bend})
	}
	return rows
}
