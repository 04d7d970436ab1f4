package configs

import (
	"math"

	"turnwise/objectives"
)

// varied is how a quantity may vary: its dimension, the least and greatest
// value that make sense.
var varied = map[objectives.Quantity]struct {
	d Dimension
	s span
}{
	objectives.Turns:                {Revolution, turnCounts},
	objectives.Diameter:             {Length, lengths},
	objectives.Spacing:              {Length, lengths},
	objectives.FeedHeight:           {Length, lengths},
	objectives.LeadTurns:            {Revolution, span{0, 1000}},
	objectives.LeadSpacing:          {Length, optional},
	objectives.Pin:                  {Length, lengths},
	objectives.StripTurns:           {Revolution, span{0, 1000}},
	objectives.StripWidth:           {Length, lengths},
	objectives.TransformerImpedance: {Impedance, impedances},
	objectives.TransformerLength:    {Length, optional},
	objectives.GroundDiameter:       {Length, lengths},
	objectives.GroundRim:            {Length, lengths},
}

// vary reads what may vary, in the order of columns.
func (r *reader) vary(b *block) []objectives.Vary {
	names := make([]string, len(objectives.Quantities))
	for i, q := range objectives.Quantities {
		names[i] = string(q)
	}
	if !b.has("vary") {
		b.missing("vary", "write what may vary, for example vary: {turns: {from: 3, to: 12, step: 0.25}}")
		return nil
	}
	v := r.block(b.get("vary"), "vary", names...)
	var out []objectives.Vary
	for _, q := range objectives.Quantities {
		if !v.has(string(q)) {
			continue
		}
		if q == objectives.Conductor {
			if word, ok := v.words(string(q)); ok && word != "stock" {
				v.fault(string(q), quoted(word)+" is not what a conductor can vary over", "write conductor: stock")
			}
			out = append(out, objectives.Vary{Quantity: q, Knots: 1})
			continue
		}
		if one, ok := r.range_(&v, q); ok {
			out = append(out, one)
		}
	}
	if v.there && len(out) == 0 && len(v.n.keys) == 0 {
		v.fault("", "names nothing", "write at least one quantity, for example turns: {from: 3, to: 12}")
	}
	return out
}

// range_ reads the bounds of one quantity.
func (r *reader) range_(v *block, q objectives.Quantity) (objectives.Vary, bool) {
	key := string(q)
	how := varied[q]
	keys := []string{"from", "to", "step"}
	if q.IsLaw() {
		keys = append(keys, "knots")
	}
	k := r.block(v.get(key), join(v.path, key), keys...)
	out := objectives.Vary{Quantity: q, Knots: 1}
	if !k.there {
		return out, false
	}
	example := "write both ends, for example " + key + ": {from: " + rangeExample(how.d)[0] + ", to: " + rangeExample(how.d)[1] + "}"
	for _, end := range []string{"from", "to"} {
		if !k.has(end) {
			k.missing(end, example)
		}
	}
	var ok1, ok2 bool
	out.From, ok1 = k.quantity("from", how.d, how.s)
	out.To, ok2 = k.quantity("to", how.d, how.s)
	if n, ok := k.count("knots", 1, mostKnots); ok {
		out.Knots = int(n)
	}
	if k.has("step") {
		out.Step, _ = k.quantity("step", how.d, span{1e-9, how.s.high})
	}
	if !ok1 || !ok2 {
		return out, false
	}
	if out.From > out.To {
		k.fault("from", "lies above to", "swap them")
		return out, false
	}
	r.step(&k, &out)
	return out, true
}

// mostLevels bounds a stepped quantity.
const mostLevels = 1_000_000

// step notes a step that does not divide its range. What counts is what was
// written: wavelengths were rounded to the grid each by itself, so the upper
// end follows the rounded steps.
func (r *reader) step(k *block, v *objectives.Vary) {
	if v.Step <= 0 || v.To == v.From {
		return
	}
	d := varied[v.Quantity].d
	written := func(key string) float64 {
		x, _ := r.exact(k.get(key), join(k.path, key), d)
		return x
	}
	step := written("step")
	steps := (written("to") - written("from")) / step
	whole := math.Round(steps)
	off := math.Abs(steps - whole)
	rounding := 1.5 / gridsPerUnit[d] // of two ends, and a little more
	switch {
	case whole < 1 || off*step > rounding:
		below := v.From + math.Floor(steps)*v.Step
		k.fault("step", "does not divide the way from "+show(v.From, d)+" to "+show(v.To, d), "let it end at "+show(onGrid(below, d), d)+" or "+show(onGrid(below+v.Step, d), d)+", or choose another step")
	case whole > mostLevels:
		k.fault("step", "makes more than a million values", "leave it away: without a step the quantity varies freely")
	default:
		v.To = onGrid(v.From+math.Round((v.To-v.From)/v.Step)*v.Step, d)
	}
}

func rangeExample(d Dimension) [2]string {
	switch d {
	case Length:
		return [2]string{"20 mm", "60 mm"}
	case Impedance:
		return [2]string{"40 ohm", "120 ohm"}
	}
	return [2]string{"3", "12"}
}
