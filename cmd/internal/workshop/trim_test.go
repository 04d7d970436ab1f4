package workshop

import (
	"context"
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/models/moment"
	"turnwise/objectives"
)

// TestStraightBend: without a bend the port is the full-wave model's own.
func TestStraightBend(t *testing.T) {
	rung := fullWave(t, moment.Standard)
	for name, d := range antennas {
		d.Ground = models.Ground{} // bends are answered over an infinite plane
		c, err := helix.Wind(&d)
		if err != nil {
			t.Fatal(err)
		}
		hz := d.Band.Mid()
		want, err := portAt(context.Background(), rung, d, hz)
		if err != nil {
			t.Fatal(err)
		}
		got, err := portOf(bend{curve: c, at: 0.25, reach: 0.25}, &d, hz)
		if err != nil {
			t.Fatal(err)
		}
		if off := cmplx.Abs(got-want) / cmplx.Abs(want); off > 0.005 {
			t.Errorf("%s: %.2f Ω, the model has %.2f Ω", name, got, want)
		}
	}
}

// TestBendAnotherWay makes the same bend from a spacing law of many knots.
func TestBendAnotherWay(t *testing.T) {
	ctx, rung := context.Background(), fullWave(t, moment.Standard)
	d := antennas["cylinder"]
	d.Turns = 3
	c, err := helix.Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	hz := d.Band.Mid()
	for _, at := range []float64{0.5, 1} {
		b := bend{curve: c, at: at, reach: 0.5, by: 0.002}
		law := make(models.Law, 61)
		for i := range law {
			_, dz := b.lift(d.Turns * float64(i) / 60)
			law[i] = d.Spacing[0] + dz
		}
		bentDesign := d
		bentDesign.Spacing = law
		straight, err1 := portAt(ctx, rung, d, hz)
		want, err2 := portAt(ctx, rung, bentDesign, hz)
		from, err3 := portOf(bend{curve: c, at: at, reach: 0.5}, &d, hz)
		got, err4 := portOf(b, &d, hz)
		for _, err := range []error{err1, err2, err3, err4} {
			if err != nil {
				t.Fatal(err)
			}
		}
		want, got = want-straight, got-from
		if cmplx.Abs(got-want) > 0.05*cmplx.Abs(want) {
			t.Errorf("at %g: the bend adds %.3f Ω, the law %.3f Ω", at, got, want)
		}
	}
}

// TestLift is the bend's shape: its height at the middle, nothing beyond its
// reach, and the derivative that of its values.
func TestLift(t *testing.T) {
	b := bend{at: 0.5, reach: 0.5, by: 0.001}
	for t0, want := range map[float64]float64{0: 0, 0.25: 0.0005, 0.5: 0.001, 0.75: 0.0005, 1: 0, 1.3: 0} {
		if z, _ := b.lift(t0); math.Abs(z-want) > 1e-12 {
			t.Errorf("at %g it lifts by %g, want %g", t0, z, want)
		}
	}
	const h = 1e-6
	for x := 0.05; x < 1.2; x += 0.1 {
		low, _ := b.lift(x - h)
		high, _ := b.lift(x + h)
		if _, dz := b.lift(x); math.Abs(dz-(high-low)/(2*h)) > 1e-8 {
			t.Errorf("at %g the slope is %g, by differences %g", x, dz, (high-low)/(2*h))
		}
	}
}

// TestTrimChart: the arrows are what the model says of the moved design.
func TestTrimChart(t *testing.T) {
	ctx, rung := context.Background(), fullWave(t, moment.Draft)
	s := sheetOf(t, antennas["cone"], Power{})
	chart := s.trim
	names := map[string]*move{}
	for i := range chart.Moves {
		m := &chart.Moves[i]
		names[m.Name] = m
		if m.Up == 0 || len(m.Path) < 4 || !strings.Contains(words(s.pages()), m.Stands) {
			t.Errorf("%+v", m)
		}
		if low, high := m.Path[0].By, m.Path[len(m.Path)-1].By; low < m.Lowest-1e-12 || high > m.Highest+1e-12 || low > 0 || high <= 0 {
			t.Errorf("%s: a path from %g to %g m, allowed are %g to %g", m.Name, low, high, m.Lowest, m.Highest)
		}
		for _, w := range m.Path {
			if got := m.Path.by(w.By); cmplx.Abs(got-w.Added) > 1e-12 {
				t.Errorf("%s: moved by %g it adds %g, want %g", m.Name, w.By, got, w.Added)
			}
		}
	}
	for _, name := range []string{"riser height", "height at ¼ turn", "height at ½ turn", "height at 1 turn", "line section"} {
		if names[name] == nil {
			t.Fatalf("no %s", name)
		}
	}
	higher := s.Design
	higher.Feed.Height += 1e-3
	r, err := rung.Simulator.Simulate(ctx, higher, models.Question{Hz: []float64{chart.Hz}})
	if err != nil {
		t.Fatal(err)
	}
	if want := models.Reflection(r.Samples[0].Input, 50) - chart.Reflection; cmplx.Abs(names["riser height"].Up-want) > 1e-9 {
		t.Errorf("riser 1 mm higher adds %g, the model says %g", names["riser height"].Up, want)
	}
	// A line turns the reflection against its own impedance: by 2β a metre,
	// clockwise, when that is the reference.
	if d := names["line section"]; math.Abs(cmplx.Abs(d.Up)/cmplx.Abs(d.Down)-1) > 0.1 {
		t.Errorf("the line adds %g and %g", d.Up, d.Down)
	}
}

// TestShortTrimChart: where there is no turn there is no move, and nothing
// is lowered into the plate.
func TestShortTrimChart(t *testing.T) {
	d := antennas["short"]
	d.Feed.Height = 0.0026
	s := sheetOf(t, d, Power{})
	for _, m := range s.trim.Moves {
		if m.Name == "height at 1 turn" || m.Name == "line section" {
			t.Errorf("%s can be moved", m.Name)
		}
		if m.Name == "riser height" && (m.Down != 0 || m.Lowest < objectives.LeastFeedHeight(0.002)-d.Feed.Height-1e-12) {
			t.Errorf("the riser may go down by %g m: %+v", m.Lowest, m.Down)
		}
	}
	if all := words(s.pages()); !strings.Contains(all, "no room to lower it by 1 mm") {
		t.Error("the sheet does not say that there is no room")
	}
}

// TestAdjust: what the table advises is possible, leads where it says, and no
// single move leads to less.
func TestAdjust(t *testing.T) {
	chart := sheetOf(t, antennas["cone"], Power{}).trim
	rapid.Check(t, func(t *rapid.T) {
		marker := cmplx.Rect(rapid.Float64Range(0, 0.7).Draw(t, "size"), rapid.Float64Range(0, 2*math.Pi).Draw(t, "angle"))
		a := chart.adjust(marker)
		after := marker
		if a.First >= 0 {
			after += chart.Moves[a.First].Path.by(a.FirstBy)
			if !chart.Moves[a.First].reaches(a.FirstBy) {
				t.Fatalf("%+v is too far", a)
			}
		}
		if a.Second >= 0 {
			after += chart.Moves[a.Second].Path.by(a.SecondBy)
			if a.Second == a.First || !chart.Moves[a.Second].reaches(a.SecondBy) {
				t.Fatalf("%+v is too far", a)
			}
		}
		if math.Abs(vswrOf(after)-a.VSWR) > 1e-9 {
			t.Fatalf("%+v leads to %g", a, vswrOf(after))
		}
		for i := range chart.Moves {
			for k := -nudges; k <= nudges; k++ {
				x := float64(k) * nudge(chart.Hz)
				if v := vswrOf(marker + chart.Moves[i].Path.by(x)); chart.Moves[i].reaches(x) && v < a.VSWR-1e-9 {
					t.Fatalf("%+v, but moving %d by %g m leads to %g", a, i, x, v)
				}
			}
		}
	})
}

// TestExposure: the check value of the formula, and its levels.
func TestExposure(t *testing.T) {
	// 10 W, 13.9 dBi, 10 W/m²: 1.398 m in the clear (arithmetic of S = PG/4πR²,
	// OET Bulletin 65, 1997); with reflection √2.56 = 1.6 times that.
	gain := math.Pow(10, 1.39)
	if r := distance(10, gain, 1, 10); math.Abs(r-1.398) > 5e-4 {
		t.Errorf("%g m", r)
	}
	if r := distance(10, gain, reflecting, 10) / distance(10, gain, 1, 10); math.Abs(r-1.6) > 1e-12 {
		t.Errorf("with reflection %g times as far", r)
	}
	// ICNIRP 2020, general public: 10 W/m² above 2 GHz, f/200 from 400 MHz, 2
	// from 30 MHz. 47 CFR 1.1310: 1 mW/cm² above 1.5 GHz, f/1500 from 300 MHz.
	for mhz, want := range map[float64][2]float64{
		10: {0, 0}, 100: {2, 0}, 350: {2, 10 * 350.0 / 1500}, 435: {2.175, 2.9}, 1680: {8.4, 10}, 2450: {10, 10}, 10e3: {10, 10},
	} {
		l := publicLevels(mhz * 1e6)
		if math.Abs(l[0].Value-want[0]) > 1e-9 || math.Abs(l[1].Value-want[1]) > 1e-9 {
			t.Errorf("%g MHz: %v", mhz, l)
		}
	}
}

// TestExposurePage: inside 2L²/λ no distance is printed.
func TestExposurePage(t *testing.T) {
	d := antennas["cylinder"]
	for watts, inside := range map[float64]bool{0.1: true, 1000: false} {
		s := sheetOf(t, d, Power{Watts: watts, Limit: 2})
		e := estimateExposure(s.Settled, s.power)
		g := s.Curve.Geometry()
		if want := 2 * (g.Length*g.Length + g.Widest*g.Widest) * 1.70e9 / models.LightSpeed; math.Abs(e.Far-want) > 1e-9 {
			t.Errorf("2L²/λ %g m, want %g", e.Far, want)
		}
		if peak := objectives.Decibels(e.Gain); peak < 10 || peak > 11 {
			t.Errorf("a gain of %g dBi", peak)
		}
		if len(e.Rows) != 3 || e.Rows[2].Level.Value != 2 || e.Rows[0].ClearIn != inside {
			t.Errorf("%g W: %+v", watts, e.Rows)
		}
		all := words(s.pages())
		if strings.Contains(all, "inside 2L²/λ: does not hold") != inside {
			t.Errorf("%g W: the sheet says otherwise", watts)
		}
		for _, due := range []string{"never a clearance certificate", "Keep everyone out of the beam to at least that distance, or have the field measured", "ICNIRP 2020", "47 CFR 1.1310", "your own limit"} {
			if !strings.Contains(all, due) {
				t.Errorf("the sheet does not say %q", due)
			}
		}
	}
}

func portAt(ctx context.Context, rung objectives.Rung, d models.Design, hz float64) (complex128, error) {
	r, err := rung.Simulator.Simulate(ctx, d, models.Question{Hz: []float64{hz}, Outputs: models.Axis})
	if err != nil {
		return 0, err
	}
	return r.Samples[0].Port, nil
}

func portOf(b bend, d *models.Design, hz float64) (complex128, error) {
	z, err := b.ports(context.Background(), moment.Standard, d, []float64{hz})
	if err != nil {
		return 0, err
	}
	return z[0], nil
}
