package programme

import (
	"math"
	"testing"

	"pgregory.net/rapid"

	"turnwise/optimize"
)

// The line and its deviation against their definitions: no other line is
// nearer, and the deviation is the mean distance.
func TestLineIsTheNearest(t *testing.T) {
	number := rapid.Float64Range(-10, 10)
	rapid.Check(t, func(t *rapid.T) {
		xs := rapid.SliceOfN(number, 2, 20).Draw(t, "x")
		var l line
		ys := make([]float64, len(xs))
		for i, x := range xs {
			ys[i] = number.Draw(t, "y")
			l.add(x, ys[i])
		}
		off := func(lift, turn float64) float64 {
			sum := 0.0
			for i, x := range xs {
				d := ys[i] - l.of(x) - lift - turn*x
				sum += d * d
			}
			return math.Sqrt(sum / float64(len(xs)))
		}
		if got, want := l.deviation(), off(0, 0); math.Abs(got-want) > 1e-5 {
			t.Fatalf("deviation %g, by its definition %g", got, want)
		}
		lift, turn := number.Draw(t, "lift")/10, number.Draw(t, "turn")/10
		if other := off(lift, turn); other < l.deviation()-1e-5 {
			t.Fatalf("a line that is %g and %g off is nearer: %g, not %g", lift, turn, other, l.deviation())
		}
	})
}

// What did not go up is told under the rung that answered it, worse than the
// line says where the models differ, and as unknown before there are pairs.
func TestWhatDidNotGoUp(t *testing.T) {
	l := newLadder(nil, optimize.Domain{Aims: 1, Limits: 1, Finest: 1}, 100, 1)
	e := optimize.Evaluation{Status: optimize.OK, Score: optimize.Score{Aims: []float64{4}, Limits: []float64{-2}}}
	l.batch = make([]optimize.Candidate, 1)
	l.answers[0], l.answers[1] = []optimize.Evaluation{e}, make([]optimize.Evaluation, 1)
	if got := l.foretold(0); got.Status != optimize.Failed {
		t.Errorf("told as %q before the models were compared", got.Status)
	}
	for k := range leastPairs {
		rough, fine := e, e
		x, off := float64(k/2), float64(k%2)-0.5 // half a unit to either side
		rough.Score = optimize.Score{Aims: []float64{x}, Limits: []float64{x}}
		fine.Score = optimize.Score{Aims: []float64{3*x + 1 + off}, Limits: []float64{x - 1}}
		l.steps[0].learn(&rough, &fine)
	}
	got := l.foretold(0)
	if got.Status != optimize.OK || got.Rung != 0 {
		t.Fatalf("told as %q of rung %d", got.Status, got.Rung)
	}
	if want := 3*4 + 1 + doubt*0.5; math.Abs(got.Aims[0]-want) > 1e-9 || math.Abs(got.Limits[0]+3) > 1e-6 {
		t.Errorf("told %v and %v, want %g and -3", got.Aims, got.Limits, want)
	}
	if e.Aims[0] != 4 {
		t.Error("the answer itself was changed")
	}
}
