// Package space describes what may vary: variables that are real, stepped or
// a choice, and the canonical points they span.
package space

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Kind is how a variable moves.
type Kind int

// A Real variable takes any multiple of its grid between its bounds, a
// Stepped one From + k·Step, a Choice the index of one of its names.
const (
	Real Kind = iota
	Stepped
	Choice
)

// Variable is one axis of a space. Bounds are inclusive; a Choice runs from
// 0 to len(Choices)−1.
type Variable struct {
	Name     string
	Kind     Kind
	From, To float64
	Step     float64  // Stepped: distance of two values
	Grid     float64  // Real: resolution of a canonical value; 0: none
	Choices  []string // Choice
	// Floors, where set, raise From by what an earlier variable chooses, so
	// that a search may choose anew without leaving what is allowed.
	Floors *Floors
}

// Floors are a variable's least values under each name of a choice.
type Floors struct {
	By    int // the choice's place in the space
	Least []float64
}

// Point is one value per variable, in the space's order, in the variables'
// own units. A Choice holds its index.
type Point []float64

// Space is an ordered list of variables.
type Space []Variable

// NewReal is a real variable on a grid (0: none).
func NewReal(name string, from, to, grid float64) Variable {
	return Variable{Name: name, Kind: Real, From: from, To: to, Grid: grid}
}

// NewStepped is a variable that takes from, from+step, … up to to.
func NewStepped(name string, from, to, step float64) Variable {
	return Variable{Name: name, Kind: Stepped, From: from, To: to, Step: step}
}

// NewChoice is a variable that takes one of the named choices.
func NewChoice(name string, choices ...string) Variable {
	return Variable{Name: name, Kind: Choice, To: float64(len(choices) - 1), Step: 1, Choices: choices}
}

// Levels is the number of values the variable can take; 0 means a continuum.
func (v *Variable) Levels() int {
	switch {
	case v.Kind != Real:
		return int(math.Floor((v.To-v.From)/v.Step+1e-9)) + 1
	case v.From == v.To:
		return 1
	}
	return 0
}

// Pinned reports whether a local, continuous search must leave the variable
// where it is.
func (v *Variable) Pinned() bool { return v.Kind != Real || v.From == v.To }

// Snap is the one place that rounds: it takes x to the nearest value that
// the variable can take. A NaN goes to the lower bound.
func (v *Variable) Snap(x float64) float64 {
	if !(x > v.From) {
		return v.From
	}
	if v.Kind != Real {
		k := math.Min(math.Round((x-v.From)/v.Step), float64(v.Levels()-1))
		return tidy(v.From + k*v.Step)
	}
	if x >= v.To {
		return v.To
	}
	if v.Grid > 0 {
		// Dividing by the grid's reciprocal, a whole number for decimal
		// grids, gives the double nearest to the decimal value.
		x = math.Round(x/v.Grid) / math.Round(1/v.Grid)
		x = math.Min(math.Max(x, v.From), v.To)
	}
	return x
}

// tidy takes away the last bits that repeated steps leave behind.
func tidy(x float64) float64 {
	if x == math.Trunc(x) && math.Abs(x) < 1e12 {
		return x
	}
	t, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 12, 64), 64)
	if err != nil {
		return x
	}
	return t
}

// Canonical gives the nearest point that the space holds, as a new point. It
// is idempotent. It panics when p has another length than the space.
func (s Space) Canonical(p Point) Point {
	if len(p) != len(s) {
		panic("space: point and space differ in length")
	}
	q := slices.Clone(p)
	s.Snap(q)
	return q
}

// Snap makes a point canonical in place.
func (s Space) Snap(p Point) {
	for i := range s {
		v := &s[i]
		p[i] = v.Snap(p[i])
		if v.Floors != nil {
			p[i] = min(max(p[i], v.Floors.Least[int(p[v.Floors.By])]), v.To)
		}
	}
}

// Unit scales a point to the unit cube: 0 at From, 1 at To. An axis of no
// width gives 0.
func (s Space) Unit(p Point) []float64 {
	u := make([]float64, len(p))
	for i := range s {
		if w := s[i].To - s[i].From; w > 0 {
			u[i] = (p[i] - s[i].From) / w
		}
	}
	return u
}

// FromUnit is the canonical point at the unit coordinates u, 0 to 1; stepped
// variables and choices get equal shares of the axis.
func (s Space) FromUnit(u []float64) Point {
	p := make(Point, len(s))
	for i := range s {
		v := &s[i]
		if n := v.Levels(); n > 1 {
			k := math.Min(math.Floor(u[i]*float64(n)), float64(n-1))
			p[i] = v.From + k*v.Step
		} else {
			p[i] = v.From + u[i]*(v.To-v.From)
		}
	}
	s.Snap(p)
	return p
}

// Key is a text that two canonical points share only if they are the same.
func (p Point) Key() string {
	var b strings.Builder
	for _, x := range p {
		b.WriteString(strconv.FormatFloat(x, 'g', -1, 64))
		b.WriteByte(' ')
	}
	return b.String()
}

// Check reports every fault of the space at once.
func (s Space) Check() error {
	var faults []string
	seen := map[string]bool{}
	for i := range s {
		v := &s[i]
		say := func(format string, a ...any) {
			faults = append(faults, fmt.Sprintf("variable %q: ", v.Name)+fmt.Sprintf(format, a...))
		}
		if seen[v.Name] {
			say("named twice")
		}
		seen[v.Name] = true
		if !(v.From <= v.To) || math.IsInf(v.From, 0) || math.IsInf(v.To, 0) {
			say("bounds %g to %g are not an interval", v.From, v.To)
		}
		if v.Kind != Real && !(v.Step > 0) {
			say("step %g is not positive", v.Step)
		}
	}
	if len(faults) > 0 {
		return fmt.Errorf("space: %s", strings.Join(faults, "; "))
	}
	return nil
}
