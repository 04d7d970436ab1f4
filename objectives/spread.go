package objectives

import "turnwise/models"

// spread lists the windings that a workshop may make of a design: the design
// itself, and under margins each dimension at either end of its spread, a
// law shifted as a whole.
func (p *Problem) spread(d models.Design) []models.Design {
	all := []models.Design{d}
	both := func(margin float64, shift func(d *models.Design, by float64)) {
		if margin <= 0 {
			return
		}
		for _, by := range []float64{margin, -margin} {
			v := d
			shift(&v, by)
			all = append(all, v)
		}
	}
	both(p.Margins.Diameter, func(d *models.Design, by float64) { d.Diameter = shifted(d.Diameter, by) })
	both(p.Margins.Spacing, func(d *models.Design, by float64) { d.Spacing = shifted(d.Spacing, by) })
	both(p.Margins.FeedHeight, func(d *models.Design, by float64) { d.Feed.Height += by })
	return all
}

func shifted(l models.Law, by float64) models.Law {
	out := make(models.Law, len(l))
	for i := range l {
		out[i] = l[i] + by
	}
	return out
}
