package moment

import (
	"context"
	"fmt"
	"runtime"
	"sync"

	"turnwise/models"
)

// What the model says of itself with every answer, by the ground.
const (
	worth = "two such solutions agree to 0.03 dB, and inside its range the thin wire is worth about 0.05 dB and 10 % in impedance"

	// Statement is that of the infinite plane.
	Statement = "full wave, thin-wire method of moments on an infinite perfectly conducting plane: " + worth + ". The plane is assumed infinite: " +
		"on a real plate the gain on the axis changes by −1.4 to −3.6 dB at 0.5 wavelengths across, −1.4 at 0.75, −0.7 to +0.2 at 1, " +
		"+0.9 to +1.7 at 1.5, and still by 0.55 dB either way at 16"

	// PlateStatement is that of a disc or a cup.
	PlateStatement = "full wave, thin-wire method of moments over a finite perfectly conducting plate, a surface of revolution: " + worth +
		". The plate is taken for thin and alone: no mast, boom or dish behind it"
)

// Solver is the full-wave simulator of helical antennas. It is safe for
// concurrent use: every question takes a worker of its own, with all the room
// it needs, from those that have finished.
type Solver struct {
	fidelity Fidelity
	set      settings
	plates   plates
	workers  sync.Pool
}

var _ models.Simulator = (*Solver)(nil)

// New is the solver of a fidelity; the empty one is [Standard].
func New(f Fidelity) (*Solver, error) {
	if f == "" {
		f = Standard
	}
	set, ok := f.settings()
	if !ok {
		return nil, fmt.Errorf("fidelity %q: there is none such; write draft, standard or fine", string(f))
	}
	s := &Solver{fidelity: f, set: set}
	s.workers.New = func() any {
		w := newWorker()
		w.shore.store = &s.plates
		return w
	}
	return s, nil
}

// Identity names the version, the fidelity and the instructions, whose
// roundings may differ.
func (s *Solver) Identity() string {
	return "full-wave 2 " + string(s.fidelity) + " " + runtime.GOARCH
}

// Simulate answers everything that an infinite plane lets one ask. A fine
// answer always holds the power balance. An answer whose balance misses by
// more than 1 % is an error.
func (s *Solver) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	if err := q.Check(); err != nil {
		return models.Response{}, fmt.Errorf("full wave: %w", err)
	}
	if s.fidelity == Fine {
		q.Outputs |= models.Balance
	}
	if q.Outputs&models.Pattern != 0 {
		q.Outputs |= models.Cuts
	}
	w := s.workers.Get().(*worker)
	defer s.workers.Put(w)
	r := models.Response{Samples: make([]models.Sample, len(q.Hz)), Answered: q.Outputs | models.Axis, Statement: Statement}
	if plateOf(d.Ground).Finite() {
		r.Statement = PlateStatement
	}
	if err := w.answer(ctx, s.set, &d, q, r.Samples); err != nil {
		return models.Response{}, err
	}
	r.Warnings = w.warnings(q.Hz)
	return r, nil
}
