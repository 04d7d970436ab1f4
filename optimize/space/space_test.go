package space_test

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/optimize/space"
)

var mixed = space.Space{
	space.NewReal("x", -1.5, 2.25, 1e-6), space.NewReal("free", 0, 1, 0), space.NewStepped("n", 3, 12, 0.25),
	space.NewStepped("tenth", 0.1, 1.3, 0.1), space.NewChoice("c", "a", "b", "c"), space.NewReal("same", 4, 4, 1e-3),
}

func TestCanonicalIsIdempotentAndInside(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := make(space.Point, len(mixed))
		for i := range p {
			p[i] = rapid.Float64().Draw(t, "x")
		}
		q := mixed.Canonical(p)
		if r := mixed.Canonical(q); r.Key() != q.Key() {
			t.Fatalf("%v became %v", q, r)
		}
		for i, x := range q {
			v := &mixed[i]
			if !(x >= v.From && x <= v.To) {
				t.Fatalf("%s = %g is outside", v.Name, x)
			}
			if v.Kind != space.Real {
				if k := (x - v.From) / v.Step; math.Abs(k-math.Round(k)) > 1e-9 {
					t.Fatalf("%s = %g is off its steps", v.Name, x)
				}
			}
		}
	})
}

// Values come out as the shortest decimals: no step or grid leaves last bits.
func TestSnapIsTidy(t *testing.T) {
	for k := range 13 {
		got := mixed[3].Snap(0.1 + float64(k)*0.1)
		want, _ := strconv.ParseFloat(strconv.FormatFloat(0.1+float64(k)*0.1, 'f', 1, 64), 64)
		if got != want {
			t.Errorf("step %d: %.17g, want %.17g", k, got, want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		x := mixed[0].Snap(rapid.Float64Range(-1.5, 2.25).Draw(t, "x"))
		if want, _ := strconv.ParseFloat(strconv.FormatFloat(x, 'f', 6, 64), 64); x != want {
			t.Fatalf("%.17g is not the nearest to its decimal", x)
		}
	})
}

func TestUnitRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		u := make([]float64, len(mixed))
		for i := range u {
			u[i] = rapid.Float64Range(0, 1).Draw(t, "u")
		}
		p := mixed.FromUnit(u)
		for i, x := range mixed.Unit(p) {
			if x < 0 || x > 1 {
				t.Fatalf("%s: unit coordinate %g", mixed[i].Name, x)
			}
		}
	})
}

// Steps and choices get equal shares of the axis.
func TestFromUnitIsFair(t *testing.T) {
	count := map[float64]int{}
	const n = 3700
	for i := range n {
		u := make([]float64, len(mixed))
		u[2], u[4] = (float64(i)+0.5)/n, (float64(i)+0.5)/n
		p := mixed.FromUnit(u)
		count[p[2]]++
	}
	if len(count) != 37 {
		t.Fatalf("%d values, want 37", len(count))
	}
	for x, k := range count {
		if k != n/37 {
			t.Errorf("%g came %d times, want %d", x, k, n/37)
		}
	}
}

func TestLevelsAndPins(t *testing.T) {
	for i, want := range []int{0, 0, 37, 13, 3, 1} {
		if got := mixed[i].Levels(); got != want {
			t.Errorf("%s has %d levels, want %d", mixed[i].Name, got, want)
		}
		if pinned := mixed[i].Pinned(); pinned != (want > 0) {
			t.Errorf("%s pinned: %v", mixed[i].Name, pinned)
		}
	}
	if mixed[0].Snap(math.NaN()) != -1.5 {
		t.Error("NaN does not go to the lower bound")
	}
}

func TestCheckNamesAllFaults(t *testing.T) {
	err := space.Space{
		space.NewReal("a", 2, 1, 0), space.NewReal("a", 0, math.Inf(1), 0), space.NewStepped("s", 0, 1, 0), space.NewReal("nan", math.NaN(), 1, 0),
	}.Check()
	if err == nil {
		t.Fatal("no error")
	}
	for _, word := range []string{`"a": bounds 2 to 1`, `"a": named twice`, `+Inf`, `"s": step 0`, `"nan": bounds`} {
		if !strings.Contains(err.Error(), word) {
			t.Errorf("%q is not in: %v", word, err)
		}
	}
	if err := mixed.Check(); err != nil {
		t.Error(err)
	}
}

func TestCanonicalRefusesAnotherLength(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("no panic")
		}
	}()
	mixed.Canonical(space.Point{1})
}

// A variable begins where an earlier choice lets it.
func TestFloorsFollowTheChoice(t *testing.T) {
	s := space.Space{space.NewChoice("wire", "thin", "thick", "far too thick"), space.NewReal("height", 4, 12, 0)}
	s[1].Floors = &space.Floors{By: 0, Least: []float64{3, 5, 20}}
	for _, c := range []struct{ point, want space.Point }{
		{space.Point{0, 1}, space.Point{0, 4}},
		{space.Point{1, 1}, space.Point{1, 5}},
		{space.Point{1, 7}, space.Point{1, 7}},
		{space.Point{2, 7}, space.Point{2, 12}}, // the space still ends at To
	} {
		got := s.Canonical(c.point)
		if got.Key() != c.want.Key() || s.Canonical(got).Key() != got.Key() {
			t.Errorf("%v became %v, want %v", c.point, got, c.want)
		}
	}
}
