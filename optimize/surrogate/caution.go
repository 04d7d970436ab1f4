package surrogate

// caution is how many left-out errors worse than foretold a point is taken
// to be. It rises where the surfaces promised more than came and falls where
// they kept their word: below nothing it becomes boldness, and tries what
// the surfaces know little of once they know the rest.
type caution float64

// Bounds of caution, its steps, and the part of a promise that keeps it.
const (
	firstCaution = 1.0
	leastCaution = -1.0
	mostCaution  = 2.0
	lessCaution  = 0.25
	moreCaution  = 0.5
	kept         = 0.5
)

// follow moves the caution by what was promised and what came.
func (c *caution) follow(promised, came float64) {
	if came > kept*promised {
		*c = max(*c-lessCaution, leastCaution)
	} else {
		*c = min(*c+moreCaution, mostCaution)
	}
}

// yield lets go of caution where it leaves nothing that promises anything.
func (c *caution) yield() { *c = max(*c-moreCaution, leastCaution) }
