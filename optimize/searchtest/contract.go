package searchtest

import (
	"fmt"
	"io"
	"math"
	"slices"
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/space"
)

// Factory makes a searcher of at most n evaluations on a domain, with a seed
// and what is known already.
type Factory func(d optimize.Domain, n int, seed uint64, past []optimize.Evaluation) optimize.Searcher

// Run checks that a searcher keeps the contract: it is a pure function of
// configuration, seed and what it is told; it asks canonical points that pass
// the screen; it survives whatever comes back, and it ends.
func Run(t *testing.T, make Factory) {
	t.Run("repeats itself", func(t *testing.T) { repeats(t, make) })
	t.Run("ends", func(t *testing.T) { ends(t, make) })
	for name, d := range domains() {
		t.Run("asks what it may/"+name, func(t *testing.T) { asks(t, make, d) })
	}
	for _, kind := range []answerKind{allFail, allInfeasible, someFail, tied} {
		t.Run("survives/"+string(kind), func(t *testing.T) { survives(t, make, kind) })
	}
	t.Run("gives up on screens that reject all", func(t *testing.T) { rejected(t, make) })
}

// domains are spaces of every kind of variable, for one to four aims.
func domains() map[string]optimize.Domain {
	mixed := space.Space{
		space.NewReal("x", -1, 2, 1e-3), space.NewReal("y", 0, 1, 0), space.NewStepped("n", 3, 12, 0.25),
		space.NewChoice("c", "a", "b", "c"), space.NewReal("same", 4, 4, 0), space.NewChoice("only", "one"),
	}
	out := map[string]optimize.Domain{}
	for aims := 1; aims <= 4; aims++ {
		out[fmt.Sprintf("%d aims", aims)] = optimize.Domain{Space: mixed, Aims: aims, Limits: 1}
	}
	screened := optimize.Domain{Space: mixed, Aims: 2, Limits: 1}
	screened.Screen = func(p space.Point) (float64, string) { return math.Max(0, p[0]+p[1]-1.2), "x + y is above 1.2" }
	out["screened"] = screened
	traits := out["2 aims"]
	traits.Traits = themselves(2, 1)
	out[withTraits] = traits
	return out
}

// withTraits is the domain whose searchers may learn traits.
const withTraits = "traits"

// themselves are aims and limits as their own traits.
func themselves(aims, limits int) *optimize.Traits {
	return &optimize.Traits{Kinds: aims + limits, Read: func(_ space.Point, traits []float64) ([]float64, []float64) {
		own := slices.Clone(traits)
		return own[:aims:aims], own[aims:]
	}}
}

// answerKind is how a test answers.
type answerKind string

const (
	plainly       answerKind = "plainly"
	allFail       answerKind = "all fail"
	allInfeasible answerKind = "all break a limit"
	someFail      answerKind = "some fail or time out"
	tied          answerKind = "all the same"
)

// answerTo is a smooth problem on any space, answered in a kind's way.
func answerTo(d optimize.Domain, c optimize.Candidate, kind answerKind) optimize.Evaluation {
	e := optimize.Evaluation{Candidate: c, Status: optimize.OK}
	u := d.Space.Unit(c.Point)
	for m := range d.Aims {
		aim := 0.0
		for i, x := range u {
			aim += sq(x - float64((m+i)%3)/2)
		}
		e.Aims = append(e.Aims, aim)
	}
	for range d.Limits {
		e.Limits = append(e.Limits, u[0]-0.9)
	}
	switch kind {
	case allFail:
		e = optimize.Evaluation{Candidate: c, Status: optimize.Failed, Err: "on purpose"}
	case allInfeasible:
		for i := range e.Limits {
			e.Limits[i] = 1 + u[0]
		}
	case someFail:
		if c.ID%3 == 0 {
			e = optimize.Evaluation{Candidate: c, Status: optimize.TimedOut, Err: "on purpose"}
		}
	case tied:
		for m := range e.Aims {
			e.Aims[m] = 1
		}
	}
	if d.Traits != nil && e.Status == optimize.OK {
		e.Traits = slices.Concat(e.Aims, e.Limits)
	}
	return e
}

// known is a little past on a domain.
func known(d optimize.Domain) []optimize.Evaluation {
	rng := optimize.Stream(99, "contract", 0)
	var past []optimize.Evaluation
	for len(past) < 30 {
		u := make([]float64, len(d.Space))
		for i := range u {
			u[i] = rng.Float64()
		}
		p := d.Space.FromUnit(u)
		if d.Passes(p) {
			past = append(past, answerTo(d, optimize.Candidate{ID: len(past), Point: p}, plainly))
		}
	}
	return past
}

// drive runs a searcher to its end and lists what it asked.
func drive(t *testing.T, d optimize.Domain, s optimize.Searcher, kind answerKind, most int) []optimize.Candidate {
	t.Helper()
	if c, ok := s.(io.Closer); ok {
		defer c.Close()
	}
	var asked []optimize.Candidate
	for {
		batch := s.Ask()
		if len(batch) == 0 {
			if len(s.Ask()) != 0 {
				t.Error("an empty batch was followed by one that is not")
			}
			return asked
		}
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			c.ID = len(asked) + i
			told[i] = answerTo(d, c, kind)
		}
		asked = append(asked, batch...)
		if len(asked) > most {
			t.Fatalf("%d asked; %d is the most", len(asked), most)
		}
		s.Tell(told)
	}
}

func repeats(t *testing.T, make Factory) {
	for _, name := range []string{"2 aims", withTraits} {
		repeatsOn(t, make, domains()[name])
	}
}

func repeatsOn(t *testing.T, make Factory, d optimize.Domain) {
	keys := func(seed uint64) string {
		text := ""
		for _, c := range drive(t, d, make(d, 200, seed, known(d)), plainly, 200) {
			text += c.From + c.Point.Key()
		}
		return text
	}
	if one, again := keys(1), keys(1); one != again {
		t.Error("the same seed asked differently")
	}
}

func ends(t *testing.T, make Factory) {
	d := domains()["2 aims"]
	for _, n := range []int{1, 2, 17, 150} {
		if asked := drive(t, d, make(d, n, 3, known(d)), plainly, n); len(asked) == 0 {
			t.Errorf("of %d evaluations none was used", n)
		}
	}
}

func asks(t *testing.T, make Factory, d optimize.Domain) {
	for _, c := range drive(t, d, make(d, 150, 5, known(d)), plainly, 150) {
		if d.Space.Canonical(c.Point).Key() != c.Point.Key() {
			t.Fatalf("%v is not canonical", c.Point)
		}
		if !d.Passes(c.Point) {
			t.Fatalf("%v does not pass the screen", c.Point)
		}
	}
}

func survives(t *testing.T, make Factory, kind answerKind) {
	for _, name := range []string{"2 aims", withTraits} {
		d := domains()[name]
		drive(t, d, make(d, 150, 7, nil), kind, 150)
		drive(t, d, make(d, 150, 7, known(d)), kind, 150)
	}
}

func rejected(t *testing.T, make Factory) {
	d := domains()["2 aims"]
	d.Screen = func(space.Point) (float64, string) { return 1, "nothing passes" }
	s := make(d, 50, 1, nil)
	if asked := drive(t, d, s, plainly, 50); len(asked) != 0 {
		t.Errorf("%d points were asked that no screen passes", len(asked))
	}
	if e, ok := s.(optimize.Explainer); ok && e.Explain() == "" {
		t.Error("it gave up without an explanation")
	}
}
