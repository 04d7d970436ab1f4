package workshop

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strings"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/objectives"
	"turnwise/optimize/space"
)

// mostMoved is how far rounding may move the gain anywhere in the band, dB.
const mostMoved = 0.05

// Settled is a design as it is printed, with what was asked of it again.
type Settled struct {
	Design     models.Design
	File       []byte // the design file it was read back from
	Resolution Resolution
	Curve      *helix.Curve
	Response   models.Response // over the fine sweep of the band
	Wide       models.Response // on either side of it too, on the axis
	Figures    objectives.Row
	// Original is the id of the design before rounding; Moved is by how much
	// rounding moved its gain, dB, where it moved most.
	Original string
	Moved    float64
}

// Refused is a design that must not be built, with the reasons.
type Refused struct{ Reasons []string }

func (r *Refused) Error() string { return strings.Join(r.Reasons, "; ") }

// Settle rounds a design, whose band says where, to the coarsest resolution
// at which it still keeps the brief (nil: none) and its gain, answering it
// anew at every step. Where there is none the error is a [Refused].
func Settle(ctx context.Context, rung objectives.Rung, d models.Design, brief *objectives.Spec) (*Settled, error) {
	if brief != nil && brief.Base.Sense == -d.Handedness {
		return nil, &Refused{[]string{fmt.Sprintf("the winding is %s-handed and radiates %s-hand circular; the brief asks this antenna for %s-hand", d.Handedness, d.Handedness, brief.Base.Sense)}}
	}
	before, err := ask(ctx, rung, &d)
	if err != nil {
		return nil, err
	}
	var last *Refused
	for _, r := range []Resolution{Coarse, Fine} {
		s, err := settleAt(ctx, rung, d, &before, brief, r)
		if errors.As(err, &last) {
			continue
		}
		if err == nil {
			s.Wide, err = rung.Simulator.Simulate(ctx, s.Design, models.Question{Hz: wideBand(d.Band).Hz(), Outputs: models.Axis})
		}
		return s, err
	}
	return nil, last
}

// wideBand is the band with as much again about it, what an analyser is set
// to show: at least 2 % of mid-band to either side.
func wideBand(b models.Band) models.Band {
	more := math.Max((b.To-b.From)/2, 0.02*b.Mid())
	return models.Band{From: b.From - more, To: b.To + more, Samples: 41}
}

// settleAt tries one resolution.
func settleAt(ctx context.Context, rung objectives.Rung, d models.Design, before *models.Response, brief *objectives.Spec, r Resolution) (*Settled, error) {
	s := &Settled{Resolution: r, Original: d.ID()}
	var err error
	if s.Design, s.File, err = r.Round(d); err != nil {
		return nil, refusedAt(r, err.Error())
	}
	if s.Curve, err = helix.Wind(&s.Design); err != nil {
		return nil, refusedAt(r, err.Error())
	}
	if s.Response, err = ask(ctx, rung, &s.Design); err != nil {
		return nil, err
	}
	s.Figures = objectives.Read(&s.Design, s.Curve.Geometry(), &s.Response)
	if s.Moved = moved(&d, before, &s.Response); math.Abs(s.Moved) > mostMoved {
		return nil, refusedAt(r, fmt.Sprintf("rounding moves the gain by %+.3f dB; at most %g dB is allowed", s.Moved, mostMoved))
	}
	if brief == nil {
		return s, nil
	}
	broken, err := breaks(ctx, rung, &s.Design, brief)
	if err != nil {
		return nil, err
	}
	if len(broken) > 0 {
		return nil, refusedAt(r, broken...)
	}
	return s, nil
}

func refusedAt(r Resolution, reasons ...string) *Refused {
	out := &Refused{Reasons: make([]string, len(reasons))}
	for i, reason := range reasons {
		out.Reasons[i] = fmt.Sprintf("rounded to %s: %s", r, reason)
	}
	return out
}

// ask answers a design over the fine sweep of its band.
func ask(ctx context.Context, rung objectives.Rung, d *models.Design) (models.Response, error) {
	return rung.Simulator.Simulate(ctx, *d, models.Question{Hz: objectives.FineSweep(d.Band), Outputs: models.Axis | models.Cuts})
}

// moved is the gain after rounding less that before, dB, where they differ
// most.
func moved(d *models.Design, before, after *models.Response) float64 {
	most := 0.0
	for i := range before.Samples {
		by := objectives.Decibels(after.Samples[i].Gain.Of(d.Wanted())) - objectives.Decibels(before.Samples[i].Gain.Of(d.Wanted()))
		if math.Abs(by) > math.Abs(most) {
			most = by
		}
	}
	return most
}

// breaks says which limits and screens of the brief the design breaks. The
// brief's own space plays no part: the design is its only point.
func breaks(ctx context.Context, rung objectives.Rung, d *models.Design, brief *objectives.Spec) ([]string, error) {
	stock := stockOf(d, brief)
	spec := *brief
	spec.Base, spec.Vary, spec.Stock = *d, nil, []objectives.Stock{stock}
	p, err := objectives.NewProblem(spec, rung)
	if err != nil {
		return nil, err
	}
	point := space.Point{}
	score, err := p.Confirm(ctx, point, false)
	if err != nil {
		return nil, err
	}
	var out []string
	windable := *p
	windable.Limits = nil // they are judged below, margins counted
	if _, reason := windable.Screen(point); reason != "" {
		out = append(out, reason)
	}
	for i, l := range p.Limits {
		if score.Limits[i] > 0 {
			out = append(out, fmt.Sprintf("%s is %s, and the brief's limit is %s", l.Figure, shortFigure(score.Figures[l.Figure]), limitText(l)))
		}
	}
	return out, nil
}

func shortFigure(x float64) string { return fmt.Sprintf("%.5g", x) }

func limitText(l objectives.Limit) string {
	word := "at most"
	if l.AtLeast {
		word = "at least"
	}
	return strings.TrimSpace(fmt.Sprintf("%s %s %s", word, shortFigure(l.Value), objectives.Figures[l.Figure].Unit))
}

// stockOf is the brief's row that the design is wound from, with its coil
// and least bend radius, else the design's own conductor without either.
func stockOf(d *models.Design, brief *objectives.Spec) objectives.Stock {
	if brief != nil {
		for _, row := range brief.Stock {
			if row.Diameter == d.Conductor.Diameter && row.Material == d.Conductor.Material && (d.Conductor.Stock == "" || row.Name == d.Conductor.Stock) {
				row.Insulation = d.Insulation
				return row
			}
		}
	}
	c := d.Conductor
	return objectives.Stock{Name: c.Stock, Diameter: c.Diameter, Wall: c.Wall, Material: c.Material, Insulation: d.Insulation}
}
