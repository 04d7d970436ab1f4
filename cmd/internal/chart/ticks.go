package chart

import (
	"math"
	"strconv"
	"strings"
)

// Axis is one side of a chart. Its label holds the unit: "gain, dBic".
type Axis struct {
	Label    string
	Min, Max float64
	// Step is the distance of the ticks where the round ones are not those
	// that suit, as with angles; 0 else.
	Step float64
}

// ticks are the axis's own, at most most of them where it leaves the choice.
func (a Axis) ticks(most int) (ticks []float64, decimals int) {
	if a.Step <= 0 {
		return Ticks(a.Min, a.Max, most)
	}
	return multiples(a.Min, a.Max, a.Step), 0
}

// Ticks gives round numbers from the axis's least to its greatest value, at
// most `most` of them but never fewer than two, and the decimals that tell
// them apart. Their distance is 1, 2 or 5 times a power of ten.
func Ticks(low, high float64, most int) (ticks []float64, decimals int) {
	step := tickStep(high-low, most)
	return multiples(low, high, step), max(0, -int(math.Floor(math.Log10(step)+1e-9)))
}

// multiples of a step from low to high.
func multiples(low, high, step float64) []float64 {
	var ticks []float64
	for n := math.Ceil(low/step - 1e-9); n*step <= high+1e-9*step; n++ {
		ticks = append(ticks, n*step)
	}
	return ticks
}

// tickStep is the smallest round step of which at most most ticks fit.
func tickStep(span float64, most int) float64 {
	if !(span > 0) {
		panic("chart: an axis without extent")
	}
	power := math.Pow(10, math.Floor(math.Log10(span))-2)
	for ; ; power *= 10 {
		for _, m := range []float64{1, 2, 5} {
			if span/(m*power)+1 <= float64(max(most, 2))+1e-9 {
				return m * power
			}
		}
	}
}

// Around is an axis that holds all values and ends on round numbers; a single
// value is put in the middle. NaN is passed over; without any value it is 0
// to 1.
func Around(label string, values ...float64) Axis {
	low, high := math.Inf(1), math.Inf(-1)
	for _, v := range values {
		if !math.IsNaN(v) {
			low, high = math.Min(low, v), math.Max(high, v)
		}
	}
	switch {
	case low > high:
		return Axis{Label: label, Max: 1}
	case high-low < 1e-9*math.Max(math.Abs(low), 1e-3):
		room := math.Max(math.Abs(low)*0.05, 1e-3)
		low, high = low-room, high+room
	}
	step := tickStep(high-low, 6)
	return Axis{Label: label, Min: math.Floor(low/step+1e-9) * step, Max: math.Ceil(high/step-1e-9) * step}
}

// tickText writes a tick with a true minus sign.
func tickText(x float64, decimals int) string {
	if math.Abs(x) < 0.5*math.Pow(10, -float64(decimals)) {
		x = 0
	}
	return strings.Replace(strconv.FormatFloat(x, 'f', decimals, 64), "-", "−", 1)
}
