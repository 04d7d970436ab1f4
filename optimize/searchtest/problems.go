// Package searchtest holds what every searcher is tried on: standard problems
// whose fronts are known, and the contract that all searchers pass.
package searchtest

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"

	"turnwise/optimize"
	"turnwise/optimize/front"
	"turnwise/optimize/space"
)

// Problem is a test problem whose true front is known.
type Problem struct {
	Name   string
	Domain optimize.Domain
	// Axes run from the true front's ideal to its nadir.
	Axes front.Axes
	// Volume is the true front's hypervolume on those axes, against
	// front.UnitReference.
	Volume float64

	aims   func(x []float64) []float64
	limits func(x []float64) []float64 // ≤ 0 is met; nil: none
}

var _ optimize.Evaluator = (*Problem)(nil)

// Evaluate answers a candidate.
func (p *Problem) Evaluate(_ context.Context, c optimize.Candidate) (optimize.Score, error) {
	s := optimize.Score{Aims: p.aims(c.Point)}
	if p.limits != nil {
		s.Limits = p.limits(c.Point)
	}
	if p.Domain.Traits != nil {
		s.Traits = slices.Concat(s.Aims, s.Limits)
	}
	return s, nil
}

// WithTraits is the problem whose aims and limits are traits as well.
func (p *Problem) WithTraits() *Problem {
	own := *p
	own.Domain.Traits = themselves(p.Domain.Aims, p.Domain.Limits)
	return &own
}

// Fraction is the part of the true front's hypervolume that values cover.
func (p *Problem) Fraction(values []front.Value) float64 {
	var points [][]float64
	for _, i := range front.Front(values) {
		points = append(points, p.Axes.Unit(values[i].Aims))
	}
	return front.Hypervolume(points, front.UnitReference(p.Domain.Aims)) / p.Volume
}

// Sources: ZDT from Zitzler, Deb, Thiele, Evol. Comput. 8, 173, 2000; DTLZ2
// from Deb, Thiele, Laumanns, Zitzler, CEC 2002; BNH, SRN, TNK, OSY from Deb,
// Multi-Objective Optimization Using Evolutionary Algorithms, 2001. Axes and
// volumes: closed form or fine sampling of the known fronts (SRN's printed
// front is incomplete).
var zdtAxes = front.Axes{Ideal: []float64{0, 0}, Nadir: []float64{1, 1}}

// Problems makes every problem anew, the shifted twins among them. A shifted
// twin has the optimum of each distance variable moved off the bound, to a
// fixed place between 0.2 and 0.8; its front is the same.
func Problems() []*Problem {
	return []*Problem{
		zdt1(nil), zdt2(nil), zdt3(nil), zdt4(nil), zdt6(nil), dtlz2(nil),
		zdt1(shifts), zdt2(shifts), zdt3(shifts), zdt4(shifts), zdt6(shifts), dtlz2(shifts),
		bnh(), srn(), tnk(), osy(),
	}
}

// ZDT1In10 is ZDT1 with 10 variables and its shifted twin, for searchers that
// may ask little.
func ZDT1In10() []*Problem {
	short := func(p *Problem) *Problem {
		p.Name = "zdt1-10" + strings.TrimPrefix(p.Name, "zdt1")
		p.Domain.Space = p.Domain.Space[:10]
		return p
	}
	return []*Problem{short(zdt1(nil)), short(zdt1(shifts))}
}

// ProblemByName finds a problem; it panics when there is none.
func ProblemByName(name string) *Problem {
	for _, p := range slices.Concat(Problems(), ZDT1In10(), Mixed()) {
		if p.Name == name {
			return p
		}
	}
	panic("searchtest: no problem " + name)
}

// shifts are the places of the shifted optima: 0.2 + 0.6·frac(k·φ).
var shifts = func() []float64 {
	t := make([]float64, 32)
	for k := range t {
		_, f := math.Modf(float64(k+1) * 0.6180339887498949)
		t[k] = 0.2 + 0.6*f
	}
	return t
}()

// distance moves coordinate k (0 to 1, optimum at 0) so that the optimum lies
// at its shift and the far bound stays as far as it was.
func distance(x float64, k int, shift []float64) float64 {
	if shift == nil {
		return x
	}
	s := shift[k%len(shift)]
	return math.Abs(x-s) / math.Max(s, 1-s)
}

func box(n int, from, to float64) space.Space {
	var sp space.Space
	for i := range n {
		sp = append(sp, space.NewReal(fmt.Sprintf("x%d", i+1), from, to, 0))
	}
	return sp
}

func named(name string, shift []float64) string {
	if shift != nil {
		return name + "-shifted"
	}
	return name
}

func zdt(name string, shift []float64, volume float64, axes front.Axes, aims func(x []float64) []float64) *Problem {
	return &Problem{Name: named(name, shift), Domain: optimize.Domain{Space: box(30, 0, 1), Aims: 2}, Axes: axes, Volume: volume, aims: aims}
}

// sum is the mean distance of ZDT1 to 3: 1 + 9 Σ x/(n−1).
func sum(x, shift []float64) float64 {
	g := 0.0
	for k, v := range x[1:] {
		g += distance(v, k, shift)
	}
	return 1 + 9*g/float64(len(x)-1)
}

func zdt1(shift []float64) *Problem {
	return zdt("zdt1", shift, 0.876667, zdtAxes, func(x []float64) []float64 {
		g := sum(x, shift)
		return []float64{x[0], g * (1 - math.Sqrt(x[0]/g))}
	})
}

func zdt2(shift []float64) *Problem {
	return zdt("zdt2", shift, 0.543333, zdtAxes, func(x []float64) []float64 {
		g := sum(x, shift)
		return []float64{x[0], g * (1 - x[0]*x[0]/(g*g))}
	})
}

func zdt3(shift []float64) *Problem {
	axes := front.Axes{Ideal: []float64{0, -0.77337}, Nadir: []float64{0.85184, 1}}
	return zdt("zdt3", shift, 0.72745, axes, func(x []float64) []float64 {
		g := sum(x, shift)
		r := x[0] / g
		return []float64{x[0], g * (1 - math.Sqrt(r) - r*math.Sin(10*math.Pi*x[0]))}
	})
}

func zdt4(shift []float64) *Problem {
	p := &Problem{Name: named("zdt4", shift), Domain: optimize.Domain{Aims: 2}, Axes: zdtAxes, Volume: 0.876667}
	p.Domain.Space = append(box(1, 0, 1), box(10, -5, 5)[1:]...)
	p.aims = func(x []float64) []float64 {
		g := 1 + 10*float64(len(x)-1)
		for k, v := range x[1:] {
			if shift != nil {
				// The optimum 0, in the middle of −5 to 5, moves to the shift.
				v = 5 * distance((v+5)/10, k, shift)
			}
			g += v*v - 10*math.Cos(4*math.Pi*v)
		}
		return []float64{x[0], g * (1 - math.Sqrt(x[0]/g))}
	}
	return p
}

func zdt6(shift []float64) *Problem {
	axes := front.Axes{Ideal: []float64{0.28078, 0}, Nadir: []float64{1, 0.92117}}
	p := zdt("zdt6", shift, 0.61641, axes, func(x []float64) []float64 {
		f := 1 - math.Exp(-4*x[0])*math.Pow(math.Sin(6*math.Pi*x[0]), 6)
		g := (sum(x, shift) - 1) / 9
		g = 1 + 9*math.Pow(g, 0.25)
		return []float64{f, g * (1 - f*f/(g*g))}
	})
	p.Domain.Space = p.Domain.Space[:10]
	return p
}

func dtlz2(shift []float64) *Problem {
	p := &Problem{Name: named("dtlz2", shift), Domain: optimize.Domain{Space: box(12, 0, 1), Aims: 3}, Volume: 0.80740}
	p.Axes = front.Axes{Ideal: []float64{0, 0, 0}, Nadir: []float64{1, 1, 1}}
	p.aims = func(x []float64) []float64 {
		g := 0.0
		for k, v := range x[2:] {
			d := v - 0.5
			if shift != nil {
				d = 0.5 * distance(v, k, shift)
			}
			g += d * d
		}
		s1, c1 := math.Sincos(x[0] * math.Pi / 2)
		s2, c2 := math.Sincos(x[1] * math.Pi / 2)
		return []float64{(1 + g) * c1 * c2, (1 + g) * c1 * s2, (1 + g) * s1}
	}
	return p
}

func bnh() *Problem {
	return &Problem{
		Name: "bnh", Volume: 1.02543, Axes: front.Axes{Ideal: []float64{0, 4}, Nadir: []float64{136, 50}},
		Domain: optimize.Domain{Space: append(box(1, 0, 5), box(2, 0, 3)[1:]...), Aims: 2, Limits: 2},
		aims: func(x []float64) []float64 {
			return []float64{4*x[0]*x[0] + 4*x[1]*x[1], sq(x[0]-5) + sq(x[1]-5)}
		},
		limits: func(x []float64) []float64 {
			return []float64{(sq(x[0]-5) + sq(x[1]) - 25) / 25, (7.7 - sq(x[0]-8) - sq(x[1]+3)) / 7.7}
		},
	}
}

func srn() *Problem {
	return &Problem{
		Name: "srn", Volume: 0.75076, Axes: front.Axes{Ideal: []float64{10.1, -217.739}, Nadir: []float64{222.969, 2.610}},
		Domain: optimize.Domain{Space: box(2, -20, 20), Aims: 2, Limits: 2},
		aims: func(x []float64) []float64 {
			return []float64{2 + sq(x[0]-2) + sq(x[1]-1), 9*x[0] - sq(x[1]-1)}
		},
		limits: func(x []float64) []float64 {
			return []float64{(sq(x[0]) + sq(x[1]) - 225) / 225, (x[0] - 3*x[1] + 10) / 10}
		},
	}
}

func tnk() *Problem {
	return &Problem{
		Name: "tnk", Volume: 0.51888, Axes: front.Axes{Ideal: []float64{0.04167, 0.04167}, Nadir: []float64{1.0384, 1.0384}},
		Domain: optimize.Domain{Space: box(2, 0, math.Pi), Aims: 2, Limits: 2},
		aims:   func(x []float64) []float64 { return []float64{x[0], x[1]} },
		limits: func(x []float64) []float64 {
			return []float64{1 + 0.1*math.Cos(16*math.Atan2(x[0], x[1])) - sq(x[0]) - sq(x[1]), (sq(x[0]-0.5) + sq(x[1]-0.5) - 0.5) / 0.5}
		},
	}
}

func osy() *Problem {
	var sp space.Space
	for i, b := range [][2]float64{{0, 10}, {0, 10}, {1, 5}, {0, 6}, {1, 5}, {0, 10}} {
		sp = append(sp, space.NewReal(fmt.Sprintf("x%d", i+1), b[0], b[1], 0))
	}
	return &Problem{
		Name: "osy", Volume: 0.96886, Axes: front.Axes{Ideal: []float64{-274, 4}, Nadir: []float64{-42, 76}},
		Domain: optimize.Domain{Space: sp, Aims: 2, Limits: 6},
		aims: func(x []float64) []float64 {
			squares := 0.0
			for _, v := range x {
				squares += v * v
			}
			return []float64{-(25*sq(x[0]-2) + sq(x[1]-2) + sq(x[2]-1) + sq(x[3]-4) + sq(x[4]-1)), squares}
		},
		limits: func(x []float64) []float64 {
			return []float64{
				(2 - x[0] - x[1]) / 2, (x[0] + x[1] - 6) / 6, (x[1] - x[0] - 2) / 2, (x[0] - 3*x[1] - 2) / 2,
				(sq(x[2]-3) + x[3] - 4) / 4, (4 - sq(x[4]-3) - x[5]) / 4,
			}
		},
	}
}

func sq(x float64) float64 { return x * x }

// Drive runs a searcher on a problem to its end, without workers, and gives
// everything that was answered.
func Drive(p *Problem, s optimize.Searcher) []optimize.Evaluation {
	var all []optimize.Evaluation
	for {
		batch := s.Ask()
		if len(batch) == 0 {
			return all
		}
		told := make([]optimize.Evaluation, len(batch))
		for i, c := range batch {
			c.ID = len(all) + i
			score, err := p.Evaluate(context.Background(), c)
			told[i] = optimize.Evaluation{Candidate: c, Score: score, Status: optimize.OK}
			if err != nil {
				told[i].Status, told[i].Err = optimize.Failed, err.Error()
			}
		}
		all = append(all, told...)
		s.Tell(told)
	}
}
