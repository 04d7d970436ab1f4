package objectives

import (
	"context"
	"math"

	"turnwise/models"
)

// Headroom is looked for in steps of 1 % up to 20 %.
const (
	headroomStep  = 0.01
	headroomSteps = 20
)

// headroom is the smallest rise of every frequency, in per cent, at which
// the band's gain has fallen 1 dB or a limit on the response breaks; between
// steps along straight lines. Limits on the winding's own dimensions do not
// move with frequency and have no part in it. row holds the band's own
// figures.
func (p *Problem) headroom(ctx context.Context, q *inquiry, d *models.Design, row *Row) (float64, error) {
	margin := func(r *Row) []float64 {
		m := []float64{r[Gain] - (row[Gain] - 1)}
		for i := range p.Limits {
			l := &p.Limits[i]
			if f := &Figures[l.Figure]; f.Geometry || l.Figure == GainBandwidth || l.Figure == Headroom || l.Figure == VSWRBandwidth {
				continue
			}
			m = append(m, -l.excess(r))
		}
		return m
	}
	last := margin(row)
	if least(last) < 0 {
		return 0, nil
	}
	outputs := p.needed().outputs()
	for k := 1; k <= headroomSteps; k++ {
		rise := headroomStep * float64(k)
		b := p.Band
		b.From, b.To = b.From*(1+rise), b.To*(1+rise)
		r, err := q.ask(ctx, d, models.Question{Hz: b.Hz(), Outputs: outputs, Cone: p.Cone})
		if err != nil {
			return 0, err
		}
		shifted := emptyRow()
		readBand(&shifted, d, &r)
		next := margin(&shifted)
		if least(next) < 0 {
			part := 1.0
			for i := range next {
				if next[i] < 0 {
					part = math.Min(part, last[i]/(last[i]-next[i]))
				}
			}
			return 100 * (rise - headroomStep + part*headroomStep), nil
		}
		last = next
	}
	return 100 * headroomStep * headroomSteps, nil
}

func least(xs []float64) float64 {
	low := math.Inf(1)
	for _, x := range xs {
		low = math.Min(low, x)
	}
	return low
}
