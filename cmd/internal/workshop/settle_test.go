package workshop

import (
	"context"
	"errors"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
)

// TestRound: rounding is on its grid, happens once, and reads back.
func TestRound(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := wound.Draw(t, "design")
		for _, r := range []Resolution{Coarse, Fine} {
			one, text, err := r.Round(d)
			if err != nil {
				t.Fatal(err)
			}
			two, again, err := r.Round(one)
			if err != nil || two.Hash() != one.Hash() || string(text) != string(again) {
				t.Fatalf("rounded twice it is another design (%v)\n%s\n%s", err, text, again)
			}
			if one.Conductor.Diameter != math.Round(d.Conductor.Diameter*1e6)/1e6 {
				t.Fatalf("what is bought became %g", one.Conductor.Diameter)
			}
			for _, pair := range [][3]float64{
				{d.Feed.Height, one.Feed.Height, r.Length}, {d.Diameter[0], one.Diameter[0], r.Length}, {d.Spacing[0], one.Spacing[0], r.Length}, {d.Turns, one.Turns, r.Turns},
			} {
				if math.Abs(pair[0]-pair[1]) > pair[2]/2*1.000001 || math.Abs(math.Remainder(pair[1], pair[2])) > 1e-9*pair[2]*1e3 {
					t.Fatalf("%g became %g at a step of %g", pair[0], pair[1], pair[2])
				}
			}
		}
	})
}

// TestPrintedSteps: the printed steps add up to the printed length, and no
// printed height is more than half a last digit from the design's.
func TestPrintedSteps(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		d := wound.Draw(t, "design")
		r := rapid.SampledFrom([]Resolution{Coarse, Fine}).Draw(t, "resolution")
		c, err := helix.Wind(&d)
		if err != nil {
			t.Fatal(err)
		}
		s := &sheet{Settled: &Settled{Design: d, Curve: c, Resolution: r}}
		rows := s.windingRows()
		sum := 0.0
		for i, row := range rows[1:] {
			step, err := strconv.ParseFloat(row[3], 64)
			if err != nil {
				t.Fatal(err)
			}
			sum += step
			turn, errTurn := strconv.ParseFloat(row[0], 64)
			z, errZ := strconv.ParseFloat(row[2], 64)
			if errTurn != nil || errZ != nil {
				t.Fatal(errTurn, errZ)
			}
			if math.Abs(z-sum) > 1e-6 {
				t.Fatalf("row %d: steps of %g, height %g", i+1, sum, z)
			}
			if math.Abs(z-1e3*c.Height(turn)) > 0.5001e3*r.Length {
				t.Fatalf("row %d: height %g printed, %g designed", i+1, z, 1e3*c.Height(turn))
			}
		}
		if printed := r.mm(c.Top()); fixed(sum, r.digits) != printed || !strings.Contains(s.windingWords(), printed) {
			t.Fatalf("steps of %s, length %s", fixed(sum, r.digits), printed)
		}
	})
}

// scaled is a design made smaller, its band higher.
func scaled(d models.Design, by float64) models.Design {
	law := func(l models.Law) models.Law {
		out := make(models.Law, len(l))
		for i := range l {
			out[i] = l[i] * by
		}
		return out
	}
	d.Diameter, d.Spacing = law(d.Diameter), law(d.Spacing)
	d.Conductor.Diameter *= by
	d.Feed.Height *= by
	d.Band.From, d.Band.To = d.Band.From/by, d.Band.To/by
	return d
}

// TestResolutions: a design goes finer where the coarse grid moves its gain,
// and is refused where the fine one does too.
func TestResolutions(t *testing.T) {
	d := antennas["cylinder"]
	d.Diameter, d.Spacing, d.Feed.Height = models.Law{0.05613}, models.Law{0.04027}, 0.00494
	for _, c := range []struct {
		by   float64
		want Resolution
	}{{1, Coarse}, {0.03, Fine}} {
		s, err := Settle(context.Background(), fullWave(t, "draft"), scaled(d, c.by), nil)
		if err != nil {
			t.Fatal(err)
		}
		if s.Resolution != c.want || math.Abs(s.Moved) > mostMoved {
			t.Errorf("scaled by %g: settled at %s, gain moved by %g dB", c.by, s.Resolution, s.Moved)
		}
	}
	var refused *Refused
	if _, err := Settle(context.Background(), fullWave(t, "draft"), scaled(d, 0.004), nil); !errors.As(err, &refused) {
		t.Errorf("at 0.4 %% of the size: %v", err)
	} else if !strings.Contains(refused.Error(), "0.01 mm") {
		t.Errorf("%v", refused)
	}
}

// TestLimits: the rounded design is held to the brief's limits, and a winding
// of the other hand than the brief's is refused outright.
func TestLimits(t *testing.T) {
	d := antennas["cylinder"]
	d.Conductor.Stock = "2 mm"
	brief := func(limits ...objectives.Limit) *objectives.Spec {
		return &objectives.Spec{
			Band: d.Band, Base: models.Design{Sense: models.Right}, Aims: []objectives.Aim{{Figure: objectives.Gain, Most: true}}, Limits: limits,
			Stock: []objectives.Stock{{Name: "2 mm", Diameter: 0.002, Material: d.Conductor.Material, Coil: 1.2, LeastBendRadius: 0.02}},
		}
	}
	short := brief()
	short.Stock[0].Coil = 1
	left := brief()
	left.Base.Sense = models.Left
	spread := brief(objectives.Limit{Figure: objectives.Length, Value: 0.246})
	spread.Margins = objectives.Margins{Spacing: 0.0003}
	for name, c := range map[string]struct {
		spec *objectives.Spec
		want string // empty: built
	}{
		"kept":      {brief(objectives.Limit{Figure: objectives.Gain, AtLeast: true, Value: 9.5}, objectives.Limit{Figure: objectives.Length, Value: 0.25}), ""},
		"gain":      {brief(objectives.Limit{Figure: objectives.Gain, AtLeast: true, Value: 11}), "and the brief's limit is at least 11 dBic"},
		"match":     {brief(objectives.Limit{Figure: objectives.VSWR, Value: 2}), "vswr is 3."},
		"length":    {brief(objectives.Limit{Figure: objectives.Length, Value: 0.24}), "length is 0.245, and the brief's limit is at most 0.24 m"},
		"coil":      {short, "a coil of 2 mm holds 1 m"},
		"sense":     {left, "the brief asks this antenna for left-hand"},
		"no margin": {brief(objectives.Limit{Figure: objectives.Length, Value: 0.246}), ""},
		"margin":    {spread, "length is 0.2468, and the brief's limit is at most 0.246 m"},
	} {
		_, err := Settle(context.Background(), fullWave(t, "draft"), d, c.spec)
		var refused *Refused
		switch {
		case c.want == "" && err != nil:
			t.Errorf("%s: %v", name, err)
		case c.want != "" && (!errors.As(err, &refused) || !strings.Contains(err.Error(), c.want)):
			t.Errorf("%s: %v, want a refusal with %q", name, err, c.want)
		}
	}
}
