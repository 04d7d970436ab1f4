package genetic

import (
	"math/rand"

	"github.com/MaxHalford/eaopt"
)

// variation is a way to make children.
type variation int

// Crossing mixes two parents and mutates by polynomial steps; nudging mixes
// and mutates by steps of any size; differing adds differences of others.
const (
	crossing variation = iota
	nudging
	differing
	variations int = iota
)

// shares are how often each way is taken. They follow what survives.
type shares [variations]float64

// Every way keeps a part of the children; what is learnt of one generation
// weighs so much against what was known.
const (
	leastShare = 0.1
	learning   = 0.1
)

func evenShares() shares {
	var s shares
	for k := range s {
		s[k] = 1 / float64(variations)
	}
	return s
}

func (s *shares) pick(rng *rand.Rand) variation {
	u := rng.Float64()
	for k := range s[:variations-1] {
		if u -= s[k]; u < 0 {
			return variation(k)
		}
	}
	return variation(variations - 1)
}

// learn moves the shares towards the ways whose children survived best.
func (s *shares) learn(children, survivors eaopt.Individuals) {
	alive := make(map[*genome]bool, len(survivors))
	for i := range survivors {
		alive[survivors[i].Genome.(*genome)] = true
	}
	var made, kept [variations]float64
	for i := range children {
		g := children[i].Genome.(*genome)
		made[g.from]++
		if alive[g] {
			kept[g.from]++
		}
	}
	var rate [variations]float64
	sum := 0.0
	for k := range rate {
		if made[k] > 0 {
			rate[k] = kept[k] / made[k]
		}
		sum += rate[k]
	}
	if sum == 0 {
		return
	}
	total := 0.0
	for k := range s {
		s[k] = max((1-learning)*s[k]+learning*rate[k]/sum, leastShare)
		total += s[k]
	}
	for k := range s {
		s[k] /= total
	}
}
