package moment

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/spatial/r3"

	"turnwise/models"
)

// On a growing disc the impedance tends to the plane's, measured as the
// inverse square of the diameter, while the gain goes on rippling with a period of
// two wavelengths; its mean of two diameters half a period apart is the
// plane's.
func TestHelixOnAGrowingDisc(t *testing.T) {
	on := func(diameter float64) models.Sample {
		return simulate(t, Standard, grounded(benchDesign(6), diameter, 0), models.Axis, 1e9).Samples[0]
	}
	plane := on(0)
	before := 0.0
	for _, diameter := range []float64{4, 5, 6, 7, 8} {
		s := on(diameter)
		away := apart(s.Port, plane.Port)
		t.Logf("%g λ: %.3f Ω, %.4f of the plane's away; %.3f dBic, plane %.3f dBic", diameter, s.Port, away, decibels(s.Gain.Right), decibels(plane.Gain.Right))
		if most := 0.065 / (diameter * diameter); away > most {
			t.Errorf("%g λ: the impedance %.3f Ω is %.4f beside the plane's %.3f; %.4f is the most", diameter, s.Port, away, plane.Port, most)
		}
		if mean := decibels((before + s.Gain.Right) / 2 / plane.Gain.Right); diameter > 6 && math.Abs(mean) > 0.3 {
			t.Errorf("%g and %g λ: the mean gain is %.2f dB beside the plane's", diameter-1, diameter, mean)
		}
		if ripple := decibels(s.Gain.Right / plane.Gain.Right); math.Abs(ripple) < 0.3 {
			t.Errorf("%g λ: %.2f dB beside the plane's gain; a ripple is due", diameter, ripple)
		}
		before = s.Gain.Right
	}
}

// filaments are a solution's currents, finely along the wires, whose curves
// must have a constant speed.
func filaments(s *Solution) (at, along []r3.Vec, moment []complex128) {
	m := &s.w.mesh
	g := &legendre[16]
	for i := range m.elements {
		e := &m.elements[i]
		for j, x := range g.x {
			p, d := s.w.antenna.Wires[e.wire].Curve.At(e.from + (e.to-e.from)*(x+1)/2)
			var current complex128
			for l, fn := range e.fn[:m.order] {
				if fn >= 0 {
					current += s.w.current[fn] * complex(e.value[l].at(x, m.order), 0)
				}
			}
			at, along = append(at, p), append(along, r3.Unit(d))
			moment = append(moment, current*complex(g.w[j]*e.length/2, 0))
		}
	}
	return at, along, moment
}

// optics is the directivity on the axis over a disc by physical optics: the
// wires alone in space, and the current 2 ẑ × H that they drive on the plane,
// up to the edge, summed in polar coordinates about the riser's foot.
func optics(s *Solution, radius float64) float64 {
	at, along, moment := filaments(s)
	k := s.w.wave
	var north [2]complex128
	for i := range at {
		phase := cmplx.Exp(complex(0, k*at[i].Z)) * moment[i]
		north[0] += phase * complex(along[i].X, 0)
		north[1] += phase * complex(along[i].Y, 0)
	}
	const azimuths = 64
	foot := at[0]
	g := &legendre[10]
	for a := range azimuths {
		sin, cos := math.Sincos(2 * math.Pi * (float64(a) + 0.5) / azimuths)
		b := foot.X*cos + foot.Y*sin
		edge := -b + math.Sqrt(b*b+radius*radius-foot.X*foot.X-foot.Y*foot.Y)
		panels := 2 + int(4*edge*k/(2*math.Pi))
		for p := range panels {
			for j, x := range g.x {
				// Closer together towards the foot.
				u := (float64(p) + (x+1)/2) / float64(panels)
				r := edge * u * u
				h := magnetic(k, at, along, moment, r3.Vec{X: foot.X + r*cos, Y: foot.Y + r*sin})
				area := complex(2*r*2*edge*u*g.w[j]/2/float64(panels)*2*math.Pi/azimuths, 0)
				north[0] -= h[1] * area
				north[1] += h[0] * area
			}
		}
	}
	intensity := k * k * eta / (32 * math.Pi * math.Pi) * (size2(north[0]) + size2(north[1]))
	return 4 * math.Pi * intensity / (s.Accepted() - s.Lost())
}

// magnetic is H of filaments at a point, x and y.
func magnetic(k float64, at, along []r3.Vec, moment []complex128, point r3.Vec) (h [2]complex128) {
	for i, a := range at {
		d := r3.Sub(point, a)
		r := r3.Norm(d)
		c := r3.Cross(along[i], d)
		f := moment[i] * complex(1, k*r) * cmplx.Exp(complex(0, -k*r)) / complex(4*math.Pi*r*r*r, 0)
		h[0] += f * complex(c.X, 0)
		h[1] += f * complex(c.Y, 0)
	}
	return h
}

// A second route to the gain on the axis. The edge's own current, which it
// leaves out, is worth half a decibel at a wavelength and 0.2 dB from two.
func TestGainOverADiscByPhysicalOptics(t *testing.T) {
	for _, diameter := range []float64{1, 1.5, 2, 3, 5} {
		d := grounded(lossless(benchDesign(6)), diameter, 0)
		solve(t, wound(t, d, Standard, 1e9), Standard, func(s *Solution) {
			got, want := decibels(s.Directivity(0, 0)), decibels(optics(s, diameter/2*gigaWave))
			t.Logf("%g λ: %.3f dBi, by physical optics %.3f dBi", diameter, got, want)
			most := 0.6
			if diameter >= 2 {
				most = 0.2
			}
			if math.Abs(got-want) > most {
				t.Errorf("%g λ: %.2f dBi; physical optics gives %.2f", diameter, got, want)
			}
		}, 1e9)
	}
}
