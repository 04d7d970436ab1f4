package tolerance

import (
	"context"
	"fmt"
	"math"
	"math/cmplx"
	"slices"

	"turnwise/models"
)

// Reflections are what the design and its copies show at the connector.
type Reflections struct {
	Hz       []float64
	Nominal  []complex128
	Copies   [][]complex128 // those that were answered
	Failures []Failure
	// Statement is what the model says of itself, Warnings of the design.
	Statement string
	Warnings  []string
}

// Reach is how far the copies' reflections lie from the design's, at most, at
// each frequency.
func (r *Reflections) Reach() []float64 {
	reach := make([]float64, len(r.Hz))
	for _, c := range r.Copies {
		for i := range reach {
			reach[i] = math.Max(reach[i], cmplx.Abs(c[i]-r.Nominal[i]))
		}
	}
	return reach
}

// At is the prediction and how far the copies reach at other frequencies, along
// straight lines; beyond either end they stay as they are there.
func (r *Reflections) At(hz []float64) (predicted []complex128, reach []float64) {
	own := r.Reach()
	predicted, reach = make([]complex128, len(hz)), make([]float64, len(hz))
	for i, f := range hz {
		k, u := place(r.Hz, f)
		predicted[i], reach[i] = r.Nominal[k], own[k]
		if u > 0 {
			predicted[i] += complex(u, 0) * (r.Nominal[k+1] - r.Nominal[k])
			reach[i] += u * (own[k+1] - own[k])
		}
	}
	return predicted, reach
}

// place finds the interval of rising values that holds x, and its part in it.
func place(rising []float64, x float64) (k int, u float64) {
	k, exact := slices.BinarySearch(rising, x)
	switch {
	case exact || k == 0:
		return min(k, len(rising)-1), 0
	case k == len(rising):
		return k - 1, 0
	}
	return k - 1, (x - rising[k-1]) / (rising[k] - rising[k-1])
}

// Reflections answers the design and its copies at frequencies, rising, for
// their reflections alone. Limits play no part.
func (s *Study) Reflections(ctx context.Context, hz []float64) (*Reflections, error) {
	s.Spreads = s.Spreads.Of(&s.Design)
	nominal, err := s.Rung.Simulator.Simulate(ctx, s.Design, models.Question{Hz: hz, Outputs: models.Axis})
	if err != nil {
		return nil, fmt.Errorf("the design itself: %w", err)
	}
	r := &Reflections{Hz: hz, Nominal: reflections(&nominal, s.Design.Feed.Impedance), Statement: nominal.Statement, Warnings: nominal.Warnings}
	if !s.Spreads.Any() {
		return r, nil
	}
	copies := make([]Copy, s.Samples)
	for i, e := range s.copies() {
		copies[i].Errors = e
	}
	done, failed := 0, 0
	err = Each(ctx, len(copies), s.Workers, func(i int) bool {
		g, err := s.reflect(ctx, s.apply(copies[i].Errors), hz)
		if err != nil {
			copies[i].Err = err.Error()
		}
		copies[i].Reflection = g
		return err == nil
	}, func(ok bool) {
		done++
		if !ok {
			failed++
		}
		if s.Progress != nil {
			s.Progress(done, len(copies), failed)
		}
	})
	if err != nil {
		return nil, err
	}
	for i := range copies {
		if copies[i].Err == "" {
			r.Copies = append(r.Copies, copies[i].Reflection)
		}
	}
	r.Failures = reasons(copies)
	return r, nil
}

// reflect is a design's reflection at the connector.
func (s *Study) reflect(ctx context.Context, d models.Design, hz []float64) ([]complex128, error) {
	a, err := s.Rung.Simulator.Simulate(ctx, d, models.Question{Hz: hz, Outputs: models.Axis})
	if err != nil {
		return nil, err
	}
	return reflections(&a, d.Feed.Impedance), nil
}

// reflections are those at the connector, at every sample of an answer.
func reflections(a *models.Response, reference float64) []complex128 {
	out := make([]complex128, len(a.Samples))
	for i := range out {
		out[i] = models.Reflection(a.Samples[i].Input, reference)
	}
	return out
}
