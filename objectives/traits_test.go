package objectives_test

import (
	"context"
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/space"
)

// everyJudge is a spec that is held to all figures.
func everyJudge() objectives.Spec {
	s := plated()
	s.Aims = append(s.Aims, objectives.Aim{Figure: objectives.Length})
	for _, f := range []objectives.Figure{objectives.Gain, objectives.RealisedGain, objectives.AxialRatioCone, objectives.EdgeGain,
		objectives.Beamwidth, objectives.Sidelobe, objectives.Efficiency, objectives.GainBandwidth, objectives.VSWRBandwidth, objectives.Headroom} {
		s.Limits = append(s.Limits, objectives.Limit{Figure: f, AtLeast: objectives.Figures[f].More, Value: 1})
	}
	return s
}

// What is read from a score's traits is the score: the kinks, caps and
// percentiles on the way are the problem's own.
func TestTraitsAreReadBack(t *testing.T) {
	margins := []objectives.Margins{{}, {Diameter: 1e-3, Spacing: 1e-3}, {Diameter: 1e-3, FeedHeight: 2e-4, Percentile: 80}}
	rapid.Check(t, func(rt *rapid.T) {
		s := everyJudge()
		s.Margins = rapid.SampledFrom(margins).Draw(rt, "margins")
		slope := rapid.Float64Range(-60, 60).Draw(rt, "slope")
		sim := tones{
			gain:       func(hz float64) float64 { return 8 + slope*(hz/1e9-1) },
			axialRatio: rapid.SampledFrom([]float64{0, 1e-6, 0.3, 3, 20, 59.999, 60}).Draw(rt, "axial ratio"),
			sense:      rapid.SampledFrom([]models.Sense{models.Right, models.Left, 0}).Draw(rt, "sense"),
			port:       complex(rapid.Float64Range(-5, 400).Draw(rt, "R"), rapid.Float64Range(-300, 300).Draw(rt, "X")),
		}
		p := problem(t, s, sim)
		pt := uniform(p)
		got, err := p.Evaluate(context.Background(), optimize.Candidate{Point: pt})
		if err != nil {
			rt.Fatal(err)
		}
		traits := p.Domain().Traits
		if want := traits.Kinds * s.Band.Samples * p.Windings(); len(got.Traits) != want {
			rt.Fatalf("%d traits, want %d", len(got.Traits), want)
		}
		aims, limits := traits.Read(pt, got.Traits)
		for i, x := range slices.Concat(aims, limits) {
			if want := slices.Concat(got.Aims, got.Limits)[i]; !(math.Abs(x-want) <= 1e-6*(1+math.Abs(want))) {
				rt.Errorf("aim or limit %d: %g is read, %g was answered", i, x, want)
			}
		}
	})
}

// A point's dimensions are its own, whatever its traits.
func TestDimensionsAreNoTraits(t *testing.T) {
	p := problem(t, spec(), tones{gain: flat(10), sense: models.Right, port: 50})
	one, err := p.Evaluate(context.Background(), optimize.Candidate{Point: uniform(p)})
	if err != nil {
		t.Fatal(err)
	}
	longer := p.Layout.Space.Canonical(space.Point{8, 0.095, 0.095, 0.095, 0.068, 0.068, 1, 6e-3})
	other, err := p.Evaluate(context.Background(), optimize.Candidate{Point: longer})
	if err != nil {
		t.Fatal(err)
	}
	aims, limits := p.Domain().Traits.Read(longer, one.Traits)
	if aims[1] != other.Aims[1] || limits[2] != other.Limits[2] || aims[1] == one.Aims[1] {
		t.Errorf("length %g and its limit %g are read, want %g and %g", aims[1], limits[2], other.Aims[1], other.Limits[2])
	}
}

// Where the geometry decides all, nothing is to be learned.
func TestGeometryHasNoTraits(t *testing.T) {
	s := spec()
	s.Aims, s.Limits = []objectives.Aim{{Figure: objectives.Mass}}, nil
	if p := problem(t, s, tones{}); p.Domain().Traits != nil {
		t.Error("dimensions alone have traits")
	}
}

// A search that goes on is told the traits it was told before, bit for bit,
// and nothing is asked twice.
func TestTraitsAreRecollected(t *testing.T) {
	s := spec()
	s.Margins = objectives.Margins{Diameter: 1e-3}
	s.Limits = append(s.Limits, objectives.Limit{Figure: objectives.GainBandwidth, AtLeast: true, Value: 2})
	var asked []models.Question
	p := problem(t, s, tones{asked: &asked, gain: func(hz float64) float64 { return hz / 1.1e8 }, axialRatio: 1.1, sense: models.Right, port: 77 - 13i})
	known := shelf{}
	p.Memory = known
	e := optimize.Evaluation{Candidate: optimize.Candidate{ID: 7, Point: uniform(p)}, Status: optimize.OK}
	var err error
	if e.Score, err = p.Evaluate(context.Background(), e.Candidate); err != nil {
		t.Fatal(err)
	}
	for _, a := range e.Answers {
		known[a.Key] = a.Response
	}
	past := []optimize.Evaluation{e, {Status: optimize.Failed}}
	past[0].Traits = nil
	once := len(asked)
	if err := p.Recollect(context.Background(), past); err != nil {
		t.Fatal(err)
	}
	if len(e.Traits) == 0 || !slices.Equal(past[0].Traits, e.Traits) || past[1].Traits != nil {
		t.Errorf("recollected %v and %v, want %v and none", past[0].Traits, past[1].Traits, e.Traits)
	}
	if len(asked) != once {
		t.Errorf("%d questions were asked anew", len(asked)-once)
	}
}

// A confirmed member has other samples than a search's, and no traits.
func TestConfirmedHasNoTraits(t *testing.T) {
	p := problem(t, spec(), tones{gain: flat(10), sense: models.Right, port: 50})
	if s, err := p.Confirm(context.Background(), uniform(p), false); err != nil || s.Traits != nil {
		t.Errorf("traits %v (%v)", s.Traits, err)
	}
}
