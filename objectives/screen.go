package objectives

import (
	"fmt"
	"math"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/optimize/space"
)

// Screens keep a design windable. Distances are in conductor radii, as the
// thin-wire model counts them, coat included.
const (
	leastTurnGap   = 3.0  // radii between the centre lines of neighbouring turns
	leastRiser     = 2.5  // pin radii of riser
	leastAirBelow  = 1e-3 // m of air between plane or cup and conductor
	lengthOfMatter = 0.01 // m: scales the screens that no figure scales
)

// LeastFeedHeight is the lowest riser, m, that a conductor of a diameter may
// have: 2.5 radii, and 1 mm of air under the conductor.
func LeastFeedHeight(diameter float64) float64 {
	return math.Max(leastRiser*diameter/2, diameter/2+leastAirBelow)
}

// Screen is the free check of a canonical point: geometry alone. It sums the
// scaled amounts by which the winding cannot be made or breaks a geometric
// limit, and says the first reason; 0 passes.
func (p *Problem) Screen(pt space.Point) (violation float64, reason string) {
	d := p.Layout.Design(pt)
	curve, err := helix.Wind(&d)
	if err != nil {
		return 10, err.Error()
	}
	return p.screen(&d, p.Layout.Stock(pt), curve)
}

func (p *Problem) screen(d *models.Design, stock *Stock, curve *helix.Curve) (violation float64, reason string) {
	fail := func(excess, scale float64, format string, a ...any) {
		if excess > 0 {
			violation += excess / scale
			if reason == "" {
				reason = fmt.Sprintf(format, a...)
			}
		}
	}
	g := curve.Geometry()
	radius := d.Conductor.Diameter/2 + d.Insulation.Thickness
	c := curve.ClearancesFrom(leastTurnGap * radius)
	fail(leastTurnGap*radius-c.Turns, lengthOfMatter, "neighbouring turns are %.4g mm apart, centre to centre; %.4g mm is the least", c.Turns*1e3, leastTurnGap*radius*1e3)
	fail(radius+leastAirBelow-c.Plane, lengthOfMatter, "the winding passes %.4g mm above the plane, centre line; %.4g mm is the least", c.Plane*1e3, (radius+leastAirBelow)*1e3)
	fail(radius+leastAirBelow-c.Rim, lengthOfMatter, "the winding passes %.4g mm from the cup's wall, centre line; %.4g mm is the least", c.Rim*1e3, (radius+leastAirBelow)*1e3)
	riser := leastRiser * d.PinDiameter() / 2
	fail(riser-d.Feed.Height, lengthOfMatter, "the feed height is %.4g mm; %.4g mm is the least for this conductor", d.Feed.Height*1e3, riser*1e3)
	if stock.Coil > 0 {
		fail(g.WireLength-stock.Coil, Figures[WireLength].Scale, "%.4g m of wire, but a coil of %s holds %.4g m", g.WireLength, stock.Name, stock.Coil)
	}
	fail(stock.LeastBendRadius-g.BendRadius, Figures[BendRadius].Scale, "bend radius %.4g mm; %s takes %.4g mm at the least", g.BendRadius*1e3, stock.Name, stock.LeastBendRadius*1e3)
	row := emptyRow()
	readGeometry(&row, g)
	for _, l := range p.Limits {
		if Figures[l.Figure].Geometry {
			fail(l.excess(&row), 1, "%s is %.4g %s, against the limit of %.4g", l.Figure, row[l.Figure], Figures[l.Figure].Unit, l.Value)
		}
	}
	return violation, reason
}

// readGeometry fills in the figures that the winding alone decides.
func readGeometry(row *Row, g helix.Geometry) {
	row[Length], row[Widest], row[WireLength] = g.Length, g.Widest, g.WireLength
	row[Mass], row[BendRadius] = g.Mass, g.BendRadius
}

// excess is the signed, scaled amount by which a row breaks the limit: ≤ 0
// is met. A figure that does not apply gives NaN.
func (l *Limit) excess(row *Row) float64 {
	x := (row[l.Figure] - l.Value) / Figures[l.Figure].Scale
	if l.AtLeast {
		return -x
	}
	return x
}

// cost is the aim in minimise form.
func (a *Aim) cost(row *Row) float64 {
	if a.Most {
		return -row[a.Figure]
	}
	return row[a.Figure]
}

// Cost turns a value of the aim's figure into minimise form and back: the
// two are the same turn.
func (a *Aim) Cost(x float64) float64 {
	if a.Most {
		return -x
	}
	return x
}

// finite reports whether every figure that was set is a plain number.
func (r *Row) finite() bool {
	for _, x := range r {
		if math.IsInf(x, 0) {
			return false
		}
	}
	return true
}
