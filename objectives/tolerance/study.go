package tolerance

import (
	"context"
	"fmt"
	"slices"
	"sync"

	"turnwise/models"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// Study is what is to be found out about a design.
type Study struct {
	Design       models.Design
	Spec         objectives.Spec // its band, cone, aims and limits
	Rung         objectives.Rung
	Spreads      Spreads
	Distribution Distribution
	Samples      int // of the Monte Carlo
	Seed         uint64
	Workers      int
	// Progress, where set, is told how many of all answers are in. It is
	// called by one worker at a time.
	Progress func(done, total, failed int)
}

// Copy is one antenna as a workshop made it.
type Copy struct {
	Errors     Spreads        // SI, signed
	Figures    objectives.Row // NaN where not asked for
	Limits     []float64      // in the order of the result's: signed and scaled, ≤ 0 is met
	Reflection []complex128   // at the connector, over the sweep
	Err        string         // why there is no answer
}

// kept reports whether every limit is.
func (c *Copy) kept() bool {
	return !slices.ContainsFunc(c.Limits, func(x float64) bool { return x > 0 })
}

// Result is what a study found.
type Result struct {
	Hz         []float64
	Limits     []objectives.Limit
	Figures    []objectives.Figure // asked for, in order
	Unapplied  []string            // limits the model must not be held to
	Nominal    Copy
	Copies     []Copy // in the order they were drawn
	Answered   int
	Failures   []Failure
	Yield      Yield   // of all limits together
	LimitYield []Yield // of each
	// Sensitivities has the tightest dimension first; Deciding is the limit
	// that ranks them, −1 without limits: then the gain does.
	Sensitivities []Sensitivity
	Deciding      int
	// Adjustments has the one that recovers most first.
	Adjustments []Adjustment
	// Statement is what the model says of itself, Warnings of the design.
	Statement string
	Warnings  []string
	// Poor is the copy that the adjustments are shown on, −1: none.
	Poor int
}

// Failure is a reason for copies without an answer.
type Failure struct {
	Reason string // of the first such copy
	Count  int
}

// copies draws the errors of every copy. Each copy has a stream of its own
// and draws for every dimension, so that neither their number nor a dimension
// made exact changes the rest.
func (s *Study) copies() []Spreads {
	out := make([]Spreads, s.Samples)
	for i := range out {
		r := optimize.Stream(s.Seed, "tolerance", i)
		for d := range out[i] {
			out[i][d] = s.Spreads[d] * s.Distribution.draw(r)
		}
	}
	return out
}

// apply is the design with all errors in it.
func (s *Study) apply(errors Spreads) models.Design {
	d := s.Design
	for i, by := range errors {
		d = Dimension(i).Shift(d, by)
	}
	return d
}

// Run answers the design, its copies, each dimension at either end of its
// spread, and the adjustments. A design that has no answer itself is an
// error.
func (s *Study) Run(ctx context.Context) (*Result, error) {
	probe, err := s.problem(s.Design, s.Rung)
	if err != nil {
		return nil, err
	}
	s.Spreads = s.Spreads.Of(&s.Design)
	res := &Result{Hz: objectives.FineSweep(s.Spec.Band), Limits: probe.Limits, Figures: probe.Judged(), Unapplied: probe.Unapplied, Poor: -1}
	ear := &listener{Simulator: s.Rung.Simulator}
	res.Nominal = s.answer(ctx, s.Design, ear)
	if ctx.Err() != nil {
		return nil, ctx.Err()
	}
	if res.Nominal.Err != "" {
		return nil, fmt.Errorf("the design itself: %s", res.Nominal.Err)
	}
	res.Statement, res.Warnings = ear.band.Statement, ear.band.Warnings
	plan := s.plan(&res.Nominal)
	if err := s.answerAll(ctx, plan); err != nil {
		return nil, err
	}
	res.Copies = plan.copies
	s.count(res)
	s.rank(res, plan)
	if err := s.adjust(ctx, res, plan); err != nil {
		return nil, err
	}
	return res, nil
}

// problem asks for the figures worth knowing of one design. Margins play no
// part: here the errors are drawn.
func (s *Study) problem(d models.Design, r objectives.Rung) (*objectives.Problem, error) {
	spec := s.Spec
	d.Band = spec.Band
	c := d.Conductor
	spec.Base, spec.Vary, spec.Margins = d, nil, objectives.Margins{}
	spec.Stock = []objectives.Stock{{Name: c.Stock, Diameter: c.Diameter, Wall: c.Wall, Material: c.Material}}
	spec.Aims = s.wanted()
	return objectives.NewProblem(spec, r)
}

// wanted are the figures to read, as aims: the brief's own, and those that
// every antenna is known by.
func (s *Study) wanted() []objectives.Aim {
	var out []objectives.Aim
	add := func(f objectives.Figure) {
		if s.matched() || !objectives.Figures[f].Match {
			out = append(out, objectives.Aim{Figure: f, Most: objectives.Figures[f].More})
		}
	}
	for _, f := range []objectives.Figure{objectives.Gain, objectives.AxialRatio, objectives.VSWR} {
		add(f)
	}
	for _, a := range s.Spec.Aims {
		add(a.Figure)
	}
	return out
}

// listen is answer for those who only want the figures.
func (s *Study) listen(ctx context.Context, d models.Design) Copy {
	return s.answer(ctx, d, &listener{Simulator: s.Rung.Simulator})
}

// answer is one copy's figures, or why there are none; ear hears the sweep
// they come from.
func (s *Study) answer(ctx context.Context, d models.Design, ear *listener) Copy {
	c := Copy{}
	rung := s.Rung
	rung.Simulator = ear
	p, err := s.problem(d, rung)
	if err != nil {
		return Copy{Err: err.Error()}
	}
	score, err := p.Confirm(ctx, space.Point{}, false)
	if err != nil {
		return Copy{Err: err.Error()}
	}
	copy(c.Figures[:], score.Figures)
	c.Limits = score.Limits
	c.Reflection = reflections(ear.band, d.Feed.Impedance)
	return c
}

// listener keeps the first answer, the sweep over the band.
type listener struct {
	models.Simulator
	band *models.Response
}

// Simulate implements models.Simulator.
func (l *listener) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	r, err := l.Simulator.Simulate(ctx, d, q)
	if err == nil && l.band == nil {
		l.band = &r
	}
	return r, err
}

// plan holds every answer that a study needs beyond the design's own.
type plan struct {
	copies []Copy
	// ends are the dimensions that spread at plus and minus a half-width.
	ends  map[Dimension]*[2]Copy
	paths []path
}

// plan lays out what to answer. With nothing spread every copy is the design.
func (s *Study) plan(nominal *Copy) *plan {
	p := &plan{copies: make([]Copy, s.Samples), ends: map[Dimension]*[2]Copy{}}
	for i, e := range s.copies() {
		p.copies[i].Errors = e
		if !s.Spreads.Any() {
			p.copies[i] = *nominal
		}
	}
	for i, half := range s.Spreads {
		if half > 0 {
			p.ends[Dimension(i)] = &[2]Copy{}
		}
	}
	if s.matched() {
		p.paths = s.paths()
	}
	return p
}

// matched reports whether the model's impedance may be worked with.
func (s *Study) matched() bool { return !s.Rung.Indicative || s.Spec.TrustIndicative }

// answerAll answers the whole plan, each answer in its own place.
func (s *Study) answerAll(ctx context.Context, p *plan) error {
	type task struct {
		design models.Design
		into   *Copy
	}
	var tasks []task
	add := func(d models.Design, into *Copy) { tasks = append(tasks, task{d, into}) }
	for i, half := range s.Spreads {
		if ends := p.ends[Dimension(i)]; ends != nil {
			for k, by := range []float64{half, -half} {
				ends[k].Errors[i] = by
				add(Dimension(i).Shift(s.Design, by), &ends[k])
			}
		}
	}
	for i := range p.paths {
		for k := range p.paths[i].steps {
			step := &p.paths[i].steps[k]
			if step.by != 0 {
				add(p.paths[i].kind.apply(s.Design, step.by), &step.copy)
			}
		}
	}
	if s.Spreads.Any() {
		for i := range p.copies {
			add(s.apply(p.copies[i].Errors), &p.copies[i])
		}
	}
	done, failed := 0, 0
	return Each(ctx, len(tasks), s.Workers, func(i int) bool {
		errors := tasks[i].into.Errors
		*tasks[i].into = s.listen(ctx, tasks[i].design)
		tasks[i].into.Errors = errors
		return tasks[i].into.Err == ""
	}, func(ok bool) {
		done++
		if !ok {
			failed++
		}
		if s.Progress != nil {
			s.Progress(done, len(tasks), failed)
		}
	})
}

// Each does n things on so many workers and tells of each that is done, one
// at a time. It ends early only with ctx.
func Each(ctx context.Context, n, workers int, do func(i int) bool, told func(ok bool)) error {
	var wg sync.WaitGroup
	var mu sync.Mutex
	next := make(chan int)
	for range min(max(workers, 1), n) {
		wg.Go(func() {
			for i := range next {
				ok := do(i)
				mu.Lock()
				told(ok)
				mu.Unlock()
			}
		})
	}
	for i := 0; i < n && ctx.Err() == nil; i++ {
		select {
		case next <- i:
		case <-ctx.Done():
		}
	}
	close(next)
	wg.Wait()
	return ctx.Err()
}
