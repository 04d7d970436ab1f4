package chart

import (
	"math"
	"math/cmplx"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

func TestTicks(t *testing.T) {
	for _, c := range []struct {
		low, high float64
		most      int
		want      []float64
		decimals  int
	}{
		{0, 10, 6, []float64{0, 2, 4, 6, 8, 10}, 0},
		{1.66, 1.70, 6, []float64{1.66, 1.67, 1.68, 1.69, 1.70}, 2},
		{-30, 0, 4, []float64{-30, -20, -10, 0}, 0},
		{0, 0.35, 9, []float64{0, 0.05, 0.1, 0.15, 0.2, 0.25, 0.3, 0.35}, 2},
		{96.8, 564, 6, []float64{100, 200, 300, 400, 500}, 0},
	} {
		got, decimals := Ticks(c.low, c.high, c.most)
		if decimals != c.decimals || !slices.EqualFunc(got, c.want, func(a, b float64) bool { return math.Abs(a-b) < 1e-9 }) {
			t.Errorf("Ticks(%g, %g, %d) = %v with %d decimals, want %v with %d", c.low, c.high, c.most, got, decimals, c.want, c.decimals)
		}
	}
}

// Ticks lie inside, in equal steps of 1, 2 or 5 times a power of ten, no more
// than asked for, and their decimals tell them apart.
func TestTicksAreRound(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		low := rapid.Float64Range(-1e4, 1e4).Draw(t, "low")
		span := math.Pow(10, rapid.Float64Range(-3, 4).Draw(t, "span"))
		most := rapid.IntRange(2, 12).Draw(t, "most")
		ticks, decimals := Ticks(low, low+span, most)
		if len(ticks) > most {
			t.Fatalf("%d ticks, %d at the most are due", len(ticks), most)
		}
		seen := map[string]bool{}
		for i, x := range ticks {
			if x < low-1e-6*span || x > low+span+1e-6*span {
				t.Fatalf("tick %g outside %g to %g", x, low, low+span)
			}
			if text := tickText(x, decimals); seen[text] {
				t.Fatalf("two ticks read %q", text)
			} else {
				seen[text] = true
			}
			if i == 0 {
				continue
			}
			step := x - ticks[i-1]
			mantissa := step / math.Pow(10, math.Floor(math.Log10(step)+1e-6))
			if !slices.ContainsFunc([]float64{1, 2, 5}, func(m float64) bool { return math.Abs(mantissa-m) < 1e-3 }) {
				t.Fatalf("a step of %g is not round", step)
			}
		}
	})
}

func TestAroundHoldsItsValues(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		values := rapid.SliceOfN(rapid.Float64Range(-500, 500), 1, 20).Draw(t, "values")
		a := Around("", append(values, math.NaN())...)
		if !(a.Min < a.Max) {
			t.Fatalf("axis from %g to %g", a.Min, a.Max)
		}
		slack := 1e-6 * (a.Max - a.Min)
		for _, v := range values {
			if v < a.Min-slack || v > a.Max+slack {
				t.Fatalf("%g lies outside %g to %g", v, a.Min, a.Max)
			}
		}
		if ticks, _ := Ticks(a.Min, a.Max, 7); len(ticks) < 2 {
			t.Fatalf("an axis from %g to %g has %d ticks", a.Min, a.Max, len(ticks))
		}
	})
	if a := Around("", math.NaN()); a.Min != 0 || a.Max != 1 {
		t.Errorf("without values: %g to %g", a.Min, a.Max)
	}
}

func TestTickTextHasATrueMinus(t *testing.T) {
	for _, c := range []struct {
		x    float64
		d    int
		want string
	}{{-2.5, 1, "−2.5"}, {-1e-12, 2, "0.00"}, {1e3, 0, "1000"}} {
		if got := tickText(c.x, c.d); got != c.want {
			t.Errorf("tickText(%g, %d) = %q, want %q", c.x, c.d, got, c.want)
		}
	}
}

// The corners of the chart, and points that any textbook on lines gives.
func TestReflection(t *testing.T) {
	for _, c := range []struct{ z, want complex128 }{
		{50, 0}, {0, -1}, {cmplx.Inf(), 1}, {complex(0, 50), 1i}, {complex(0, -50), -1i}, {100, 1.0 / 3}, {25, -1.0 / 3},
		{complex(50, 50), complex(0.2, 0.4)},
	} {
		if got := Reflection(c.z, 50); cmplx.Abs(got-c.want) > 1e-12 {
			t.Errorf("Reflection(%v) = %v, want %v", c.z, got, c.want)
		}
	}
}

// Impedances of one resistance lie on its circle, of one reactance on its
// own, and those of one VSWR on a circle about the middle.
func TestSmithCircles(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := rapid.Float64Range(0, 20).Draw(t, "r")
		x := rapid.Float64Range(0.01, 20).Draw(t, "x")
		if rapid.Bool().Draw(t, "negative") {
			x = -x
		}
		g := Reflection(complex(r, x)*75, 75)
		for _, c := range []Circle{ResistanceCircle(r), ReactanceCircle(x)} {
			if off := math.Hypot(real(g)-c.X, imag(g)-c.Y) - c.Radius; math.Abs(off) > 1e-9*(1+c.Radius) {
				t.Fatalf("Γ of %g%+gj lies %g off the circle %+v", r, x, off, c)
			}
		}
		if cmplx.Abs(g) > 1+1e-12 {
			t.Fatalf("|Γ| = %g of a passive load", cmplx.Abs(g))
		}
		s := 1 + r
		for _, z := range []float64{s, 1 / s} {
			if got := cmplx.Abs(Reflection(complex(z, 0), 1)); math.Abs(got-VSWRRadius(s)) > 1e-12 {
				t.Fatalf("|Γ| of %g is %g, the circle of VSWR %g has %g", z, got, s, VSWRRadius(s))
			}
		}
	})
}

func TestPolarRadius(t *testing.T) {
	for _, c := range []struct{ level, want float64 }{{0, 1}, {-30, 0}, {-15, 0.5}, {-3, 0.9}, {-45, 0}, {math.NaN(), 0}, {2, 1}} {
		if got := PolarRadius(c.level, -30); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("PolarRadius(%g) = %g, want %g", c.level, got, c.want)
		}
	}
}

// What is left of a segment lies inside the frame and on the segment, and a
// segment with a point inside is never lost.
func TestClipped(t *testing.T) {
	f := frame{left: 10, right: 90, bottom: 20, top: 70}
	inside := func(p at, slack float64) bool {
		return p.x >= f.left-slack && p.x <= f.right+slack && p.y >= f.bottom-slack && p.y <= f.top+slack
	}
	rapid.Check(t, func(t *rapid.T) {
		draw := func(name string) at {
			return at{rapid.Float64Range(-100, 200).Draw(t, name+"x"), rapid.Float64Range(-100, 200).Draw(t, name+"y")}
		}
		p, q := draw("p"), draw("q")
		a, b, seen := f.clipped(p, q)
		between := rapid.Float64Range(0, 1).Draw(t, "between")
		m := at{p.x + between*(q.x-p.x), p.y + between*(q.y-p.y)}
		if inside(m, -1e-9) && !seen {
			t.Fatalf("%v–%v has %v inside and was lost", p, q, m)
		}
		if !seen {
			return
		}
		for _, e := range []at{a, b} {
			off := (e.x-p.x)*(q.y-p.y) - (e.y-p.y)*(q.x-p.x)
			if !inside(e, 1e-6) || math.Abs(off) > 1e-6*math.Hypot(q.x-p.x, q.y-p.y)*300 {
				t.Fatalf("%v–%v was cut to %v–%v", p, q, a, b)
			}
		}
	})
}
