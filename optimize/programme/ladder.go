package programme

import (
	"io"
	"math"
	"slices"

	"turnwise/optimize"
	"turnwise/optimize/front"
)

// ladder puts what a searcher asks to the cheapest model first and asks the
// dearer ones only about the part that promises most once each model's answers
// have been corrected towards the next one's. The searcher is told what the
// finest model said, and of the rest, under the rung that answered, what it
// would say at its worst. A part goes up whatever the cheap model says of it,
// so that it seeds and orders but never screens out.
type ladder struct {
	inner  optimize.Searcher
	finest int
	left   int // evaluations
	seed   uint64

	round   int
	batch   []optimize.Candidate
	rung    int
	open    []int                   // places of the batch that this rung is asked about
	answers [][]optimize.Evaluation // of each rung, by place; Status empty: not asked
	steps   []correction            // from each rung to the next
}

var _ optimize.Searcher = (*ladder)(nil)
var _ optimize.Explainer = (*ladder)(nil)
var _ io.Closer = (*ladder)(nil)

// What goes up from a rung: a third, of which a fifth is drawn at random; all
// of it until so many pairs of answers are known.
const (
	promotedShare = 1.0 / 3
	randomShare   = 1.0 / 5
	leastPairs    = 20
)

// doubt is how many deviations worse than foretold a point is told that did
// not go up: where the models agree it is worth something, and where they do
// not it never beats what the finest has seen.
const doubt = 3.0

func newLadder(inner optimize.Searcher, d optimize.Domain, evaluations int, seed uint64) *ladder {
	l := &ladder{inner: inner, finest: d.Finest, left: evaluations, seed: seed}
	l.steps = make([]correction, d.Finest)
	for i := range l.steps {
		l.steps[i].outputs = make([]line, d.Aims+d.Limits)
	}
	l.answers = make([][]optimize.Evaluation, d.Finest+1)
	return l
}

// Ask gives what is open on the rung that is on.
func (l *ladder) Ask() []optimize.Candidate {
	if l.left <= 0 {
		return nil
	}
	if len(l.open) == 0 {
		l.batch = l.inner.Ask()
		l.round++
		l.rung = 0
		for i := range l.batch {
			l.open = append(l.open, i)
		}
		for r := range l.answers {
			l.answers[r] = make([]optimize.Evaluation, len(l.batch))
		}
	}
	l.open = l.open[:min(len(l.open), l.left)]
	l.left -= len(l.open)
	out := make([]optimize.Candidate, len(l.open))
	for k, i := range l.open {
		out[k] = l.batch[i]
		out[k].Rung = l.rung
	}
	return out
}

// Tell takes a rung's answers, learns from them, and sends the promising ones
// up, or tells the searcher when the finest has spoken.
func (l *ladder) Tell(es []optimize.Evaluation) {
	for k, i := range l.open {
		l.answers[l.rung][i] = es[k]
		if l.rung > 0 {
			l.steps[l.rung-1].learn(&l.answers[l.rung-1][i], &es[k])
		}
	}
	if l.rung < l.finest {
		l.open = l.promoted()
		l.rung++
		return
	}
	told := l.answers[l.finest]
	for i := range told {
		if told[i].Status == "" {
			told[i] = l.foretold(i)
		}
	}
	l.inner.Tell(told)
	l.open = nil
}

// foretold is what the finest model is taken to say of a place that did not
// reach it.
func (l *ladder) foretold(i int) optimize.Evaluation {
	rung := l.finest - 1
	for rung > 0 && l.answers[rung][i].Status == "" {
		rung--
	}
	e := l.answers[rung][i]
	for _, step := range l.steps[rung:] {
		if e.Status != optimize.OK || step.pairs < leastPairs {
			return optimize.Evaluation{Candidate: l.batch[i], Status: optimize.Failed, Err: "not asked of the finest model"}
		}
		e.Aims, e.Limits = step.foretell(&e, doubt)
	}
	return e
}

// promoted are the places that go up, in order.
func (l *ladder) promoted() []int {
	step := &l.steps[l.rung]
	if step.pairs < leastPairs {
		return l.open
	}
	n := max(1, int(math.Round(promotedShare*float64(len(l.open)))))
	drawn := int(randomShare * float64(n))
	values := make([]front.Value, len(l.open))
	for k, i := range l.open {
		values[k] = step.value(&l.answers[l.rung][i])
	}
	var order []int
	for _, layer := range front.Layers(values) {
		order = append(order, layer...)
	}
	rest := order[n-drawn:]
	optimize.Stream(l.seed, "ladder", l.round).Shuffle(len(rest), func(a, b int) { rest[a], rest[b] = rest[b], rest[a] })
	up := make([]int, n)
	for k := range up {
		up[k] = l.open[order[k]]
	}
	slices.Sort(up)
	return up
}

// Explain says why the searcher is done.
func (l *ladder) Explain() string {
	if e, ok := l.inner.(optimize.Explainer); ok {
		return e.Explain()
	}
	return ""
}

// Close closes the searcher.
func (l *ladder) Close() error {
	if c, ok := l.inner.(io.Closer); ok {
		return c.Close()
	}
	return nil
}
