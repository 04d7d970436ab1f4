package moment

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"
	"pgregory.net/rapid"

	"turnwise/models"
)

const gigaWave = models.LightSpeed / 1e9 // m, wavelength at 1 GHz

// designs draws helices of the axial mode about 1 GHz. The longest turn is
// short enough for the winding's elements to be laid by its turns up to
// 1.05 GHz, so that a mesh is the same for any part of a sweep.
var designs = rapid.Custom(func(t *rapid.T) models.Design {
	num := func(name string, lo, hi float64) float64 { return rapid.Float64Range(lo, hi).Draw(t, name) }
	d := models.Design{
		Turns:      num("turns", 1.5, 6),
		Handedness: rapid.SampledFrom([]models.Sense{models.Right, models.Left}).Draw(t, "handedness"),
		Conductor:  models.Conductor{Diameter: num("conductor", 0.004, 0.016) * gigaWave, Material: models.Material{Conductivity: 58e6, Density: 8890}},
		Feed:       models.Feed{Height: num("riser", 0.012, 0.04) * gigaWave, Impedance: 50},
	}
	tangent := math.Tan(num("pitch angle", 9, 15) * math.Pi / 180)
	for range rapid.IntRange(1, 3).Draw(t, "knots") {
		c := num("circumference", 0.8, 1.1) * gigaWave
		d.Diameter = append(d.Diameter, c/math.Pi)
		d.Spacing = append(d.Spacing, c*tangent)
	}
	switch rapid.IntRange(0, 3).Draw(t, "start") {
	case 0:
		d.Feed.Lead = models.Lead{Turns: num("lead", 0.3, 1), Spacing: 0.06 * gigaWave}
	case 1:
		d.Feed.Strip = models.Strip{Turns: num("strip", 0.2, 0.6), Width: 0.02 * gigaWave}
	case 2:
		d.Feed.Pin = 0.005 * gigaWave
		d.Insulation = models.Insulation{Thickness: 0.001 * gigaWave, Permittivity: 2.3}
	}
	return d
})

// turned is a curve turned about the axis.
type turned struct {
	Curve
	angle float64
}

func (c turned) At(t float64) (at, derivative r3.Vec) {
	at, derivative = c.Curve.At(t)
	turn := r3.NewRotation(c.angle, r3.Vec{Z: 1})
	return turn.Rotate(at), turn.Rotate(derivative)
}

// reading is what a solution says: impedance, efficiency, and the
// directivities of both senses in some directions.
type reading struct {
	port       complex128
	efficiency float64
	sides      []models.Circular
}

func read(t testing.TB, a *Antenna, angle float64, hz ...float64) (out []reading) {
	solve(t, a, Standard, func(s *Solution) {
		r := reading{port: 1 / s.Admittance(0, 0), efficiency: 1 - s.Lost()/s.Accepted()}
		for _, d := range [][2]float64{{0, 0}, {0.4, 0.3}, {0.4, 2.4}, {1.2, -1.9}} {
			r.sides = append(r.sides, scaled(s.Intensity(d[0], d[1]+angle), 4*math.Pi/s.Accepted()))
		}
		out = append(out, r)
	}, hz...)
	return out
}

// miss is the largest relative difference of two readings; fields count
// against the strongest.
func (r reading) miss(o reading) float64 {
	worst := max(apart(r.port, o.port), math.Abs(r.efficiency-o.efficiency))
	top := 0.0
	for _, s := range r.sides {
		top = max(top, s.Right, s.Left)
	}
	for i, s := range r.sides {
		worst = max(worst, math.Abs(s.Right-o.sides[i].Right)/top, math.Abs(s.Left-o.sides[i].Left)/top)
	}
	return worst
}

func TestRotationChangesNothing(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		d := designs.Draw(rt, "design")
		angle := rapid.Float64Range(-3, 3).Draw(rt, "angle")
		a := wound(t, d, Standard, 1e9)
		want := read(t, a, 0, 1e9)
		b := *a
		b.Wires = append([]Wire(nil), a.Wires...)
		for i := range b.Wires {
			b.Wires[i].Curve = turned{b.Wires[i].Curve, angle}
		}
		if e := read(t, &b, angle, 1e9)[0].miss(want[0]); e > 1e-9 {
			rt.Fatalf("turned by %g: off by %.2g", angle, e)
		}
	})
}

func TestMirrorSwapsTheSenses(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		d := designs.Draw(rt, "design")
		r := simulate(t, Standard, d, models.Cone|models.Cuts|models.Spread, 1e9).Samples[0]
		d.Handedness = -d.Handedness
		m := simulate(t, Standard, d, models.Cone|models.Cuts|models.Spread, 1e9).Samples[0]
		swap := func(c models.Circular) models.Circular { return models.Circular{Right: c.Left, Left: c.Right} }
		m.Sense, m.Gain, m.ConeAxialRatio, m.EdgeGain = -m.Sense, swap(m.Gain), swap(m.ConeAxialRatio), swap(m.EdgeGain)
		if what, e := differ(&r, &m); e > 1e-9 {
			rt.Fatalf("the mirror image's %s is off by %.2g:\n%+v\n%+v", what, e, r, m)
		}
	})
}

// differ names the field in which two samples differ most.
func differ(a, b *models.Sample) (what string, worst float64) {
	if a.Sense != b.Sense {
		return "sense", 1
	}
	gain := a.Gain.Right + a.Gain.Left
	for _, f := range []struct {
		name string
		miss float64
	}{
		{"port", apart(a.Port, b.Port)},
		{"input", apart(a.Input, b.Input)},
		{"right-hand gain", (a.Gain.Right - b.Gain.Right) / gain},
		{"left-hand gain", (a.Gain.Left - b.Gain.Left) / gain},
		{"axial ratio", (a.AxialRatio - b.AxialRatio) / 60},
		{"directivity", a.Directivity/b.Directivity - 1},
		{"efficiency", a.Efficiency - b.Efficiency},
		{"right-hand axial ratio in the cone", (a.ConeAxialRatio.Right - b.ConeAxialRatio.Right) / 60},
		{"left-hand axial ratio in the cone", (a.ConeAxialRatio.Left - b.ConeAxialRatio.Left) / 60},
		{"right-hand edge gain", (a.EdgeGain.Right - b.EdgeGain.Right) / gain},
		{"left-hand edge gain", (a.EdgeGain.Left - b.EdgeGain.Left) / gain},
		{"beamwidth", a.Beamwidth - b.Beamwidth},
		{"sidelobe", (a.Sidelobe - b.Sidelobe) / 60},
		{"spread port", apart(a.SpreadPort+1, b.SpreadPort+1)},
	} {
		if e := math.Abs(f.miss); !(e <= worst) {
			what, worst = f.name, e
		}
	}
	return what, worst
}

// grown multiplies every length of a design.
func grown(d models.Design, by float64) models.Design {
	law := func(l models.Law) (out models.Law) {
		for _, v := range l {
			out = append(out, v*by)
		}
		return out
	}
	d.Diameter, d.Spacing = law(d.Diameter), law(d.Spacing)
	d.Conductor.Diameter *= by
	d.Insulation.Thickness *= by
	d.Feed.Height *= by
	d.Feed.Pin *= by
	d.Feed.Lead.Spacing *= by
	d.Feed.Strip.Width *= by
	return d
}

// Without loss an antenna s times as large is the same at 1/s of the
// frequency.
func TestScaleChangesNothing(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		d := designs.Draw(rt, "design")
		d.Conductor.Material.Conductivity = 1e40
		by := math.Exp(rapid.Float64Range(-3, 3).Draw(rt, "log of the scale"))
		a := simulate(t, Standard, d, models.Cone|models.Cuts|models.Spread, 1e9).Samples[0]
		b := simulate(t, Standard, grown(d, by), models.Cone|models.Cuts|models.Spread, 1e9/by).Samples[0]
		if what, e := differ(&a, &b); e > 1e-9 {
			rt.Fatalf("%g times as large: the %s is off by %.2g:\n%+v\n%+v", by, what, e, a, b)
		}
	})
}

// A sweep's answers do not depend on which others are asked for with them,
// nor on the block of frequencies they fall in, as long as the highest
// frequency lays the same mesh.
func TestPartOfASweepIsTheSame(t *testing.T) {
	rapid.Check(t, func(rt *rapid.T) {
		d := designs.Draw(rt, "design")
		hz := models.Band{From: 0.95e9, To: 1.05e9, Samples: rapid.IntRange(2, 2*block+1).Draw(rt, "samples")}.Hz()
		first := rapid.IntRange(0, len(hz)-1).Draw(rt, "first")
		last := rapid.IntRange(first, len(hz)-1).Draw(rt, "last")
		whole := simulate(t, Standard, d, models.Axis|models.Spread, hz...).Samples[first : last+1]
		part := simulate(t, Standard, d, models.Axis|models.Spread, hz[first:last+1]...).Samples
		for i := range part {
			if what, e := differ(&whole[i], &part[i]); e > 1e-9 || whole[i].Hz != part[i].Hz {
				rt.Fatalf("%g Hz: the %s is off by %.2g", part[i].Hz, what, e)
			}
		}
	})
}

// The phases are stepped from frequency to frequency where these are evenly
// spaced; a matrix so filled is the one filled directly.
func TestSteppedPhasesAreTheDirectOnes(t *testing.T) {
	d := benchTaper(6)
	var k []float64
	for _, hz := range (models.Band{From: 0.9e9, To: 1.1e9, Samples: block}).Hz() {
		k = append(k, wave(hz))
	}
	step := evenly(k)
	if step == 0 {
		t.Fatal("an even band is taken for an uneven one")
	}
	w, _ := prepared(t, wound(t, d, Standard, 1.1e9), Standard, 1.1e9, false)
	n := w.mesh.functions
	fill := func(step float64) (z [][]complex128) {
		for range k {
			z = append(z, make([]complex128, n*n))
		}
		if err := w.grid.fill(t.Context(), &w.mesh, k, step, z); err != nil {
			t.Fatal(err)
		}
		return z
	}
	stepped, direct := fill(step), fill(0)
	for f := range k {
		if e := worstOf(stepped[f], direct[f]); e > 1e-11 {
			t.Errorf("frequency %d: off by %.2g", f, e)
		}
	}
	k[3] *= 1 + 1e-6
	if evenly(k) != 0 {
		t.Error("an uneven band is taken for an even one")
	}
}

// Galerkin's matrix is symmetric but for the rules: both triangles, filled
// each by itself, show how far.
func TestReciprocity(t *testing.T) {
	for fidelity, most := range map[Fidelity]float64{Standard: 1e-5, Fine: 1e-7} {
		for name, d := range map[string]models.Design{"uniform": benchDesign(6), "taper": benchTaper(6)} {
			w, z := prepared(t, wound(t, d, fidelity, 1e9), fidelity, 1e9, true)
			n := w.mesh.functions
			var top, worst float64
			for i := range n {
				for j := range i + 1 {
					top = max(top, size(z[i*n+j]))
					worst = max(worst, size(z[i*n+j]-z[j*n+i]))
				}
			}
			if worst > most*top {
				t.Errorf("%s, %s: |Z − Zᵀ| is %.2g of the largest, %g is due", fidelity, name, worst/top, most)
			}
		}
	}
}

// Ports of different wires and widths act on each other alike.
func TestMutualAdmittanceIsSymmetric(t *testing.T) {
	a := yagi(0.004, []float64{0.5, 0.46, 0.43}, []float64{-0.2, 0, 0.24})
	a.Ports = []Port{{Wire: 0, At: 0.3, Gap: 0.02}, {Wire: 1, At: 0.5, Gap: 0.01}, {Kind: SpreadPort, Wire: 2}}
	solve(t, a, Standard, func(s *Solution) {
		for p := range a.Ports {
			for q := range p {
				y, back := s.Admittance(p, q), s.Admittance(q, p)
				if y == 0 || apart(y, back) > 1e-10 {
					t.Errorf("ports %d and %d: %.8g S and back %.8g S", p, q, y, back)
				}
			}
		}
	}, metreWave)
}
