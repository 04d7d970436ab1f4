package workshop

import (
	"context"
	"slices"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/models/moment"
	"turnwise/objectives"
)

// bench answers pieces of one design, made otherwise than drawn, at the same
// frequencies.
type bench struct {
	rung   objectives.Rung
	design models.Design
	hz     []float64
	drawn  []complex128 // the reflection of the design as drawn
	level  []complex128 // the same with its turns as the bends see them, unbent
}

// piece is an antenna as it was made: a design that need not be the one drawn,
// with bends of its first turn.
type piece struct {
	models.Design
	other bool // the design is not the one drawn
	bends []bend
}

// newBench answers the design as drawn.
func newBench(ctx context.Context, rung objectives.Rung, d models.Design, hz []float64) (*bench, error) {
	b := &bench{rung: rung, design: d, hz: hz}
	var err error
	if b.drawn, err = sweptReflection(ctx, rung, d, hz); err != nil {
		return nil, err
	}
	b.level, err = b.bent(ctx, &piece{Design: d, bends: []bend{{at: 0.5, reach: 0.5}}})
	return b, err
}

// piece is the one that is made as drawn.
func (b *bench) piece() *piece { return &piece{Design: b.design} }

// added is what a piece's reflection has more than the drawn one's. Of a bend
// counts the difference that it makes, so the unbent winding is answered in
// the same way.
func (b *bench) added(ctx context.Context, p *piece) ([]complex128, error) {
	out := make([]complex128, len(b.hz))
	level := b.level
	if p.other {
		is, err := sweptReflection(ctx, b.rung, p.Design, b.hz)
		if err != nil {
			return nil, err
		}
		for i := range out {
			out[i] = is[i] - b.drawn[i]
		}
		if len(p.bends) > 0 {
			if level, err = b.bent(ctx, &piece{Design: p.Design, bends: []bend{{at: 0.5, reach: 0.5}}}); err != nil {
				return nil, err
			}
		}
	}
	if len(p.bends) == 0 {
		return out, nil
	}
	bent, err := b.bent(ctx, p)
	for i := range bent {
		out[i] += bent[i] - level[i]
	}
	return out, err
}

// bent is the reflection of a piece with all its bends.
func (b *bench) bent(ctx context.Context, p *piece) ([]complex128, error) {
	c, err := helix.Wind(&p.Design)
	if err != nil {
		return nil, err
	}
	bends := slices.Clone(p.bends)
	for i := range bends {
		bends[i].curve = c
		if i > 0 {
			bends[i].also = &bends[i-1]
		}
	}
	ports, err := bends[len(bends)-1].ports(ctx, moment.Fidelity(b.rung.Fidelity), &p.Design, b.hz)
	for i := range ports {
		ports[i] = models.Reflection(p.Feed.Transformer.Input(ports[i], b.hz[i]), p.Feed.Impedance)
	}
	return ports, err
}

// sweptReflection is a design's reflection at the connector.
func sweptReflection(ctx context.Context, rung objectives.Rung, d models.Design, hz []float64) ([]complex128, error) {
	r, err := rung.Simulator.Simulate(ctx, d, models.Question{Hz: hz, Outputs: models.Axis})
	if err != nil {
		return nil, err
	}
	out := make([]complex128, len(hz))
	for i := range out {
		out[i] = models.Reflection(r.Samples[i].Input, d.Feed.Impedance)
	}
	return out, nil
}
