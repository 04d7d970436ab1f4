package surrogate

import (
	"testing"

	"turnwise/optimize"
)

// told answers batches so that one kind of candidates gains and the other
// does not, and gives the surfaces' part at the end.
func told(t *testing.T, gaining origin) float64 {
	t.Helper()
	d := plane()
	s := New(d, Config{Evaluations: 200, Batch: 8, Seed: 1}, nil)
	least := 1.0
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		answers := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			e := answeredAt(c.Point[0], c.Point[1], -1, optimize.OK)
			e.Candidate, e.Aims = c, []float64{1 + c.Point[0], 2 - c.Point[0]}
			if s.asked[i] == gaining {
				least *= 0.99
				e.Aims = []float64{least, least}
			}
			answers[i] = e
		}
		s.Tell(answers)
	}
	return s.parts.learned
}

// Surfaces that mislead are dropped but for a trace that would notice if
// they came right; surfaces that lead keep nearly all.
func TestMisleadingSurfacesAreDropped(t *testing.T) {
	if part := told(t, bred); part > 0.15 {
		t.Errorf("%.2f of a batch is chosen by surfaces that gain nothing", part)
	}
	if part := told(t, learned); part < 0.9 {
		t.Errorf("%.2f of a batch is chosen by surfaces that gain everything", part)
	}
}

func TestPartsAreHandedOutWhole(t *testing.T) {
	p := parts{learned: 0.3}
	sum := 0
	for range 100 {
		n := p.take(5)
		if n < 1 || n > 2 {
			t.Fatalf("%d of 5 points", n)
		}
		sum += n
	}
	if sum < 149 || sum > 150 {
		t.Errorf("%d of 500 points for a part of 0.3", sum)
	}
}

func TestPartsFollow(t *testing.T) {
	for _, c := range []struct{ learned, bred, to float64 }{
		{1, 0, 1 - leastPart}, {0, 1, leastPart}, {0, 0, 0.5}, {3, 1, 0.75},
	} {
		p := parts{learned: 0.4}
		for range 40 {
			p.follow(c.learned, c.bred)
		}
		if d := p.learned - c.to; d < -1e-4 || d > 1e-4 {
			t.Errorf("gains of %g and %g: part %.3f, want %.3f", c.learned, c.bred, p.learned, c.to)
		}
	}
}

func TestCautionFollowsKeptPromises(t *testing.T) {
	c := caution(firstCaution)
	c.follow(1, 0.1)
	if c != firstCaution+moreCaution {
		t.Errorf("a broken promise makes caution %g", c)
	}
	for range 50 {
		c.follow(1, 0.9)
	}
	if c != leastCaution {
		t.Errorf("kept promises make caution %g", c)
	}
	for range 50 {
		c.follow(0.5, 0)
	}
	if c != mostCaution {
		t.Errorf("broken promises make caution %g", c)
	}
	c.yield()
	if c != mostCaution-moreCaution {
		t.Errorf("nothing promised makes caution %g", c)
	}
}
