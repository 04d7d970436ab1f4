package programme_test

import (
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/programme"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/space"
)

// viewed is a problem of four variables with views of two and three: the last
// variable of a view stands for all that it leaves out.
func viewed() *searchtest.Problem {
	p := searchtest.ProblemByName("zdt1")
	p.Domain.Space = p.Domain.Space[:4]
	for n := 2; n < 4; n++ {
		p.Domain.Views = append(p.Domain.Views, optimize.View{
			Space: p.Domain.Space[:n],
			Lift:  func(x space.Point) space.Point { return append(append(space.Point(nil), x...), x[len(x)-1]) },
		})
	}
	return p
}

// Views are searched before the whole space, each within its share, and what
// they ask lies in them.
func TestViewsComeFirst(t *testing.T) {
	p := viewed()
	all := searchtest.Drive(p, programme.New(p.Domain, programme.Config{Plan: []int{800}, Sample: 0.1, Genetic: 0.9, Seed: 3}))
	counts := map[string]int{}
	for i, e := range all {
		counts[e.From]++
		x := e.Point
		switch {
		case e.From != programme.Simpler:
		case x[2] != x[3]:
			t.Fatalf("%v lies in no view", x)
		case i < 80+180 && x[1] != x[2]:
			t.Fatalf("%v, asked early, does not lie in the coarsest view", x)
		}
		if e.From == programme.Genetic && i < 80+360 {
			t.Fatalf("candidate %d is of the whole space already", i)
		}
	}
	if counts[programme.Sample] != 80 || counts[programme.Simpler] != 360 || counts[programme.Genetic] != 360 {
		t.Errorf("%v: 80 of a sample, 360 in views and 360 in all are due", counts)
	}
	values := make([]front.Value, len(all))
	for i := range all {
		values[i] = all[i].Value()
	}
	if got := p.Fraction(values); got < 0.95 {
		t.Errorf("%.3f of the front found", got)
	}
}
