package moment

import (
	"errors"
	"fmt"
	"math"

	"turnwise/models"
)

// Plate is a finite ground about the axis that stands in place of the
// infinite plane: a perfectly conducting disc in the plane z = 0, or a cup
// whose rim rises from the disc's edge. The zero plate is the infinite plane.
//
// The antenna stays one over the infinite plane, images and all; the plate is
// a correction to it. With K the current that the wires drive on the infinite
// plane, the plate carries K inside its edge and an unknown J beside it, and
// what K there is beyond the edge is taken off again:
//
//	E = E[wires, images] − E[K beyond the edge] + E[J].
//
// Both corrections are smooth where the wires are: the riser's foot, the
// opening and whatever runs low over the plate are the images' business. J is
// found from E_tan = 0 on the plate mode by mode of the azimuth; the wires'
// matrix becomes
//
//	Z + Σ_m ỹ_mᵀ S_m y_m,
//
// y_m being what the wires' functions send to the rings of the plate's
// meridian and S_m a small matrix of the plate and the frequency alone, which
// is kept (plate_echo.go).
//
// Beyond the edge the plane's current is an outgoing wave and has no end. Its
// meridian goes on into complex radii, R + s e^{−jα}, where every outgoing
// wave dies away within about two wavelengths; the integrals do not change, as the
// fields have no singularity between the real line and the slanting one.
type Plate struct {
	Radius float64 // m
	Rim    float64 // height of a cup's rim over the disc, m; 0: a disc
}

// Finite tells a plate from the infinite plane.
func (p Plate) Finite() bool { return p.Radius > 0 }

func (p Plate) check(plane bool) error {
	switch {
	case p == Plate{}:
		return nil
	case !plane:
		return errors.New("antenna: a plate without the plane that it stands for")
	case !(p.Radius > 0 && p.Radius < mostPlate) || !(p.Rim >= 0 && p.Rim < mostPlate):
		return fmt.Errorf("antenna: a plate of radius %g m, rim %g m; a radius above zero and a rim from zero are due", p.Radius, p.Rim)
	}
	return nil
}

// mostPlate is a length in metres that no plate has.
const mostPlate = 1e6

// fits tells whether a plate can be solved up to the wave number k.
func (p Plate) fits(k float64) error {
	waves := k / (2 * math.Pi)
	if 2*p.Radius*waves > models.MostGroundDiameter || p.Rim*waves > models.MostGroundRim {
		return fmt.Errorf("ground: a plate %.4g wavelengths across with a rim of %.4g; up to %d and %d are solved: a smaller one, or an infinite plane, is due",
			2*p.Radius*waves, p.Rim*waves, models.MostGroundDiameter, models.MostGroundRim)
	}
	return nil
}
