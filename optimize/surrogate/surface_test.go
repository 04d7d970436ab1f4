package surrogate

import (
	"math"
	"math/rand"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// scattered are n points of d features.
func scattered(n, d int) [][]float64 {
	rng := rand.New(rand.NewSource(1))
	points := make([][]float64, n)
	for i := range points {
		points[i] = make([]float64, d)
		for k := range points[i] {
			points[i][k] = rng.Float64()
		}
	}
	return points
}

// laid is a single kernel through the values.
func laid(k kernel, points [][]float64, values []float64) *surfaces {
	s := &surfaces{centres: points, ordered: len(points[0]), typical: typical(points), outputs: []copied{{scale: 1}}}
	w := warp{width: 1, middle: 10} // far from where the logarithm begins
	s.figures = []surface{{warp: w, error: math.Inf(1)}}
	right := mat.NewDense(len(points)+1+s.ordered, 1, nil)
	for i, x := range values {
		right.Set(i, 0, w.to(x))
	}
	s.try(k, right, len(points))
	return s
}

func foretoldBy(s *surfaces, u []float64, caution float64) float64 {
	out := make([]float64, len(s.outputs))
	s.foretell(u, caution, newColumns(s), out)
	return out[0]
}

func bumpy(u []float64) float64 { return math.Sin(3*u[0])*u[1] + math.Abs(u[2]-0.4) }

// Every kernel goes through what is known, and foretells what a straight
// line says.
func TestKernelsInterpolate(t *testing.T) {
	points := scattered(30, 3)
	values, line := make([]float64, 30), make([]float64, 30)
	straightLine := func(u []float64) float64 { return 2 + u[0] - 3*u[1] + 0.5*u[2] }
	for i, u := range points {
		values[i], line[i] = bumpy(u), straightLine(u)
	}
	for k := range kernels {
		s := laid(kernel(k), points, values)
		for i, u := range points {
			if got := foretoldBy(s, u, 0); math.Abs(got-values[i]) > 1e-6 {
				t.Errorf("kernel %d at centre %d: %.9f, known %.9f", k, i, got, values[i])
			}
		}
		u := []float64{0.31, 0.62, 0.93}
		if got := foretoldBy(laid(kernel(k), points, line), u, 0); math.Abs(got-straightLine(u)) > 1e-6 {
			t.Errorf("kernel %d leaves a straight line: %.9f, want %.9f", k, got, straightLine(u))
		}
	}
}

// The left-out error is that of surfaces that are laid anew without each
// centre.
func TestLeftOutErrorIsThatOfLeavingOut(t *testing.T) {
	points := scattered(14, 3)
	values := make([]float64, len(points))
	for i, u := range points {
		values[i] = bumpy(u)
	}
	for k := range kernels {
		sum := 0.0
		for i, u := range points {
			var rest [][]float64
			var known []float64
			for j := range points {
				if j != i {
					rest, known = append(rest, points[j]), append(known, values[j])
				}
			}
			e := foretoldBy(laid(kernel(k), rest, known), u, 0) - values[i]
			sum += e * e
		}
		want := math.Sqrt(sum / float64(len(points)))
		if got := laid(kernel(k), points, values).figures[0].error; math.Abs(got-want) > 1e-5*want {
			t.Errorf("kernel %d: left-out error %g, by leaving out %g", k, got, want)
		}
	}
}

// Each figure takes the kernel made for it.
func TestFiguresChooseTheirKernels(t *testing.T) {
	points := scattered(60, 5)
	var outputs [2][]float64
	for _, u := range points {
		steps, pairs := 0.0, 0.0
		for i, x := range u {
			steps += math.Round(3 * x)
			pairs += x * x * u[(i+1)%5] * u[(i+1)%5]
		}
		outputs[0], outputs[1] = append(outputs[0], steps), append(outputs[1], pairs)
	}
	s, ok := learn(points, 5, outputs[:], len(points))
	if !ok {
		t.Fatal("no surface")
	}
	if got := s.figures[0].kernel; got != linearSum {
		t.Errorf("a sum of steps took kernel %d", got)
	}
	if got := s.figures[1].kernel; got != cubicPairs {
		t.Errorf("a sum over pairs took kernel %d", got)
	}
}

// Caution is nothing at a centre and grows away from it.
func TestCautionGrowsWithDistance(t *testing.T) {
	points := scattered(20, 3)
	values := make([]float64, len(points))
	for i, u := range points {
		values[i] = bumpy(u)
	}
	s := laid(cubic, points, values)
	if a, b := foretoldBy(s, points[7], 0), foretoldBy(s, points[7], 2); math.Abs(a-b) > 1e-12 {
		t.Errorf("caution %g at a centre", b-a)
	}
	far := []float64{2, 2, 2}
	nearest := math.Inf(1)
	for _, x := range points {
		nearest = min(nearest, distance(far, x))
	}
	want := 2 * s.figures[0].error * nearest / s.typical
	if got := foretoldBy(s, far, 2) - foretoldBy(s, far, 0); math.Abs(got-want) > 1e-9 {
		t.Errorf("caution %g far out, want %g", got, want)
	}
}

// Points that share a plane, or a value of a variable, can be learned from.
func TestFlatPointsAreLearned(t *testing.T) {
	points := scattered(20, 3)
	values := make([]float64, len(points))
	for i, u := range points {
		u[2] = 0.5
		values[i] = u[0] * u[1]
	}
	s, ok := learn(points, 3, [][]float64{values}, len(points))
	if !ok {
		t.Fatal("no surface")
	}
	if got := foretoldBy(s, []float64{0.4, 0.6, 0.5}, 0); math.Abs(got-0.24) > 0.02 {
		t.Errorf("0.4 times 0.6 is foretold as %g", got)
	}
}

func TestCopiesAreLearnedOnce(t *testing.T) {
	x := []float64{3, 1, 2, 8}
	line := func(a, b float64) []float64 {
		y := make([]float64, len(x))
		for i := range x {
			y[i] = a + b*x[i]
		}
		return y
	}
	other := line(1, -2)
	other[2] += 1e-6
	outputs := [][]float64{x, line(5, -0.25), other, line(7, 0), {4, 4, 4, 4}}
	figures, all := distinct(outputs)
	if len(figures) != 2 {
		t.Fatalf("%d figures, want the first and the one that is bent", len(figures))
	}
	for o, c := range all {
		for i, want := range outputs[o] {
			if got := c.offset + c.scale*figures[c.figure][i]; math.Abs(got-want) > 1e-8 {
				t.Errorf("output %d at %d: %g, want %g", o, i, got, want)
			}
		}
	}
}

func TestWarpIsAScale(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		w := newWarp(rapid.SliceOfN(rapid.Float64Range(-100, 100), 1, 20).Draw(t, "values"))
		x, y := rapid.Float64Range(-500, 500).Draw(t, "x"), rapid.Float64Range(-500, 500).Draw(t, "y")
		if z := w.to(x); z < warpTo && math.Abs(w.from(z)-x) > 1e-9*(w.width+math.Abs(x)+math.Abs(w.middle)) {
			t.Fatalf("%g comes back as %g", x, w.from(z))
		}
		if x < y && w.to(x) > w.to(y) {
			t.Fatalf("%g and %g change their order", x, y)
		}
	})
}
