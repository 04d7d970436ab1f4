package searchtest

import (
	"math"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// Mixed are problems of this project's own on variables of every kind: a coil
// whose turns come in quarters, wound of one of eight wires, each best at its
// own length, on one of three cores. They are sums over the variables, so that
// their fronts are known: one point for each number of turns. In the narrow
// one 0.2 % of the space meets the limits.
func Mixed() []*Problem { return []*Problem{coil(), narrowCoil()} }

// Places of a coil's variables.
const (
	coilTurns = iota
	coilWire
	coilCore
	coilLayers
	coilPitch
	coilWidth
	coilEnds
)

const mostTurns = 40

func coilSpace() space.Space {
	return space.Space{
		coilTurns:  space.NewStepped("turns", 0, mostTurns, 0.25),
		coilWire:   space.NewChoice("wire", "a", "b", "c", "d", "e", "f", "g", "h"),
		coilCore:   space.NewChoice("core", "air", "foam", "rod"),
		coilLayers: space.NewStepped("layers", 1, 12, 1),
		coilPitch:  space.NewReal("pitch", 0, 1, 1e-3),
		coilWidth:  space.NewReal("width", 0, 1, 1e-3),
		coilEnds:   space.NewReal("ends", -1, 3, 0),
	}
}

// coilAims trade length against what is lacking: (1 − t)² of the length t with
// the best wire, and more the further every other variable is from its best.
func coilAims(x []float64) []float64 {
	t := x[coilTurns] / mostTurns
	best := (x[coilWire] + 0.5) / 8
	lacking := sq(1-t) + 2*sq(t-best) + []float64{0.3, 0, 0.1}[int(x[coilCore])] +
		math.Abs(x[coilLayers]-7)/11 + sq(x[coilPitch]-0.5) + sq(x[coilWidth]-0.28) + sq(x[coilEnds]-0.6)
	return []float64{t, lacking}
}

func coil() *Problem {
	return &Problem{
		Name: "coil", Domain: optimize.Domain{Space: coilSpace(), Aims: 2}, aims: coilAims,
		Axes: front.Axes{Ideal: []float64{0, 0}, Nadir: []float64{1, 1}}, Volume: 0.870713,
	}
}

// narrowCoil holds the pitch to a band beside its best, the width to a band
// along the pitch, and takes but the core that costs most.
func narrowCoil() *Problem {
	p := coil()
	p.Name, p.Domain.Limits, p.Volume = "coil-narrow", 3, 0.548397
	p.limits = func(x []float64) []float64 {
		return []float64{
			math.Abs(x[coilPitch]-0.6)/0.04 - 1,
			math.Abs(x[coilWidth]-x[coilPitch]/2)/0.04 - 1,
			[]float64{-0.5, 1, 2}[int(x[coilCore])],
		}
	}
	return p
}
