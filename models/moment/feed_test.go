package moment

import (
	"math"
	"math/cmplx"
	"testing"

	"turnwise/models"
)

// openingField integrates the opening's field over it by brute force.
func openingField(o *opening, rho, z, k float64) (across, up complex128) {
	const radii, angles = 300, 120
	for i := range radii {
		r := o.a + (o.b-o.a)*(float64(i)+0.5)/radii
		for j := range angles {
			c := math.Cos(2 * math.Pi * (float64(j) + 0.5) / angles)
			d := math.Sqrt(rho*rho + r*r - 2*rho*r*c + z*z)
			g := cmplx.Exp(complex(0, -k*d)) * complex(1, k*d) / complex(d*d*d, 0)
			across += g * complex(z*c, 0)
			up += g * complex(r-rho*c, 0)
		}
	}
	w := complex((o.b-o.a)/radii*2*math.Pi/angles/(2*math.Pi*o.log), 0)
	return across * w, up * w
}

// sum is the field of a frill's terms.
func (f *frill) sum(k float64) (v complex128) {
	for _, t := range f.terms {
		v += cmplx.Exp(complex(0, -k*t.r)) * (complex(t.zero+t.one+t.two*k*k, t.one*k*t.r))
	}
	return v
}

// The coaxial opening's field by its rules, near and far, against the whole
// integral (the formula at the head of frill.go; Tsai 1972).
func TestOpeningField(t *testing.T) {
	o := &opening{a: 1e-3, b: 2.3e-3, log: math.Log(2.3)}
	tests := []struct {
		name   string
		rho, z float64 // radii
		field  func(f *frill, rho, z, along, up float64, o *opening)
		within float64
	}{
		{"ring, over the opening", 1.5, 5, (*frill).ring, 2e-6},
		{"ring, low", 3, 1, (*frill).ring, 1e-3},
		{"ring, aside", 5, 3, (*frill).ring, 2e-6},
		{"ring, far", 20, 20, (*frill).ring, 1e-6},
		{"dipole, near its bound", 33, 34, (*frill).dipole, 2e-3},
		{"dipole, far", 300, 200, (*frill).dipole, 3e-4},
	}
	for _, tt := range tests {
		for _, k := range []float64{1e-3, 2 * math.Pi, 20} {
			rho, z := tt.rho*o.a, tt.z*o.a
			across, up := openingField(o, rho, z, k)
			var e, u frill
			tt.field(&e, rho, z, 1, 0, o)
			tt.field(&u, rho, z, 0, 1, o)
			size := math.Hypot(cmplx.Abs(across), cmplx.Abs(up))
			if a, b := cmplx.Abs(e.sum(k)-across)/size, cmplx.Abs(u.sum(k)-up)/size; a > tt.within || b > tt.within {
				t.Errorf("%s, k = %g: off by %.2g across, %.2g along the axis", tt.name, k, a, b)
			}
		}
	}
}

// On the axis the field is in closed form, and all of it is the voltage:
// ∫E_z dz → 1 V as k → 0.
func TestOpeningFieldAddsUpToTheVoltage(t *testing.T) {
	a := &Antenna{Plane: true, Wires: []Wire{upright(0, 0, 1, 1e-3, 12)}, Ports: []Port{{Kind: FrillPort}}}
	w, _ := prepared(t, a, Fine, 1e3, false)
	v := make([]complex128, w.mesh.functions)
	w.ports.test(&w.mesh, 0, w.wave, v)
	sum := complex128(0) // the functions add up to 1 but at the open end
	for _, x := range v {
		sum += x
	}
	if cmplx.Abs(sum-1) > 1e-4 {
		t.Errorf("∫E_z dz = %.6f V; 1 is due", sum)
	}
	o := &opening{a: 1e-3, b: 2.3e-3, log: math.Log(2.3)}
	for _, z := range []float64{0.5e-3, 3e-3, 20e-3} {
		_, want := openingField(o, 0, z, 10)
		got := complex128(0)
		for sign, r := range map[float64]float64{1: math.Hypot(z, o.a), -1: math.Hypot(z, o.b)} {
			got += complex(sign/(r*o.log), 0) * cmplx.Exp(complex(0, -10*r))
		}
		if apart(got, want) > 1e-5 {
			t.Errorf("z = %g: %.6g V/m in closed form, %.6g integrated", z, got, want)
		}
	}
}

// Two kinds of port that are narrow against the wave see nearly the same
// antenna; the opening's width and the gap's are what differs.
func TestOpeningSeesWhatAGapSees(t *testing.T) {
	a := &Antenna{Plane: true, Wires: []Wire{upright(0, 0, 0.24, 1e-3, 12)}, Ports: []Port{{Kind: FrillPort}}}
	var opening, line, gap, wide complex128
	solve(t, a, Fine, func(s *Solution) { opening = 1 / s.Admittance(0, 0) }, metreWave)
	a.Ports[0].Ratio = 2.3 // of an air line of 60 ln 2.3 = 50 Ω
	solve(t, a, Fine, func(s *Solution) { line = 1 / s.Admittance(0, 0) }, metreWave)
	a.Ports[0].Ratio = 5
	solve(t, a, Fine, func(s *Solution) { wide = 1 / s.Admittance(0, 0) }, metreWave)
	a.Ports[0] = Port{Kind: GapPort, At: 0.004 / 0.24, Gap: 0.008}
	solve(t, a, Fine, func(s *Solution) { gap = 1 / s.Admittance(0, 0) }, metreWave)
	if line != opening {
		t.Errorf("the standard opening sees %.4f Ω, one of ratio 2.3 %.4f", opening, line)
	}
	if apart(opening, gap) > 0.03 || apart(opening, wide) > 0.03 || opening == wide {
		t.Errorf("opening %.2f Ω, wide opening %.2f, gap %.2f", opening, wide, gap)
	}
}

// feedWorker is a worker with a winding of one turn at constant height.
func feedWorker(t *testing.T, diameter, height, width float64) *worker {
	t.Helper()
	w := newWorker()
	d := benchDesign(1)
	d.Conductor.Diameter, d.Feed.Height, d.Feed.Strip.Width = diameter, height, width
	if err := w.curve.Wind(&d); err != nil {
		t.Fatal(err)
	}
	w.design = &d
	return w
}

// A round wire over a plane has 60 acosh(h/a) Ω (any handbook); with the
// equivalent radius that is 60 ln(2h/a_eq).
func TestEquivalentRadiusOfAWireOverThePlane(t *testing.T) {
	for _, ratio := range []float64{1.1, 1.5, 3, 10, 100} {
		const a = 1e-3
		got := 60 * math.Log(2*ratio*a/feedWorker(t, 2*a, ratio*a, 0).roundRadius(0))
		if want := 60 * math.Acosh(ratio); math.Abs(got/want-1) > 1e-9 {
			t.Errorf("h = %g a: %.6f Ω; %.6f is due", ratio, got, want)
		}
	}
}

// A strip far from the plane is a round wire of a quarter of its width (any
// text, from memory); close to it, its line has Hammerstad's air microstrip
// impedance (1975, from memory), which joins up at w = h within the 0.5 % the
// two formulas have, and for a wide strip tends to that of two plates.
func TestEquivalentRadiusOfAStrip(t *testing.T) {
	const width = 4e-3
	if a := feedWorker(t, 1e-3, 300*width, width).stripRadius(0); math.Abs(a/(width/4)-1) > 1e-4 {
		t.Errorf("far from the plane the strip has a radius of %g m; %g is due", a, width/4)
	}
	near := feedWorker(t, 1e-3, 2e-3, width).stripRadius(0)
	if got, want := 60*math.Log(2*2e-3/near), models.StripOverPlane(width, 2e-3); math.Abs(got/want-1) > 1e-12 {
		t.Errorf("over the plane the strip's line has %g Ω; %g is due", got, want)
	}
	below, above := models.StripOverPlane(1, 1), models.StripOverPlane(1+1e-12, 1)
	if math.Abs(below-60*math.Log(8.25)) > 1e-9 || math.Abs(above/below-1) > 0.005 {
		t.Errorf("w = h: %g and %g Ω", below, above)
	}
	if plates := eta / 1000; math.Abs(models.StripOverPlane(1000, 1)/plates-1) > 0.01 {
		t.Errorf("w = 1000 h: %g Ω; about %g is due", models.StripOverPlane(1000, 1), plates)
	}
}

// The strip and the thick pin lower the impedance level: more capacity to
// the plane.
func TestStripLowersTheImpedance(t *testing.T) {
	d := benchDesign(6)
	plain := simulate(t, Standard, d, models.Axis, 1e9).Samples[0].Port
	d.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.012}
	strip := simulate(t, Standard, d, models.Axis, 1e9).Samples[0].Port
	if real(strip) >= real(plain) {
		t.Errorf("%.2f Ω with a strip, %.2f without", strip, plain)
	}
}
