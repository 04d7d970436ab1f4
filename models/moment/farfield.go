package moment

import (
	"math"

	"turnwise/models"
)

// The far field in direction r̂ is E = −jkη e^{−jkr}/(4πr)·N⊥ with the
// radiation vector N = ∫ I t e^{jk r·r̂} ds, images included.

// radiation is N of the wires in the direction of the unit vector (x, y, z),
// with their images or without.
func (w *work) radiation(x, y, z float64, over bool) (n [3]complex128) {
	m, k := &w.mesh, w.wave
	var sum [6]float64
	for q, i := range w.field {
		flat := k * (m.x[q]*x + m.y[q]*y)
		c, s := unit(flat + k*m.z[q]*z)
		re, im := real(i)*c-imag(i)*s, real(i)*s+imag(i)*c
		ur, ui, vr, vi := re, im, re, im // across and along the axis
		if over {
			c, s = unit(flat - k*m.z[q]*z)
			ir, ii := real(i)*c-imag(i)*s, real(i)*s+imag(i)*c
			ur, ui = ur-ir, ui-ii
			vr, vi = vr+ir, vi+ii
		}
		sum[0] += m.tx[q] * ur
		sum[1] += m.tx[q] * ui
		sum[2] += m.ty[q] * ur
		sum[3] += m.ty[q] * ui
		sum[4] += m.tz[q] * vr
		sum[5] += m.tz[q] * vi
	}
	return [3]complex128{complex(sum[0], sum[1]), complex(sum[2], sum[3]), complex(sum[4], sum[5])}
}

// direction is a far-field direction with its sines and cosines.
type direction struct{ st, ct, sp, cp float64 }

func toward(theta, phi float64) (d direction) {
	d.st, d.ct = math.Sincos(theta)
	d.sp, d.cp = math.Sincos(phi)
	return d
}

// intensity is the radiation intensity in both senses, W per steradian:
// with E_R = (E_θ + jE_φ)/√2, U = k²η/(32π²)·|N|².
func (w *work) intensity(d direction) models.Circular {
	if w.antenna.Plate.Finite() {
		return w.overPlate(d, math.Abs(d.ct) < openCos)
	}
	theta, phi := w.across(d, w.antenna.Plane)
	return w.senses(theta, phi)
}

// around is intensity where all directions must be seen alike.
func (w *work) around(d direction) models.Circular {
	if w.antenna.Plate.Finite() {
		return w.overPlate(d, true)
	}
	return w.intensity(d)
}

// overPlate is the intensity over a plate, by the closed view or the open one.
func (w *work) overPlate(d direction, closed bool) models.Circular {
	theta, phi := w.shore.view(w, closed).field(w.wave, d)
	if closed || d.ct > 0 {
		t, p := w.across(d, !closed)
		theta, phi = theta+t, phi+p
	}
	return w.senses(theta, phi)
}

// across is the wires' N across a direction.
func (w *work) across(d direction, over bool) (theta, phi complex128) {
	n := w.radiation(d.st*d.cp, d.st*d.sp, d.ct, over)
	theta = complex(d.ct*d.cp, 0)*n[0] + complex(d.ct*d.sp, 0)*n[1] - complex(d.st, 0)*n[2]
	return theta, complex(-d.sp, 0)*n[0] + complex(d.cp, 0)*n[1]
}

// senses makes intensities of a radiation vector.
func (w *work) senses(theta, phi complex128) models.Circular {
	scale := w.wave * w.wave * eta / (32 * math.Pi * math.Pi) / 2
	return models.Circular{
		Right: scale * square(theta+complex(-imag(phi), real(phi))),
		Left:  scale * square(theta-complex(-imag(phi), real(phi))),
	}
}

func square(z complex128) float64 { return real(z)*real(z) + imag(z)*imag(z) }

func total(c models.Circular) float64 { return c.Right + c.Left }

// radiated integrates the intensity over the sphere, or over the hemisphere
// above the plane, W.
func (w *work) radiated() float64 {
	m := &w.mesh
	// The pattern's harmonics end a little beyond the antenna's size.
	var flat, tall float64
	var cx, cy float64
	for q := range m.x {
		cx += m.x[q] / float64(len(m.x))
		cy += m.y[q] / float64(len(m.x))
	}
	for q := range m.x {
		flat = max(flat, math.Hypot(m.x[q]-cx, m.y[q]-cy))
		tall = max(tall, math.Abs(m.z[q]))
	}
	flat = max(flat, w.antenna.Plate.Radius)
	reach := w.wave * math.Hypot(flat, max(tall, w.antenna.Plate.Rim))
	around := harmonics(w.wave * flat)
	steps, lo := harmonics(reach)+1, -1.0
	if w.antenna.Plane && !w.antenna.Plate.Finite() {
		steps, lo = steps/2+1, 0
	}
	return w.sphere(steps, around, lo)
}

// harmonics is how many even samples of a circle's turn hold the squared
// pattern of an antenna of radius ka.
func harmonics(ka float64) int { return 2*int(math.Ceil(ka+3*math.Cbrt(ka)))*1 + 10 }

// sphere integrates over cos θ from lo to 1 by Gauss–Legendre panels and
// over φ by even steps.
func (w *work) sphere(steps, around int, lo float64) float64 {
	const nodes = 16
	panels := (steps + nodes - 1) / nodes
	g := &legendre[nodes]
	width := (1 - lo) / float64(panels)
	sum := 0.0
	for p := range panels {
		for j, t := range g.x {
			ct := lo + width*(float64(p)+(t+1)/2)
			st := math.Sqrt(max(0, 1-ct*ct))
			ring := 0.0
			for i := range around {
				sp, cp := math.Sincos(2 * math.Pi * (float64(i) + 0.5) / float64(around))
				ring += total(w.around(direction{st, ct, sp, cp}))
			}
			sum += ring * g.w[j]
		}
	}
	return sum * width / 2 * 2 * math.Pi / float64(around)
}
