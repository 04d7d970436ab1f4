package objectives

import (
	"math"

	"turnwise/models"
	"turnwise/optimize/space"
)

// handCircumferences (wavelengths) and handPitches (degrees) span the range
// that practice winds by hand: circumference near a wavelength, pitch angle
// 12 to 14 degrees.
var (
	handCircumferences = []float64{1.05, 0.95, 1.15}
	handPitches        = []float64{13, 12, 14}
)

// handGround is the plate, in wavelengths across, that the hand rules want at
// the least (Kraus, Antennas, 2nd ed. 1988, ch. 7; memory).
const handGround = 0.75

// HandSeeds are uniform windings as the hand rules would have them, at the
// nearest canonical points, the middling one first; only those that pass the
// screens. At most most of them.
func (p *Problem) HandSeeds(most int) []space.Point {
	wavelength := models.LightSpeed / p.Band.Mid()
	var seeds []space.Point
	seen := map[string]bool{}
	for _, share := range []float64{0.5, 0.25, 0.75, 0, 1} {
		for i := range handCircumferences {
			for j := range handPitches {
				pt := p.handSeed(share, wavelength, handCircumferences[i], handPitches[j]*math.Pi/180, len(seeds))
				if v, _ := p.Screen(pt); v > 0 || seen[pt.Key()] {
					continue
				}
				seen[pt.Key()] = true
				if seeds = append(seeds, pt); len(seeds) == most {
					return seeds
				}
			}
		}
	}
	return seeds
}

// handSeed is the winding of one circumference (wavelengths) and pitch (rad),
// share of the way from fewest to most turns, from the turn-th row of the
// stock; what the hand rules do not speak of stays at the low end, where it
// does least.
func (p *Problem) handSeed(share, wavelength, circle, pitch float64, turn int) space.Point {
	circumference := circle * wavelength
	pt := make(space.Point, len(p.Layout.Space))
	for i, c := range p.Layout.Columns {
		v := &p.Layout.Space[i]
		switch c.Quantity {
		case Turns:
			pt[i] = v.From + share*(v.To-v.From)
		case Diameter:
			pt[i] = circumference / math.Pi
		case Spacing:
			pt[i] = circumference * math.Tan(pitch)
		case Conductor:
			pt[i] = float64(turn % len(p.Stock))
		case GroundDiameter:
			pt[i] = handGround * wavelength
		case TransformerImpedance:
			pt[i] = (v.From + v.To) / 2
		default:
			pt[i] = v.From
		}
	}
	return p.Layout.Space.Canonical(pt)
}
