package main

import (
	"context"
	"encoding/csv"
	"io"
	"math"
	"os"
	"slices"
	"strconv"
	"testing"

	"turnwise/configs"
	"turnwise/objectives"
	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/space"
)

// BenchmarkBalloon searches the front of gain against length of the built-in
// balloon brief with 2,000 standard simulations, by the brief's own programme
// and by the genetic searcher alone. shortfall is the part of the best known
// front's hypervolume that is missed, the mean over seeds 1 to 3; axes are
// scaled to the best known front's box. Run it with -benchtime 1x.
func BenchmarkBalloon(b *testing.B) {
	const evaluations = 2000
	searchers := []struct {
		name string
		make func(*session) optimize.Searcher
	}{
		{"programme", func(ses *session) optimize.Searcher { return ses.searcher() }},
		{"genetic", func(ses *session) optimize.Searcher {
			return genetic.New(ses.problem.Domain(), genetic.Config{Evaluations: evaluations, Seed: ses.brief.Seed}, nil)
		}},
	}
	best := bestKnown(b)
	for _, s := range searchers {
		b.Run(s.name, func(b *testing.B) {
			for b.Loop() {
				sum, worst := 0.0, 0.0
				const seeds = 3
				for seed := range uint64(seeds) {
					ses := balloon(b, seed+1, evaluations)
					missed := best.shortfall(searched(b, ses, s.make(ses)))
					b.Logf("seed %d: shortfall %.4f", seed+1, missed)
					sum, worst = sum+missed, max(worst, missed)
				}
				b.ReportMetric(sum/seeds, "shortfall")
				b.ReportMetric(worst, "shortfall-worst")
			}
		})
	}
}

// balloon is a session of the built-in brief without a folder.
func balloon(t testing.TB, seed uint64, evaluations int) *session {
	t.Helper()
	brief, err := configs.ReadScenario("balloon-downlink")
	if err != nil {
		t.Fatal(err)
	}
	brief.Seed = seed
	problem, err := newProblem(brief, brief.Spec)
	if err != nil {
		t.Fatal(err)
	}
	return &session{s: streams{out: io.Discard, err: io.Discard}, brief: brief, problem: problem, planned: []int{evaluations}}
}

// searched is the front of a search, as its evaluations have it.
func searched(b *testing.B, ses *session, s optimize.Searcher) [][]float64 {
	if c, ok := s.(io.Closer); ok {
		defer c.Close()
	}
	r, err := optimize.Run(context.Background(), ses.problem, s, nil, optimize.Options{Workers: 2, Evaluations: ses.planned[0]})
	if err != nil {
		b.Fatal(err)
	}
	var all front.Archive
	for i := range r.Evaluations {
		all.Insert(r.Evaluations[i].ID, r.Evaluations[i].Value())
	}
	return all.Aims()
}

// bestFront is the best known front, and what a front is measured by.
type bestFront struct {
	points []space.Point
	aims   [][]float64
	axes   front.Axes
}

// shortfall is the part of the best known hypervolume that a front misses;
// negative where it is better.
func (f *bestFront) shortfall(aims [][]float64) float64 {
	reference := front.UnitReference(len(f.aims[0]))
	return 1 - front.Hypervolume(f.axes.Units(aims), reference)/front.Hypervolume(f.axes.Units(f.aims), reference)
}

// bestKnown reads the best known front of the balloon brief.
func bestKnown(t testing.TB) bestFront {
	t.Helper()
	file, err := os.Open("testdata/balloon-front.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	rows, err := csv.NewReader(file).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	layout := balloon(t, 1, 1).problem.Layout
	want := frontColumns(layout)
	if !slices.Equal(rows[0], want) {
		t.Fatalf("columns %v, want %v", rows[0], want)
	}
	var f bestFront
	for _, row := range rows[1:] {
		x := make([]float64, len(row))
		for i, text := range row {
			if i < len(layout.Space) && layout.Space[i].Kind == space.Choice {
				if x[i] = float64(slices.Index(layout.Space[i].Choices, text)); x[i] < 0 {
					t.Fatalf("the brief's stock has no %s", text)
				}
			} else if x[i], err = strconv.ParseFloat(text, 64); err != nil {
				t.Fatal(err)
			}
		}
		n := len(layout.Space)
		f.points = append(f.points, layout.Space.Canonical(space.Point(x[:n])))
		f.aims = append(f.aims, []float64{-x[n], x[n+1]})
	}
	f.axes = front.Span(f.aims)
	return f
}

// frontColumns are those of the best known front: the variables, then the aims.
func frontColumns(l *objectives.Layout) []string {
	var names []string
	for i := range l.Space {
		names = append(names, l.Space[i].Name)
	}
	return append(names, objectives.Figures[objectives.Gain].Column, objectives.Figures[objectives.Length].Column)
}

// The best known front is what the evaluator says it is, meets the limits,
// and holds nothing that is dominated.
func TestBestKnownFront(t *testing.T) {
	f := bestKnown(t)
	values := make([]front.Value, len(f.aims))
	for i := range f.aims {
		values[i] = front.Value{Aims: f.aims[i]}
	}
	if got := len(front.Front(values)); got != len(values) {
		t.Errorf("%d of %d rows are on their front", got, len(values))
	}
	p := balloon(t, 1, 1).problem
	for i := 0; i < len(f.points); i += 10 {
		s, err := p.Evaluate(context.Background(), optimize.Candidate{Point: f.points[i]})
		if err != nil {
			t.Fatal(err)
		}
		if violation := front.Violation(s.Limits); violation > 1e-3 {
			t.Errorf("row %d breaks a limit by %g", i+1, violation)
		}
		for m, got := range s.Aims {
			if want := f.aims[i][m]; math.Abs(got-want) > 1e-3*math.Abs(want) {
				t.Errorf("row %d: %s is %.6g, the file says %.6g", i+1, p.Aims[m].Figure, got, want)
			}
		}
	}
}
