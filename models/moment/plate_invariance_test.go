package moment

import (
	"math"
	"testing"

	"turnwise/models"
)

// plated are random windings on discs and in cups.
func plated(count int, see func(name string, d models.Design)) {
	grounds := []struct {
		name          string
		diameter, rim float64
	}{
		{"small disc", 0.5, 0}, {"cup", 0.8, 0.4}, {"large disc", 1.7, 0},
		{"small cup", 0.5, 0.2}, {"disc", 0.9, 0}, {"wide cup", 1.2, 0.3},
	}
	for i := range count {
		g := grounds[i%len(grounds)]
		see(g.name, grounded(designs.Example(i), g.diameter, g.rim))
	}
}

// What the ports take is radiated all around or lost: within 0.5 %.
func TestPowerBalanceOverPlates(t *testing.T) {
	plated(12, func(name string, d models.Design) {
		s := simulate(t, Standard, d, models.Balance, 1e9).Samples[0]
		t.Logf("%s, %.3g turns: %.5f", name, d.Turns, s.PowerBalance)
		if miss := math.Abs(s.PowerBalance - 1); miss > 0.005 {
			t.Errorf("%s, %+v: power balance misses by %.2g", name, d, miss)
		}
	})
}

// A plate has no azimuth of its own.
func TestRotationOverPlatesChangesNothing(t *testing.T) {
	plated(4, func(name string, d models.Design) {
		const angle = 2.1
		a := wound(t, d, Standard, 1e9)
		want := read(t, a, 0, 1e9)[0]
		b := *a
		b.Wires = append([]Wire(nil), a.Wires...)
		for i := range b.Wires {
			b.Wires[i].Curve = turned{b.Wires[i].Curve, angle}
		}
		if e := read(t, &b, angle, 1e9)[0].miss(want); e > 1e-9 {
			t.Errorf("%s: turned by %g: off by %.2g", name, angle, e)
		}
	})
}

// mirrored is the sample of the mirror image.
func mirrored(s models.Sample) models.Sample {
	swap := func(c models.Circular) models.Circular { return models.Circular{Right: c.Left, Left: c.Right} }
	s.Sense, s.Gain, s.ConeAxialRatio, s.EdgeGain = -s.Sense, swap(s.Gain), swap(s.ConeAxialRatio), swap(s.EdgeGain)
	return s
}

func TestMirrorOverPlatesSwapsTheSenses(t *testing.T) {
	plated(4, func(name string, d models.Design) {
		const outputs = models.Cone | models.Cuts
		r := simulate(t, Standard, d, outputs, 1e9).Samples[0]
		d.Handedness = -d.Handedness
		m := mirrored(simulate(t, Standard, d, outputs, 1e9).Samples[0])
		if what, e := differ(&r, &m); e > 1e-9 {
			t.Errorf("%s: the mirror image's %s is off by %.2g", name, what, e)
		}
		if e := math.Abs(r.RearGain/m.RearGain - 1); e > 1e-9 || r.RearGain == 0 {
			t.Errorf("%s: the mirror image's rear gain is off by %.2g", name, e)
		}
	})
}

func TestScaleOverPlatesChangesNothing(t *testing.T) {
	plated(4, func(name string, d models.Design) {
		const by, outputs = 3.7, models.Cone | models.Cuts
		d = lossless(d)
		a := simulate(t, Standard, d, outputs, 1e9).Samples[0]
		g := grown(d, by)
		g.Ground.Diameter *= by
		g.Ground.Rim *= by
		b := simulate(t, Standard, g, outputs, 1e9/by).Samples[0]
		if what, e := differ(&a, &b); e > 1e-9 {
			t.Errorf("%s: %g times as large: the %s is off by %.2g", name, by, what, e)
		}
	})
}

// The plate adds as much below the diagonal of the wires' matrix as above it,
// each computed by itself.
func TestReciprocityOverPlates(t *testing.T) {
	plated(6, func(name string, d models.Design) {
		w, bare := prepared(t, wound(t, d, Standard, 1e9), Standard, 1e9, true)
		n := w.mesh.functions
		z := append([]complex128(nil), bare...)
		if err := w.shore.complete(&w.mesh, 0, w.wave, z, true); err != nil {
			t.Fatal(err)
		}
		var top, worst float64
		for i := range n {
			for j := range n {
				added, back := z[i*n+j]-bare[i*n+j], z[j*n+i]-bare[j*n+i]
				top, worst = max(top, size(added)), max(worst, size(added-back))
			}
		}
		if top == 0 || worst > 1e-9*top {
			t.Errorf("%s: what the plate adds is off its transpose by %.2g of %.2g", name, worst, top)
		}
	})
}

// A cup without a rim to speak of is a disc: the edge's current, whose root
// the rim bends, makes the difference of its order.
func TestLowRimIsADisc(t *testing.T) {
	ask := func(rim float64) models.Sample {
		return simulate(t, Standard, grounded(benchDesign(5), 0.8, rim), models.Cuts, 1e9).Samples[0]
	}
	disc := ask(0)
	last := math.Inf(1)
	for _, rim := range []float64{1e-2, 1e-3, 1e-4} {
		cup := ask(rim)
		what, e := differ(&disc, &cup)
		t.Logf("rim %g λ: the %s differs by %.2g", rim, what, e)
		if e > 5*rim || e > last/3 {
			t.Errorf("rim %g λ: the %s differs from the disc's by %.2g", rim, what, e)
		}
		last = e
	}
}

// Two views of one field: the plane's with what the plate changes beyond its
// edge, and all currents of wires and plate in space.
func TestOpenAndClosedViewAgree(t *testing.T) {
	plated(12, func(name string, d models.Design) {
		solve(t, wound(t, d, Standard, 1e9), Standard, func(s *Solution) {
			top := total(s.w.overPlate(toward(0, 0), true))
			worst := 0.0
			for _, theta := range []float64{0, 0.1, 0.2, 0.35, openTo, math.Pi - 0.2, math.Pi} {
				for _, phi := range []float64{0, 1.3, 4} {
					open, closed := s.w.overPlate(toward(theta, phi), false), s.w.overPlate(toward(theta, phi), true)
					worst = max(worst, math.Abs(open.Right-closed.Right)/top, math.Abs(open.Left-closed.Left)/top)
				}
			}
			t.Logf("%s: off by %.2g of the axis", name, worst)
			if worst > 0.003 {
				t.Errorf("%s, %+v: the views differ by %.2g of the power on the axis", name, d, worst)
			}
		}, 1e9)
	})
}
