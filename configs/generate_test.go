package configs

import (
	"math"
	"strconv"
	"strings"
	"time"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/objectives"
)

// Generators of sound briefs and designs, as reading would give them.

// grid draws a multiple of a dimension's resolution, the bounds among them.
func grid(t *rapid.T, what string, d Dimension, low, high float64) float64 {
	per := gridsPerUnit[d]
	return float64(rapid.Int64Range(int64(math.Round(low*per)), int64(math.Round(high*per))).Draw(t, what)) / per
}

func flip(t *rapid.T, what string) bool { return rapid.Bool().Draw(t, what) }

// words draws a text that may be a title or a name.
func words(t *rapid.T, what string) string {
	letter := rapid.OneOf(rapid.SampledFrom([]rune(`ab 7:#'"\{}[],&*!|>%@-?~=`)), rapid.Rune())
	s := rapid.StringOfN(letter, 0, 20, -1).Draw(t, what)
	return strings.TrimSpace(strings.Map(func(c rune) rune {
		if breaksLine(c) {
			return -1
		}
		return c
	}, s))
}

func drawMaterial(t *rapid.T) models.Material {
	if flip(t, "by name") {
		return rapid.SampledFrom(Materials).Draw(t, "material")
	}
	m := models.Material{
		Conductivity: rapid.Float64Range(1, 1e12).Draw(t, "conductivity"),
		Density:      rapid.Float64Range(10, 30000).Draw(t, "density"),
		Permeability: 1,
	}
	if flip(t, "magnetic") {
		m.Permeability = rapid.Float64Range(0.5, 1e5).Draw(t, "permeability")
	}
	return m
}

func drawInsulation(t *rapid.T) models.Insulation {
	if flip(t, "bare") {
		return models.Insulation{}
	}
	return models.Insulation{Thickness: grid(t, "thickness", Length, 1e-6, 0.1), Permittivity: rapid.Float64Range(1, 100).Draw(t, "permittivity")}
}

// drawWall draws the wall of a tube, or of wire.
func drawWall(t *rapid.T, diameter float64) float64 {
	half := math.Floor(math.Round(diameter*1e6)/2) / 1e6
	return grid(t, "wall", Length, 0, half)
}

func drawBand(t *rapid.T) models.Band {
	from := rapid.Float64Range(1e5, 1e11).Draw(t, "from")
	if flip(t, "one frequency") {
		return models.Band{From: from, To: from, Samples: 1}
	}
	to := from + rapid.Float64Range(1, 1e10).Draw(t, "width")
	return models.Band{From: from, To: to, Samples: rapid.IntRange(2, mostSamples).Draw(t, "samples")}
}

func drawLaw(t *rapid.T, what string) models.Law {
	l := make(models.Law, rapid.IntRange(1, mostKnots).Draw(t, what))
	for i := range l {
		l[i] = grid(t, what, Length, lengths.low, lengths.high)
	}
	return l
}

func drawSense(t *rapid.T) models.Sense {
	return rapid.SampledFrom([]models.Sense{models.Right, models.Left}).Draw(t, "sense")
}

func drawShape(t *rapid.T) models.LeadShape {
	return rapid.SampledFrom([]models.LeadShape{models.Ramp, models.Flat}).Draw(t, "shape")
}

// drawSheet draws what a plate or cup is made of, or leaves it unsaid.
func drawSheet(t *rapid.T, g *models.Ground) {
	if !g.Finite() {
		return
	}
	if flip(t, "sheet") {
		g.Thickness = grid(t, "sheet", Length, 1e-5, 2e-3)
	}
	if flip(t, "metal") {
		g.Material = drawMaterial(t)
	}
}

func drawDesign(t *rapid.T) models.Design {
	d := models.Design{
		Title:          words(t, "title"),
		Turns:          grid(t, "turns", Revolution, turnCounts.low, turnCounts.high),
		Diameter:       drawLaw(t, "diameter"),
		Spacing:        drawLaw(t, "spacing"),
		Handedness:     drawSense(t),
		Conductor:      models.Conductor{Stock: words(t, "stock"), Diameter: grid(t, "wire", Length, lengths.low, 1), Material: drawMaterial(t)},
		Insulation:     drawInsulation(t),
		Feed:           models.Feed{Height: grid(t, "height", Length, lengths.low, 1), Impedance: grid(t, "impedance", Impedance, impedances.low, impedances.high)},
		Ground:         models.Ground{Kind: rapid.SampledFrom([]models.GroundKind{models.Infinite, models.Disc, models.Cup}).Draw(t, "ground")},
		FeedsReflector: flip(t, "reflector"),
	}
	d.Conductor.Wall = drawWall(t, d.Conductor.Diameter)
	if flip(t, "pin") {
		d.Feed.Pin = grid(t, "pin", Length, lengths.low, 0.1)
	}
	if flip(t, "lead") {
		d.Feed.Lead = models.Lead{Turns: grid(t, "lead turns", Revolution, 0, 9), Spacing: grid(t, "lead spacing", Length, 0, 1), Shape: drawShape(t)}
	}
	if flip(t, "strip") {
		d.Feed.Strip = models.Strip{Turns: grid(t, "strip turns", Revolution, 0, 9), Width: grid(t, "strip width", Length, lengths.low, 0.1)}
	}
	if flip(t, "transformer") {
		d.Feed.Transformer = models.Transformer{
			Impedance: grid(t, "line", Impedance, impedances.low, impedances.high), Length: grid(t, "line length", Length, 0, 1),
			Velocity: rapid.Float64Range(0.01, 1).Draw(t, "velocity"),
		}
	}
	if d.Ground.Kind != models.Infinite {
		d.Ground.Diameter = grid(t, "plate", Length, lengths.low, lengths.high)
	}
	if d.Ground.Kind == models.Cup {
		d.Ground.Rim = grid(t, "rim", Length, lengths.low, lengths.high)
	}
	drawSheet(t, &d.Ground)
	if flip(t, "band") {
		d.Band = drawBand(t)
	}
	if flip(t, "states a sense") {
		d.Sense = drawSense(t)
	}
	return d
}

// briefDraw is a brief being drawn.
type briefDraw struct {
	t  *rapid.T
	br Brief
}

func drawBrief(t *rapid.T) Brief {
	d := &briefDraw{t: t}
	br := &d.br
	s := &br.Spec
	s.Title = words(t, "title")
	s.Band = drawBand(t)
	s.Base.Sense = drawSense(t)
	s.Base.Handedness = s.Base.Sense
	s.Base.FeedsReflector = flip(t, "reflector")
	s.Base.Feed.Impedance = grid(t, "impedance", Impedance, impedances.low, impedances.high)
	s.Base.Ground.Kind = rapid.SampledFrom([]models.GroundKind{models.Infinite, models.Disc, models.Cup}).Draw(t, "ground")
	drawSheet(t, &s.Base.Ground)
	s.Base.Insulation = drawInsulation(t)
	d.stock()
	for _, q := range objectives.Quantities {
		d.quantity(q)
	}
	if len(s.Vary) == 0 { // a brief in which nothing varies is none
		s.Base.Turns = 0
		d.vary(objectives.Turns, 0.1, 1000)
	}
	d.aims()
	for f := range objectives.Figures {
		d.limits(objectives.Figure(f))
	}
	s.Cone = grid(t, "cone", Angle, 0.1, 90) * math.Pi / 180
	s.TrustIndicative = flip(t, "trust")
	if flip(t, "margins") {
		s.Margins = objectives.Margins{Diameter: grid(t, "margin", Length, 1e-6, 0.1), Spacing: grid(t, "margin", Length, 0, 0.1), FeedHeight: grid(t, "margin", Length, 0, 0.1)}
		if flip(t, "percentile") {
			s.Margins.Percentile = rapid.Float64Range(50, 100).Draw(t, "percentile")
		}
	}
	d.model()
	sample := rapid.IntRange(1, 100_000).Draw(t, "sample")
	genetic := rapid.IntRange(0, 100_000-sample).Draw(t, "genetic")
	br.Search = Shares{part(float64(sample) / 1e3), part(float64(genetic) / 1e3), part(float64(100_000-sample-genetic) / 1e3)}
	d.budget()
	br.FrontAtMost = rapid.IntRange(1, 100_000).Draw(t, "front")
	br.Seed = uint64(rapid.Int64Range(0, math.MaxInt64).Draw(t, "seed"))
	return *br
}

func (d *briefDraw) stock() {
	t, s := d.t, &d.br.Spec
	rows := rapid.IntRange(1, 5).Draw(t, "rows")
	for i := range rows {
		row := objectives.Stock{Name: strings.TrimSpace(strconv.Itoa(i) + words(t, "name")), Diameter: grid(t, "wire", Length, 1e-5, 0.02), Material: drawMaterial(t), Insulation: drawInsulation(t)}
		row.Wall = drawWall(t, row.Diameter)
		if flip(t, "coil") {
			row.Coil = grid(t, "coil", Length, 1e-3, 1e5)
		}
		row.LeastBendRadius = grid(t, "bend", Length, 0, 1)
		s.Stock = append(s.Stock, row)
	}
	if rows > 1 || flip(t, "conductor varies") {
		s.Vary = append(s.Vary, objectives.Vary{Quantity: objectives.Conductor, Knots: 1})
	}
}

// quantity lets a dimension vary, fixes it, or leaves it away, with its other
// half where it has one.
func (d *briefDraw) quantity(q objectives.Quantity) {
	t, s := d.t, &d.br.Spec
	f := &s.Base.Feed
	switch q {
	case objectives.Turns:
		d.either(q, 0.1, 1000, &s.Base.Turns)
	case objectives.Diameter:
		d.law(q, &s.Base.Diameter)
	case objectives.Spacing:
		d.law(q, &s.Base.Spacing)
	case objectives.FeedHeight:
		d.either(q, 0.05, 1, &f.Height) // above what any conductor drawn needs
	case objectives.LeadTurns:
		if flip(t, "lead") {
			d.either(q, 0, 9, &f.Lead.Turns)
			d.either(objectives.LeadSpacing, 0, 1, &f.Lead.Spacing)
			f.Lead.Shape = drawShape(t)
		}
	case objectives.Pin:
		if flip(t, "pin") {
			d.either(q, 1e-5, 0.1, &f.Pin)
		}
	case objectives.StripTurns:
		if flip(t, "strip") {
			d.either(q, 0, 9, &f.Strip.Turns)
			d.either(objectives.StripWidth, 1e-5, 0.1, &f.Strip.Width)
		}
	case objectives.TransformerImpedance:
		if flip(t, "transformer") {
			d.either(q, 0.1, 10000, &f.Transformer.Impedance)
			d.either(objectives.TransformerLength, 0, 1, &f.Transformer.Length)
			f.Transformer.Velocity = rapid.Float64Range(0.01, 1).Draw(t, "velocity")
		}
	case objectives.GroundDiameter:
		if s.Base.Ground.Kind != models.Infinite {
			// It has to reach round the feed's opening.
			if len(s.Base.Diameter) > 0 {
				s.Base.Diameter[0] = min(s.Base.Diameter[0], 1)
			}
			d.either(q, 2, 10, &s.Base.Ground.Diameter)
		}
	case objectives.GroundRim:
		if s.Base.Ground.Kind == models.Cup {
			d.either(q, 1e-5, 10, &s.Base.Ground.Rim)
		}
	}
	s.Vary = inOrder(s.Vary)
}

// inOrder puts what varies in the order of columns.
func inOrder(vs []objectives.Vary) []objectives.Vary {
	var out []objectives.Vary
	for _, q := range objectives.Quantities {
		for _, v := range vs {
			if v.Quantity == q {
				out = append(out, v)
			}
		}
	}
	return out
}

// either lets a quantity vary between bounds, or fixes it.
func (d *briefDraw) either(q objectives.Quantity, low, high float64, fixed *float64) {
	if flip(d.t, string(q)+" varies") {
		d.vary(q, low, high)
		return
	}
	*fixed = grid(d.t, string(q), varied[q].d, low, high)
}

func (d *briefDraw) law(q objectives.Quantity, fixed *models.Law) {
	if flip(d.t, string(q)+" varies") {
		d.vary(q, 1e-5, 1)
		return
	}
	*fixed = drawLaw(d.t, string(q))
}

func (d *briefDraw) vary(q objectives.Quantity, low, high float64) {
	t, dim := d.t, varied[q].d
	v := objectives.Vary{Quantity: q, From: grid(t, "from", dim, low, high), Knots: 1}
	stepped := q == objectives.GroundDiameter || q == objectives.GroundRim || flip(t, "stepped")
	if stepped {
		v.Step = 1 / gridsPerUnit[dim] * float64(rapid.IntRange(1, 1000).Draw(t, "step"))
		v.Step = onGrid(v.Step, dim)
		v.To = onGrid(v.From+v.Step*float64(rapid.IntRange(0, 50).Draw(t, "steps")), dim)
	} else {
		v.To = grid(t, "to", dim, v.From, high)
	}
	if q.IsLaw() {
		v.Knots = rapid.IntRange(1, mostKnots).Draw(t, "knots")
	}
	if v.To > varied[q].s.high {
		v.To, v.Step = v.From, 0
	}
	d.br.Spec.Vary = append(d.br.Spec.Vary, v)
}

// figures are those that some model answers.
func (d *briefDraw) figures() []objectives.Figure {
	var out []objectives.Figure
	for f := range objectives.Figures {
		if objectives.Figure(f) != objectives.FrontToBack || d.br.Spec.Base.Ground.Kind != models.Infinite {
			out = append(out, objectives.Figure(f))
		}
	}
	return out
}

func (d *briefDraw) aims() {
	chosen := rapid.Permutation(d.figures()).Draw(d.t, "aims")
	for _, f := range chosen[:rapid.IntRange(1, mostAims).Draw(d.t, "aim count")] {
		d.br.Spec.Aims = append(d.br.Spec.Aims, objectives.Aim{Figure: f, Most: flip(d.t, "most")})
	}
}

// limits bounds a figure below, above, both or not.
func (d *briefDraw) limits(f objectives.Figure) {
	t := d.t
	known := false
	for _, k := range d.figures() {
		known = known || k == f
	}
	if !known {
		return
	}
	low, high := -1e6, 1e6
	switch {
	case f == objectives.Length || f == objectives.Widest || f == objectives.WireLength:
		low = 5e5 // beyond every winding drawn, so that there is room
	case f == objectives.Mass:
		low = 5e4 // beyond every ground drawn
	case leastPossible(f) || f == objectives.VSWR:
		low = 1
	}
	bound := func(low, high float64) float64 {
		if gridsPerUnit[dimensionOf(f)] > 0 {
			return grid(t, "bound", dimensionOf(f), low, high)
		}
		x := rapid.Float64Range(low, high).Draw(t, "bound")
		if math.Abs(x) < 1/mostSize { // refused, as no size that can be built
			return max(0, low)
		}
		return x
	}
	s := &d.br.Spec
	if flip(t, "at least") {
		at := bound(low, high)
		if f == objectives.Efficiency {
			at = bound(-1, 1)
		}
		s.Limits = append(s.Limits, objectives.Limit{Figure: f, AtLeast: true, Value: at})
		low = max(low, at)
	}
	if flip(t, "at most") {
		s.Limits = append(s.Limits, objectives.Limit{Figure: f, Value: bound(low, high)})
	}
}

func (d *briefDraw) model() {
	t, br := d.t, &d.br
	fidelity := func() string { return rapid.SampledFrom(Fidelities).Draw(t, "fidelity") }
	kinds := []int{3}
	if !br.Spec.Asks(objectives.FrontToBack) {
		kinds = append(kinds, 0) // the formulas have no rear
	}
	if d.solvable() {
		kinds = append(kinds, 1, 2)
	}
	switch rapid.SampledFrom(kinds).Draw(t, "model") {
	case 0:
		br.Ladder = []Rung{{Model: ClosedForm}}
	case 1:
		br.Ladder = []Rung{{FullWave, fidelity()}}
	case 2:
		br.Ladder = []Rung{{Model: ClosedForm}, {FullWave, fidelity()}, {FullWave, fidelity()}}
	default:
		br.Ladder = []Rung{{Model: ExternalModel}}
		br.External = External{
			Command: rapid.SliceOfN(rapid.String(), 1, 4).Draw(t, "command"),
			Timeout: time.Duration(rapid.Int64Range(10, 1e9).Draw(t, "timeout")) * time.Millisecond,
		}
	}
}

// solvable reports whether the full-wave model solves every ground drawn.
func (d *briefDraw) solvable() bool {
	s := &d.br.Spec
	diameter, rim := s.Base.Ground.Diameter, s.Base.Ground.Rim
	for _, v := range s.Vary {
		switch v.Quantity {
		case objectives.GroundDiameter:
			diameter = v.To
		case objectives.GroundRim:
			rim = v.To
		}
	}
	wavelength := models.LightSpeed / s.Band.To
	return diameter <= models.MostGroundDiameter*wavelength && rim <= models.MostGroundRim*wavelength
}

func (d *briefDraw) budget() {
	t, b := d.t, &d.br.Budget
	if flip(t, "evaluations") {
		b.Evaluations = rapid.IntRange(1, mostEvaluations).Draw(t, "evaluations")
	}
	if flip(t, "time") {
		b.Time = time.Duration(rapid.Int64Range(1000, 1e11).Draw(t, "time")) * time.Millisecond
	}
	if flip(t, "stagnation") {
		b.Stagnation.Evaluations = rapid.IntRange(1, mostEvaluations).Draw(t, "evaluations")
		b.Stagnation.Share = part(float64(rapid.Int64Range(0, 1e11).Draw(t, "share")) / 1e9)
	}
}
