package workshop

import (
	"context"
	"fmt"
	"math"
	"math/cmplx"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/models/moment"
	"turnwise/objectives"
)

// trimStep is the movement that the arrows of a trim chart stand for, m.
const trimStep = 1e-3

// move is one thing a fitter can move, and where that takes the reflection
// at the connector.
type move struct {
	Name   string
	Stands string // what exactly was moved to find the arrows
	More   string // what a movement upwards, or longer, is called
	Less   string
	// Lowest and Highest are how far it may go, m, either side of 0.
	Lowest, Highest float64
	// Up and Down are what +1 mm and −1 mm add to the reflection; 0 where
	// 1 mm is too far.
	Up, Down complex128
	// Path is what is added at amounts in rising order, 0 among them.
	Path []waypoint
}

// waypoint is what moving by an amount, m, adds to the reflection.
type waypoint struct {
	By    float64
	Added complex128
}

// by is what moving by so many metres adds to the reflection, between
// waypoints along straight lines.
func (m *move) by(x float64) complex128 {
	for i := 1; i < len(m.Path); i++ {
		a, b := m.Path[i-1], m.Path[i]
		if x <= b.By || i == len(m.Path)-1 {
			u := complex((x-a.By)/(b.By-a.By), 0)
			return a.Added + u*(b.Added-a.Added)
		}
	}
	return 0
}

// reaches reports whether the move may go so far.
func (m *move) reaches(x float64) bool { return x >= m.Lowest-1e-12 && x <= m.Highest+1e-12 }

// trimChart is the reflection at mid-band and what moves it.
type trimChart struct {
	Hz         float64
	Reference  float64    // Ω
	Reflection complex128 // at the connector, as designed
	Moves      []move
}

// newTrimChart moves everything that can be moved, a millimetre either way.
func newTrimChart(ctx context.Context, rung objectives.Rung, d *models.Design, c *helix.Curve) (*trimChart, error) {
	t := &trimChart{Hz: d.Band.Mid(), Reference: d.Feed.Impedance}
	port, err := portAt(ctx, rung, *d, t.Hz)
	if err != nil {
		return nil, err
	}
	t.Reflection = t.gamma(d, port)
	if err := t.riser(ctx, rung, d); err != nil {
		return nil, err
	}
	for _, at := range []float64{0.25, 0.5, 1} {
		if at+bendReach(at) <= c.Turns() {
			if err := t.bend(ctx, moment.Fidelity(rung.Fidelity), d, c, at); err != nil {
				return nil, err
			}
		}
	}
	t.line(d, port)
	return t, nil
}

// gamma is the reflection at the connector of an impedance at the port.
func (t *trimChart) gamma(d *models.Design, port complex128) complex128 {
	return models.Reflection(d.Feed.Transformer.Input(port, t.Hz), t.Reference)
}

func portAt(ctx context.Context, rung objectives.Rung, d models.Design, hz float64) (complex128, error) {
	r, err := rung.Simulator.Simulate(ctx, d, models.Question{Hz: []float64{hz}, Outputs: models.Axis})
	if err != nil {
		return 0, err
	}
	return r.Samples[0].Port, nil
}

// riser makes the riser longer and shorter; the whole winding goes with it.
func (t *trimChart) riser(ctx context.Context, rung objectives.Rung, d *models.Design) error {
	m := move{
		Name: "riser height", More: "raise", Less: "lower",
		Stands: "riser longer or shorter, the whole winding moves with it",
		Lowest: math.Min(0, objectives.LeastFeedHeight(math.Max(d.Conductor.Diameter+2*d.Insulation.Thickness, d.PinDiameter()))-d.Feed.Height), Highest: t.reach(),
	}
	at := func(by float64) (complex128, error) {
		v := *d
		v.Feed.Height += by
		port, err := portAt(ctx, rung, v, t.Hz)
		return t.gamma(d, port) - t.Reflection, err
	}
	return t.add(m, at)
}

// bendReach is how far a bend fades out to either side, turns.
func bendReach(at float64) float64 { return math.Min(at, 0.5) }

// leastAir is what a bend leaves between conductor and plate, m.
const leastAir = 1e-3

// bend moves the wire at one place of the first turn. What counts is the
// difference that the bend makes, so the straight winding is answered in the
// same way.
func (t *trimChart) bend(ctx context.Context, f moment.Fidelity, d *models.Design, c *helix.Curve, at float64) error {
	b := bend{curve: c, at: at, reach: bendReach(at)}
	straight, err := b.port(ctx, f, d, t.Hz)
	if err != nil {
		return err
	}
	below := d.Conductor.Diameter/2 + d.Insulation.Thickness + leastAir
	m := move{
		Name: "height at " + fraction(at) + " turn", More: "lift", Less: "press",
		Stands: fmt.Sprintf("wire moved there, fading out %s turn to either side", fraction(b.reach)),
		Lowest: math.Min(0, below-c.Height(at)), Highest: c.Spacing(at) / 3, // the next turn stays where it is
	}
	return t.add(m, func(by float64) (complex128, error) {
		v := b
		v.by = by
		port, err := v.port(ctx, f, d, t.Hz)
		return t.gamma(d, port) - t.gamma(d, straight), err
	})
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

// line makes the line section behind the plate longer and shorter.
func (t *trimChart) line(d *models.Design, port complex128) {
	if d.Feed.Transformer.Impedance <= 0 {
		return
	}
	m := move{
		Name: "line section", More: "lengthen", Less: "shorten",
		Stands: "length of the section between connector and plate",
		Lowest: -d.Feed.Transformer.Length, Highest: t.reach(),
	}
	// It cannot fail: the line is a formula.
	_ = t.add(m, func(by float64) (complex128, error) {
		v := *d
		v.Feed.Transformer.Length += by
		return t.gamma(&v, port) - t.Reflection, nil
	})
}

// add finds a move's arrows and its path.
func (t *trimChart) add(m move, at func(by float64) (complex128, error)) error {
	var err error
	arrow := func(by float64) (g complex128) {
		if err == nil && m.reaches(by) {
			g, err = at(by)
		}
		return g
	}
	m.Up, m.Down = arrow(trimStep), arrow(-trimStep)
	last := math.Inf(-1)
	for _, share := range []float64{-1, -0.5, -0.25, 0, 0.25, 0.5, 1} {
		by := math.Min(math.Max(share*t.reach(), m.Lowest), m.Highest)
		if by <= last {
			continue
		}
		last = by
		w := waypoint{By: by}
		if by != 0 {
			w.Added = arrow(by)
		}
		m.Path = append(m.Path, w)
	}
	if err != nil {
		return fmt.Errorf("%s: %w", m.Name, err)
	}
	t.Moves = append(t.Moves, m)
	return nil
}

// adjustment is one or two moves and what they lead to.
type adjustment struct {
	First, Second     int     // of the chart's moves; −1: none
	FirstBy, SecondBy float64 // m
	VSWR              float64
}

// nudge is the step of amounts to move by, m: about a four-hundredth of a
// wavelength, a number that a rule shows.
func (t *trimChart) nudge() float64 {
	want := models.LightSpeed / t.Hz / 400
	for _, step := range []float64{0.1e-3, 0.2e-3, 0.5e-3, 1e-3, 2e-3, 5e-3} {
		if step >= want*0.8 {
			return step
		}
	}
	return 10e-3
}

// nudges is how many steps a move goes at most.
const nudges = 12

// reach is the farthest that anything is moved, m: about 3 % of a wavelength.
func (t *trimChart) reach() float64 { return nudges * t.nudge() }

// second is the improvement in VSWR that is worth a second move.
const second = 0.1

// adjust finds what to move when the marker stands at a reflection: the
// single move with the lowest VSWR after it, or the best two where a second
// one pays. Two moves are taken as their sum.
func (t *trimChart) adjust(marker complex128) adjustment {
	step := t.nudge()
	best := adjustment{First: -1, Second: -1, VSWR: vswrOf(marker)}
	pair := best
	each := func(i int, try func(x float64)) {
		for k := -nudges; k <= nudges; k++ {
			if x := float64(k) * step; k != 0 && t.Moves[i].reaches(x) {
				try(x)
			}
		}
	}
	for i := range t.Moves {
		each(i, func(x float64) {
			one := marker + t.Moves[i].by(x)
			if v := vswrOf(one); v < best.VSWR-1e-9 {
				best = adjustment{First: i, Second: -1, FirstBy: x, VSWR: v}
			}
			for j := i + 1; j < len(t.Moves); j++ {
				each(j, func(y float64) {
					if v := vswrOf(one + t.Moves[j].by(y)); v < pair.VSWR-1e-9 {
						pair = adjustment{First: i, Second: j, FirstBy: x, SecondBy: y, VSWR: v}
					}
				})
			}
		})
	}
	if pair.VSWR < best.VSWR-second {
		return pair
	}
	return best
}

func vswrOf(g complex128) float64 {
	a := cmplx.Abs(g)
	if a >= 1 {
		return models.VSWRCap
	}
	return math.Min((1+a)/(1-a), models.VSWRCap)
}

// impedance is what a reflection stands for, Ω.
func (t *trimChart) impedance(g complex128) complex128 {
	return complex(t.Reference, 0) * (1 + g) / (1 - g)
}
