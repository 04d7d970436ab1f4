package genetic

import (
	"github.com/MaxHalford/eaopt"

	"turnwise/optimize/front"
)

// survival is the library's model of a generation that this searcher applies
// once its offspring are answered: of parents and offspring together, layer
// by layer of constrained domination, those stay that keep the front wide and
// even. Method: Deb and others, IEEE Trans. Evol. Comput. 6, 182, 2002; the
// layer that does not fit is thinned one by one.
type survival struct{ size int }

var _ eaopt.Model = survival{}

// Validate is the library's check of a model.
func (survival) Validate() error { return nil }

// Apply keeps the best of the population, best first, and gives each its
// place as fitness.
func (m survival) Apply(pop *eaopt.Population) error {
	values := make([]front.Value, len(pop.Individuals))
	for i := range pop.Individuals {
		values[i] = pop.Individuals[i].Genome.(*genome).value
	}
	kept := make(eaopt.Individuals, 0, 2*m.size) // and its offspring
	for rank, layer := range front.Layers(values) {
		if len(kept) == m.size {
			break
		}
		if room := m.size - len(kept); len(layer) > room {
			layer = thin(values, layer, room)
		}
		rooms := front.Crowding(values, layer)
		for k, i := range layer {
			one := pop.Individuals[i]
			g := one.Genome.(*genome)
			g.rank, g.room = rank, rooms[k]
			one.Evaluated = true
			kept = append(kept, one)
		}
	}
	for i := range kept {
		kept[i].Fitness = float64(i)
	}
	pop.Individuals = kept
	pop.Generations++
	return nil
}

// thin leaves k members of a layer. A feasible layer loses the member with
// the least share of hypervolume, time and again; of others the first stay.
func thin(values []front.Value, layer []int, k int) []int {
	if !values[layer[0]].Feasible() {
		return layer[:k]
	}
	points := make([][]float64, len(layer))
	for j, i := range layer {
		points[j] = values[i].Aims
	}
	axes := front.Span(points)
	keep := front.Thin(axes.Units(points), front.UnitReference(len(points[0])), k)
	out := make([]int, len(keep))
	for j, at := range keep {
		out[j] = layer[at]
	}
	return out
}

// better is the order of parents: the lower layer, then more room.
func better(a, b *genome) bool {
	if a.rank != b.rank {
		return a.rank < b.rank
	}
	return roomier(a, b)
}

// roomier is the order of mates. Members behind the first layer are few and
// have much room: mating them keeps alive what the front has lost.
func roomier(a, b *genome) bool { return a.room > b.room }
