package simtest

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strings"
	"sync/atomic"
	"testing"

	"turnwise/models"
	"turnwise/models/helix"
)

// sample is a simulator that keeps the contract, and breaks it where told.
type sample struct {
	name   func() string
	before func(ctx context.Context, d *models.Design, q *models.Question) (models.Response, error, bool)
	after  func(r *models.Response)
}

func (s *sample) Identity() string {
	if s.name != nil {
		return s.name()
	}
	return "sample 1"
}

func (s *sample) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	if s.before != nil {
		if r, err, done := s.before(ctx, &d, &q); done {
			return r, err
		}
	}
	if len(q.Hz) == 0 || q.Outputs&models.Cone != 0 && !(q.Cone > 0 && q.Cone < 1.6) {
		return models.Response{}, errors.New("no such question")
	}
	for _, hz := range q.Hz {
		if !(hz > 0 && hz < math.MaxFloat64) {
			return models.Response{}, errors.New("no such frequency")
		}
	}
	if err := helix.Check(&d); err != nil {
		return models.Response{}, err
	}
	r := models.Response{Answered: q.Outputs | models.Axis, Statement: "a sample", Warnings: []string{"none"}}
	for _, hz := range q.Hz {
		if err := ctx.Err(); err != nil {
			return models.Response{}, err
		}
		r.Samples = append(r.Samples, at(hz, &d, q.Outputs))
	}
	if s.after != nil {
		s.after(&r)
	}
	return r, nil
}

// at is what a made-up antenna answers.
func at(hz float64, d *models.Design, o models.Outputs) models.Sample {
	x := d.Turns * hz / 1e9
	gain := models.Circular{Right: x, Left: x / 100}
	s := models.Sample{Hz: hz, Port: complex(100+x, x), Input: complex(50+x, x), Gain: gain, Directivity: x * 1.1, Efficiency: 0.9}
	s.AxialRatio, s.Sense = models.AxialRatio(gain)
	if o&models.Cone != 0 {
		s.ConeAxialRatio, s.EdgeGain = models.Circular{Right: 3, Left: 60}, models.Circular{Right: x / 2, Left: x / 50}
	}
	if o&models.Cuts != 0 {
		s.PeakDirectivity, s.Beamwidth, s.Sidelobe = s.Directivity, 0.8, -9
	}
	if o&models.Balance != 0 {
		s.PowerBalance = 1
	}
	if o&models.Spread != 0 {
		s.SpreadPort = s.Port + 1
	}
	if o&models.Pattern != 0 {
		s.Pattern = []models.Cut{{Rays: []models.Ray{{Gain: gain, AxialRatio: s.AxialRatio}}}}
	}
	return s
}

func TestSampleKeepsTheContract(t *testing.T) {
	Run(t, func(*testing.T) models.Simulator { return &sample{} })
}

type (
	interrupt = func(context.Context, *models.Design, *models.Question) (models.Response, error, bool)
	spoil     = func(*models.Response)
)

// Every clause can fail, and on the fault it is there for.
func TestClausesCanFail(t *testing.T) {
	var calls atomic.Int64
	pass := func() (models.Response, error, bool) { return models.Response{}, nil, false }
	kept := at(1e9, &good()[0], everything)
	for _, c := range []struct {
		clause, words string
		make          func() *sample
	}{
		{"identity", "one line", func() *sample { return &sample{name: func() string { return " " }} }},
		{"identity", "one line", func() *sample { return &sample{name: func() string { return "a\nb" }} }},
		{"identity", "after an answer", func() *sample {
			return &sample{name: func() string { return fmt.Sprint("sample ", calls.Add(1)) }}
		}},
		{"identity", "made alike", func() *sample {
			n := fmt.Sprint("sample ", calls.Add(1))
			return &sample{name: func() string { return n }}
		}},
		{"one sample", "samples for", spoilt(func(r *models.Response) { r.Samples = r.Samples[:len(r.Samples)-1] })},
		{"one sample", "is for", spoilt(func(r *models.Response) {
			r.Samples[0], r.Samples[len(r.Samples)-1] = r.Samples[len(r.Samples)-1], r.Samples[0]
		})},
		{"one sample", "NaN", spoilt(func(r *models.Response) { r.Samples[0].Directivity = math.NaN() })},
		{"one sample", "Inf", spoilt(func(r *models.Response) { r.Samples[0].Port = complex(1, math.Inf(1)) })},
		{"one sample", "answered outputs", spoilt(func(r *models.Response) { r.Answered &^= models.Axis })},
		{"one sample", "answered outputs", spoilt(func(r *models.Response) { r.Answered |= 1 << 20 })},
		{"one sample", "what the model is worth", spoilt(func(r *models.Response) { r.Statement = "" })},
		{"one sample", "no impedance", spoilt(func(r *models.Response) { r.Samples[0].Input = 0 })},
		{"one sample", "efficiency is 1.5", spoilt(func(r *models.Response) { r.Samples[0].Efficiency = 1.5 })},
		{"one sample", "left gain is -1", spoilt(func(r *models.Response) { r.Samples[0].Gain.Left = -1 })},
		{"one sample", "gains beside it", spoilt(func(r *models.Response) { r.Samples[0].AxialRatio += 1 })},
		{"one sample", "the sense is", spoilt(func(r *models.Response) { r.Samples[0].Sense = models.Left })},
		{"one sample", "the cone is set", spoilt(func(r *models.Response) { r.Samples[0].EdgeGain.Right = 1 })},
		{"one sample", "cuts tell is set", spoilt(func(r *models.Response) { r.Samples[0].Beamwidth = 1 })},
		{"one sample", "balance is set", spoilt(func(r *models.Response) { r.Samples[0].PowerBalance = 1 })},
		{"one sample", "spread port is set", spoilt(func(r *models.Response) { r.Samples[0].SpreadPort = 1 })},
		{"one sample", "pattern is set", spoilt(func(r *models.Response) { r.Samples[0].Pattern = kept.Pattern })},
		{"outputs", "over the cone is 0", spoilt(func(r *models.Response) { r.Samples[0].ConeAxialRatio = models.Circular{} })},
		{"outputs", "beamwidth is 0", spoilt(func(r *models.Response) { r.Samples[0].Beamwidth = 0 })},
		{"outputs", "peak directivity is", spoilt(func(r *models.Response) { r.Samples[0].PeakDirectivity *= 0.5 })},
		{"outputs", "sidelobe is 3", spoilt(func(r *models.Response) { r.Samples[0].Sidelobe = 3 })},
		{"outputs", "no rear", spoilt(func(r *models.Response) {
			if r.Answered&models.Cuts != 0 {
				r.Samples[0].RearGain = 0.1
			}
		})},
		{"outputs", "behind an infinite plane", spoilt(func(r *models.Response) {
			if r.Answered&models.Pattern != 0 {
				r.Samples[0].Pattern[0].Rays[0].Angle = 2
			}
		})},
		{"outputs", "power balance is 0", spoilt(func(r *models.Response) { r.Samples[0].PowerBalance = 0 })},
		{"outputs", "spread port", spoilt(func(r *models.Response) { r.Samples[0].SpreadPort = 0 })},
		{"outputs", "number of cuts", spoilt(func(r *models.Response) { r.Samples[0].Pattern = nil })},
		{"outputs", "number of directions", spoilt(func(r *models.Response) { r.Samples[0].Pattern = []models.Cut{{}} })},
		{"outputs", "either alone or among all", interrupted(func(_ context.Context, _ *models.Design, q *models.Question) (models.Response, error, bool) {
			if q.Outputs == models.Balance {
				q.Outputs = models.Axis
			}
			return pass()
		})},
		{"outputs", "the axis reads", interrupted(func(_ context.Context, d *models.Design, q *models.Question) (models.Response, error, bool) {
			if q.Outputs == models.Cuts {
				d.Turns += 0.1
			}
			return pass()
		})},
		{"repeats", "and then", spoilt(func(r *models.Response) { r.Samples[0].Port += complex(float64(calls.Add(1))*1e-9, 0) })},
		{"answers many", "among others", spoilt(func(r *models.Response) {
			if calls.Add(1) > int64(len(questions())) {
				r.Samples[0].Port += 1e-9
			}
		})},
		{"ends with", "cancelled before", interrupted(func(ctx context.Context, _ *models.Design, _ *models.Question) (models.Response, error, bool) {
			return models.Response{}, errors.New("not now"), ctx.Err() != nil
		})},
		{"ends with", "time was over", interrupted(func(ctx context.Context, _ *models.Design, _ *models.Question) (models.Response, error, bool) {
			return models.Response{}, context.Canceled, ctx.Err() != nil
		})},
		{"ends with", "cancelled at the start", func() *sample {
			return &sample{before: func(ctx context.Context, d *models.Design, q *models.Question) (models.Response, error, bool) {
				if len(q.Hz) < 1000 {
					return pass()
				}
				r, err := (&sample{}).Simulate(context.WithoutCancel(ctx), *d, *q)
				return r, err, true
			}}
		}},
		{"ends with", "after a cancelled question", spoiltAfter(&calls)},
		{"refuses bad questions", "is answered", interrupted(func(_ context.Context, _ *models.Design, q *models.Question) (models.Response, error, bool) {
			return models.Response{}, nil, len(q.Hz) == 0
		})},
		{"refuses bad questions", "without a reason", interrupted(func(_ context.Context, _ *models.Design, q *models.Question) (models.Response, error, bool) {
			return models.Response{}, errors.New(" "), len(q.Hz) == 0
		})},
		{"refuses bad designs", "panics", interrupted(func(_ context.Context, d *models.Design, _ *models.Question) (models.Response, error, bool) {
			_ = d.Diameter[0]
			return pass()
		})},
		{"refuses bad designs", "is answered", interrupted(func(_ context.Context, d *models.Design, _ *models.Question) (models.Response, error, bool) {
			return models.Response{}, nil, math.IsNaN(d.Turns)
		})},
		{"leaves what", "is another after", interrupted(func(_ context.Context, d *models.Design, _ *models.Question) (models.Response, error, bool) {
			d.Diameter[0] *= 1.01
			return pass()
		})},
		{"leaves what", "is another after", interrupted(func(_ context.Context, _ *models.Design, q *models.Question) (models.Response, error, bool) {
			q.Hz[0]++
			return pass()
		})},
		{"leaves what", "reaches the next", spoilt(func() spoil {
			shared := []string{"shared"}
			return func(r *models.Response) { r.Warnings = shared }
		}())},
	} {
		calls.Store(0)
		checked := false
		for _, part := range contract {
			if !strings.HasPrefix(part.name, c.clause) {
				continue
			}
			checked = true
			err := part.check(func() models.Simulator { return c.make() })
			if err == nil || !strings.Contains(err.Error(), c.words) {
				t.Errorf("%s: %v; want %q in the fault", part.name, err, c.words)
			}
		}
		if !checked {
			t.Errorf("no clause is called %q", c.clause)
		}
	}
}

// spoilt makes simulators that change every answer.
func spoilt(f spoil) func() *sample { return func() *sample { return &sample{after: f} } }

// interrupted makes simulators that step in before every answer.
func interrupted(f interrupt) func() *sample { return func() *sample { return &sample{before: f} } }

// spoiltAfter makes simulators that never recover from a long question.
func spoiltAfter(hurt *atomic.Int64) func() *sample {
	return interrupted(func(_ context.Context, _ *models.Design, q *models.Question) (models.Response, error, bool) {
		if hurt.Load() == 1 {
			return models.Response{}, errors.New("hurt"), true
		}
		if len(q.Hz) > 1000 {
			hurt.Store(1)
		}
		return models.Response{}, nil, false
	})
}
