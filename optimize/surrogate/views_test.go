package surrogate_test

import (
	"context"
	"math"
	"runtime"
	"testing"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/genetic"
	"turnwise/optimize/space"
	"turnwise/optimize/surrogate"
)

// banded is a made-up antenna: over five frequencies its gain rises with
// length and its reflection turns with every dimension, so that the worst of
// either has kinks everywhere and few points are matched.
type banded struct{ traits bool }

func (b banded) domain() optimize.Domain {
	d := optimize.Domain{Aims: 2, Limits: 1}
	for _, name := range []string{"length", "width", "riser", "pitch"} {
		d.Space = append(d.Space, space.NewReal(name, 0, 1, 1e-6))
	}
	d.Space = append(d.Space, space.NewChoice("stock", "thin", "thick", "tube"))
	if b.traits {
		d.Traits = &optimize.Traits{Kinds: 3, Read: b.read}
	}
	return d
}

func (banded) read(p space.Point, traits []float64) (aims, limits []float64) {
	gain, reflected := math.Inf(1), 0.0
	for ; len(traits) > 0; traits = traits[3:] {
		gain = math.Min(gain, traits[0])
		reflected = math.Max(reflected, math.Hypot(traits[1], traits[2]))
	}
	return []float64{-gain, p[0]}, []float64{reflected - 0.2}
}

func (b banded) Evaluate(_ context.Context, c optimize.Candidate) (optimize.Score, error) {
	p := c.Point
	var t []float64
	for f := -1.0; f <= 1; f += 0.5 {
		turn := 9*p[0] + 4*p[1] + 0.3*f
		away := p[1] - 0.3 - 0.4*p[0] + 0.05*f
		t = append(t, 10+4*p[0]-6*away*away,
			0.35*math.Cos(turn)+p[2]-0.6+0.1*p[4], 0.35*math.Sin(turn)+p[3]-0.4)
	}
	var s optimize.Score
	s.Aims, s.Limits = b.read(p, t)
	if b.traits {
		s.Traits = t
	}
	return s, nil
}

// searched is the hypervolume that a searcher finds, and the keys of what it
// asked.
func (b banded) searched(t *testing.T, s optimize.Searcher) (volume float64, keys string) {
	t.Helper()
	r, err := optimize.Run(context.Background(), b, s, nil, optimize.Options{Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	var all front.Archive
	for i := range r.Evaluations {
		all.Insert(i, r.Evaluations[i].Value())
		keys += r.Evaluations[i].Point.Key()
	}
	axes := front.Axes{Ideal: []float64{-14, 0}, Nadir: []float64{-10, 1}}
	return front.Hypervolume(axes.Units(all.Aims()), front.UnitReference(2)), keys
}

// Processes through traits find far more than surfaces through worst cases or
// breeding do in the same few evaluations.
func TestTraitsFindMore(t *testing.T) {
	const evaluations, seeds = 120, 3
	var traits, figures, bred float64
	for seed := uint64(1); seed <= seeds; seed++ {
		c := surrogate.Config{Evaluations: evaluations, Seed: seed}
		for _, one := range []struct {
			b   banded
			s   optimize.Searcher
			sum *float64
		}{
			{banded{true}, surrogate.New(banded{true}.domain(), c, nil), &traits},
			{banded{}, surrogate.New(banded{}.domain(), c, nil), &figures},
			{banded{}, genetic.New(banded{}.domain(), genetic.Config{Population: 20, Evaluations: evaluations, Seed: seed}, nil), &bred},
		} {
			volume, _ := one.b.searched(t, one.s)
			*one.sum += volume / seeds
		}
	}
	t.Logf("hypervolume: %.4f by traits, %.4f by figures, %.4f bred", traits, figures, bred)
	if traits < 1.3*max(figures, bred) {
		t.Error("traits do not pay")
	}
}

// The views search side by side and come to the same, however many can.
func TestViewsDoNotDependOnProcessors(t *testing.T) {
	asked := func(processors int) string {
		defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(processors))
		_, keys := banded{true}.searched(t, surrogate.New(banded{true}.domain(), surrogate.Config{Evaluations: 60, Seed: 5}, nil))
		return keys
	}
	if asked(1) != asked(4) {
		t.Error("more processors asked something else")
	}
}

// Points whose aims cannot be read are not asked, and stop nothing.
func TestSomePointsCannotBeRead(t *testing.T) {
	d := banded{true}.domain()
	read := d.Traits.Read
	d.Traits = &optimize.Traits{Kinds: 3, Read: func(p space.Point, traits []float64) (aims, limits []float64) {
		aims, limits = read(p, traits)
		if p[0] > 0.5 {
			aims[0] = math.NaN()
		}
		return aims, limits
	}}
	s := surrogate.New(d, surrogate.Config{Evaluations: 90, Seed: 2}, nil)
	r, err := optimize.Run(context.Background(), banded{true}, s, nil, optimize.Options{Workers: 1})
	if err != nil || len(r.Evaluations) != 90 {
		t.Fatalf("%d evaluations (%v)", len(r.Evaluations), err)
	}
	high := 0
	for _, e := range r.Evaluations[30:] {
		if e.Point[0] > 0.5 {
			high++
		}
	}
	if high > 20 { // what is drawn or bred knows nothing of it
		t.Errorf("%d of 60 cannot be read", high)
	}
}

// unknowable answers with traits that are no numbers now and then.
type unknowable struct{ banded }

func (u unknowable) Evaluate(ctx context.Context, c optimize.Candidate) (optimize.Score, error) {
	s, err := u.banded.Evaluate(ctx, c)
	switch c.ID % 3 {
	case 0:
		s.Traits[0] = math.NaN()
	case 1:
		s.Traits = nil
	}
	return s, err
}

// Answers without traits, or with traits that are no numbers, are not learned
// from and do not stop the search.
func TestSomeTraitsAreUnknown(t *testing.T) {
	s := surrogate.New(banded{true}.domain(), surrogate.Config{Evaluations: 90, Seed: 2}, nil)
	r, err := optimize.Run(context.Background(), unknowable{banded{true}}, s, nil, optimize.Options{Workers: 1})
	if err != nil || len(r.Evaluations) != 90 {
		t.Errorf("%d evaluations (%v)", len(r.Evaluations), err)
	}
}
