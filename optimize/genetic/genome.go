package genetic

import (
	"math"
	"math/rand"

	"github.com/MaxHalford/eaopt"

	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// Distribution indices of the operators, and how often they act: the usual
// ones of Deb and others, IEEE Trans. Evol. Comput. 6, 182, 2002.
const (
	crossoverRate  = 0.9
	crossoverIndex = 15
	mutationIndex  = 20
)

// genome is one point of the population with what is known of it.
type genome struct {
	space space.Space
	free  int // variables that can move at all
	point space.Point
	value front.Value
	rank  int     // layer of domination
	room  float64 // distance to its neighbours in the layer
	from  variation
}

var _ eaopt.Genome = (*genome)(nil)

// Evaluate is never what decides: answers come through Tell, and the model
// sets the fitness. It is here because the library asks for it.
func (g *genome) Evaluate() (float64, error) { return float64(g.rank), nil }

// Clone copies the point; the copy is unanswered.
func (g *genome) Clone() eaopt.Genome {
	c := *g
	c.point = append(space.Point(nil), g.point...)
	return &c
}

// Crossover mixes two points in place: simulated binary crossover where a
// variable has an order, an even exchange where it is a choice.
func (g *genome) Crossover(mate eaopt.Genome, rng *rand.Rand) {
	p, q := g.point, mate.(*genome).point
	for i := range g.space {
		v := &g.space[i]
		if rng.Float64() < 0.5 {
			continue
		}
		if v.Kind != space.Choice {
			p[i], q[i] = cross(p[i], q[i], v.From, v.To, rng)
		}
		if rng.Float64() < 0.5 {
			p[i], q[i] = q[i], p[i]
		}
	}
}

// cross is simulated binary crossover within bounds: Deb, Agrawal, Complex
// Systems 9, 115, 1995, with the spread cut off at the nearer bound so that
// no child has to be clipped.
func cross(a, b, low, high float64, rng *rand.Rand) (float64, float64) {
	if a == b || low == high {
		return a, b
	}
	if a > b {
		b, a = cross(b, a, low, high, rng)
		return a, b
	}
	u := rng.Float64()
	spread := func(room float64) float64 {
		beta := 1 + 2*room/(b-a)
		alpha := 2 - math.Pow(beta, -(crossoverIndex+1))
		if u <= 1/alpha {
			return math.Pow(u*alpha, 1.0/(crossoverIndex+1))
		}
		return math.Pow(1/(2-u*alpha), 1.0/(crossoverIndex+1))
	}
	mid, half := (a+b)/2, (b-a)/2
	c := mid - half*spread(a-low)
	d := mid + half*spread(high-b)
	return math.Min(math.Max(c, low), high), math.Min(math.Max(d, low), high)
}

// Mutate moves about one variable of those that can move: a polynomial step
// where it has an order (at least one step of a stepped one), another choice
// where it is a choice.
func (g *genome) Mutate(rng *rand.Rand) {
	rate := 1 / float64(max(g.free, 1))
	for i := range g.space {
		v := &g.space[i]
		if v.From == v.To || rng.Float64() >= rate {
			continue
		}
		if g.from != crossing && v.Kind == space.Real {
			g.point[i] = nudge(g.point[i], v.From, v.To, rng)
			continue
		}
		switch v.Kind {
		case space.Choice:
			n := v.Levels()
			g.point[i] = float64((int(g.point[i]) + 1 + rng.Intn(n-1)) % n)
		case space.Stepped:
			was := v.Snap(g.point[i])
			now := v.Snap(mutate(was, v.From, v.To, rng))
			if now == was {
				step := math.Copysign(v.Step, rng.Float64()-0.5)
				if now = v.Snap(was + step); now == was {
					now = v.Snap(was - step)
				}
			}
			g.point[i] = now
		default:
			g.point[i] = mutate(g.point[i], v.From, v.To, rng)
		}
	}
}

// mutate is polynomial mutation within bounds: Deb, Goyal, Computer Science
// and Informatics 26, 30, 1996.
func mutate(x, low, high float64, rng *rand.Rand) float64 {
	width := high - low
	u := rng.Float64()
	var step float64
	if u < 0.5 {
		near := 1 - (x-low)/width
		step = math.Pow(2*u+(1-2*u)*math.Pow(near, mutationIndex+1), 1.0/(mutationIndex+1)) - 1
	} else {
		near := 1 - (high-x)/width
		step = 1 - math.Pow(2*(1-u)+(2*u-1)*math.Pow(near, mutationIndex+1), 1.0/(mutationIndex+1))
	}
	return math.Min(math.Max(x+step*width, low), high)
}

// finest is the power of ten of the smallest nudge, in parts of a range.
const finest = 8

// nudge moves x by a step whose size is spread evenly over the powers of ten
// below the range: some step always fits how near the optimum is.
func nudge(x, low, high float64, rng *rand.Rand) float64 {
	step := (high - low) * math.Pow(10, -finest*rng.Float64()) * rng.NormFloat64() * 0.3
	return inside(x+step, x, low, high, rng)
}
