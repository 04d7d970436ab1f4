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
	// ports are the design's impedances at the riser's foot, level the same
	// with its turns as the bends see them, unbent.
	ports, level []complex128
}

// piece is an antenna as it was made: a design that need not be the one drawn,
// with bends of its first turn.
type piece struct {
	models.Design
	other bool // before the line section the design is not the one drawn
	bends []bend
}

// newBench answers the design as drawn.
func newBench(ctx context.Context, rung objectives.Rung, d models.Design, hz []float64) (*bench, error) {
	b := &bench{rung: rung, design: d, hz: hz}
	p := b.piece()
	var err error
	if b.ports, err = b.straight(ctx, p); err != nil {
		return nil, err
	}
	for i := range hz {
		b.drawn = append(b.drawn, b.reflection(p, b.ports[i], i))
	}
	b.level, err = b.bent(ctx, p)
	return b, err
}

// piece is the one that is made as drawn.
func (b *bench) piece() *piece { return &piece{Design: b.design} }

// added is what a piece's reflection has more than the drawn one's. Of a bend
// counts the difference that it makes, over an infinite plane, so the unbent
// winding is answered in the same way.
func (b *bench) added(ctx context.Context, p *piece) ([]complex128, error) {
	ports, level := b.ports, b.level
	var err error
	if p.other {
		if ports, err = b.straight(ctx, p); err != nil {
			return nil, err
		}
	}
	out := make([]complex128, len(b.hz))
	for i := range out {
		out[i] = b.reflection(p, ports[i], i) - b.drawn[i]
	}
	if len(p.bends) == 0 {
		return out, nil
	}
	if p.other {
		if level, err = b.bent(ctx, &piece{Design: p.Design}); err != nil {
			return nil, err
		}
	}
	bent, err := b.bent(ctx, p)
	if err != nil {
		return nil, err
	}
	for i := range out {
		out[i] += b.reflection(p, bent[i], i) - b.reflection(p, level[i], i)
	}
	return out, nil
}

// reflection is a piece's at the connector, with an impedance at its port.
func (b *bench) reflection(p *piece, port complex128, i int) complex128 {
	return models.Reflection(p.Feed.Transformer.Input(port, b.hz[i]), p.Feed.Impedance)
}

// straight are the ports of a piece without its bends.
func (b *bench) straight(ctx context.Context, p *piece) ([]complex128, error) {
	r, err := b.rung.Simulator.Simulate(ctx, p.Design, models.Question{Hz: b.hz, Outputs: models.Axis})
	if err != nil {
		return nil, err
	}
	out := make([]complex128, len(b.hz))
	for i := range out {
		out[i] = r.Samples[i].Port
	}
	return out, nil
}

// bent are the ports of a piece with all its bends.
func (b *bench) bent(ctx context.Context, p *piece) ([]complex128, error) {
	c, err := helix.Wind(&p.Design)
	if err != nil {
		return nil, err
	}
	bends := slices.Clone(p.bends)
	if len(bends) == 0 {
		bends = []bend{{at: 0.5, reach: 0.5}}
	}
	for i := range bends {
		bends[i].curve = c
		if i > 0 {
			bends[i].also = &bends[i-1]
		}
	}
	return bends[len(bends)-1].ports(ctx, moment.Fidelity(b.rung.Fidelity), &p.Design, b.hz)
}
