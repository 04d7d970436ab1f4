package genetic

import (
	"math"
	"math/rand"

	"github.com/MaxHalford/eaopt"

	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// Distribution indices of the operators: Deb and others, IEEE Trans. Evol.
// Comput. 6, 182, 2002, but with a wider crossover.
const (
	crossoverIndex = 10
	mutationIndex  = 20
)

// mixed is the chance of a variable to take part in a crossover.
const mixed = 0.7

// variation is what happens to a child once its parents are mixed.
type variation int

// No scale of change fits every problem nor every phase of one, so each is
// as frequent as the next: none; a step that can leave a local optimum; a
// nudge as large as two members are apart in that variable; differences of
// two members, along all variables at once.
const (
	leaving variation = iota
	stepping
	nudging
	differing
	variations int = iota
)

// genome is one point of the population with what is known of it.
type genome struct {
	space space.Space
	free  []int // variables that can move at all
	point space.Point
	value front.Value
	rank  int     // layer of domination
	room  float64 // distance to its neighbours in the layer

	how  variation
	a, b space.Point // members that give the scale of its changes
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
	for _, i := range g.free {
		v := &g.space[i]
		if rng.Float64() >= mixed {
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

// Mutate varies the point its own way.
func (g *genome) Mutate(rng *rand.Rand) {
	if g.how == differing {
		g.differ(rng)
		return
	}
	if g.how == leaving || len(g.free) == 0 {
		return
	}
	i := g.free[rng.Intn(len(g.free))]
	v, x := &g.space[i], &g.point[i]
	switch {
	case v.Kind == space.Choice:
		n := v.Levels()
		*x = float64((int(*x) + 1 + rng.Intn(n-1)) % n)
	case v.Kind == space.Stepped:
		*x = another(v, *x, rng)
	case g.how == nudging:
		*x = nudge(*x, v.From, v.To, math.Abs(g.a[i]-g.b[i]), rng)
	default:
		*x = mutate(*x, v.From, v.To, rng)
	}
}

// differ adds a part of the difference of two members: differential
// variation, whose steps shrink with the population along every direction.
// Storn, Price, J. Global Optim. 11, 341, 1997.
func (g *genome) differ(rng *rand.Rand) {
	factor := 0.8 * rng.Float64()
	take := rng.Float64()
	for _, i := range g.free {
		v := &g.space[i]
		switch {
		case rng.Float64() >= take:
		case v.Kind == space.Choice:
			g.point[i] = g.a[i]
		default:
			g.point[i] = inside(g.point[i]+factor*(g.a[i]-g.b[i]), g.point[i], v.From, v.To, rng)
		}
	}
}
