package moment

import (
	"context"
	"errors"
	"sync"
	"testing"

	"turnwise/models"
	"turnwise/models/helix"
)

// A worker that has answered a design answers it without asking for room
// again; a law of three knots is fitted with the library's own two slices.
func TestAnswersAllocateNothing(t *testing.T) {
	coat := benchDesign(4)
	coat.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.006}
	coat.Insulation = models.Insulation{Thickness: 3e-4, Permittivity: 2.3}
	disc, cup := benchDesign(2), benchDesign(2)
	disc.Ground = models.Ground{Kind: models.Disc, Diameter: 0.3}
	cup.Ground = models.Ground{Kind: models.Cup, Diameter: 0.3, Rim: 0.1}
	for name, d := range map[string]models.Design{"uniform": benchDesign(4), "taper": benchTaper(4), "strip and coat": coat, "disc": disc, "cup": cup} {
		var curve helix.Curve
		fit := testing.AllocsPerRun(3, func() {
			if err := curve.Wind(&d); err != nil {
				t.Fatal(err)
			}
		})
		if name != "taper" && fit != 0 {
			t.Errorf("%s: winding takes %g allocations", name, fit)
		}
		for _, f := range []Fidelity{Draft, Standard, Fine} {
			set, _ := f.settings()
			w := newWorker()
			q := models.Question{
				Hz:      []float64{0.98e9, 1.02e9},
				Outputs: models.Cone | models.Cuts | models.Spread | models.Balance, Cone: 0.2,
			}
			samples := make([]models.Sample, len(q.Hz))
			answer := func() {
				if err := w.answer(context.Background(), set, &d, q, samples); err != nil {
					t.Fatal(err)
				}
			}
			answer()
			if n := testing.AllocsPerRun(1, answer); n != fit {
				t.Errorf("%s, %s: %g allocations; %g are due", name, f, n, fit)
			}
		}
	}
}

// A worker that comes from another design answers as a new one does.
func TestRoomIsLeftClean(t *testing.T) {
	set, _ := Standard.settings()
	strip := benchDesign(3)
	strip.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.006}
	coat := benchTaper(4)
	coat.Insulation = models.Insulation{Thickness: 3e-4, Permittivity: 2.3}
	disc, cup := benchTaper(4), benchDesign(3)
	disc.Ground = models.Ground{Kind: models.Disc, Diameter: 0.3}
	cup.Ground = models.Ground{Kind: models.Cup, Diameter: 0.25, Rim: 0.1}
	designs := []models.Design{benchDesign(12), strip, disc, strip, cup, coat, benchDesign(2), disc, benchTaper(9), strip}
	q := models.Question{Hz: []float64{0.97e9, 1e9, 1.02e9}, Outputs: models.Cuts | models.Spread | models.Balance}
	used := newWorker()
	for i := range designs {
		got, want := make([]models.Sample, len(q.Hz)), make([]models.Sample, len(q.Hz))
		if err := errors.Join(used.answer(context.Background(), set, &designs[i], q, got), newWorker().answer(context.Background(), set, &designs[i], q, want)); err != nil {
			t.Fatal(err)
		}
		for j := range want {
			if what, e := differ(&want[j], &got[j]); e != 0 {
				t.Errorf("design %d, %g Hz: the %s is off by %.2g in a used worker", i, want[j].Hz, what, e)
			}
		}
	}
}

// Many at once, each with a design of another size, answer as one by one, to
// the bit.
func TestManyDesignsAtOnce(t *testing.T) {
	s, err := New(Standard)
	if err != nil {
		t.Fatal(err)
	}
	q := models.Question{Hz: []float64{0.98e9, 1.02e9}, Outputs: models.Cuts | models.Spread}
	ask := func(i int) ([]models.Sample, error) {
		d := benchTaper(1 + float64(i%7))
		if i%4 == 3 {
			d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2 + 0.05*float64(i%3)}
		}
		r, err := s.Simulate(context.Background(), d, q)
		return r.Samples, err
	}
	const count = 28
	var serial, parallel [count][]models.Sample
	var faults [count]error
	for i := range serial {
		if serial[i], err = ask(i); err != nil {
			t.Fatal(err)
		}
	}
	var wg sync.WaitGroup
	for i := range parallel {
		wg.Go(func() { parallel[i], faults[i] = ask(i) })
	}
	wg.Wait()
	if err := errors.Join(faults[:]...); err != nil {
		t.Fatal(err)
	}
	for i := range serial {
		for j := range serial[i] {
			if what, e := differ(&serial[i][j], &parallel[i][j]); e != 0 {
				t.Errorf("question %d: the %s is off by %.2g among others", i, what, e)
			}
		}
	}
}

// A context that has ended ends a question before any of its work, and one
// that ends amid a sweep ends it before the next frequency.
func TestCancelledQuestion(t *testing.T) {
	s, err := New(Standard)
	if err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := s.Simulate(ctx, benchDesign(6), models.Question{Hz: []float64{1e9}}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled before: %v", err)
	}
	ctx, cancel = context.WithCancel(context.Background())
	defer cancel()
	set, _ := Standard.settings()
	seen := 0
	w := new(work)
	err = w.sweep(ctx, wound(t, benchDesign(6), Standard, 1e9), set, models.Band{From: 0.9e9, To: 1e9, Samples: 50}.Hz(), watcher(func(*Solution) error {
		if seen++; seen == 2 {
			cancel()
		}
		return nil
	}))
	if !errors.Is(err, context.Canceled) || seen != 2 {
		t.Errorf("cancelled at the second frequency: %d seen, %v", seen, err)
	}
}
