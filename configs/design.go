package configs

import (
	"slices"

	"turnwise/models"
)

// Sizes that can be built: anything beyond is a slip of the pen.
var (
	lengths     = span{1e-5, 100}
	optional    = span{0, 100}
	turnCounts  = span{0.1, 1000}
	frequencies = span{1e5, 1e12}
	impedances  = span{0.1, 10000}
)

// ReadDesign reads a design file. What is wrong with it is an [Error].
func ReadDesign(path string) (models.Design, error) {
	data, err := readFile(path)
	if err != nil {
		return models.Design{}, err
	}
	return ParseDesign(path, data, FormatOf(path))
}

// ParseDesign reads the text of a design file; name is what faults call it.
func ParseDesign(name string, data []byte, format Format) (models.Design, error) {
	r := &reader{file: name}
	root := r.parse(data, format, "design")
	if root == nil {
		return models.Design{}, r.err()
	}
	d := r.wholeDesign(root)
	if err := r.err(); err != nil {
		return models.Design{}, err
	}
	return d, nil
}

// wholeDesign reads a design that lacks nothing.
func (r *reader) wholeDesign(root *node) models.Design {
	b := r.block(root, "", "title", "turns", "diameter", "spacing", "handedness", "conductor", "insulation", "feed", "ground", "band", "sense", "feeds_reflector")
	d := r.winding(b)
	for _, key := range []string{"turns", "diameter", "spacing", "conductor", "feed"} {
		if !b.has(key) {
			b.missing(key, "write for example "+designExamples[key])
		}
	}
	d.Title, _ = b.name("title")
	d.Ground = r.ground(b.get("ground"), "ground")
	r.wholeGround(b, "ground", d.Ground, false, false)
	if b.has("band") {
		d.Band = r.band(b.get("band"), "band")
	}
	d.Sense = b.sense("sense")
	d.FeedsReflector = b.flag("feeds_reflector")
	if d.Handedness = b.sense("handedness"); !b.has("handedness") {
		b.missing("handedness", "write right or left; a right-handed winding radiates right-hand circular forward")
	}
	if f := r.block(b.get("feed"), "feed", feedKeys...); f.there {
		if d.Feed.Height == 0 && !f.has("height") {
			f.missing("height", "write the riser's length, for example 5 mm")
		}
	}
	if d.Feed.Impedance == 0 {
		d.Feed.Impedance = defaultImpedance
	}
	r.wholeLead(b)
	return d
}

const defaultImpedance = 50

var designExamples = map[string]string{
	"turns": "turns: 8.25", "diameter": "diameter: [58 mm]", "spacing": "spacing: [34 mm]",
	"conductor": "conductor: {diameter: 2 mm, material: copper}", "feed": "feed: {height: 5 mm, impedance: 50 ohm}",
}

// wholeLead notes parts of a lead, strip or transformer without their other
// half.
func (r *reader) wholeLead(b block) {
	feed := b.get("feed")
	if feed == nil || feed.kind != table {
		return
	}
	half := func(key, one, other string) {
		n := feed.find(key)
		if n == nil || n.kind != table {
			return
		}
		part := block{n: n}
		if part.has(one) != part.has(other) {
			r.add(n.line, "feed."+key, "has only one of "+one+" and "+other, "write both")
		}
	}
	half("lead", "turns", "spacing")
	half("strip", "turns", "width")
	half("transformer", "impedance", "length")
}

// winding reads the keys of a design that a brief may also fix; none of them
// has to be there.
func (r *reader) winding(b block) models.Design {
	var d models.Design
	d.Turns, _ = b.quantity("turns", Revolution, turnCounts)
	d.Diameter = b.law("diameter")
	d.Spacing = b.law("spacing")
	if b.has("conductor") {
		d.Conductor = r.conductor(b.get("conductor"), join(b.path, "conductor"))
	}
	if b.has("insulation") {
		d.Insulation = r.insulation(b.get("insulation"), join(b.path, "insulation"))
	}
	if b.has("feed") {
		d.Feed = r.feed(b.get("feed"), join(b.path, "feed"))
	}
	return d
}

// mostKnots bounds a law.
const mostKnots = 16

// law reads one length, or a list of them.
func (b *block) law(key string) models.Law {
	n := b.get(key)
	if n == nil || n.kind == broken {
		return nil
	}
	path := join(b.path, key)
	if n.kind != list {
		if x, ok := b.quantity(key, Length, lengths); ok {
			return models.Law{x}
		}
		return nil
	}
	if len(n.items) == 0 || len(n.items) > mostKnots {
		b.fault(key, "is a list of "+decimal(float64(len(n.items)), 0), "write 1 to 16 lengths, feed end first, for example [58 mm, 46 mm]")
		return nil
	}
	var l models.Law
	for _, item := range n.items {
		if x, ok := b.r.quantity(item, path, Length); ok && b.r.within(item, path, x, Length, lengths) {
			l = append(l, x)
		}
	}
	return l
}

// sense reads right or left; 0 when it is not there.
func (b *block) sense(key string) models.Sense {
	switch s, _ := b.choice(key, "right", "left"); s {
	case "right":
		return models.Right
	case "left":
		return models.Left
	}
	return 0
}

// conductor reads a conductor by its numbers, or by the name of a row of a
// catalogue.
func (r *reader) conductor(n *node, path string) models.Conductor {
	b := r.block(n, path, append([]string{"stock", "diameter", "wall"}, metalKeys...)...)
	var c models.Conductor
	c.Stock, _ = b.name("stock")
	if c.Stock != "" && !b.has("diameter") {
		row, ok := catalogueRow(c.Stock)
		if !ok {
			b.fault("stock", quoted(c.Stock)+" is in no catalogue", `name a row such as "AWG 12 copper", "2 mm copper wire" or "15 mm copper tube", or give diameter and material`)
			return c
		}
		return row.Conductor()
	}
	if !b.has("diameter") {
		b.missing("diameter", "write for example diameter: 2 mm")
	}
	var ok bool
	c.Diameter, ok = b.quantity("diameter", Length, lengths)
	c.Wall = b.wall(c.Diameter, ok)
	c.Material = r.material(b)
	return c
}

// wall reads the wall of a tube; 0 for solid wire.
func (b *block) wall(diameter float64, known bool) float64 {
	w, _ := b.quantity("wall", Length, optional)
	if known && 2*w > diameter {
		b.fault("wall", "is more than half the diameter", "write the tube's wall, or leave it away for solid wire")
	}
	return w
}

// metalKeys name a material, or give its numbers.
var metalKeys = []string{"material", "conductivity", "density", "permeability"}

// material reads a material by name, or by its numbers.
func (r *reader) material(b block) models.Material {
	var m models.Material
	if b.has("material") {
		name, ok := b.choice("material", materialNames()...)
		if ok {
			m, _ = material(name)
		}
		for _, key := range metalKeys[1:] {
			if b.has(key) {
				b.fault(key, "stands beside a material that has its own", "keep either the material or the numbers")
			}
		}
		return m
	}
	if !b.has("conductivity") || !b.has("density") {
		b.missing("material", "write "+oneOf(materialNames())+", or conductivity and density")
	}
	m.Conductivity, _ = b.quantity("conductivity", Conductivity, span{1, 1e30})
	m.Density, _ = b.quantity("density", Density, span{10, 30000})
	m.Permeability = 1
	if b.has("permeability") {
		m.Permeability, _ = b.quantity("permeability", Plain, span{0.5, 1e5})
	}
	return m
}

func (r *reader) insulation(n *node, path string) models.Insulation {
	b := r.block(n, path, "thickness", "permittivity")
	var i models.Insulation
	for _, key := range []string{"thickness", "permittivity"} {
		if !b.has(key) {
			b.missing(key, "write for example insulation: {thickness: 0.3 mm, permittivity: 2.3}")
		}
	}
	i.Thickness, _ = b.quantity("thickness", Length, span{0, 0.1})
	i.Permittivity, _ = b.quantity("permittivity", Plain, span{1, 100})
	if i.Thickness == 0 {
		return models.Insulation{}
	}
	return i
}

var feedKeys = []string{"height", "pin", "impedance", "lead", "strip", "transformer"}

func (r *reader) feed(n *node, path string) models.Feed {
	b := r.block(n, path, feedKeys...)
	var f models.Feed
	f.Height, _ = b.quantity("height", Length, lengths)
	f.Pin, _ = b.quantity("pin", Length, lengths)
	f.Impedance, _ = b.quantity("impedance", Impedance, impedances)
	if b.has("lead") {
		l := r.block(b.get("lead"), join(path, "lead"), "turns", "spacing", "shape")
		f.Lead.Turns, _ = l.quantity("turns", Revolution, span{0, 1000})
		f.Lead.Spacing, _ = l.quantity("spacing", Length, optional)
		f.Lead.Shape = models.Ramp
		if shape, ok := l.choice("shape", string(models.Ramp), string(models.Flat)); ok {
			f.Lead.Shape = models.LeadShape(shape)
		}
	}
	if b.has("strip") {
		s := r.block(b.get("strip"), join(path, "strip"), "turns", "width")
		f.Strip.Turns, _ = s.quantity("turns", Revolution, span{0, 1000})
		f.Strip.Width, _ = s.quantity("width", Length, lengths)
	}
	if b.has("transformer") {
		t := r.block(b.get("transformer"), join(path, "transformer"), "impedance", "length", "velocity")
		f.Transformer.Impedance, _ = t.quantity("impedance", Impedance, impedances)
		f.Transformer.Length, _ = t.quantity("length", Length, optional)
		f.Transformer.Velocity = 1
		if t.has("velocity") {
			f.Transformer.Velocity, _ = t.quantity("velocity", Plain, span{0.01, 1})
		}
	}
	return f
}

// ground reads the ground; nothing is the infinite plane, and a kind that is
// wrong stays empty.
func (r *reader) ground(n *node, path string) models.Ground {
	g := models.Ground{Kind: models.Infinite}
	if n == nil {
		return g
	}
	b := r.block(n, path, append([]string{"kind", "diameter", "rim", "thickness"}, metalKeys...)...)
	kind, ok := b.choice("kind", string(models.Infinite), string(models.Disc), string(models.Cup))
	if g.Kind = models.GroundKind(kind); !ok && !b.has("kind") {
		b.missing("kind", "write infinite, disc or cup")
	}
	g.Diameter, _ = b.quantity("diameter", Length, lengths)
	g.Rim, _ = b.quantity("rim", Length, lengths)
	g.Thickness, _ = b.quantity("thickness", Length, span{1e-5, 0.1})
	if slices.ContainsFunc(metalKeys, b.has) {
		g.Material = r.material(b)
	}
	unfit := func(allowed bool, keys ...string) {
		for _, key := range keys {
			if ok && b.has(key) && !allowed {
				b.fault(key, "does not go with a ground of kind "+string(g.Kind), "leave it away, or name the kind that has it")
			}
		}
	}
	unfit(g.Finite(), append([]string{"diameter", "thickness"}, metalKeys...)...)
	unfit(g.Kind == models.Cup, "rim")
	return g
}

// wholeGround notes a plate or cup without its sizes, unless they vary.
func (r *reader) wholeGround(b block, where string, g models.Ground, variesDiameter, variesRim bool) {
	n := b.get(where)
	if n == nil || g.Kind == "" {
		return
	}
	lacks := func(key, example string) {
		if own := n.find(key); own == nil || own.kind == null {
			r.add(n.line, join(b.path, where)+"."+key, "is missing", "write for example "+key+": "+example)
		}
	}
	if g.Finite() && !variesDiameter {
		lacks("diameter", "200 mm")
	}
	if g.Kind == models.Cup && !variesRim {
		lacks("rim", "60 mm")
	}
}

// defaultSamples and mostSamples are of a band.
const (
	defaultSamples = 5
	mostSamples    = 10_000
)

func (r *reader) band(n *node, path string) models.Band {
	b := r.block(n, path, "from", "to", "samples")
	for _, key := range []string{"from", "to"} {
		if !b.has(key) {
			b.missing(key, "write both ends, for example from: 1.66 GHz, to: 1.70 GHz")
		}
	}
	band := models.Band{Samples: defaultSamples}
	var okFrom, okTo bool
	band.From, okFrom = b.quantity("from", Frequency, frequencies)
	band.To, okTo = b.quantity("to", Frequency, frequencies)
	if k, ok := b.count("samples", 1, mostSamples); ok {
		band.Samples = int(k)
	}
	if !okFrom || !okTo {
		return band
	}
	switch {
	case band.From > band.To:
		b.fault("from", "lies above the band's upper end", "swap from and to")
	case band.From == band.To && !b.has("samples"):
		band.Samples = 1
	case band.From == band.To && band.Samples != 1:
		b.fault("samples", "is "+decimal(float64(band.Samples), 0)+" for a band of zero width", "write samples: 1 for one frequency, or give the band a width")
	case band.From < band.To && band.Samples < 2:
		b.fault("samples", "is 1 for a band with a width", "write at least 2; 5 is usual")
	}
	return band
}
