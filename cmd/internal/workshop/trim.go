package workshop

import (
	"context"
	"fmt"
	"math"
	"math/cmplx"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
)

// trimStep is the movement that the arrows of a trim chart stand for, m.
const trimStep = 1e-3

// move is one thing a fitter can move, and where that takes the reflection
// at the connector.
type move struct {
	movable
	// Up and Down are what +1 mm and −1 mm add to the reflection; 0 where
	// 1 mm is too far.
	Up, Down complex128
	Path     path
}

// path is what is added at amounts in rising order, 0 among them.
type path []waypoint

// waypoint is what moving by an amount adds to the reflection.
type waypoint struct {
	By    float64
	Added complex128
}

// by is what moving by so much adds to the reflection, between waypoints
// along straight lines.
func (p path) by(x float64) complex128 {
	for i := 1; i < len(p); i++ {
		a, b := p[i-1], p[i]
		if x <= b.By || i == len(p)-1 {
			u := complex((x-a.By)/(b.By-a.By), 0)
			return a.Added + u*(b.Added-a.Added)
		}
	}
	return 0
}

// amounts are those of a path's waypoints, rising.
func (m *movable) amounts() []float64 {
	reach := math.Max(-m.Lowest, m.Highest)
	var out []float64
	for _, share := range []float64{-1, -0.5, -0.25, 0, 0.25, 0.5, 1} {
		by := math.Min(math.Max(share*reach, m.Lowest), m.Highest)
		if len(out) == 0 || by > out[len(out)-1] {
			out = append(out, by)
		}
	}
	return out
}

// trimChart is the reflection at mid-band and what moves it.
type trimChart struct {
	Hz         float64
	Reference  float64    // Ω
	Reflection complex128 // at the connector, as designed
	Moves      []move
}

// newTrimChart moves everything that can be moved, a millimetre either way
// and as far as it goes.
func newTrimChart(ctx context.Context, rung objectives.Rung, d *models.Design, c *helix.Curve) (*trimChart, error) {
	t := &trimChart{Hz: d.Band.Mid(), Reference: d.Feed.Impedance}
	b, err := newBench(ctx, rung, *d, []float64{t.Hz})
	if err != nil {
		return nil, err
	}
	t.Reflection = b.drawn[0]
	for _, m := range fittersMovables(d, c, reach(t.Hz)) {
		if err := t.add(ctx, b, m); err != nil {
			return nil, fmt.Errorf("%s: %w", m.Name, err)
		}
	}
	return t, nil
}

// add finds a movable's arrows and its path.
func (t *trimChart) add(ctx context.Context, b *bench, what movable) error {
	m := move{movable: what}
	var err error
	arrow := func(by float64) complex128 {
		if err != nil || by == 0 || !m.reaches(by) {
			return 0
		}
		p := b.piece()
		m.move(p, by)
		var g []complex128
		if g, err = b.added(ctx, p); err != nil {
			return 0
		}
		return g[0]
	}
	m.Up, m.Down = arrow(trimStep), arrow(-trimStep)
	for _, by := range m.amounts() {
		m.Path = append(m.Path, waypoint{By: by, Added: arrow(by)})
	}
	t.Moves = append(t.Moves, m)
	return err
}

// adjustment is one or two moves and what they lead to.
type adjustment struct {
	First, Second     int     // of the chart's moves; −1: none
	FirstBy, SecondBy float64 // m
	VSWR              float64
}

// nudge is the step of amounts to move by, m: about a four-hundredth of a
// wavelength, a number that a rule shows.
func nudge(hz float64) float64 {
	want := models.LightSpeed / hz / 400
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
func reach(hz float64) float64 { return nudges * nudge(hz) }

// second is the improvement in VSWR that is worth a second move.
const second = 0.1

// adjust finds what to move when the marker stands at a reflection: the
// single move with the lowest VSWR after it, or the best two where a second
// one pays. Two moves are taken as their sum.
func (t *trimChart) adjust(marker complex128) adjustment {
	step := nudge(t.Hz)
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
			one := marker + t.Moves[i].Path.by(x)
			if v := vswrOf(one); v < best.VSWR-1e-9 {
				best = adjustment{First: i, Second: -1, FirstBy: x, VSWR: v}
			}
			for j := i + 1; j < len(t.Moves); j++ {
				each(j, func(y float64) {
					if v := vswrOf(one + t.Moves[j].Path.by(y)); v < pair.VSWR-1e-9 {
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
