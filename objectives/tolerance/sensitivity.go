package tolerance

import (
	"cmp"
	"math"
	"slices"

	"turnwise/objectives"
)

// Sensitivity is what one dimension does alone.
type Sensitivity struct {
	Dimension Dimension
	HalfWidth float64 // SI
	// Changes has one entry a limit of the result; without limits a single
	// one, for the lowest gain.
	Changes []Change
	// Err says why an end of the spread has no answer: the changes are then
	// none.
	Err string
}

// Change is what a dimension does to the room under one limit. Room is in the
// unit of the figure, positive where the limit is kept.
type Change struct {
	// Up and Down are the change of room by plus and by minus a half-width.
	Up, Down float64
	// Share is the dimension's part of the variance of the room, 0 to 1, all
	// dimensions taken as independent: of the parabola through the three
	// answers.
	Share    float64
	variance float64
}

// PerHalfWidth is the central difference: the change of room per half-width.
func (c *Change) PerHalfWidth() float64 { return (c.Up - c.Down) / 2 }

// room is how far a row's figure is inside a limit.
func room(l *objectives.Limit, row *objectives.Row) float64 {
	if l.AtLeast {
		return row[l.Figure] - l.Value
	}
	return l.Value - row[l.Figure]
}

// Room is how far the nominal design is inside a limit.
func (res *Result) Room(limit int) float64 { return room(&res.Limits[limit], &res.Nominal.Figures) }

// Judges are the limits by which dimensions are ranked; without any, a gain of
// as much as the design has.
func (res *Result) Judges() []objectives.Limit {
	if len(res.Limits) > 0 {
		return res.Limits
	}
	return []objectives.Limit{{Figure: objectives.Gain, AtLeast: true, Value: res.Nominal.Figures[objectives.Gain]}}
}

// rank reads the sensitivities and puts the tightest dimension first.
func (s *Study) rank(res *Result, p *plan) {
	judges := res.Judges()
	for i := range s.Spreads {
		if ends := p.ends[Dimension(i)]; ends != nil {
			res.Sensitivities = append(res.Sensitivities, s.sensitivity(Dimension(i), judges, &res.Nominal, ends))
		}
	}
	share(res.Sensitivities, len(judges))
	res.Deciding = deciding(res)
	by := max(res.Deciding, 0)
	slices.SortStableFunc(res.Sensitivities, func(a, b Sensitivity) int {
		return cmp.Compare(b.shareOf(by), a.shareOf(by))
	})
}

func (s *Sensitivity) shareOf(limit int) float64 {
	if s.Err != "" {
		return -1
	}
	return s.Changes[limit].Share
}

// sensitivity compares the ends of a spread with the design.
func (s *Study) sensitivity(d Dimension, judges []objectives.Limit, nominal *Copy, ends *[2]Copy) Sensitivity {
	out := Sensitivity{Dimension: d, HalfWidth: s.Spreads[d]}
	for k := range ends {
		if ends[k].Err != "" {
			out.Err = ends[k].Err
			return out
		}
	}
	linear, square := s.Distribution.variances()
	for i := range judges {
		from := room(&judges[i], &nominal.Figures)
		c := Change{Up: room(&judges[i], &ends[0].Figures) - from, Down: room(&judges[i], &ends[1].Figures) - from}
		slope, bow := c.PerHalfWidth(), (c.Up+c.Down)/2
		c.variance = slope*slope*linear + bow*bow*square
		out.Changes = append(out.Changes, c)
	}
	return out
}

// share divides each limit's variance among the dimensions.
func share(all []Sensitivity, limits int) {
	for k := range limits {
		sum := 0.0
		for i := range all {
			if all[i].Err == "" {
				sum += all[i].Changes[k].variance
			}
		}
		for i := range all {
			if all[i].Err == "" && sum > 0 {
				all[i].Changes[k].Share = all[i].Changes[k].variance / sum
			}
		}
	}
}

// deciding is the limit that fewest copies keep; of those kept by equally
// many the one with the least room for its spread.
func deciding(res *Result) int {
	best := -1
	for k := range res.Limits {
		if best < 0 {
			best = k
			continue
		}
		a, b := res.LimitYield[k].Share, res.LimitYield[best].Share
		if a < b || a == b && res.tightness(k) < res.tightness(best) {
			best = k
		}
	}
	return best
}

// tightness is the room of a limit in standard deviations; endless where
// nothing moves it.
func (res *Result) tightness(limit int) float64 {
	sum := 0.0
	for i := range res.Sensitivities {
		if res.Sensitivities[i].Err == "" {
			sum += res.Sensitivities[i].Changes[limit].variance
		}
	}
	if sum == 0 {
		return math.Inf(1)
	}
	return res.Room(limit) / math.Sqrt(sum)
}
