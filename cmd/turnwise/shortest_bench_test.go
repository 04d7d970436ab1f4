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

// BenchmarkShortest looks for the shortest winding of a gain at one frequency
// over an infinite plane, lossless: axial ratio at most 3 dB, spacing at least
// 0.12 wavelengths, conductor radius 0.005, riser 0.02; laws of one knot, two
// and three. It searches the front of gain against length as anybody would,
// 20,000 standard simulations, the first sample a Latin hypercube alone, seeds
// 1 to 5, and confirms with the fine model. Run it with -benchtime 1x: it
// takes minutes a case.
func BenchmarkShortest(b *testing.B) {
	for _, gain := range []float64{13, 15} {
		for _, knots := range []int{1, 2, 3} {
			b.Run(fmt.Sprintf("gain=%g/knots=%d", gain, knots), func(b *testing.B) {
				for b.Loop() {
					var lengths []float64
					var hand float64
					for seed := uint64(1); seed <= 5; seed++ {
						length, byHand := shortest(b, gain, knots, seed, 20000)
						b.Logf("seed %d: %.3f wavelengths, by hand %.3f", seed, length, byHand)
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
func shortestSpec(gain float64, knots int) objectives.Spec {
	perfect := models.Material{Conductivity: 1e30, Density: 1}
	s := objectives.Spec{
		Band: models.Band{From: models.LightSpeed, To: models.LightSpeed, Samples: 1},
		Base: models.Design{Handedness: models.Right, Sense: models.Right, Feed: models.Feed{Height: 0.02, Impedance: 50}},
		Vary: []objectives.Vary{
			{Quantity: objectives.Turns, From: 2, To: 24, Step: 0.25, Knots: 1},
			{Quantity: objectives.Diameter, From: 0.15, To: 0.42, Knots: knots},
			{Quantity: objectives.Spacing, From: 0.12, To: 0.35, Knots: knots},
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
func shortest(b *testing.B, gain float64, knots int, seed uint64, evaluations int) (length, hand float64) {
	standard, err := moment.New(moment.Standard)
	if err != nil {
		b.Fatal(err)
	}
	fine, err := moment.New(moment.Fine)
	if err != nil {
		b.Fatal(err)
	}
	p, err := objectives.NewProblem(shortestSpec(gain, knots), objectives.Rung{Simulator: standard, Model: "full-wave"}, objectives.Rung{Simulator: fine, Model: "full-wave"})
	if err != nil {
		b.Fatal(err)
	}
	search := programme.New(p.Domain(), programme.Config{Plan: []int{evaluations}, Sample: 0.05, Genetic: 0.65, Simplex: 0.3, Seed: seed})
	defer search.Close()
	r, err := optimize.Run(context.Background(), p, search, nil, optimize.Options{Workers: 2, Evaluations: evaluations})
	if err != nil {
		b.Fatal(err)
	}
	confirm := func(ctx context.Context, c optimize.Candidate, _ bool) (optimize.Score, error) {
		return p.Confirm(ctx, c.Point, false)
	}
	settled, err := optimize.Settle(context.Background(), r.Evaluations, confirm, optimize.SettleOptions{Workers: 2, Most: 100})
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
