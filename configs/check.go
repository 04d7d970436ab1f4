package configs

import (
	"fmt"
	"math"
	"slices"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
)

// checkBrief notes what is wrong between the parts of a brief.
func (r *reader) checkBrief(b *block, br *Brief) {
	c := &briefCheck{r: r, b: b, s: &br.Spec, varies: map[objectives.Quantity]objectives.Vary{}}
	for _, v := range br.Spec.Vary {
		c.varies[v.Quantity] = v
	}
	c.needed()
	c.conductor()
	c.halves()
	c.feedHeight()
	c.ground()
	c.foot()
	c.solvable(br.Ladder)
	c.answerable(br.Ladder)
	c.room()
}

type briefCheck struct {
	r      *reader
	b      *block
	s      *objectives.Spec
	varies map[objectives.Quantity]objectives.Vary
}

func (c *briefCheck) has(q objectives.Quantity) bool { _, ok := c.varies[q]; return ok }

// at is the line of a path of keys, or of as much of it as there is.
func (c *briefCheck) at(keys ...string) int {
	n, line := c.b.n, c.b.n.line
	for _, k := range keys {
		if n == nil || n.kind != table {
			break
		}
		for i := range n.keys {
			if n.keys[i].name == k {
				line = n.keys[i].line
			}
		}
		n = n.find(k)
	}
	return line
}

// written reports whether the file has a value at a path of keys, right or
// wrong.
func (c *briefCheck) written(keys ...string) bool {
	n := c.b.n
	for _, k := range keys {
		if n == nil || n.kind != table {
			return false
		}
		n = n.find(k)
	}
	return n != nil && n.kind != null
}

// needed notes dimensions that are missing, and those that stand twice.
func (c *briefCheck) needed() {
	for _, d := range []struct {
		q       objectives.Quantity
		keys    []string
		must    bool
		example string
	}{
		{objectives.Turns, []string{"design", "turns"}, true, "8.25"},
		{objectives.Diameter, []string{"design", "diameter"}, true, "[58 mm]"},
		{objectives.Spacing, []string{"design", "spacing"}, true, "[34 mm]"},
		{objectives.FeedHeight, []string{"design", "feed", "height"}, true, "5 mm"},
		{objectives.LeadTurns, []string{"design", "feed", "lead", "turns"}, false, ""},
		{objectives.LeadSpacing, []string{"design", "feed", "lead", "spacing"}, false, ""},
		{objectives.Pin, []string{"design", "feed", "pin"}, false, ""},
		{objectives.StripTurns, []string{"design", "feed", "strip", "turns"}, false, ""},
		{objectives.StripWidth, []string{"design", "feed", "strip", "width"}, false, ""},
		{objectives.TransformerImpedance, []string{"design", "feed", "transformer", "impedance"}, false, ""},
		{objectives.TransformerLength, []string{"design", "feed", "transformer", "length"}, false, ""},
		{objectives.GroundDiameter, []string{"ground", "diameter"}, false, ""},
		{objectives.GroundRim, []string{"ground", "rim"}, false, ""},
	} {
		fixed, varies := c.written(d.keys...), c.written("vary", string(d.q))
		path := d.keys[0]
		for _, k := range d.keys[1:] {
			path = join(path, k)
		}
		switch {
		case fixed && varies:
			c.r.add(c.at("vary", string(d.q)), "vary."+string(d.q), "varies, but "+path+" fixes it", "keep one of the two")
		case d.must && !fixed && !varies:
			c.r.add(c.at("vary"), "vary."+string(d.q), "is missing, and "+path+" does not fix it", "let it vary here, or write "+path+": "+d.example)
		}
	}
}

// conductor settles what the antenna is wound from.
func (c *briefCheck) conductor() {
	varies := c.written("vary", "conductor")
	fixed := c.written("design", "conductor")
	stock := c.written("stock")
	switch {
	case varies && fixed:
		c.r.add(c.at("vary", "conductor"), "vary.conductor", "varies, but design.conductor fixes it", "keep one of the two")
	case varies && !stock:
		c.r.add(c.at("vary", "conductor"), "vary.conductor", "varies over a stock that is not given", `write for example stock: [{name: "2 mm copper", diameter: 2 mm, material: copper, coil: 3 m}]`)
	case fixed && stock:
		c.r.add(c.at("stock"), "stock", "is given, but design.conductor fixes the conductor", "keep one of the two")
	case !varies && !fixed && !stock:
		c.r.add(c.at("design"), "design.conductor", "is missing", "write conductor: stock under vary with a stock, or fix it: design: {conductor: {diameter: 2 mm, material: copper}}")
	case !varies && len(c.s.Stock) > 1:
		c.r.add(c.at("stock"), "stock", "holds several conductors, but the conductor does not vary", "write conductor: stock under vary, or keep one row")
	}
	if fixed {
		k := c.s.Base.Conductor
		name := k.Stock
		if name == "" {
			name = sizeName(k.Diameter, k.Material)
		}
		c.s.Stock = []objectives.Stock{{Name: name, Diameter: k.Diameter, Wall: k.Wall, Material: k.Material}}
	}
	c.s.Base.Conductor = models.Conductor{}
}

// halves notes leads, strips and line sections that lack their other half.
func (c *briefCheck) halves() {
	pair := func(block string, q1, q2 objectives.Quantity, k1, k2 string) {
		one := c.written("vary", string(q1)) || c.written("design", "feed", block, k1)
		other := c.written("vary", string(q2)) || c.written("design", "feed", block, k2)
		if one && !other {
			c.r.add(c.at("vary", string(q1)), "vary."+string(q2), "is missing: a "+block+" has "+k1+" and "+k2, "let it vary, or write design.feed."+block+"."+k2)
		}
		if other && !one {
			c.r.add(c.at("vary", string(q2)), "vary."+string(q1), "is missing: a "+block+" has "+k1+" and "+k2, "let it vary, or write design.feed."+block+"."+k1)
		}
	}
	pair("lead", objectives.LeadTurns, objectives.LeadSpacing, "turns", "spacing")
	pair("strip", objectives.StripTurns, objectives.StripWidth, "turns", "width")
	pair("transformer", objectives.TransformerImpedance, objectives.TransformerLength, "impedance", "length")
	if c.has(objectives.LeadTurns) && c.s.Base.Feed.Lead.Shape == "" {
		c.s.Base.Feed.Lead.Shape = models.Ramp
	}
	if c.has(objectives.TransformerImpedance) && c.s.Base.Feed.Transformer.Velocity == 0 {
		c.s.Base.Feed.Transformer.Velocity = 1
	}
}

// feedHeight notes a riser that is too short for every conductor there is.
func (c *briefCheck) feedHeight() {
	if len(c.s.Stock) == 0 {
		return
	}
	need := objectives.LeastFeedHeight(c.thinnest())
	remedy := "make it at least " + show(math.Ceil(need*1e6)/1e6, Length) + ": 2.5 radii of the thinnest conductor, and 1 mm of air under it"
	if v, ok := c.varies[objectives.FeedHeight]; ok && v.To < need {
		c.r.add(c.at("vary", "feed_height", "to"), "vary.feed_height.to", "leaves no riser that any conductor can have", remedy)
	}
	if h := c.s.Base.Feed.Height; h > 0 && h < need {
		c.r.add(c.at("design", "feed", "height"), "design.feed.height", "is too low for every conductor", remedy)
	}
}

func (c *briefCheck) ground() {
	kind := c.s.Base.Ground.Kind
	c.r.wholeGround(*c.b, "ground", c.s.Base.Ground, c.written("vary", string(objectives.GroundDiameter)), c.written("vary", string(objectives.GroundRim)))
	for _, q := range []objectives.Quantity{objectives.GroundDiameter, objectives.GroundRim} {
		v, ok := c.varies[q]
		if !ok || kind == "" {
			continue
		}
		if v.Step <= 0 && v.From < v.To {
			c.r.add(c.at("vary", string(q)), "vary."+string(q)+".step", "is missing", "write a step, for example step: 10 mm")
		}
		if kind != models.Cup && (q == objectives.GroundRim || kind != models.Disc) {
			c.r.add(c.at("vary", string(q)), "vary."+string(q), "varies, but the ground is "+string(kind), "write ground: {kind: disc} or {kind: cup}")
		}
	}
}

// foot notes a disc or cup that is too small for every winding that may vary.
func (c *briefCheck) foot() {
	g, d := c.s.Base.Ground, c.s.Base
	if !g.Finite() || len(c.s.Stock) == 0 {
		return
	}
	if v, ok := c.varies[objectives.Diameter]; ok {
		d.Diameter = models.Law{v.From}
	}
	if len(d.Diameter) == 0 {
		return
	}
	d.Conductor.Diameter = c.thinnest()
	if v, ok := c.varies[objectives.Pin]; ok {
		d.Feed.Pin = v.From
	}
	need := helix.LeastGround(&d)
	remedy := "make it more than " + show(math.Ceil(need*1e6-1e-6)/1e6, Length) + ", which the narrowest winding that may vary needs"
	const what = "does not reach round the feed's opening, at the foot of the riser"
	if v, ok := c.varies[objectives.GroundDiameter]; ok && v.To <= need {
		c.r.add(c.at("vary", "ground_diameter", "to"), "vary.ground_diameter.to", what, remedy)
	}
	if g.Diameter > 0 && g.Diameter <= need {
		c.r.add(c.at("ground", "diameter"), "ground.diameter", what, remedy)
	}
}

// solvable notes a disc or cup that is or may become larger than the full-wave
// model solves.
func (c *briefCheck) solvable(ladder []Rung) {
	if !slices.ContainsFunc(ladder, func(r Rung) bool { return r.Model == FullWave }) || !(c.s.Band.To > 0) {
		return
	}
	wavelength := models.LightSpeed / c.s.Band.To
	for _, d := range []struct {
		q     objectives.Quantity
		key   string
		fixed float64
		most  float64 // wavelengths
	}{
		{objectives.GroundDiameter, "diameter", c.s.Base.Ground.Diameter, models.MostGroundDiameter},
		{objectives.GroundRim, "rim", c.s.Base.Ground.Rim, models.MostGroundRim},
	} {
		most := d.most * wavelength
		what := fmt.Sprintf("is beyond %g wavelengths at the band's upper end, the most that the full-wave model solves", d.most)
		remedy := "make it at most " + show(math.Floor(most*1e3)/1e3, Length) + ", or infinite"
		if d.fixed > most {
			c.r.add(c.at("ground", d.key), "ground."+d.key, what, remedy)
		}
		if v, ok := c.varies[d.q]; ok && v.To > most {
			c.r.add(c.at("vary", string(d.q), "to"), "vary."+string(d.q)+".to", what, remedy)
		}
	}
}

// thinnest is the diameter of the thinnest conductor in stock, m.
func (c *briefCheck) thinnest() float64 {
	least := math.Inf(1)
	for i := range c.s.Stock {
		least = math.Min(least, c.s.Stock[i].Diameter)
	}
	return least
}

// answerable notes aims and limits that no model can answer.
func (c *briefCheck) answerable(ladder []Rung) {
	what, remedy := "can be answered by no model: an infinite ground has no rear", "leave it away, or choose a ground of kind disc or cup"
	if c.s.Base.Ground.Finite() {
		if n := len(ladder); n == 0 || ladder[n-1].Model != ClosedForm {
			return
		}
		what, remedy = "cannot be answered by the closed-form model: its formulas have no rear", "leave it away, or choose model: full-wave"
	} else if c.s.Base.Ground.Kind == "" {
		return
	}
	for _, a := range c.s.Aims {
		if a.Figure == objectives.FrontToBack {
			c.r.add(c.at("aims"), "aims", "front_to_back "+what, remedy)
		}
	}
	for _, l := range c.s.Limits {
		if l.Figure == objectives.FrontToBack {
			c.r.add(c.at("limits", "front_to_back"), "limits.front_to_back", what, remedy)
		}
	}
}

// room notes limits on the envelope that leave no room for what may vary.
func (c *briefCheck) room() {
	low := func(q objectives.Quantity, fixed models.Law) float64 {
		if v, ok := c.varies[q]; ok {
			return v.From
		}
		least := math.Inf(1)
		for _, x := range fixed {
			least = math.Min(least, x)
		}
		return least
	}
	turns := low(objectives.Turns, models.Law{c.s.Base.Turns})
	spacing := low(objectives.Spacing, c.s.Base.Spacing)
	diameter := low(objectives.Diameter, c.s.Base.Diameter)
	height := low(objectives.FeedHeight, models.Law{c.s.Base.Feed.Height})
	ground := c.s.Base.Ground
	ground.Diameter = low(objectives.GroundDiameter, models.Law{ground.Diameter})
	ground.Rim = low(objectives.GroundRim, models.Law{ground.Rim})
	widest := diameter
	if ground.Finite() {
		widest = math.Max(widest, ground.Diameter)
	}
	lead := c.written("vary", "lead_turns") || c.written("design", "feed", "lead")
	for _, l := range c.s.Limits {
		if l.AtLeast {
			continue
		}
		name, d := l.Figure.String(), dimensionOf(l.Figure)
		full := func(need float64) {
			if l.Value < need && !math.IsInf(need, 0) {
				c.r.add(c.at("limits", name), "limits."+name+".at_most", "leaves no room: the smallest antenna that may vary needs "+show(onGrid(need, d), d),
					"raise the limit, or lower what may vary")
			}
		}
		switch {
		case l.Figure == objectives.Length && !lead:
			full(height + turns*spacing)
		case l.Figure == objectives.Length:
			full(height)
		case l.Figure == objectives.Widest:
			full(widest)
		case l.Figure == objectives.WireLength:
			full(turns * math.Pi * diameter)
		case l.Figure == objectives.Mass:
			full(ground.Mass())
		}
	}
}
