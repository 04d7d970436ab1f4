package remote

import (
	"context"

	"turnwise/models"
	"turnwise/models/helix"
)

// Simulator is a model whose answers come from workers. It stands for one
// that this program has itself, by the same identity.
type Simulator struct {
	queue    *Queue
	inner    models.Simulator
	identity string
}

var _ models.Simulator = (*Simulator)(nil)

// Simulator makes a simulator that has a model's questions answered by
// workers that have the same model.
func (q *Queue) Simulator(ctx context.Context, inner models.Simulator) (*Simulator, error) {
	s := &Simulator{queue: q, inner: inner, identity: inner.Identity()}
	return s, q.serve(ctx, s.identity)
}

// Identity is that of the model it stands for.
func (s *Simulator) Identity() string { return s.identity }

// Close closes the model it stands for, where that needs it.
func (s *Simulator) Close() error {
	if c, ok := s.inner.(interface{ Close() error }); ok {
		return c.Close()
	}
	return nil
}

// Simulate has a worker answer, and waits for one as long as it takes. What
// is too large to be sent, patterns and very long sweeps, and what is no
// design or no question and cannot be written, the model here answers itself.
func (s *Simulator) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	if err := ctx.Err(); err != nil {
		return models.Response{}, err
	}
	text, err := pack(s.identity, d, q)
	if err != nil || helix.Check(&d) != nil || q.Outputs&models.Pattern != 0 || len(q.Hz) > mostFrequencies || len(text) > mostMessage {
		return s.inner.Simulate(ctx, d, q)
	}
	a, err := s.queue.ask(ctx, s.identity, text, q)
	if err != nil {
		return models.Response{}, err
	}
	if a.Error != "" {
		return models.Response{Took: a.Took}, &refusal{a.Error, a.TimedOut}
	}
	a.Response.Statement, a.Response.Took = a.Statement, a.Took
	return *a.Response, nil
}
