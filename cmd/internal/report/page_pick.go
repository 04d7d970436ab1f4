package report

import (
	"math"
	"slices"

	"turnwise/cmd/internal/folder"
	"turnwise/objectives"
	"turnwise/optimize/front"
)

// Pick chooses which members of a front get a sheet, at most `most`: those
// named, the best of each aim, then again and again the one that lies
// farthest from all that are picked. Indices ascend.
func Pick(p *objectives.Problem, t *folder.Table, named []string, most int) []int {
	if len(t.Members) <= most {
		all := make([]int, len(t.Members))
		for i := range all {
			all[i] = i
		}
		return all
	}
	points := unitAims(p, t)
	picked := make([]int, 0, most)
	pick := func(i int) {
		if len(picked) < most && !slices.Contains(picked, i) {
			picked = append(picked, i)
		}
	}
	for _, id := range named {
		if i := slices.IndexFunc(t.Members, func(m folder.Member) bool { return m.ID == id }); i >= 0 {
			pick(i)
		}
	}
	for a := range p.Aims {
		best := 0
		for i := range points {
			if points[i][a] < points[best][a] {
				best = i
			}
		}
		pick(best)
	}
	for len(picked) < most {
		pick(farthest(points, picked))
	}
	slices.Sort(picked)
	return picked
}

// farthest is the point whose nearest picked one is farthest away, the first
// of equals that is not picked itself.
func farthest(points [][]float64, picked []int) int {
	best, away := -1, -1.0
	for i := range points {
		if slices.Contains(picked, i) {
			continue
		}
		nearest := math.Inf(1)
		for _, k := range picked {
			sum := 0.0
			for a := range points[i] {
				d := points[i][a] - points[k][a]
				sum += d * d
			}
			nearest = math.Min(nearest, sum)
		}
		if nearest > away {
			best, away = i, nearest
		}
	}
	return best
}

// unitAims are the members' aims, each over its own span; an aim that does
// not apply to a member is taken as its worst.
func unitAims(p *objectives.Problem, t *folder.Table) [][]float64 {
	points := make([][]float64, len(t.Members))
	for i := range points {
		for _, a := range p.Aims {
			points[i] = append(points[i], a.Cost(t.Members[i].Figures[a.Figure]))
		}
	}
	for a := range p.Aims {
		worst := math.Inf(-1)
		for i := range points {
			if !math.IsNaN(points[i][a]) {
				worst = math.Max(worst, points[i][a])
			}
		}
		for i := range points {
			if math.IsNaN(points[i][a]) {
				points[i][a] = worst
			}
		}
	}
	axes := front.Span(points)
	return axes.Units(points)
}
