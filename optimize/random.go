package optimize

import (
	"hash/fnv"
	"math/rand"
	randv2 "math/rand/v2"
)

// Stream is the random stream of one address: the same (seed, name, id)
// always gives the same numbers, and no two addresses share any. Everything
// random in a search comes from here, so that neither workers nor order of
// completion can change it.
func Stream(seed uint64, name string, id int) *rand.Rand {
	h := fnv.New64a()
	h.Write([]byte(name))
	return rand.New(&source{*randv2.NewPCG(seed^h.Sum64(), uint64(id)*0x9e3779b97f4a7c15+seed)})
}

// source lets the generator of math/rand/v2 serve libraries that want the
// older interface.
type source struct{ randv2.PCG }

func (s *source) Int63() int64    { return int64(s.Uint64() >> 1) }
func (s *source) Seed(seed int64) { s.PCG.Seed(uint64(seed), 0) }
