package workshop

import (
	"fmt"
	"math"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
)

// movable is one thing that can be otherwise than drawn.
type movable struct {
	Name   string
	Stands string // what exactly is moved
	More   string // what a fitter calls a movement upwards, or longer
	Less   string // empty where a fitter cannot move it
	Plain  bool   // amounts have no unit; else metres
	// Lowest and Highest are how far it may go, either side of 0.
	Lowest, Highest float64
	move            func(p *piece, by float64)
}

// reaches reports whether it may move so far.
func (m *movable) reaches(x float64) bool { return x >= m.Lowest-1e-12 && x <= m.Highest+1e-12 }

// fittersMovables are what can be moved on a finished antenna, each as far as
// reach, m, or as far as there is room.
func fittersMovables(d *models.Design, c *helix.Curve, reach float64) []movable {
	out := []movable{riser(d, reach)}
	for _, at := range []float64{0.25, 0.5, 1} {
		if at+bendReach(at) <= c.Turns() {
			out = append(out, bendable(d, c, at, reach))
		}
	}
	if d.Feed.Transformer.Impedance > 0 {
		out = append(out, line(d, reach))
	}
	return out
}

// altering is a movement that makes another winding.
func altering(change func(d *models.Design, by float64)) func(*piece, float64) {
	return func(p *piece, by float64) {
		change(&p.Design, by)
		p.other = true
	}
}

// riser is longer or shorter; the whole winding goes with it.
func riser(d *models.Design, reach float64) movable {
	least := objectives.LeastFeedHeight(math.Max(d.Conductor.Diameter+2*d.Insulation.Thickness, d.PinDiameter()))
	return movable{
		Name: "riser height", More: "raise", Less: "lower",
		Stands: "riser longer or shorter, the whole winding moves with it",
		Lowest: math.Max(math.Min(0, least-d.Feed.Height), -reach), Highest: reach,
		move: altering(func(d *models.Design, by float64) { d.Feed.Height += by }),
	}
}

// bendReach is how far a bend fades out to either side, turns.
func bendReach(at float64) float64 { return math.Min(at, 0.5) }

// leastAir is what a bend leaves between conductor and plate, m.
const leastAir = 1e-3

// bendable is the wire at one place of the first turn.
func bendable(d *models.Design, c *helix.Curve, at, reach float64) movable {
	below := d.Conductor.Diameter/2 + d.Insulation.Thickness + leastAir
	return movable{
		Name: "height at " + fraction(at) + " turn", More: "lift", Less: "press",
		Stands: fmt.Sprintf("wire moved there, fading out %s turn to either side", fraction(bendReach(at))),
		Lowest: math.Max(math.Min(0, below-c.Height(at)), -reach), Highest: math.Min(c.Spacing(at)/3, reach), // the next turn stays where it is
		move: func(p *piece, by float64) {
			p.bends = append(p.bends, bend{at: at, reach: bendReach(at), by: by})
		},
	}
}

func fraction(turns float64) string {
	switch turns {
	case 0.25:
		return "¼"
	case 0.5:
		return "½"
	}
	return shortest(turns)
}

// line is the section behind the plate, longer and shorter.
func line(d *models.Design, reach float64) movable {
	return movable{
		Name: "line section", More: "lengthen", Less: "shorten",
		Stands: "length of the section between connector and plate",
		Lowest: math.Max(-d.Feed.Transformer.Length, -reach), Highest: reach,
		move: func(p *piece, by float64) { p.Feed.Transformer.Length += by },
	}
}
