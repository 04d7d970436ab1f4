package models_test

import (
	"math"
	"math/cmplx"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"turnwise/models"
)

// R/R_dc of a round wire against a/δ (closed form of the Bessel functions).
func TestRoundWireResistance(t *testing.T) {
	m := models.Material{Conductivity: 58e6, Permeability: 1}
	for _, c := range []struct{ ratio, want float64 }{{0.5, 1.001301}, {1, 1.020492}, {2, 1.264643}, {3, 1.768132}, {5, 2.768108}, {10, 5.259302}} {
		hz := 1e6
		a := c.ratio * m.SkinDepth(hz)
		dc := 1 / (m.Conductivity * math.Pi * a * a)
		if got := real(m.RoundWireImpedance(a, hz)) / dc; math.Abs(got-c.want) > 2e-6 {
			t.Errorf("a/δ = %g: R/R_dc %.7f, want %.6f", c.ratio, got, c.want)
		}
	}
}

// Copper of 58 MS/m at radio frequency (closed form).
func TestCopperImpedance(t *testing.T) {
	m := models.Material{Conductivity: 58e6}
	for _, c := range []struct {
		diameter, hz float64
		want         complex128
		within       float64
	}{{0.6e-3, 1.7e9, 5.722 + 5.707i, 2e-3}, {1e-3, 435e6, 1.7376 + 1.7320i, 2e-4}} {
		if got := m.RoundWireImpedance(c.diameter/2, c.hz); cmplx.Abs(got-c.want) > c.within {
			t.Errorf("%g m at %g Hz: %.5f, want %.5f", c.diameter, c.hz, got, c.want)
		}
	}
	if depth := m.SkinDepth(435e6); math.Abs(depth-3.168e-6) > 1e-9 {
		t.Errorf("skin depth %g, want 3.168 µm", depth)
	}
}

// The second route: the power series of J₀ and J₁, and for thick wire the
// surface impedance of a flat conductor.
func TestRoundWireSecondRoutes(t *testing.T) {
	m := models.Material{Conductivity: 1e7, Permeability: 5}
	rapid.Check(t, func(t *rapid.T) {
		hz := 1e6
		delta := m.SkinDepth(hz)
		a := rapid.Float64Range(0.05, 6).Draw(t, "a/δ") * delta
		z := complex(1, -1) * complex(a/delta, 0)
		want := complex(1, -1) / complex(delta, 0) * series(0, z) / series(1, z) / complex(2*math.Pi*a*m.Conductivity, 0)
		if got := m.RoundWireImpedance(a, hz); cmplx.Abs(got-want) > 1e-9*cmplx.Abs(want) {
			t.Fatalf("a/δ = %g: %v, series %v", a/delta, got, want)
		}
	})
	hz := 1e10
	a := 0.05
	flat := complex(1, 1) / complex(m.Conductivity*m.SkinDepth(hz)*2*math.Pi*a, 0)
	if got := m.RoundWireImpedance(a, hz); cmplx.Abs(got-flat) > 1e-3*cmplx.Abs(flat) {
		t.Errorf("thick wire %v, flat conductor %v", got, flat)
	}
	if (models.Material{}).RoundWireImpedance(1e-3, 1e9) != 0 {
		t.Error("a perfect conductor has an impedance")
	}
}

// The recurrence and the expansion for large arguments meet.
func TestRoundWireIsSmoothAtTheSeam(t *testing.T) {
	m := models.Material{Conductivity: 58e6}
	delta := m.SkinDepth(1e9)
	at := func(ratio float64) complex128 {
		a := ratio * delta / math.Sqrt2
		return m.RoundWireImpedance(a, 1e9) * complex(a, 0)
	}
	if below, above := at(3939), at(3941.5); cmplx.Abs(below-above) > 1e-6*cmplx.Abs(above) {
		t.Errorf("%v below the seam, %v above", below, above)
	}
}

// series is J_n by its power series.
func series(n int, z complex128) complex128 {
	term := complex128(1)
	for k := 1; k <= n; k++ {
		term *= z / complex(2*float64(k), 0)
	}
	sum := term
	for k := 1; k < 80; k++ {
		term *= -z * z / complex(4*float64(k)*float64(k+n), 0)
		sum += term
	}
	return sum
}

func TestTransformerInput(t *testing.T) {
	quarter := models.Transformer{Impedance: math.Sqrt(50 * 120), Length: models.LightSpeed / 1e9 / 4}
	if got := quarter.Input(120, 1e9); cmplx.Abs(got-50) > 1e-9 {
		t.Errorf("a quarter wave turns 120 Ω into %v, want √(Z₁Z₂)'s 50", got)
	}
	slow := models.Transformer{Impedance: 75, Length: 0.66 * models.LightSpeed / 1e9 / 2, Velocity: 0.66}
	if got := slow.Input(30-40i, 1e9); cmplx.Abs(got-(30-40i)) > 1e-9 {
		t.Errorf("half a wave turns 30 − 40j into %v", got)
	}
	if got := (models.Transformer{}).Input(1+2i, 1e9); got != 1+2i {
		t.Errorf("no section turns 1 + 2j into %v", got)
	}
}

// The exact section brings the load to the reference; real and reactive loads.
func TestMatchSectionMatches(t *testing.T) {
	matched := 0
	rapid.Check(t, func(t *rapid.T) {
		z := complex(rapid.Float64Range(5, 400).Draw(t, "R"), rapid.Float64Range(-200, 200).Draw(t, "X"))
		zt, theta, ok := models.MatchSection(50, z)
		if !ok {
			return
		}
		matched++
		line := models.Transformer{Impedance: zt, Length: theta / (2 * math.Pi) * models.LightSpeed / 1e9}
		if got := line.Input(z, 1e9); cmplx.Abs(got-50) > 1e-6 {
			t.Fatalf("%v through %g Ω, %g rad: %v", z, zt, theta, got)
		}
	})
	if matched == 0 {
		t.Error("no load was matched")
	}
	if zt, theta, ok := models.MatchSection(50, 200); !ok || zt != 100 || theta != math.Pi/2 {
		t.Errorf("200 Ω: %g Ω, %g rad, %v", zt, theta, ok)
	}
	if _, _, ok := models.MatchSection(50, 50-30i); ok {
		t.Error("50 − 30j was said to match by one section")
	}
}

func TestVSWR(t *testing.T) {
	for _, c := range []struct {
		z    complex128
		want float64
	}{{50, 1}, {100, 2}, {25, 2}, {0, 1000}, {-10, 1000}, {50i, 1000}, {50 + 50i, 2.618034}} {
		if got := models.VSWR(c.z, 50); math.Abs(got-c.want) > 1e-6 {
			t.Errorf("%v: %g, want %g", c.z, got, c.want)
		}
	}
}

// Sense and axial ratio after IEEE Std 145.
func TestAxialRatio(t *testing.T) {
	for _, c := range []struct {
		power models.Circular
		db    float64
		sense models.Sense
	}{
		{models.Circular{Right: 1}, 0, models.Right}, {models.Circular{Left: 2}, 0, models.Left},
		{models.Circular{Right: 9, Left: 1}, 20 * math.Log10(2), models.Right}, {models.Circular{Right: 1, Left: 1}, 60, 0}, {models.Circular{}, 60, 0},
	} {
		db, sense := models.AxialRatio(c.power)
		if math.Abs(db-c.db) > 1e-12 || sense != c.sense {
			t.Errorf("%+v: %g dB %v, want %g %v", c.power, db, sense, c.db, c.sense)
		}
	}
}

func TestHashKnowsWhatPhysicsSees(t *testing.T) {
	d := models.Design{Turns: 8, Diameter: models.Law{0.05}, Spacing: models.Law{0.03}, Handedness: models.Right,
		Conductor: models.Conductor{Diameter: 2e-3, Material: models.Material{Conductivity: 58e6, Density: 8890}}, Feed: models.Feed{Height: 5e-3, Impedance: 50}}
	id := d.ID()
	same := d
	same.Title, same.Band, same.Sense, same.FeedsReflector, same.Conductor.Stock = "x", models.Band{From: 1, To: 2, Samples: 3}, models.Left, true, "wire"
	same.Feed.Pin = 2e-3 // the conductor's own, said aloud
	if same.ID() != id || len(id) != 10 {
		t.Errorf("id %s became %s although nothing changed that physics sees", id, same.ID())
	}
	for name, change := range map[string]func(*models.Design){
		"turns": func(d *models.Design) { d.Turns += 0.001 }, "law": func(d *models.Design) { d.Diameter = models.Law{0.05, 0.05} },
		"hand": func(d *models.Design) { d.Handedness = models.Left }, "pin": func(d *models.Design) { d.Feed.Pin = 1e-3 },
		"coat":  func(d *models.Design) { d.Insulation = models.Insulation{Thickness: 1e-4, Permittivity: 2} },
		"lead":  func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.01} },
		"flat":  func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.01, Shape: models.Flat} },
		"strip": func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 0.25, Width: 5e-3} },
		"line":  func(d *models.Design) { d.Feed.Transformer = models.Transformer{Impedance: 80, Length: 0.04} },
		"disc":  func(d *models.Design) { d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2} },
		"cup":   func(d *models.Design) { d.Ground = models.Ground{Kind: models.Cup, Diameter: 0.2, Rim: 0.05} },
		"metal": func(d *models.Design) { d.Conductor.Material.Permeability = 100 },
	} {
		v := d
		change(&v)
		if v.ID() == id {
			t.Errorf("%s: another design has the same id", name)
		}
	}
	if !strings.Contains(d.Canonical(), "infinite\n") {
		t.Error("the canonical text does not name the ground")
	}
}

func TestBandSamples(t *testing.T) {
	hz := models.Band{From: 1e9, To: 2e9, Samples: 5}.Hz()
	if len(hz) != 5 || hz[0] != 1e9 || hz[2] != 1.5e9 || hz[4] != 2e9 {
		t.Errorf("samples %v", hz)
	}
	if one := (models.Band{From: 1e9, To: 1e9, Samples: 1}).Hz(); len(one) != 1 || one[0] != 1e9 {
		t.Errorf("one sample %v", one)
	}
}

// 60 acosh(h/a) against the thin-wire form 60 ln(2h/a) it tends to.
func TestWireOverPlane(t *testing.T) {
	if got, want := models.WireOverPlane(1e-3, 1), 60*math.Log(2000); math.Abs(got-want) > 1e-4 {
		t.Errorf("%g, want %g", got, want)
	}
	if models.WireOverPlane(1e-3, 1e-3) != 0 {
		t.Error("a wire on the plane has an impedance")
	}
}
