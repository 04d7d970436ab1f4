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

// The shortest windings of a gain at one frequency grow away from the plane
// (BenchmarkShortest, the taper): circumferences in wavelengths at either end
// and pitch angle in degrees, about.
const (
	growingFrom  = 0.70
	growingTo    = 0.84
	growingPitch = 9.5
)

// winding is the outline of a seed.
type winding struct {
	from, to float64 // circumference, wavelengths, at either end
	pitch    float64 // degrees
}

// handWindings are the outlines, those that need a taper only where one may
// vary.
func (p *Problem) handWindings() []winding {
	var all []winding
	for _, v := range p.Vary {
		if v.Quantity == Diameter && v.Knots > 1 {
			all = append(all, winding{growingFrom, growingTo, growingPitch})
		}
	}
	for _, c := range handCircumferences {
		for _, pitch := range handPitches {
			all = append(all, winding{c, c, pitch})
		}
	}
	return all
}

// HandSeeds are windings as the hand rules would have them and, where a taper
// may vary, as short ones are, at the nearest canonical points, the middling
// numbers of turns first; only those that pass the screens. At most most of
// them.
func (p *Problem) HandSeeds(most int) []space.Point {
	var seeds []space.Point
	seen := map[string]bool{}
	for _, share := range []float64{0.5, 0.25, 0.75, 0, 1} {
		for _, w := range p.handWindings() {
			pt := p.handSeed(share, w, len(seeds))
			if v, _ := p.Screen(pt); v > 0 || seen[pt.Key()] {
				continue
			}
			seen[pt.Key()] = true
			if seeds = append(seeds, pt); len(seeds) == most {
				return seeds
			}
		}
	}
	return seeds
}

// handSeed is the winding of one outline, share of the way from fewest to
// most turns, from the turn-th row of the stock; what the hand rules do not
// speak of stays at the low end, where it does least.
func (p *Problem) handSeed(share float64, w winding, turn int) space.Point {
	wavelength := models.LightSpeed / p.Band.Mid()
	pt := make(space.Point, len(p.Layout.Space))
	for i, c := range p.Layout.Columns {
		v := &p.Layout.Space[i]
		switch c.Quantity {
		case Turns:
			pt[i] = v.From + share*(v.To-v.From)
		case Diameter:
			pt[i] = wavelength / math.Pi * (w.from + p.along(c)*(w.to-w.from))
		case Spacing:
			pt[i] = wavelength * (w.from + w.to) / 2 * math.Tan(w.pitch*math.Pi/180)
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

// along is where a law's knot lies, 0 at the feed and 1 at the far end.
func (p *Problem) along(c Column) float64 {
	for _, v := range p.Vary {
		if v.Quantity == c.Quantity && v.Knots > 1 {
			return float64(c.Knot) / float64(v.Knots-1)
		}
	}
	return 0
}
