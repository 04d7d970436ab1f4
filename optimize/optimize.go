// Package optimize holds the words of a search and its one loop. It knows no
// physics: a [Candidate] is a point, an [Evaluator] answers it with a
// [Score], a [Searcher] asks and is told, and [Run] alone owns workers,
// budget, clock and cancelling.
package optimize

import (
	"context"
	"time"

	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// Candidate is one question of a search.
type Candidate struct {
	ID    int // position in the sequence of asks, given by Run
	Rung  int // of the ladder of models, 0 is the cheapest
	Point space.Point
	From  string // the stage that asked
}

// Score is the answer to a candidate. Figures are in the units of their
// columns and hold NaN where a figure does not apply; Aims are in minimise
// form; Limits are signed and scaled, ≤ 0 is met.
type Score struct {
	Figures []float64
	Aims    []float64
	Limits  []float64
	// Traits are what aims and limits were read from, as the domain's
	// [Traits] say; nil where it has none.
	Traits []float64
	// Answers are what simulators said on the way, for the record only.
	Answers []Answer
	// Took is how long the evaluation took where its simulators know better
	// than the clock, since it waited for them; 0: they do not.
	Took time.Duration
}

// Answer is what one simulator said to one question, kept so that it need
// never be asked again. The search does not look inside.
type Answer struct {
	Key      string // SHA-256 of the whole question, hexadecimal
	Design   string // the design's hash
	Model    string // the simulator's identity
	Response []byte // JSON
}

// Status is how an evaluation ended.
type Status string

// An evaluation is OK, Failed with a reason, or TimedOut.
const (
	OK       Status = "ok"
	Failed   Status = "failed"
	TimedOut Status = "timed out"
)

// Evaluation is one answered candidate. It is never changed once made.
type Evaluation struct {
	Candidate
	Score
	Status   Status
	Err      string // the reason, unless OK
	Duration time.Duration
	// Reused marks an answer that was not simulated anew: the same point had
	// been answered before.
	Reused bool
}

// Value is what ranking sees of the evaluation.
func (e *Evaluation) Value() front.Value {
	if e.Status != OK {
		return front.Value{Unknown: true}
	}
	return front.Value{Aims: e.Aims, Violation: front.Violation(e.Limits)}
}

// Evaluator answers candidates. It is safe for concurrent use, and the same
// point always gets the same score. An error marks a failed evaluation.
type Evaluator interface {
	Evaluate(ctx context.Context, c Candidate) (Score, error)
}

// Searcher decides what to ask. It is a pure function of its configuration,
// its seed and what it was told: no clock, file, map order or number of
// workers may reach what it asks.
type Searcher interface {
	// Ask gives the next batch; an empty batch means the searcher is done.
	Ask() []Candidate
	// Tell takes all of the last batch, in the batch's order, however the
	// evaluations ended.
	Tell([]Evaluation)
}

// Explainer is a searcher that can say in a sentence why it is done.
type Explainer interface{ Explain() string }

// Domain is what a searcher may know of a problem.
type Domain struct {
	Space  space.Space
	Aims   int
	Limits int
	// Finest is the rung of the ladder whose word counts; with one model 0.
	Finest int
	// Screen is a free check on a canonical point: violation 0 passes, and
	// what does not pass is not worth an evaluation. Pure and safe for
	// concurrent use; nil: everything passes.
	Screen func(space.Point) (violation float64, reason string)
	// Traits, where set, are more learnable than aims and limits are.
	Traits *Traits
}

// Traits say how aims and limits come about: most are the worst case of
// something that is smooth by itself, such as one frequency's gain. A learned
// searcher follows the smooth parts and reads the rest from them.
type Traits struct {
	// Kinds is how many there are. A score holds whole rows, one trait of
	// every kind in each.
	Kinds int
	// Read gives the aims and limits of a point that has such traits. Pure and
	// safe for concurrent use.
	Read func(p space.Point, traits []float64) (aims, limits []float64)
}

// Passes reports whether the point passes the screen.
func (d *Domain) Passes(p space.Point) bool {
	if d.Screen == nil {
		return true
	}
	v, _ := d.Screen(p)
	return v <= 0
}
