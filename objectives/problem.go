package objectives

import (
	"context"
	"errors"
	"fmt"
	"math"

	"golang.org/x/sync/singleflight"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// Rung is one step of a ladder of models, the cheapest first.
type Rung struct {
	Simulator models.Simulator
	Model     string // as a front names it: closed-form, full-wave, external
	Fidelity  string // empty where the model has none
	// Indicative marks a model whose impedance and axial ratio are rules of
	// thumb.
	Indicative bool
}

// Memory recalls answers that were given before, by question key.
type Memory interface {
	Recall(key string) (response []byte, ok bool)
}

// Problem turns a point into a score: point → design → centre line →
// simulator → figures → aims and limits. It implements optimize.Evaluator
// and is safe for concurrent use.
type Problem struct {
	Spec
	Layout *Layout
	// Unapplied names the aims and limits of the brief that no model of the
	// ladder can be held to; they are not among Aims and Limits.
	Unapplied []string
	// Memory, where set, answers questions that were asked before, and every
	// score carries the answers it rests on.
	Memory Memory

	rungs   []Rung
	flights *singleflight.Group
}

var _ optimize.Evaluator = (*Problem)(nil)

// ErrNoAims is a brief none of whose aims the model can be held to.
var ErrNoAims = errors.New("no aim is left that the model can be held to: aim at gain, beamwidth or a dimension, or set trust_indicative: true")

// NewProblem binds a spec to its ladder of models. Aims and limits on match
// and axial ratio are set aside where the finest model only indicates them,
// unless the spec trusts it.
func NewProblem(s Spec, rungs ...Rung) (*Problem, error) {
	if len(rungs) == 0 {
		return nil, errors.New("objectives: a problem needs a model")
	}
	p := &Problem{Spec: s, rungs: rungs, flights: new(singleflight.Group)}
	p.Layout = NewLayout(&p.Spec)
	if p.hides(p.finest()) {
		p.Aims, p.Limits = nil, nil
		for _, a := range s.Aims {
			if Figures[a.Figure].Match {
				p.Unapplied = append(p.Unapplied, "the aim "+a.Figure.String())
			} else {
				p.Aims = append(p.Aims, a)
			}
		}
		for _, l := range s.Limits {
			if Figures[l.Figure].Match {
				p.Unapplied = append(p.Unapplied, "the limit on "+l.Figure.String())
			} else {
				p.Limits = append(p.Limits, l)
			}
		}
	}
	if len(p.Aims) == 0 {
		return nil, ErrNoAims
	}
	return p, nil
}

func (p *Problem) finest() Rung { return p.rungs[len(p.rungs)-1] }

// Finest is the rung whose word is final.
func (p *Problem) Finest() Rung { return p.finest() }

// Rungs are the models, cheapest first.
func (p *Problem) Rungs() []Rung { return p.rungs }

// Wrap puts a wrapper around the simulator of every rung. It must keep the
// simulator's identity.
func (p *Problem) Wrap(wrap func(models.Simulator) (models.Simulator, error)) error {
	for i := range p.rungs {
		w, err := wrap(p.rungs[i].Simulator)
		if err != nil {
			return err
		}
		p.rungs[i].Simulator = w
	}
	return nil
}

// hides reports whether match and axial ratio stay unsaid on a rung.
func (p *Problem) hides(r Rung) bool { return r.Indicative && !p.TrustIndicative }

// Domain is what a searcher may know of the problem.
func (p *Problem) Domain() optimize.Domain {
	return optimize.Domain{Space: p.Layout.Space, Aims: len(p.Aims), Limits: len(p.Limits), Finest: len(p.rungs) - 1, Screen: p.Screen, Traits: p.traits()}
}

// Evaluate answers a candidate over the band's samples, with the figures
// that aims and limits need and those that come for nothing.
func (p *Problem) Evaluate(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
	rung := min(c.Rung, len(p.rungs)-1)
	s, err := p.score(ctx, c.Point, p.rungs[rung], p.Band.Hz(), p.needed())
	if rung == len(p.rungs)-1 {
		return s, errors.Join(err, p.unanswered(&s))
	}
	neutral(s.Aims)
	neutral(s.Limits)
	return s, err
}

// unanswered names a figure under an aim or a limit that the model gave no
// answer to. A score without figures has failed already.
func (p *Problem) unanswered(s *optimize.Score) error {
	if s.Figures == nil {
		return nil
	}
	for _, f := range p.Judged() {
		if math.IsNaN(s.Figures[f]) {
			return fmt.Errorf("%s does not apply to this design as the model answers it, so its aim or limit cannot be judged", f)
		}
	}
	return nil
}

// neutral puts 0 where a model below the finest has no answer.
func neutral(xs []float64) {
	for i, x := range xs {
		if math.IsNaN(x) {
			xs[i] = 0
		}
	}
}

// Confirm answers a point with the finest model over a sweep in steps of at
// most 0.25 % of mid-band: what ranks it, or when whole every figure and the
// power balance, as a member of the final front is known.
func (p *Problem) Confirm(ctx context.Context, pt space.Point, whole bool) (optimize.Score, error) {
	want := p.needed()
	if whole {
		want = everyFigure
	}
	s, err := p.score(ctx, pt, p.finest(), FineSweep(p.Band), want)
	s.Traits = nil // of other samples than a search's
	return s, errors.Join(err, p.unanswered(&s))
}

// fineStep is the widest step of a confirming sweep, as a share of mid-band.
const fineStep = 0.0025

// FineSweep lists the frequencies of a confirming sweep: every sample of the
// band, and equal steps between them of at most 0.25 % of mid-band.
func FineSweep(b models.Band) []float64 {
	if b.Samples <= 1 || b.To <= b.From {
		return b.Hz()
	}
	gaps := b.Samples - 1
	step := (b.To - b.From) / float64(gaps)
	parts := int(math.Ceil(step/(fineStep*b.Mid()) - 1e-9))
	return models.Band{From: b.From, To: b.To, Samples: gaps*max(parts, 1) + 1}.Hz()
}

// figureSet is a set of figures, a bit each.
type figureSet uint

const everyFigure figureSet = 1<<FigureCount - 1

func (s figureSet) has(f Figure) bool { return s>>f&1 == 1 }

// needed are the figures under aims and limits.
func (p *Problem) needed() figureSet {
	var s figureSet
	for _, a := range p.Aims {
		s |= 1 << a.Figure
	}
	for _, l := range p.Limits {
		s |= 1 << l.Figure
	}
	return s
}

// outputs are what a simulator must be asked for a set of figures.
func (s figureSet) outputs() models.Outputs {
	o := models.Axis
	if s.has(AxialRatioCone) || s.has(EdgeGain) {
		o |= models.Cone
	}
	if s.has(Beamwidth) || s.has(Sidelobe) || s.has(FrontToBack) {
		o |= models.Cuts
	}
	if s == everyFigure {
		o |= models.Balance
	}
	return o
}

// score reads the figures of a point and holds them against aims and limits.
// Under margins every figure is the worst of the perturbed windings', or what
// the asked share of them reaches.
func (p *Problem) score(ctx context.Context, pt space.Point, r Rung, hz []float64, want figureSet) (optimize.Score, error) {
	q := inquiry{rung: r, memory: p.Memory, flights: p.flights}
	kinds := p.kinds()
	var rows []Row
	var traits []float64
	for _, d := range p.spread(p.Layout.Design(pt)) {
		row, band, err := p.figures(ctx, &q, d, hz, want)
		if err != nil {
			return optimize.Score{Answers: q.answers, Took: q.took}, err
		}
		rows = append(rows, row)
		traits = append(traits, traitsIn(kinds, &row, &d, &band)...)
	}
	row := p.standing(rows)
	if p.hides(r) {
		row.hideMatch()
	}
	s := p.ScoreOf(row, q.answers)
	s.Traits, s.Took = traits, q.took
	return s, nil
}

// standing is what counts of a design whose windings have these figures: the
// worst of each, or what the asked share reaches.
func (p *Problem) standing(rows []Row) Row {
	percent := p.Margins.Percentile
	if percent == 0 {
		percent = 100 // the worst
	}
	return atPercentile(rows, percent)
}

// ScoreOf holds a row of figures against the aims and limits.
func (p *Problem) ScoreOf(row Row, answers []optimize.Answer) optimize.Score {
	s := optimize.Score{Figures: row[:], Aims: make([]float64, len(p.Aims)), Limits: make([]float64, len(p.Limits)), Answers: answers}
	for i := range p.Aims {
		s.Aims[i] = p.Aims[i].cost(&row)
	}
	for i := range p.Limits {
		s.Limits[i] = p.Limits[i].excess(&row)
	}
	return s
}

// figures reads one design's figures, and gives its answer over hz.
func (p *Problem) figures(ctx context.Context, q *inquiry, d models.Design, hz []float64, want figureSet) (Row, models.Response, error) {
	row := emptyRow()
	curve, err := helix.Wind(&d)
	if err != nil {
		return row, models.Response{}, err
	}
	readGeometry(&row, curve.Geometry())
	r, err := q.ask(ctx, &d, models.Question{Hz: hz, Outputs: want.outputs(), Cone: p.Cone})
	if err != nil {
		return row, r, err
	}
	readBand(&row, &d, &r)
	mid := p.Band.Mid()
	if want.has(GainBandwidth) {
		wide, err := q.ask(ctx, &d, models.Question{Hz: about(mid, gainReach), Outputs: models.Axis})
		if err != nil {
			return row, r, fmt.Errorf("gain bandwidth: %w", err)
		}
		row[GainBandwidth] = gainBandwidth(&d, &wide)
	}
	if want.has(VSWRBandwidth) {
		wide, err := q.ask(ctx, &d, models.Question{Hz: about(mid, vswrReach), Outputs: models.Axis})
		if err != nil {
			return row, r, fmt.Errorf("VSWR bandwidth: %w", err)
		}
		row[VSWRBandwidth] = vswrBandwidth(&d, &wide, p.vswrLimit())
	}
	if want.has(Headroom) {
		if row[Headroom], err = p.headroom(ctx, q, &d, &row); err != nil {
			return row, r, fmt.Errorf("headroom: %w", err)
		}
	}
	if !row.finite() {
		return row, r, errors.New("a figure came out infinite")
	}
	return row, r, nil
}

// vswrLimit is the brief's limit on VSWR, 2 without one.
func (p *Problem) vswrLimit() float64 {
	for _, l := range p.Spec.Limits {
		if l.Figure == VSWR && !l.AtLeast {
			return l.Value
		}
	}
	return 2
}

// hideMatch takes away what an indicative model must not be held to.
func (r *Row) hideMatch() {
	for f := range r {
		if Figures[f].Match {
			r[f] = math.NaN()
		}
	}
}

// Judged lists the figures under aims and limits, in their order.
func (p *Problem) Judged() []Figure {
	var fs []Figure
	need := p.needed()
	for f := range Figures {
		if need.has(Figure(f)) {
			fs = append(fs, Figure(f))
		}
	}
	return fs
}
