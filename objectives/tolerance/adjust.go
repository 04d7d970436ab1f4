package tolerance

import (
	"cmp"
	"context"
	"math"
	"math/cmplx"
	"slices"

	"turnwise/models"
	"turnwise/objectives"
)

// Adjustment is one thing that can be trimmed on a finished copy, and what
// that is good for.
type Adjustment struct {
	Name   string
	Column string // of the amount, as JSON writes it
	// Way is what moving the poor copy's by By is called; By is in metres.
	Way string
	By  float64
	// Before and After are the poor copy's VSWR as the model answers it.
	Before, After float64
	// Limit is the VSWR aimed at; Untrimmed and Trimmed are how many copies
	// keep it as made, and when each is trimmed its own way. What a copy gains
	// is estimated: the design's reflection moves by as much.
	Limit              float64
	Untrimmed, Trimmed Yield
	// Up and Down are how many of the copies are to be moved either way.
	Up, Down int
}

// kind is something that can be trimmed.
type kind struct {
	name, column, more, less string
	there                    func(d *models.Design) bool
	apply                    func(d models.Design, by float64) models.Design
	lowest                   func(d *models.Design) float64 // farthest down, ≤ 0
}

// kinds are what can be trimmed on any antenna that has it.
var kinds = []kind{
	{name: "riser height", column: "feed_height_m", more: "raise", less: "lower",
		there: func(*models.Design) bool { return true },
		apply: func(d models.Design, by float64) models.Design { return FeedHeight.Shift(d, by) },
		lowest: func(d *models.Design) float64 {
			wire := math.Max(d.Conductor.Diameter+2*d.Insulation.Thickness, d.PinDiameter())
			return math.Min(0, objectives.LeastFeedHeight(wire)-d.Feed.Height)
		}},
	{name: "lead spacing", column: "lead_spacing_m", more: "widen", less: "narrow",
		there:  LeadSpacing.In,
		apply:  func(d models.Design, by float64) models.Design { return LeadSpacing.Shift(d, by) },
		lowest: func(d *models.Design) float64 { return math.Min(0, -d.Feed.Lead.Spacing) }},
	{name: "transformer length", column: "transformer_length_m", more: "lengthen", less: "shorten",
		there: func(d *models.Design) bool { return d.Feed.Transformer.Impedance > 0 },
		apply: func(d models.Design, by float64) models.Design {
			d.Feed.Transformer.Length += by
			return d
		},
		lowest: func(d *models.Design) float64 { return -d.Feed.Transformer.Length }},
}

// path is where trimming takes the design's own reflection.
type path struct {
	kind  *kind
	steps []step // by rising amount, 0 among them
}

type step struct {
	by   float64
	copy Copy
}

// trimReach is how far anything is trimmed, in wavelengths at mid-band, and
// trimParts the number of amounts tried on either side.
const (
	trimReach = 0.03
	trimParts = 60
)

func (s *Study) trimReach() float64 {
	return trimReach * models.LightSpeed / s.Spec.Band.Mid()
}

// paths lays out what to answer about the adjustments that the design has.
func (s *Study) paths() []path {
	var out []path
	for i := range kinds {
		k := &kinds[i]
		if !k.there(&s.Design) {
			continue
		}
		p := path{kind: k}
		last := math.Inf(-1)
		for _, part := range []float64{-1, -0.5, -0.25, 0, 0.25, 0.5, 1} {
			by := math.Max(part*s.trimReach(), k.lowest(&s.Design))
			if by > last {
				p.steps = append(p.steps, step{by: by})
				last = by
			}
		}
		out = append(out, p)
	}
	return out
}

// settle puts the design's own answer in and drops steps without one.
func (p *path) settle(nominal *Copy) {
	for i := range p.steps {
		if p.steps[i].by == 0 {
			p.steps[i].copy = *nominal
		}
	}
	p.steps = slices.DeleteFunc(p.steps, func(s step) bool { return s.copy.Err != "" })
}

// vswr is the highest of a copy trimmed by an amount: its reflection moved as
// far as the design's.
func (p *path) vswr(nominal, c *Copy, by float64) float64 {
	i := 1
	for i < len(p.steps)-1 && p.steps[i].by < by {
		i++
	}
	a, b := &p.steps[i-1], &p.steps[i]
	u := complex((by-a.by)/(b.by-a.by), 0)
	highest := 1.0
	for f, g := range c.Reflection {
		moved := a.copy.Reflection[f] + u*(b.copy.Reflection[f]-a.copy.Reflection[f]) - nominal.Reflection[f]
		highest = math.Max(highest, VSWR(g+moved))
	}
	return highest
}

// VSWR is that of a reflection, not above the cap.
func VSWR(g complex128) float64 {
	a := cmplx.Abs(g)
	if !(a < 1) {
		return models.VSWRCap
	}
	return math.Min((1+a)/(1-a), models.VSWRCap)
}

// best is the amount that leaves a copy with the lowest VSWR, 0 where none
// helps.
func (p *path) best(nominal, c *Copy, reach float64) (by, vswr float64) {
	vswr = p.vswr(nominal, c, 0)
	low, high := p.steps[0].by, p.steps[len(p.steps)-1].by
	for k := -trimParts; k <= trimParts; k++ {
		x := math.Round(float64(k)*reach/trimParts*1e5) / 1e5
		if x < low || x > high {
			continue
		}
		if v := p.vswr(nominal, c, x); v < vswr-1e-9 {
			by, vswr = x, v
		}
	}
	return by, vswr
}

// adjust finds what each adjustment is good for.
func (s *Study) adjust(ctx context.Context, res *Result, p *plan) error {
	if !s.matched() {
		return nil
	}
	res.Poor = res.poorest()
	if res.Poor < 0 {
		return nil
	}
	for i := range p.paths {
		p.paths[i].settle(&res.Nominal)
		if len(p.paths[i].steps) > 1 {
			res.Adjustments = append(res.Adjustments, s.adjustment(res, &p.paths[i]))
		}
	}
	err := Each(ctx, len(res.Adjustments), s.Workers, func(i int) bool {
		a := &res.Adjustments[i]
		k := kinds[slices.IndexFunc(kinds, func(k kind) bool { return k.name == a.Name })]
		trimmed := s.listen(ctx, k.apply(s.apply(res.Copies[res.Poor].Errors), a.By))
		if a.After = trimmed.Figures[objectives.VSWR]; trimmed.Err != "" {
			a.By, a.After = 0, a.Before
		}
		return true
	}, func(bool) {})
	slices.SortStableFunc(res.Adjustments, func(a, b Adjustment) int {
		return cmp.Or(cmp.Compare(b.Trimmed.Share, a.Trimmed.Share), cmp.Compare(a.After, b.After))
	})
	return err
}

// poorest is the copy whose VSWR 95 % of the copies do not exceed.
func (res *Result) poorest() int {
	var order []int
	for i := range res.Copies {
		if res.Copies[i].Err == "" {
			order = append(order, i)
		}
	}
	if len(order) == 0 {
		return -1
	}
	slices.SortStableFunc(order, func(a, b int) int {
		return cmp.Compare(res.Copies[a].Figures[objectives.VSWR], res.Copies[b].Figures[objectives.VSWR])
	})
	return order[int(0.95*float64(len(order)-1)+0.5)]
}

// adjustment trims every copy its own way along a path.
func (s *Study) adjustment(res *Result, p *path) Adjustment {
	a := Adjustment{Name: p.kind.name, Column: p.kind.column, Limit: s.vswrLimit()}
	asMade, trimmed, failed := 0, 0, 0
	for i := range res.Copies {
		c := &res.Copies[i]
		if c.Err != "" {
			failed++
			continue
		}
		by, vswr := p.best(&res.Nominal, c, s.trimReach())
		if c.Figures[objectives.VSWR] <= a.Limit {
			asMade++
		}
		if vswr <= a.Limit || c.Figures[objectives.VSWR] <= a.Limit {
			trimmed++
		}
		switch {
		case by > 0:
			a.Up++
		case by < 0:
			a.Down++
		}
		if i == res.Poor {
			a.By, a.Before = by, c.Figures[objectives.VSWR]
		}
	}
	if a.Way = p.kind.more; a.By < 0 {
		a.Way = p.kind.less
	}
	same := !s.Spreads.Any()
	a.Untrimmed, a.Trimmed = yieldOf(asMade, res.Answered, failed, same), yieldOf(trimmed, res.Answered, failed, same)
	return a
}

// vswrLimit is the brief's, 2 without one.
func (s *Study) vswrLimit() float64 {
	for _, l := range s.Spec.Limits {
		if l.Figure == objectives.VSWR && !l.AtLeast {
			return l.Value
		}
	}
	return 2
}
