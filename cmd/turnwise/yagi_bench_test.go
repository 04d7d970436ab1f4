package main

import (
	"context"
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
	"turnwise/models/moment"
	"turnwise/optimize"
	"turnwise/optimize/programme"
	"turnwise/optimize/space"
)

// BenchmarkYagi checks searcher and solver together on a published optimum:
// Chen and Cheng, IEEE Trans. AP-23, 8, 1975 (memory). Six elements of radius
// 0.003369 wavelengths; lengths 0.510 0.490 0.430×4 spaced 0.250 0.310×4 start
// at 7.5 to 7.9 over a half-wave dipole; with lengths and spacings free they
// reach 13.36, 11.26 dB, or better. Run it with -benchtime 1x.
func BenchmarkYagi(b *testing.B) {
	for b.Loop() {
		y := newYagi()
		start := space.Point{0.510, 0.490, 0.430, 0.430, 0.430, 0.430, 0.250, 0.310, 0.310, 0.310, 0.310}
		search := programme.New(optimize.Domain{Space: y.space, Aims: 1}, programme.Config{
			Plan: []int{4000}, Sample: 0.02, Genetic: 0.4, Simplex: 0.58, Seed: 1, Start: []space.Point{start},
		})
		r, err := optimize.Run(context.Background(), y, search, nil, optimize.Options{Workers: 2, Evaluations: 4000})
		search.Close()
		if err != nil {
			b.Fatal(err)
		}
		best := math.Inf(1)
		for i := range r.Evaluations {
			if e := &r.Evaluations[i]; e.Status == optimize.OK && e.Aims[0] < best {
				best = e.Aims[0]
			}
		}
		b.ReportMetric(-r.Evaluations[0].Aims[0], "start-dB")
		b.ReportMetric(-best, "dB-over-dipole")
	}
}

// yagi answers an array of six elements: lengths, then spacings, wavelengths.
type yagi struct{ space space.Space }

const yagiElements = 6

func newYagi() *yagi {
	y := &yagi{}
	for i := range yagiElements {
		y.space = append(y.space, space.NewReal(fmt.Sprintf("length %d", i+1), 0.38, 0.54, 1e-5))
	}
	for i := range yagiElements - 1 {
		y.space = append(y.space, space.NewReal(fmt.Sprintf("spacing %d", i+1), 0.12, 0.48, 1e-5))
	}
	return y
}

// Evaluate gives the directivity along the boom over that of a half-wave
// dipole, 1.641, in decibels, to be made the most of.
func (y *yagi) Evaluate(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
	a := moment.Antenna{Ports: []moment.Port{{Wire: 1, At: 0.5, Gap: 0.01}}}
	x := 0.0
	for i := range yagiElements {
		if i > 0 {
			x += c.Point[yagiElements+i-1]
		}
		half := c.Point[i] / 2
		a.Wires = append(a.Wires, moment.Wire{
			Curve: moment.Straight{A: r3.Vec{X: x, Z: -half}, B: r3.Vec{X: x, Z: half}}, To: 1, Radius: 0.003369, Elements: 8,
		})
	}
	var s optimize.Score
	err := moment.Analyse(ctx, &a, moment.Standard, []float64{models.LightSpeed}, func(now *moment.Solution) error {
		s.Aims = []float64{-10 * math.Log10(now.Directivity(math.Pi/2, 0)/1.641)}
		return nil
	})
	return s, err
}
