package objectives

import (
	"math"
	"slices"

	"turnwise/models"
)

// percentileWindings is how many windings stand for the workshop's spread
// where limits are to hold at a percentile.
const percentileWindings = 20

// Windings is how many windings one evaluation simulates.
func (p *Problem) Windings() int { return len(p.spread(p.Base)) }

// spread lists the windings that a workshop may make of a design, the design
// itself first, a law shifted as a whole: for the worst, each dimension at
// either end of its spread; for a percentile, windings spread evenly over all
// of it.
func (p *Problem) spread(d models.Design) []models.Design {
	all := []models.Design{d}
	m := p.Margins
	if !m.Any() {
		return all
	}
	if m.Percentile > 0 {
		for k := 1; k <= percentileWindings; k++ {
			all = append(all, moved(d, m.Diameter*evenly(k, 2), m.Spacing*evenly(k, 3), m.FeedHeight*evenly(k, 5)))
		}
		return all
	}
	for _, by := range []float64{1, -1} {
		if m.Diameter > 0 {
			all = append(all, moved(d, by*m.Diameter, 0, 0))
		}
		if m.Spacing > 0 {
			all = append(all, moved(d, 0, by*m.Spacing, 0))
		}
		if m.FeedHeight > 0 {
			all = append(all, moved(d, 0, 0, by*m.FeedHeight))
		}
	}
	return all
}

// moved is a design with its dimensions moved.
func moved(d models.Design, diameter, spacing, height float64) models.Design {
	d.Diameter, d.Spacing = shifted(d.Diameter, diameter), shifted(d.Spacing, spacing)
	d.Feed.Height += height
	return d
}

func shifted(l models.Law, by float64) models.Law {
	out := make(models.Law, len(l))
	for i := range l {
		out[i] = l[i] + by
	}
	return out
}

// evenly is the k-th point of van der Corput's sequence, from −1 to 1: in
// bases without a common factor its points fill a box evenly (Halton, Numer.
// Math. 2, 84, 1960).
func evenly(k, base int) float64 {
	x, digit := 0.0, 1.0
	for ; k > 0; k /= base {
		digit /= float64(base)
		x += digit * float64(k%base)
	}
	return 2*x - 1
}

// atPercentile gives of each figure the value that so many per cent of the
// rows reach; a figure that a row lacks is not counted there.
func atPercentile(rows []Row, percent float64) Row {
	out := emptyRow()
	values := make([]float64, 0, len(rows))
	for f := range out {
		values = values[:0]
		for i := range rows {
			if x := rows[i][f]; !math.IsNaN(x) {
				values = append(values, x)
			}
		}
		if len(values) == 0 {
			continue
		}
		slices.Sort(values)
		if Figures[f].More {
			slices.Reverse(values) // best first
		}
		out[f] = values[max(int(math.Ceil(percent/100*float64(len(values))))-1, 0)]
	}
	return out
}
