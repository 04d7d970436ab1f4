package main

import (
	"context"
	"fmt"
	"math"
	"sort"
	"testing"

	"turnwise/models"
	"turnwise/models/closedform"
	"turnwise/models/helix"
	"turnwise/models/moment"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/programme"
)

// shortestLaws are the windings that BenchmarkShortest looks for: knots of
// diameter and of spacing.
var shortestLaws = []struct {
	name              string
	diameter, spacing int
}{
	{"uniform", 1, 1},
	{"taper", 2, 1},
	{"curve", 3, 2},
}

// BenchmarkShortest looks for the shortest winding of a gain at one frequency
// over an infinite plane, lossless: axial ratio at most 3 dB, spacing at least
// 0.12 wavelengths, conductor radius 0.005, riser 0.02. It searches the front
// of gain against length as anybody would, 20,000 standard simulations, the
// first sample a Latin hypercube alone, seeds 1 to 5, and confirms with the
// fine model. wavelengths is the median. Run it with -benchtime 1x: it takes
// minutes a seed.
func BenchmarkShortest(b *testing.B) { shortestOf(b, shortestSpec, longSearch(20000), 5) }

// longSearch is a search by the genetic searcher and simplexes.
func longSearch(evaluations int) programme.Config {
	return programme.Config{Plan: []int{evaluations}, Sample: 0.05, Genetic: 0.65, Simplex: 0.3}
}

// BenchmarkShortestLearned has a tenth of the simulations and the learned
// searcher, seeds 1 to 5.
func BenchmarkShortestLearned(b *testing.B) { shortestOf(b, shortestSpec, learnedSearch(2000), 5) }

// learnedSearch is a search by the learned searcher.
func learnedSearch(evaluations int) programme.Config {
	return programme.Config{Plan: []int{evaluations}, Sample: 0.05, Genetic: 0.9, Simplex: 0.05, Learned: evaluations}
}

// BenchmarkShortestBand is the same over a band of 4 %, whatever the error of
// scale up to 1 %: over as much more of the band at either end; one seed.
func BenchmarkShortestBand(b *testing.B) {
	shortestOf(b, func(gain float64, diameter, spacing int) objectives.Spec {
		s := shortestSpec(gain, diameter, spacing)
		s.Band = models.Band{From: 0.98 * 0.99 * models.LightSpeed, To: 1.02 * 1.01 * models.LightSpeed, Samples: 7}
		return s
	}, learnedSearch(2000), 1)
}

func shortestOf(b *testing.B, spec func(gain float64, diameter, spacing int) objectives.Spec, c programme.Config, seeds uint64) {
	for _, gain := range []float64{13, 15} {
		for _, law := range shortestLaws {
			b.Run(fmt.Sprintf("gain=%g/%s", gain, law.name), func(b *testing.B) {
				for b.Loop() {
					var lengths []float64
					var hand float64
					for c.Seed = 1; c.Seed <= seeds; c.Seed++ {
						length, byHand := shortest(b, spec(gain, law.diameter, law.spacing), gain, c)
						b.Logf("seed %d: %.3f wavelengths, by hand %.3f", c.Seed, length, byHand)
						lengths = append(lengths, length)
						hand = byHand
					}
					sort.Float64s(lengths)
					b.ReportMetric(lengths[len(lengths)/2], "wavelengths")
					b.ReportMetric(lengths[len(lengths)-1], "wavelengths-worst")
					b.ReportMetric(hand, "hand-wavelengths")
				}
			})
		}
	}
}

// shortestSpec is the problem at 299.792458 MHz, where a wavelength is 1 m.
func shortestSpec(gain float64, diameter, spacing int) objectives.Spec {
	perfect := models.Material{Conductivity: 1e30, Density: 1}
	s := objectives.Spec{
		Band: models.Band{From: models.LightSpeed, To: models.LightSpeed, Samples: 1},
		Base: models.Design{Handedness: models.Right, Sense: models.Right, Feed: models.Feed{Height: 0.02, Impedance: 50}},
		Vary: []objectives.Vary{
			{Quantity: objectives.Turns, From: 2, To: 24, Step: 0.25, Knots: 1},
			{Quantity: objectives.Diameter, From: 0.15, To: 0.42, Knots: diameter},
			{Quantity: objectives.Spacing, From: 0.12, To: 0.35, Knots: spacing},
		},
		Stock: []objectives.Stock{{Name: "wire", Diameter: 0.01, Material: perfect}},
		Aims:  []objectives.Aim{{Figure: objectives.Gain, Most: true}, {Figure: objectives.Length}},
		Limits: []objectives.Limit{
			{Figure: objectives.Gain, AtLeast: true, Value: gain - 3},
			{Figure: objectives.AxialRatio, Value: 3},
		},
	}
	s.Base.Conductor = models.Conductor{Diameter: 0.01, Material: perfect}
	return s
}

// shortest searches once and gives the length in wavelengths, and what the
// common hand formula gives for the gain.
func shortest(b *testing.B, spec objectives.Spec, gain float64, c programme.Config) (length, hand float64) {
	p, last := solvedAt(b, spec, moment.Standard), solvedAt(b, spec, moment.Fine)
	search := programme.New(p.Domain(), c)
	defer search.Close()
	r, err := optimize.Run(context.Background(), p, search, nil, optimize.Options{Workers: 2, Evaluations: c.Plan[0]})
	if err != nil {
		b.Fatal(err)
	}
	confirm := func(ctx context.Context, c optimize.Candidate, _ bool) (optimize.Score, error) {
		return last.Confirm(ctx, c.Point, false)
	}
	settled, err := optimize.Settle(context.Background(), r.Evaluations, confirm, optimize.SettleOptions{Workers: 2, Most: 200}) // as a brief has it
	if err != nil {
		b.Fatal(err)
	}
	length = math.Inf(1)
	var best optimize.Member
	for _, m := range settled.Front {
		if x := m.Figures[objectives.Length]; m.Figures[objectives.Gain] >= gain && x < length {
			best, length = m, x
		}
	}
	if math.IsInf(length, 1) {
		return length, length
	}
	d := p.Layout.Design(best.Point)
	curve, err := helix.Wind(&d)
	if err != nil {
		b.Fatal(err)
	}
	b.Logf("%v: gain %.3f dBic", best.Point, best.Figures[objectives.Gain])
	return length, closedform.Kraus1949Length(curve, models.LightSpeed, math.Pow(10, gain/10))
}

// solvedAt binds a spec to the full-wave model of one fidelity.
func solvedAt(b *testing.B, spec objectives.Spec, f moment.Fidelity) *objectives.Problem {
	b.Helper()
	solver, err := moment.New(f)
	if err != nil {
		b.Fatal(err)
	}
	p, err := objectives.NewProblem(spec, objectives.Rung{Simulator: solver, Model: "full-wave", Fidelity: string(f)})
	if err != nil {
		b.Fatal(err)
	}
	return p
}
