package surrogate

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/diff/fd"
	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// wavy is smooth in the first feature, slower in the second, and knows
// nothing of the others.
func wavy(u []float64) float64 { return math.Sin(7*u[0]) + 0.5*math.Cos(2*u[1]) }

func wavyAt(points [][]float64) []float64 {
	out := make([]float64, len(points))
	for i, u := range points {
		out[i] = wavy(u)
	}
	return out
}

// laidProcess is a process through values with scales that are given.
func laidProcess(t testing.TB, s *scales, points [][]float64, values []float64) *process {
	t.Helper()
	z, warps := standardised([][]float64{values})
	p, ok := newProcess(s, points, z, warps, len(points)/2)
	if !ok {
		t.Fatal("no process can be laid")
	}
	return p
}

func foretoldTrait(p *process, centres int, u []float64, view float64) float64 {
	out := make([]float64, 1)
	p.foretell(u, view, newProcessRoom(centres, len(u)), out, 1)
	return out[0]
}

func even(features int, length, nugget float64) *scales {
	s := &scales{nugget: nugget}
	for range features {
		s.inverse = append(s.inverse, 1/length)
	}
	return s
}

// The likelihood against that of a normal distribution worked out with
// determinant and inverse, and its slopes against differences (gonum's).
func TestLikelihood(t *testing.T) {
	points := scattered(25, 3)
	y, _ := standardised([][]float64{wavyAt(points)})
	l := newLikelihood(points, y[0])
	for _, raw := range [][]float64{l.first(), {0.3, -0.5, 1, 0.2}, {-1, 2, 0, -2}} {
		s := l.scales(raw)
		k := mat.NewDense(25, 25, nil)
		for i := range points {
			for j := range points {
				d := 0.0
				for f := range 3 {
					d += math.Pow((points[i][f]-points[j][f])*s.inverse[f], 2)
				}
				r := math.Sqrt(5 * d)
				k.Set(i, j, (1+r+5*d/3)*math.Exp(-r))
			}
			k.Set(i, i, 1+s.nugget)
		}
		var inverse mat.Dense
		if err := inverse.Inverse(k); err != nil {
			t.Fatal(err)
		}
		v := mat.NewVecDense(25, y[0])
		logDet, _ := mat.LogDet(k)
		want := 25*math.Log(mat.Inner(v, &inverse, v)/25) + logDet
		l.evaluate(raw)
		if math.Abs(l.value-want) > 1e-6*math.Abs(want) {
			t.Errorf("at %v: %.9g, want %.9g", raw, l.value, want)
		}
		gradient := append([]float64(nil), l.gradient...)
		differences := fd.Gradient(nil, func(x []float64) float64 { l.evaluate(x); return l.value }, raw, &fd.Settings{Formula: fd.Central})
		for i, g := range differences {
			if math.Abs(gradient[i]-g) > 1e-4*(1+math.Abs(g)) {
				t.Errorf("at %v: slope %d is %g, differences say %g", raw, i, gradient[i], g)
			}
		}
	}
}

// What makes no difference gets a long scale, and what varies fast a short
// one; with them few answers foretell the rest.
func TestScalesTellFeaturesApart(t *testing.T) {
	points := scattered(120, 5)
	values := wavyAt(points)
	y, _ := standardised([][]float64{values})
	s := fitted(points[:80], y[0][:80], nil)
	if s.inverse[0] < 2*s.inverse[1] || s.inverse[1] < 2*s.inverse[2] {
		t.Errorf("inverse lengths %.3g", s.inverse)
	}
	learned, plain := 0.0, 0.0
	good, same := laidProcess(t, s, points[:80], values[:80]), laidProcess(t, even(5, 1, 1e-6), points[:80], values[:80])
	for i := 80; i < 120; i++ {
		learned += math.Pow(foretoldTrait(good, 80, points[i], 0)-values[i], 2)
		plain += math.Pow(foretoldTrait(same, 80, points[i], 0)-values[i], 2)
	}
	if learned > 0.1*plain {
		t.Errorf("squared errors: %.3g with scales that were learned, %.3g with equal ones", learned, plain)
	}
	if again := fitted(points[:80], y[0][:80], s); math.Abs(again.inverse[0]/s.inverse[0]-1) > 0.3 {
		t.Errorf("fitted again from where it ended: %.3g, was %.3g", again.inverse[0], s.inverse[0])
	}
}

// A process goes through its centres, whatever the view, and a view moves it
// elsewhere the more the farther that is from all.
func TestProcessInterpolates(t *testing.T) {
	points := scattered(40, 3)
	values := wavyAt(points)
	p := laidProcess(t, even(3, 0.8, 1e-8), points, values)
	rapid.Check(t, func(rt *rapid.T) {
		i := rapid.IntRange(0, 39).Draw(rt, "centre")
		view := rapid.Float64Range(-3, 3).Draw(rt, "view")
		if got := foretoldTrait(p, 40, points[i], view); math.Abs(got-values[i]) > 1e-4 {
			rt.Errorf("centre %d: %g, want %g", i, got, values[i])
		}
		near, far := []float64{points[i][0] + 0.01, points[i][1], points[i][2]}, []float64{3, 3, 3}
		moved := func(u []float64) float64 { return foretoldTrait(p, 40, u, 1) - foretoldTrait(p, 40, u, 0) }
		if a, b := moved(near), moved(far); !(a >= 0 && a < b/2) {
			rt.Errorf("a view moves %g near a centre, %g far from all", a, b)
		}
	})
}

// A hair's breadth from a centre the kernel may round to more than it is at the
// centre itself; a view still knows what to do.
func TestProcessNextToACentre(t *testing.T) {
	points := scattered(40, 3)
	values := wavyAt(points)
	p := laidProcess(t, even(3, 0.8, 1e-8), points, values)
	for hair := 1e-12; hair < 1e-2; hair *= 1.001 {
		if got := foretoldTrait(p, 40, []float64{points[0][0] + hair, points[0][1], points[0][2]}, 1); !(math.Abs(got-values[0]) < 0.5) {
			t.Fatalf("%g from a centre: %g, want about %g", hair, got, values[0])
		}
	}
}

// The error is that of processes laid without each centre in turn.
func TestProcessKnowsItsError(t *testing.T) {
	points := scattered(30, 2)
	values := wavyAt(points)
	s := even(2, 0.5, 1e-6)
	p := laidProcess(t, s, points, values)
	sum := 0.0
	for i := range 15 {
		var others [][]float64
		var z []float64
		most := 0.0
		for j := range points {
			if j != i {
				others, z = append(others, points[j]), append(z, p.warps[0].to(values[j]))
				most = max(most, matern(square(points[i], points[j])/0.25))
			}
		}
		without, ok := newProcess(s, others, [][]float64{z}, []warp{{width: 1, both: true}}, 1)
		if !ok {
			t.Fatal("no process without one centre")
		}
		e := foretoldTrait(without, 29, points[i], 0) - (warp{width: 1, both: true}).from(p.warps[0].to(values[i]))
		sum += e * e / (1 - most*most + s.nugget)
	}
	if want := math.Sqrt(sum / 15); math.Abs(p.error/want-1) > 1e-3 {
		t.Errorf("error %g, left out one by one %g", p.error, want)
	}
}

// Centres that coincide, and traits that are all the same, can be learned.
func TestProcessThroughWhatIsTied(t *testing.T) {
	points := scattered(20, 2)
	points = append(points, points[0], points[0], points[1])
	values := wavyAt(points)
	if got := foretoldTrait(laidProcess(t, even(2, 1, leastNugget), points, values), 23, points[0], 0); math.Abs(got-values[0]) > 1e-3 {
		t.Errorf("%g, want %g", got, values[0])
	}
	same := make([]float64, len(points))
	y, _ := standardised([][]float64{same})
	s := fitted(points, y[0], nil)
	if got := foretoldTrait(laidProcess(t, s, points, same), 23, []float64{0.5, 0.5}, 1); got != 0 {
		t.Errorf("all are 0, foretold %g", got)
	}
}

func TestDecay(t *testing.T) {
	for x := 0.0; x < 700; x += 0.0137 {
		if got, want := decay(x), math.Exp(-x); math.Abs(got-want) > 2e-12*want+1e-299 {
			t.Fatalf("e^-%g: %g, want %g", x, got, want)
		}
	}
}

// A warp of both ends is monotone and turns back.
func TestWarpOfBothEnds(t *testing.T) {
	w := newWarp([]float64{-100, 9, 10, 11, 12, 13, 90})
	w.both = true
	last := math.Inf(-1)
	for x := -120.0; x <= 120; x += 0.5 {
		z := w.to(x)
		if z <= last {
			t.Fatalf("at %g it falls from %g to %g", x, last, z)
		}
		last = z
		if back := w.from(z); math.Abs(back-x) > 1e-9*(1+math.Abs(x)) {
			t.Errorf("%g turns back to %g", x, back)
		}
	}
	if z := w.to(-100); z < -warpFrom-5 {
		t.Errorf("the far low end lies at %g", z)
	}
}
