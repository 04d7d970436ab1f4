package configs

import (
	"fmt"
	"strconv"

	"turnwise/objectives"
)

// dimensionOf is what a figure's bound is written in.
func dimensionOf(f objectives.Figure) Dimension {
	switch objectives.Figures[f].Unit {
	case objectives.Decibel:
		return Decibel
	case objectives.DBic:
		return CircularDecibel
	case objectives.Percent:
		return Percent
	case objectives.Degree:
		return Angle
	case objectives.Metre:
		return Length
	case objectives.Kilogram:
		return Mass
	}
	return Plain
}

// figureNames lists the figures as a brief writes them.
func figureNames() []string {
	names := make([]string, objectives.FigureCount)
	for f := range objectives.Figures {
		names[f] = objectives.Figures[f].Name
	}
	return names
}

// mostAims bounds the aims of a brief.
const mostAims = 4

// aims reads one to four aims.
func (r *reader) aims(b *block) []objectives.Aim {
	const example = "write 1 to 4 aims, for example aims: [{figure: gain, want: most}, {figure: length, want: least}]"
	n := b.get("aims")
	switch {
	case n == nil:
		b.missing("aims", example)
		return nil
	case n.kind == broken:
		return nil
	case n.kind != list:
		b.fault("aims", "is "+kindNames[n.kind]+", not a list", example)
		return nil
	case len(n.items) == 0 || len(n.items) > mostAims:
		b.fault("aims", fmt.Sprintf("holds %d", len(n.items)), example)
		return nil
	}
	var out []objectives.Aim
	seen := map[objectives.Figure]bool{}
	for i, item := range n.items {
		a := r.block(item, "aims["+strconv.Itoa(i+1)+"]", "figure", "want")
		for _, key := range []string{"figure", "want"} {
			if !a.has(key) {
				a.missing(key, "write for example {figure: gain, want: most}")
			}
		}
		name, ok1 := a.choice("figure", figureNames()...)
		want, ok2 := a.choice("want", "most", "least")
		if !ok1 || !ok2 {
			continue
		}
		f, _ := objectives.FigureByName(name)
		if seen[f] {
			a.fault("figure", name+" is an aim already", "keep one of the two")
			continue
		}
		seen[f] = true
		out = append(out, objectives.Aim{Figure: f, Most: want == "most"})
	}
	return out
}

// limits reads the limits, in the order of the figures.
func (r *reader) limits(b *block) []objectives.Limit {
	l := r.block(b.get("limits"), "limits", figureNames()...)
	var out []objectives.Limit
	for f := range objectives.Figures {
		name := objectives.Figures[f].Name
		if !l.has(name) {
			continue
		}
		out = append(out, r.limit(&l, objectives.Figure(f))...)
	}
	return out
}

func (r *reader) limit(l *block, f objectives.Figure) []objectives.Limit {
	name := objectives.Figures[f].Name
	d := dimensionOf(f)
	k := r.block(l.get(name), join(l.path, name), "at_least", "at_most")
	if !k.there {
		return nil
	}
	if !k.has("at_least") && !k.has("at_most") {
		k.fault("", "bounds nothing", "write for example "+name+": {at_most: "+dimensions[d].example+"}")
		return nil
	}
	var out []objectives.Limit
	bound := func(key string, atLeast bool) (float64, bool) {
		x, ok := k.quantity(key, d, span{-1e6, 1e6})
		if ok {
			out = append(out, objectives.Limit{Figure: f, AtLeast: atLeast, Value: x})
		}
		return x, ok
	}
	low, ok1 := bound("at_least", true)
	high, ok2 := bound("at_most", false)
	switch {
	case ok1 && ok2 && low > high:
		k.fault("at_least", "lies above at_most: nothing can meet both", "swap them, or leave one away")
	case ok2 && (f == objectives.VSWR && high < 1 || leastPossible(f) && high <= 0):
		k.fault("at_most", "can be met by nothing", "write a larger bound")
	case ok1 && f == objectives.Efficiency && low > 1:
		k.fault("at_least", "can be met by nothing", "an efficiency is at most 1")
	}
	return out
}

// leastPossible reports figures that are always above zero.
func leastPossible(f objectives.Figure) bool {
	switch f {
	case objectives.Length, objectives.Widest, objectives.WireLength, objectives.Mass, objectives.BendRadius, objectives.Beamwidth, objectives.Efficiency:
		return true
	}
	return false
}
