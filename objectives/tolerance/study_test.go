package tolerance

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/cmplx"
	"reflect"
	"slices"
	"strings"
	"testing"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
	"turnwise/optimize"
)

// TestExact: without a spread the yield is everything or nothing, to the bit.
func TestExact(t *testing.T) {
	for limit, want := range map[float64]float64{1.6: 1, 1.4: 0} {
		s := study(still, objectives.Limit{Figure: objectives.VSWR, Value: limit})
		s.Spreads = Spreads{}
		res := run(t, s)
		sure := Yield{want, want, want}
		if res.Yield != sure || res.LimitYield[0] != sure || res.Answered != s.Samples || len(res.Sensitivities) != 0 {
			t.Errorf("at most %g: %+v, want %g", limit, res.Yield, want)
		}
	}
}

// TestKnownYield: the length is linear in the spacing, so its yield and
// percentiles are known.
func TestKnownYield(t *testing.T) {
	s := study(still, objectives.Limit{})
	d := bench()
	d.Feed.Lead = models.Lead{}
	s.Design = d
	c, err := helix.Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	const half = 0.4e-3
	length := c.Geometry().Length
	s.Spreads, s.Samples = Spreads{Spacing: half}, 2000
	for _, k := range []struct {
		d     Distribution
		share float64 // of errors below half a half-width
	}{{Uniform, 0.75}, {Normal, 0.5 * (1 + math.Erf(1/math.Sqrt2))}} {
		s.Distribution = k.d
		s.Spec.Limits = []objectives.Limit{{Figure: objectives.Length, Value: length + d.Turns*half/2}}
		res := run(t, s)
		if y := res.Yield; y.Low > k.share || y.High < k.share || y.High-y.Low > 0.05 {
			t.Errorf("%s: %+v, want %g inside", k.d, y, k.share)
		}
		only := res.Sensitivities[0]
		if len(res.Sensitivities) != 1 || only.Dimension != Spacing || only.Changes[0].Share != 1 || math.Abs(only.Changes[0].PerHalfWidth()+d.Turns*half) > 1e-9 {
			t.Errorf("%s: %+v", k.d, res.Sensitivities)
		}
		if p := Percentile(res.Values(objectives.Length), 0.5); math.Abs(p-length) > 0.1*d.Turns*half {
			t.Errorf("%s: half are shorter than %g m, want %g", k.d, p, length)
		}
	}
}

// TestDraw: errors have the variances that the shares rest on.
func TestDraw(t *testing.T) {
	for _, d := range []Distribution{Uniform, Normal} {
		const n = 200_000
		r := optimize.Stream(3, "draw", 0)
		var sum, square, fourth float64
		for range n {
			x := d.draw(r)
			if d == Uniform && math.Abs(x) > 1 {
				t.Fatalf("%g half-widths off", x)
			}
			sum, square, fourth = sum+x/n, square+x*x/n, fourth+x*x*x*x/n
		}
		linear, bowed := d.variances()
		if math.Abs(sum) > 0.01 || math.Abs(square/linear-1) > 0.02 || math.Abs((fourth-square*square)/bowed-1) > 0.03 {
			t.Errorf("%s: mean %g, variances %g and %g, want %g and %g", d, sum, square, fourth-square*square, linear, bowed)
		}
	}
	if Uniform.Check() != nil || Normal.Check() != nil || Distribution("flat").Check() == nil {
		t.Error("uniform and normal are the distributions")
	}
}

// TestSensitivities are the simulator's own finite differences.
func TestSensitivities(t *testing.T) {
	sim := fullWave(t)
	limits := []objectives.Limit{
		{Figure: objectives.Gain, AtLeast: true, Value: 8}, {Figure: objectives.AxialRatio, Value: 3}, {Figure: objectives.VSWR, Value: 2}, {Figure: objectives.Length, Value: 0.2},
	}
	s := study(sim, limits...)
	s.Samples = 1
	res := run(t, s)
	figures := func(d models.Design) objectives.Row {
		c, err := helix.Wind(&d)
		if err != nil {
			t.Fatal(err)
		}
		r, err := sim.Simulate(context.Background(), d, models.Question{Hz: objectives.FineSweep(band())})
		if err != nil {
			t.Fatal(err)
		}
		return objectives.Read(&d, c.Geometry(), &r)
	}
	by := map[Dimension]func(d *models.Design, x float64){
		Diameter:     func(d *models.Design, x float64) { d.Diameter = models.Law{d.Diameter[0] + x} },
		Spacing:      func(d *models.Design, x float64) { d.Spacing = models.Law{d.Spacing[0] + x} },
		Conductor:    func(d *models.Design, x float64) { d.Conductor.Diameter += x },
		FeedHeight:   func(d *models.Design, x float64) { d.Feed.Height += x },
		LeadSpacing:  func(d *models.Design, x float64) { d.Feed.Lead.Spacing += x },
		Permittivity: func(d *models.Design, x float64) { d.Insulation.Permittivity += x },
	}
	if len(res.Sensitivities) != DimensionCount {
		t.Fatalf("%d dimensions, want %d", len(res.Sensitivities), DimensionCount)
	}
	sums := make([]float64, len(limits))
	for _, got := range res.Sensitivities {
		up, down := bench(), bench()
		by[got.Dimension](&up, got.HalfWidth)
		by[got.Dimension](&down, -got.HalfWidth)
		high, low := figures(up), figures(down)
		for i, l := range limits {
			want := (high[l.Figure] - low[l.Figure]) / 2
			if !l.AtLeast {
				want = -want
			}
			sums[i] += got.Changes[i].Share
			if have := got.Changes[i].PerHalfWidth(); math.Abs(have-want) > 1e-9 || want == 0 && l.Figure != objectives.Length {
				t.Errorf("%s of %s: %g per half-width, by differences %g", l.Figure, got.Dimension, have, want)
			}
		}
	}
	for i, sum := range sums {
		if math.Abs(sum-1) > 1e-9 {
			t.Errorf("shares of %s add up to %g", limits[i].Figure, sum)
		}
	}
	for i := 1; i < len(res.Sensitivities); i++ {
		if res.Sensitivities[i].Changes[res.Deciding].Share > res.Sensitivities[i-1].Changes[res.Deciding].Share {
			t.Error("the tightest dimension is not first")
		}
	}
}

// TestSharesAreVariance: what the parabolas say the copies do.
func TestSharesAreVariance(t *testing.T) {
	s := study(fullWave(t), objectives.Limit{Figure: objectives.Gain, AtLeast: true, Value: 8})
	s.Samples = 400
	res := run(t, s)
	said := 0.0
	for _, one := range res.Sensitivities {
		said += one.Changes[0].variance
	}
	values := res.Values(objectives.Gain)
	mean, seen := 0.0, 0.0
	for _, x := range values {
		mean += x / float64(len(values))
	}
	for _, x := range values {
		seen += (x - mean) * (x - mean) / float64(len(values)-1)
	}
	if ratio := said / seen; ratio < 0.8 || ratio > 1.25 {
		t.Errorf("the dimensions add up to a variance of %g, the copies have %g", said, seen)
	}
}

// TestWorkersChangeNothing, nor does the number of copies change the first.
func TestWorkersChangeNothing(t *testing.T) {
	s := study(fullWave(t), objectives.Limit{Figure: objectives.VSWR, Value: 2})
	s.Samples = 12
	s.Workers = 1
	one := run(t, s)
	s.Workers = 7
	told := 0
	s.Progress = func(done, total, failed int) {
		if told++; done != told || done > total || failed != 0 {
			t.Errorf("told of %d of %d, %d failed, at call %d", done, total, failed, told)
		}
	}
	if many := run(t, s); shown(many) != shown(one) {
		t.Error("seven workers find something else")
	}
	// Copies, ends, and waypoints of three adjustments; the riser has one less,
	// where the conductor would meet the plane.
	if want := 12 + 2*DimensionCount + 17; told != want {
		t.Errorf("%d answers were told of, want %d", told, want)
	}
	s.Progress = nil
	s.Samples = 20
	more := run(t, s)
	if shown(one.Copies) != shown(more.Copies[:12]) {
		t.Error("more copies change the first")
	}
	s.Spreads[Conductor] = 0
	if fewer := s.copies(); fewer[3][Spacing] != more.Copies[3].Errors[Spacing] || fewer[3][Conductor] != 0 {
		t.Error("a dimension made exact changes the others")
	}
	s.Seed = 2
	if again := s.copies(); again[0][Diameter] == one.Copies[0].Errors[Diameter] {
		t.Error("another seed draws the same")
	}
}

// shown is a value to the last bit; nothing is equal to itself there too.
func shown(x any) string { return fmt.Sprintf("%+v", x) }

// TestFailures are counted by reason and taken as neither good nor bad.
func TestFailures(t *testing.T) {
	fussy := toy(func(d *models.Design, _ float64) (complex128, error) {
		switch off := d.Diameter[0] - bench().Diameter[0]; {
		case off > 0.25e-3:
			return 0, fmt.Errorf("%.4f mm is too wide", off*1e3)
		case off < -0.4e-3:
			return 0, errors.New("too narrow")
		}
		return 0.2, nil
	})
	s := study(fussy, objectives.Limit{Figure: objectives.VSWR, Value: 1.6})
	s.Spreads, s.Samples = Spreads{Diameter: 0.5e-3}, 200
	res := run(t, s)
	counts := map[string]int{}
	failed := 0
	for _, f := range res.Failures {
		counts[f.Reason[len(f.Reason)-8:]] += f.Count
		failed += f.Count
	}
	if len(res.Failures) != 2 || counts["too wide"] < 30 || counts["o narrow"] < 8 || res.Answered+failed != 200 {
		t.Errorf("%+v of %d", res.Failures, res.Answered)
	}
	if y := res.Yield; y.Share != 1 || y.High != 1 || y.Low > float64(res.Answered)/200 {
		t.Errorf("%+v with %d failures", y, failed)
	}
	if one := res.Sensitivities[0]; !strings.Contains(one.Err, "too") || one.Changes != nil {
		t.Errorf("an end without an answer: %+v", one)
	}
}

// TestNoAnswer: a design that has none, and a limit that judges nothing.
func TestNoAnswer(t *testing.T) {
	s := study(toy(func(*models.Design, float64) (complex128, error) { return 0, errors.New("it will not") }))
	if _, err := s.Run(context.Background()); err == nil || !strings.Contains(err.Error(), "the design itself: it will not") {
		t.Errorf("%v", err)
	}
	s = study(still, objectives.Limit{Figure: objectives.FrontToBack, AtLeast: true, Value: 10})
	if _, err := s.Run(context.Background()); err == nil || !strings.Contains(err.Error(), "front_to_back does not apply") {
		t.Errorf("%v", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	s = study(still)
	if _, err := s.Run(ctx); !errors.Is(err, context.Canceled) {
		t.Errorf("%v", err)
	}
	if _, err := s.Reflections(ctx, []float64{1e9}); !errors.Is(err, context.Canceled) {
		t.Errorf("%v", err)
	}
}

// TestStopped: a signal in the middle ends a study soon.
func TestStopped(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	s := study(still)
	s.Samples = 500
	most := 0
	s.Progress = func(done, _, _ int) {
		if most = done; done == 5 {
			cancel()
		}
	}
	if res, err := s.Run(ctx); !errors.Is(err, context.Canceled) || res != nil || most > 5+s.Workers {
		t.Errorf("%v after %d answers", err, most)
	}
}

// TestStatement: what the model says of itself and the design is kept.
func TestStatement(t *testing.T) {
	sim := fullWave(t)
	s := study(sim)
	s.Samples, s.Design.Conductor.Diameter = 1, 0.009
	s.Design.Feed.Height, s.Design.Feed.Lead = 0.02, models.Lead{}
	res := run(t, s)
	r, err := s.Reflections(context.Background(), []float64{1.68e9})
	if err != nil || res.Statement == "" || r.Statement != res.Statement || len(res.Warnings) == 0 || len(r.Warnings) == 0 {
		t.Errorf("%q %q, %q %q: %v", res.Statement, res.Warnings, r.Statement, r.Warnings, err)
	}
}

// TestIndicative: what a model only indicates is neither judged nor trimmed.
func TestIndicative(t *testing.T) {
	s := study(still, objectives.Limit{Figure: objectives.Gain, AtLeast: true, Value: 9}, objectives.Limit{Figure: objectives.VSWR, Value: 1.1})
	s.Rung.Indicative = true
	s.Spec.Aims = []objectives.Aim{{Figure: objectives.AxialRatio}}
	res := run(t, s)
	if res.Yield.Share != 1 || len(res.Limits) != 1 || !slices.Equal(res.Unapplied, []string{"the limit on vswr"}) || len(res.Adjustments) != 0 {
		t.Errorf("%+v, %q, %d adjustments", res.Yield, res.Unapplied, len(res.Adjustments))
	}
	s.Spec.TrustIndicative = true
	if res = run(t, s); res.Yield.Share != 0 || len(res.Limits) != 2 || res.Limits[res.Deciding].Figure != objectives.VSWR || len(res.Adjustments) != 3 {
		t.Errorf("trusted: %+v, deciding %d, %d adjustments", res.Yield, res.Deciding, len(res.Adjustments))
	}
}

// TestSpreads: margins take the place of defaults, and nothing spreads that a
// design lacks.
func TestSpreads(t *testing.T) {
	s := Defaults().Margins(objectives.Margins{Spacing: 0.7e-3})
	if s[Spacing] != 0.7e-3 || s[Diameter] != Dimensions[Diameter].Default {
		t.Errorf("%v", s)
	}
	d := bench()
	if s.Of(&d) != s {
		t.Errorf("%v of %v", s.Of(&d), s)
	}
	d.Insulation, d.Feed.Lead = models.Insulation{}, models.Lead{}
	if o := s.Of(&d); o[Permittivity] != 0 || o[LeadSpacing] != 0 || o[FeedHeight] == 0 {
		t.Errorf("%v", o)
	}
	before := bench()
	for i := range Dimensions {
		if d := Dimension(i); reflect.DeepEqual(d.Shift(before, 1e-4), before) || !reflect.DeepEqual(before, bench()) {
			t.Errorf("%s: a shift is a new design", d)
		}
	}
}

// TestAdjust: where the riser alone decides the reflection, trimming it takes
// every error back.
func TestAdjust(t *testing.T) {
	slope := 200.0 // of reflection a metre
	matched := toy(func(d *models.Design, _ float64) (complex128, error) {
		return complex(slope*(d.Feed.Height-0.005), 0), nil
	})
	s := study(matched, objectives.Limit{Figure: objectives.VSWR, Value: 1.2})
	s.Spreads, s.Samples = Spreads{FeedHeight: 1e-3}, 100
	res := run(t, s)
	best := res.Adjustments[0]
	poor := res.Copies[res.Poor]
	if best.Name != "riser height" || math.Abs(best.By+poor.Errors[FeedHeight]) > 0.1e-3 || best.After > 1.05 || best.Trimmed.Share != 1 || best.Untrimmed != res.Yield {
		t.Errorf("%+v of a copy off by %g m", best, poor.Errors[FeedHeight])
	}
	if best.Up+best.Down < 80 || best.Up < 20 || best.Down < 20 {
		t.Errorf("%d up and %d down of 100", best.Up, best.Down)
	}
	worse := 0
	for i := range res.Copies {
		if res.Copies[i].Figures[objectives.VSWR] > poor.Figures[objectives.VSWR] {
			worse++
		}
	}
	if worse < 3 || worse > 6 {
		t.Errorf("%d of 100 copies are worse than the poor one", worse)
	}
	// The conductor must not touch the plane however much a match gains.
	slope = -200
	s.Design.Feed.Height = objectives.LeastFeedHeight(0.0024) + 0.1e-3
	s.Spreads = Spreads{}
	for _, a := range run(t, s).Adjustments {
		if a.Name == "riser height" && a.By < -0.1e-3-1e-12 {
			t.Errorf("the riser is lowered by %g m", -a.By)
		}
	}
}

// TestAdjustFullWave: what is promised is the model's own word.
func TestAdjustFullWave(t *testing.T) {
	sim := fullWave(t)
	s := study(sim, objectives.Limit{Figure: objectives.VSWR, Value: 1.5})
	res := run(t, s)
	if len(res.Adjustments) != 3 {
		t.Fatalf("%d adjustments", len(res.Adjustments))
	}
	for _, a := range res.Adjustments {
		d := s.apply(res.Copies[res.Poor].Errors)
		before, _ := s.reflect(context.Background(), d, res.Hz)
		switch a.Name {
		case "riser height":
			d.Feed.Height += a.By
		case "lead spacing":
			d.Feed.Lead.Spacing += a.By
		case "transformer length":
			d.Feed.Transformer.Length += a.By
		}
		after, err := s.reflect(context.Background(), d, res.Hz)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(highest(before)-a.Before) > 1e-9 || math.Abs(highest(after)-a.After) > 1e-9 || a.After > a.Before || a.Trimmed.Share < a.Untrimmed.Share {
			t.Errorf("%+v, the model says from %g to %g", a, highest(before), highest(after))
		}
	}
}

// highest is the highest VSWR, from the impedance.
func highest(gs []complex128) float64 {
	most := 1.0
	for _, g := range gs {
		most = math.Max(most, models.VSWR(50*(1+g)/(1-g), 50))
	}
	return most
}

// TestReflections: the design in the middle, the reach that of the copies, a
// straight line between.
func TestReflections(t *testing.T) {
	sim := toy(func(d *models.Design, hz float64) (complex128, error) {
		return complex(hz/1e10, 100*(d.Feed.Height-0.005)*hz/1e9), nil
	})
	s := study(sim)
	s.Spreads, s.Samples = Spreads{FeedHeight: 1e-3}, 50
	r, err := s.Reflections(context.Background(), []float64{1e9, 2e9})
	if err != nil || len(r.Copies) != 50 {
		t.Fatal(err)
	}
	reach := r.Reach()
	if reach[0] > 0.1 || reach[0] < 0.09 || math.Abs(reach[1]-2*reach[0]) > 1e-12 {
		t.Errorf("the copies reach %g", reach)
	}
	at, off := r.At([]float64{0.5e9, 1e9, 1.25e9, 2e9, 3e9})
	for i, want := range []float64{0.1, 0.1, 0.125, 0.2, 0.2} {
		if cmplx.Abs(at[i]-complex(want, 0)) > 1e-12 || math.Abs(off[i]-want*10*reach[0]) > 1e-12 {
			t.Errorf("at %d: %g within %g, want %g within %g", i, at[i], off[i], want, want*10*reach[0])
		}
	}
	s.Spreads = Spreads{}
	if r, err := s.Reflections(context.Background(), []float64{1e9}); err != nil || r.Reach()[0] != 0 {
		t.Errorf("an exact copy reaches %v: %v", r, err)
	}
}
