package moment

import (
	"context"
	"testing"
	"time"

	"turnwise/models"
)

// BenchmarkPlate is one evaluation of a search over a finite ground, as
// BenchmarkSweep has it over the infinite plane, in turn with that one: the
// ratio of their times, the least of each. The plates are solved beforehand,
// but for amortised, which puts the solving of eight sizes on 1,000
// candidates.
func BenchmarkPlate(b *testing.B) {
	const lambda = models.LightSpeed / 1e9
	disc := func(d float64) models.Ground { return models.Ground{Kind: models.Disc, Diameter: d * lambda} }
	cup := models.Ground{Kind: models.Cup, Diameter: 0.8 * lambda, Rim: 0.3 * lambda}
	for _, shape := range []struct {
		name    string
		grounds []models.Ground
	}{
		{"disc", []models.Ground{disc(1)}},
		{"cup", []models.Ground{cup}},
		{"eight", []models.Ground{disc(0.6), disc(0.7), disc(0.8), disc(0.9), disc(1), disc(1.1), disc(1.2), disc(1.3)}},
	} {
		b.Run(shape.name, func(b *testing.B) {
			s, err := New(Standard)
			if err != nil {
				b.Fatal(err)
			}
			q := models.Question{Hz: models.Band{From: 0.98e9, To: 1.02e9, Samples: 5}.Hz()}
			timed := func(g models.Ground) time.Duration {
				d := benchDesign(12)
				d.Ground = g
				start := time.Now()
				if _, err := s.Simulate(context.Background(), d, q); err != nil {
					b.Fatal(err)
				}
				return time.Since(start)
			}
			var solving time.Duration
			for _, g := range shape.grounds {
				solving += timed(g)
			}
			plane, plate := time.Hour, time.Hour
			for i := 0; b.Loop(); i++ {
				plane = min(plane, timed(models.Ground{}))
				plate = min(plate, timed(shape.grounds[i%len(shape.grounds)]))
			}
			b.ReportMetric(plate.Seconds()/plane.Seconds(), "times-infinite")
			b.ReportMetric((plate.Seconds()+solving.Seconds()/1000)/plane.Seconds(), "times-amortised")
			b.ReportMetric(solving.Seconds()/float64(len(shape.grounds)*len(q.Hz))*1e3, "ms/plate")
		})
	}
}
