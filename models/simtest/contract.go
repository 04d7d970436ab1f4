// Package simtest is the contract of [models.Simulator] as a suite of tests.
// Whatever answers questions about designs passes [Run] before anything is
// built on it.
package simtest

import (
	"context"
	"errors"
	"fmt"
	"math"
	"testing"
	"time"

	"turnwise/models"
)

// Factory makes a simulator as a search would. What has to be closed is
// closed in a clean-up of t.
type Factory func(t *testing.T) models.Simulator

// Run checks that a simulator keeps the contract: one sound sample for each
// frequency, in order; the same bits for the same question, however many ask
// at once and whatever was asked before; an error, never a panic, for a
// question or a design that is none; a prompt end when the context ends; and
// nothing of the asker's changed.
func Run(t *testing.T, factory Factory) {
	for _, c := range contract {
		t.Run(c.name, func(t *testing.T) {
			if err := c.check(func() models.Simulator { return factory(t) }); err != nil {
				t.Error(err)
			}
		})
	}
}

// clause is one part of the contract; its check gives what was broken.
type clause struct {
	name  string
	check func(make func() models.Simulator) error
}

var contract = []clause{
	{"identity is a stable name", identity},
	{"one sample for each frequency in order", order},
	{"outputs asked are there and sound", outputs},
	{"repeats itself bit for bit", repeats},
	{"answers many at once as one by one", concurrent},
	{"ends with its context", cancelled},
	{"refuses bad questions", badQuestions},
	{"refuses bad designs", badDesigns},
	{"leaves what it was given alone", untouched},
}

// patience is how long a simulator may stay silent before it counts as hung.
// It is a watchdog, far above what any question of the suite takes.
const patience = 2 * time.Minute

// ask puts a question under the watchdog; a panic comes back as an error of
// its own kind.
func ask(ctx context.Context, s models.Simulator, d models.Design, q models.Question) (models.Response, error) {
	type reply struct {
		r   models.Response
		err error
	}
	back := make(chan reply, 1)
	go func() {
		var out reply
		defer func() {
			if p := recover(); p != nil {
				out.err = &broken{fmt.Sprintf("panics: %v", p)}
			}
			back <- out
		}()
		out.r, out.err = s.Simulate(ctx, d, q)
	}()
	select {
	case out := <-back:
		return out.r, out.err
	case <-time.After(patience):
		return models.Response{}, &broken{"does not come back"}
	}
}

// broken is a fault that no simulator may answer with.
type broken struct{ what string }

func (b *broken) Error() string { return b.what }

// answer asks a good question and demands a sound answer.
func answer(s models.Simulator, d models.Design, q models.Question) (models.Response, error) {
	r, err := ask(context.Background(), s, d, q)
	if err != nil {
		return r, fmt.Errorf("a good question about %s: %w", d.Title, err)
	}
	return r, errors.Join(sound(&r, q), rear(&d, &r))
}

// sweep is a good question.
func sweep(o models.Outputs) models.Question {
	return models.Question{Hz: []float64{0.98e9, 1e9, 1.03e9}, Outputs: o, Cone: 15 * math.Pi / 180}
}

const everything = models.Axis | models.Cone | models.Cuts | models.Balance | models.Spread | models.Pattern
