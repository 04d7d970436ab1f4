package genetic

import (
	"math"
	"math/rand"

	"turnwise/optimize/space"
)

// cross is simulated binary crossover within bounds: Deb, Agrawal, Complex
// Systems 9, 115, 1995, with the spread of both children cut off at the
// bound that is nearer, so that neither has to be clipped.
func cross(a, b, low, high float64, rng *rand.Rand) (float64, float64) {
	if a == b {
		return a, b
	}
	mid, half := (a+b)/2, (b-a)/2
	widest := min(mid-low, high-mid) / math.Abs(half)
	u := rng.Float64() * (2 - 1/whole(widest, crossoverIndex+1))
	if u > 1 {
		u = 1 / (2 - u)
	}
	spread := half * power(u, 1.0/(crossoverIndex+1))
	return min(max(mid-spread, low), high), min(max(mid+spread, low), high)
}

// power is math.Pow, bit for bit, for 0 ≤ x ≤ 1 and 0 < y < 1/2 at half the
// time.
func power(x, y float64) float64 { return math.Exp(y * math.Log(x)) }

// whole is x to the power n, much faster than math.Pow.
func whole(x float64, n int) float64 {
	p := 1.0
	for range n {
		p *= x
	}
	return p
}

// mutate is polynomial mutation within bounds: Deb, Goyal, Computer Science
// and Informatics 26, 30, 1996.
func mutate(x, low, high float64, rng *rand.Rand) float64 {
	width := high - low
	u := rng.Float64()
	var step float64
	if u < 0.5 {
		near := 1 - (x-low)/width
		step = power(2*u+(1-2*u)*whole(near, mutationIndex+1), 1.0/(mutationIndex+1)) - 1
	} else {
		near := 1 - (high-x)/width
		step = 1 - power(2*(1-u)+(2*u-1)*whole(near, mutationIndex+1), 1.0/(mutationIndex+1))
	}
	return min(max(x+step*width, low), high)
}

// another is a polynomial step of a stepped variable, of at least one step.
func another(v *space.Variable, x float64, rng *rand.Rand) float64 {
	was := v.Snap(x)
	if now := v.Snap(mutate(was, v.From, v.To, rng)); now != was {
		return now
	}
	step := math.Copysign(v.Step, rng.Float64()-0.5)
	if now := v.Snap(was + step); now != was {
		return now
	}
	return v.Snap(was - step)
}

// finest is the power of ten of the smallest nudge, in parts of a range.
const finest = 14

// nudge moves x by about as much as two members are apart. Where they agree,
// its size is spread evenly over the powers of ten below the range.
func nudge(x, low, high, apart float64, rng *rand.Rand) float64 {
	if apart == 0 {
		apart = 0.3 * (high - low) * math.Pow(10, -finest*rng.Float64())
	}
	return inside(x+apart*rng.NormFloat64(), x, low, high, rng)
}

// inside brings a value that left its bounds back to a place between the
// bound and where it came from.
func inside(x, was, low, high float64, rng *rand.Rand) float64 {
	switch {
	case x < low:
		return low + rng.Float64()*(was-low)
	case x > high:
		return high - rng.Float64()*(high-was)
	}
	return x
}
