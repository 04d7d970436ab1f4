package moment

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"turnwise/models"
)

// benchDesign is a uniform winding of C = 1.05 λ and 13° at 1 GHz.
func benchDesign(turns float64) models.Design {
	const lambda = models.LightSpeed / 1e9
	return models.Design{
		Turns: turns, Diameter: models.Law{1.05 * lambda / math.Pi},
		Spacing:    models.Law{1.05 * lambda * math.Tan(13*math.Pi/180)},
		Handedness: models.Right,
		Conductor:  models.Conductor{Diameter: 0.01 * lambda, Material: models.Material{Conductivity: 58e6, Density: 8890}},
		Feed:       models.Feed{Height: 0.02 * lambda, Impedance: 50},
	}
}

// benchTaper is the same with tapers of three knots.
func benchTaper(turns float64) models.Design {
	d := benchDesign(turns)
	c, s := d.Diameter[0], d.Spacing[0]
	d.Diameter = models.Law{0.9 * c, c, 0.85 * c}
	d.Spacing = models.Law{0.8 * s, s, 1.1 * s}
	return d
}

// BenchmarkSweep is one evaluation of a search: five equally spaced
// frequencies, gain on the axis, axial ratio and impedance. Its yardsticks are
// the least time over the least time of a yardstick, which others on the
// machine disturb least.
func BenchmarkSweep(b *testing.B) {
	for _, shape := range []struct {
		name string
		of   func(float64) models.Design
	}{{"turns", benchDesign}, {"taper", benchTaper}} {
		for _, turns := range []float64{6, 12, 24} {
			b.Run(fmt.Sprintf("%s=%g", shape.name, turns), func(b *testing.B) {
				w := newWorker()
				set, _ := Standard.settings()
				d := shape.of(turns)
				q := models.Question{Hz: models.Band{From: 0.98e9, To: 1.02e9, Samples: 5}.Hz()}
				samples := make([]models.Sample, len(q.Hz))
				sweep := func() {
					if err := w.answer(context.Background(), set, &d, q, samples); err != nil {
						b.Fatal(err)
					}
				}
				sweep()
				yard := yardstick()
				best := math.Inf(1)
				b.ReportAllocs()
				for b.Loop() {
					start := time.Now()
					sweep()
					best = min(best, time.Since(start).Seconds())
				}
				b.ReportMetric(best/min(yard, yardstick()), "yardsticks")
			})
		}
	}
}

const yardPairs = 100000

var yardSink float64

var yardX, yardY, yardZ = func() (x, y, z []float64) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range yardPairs {
		x, y, z = append(x, rng.Float64()), append(y, rng.Float64()), append(z, rng.Float64())
	}
	return x, y, z
}()

// yard evaluates e^{−jkR}/R for as many pairs, plainly.
func yard() {
	dx, dy, dz := yardX, yardY, yardZ
	const a2, k = 2.5e-5, 21.0
	var re, im float64
	for i := 0; i < yardPairs; i++ {
		r := math.Sqrt(dx[i]*dx[i] + dy[i]*dy[i] + dz[i]*dz[i] + a2)
		s, c := math.Sincos(k * r)
		re += c / r
		im -= s / r
	}
	yardSink = re + im
}

// yardstick is the time of one yard in seconds, the least of many.
func yardstick() float64 {
	best := math.Inf(1)
	for range 100 {
		start := time.Now()
		yard()
		best = min(best, time.Since(start).Seconds())
	}
	return best
}

// BenchmarkYardstick is what a sweep's time is measured against.
func BenchmarkYardstick(b *testing.B) {
	for b.Loop() {
		yard()
	}
	b.ReportMetric(b.Elapsed().Seconds()/float64(b.N)/yardPairs*1e9, "ns/pair")
}
