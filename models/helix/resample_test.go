package helix

import (
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
)

func laws(least, most int) *rapid.Generator[models.Law] {
	return rapid.Custom(func(t *rapid.T) models.Law {
		return models.Law(rapid.SliceOfN(rapid.Float64Range(0.01, 0.1), least, most).Draw(t, "law"))
	})
}

// A law read at more or fewer knots has its own values there.
func TestResampledLawHasTheValuesOfTheLaw(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		l, n := laws(1, 6).Draw(t, "of"), rapid.IntRange(2, 9).Draw(t, "knots")
		curve := lawOf(l, 1)
		for k, got := range Resample(l, n) {
			if want := curve.Predict(float64(k) / float64(n-1)); math.Abs(got-want) > 1e-15 {
				t.Fatalf("%v at %d knots: knot %d is %g, the law %g", l, n, k, got, want)
			}
		}
	})
}

// A straight taper is the same winding however many knots say so.
func TestMoreKnotsLeaveATaperAsItIs(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := plain()
		d.Diameter, d.Spacing = laws(1, 2).Draw(t, "diameter"), laws(1, 2).Draw(t, "spacing")
		r := d
		r.Diameter = Resample(d.Diameter, rapid.IntRange(2, 7).Draw(t, "of diameter"))
		r.Spacing = Resample(d.Spacing, rapid.IntRange(2, 7).Draw(t, "of spacing"))
		was, is := refer(d), refer(r)
		for k := range 101 {
			at := d.Turns * float64(k) / 100
			if math.Abs(is.radius(at)-was.radius(at)) > 1e-15 || math.Abs(is.climb(at)-was.climb(at)) > 1e-15 {
				t.Fatalf("turn %g differs between %v, %v and %v, %v", at, d.Diameter, d.Spacing, r.Diameter, r.Spacing)
			}
		}
	})
}

func TestResampleEdges(t *testing.T) {
	l := models.Law{0.5, 0.25, 0.75}
	if got := Resample(l, 1); !slices.Equal(got, models.Law{0.5}) {
		t.Errorf("one knot of %v: %v, want the mean", l, got)
	}
	got := Resample(l, 3)
	if !slices.Equal(got, l) {
		t.Errorf("as many knots: %v, want %v", got, l)
	}
	if got[0] = 1; l[0] == 1 {
		t.Error("the law shares its knots with what was read from it")
	}
}
