package helix

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/interp"
	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
)

// copper is 100 % IACS (58 MS/m, any handbook).
var copper = models.Material{Name: "copper", Conductivity: 58e6, Density: 8890}

// plain is a uniform winding of our own.
func plain() models.Design {
	return models.Design{
		Turns: 8.25, Diameter: models.Law{0.058}, Spacing: models.Law{0.034},
		Handedness: models.Right,
		Conductor:  models.Conductor{Diameter: 0.002, Material: copper},
		Feed:       models.Feed{Height: 0.005, Impedance: 50},
	}
}

// rich has three knots, two knots, a flat lead and a strip.
func rich() models.Design {
	d := plain()
	d.Diameter = models.Law{0.058, 0.060, 0.040}
	d.Spacing = models.Law{0.025, 0.036}
	d.Handedness = models.Left
	d.Feed.Lead = models.Lead{Turns: 0.6, Spacing: 0.008, Shape: models.Flat}
	d.Feed.Strip = models.Strip{Turns: 0.3, Width: 0.005}
	d.Feed.Pin = 0.00127
	return d
}

// windings are designs of every kind the package tells apart.
func windings() map[string]models.Design {
	with := func(change func(*models.Design)) models.Design {
		d := plain()
		change(&d)
		return d
	}
	return map[string]models.Design{
		"uniform": plain(),
		"left":    with(func(d *models.Design) { d.Handedness = models.Left }),
		"taper":   with(func(d *models.Design) { d.Diameter = models.Law{0.058, 0.04} }),
		"growing": with(func(d *models.Design) { d.Diameter, d.Spacing = models.Law{0.03, 0.07}, models.Law{0.02, 0.04} }),
		"waisted": with(func(d *models.Design) { d.Diameter = models.Law{0.06, 0.03, 0.05, 0.05, 0.07} }),
		"wavy spacing": with(func(d *models.Design) {
			d.Spacing = models.Law{0.02, 0.05, 0.012, 0.03}
			d.Turns = 5.437
		}),
		"ramp": with(func(d *models.Design) {
			d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.008, Shape: models.Ramp}
		}),
		"ramp over a knot": with(func(d *models.Design) {
			d.Turns, d.Spacing = 2, models.Law{0.02, 0.05, 0.03}
			d.Feed.Lead = models.Lead{Turns: 1.3, Spacing: 0.008}
		}),
		"flat": with(func(d *models.Design) {
			d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.008, Shape: models.Flat}
		}),
		"flat, blending over a knot": with(func(d *models.Design) {
			d.Turns, d.Spacing = 2.2, models.Law{0.02, 0.05, 0.03}
			d.Feed.Lead = models.Lead{Turns: 1, Spacing: 0, Shape: models.Flat}
		}),
		"lead to the end": with(func(d *models.Design) {
			d.Turns, d.Spacing = 1, models.Law{0.02, 0.03}
			d.Feed.Lead = models.Lead{Turns: 1, Spacing: 0.008}
		}),
		"strip":      with(func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.005} }),
		"third turn": with(func(d *models.Design) { d.Turns, d.Diameter = 1.0/3, models.Law{0.05, 0.06} }),
		"rich":       rich(),
	}
}

func wind(t testing.TB, d models.Design) *Curve {
	t.Helper()
	c, err := Wind(&d)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// reporter is what *testing.T and *rapid.T share.
type reporter interface {
	Helper()
	Errorf(format string, args ...any)
}

func near(t reporter, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) {
		t.Errorf("%s = %.12g, want %.12g ± %g", what, got, want, tolerance)
	}
}

func nearVec(t reporter, what string, got, want r3.Vec, tolerance float64) {
	t.Helper()
	if !(r3.Norm(r3.Sub(got, want)) <= tolerance) {
		t.Errorf("%s = %.12g, want %.12g ± %g", what, got, want, tolerance)
	}
}

// along gives n + 1 parameters spread over the winding, both ends included.
func along(d models.Design, n int) []float64 { return floats.Span(make([]float64, n+1), 0, d.Turns) }

// reference is the same winding by another way: laws from gonum, leads as
// the design file's description has them, every integral by quadrature.
type reference struct {
	diameter, spacing interp.DerivativePredictor
	design            models.Design
	cuts              []float64 // where the integrands are not smooth, ends included
}

func refer(d models.Design) *reference {
	r := &reference{diameter: lawOf(d.Diameter, d.Turns), spacing: lawOf(d.Spacing, d.Turns), design: d}
	r.cuts = append(r.cuts, 0, d.Turns)
	for _, l := range []models.Law{d.Diameter, d.Spacing} {
		for i := range len(l) - 1 {
			r.cuts = append(r.cuts, d.Turns*float64(i)/float64(len(l)-1))
		}
	}
	if T := d.Feed.Lead.Turns; T > 0 {
		r.cuts = append(r.cuts, T, min(T+0.25, d.Turns))
	}
	slices.Sort(r.cuts)
	return r
}

type constant float64

func (c constant) Predict(float64) float64         { return float64(c) }
func (constant) PredictDerivative(float64) float64 { return 0 }

type line struct{ start, slope float64 }

func (l line) Predict(t float64) float64         { return l.start + l.slope*t }
func (l line) PredictDerivative(float64) float64 { return l.slope }

func lawOf(l models.Law, turns float64) interp.DerivativePredictor {
	switch len(l) {
	case 1:
		return constant(l[0])
	case 2:
		return line{l[0], (l[1] - l[0]) / turns}
	}
	fit := new(interp.FritschButland)
	if err := fit.Fit(floats.Span(make([]float64, len(l)), 0, turns), l); err != nil {
		panic(err)
	}
	return fit
}

func (r *reference) radius(t float64) float64 { return r.diameter.Predict(t) / 2 }

// climb is dz/dt.
func (r *reference) climb(t float64) float64 {
	lead := r.design.Feed.Lead
	T, s0, S := lead.Turns, lead.Spacing, r.spacing.Predict
	switch {
	case T == 0:
		return S(t)
	case lead.Shape != models.Flat && t < T:
		return s0 + (S(T)-s0)*t/T
	case lead.Shape == models.Flat && t < T:
		return s0
	case lead.Shape == models.Flat && t < T+0.25:
		u := 4 * (t - T)
		return s0 + (S(t)-s0)*u*u*(3-2*u)
	}
	return S(t)
}

func (r *reference) speed(t float64) float64 {
	w, dr, dz := 2*math.Pi*r.radius(t), r.diameter.PredictDerivative(t)/2, r.climb(t)
	return math.Sqrt(w*w + dr*dr + dz*dz)
}

// integral of f from the winding's start to t.
func (r *reference) integral(f func(float64) float64, to float64) float64 {
	const panels, points = 24, 16
	sum := 0.0
	for i, a := range r.cuts[:len(r.cuts)-1] {
		b := min(r.cuts[i+1], to)
		for j := range panels {
			if h := (b - a) / panels; h > 0 {
				sum += quad.Fixed(f, a+h*float64(j), a+h*float64(j+1), points, quad.Legendre{}, 0)
			}
		}
	}
	return sum
}

func (r *reference) height(t float64) float64 {
	return r.design.Feed.Height + r.integral(r.climb, t)
}

func (r *reference) arc(t float64) float64 { return r.design.Feed.Height + r.integral(r.speed, t) }

func (r *reference) pos(t float64) r3.Vec {
	sin, cos := math.Sincos(2 * math.Pi * t * float64(r.design.Handedness))
	return r3.Vec{X: r.radius(t) * cos, Y: r.radius(t) * sin, Z: r.height(t)}
}
