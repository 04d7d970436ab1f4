package objectives

import (
	"context"
	"fmt"
	"math"
	"slices"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// trait is one smooth quantity of a design at one frequency.
type trait int

// The traits. A VSWR has a kink where the match is perfect and an axial ratio
// where the wave is circular; the reflection coefficient and the fourth Stokes
// parameter have none. The others are the figures themselves at one frequency,
// or those of the whole winding, equal at all.
const (
	reflectionReal trait = iota
	reflectionImaginary
	unround // 1 − V/I: 0 circular in the wanted sense, 1 linear, 2 circular in the other
	gainTrait
	efficiencyTrait
	coneTrait
	edgeTrait
	beamwidthTrait
	sidelobeTrait
	rearTrait
	gainBandwidthTrait
	vswrBandwidthTrait
	headroomTrait
	traitCount int = iota

	firstPlain = gainTrait
	firstWhole = gainBandwidthTrait
)

// plainly is the figure that a plain trait is.
var plainly = [traitCount]Figure{
	gainTrait: Gain, efficiencyTrait: Efficiency, coneTrait: AxialRatioCone, edgeTrait: EdgeGain,
	beamwidthTrait: Beamwidth, sidelobeTrait: Sidelobe, rearTrait: FrontToBack,
	gainBandwidthTrait: GainBandwidth, vswrBandwidthTrait: VSWRBandwidth, headroomTrait: Headroom,
}

// traitsOf lists what each figure is read from. Those of the geometry need
// nothing.
var traitsOf = [FigureCount][]trait{
	Gain:           {gainTrait},
	RealisedGain:   {gainTrait, reflectionReal, reflectionImaginary},
	AxialRatio:     {unround},
	AxialRatioCone: {coneTrait},
	EdgeGain:       {edgeTrait},
	VSWR:           {reflectionReal, reflectionImaginary},
	Beamwidth:      {beamwidthTrait},
	Sidelobe:       {sidelobeTrait},
	Efficiency:     {efficiencyTrait},
	FrontToBack:    {rearTrait},
	GainBandwidth:  {gainBandwidthTrait},
	VSWRBandwidth:  {vswrBandwidthTrait},
	Headroom:       {headroomTrait},
}

// kinds are the traits that aims and limits are read from; none where the
// geometry decides them all.
func (p *Problem) kinds() []trait {
	var kinds []trait
	for _, f := range p.Judged() {
		for _, k := range traitsOf[f] {
			if !slices.Contains(kinds, k) {
				kinds = append(kinds, k)
			}
		}
	}
	return kinds
}

// traits are the problem's, for a searcher that learns.
func (p *Problem) traits() *optimize.Traits {
	kinds := p.kinds()
	if kinds == nil {
		return nil
	}
	return &optimize.Traits{Kinds: len(kinds), Read: func(pt space.Point, traits []float64) (aims, limits []float64) {
		windings := p.spread(p.Layout.Design(pt))
		each := len(traits) / len(windings)
		rows := make([]Row, len(windings))
		for i := range windings {
			rows[i] = emptyRow()
			if curve, err := helix.Wind(&windings[i]); err == nil {
				readGeometry(&rows[i], curve.Geometry())
			}
			rows[i].readTraits(kinds, traits[i*each:(i+1)*each])
		}
		s := p.ScoreOf(p.standing(rows), nil)
		return s.Aims, s.Limits
	}}
}

// traitsIn are the traits of a winding with these figures, a row for each of
// its answer's samples.
func traitsIn(kinds []trait, figures *Row, d *models.Design, r *models.Response) []float64 {
	out := make([]float64, 0, len(kinds)*len(r.Samples))
	for i := range r.Samples {
		s := &r.Samples[i]
		reflection := models.Reflection(s.Input, d.Feed.Impedance)
		row := readSample(d, s, r.Answered)
		for _, k := range kinds {
			switch {
			case k == reflectionReal:
				out = append(out, real(reflection))
			case k == reflectionImaginary:
				out = append(out, imag(reflection))
			case k == unround:
				out = append(out, unroundness(s, d.Wanted()))
			case k < firstWhole:
				out = append(out, row[plainly[k]])
			default:
				out = append(out, figures[plainly[k]])
			}
		}
	}
	return out
}

// readTraits fills in the figures that rows of traits decide: of each, the
// worst.
func (r *Row) readTraits(kinds []trait, traits []float64) {
	var of [traitCount]float64
	var has [traitCount]bool
	for ; len(traits) > 0; traits = traits[len(kinds):] {
		for i, k := range kinds {
			of[k], has[k] = traits[i], true
			if k >= firstPlain {
				r.worst(plainly[k], traits[i])
			}
		}
		if has[unround] {
			r.worst(AxialRatio, axialRatioOf(of[unround]))
		}
		if has[reflectionReal] {
			vswr := models.VSWROf(math.Hypot(of[reflectionReal], of[reflectionImaginary]))
			r.worst(VSWR, vswr)
			if has[gainTrait] {
				r.worst(RealisedGain, of[gainTrait]+Decibels(Transmission(vswr)))
			}
		}
	}
}

// unroundness is 1 − V/I of a sample's wave on the axis. With r the ratio of
// its axes V/I is 2r/(1 + r²), negative in the sense that is not wanted.
func unroundness(s *models.Sample, wanted models.Sense) float64 {
	r := math.Pow(10, s.AxialRatio/20)
	u := (r - 1) * (r - 1) / (1 + r*r)
	if s.Sense == -wanted {
		return 2 - u
	}
	return u
}

// axialRatioOf turns unroundness back: linear and what is in the other sense
// have the highest.
func axialRatioOf(u float64) float64 {
	u = math.Max(u, 0)
	if !(u < 1) {
		return models.AxialRatioCap
	}
	return math.Min(20*math.Log10((1+math.Sqrt(u*(2-u)))/(1-u)), models.AxialRatioCap)
}

// Recollect gives evaluations that were read from a record the traits they
// had, by asking the memory again what they rest on: a search that goes on is
// told what it was told before. It stops short where ctx ends.
func (p *Problem) Recollect(ctx context.Context, past []optimize.Evaluation) error {
	if p.kinds() == nil {
		return nil
	}
	for i := range past {
		if past[i].Status != optimize.OK {
			continue
		}
		s, err := p.Evaluate(ctx, past[i].Candidate)
		if ctx.Err() != nil {
			return nil
		}
		if err != nil {
			return fmt.Errorf("candidate %d was answered, and now: %w", past[i].ID, err)
		}
		past[i].Traits = s.Traits
	}
	return nil
}
