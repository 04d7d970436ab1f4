package objectives

import (
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
// parameter have none. The others are the figures themselves at one frequency.
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
	traitCount int = iota

	firstPlain = gainTrait
)

// plainly is the figure that a plain trait is.
var plainly = [traitCount]Figure{
	gainTrait: Gain, efficiencyTrait: Efficiency, coneTrait: AxialRatioCone, edgeTrait: EdgeGain,
	beamwidthTrait: Beamwidth, sidelobeTrait: Sidelobe, rearTrait: FrontToBack,
}

// traitsOf lists what each figure is read from. Those of the geometry need
// nothing; those without a list are no worst case over the band's samples.
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
}

// kinds are the traits that aims and limits are read from; nil where one of
// them cannot be.
func (p *Problem) kinds() []trait {
	var kinds []trait
	for _, f := range p.Judged() {
		if Figures[f].Geometry {
			continue
		}
		if traitsOf[f] == nil {
			return nil
		}
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

// traitsIn are the traits of one answer, a row for each of its samples.
func traitsIn(kinds []trait, d *models.Design, r *models.Response) []float64 {
	out := make([]float64, 0, len(kinds)*len(r.Samples))
	for i := range r.Samples {
		s := &r.Samples[i]
		reflection := models.Reflection(s.Input, d.Feed.Impedance)
		row := readSample(d, s, r.Answered)
		for _, k := range kinds {
			switch k {
			case reflectionReal:
				out = append(out, real(reflection))
			case reflectionImaginary:
				out = append(out, imag(reflection))
			case unround:
				out = append(out, unroundness(s, d.Wanted()))
			default:
				out = append(out, row[plainly[k]])
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

// Recollect gives evaluations of the search that were read from a record the
// traits they had, from the answers in memory: a search that goes on is told
// what it was told before.
func (p *Problem) Recollect(past []optimize.Evaluation) error {
	kinds := p.kinds()
	if kinds == nil {
		return nil
	}
	question := p.question(p.Band.Hz(), p.needed())
	for i := range past {
		e := &past[i]
		if e.Status != optimize.OK {
			continue
		}
		e.Traits = nil
		model := p.rungs[min(e.Rung, len(p.rungs)-1)].Simulator.Identity()
		for _, d := range p.spread(p.Layout.Design(e.Point)) {
			r, _, ok := recalled(p.Memory, QuestionKey(d.Hash(), question, model))
			if !ok {
				return fmt.Errorf("the record has no answer to candidate %d, which was answered", e.ID)
			}
			e.Traits = append(e.Traits, traitsIn(kinds, &d, &r)...)
		}
	}
	return nil
}
