package moment

import (
	"context"
	"errors"
	"fmt"
	"math"

	"turnwise/models"
)

// Solution is the currents on an antenna at one frequency under 1 V on its
// first port, until [Solution.Drive] says otherwise. It is valid during the
// call that shows it.
type Solution struct{ w *work }

// Analyse solves an antenna at the frequencies hz, rising, and shows each
// solution to see, in their order. An error of see ends the analysis.
func Analyse(ctx context.Context, a *Antenna, f Fidelity, hz []float64, see func(*Solution) error) error {
	set, ok := f.settings()
	if !ok {
		return fmt.Errorf("fidelity %q: there is none such; write draft, standard or fine", string(f))
	}
	q := models.Question{Hz: hz}
	if err := errors.Join(a.check(), q.Check()); err != nil {
		return err
	}
	return new(work).sweep(ctx, a, set, hz, watcher(see))
}

// watcher makes a visitor of a function.
type watcher func(*Solution) error

func (v watcher) visit(w *work, _ int) error { return v(&Solution{w}) }

// Hz is the solution's frequency.
func (s *Solution) Hz() float64 { return s.w.hz }

// Unknowns is the number of functions of the current.
func (s *Solution) Unknowns() int { return s.w.mesh.functions }

// Admittance is the current of port p for 1 V on port q, the others shorted,
// in siemens.
func (s *Solution) Admittance(p, q int) complex128 { return s.w.admittance(p, q) }

// Drive puts voltages on the ports, one for each.
func (s *Solution) Drive(volts ...complex128) {
	w := s.w
	n := w.mesh.functions
	clear(w.current)
	for p, v := range volts {
		for i, c := range w.solved[p*n : (p+1)*n] {
			w.current[i] += v * c
		}
	}
	w.volts = append(w.volts[:0], volts...)
	w.spreadOut()
}

// Accepted is the power that the ports take, W.
func (s *Solution) Accepted() float64 {
	sum := 0.0
	for p, v := range s.w.volts {
		sum += s.w.accepted(p, v)
	}
	return sum
}

// Radiated integrates the far field over the sphere, or the hemisphere above
// the plane, W.
func (s *Solution) Radiated() float64 { return s.w.radiated() }

// Lost is the power that heats the conductors, W.
func (s *Solution) Lost() float64 { return s.w.lost() }

// Intensity is the radiation intensity in both senses towards theta from +z
// and phi from +x, radians: W per steradian.
func (s *Solution) Intensity(theta, phi float64) models.Circular {
	return s.w.intensity(toward(theta, phi))
}

// Directivity is the total directivity towards theta and phi, a power ratio
// over what is radiated by the accepted power less the losses.
func (s *Solution) Directivity(theta, phi float64) float64 {
	return 4 * math.Pi * total(s.Intensity(theta, phi)) / (s.Accepted() - s.Lost())
}
