package simplex_test

import (
	"context"
	"errors"
	"math"
	"runtime"
	"testing"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/searchtest"
	"turnwise/optimize/simplex"
	"turnwise/optimize/space"
)

// valley is a function of one aim with a known minimum.
type valley struct {
	name  string
	from  []float64 // standard starting point
	least float64
	at    func(x []float64) float64
}

// Test functions of Moré, Garbow, Hillstrom, ACM TOMS 7, 17, 1981, with their
// standard starting points.
var valleys = []valley{
	{"rosenbrock", []float64{-1.2, 1}, 0, func(x []float64) float64 {
		a, b := x[1]-x[0]*x[0], 1-x[0]
		return 100*a*a + b*b
	}},
	{"powell singular", []float64{3, -1, 0, 1}, 0, func(x []float64) float64 {
		a, b, c, d := x[0]+10*x[1], x[2]-x[3], x[1]-2*x[2], x[0]-x[3]
		return a*a + 5*b*b + math.Pow(c, 4) + 10*math.Pow(d, 4)
	}},
	{"helical valley", []float64{-1, 0, 0}, 0, func(x []float64) float64 {
		theta := math.Atan2(x[1], x[0]) / (2 * math.Pi)
		if x[0] < 0 && x[1] < 0 {
			theta++
		}
		a, b := 10*(x[2]-10*theta), 10*(math.Hypot(x[0], x[1])-1)
		return a*a + b*b + x[2]*x[2]
	}},
}

// fixture is a one-aim problem over a box.
func fixture(n int, from, to float64) optimize.Domain {
	var sp space.Space
	for i := range n {
		sp = append(sp, space.NewReal(string(rune('a'+i)), from, to, 0))
	}
	return optimize.Domain{Space: sp, Aims: 1}
}

func answered(id int, p space.Point, aims ...float64) optimize.Evaluation {
	return optimize.Evaluation{Candidate: optimize.Candidate{ID: id, Point: p}, Score: optimize.Score{Aims: aims}, Status: optimize.OK}
}

// polish runs the search to its end and gives the least of the one aim.
func polish(t *testing.T, d optimize.Domain, c simplex.Config, start space.Point, f func([]float64) float64) (least float64, evaluations int) {
	t.Helper()
	s := simplex.New(d, c, []optimize.Evaluation{answered(0, start, f(start))})
	defer s.Close()
	least = f(start)
	for {
		batch := s.Ask()
		if len(batch) == 0 {
			return least, evaluations
		}
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			if d.Space.Canonical(c.Point).Key() != c.Point.Key() {
				t.Fatalf("%v is not canonical", c.Point)
			}
			y := f(c.Point)
			told[i] = answered(evaluations, c.Point, y)
			if math.IsInf(y, 0) || math.IsNaN(y) {
				told[i].Status, told[i].Err = optimize.Failed, "no number"
			} else {
				least = math.Min(least, y)
			}
			evaluations++
		}
		s.Tell(told)
	}
}

// far asks for precision, not for economy.
var far = simplex.Config{Evaluations: 6000, Parallel: 1, Each: -1, Tolerance: 1e-15, Size: 0.1}

func TestContract(t *testing.T) {
	searchtest.Run(t, func(d optimize.Domain, n int, _ uint64, past []optimize.Evaluation) optimize.Searcher {
		return simplex.New(d, simplex.Config{Evaluations: n}, past)
	})
}

func TestReachesStandardMinima(t *testing.T) {
	for _, v := range valleys {
		d := fixture(len(v.from), -5, 5)
		least, n := polish(t, d, far, space.Point(v.from), v.at)
		if least > v.least+1e-6 {
			t.Errorf("%s: least %g after %d evaluations, want within 1e-6 of %g", v.name, least, n, v.least)
		}
	}
}

func TestReachesMinimumInCornerFromCorner(t *testing.T) {
	bowl := func(x []float64) float64 { return (x[0]+5)*(x[0]+5) + (x[1]-5)*(x[1]-5) + x[0]*0.1 }
	want := bowl([]float64{-5, 5})
	for _, start := range []space.Point{{5, -5}, {-5, 5}, {-5, -5}, {0, 5}} {
		least, _ := polish(t, fixture(2, -5, 5), far, start, bowl)
		if least > want+1e-6 {
			t.Errorf("from %v: least %g, want %g", start, least, want)
		}
	}
}

func TestSurvivesInfiniteVertices(t *testing.T) {
	cliff := func(x []float64) float64 {
		if x[0] > 1 {
			return math.Inf(1)
		}
		return (x[0]-1)*(x[0]-1) + x[1]*x[1]
	}
	least, _ := polish(t, fixture(2, -5, 5), far, space.Point{-3, 3}, cliff)
	if least > 1e-6 {
		t.Errorf("least %g, want 0 at the foot of the cliff", least)
	}
}

func TestScreenedVerticesCostNothing(t *testing.T) {
	d := fixture(2, -5, 5)
	d.Screen = func(p space.Point) (float64, string) { return math.Max(0, p[0]+p[1]-1), "beyond the line" }
	least, _ := polish(t, d, far, space.Point{-4, -3}, func(x []float64) float64 {
		if x[0]+x[1] > 1 {
			t.Fatalf("%v does not pass the screen but was asked", x)
		}
		return (x[0]-2)*(x[0]-2) + (x[1]-2)*(x[1]-2)
	})
	// The nearest point of the line to (2, 2) is (0.5, 0.5): 4.5.
	if least > 4.5+0.01 { // a simplex slides along an edge only so far
		t.Errorf("least %g, want 4.5 on the screen's edge", least)
	}
}

func TestPinnedVariablesStay(t *testing.T) {
	d := optimize.Domain{Aims: 2, Space: space.Space{
		space.NewReal("x", 0, 1, 0), space.NewStepped("n", 1, 9, 1), space.NewChoice("c", "a", "b"), space.NewReal("same", 3, 3, 0),
	}}
	var past []optimize.Evaluation
	pinned := map[string]bool{}
	for i := range 6 {
		p := d.Space.Canonical(space.Point{0.1 + 0.15*float64(i), float64(1 + i), float64(i % 2), 3})
		past = append(past, answered(i, p, p[0], 1-p[0]+0.01*float64(i)))
		pinned[p[1:].Key()] = true
	}
	s := simplex.New(d, simplex.Config{Evaluations: 100}, past)
	defer s.Close()
	n := 0
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		var told []optimize.Evaluation
		for _, c := range batch {
			if !pinned[c.Point[1:].Key()] {
				t.Fatalf("%v moved a stepped variable or a choice", c.Point)
			}
			told = append(told, answered(n, c.Point, c.Point[0], (1-c.Point[0])*0.9))
			n++
		}
		s.Tell(told)
	}
	if n == 0 || n > 100 {
		t.Errorf("%d evaluations of at most 100", n)
	}
}

func TestNothingToMoveIsDone(t *testing.T) {
	d := optimize.Domain{Aims: 1, Space: space.Space{space.NewChoice("c", "a", "b")}}
	s := simplex.New(d, simplex.Config{Evaluations: 10}, []optimize.Evaluation{answered(0, space.Point{0}, 1)})
	if len(s.Ask()) != 0 || s.Explain() == "" {
		t.Error("a space without a continuous variable was polished")
	}
}

func TestStartsFromLeastViolating(t *testing.T) {
	d := fixture(2, -5, 5)
	d.Limits = 1
	limit := func(x space.Point) float64 { return x[0]*x[0] + x[1]*x[1] - 1 }
	eval := func(id int, p space.Point) optimize.Evaluation {
		e := answered(id, p, p[0])
		e.Limits = []float64{limit(p)}
		return e
	}
	s := simplex.New(d, simplex.Config{Evaluations: 400, Parallel: 2}, []optimize.Evaluation{eval(0, space.Point{4, 4}), eval(1, space.Point{2, 2})})
	defer s.Close()
	best, n := math.Inf(1), 2
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		var told []optimize.Evaluation
		for _, c := range batch {
			told = append(told, eval(n, c.Point))
			best = math.Min(best, limit(c.Point))
			n++
		}
		s.Tell(told)
	}
	if best > 0 {
		t.Errorf("no feasible point was found; the best misses by %g", best)
	}
}

func TestEndsItsGoroutines(t *testing.T) {
	before := runtime.NumGoroutine()
	for range 20 {
		s := simplex.New(fixture(3, 0, 1), simplex.Config{Evaluations: 50}, []optimize.Evaluation{answered(0, space.Point{.5, .5, .5}, 1)})
		s.Ask()
		s.Close()
	}
	for deadline := time.Now().Add(5 * time.Second); runtime.NumGoroutine() > before && time.Now().Before(deadline); {
		time.Sleep(time.Millisecond)
	}
	if after := runtime.NumGoroutine(); after > before {
		t.Errorf("%d goroutines before, %d after", before, after)
	}
}

// evaluator lets the loop run the search.
type evaluator func([]float64) float64

func (f evaluator) Evaluate(_ context.Context, c optimize.Candidate) (optimize.Score, error) {
	y := f(c.Point)
	if math.IsInf(y, 0) {
		return optimize.Score{}, errors.New("no number")
	}
	return optimize.Score{Aims: []float64{y}}, nil
}

func TestSameForAnyWorkers(t *testing.T) {
	v := valleys[0]
	find := func(workers int) string {
		s := simplex.New(fixture(2, -5, 5), simplex.Config{Evaluations: 300}, []optimize.Evaluation{answered(0, space.Point(v.from), v.at(v.from)), answered(1, space.Point{2, 2}, v.at([]float64{2, 2}))})
		defer s.Close()
		r, err := optimize.Run(context.Background(), evaluator(v.at), s, nil, optimize.Options{Workers: workers})
		if err != nil {
			t.Fatal(err)
		}
		text := ""
		for _, e := range r.Evaluations {
			text += e.Point.Key()
		}
		return text
	}
	if one, eight := find(1), find(8); one != eight || one == "" {
		t.Error("one worker and eight walk differently")
	}
}
