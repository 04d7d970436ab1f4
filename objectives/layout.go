package objectives

import (
	"fmt"
	"math"
	"slices"
	"strconv"

	"turnwise/models"
	"turnwise/models/helix"
	"turnwise/optimize/space"
)

// Resolutions of canonical points and of every design that is written: 1 µm,
// 0.01 Ω, 0.001 turn.
const (
	LengthGrid     = 1e-6
	ResistanceGrid = 0.01
	TurnsGrid      = 0.001
)

// Column is one varied quantity of a front, a knot at a time.
type Column struct {
	Name     string // with its unit: the CSV column and the variable's name
	Quantity Quantity
	Knot     int // of a law, from 0
}

// suffix is the unit at the end of a quantity's column.
func (q Quantity) suffix() string {
	switch q {
	case Turns, LeadTurns, StripTurns, Conductor:
		return ""
	case TransformerImpedance:
		return "_ohm"
	}
	return "_m"
}

// IsLaw reports whether the quantity runs along the winding.
func (q Quantity) IsLaw() bool { return q == Diameter || q == Spacing }

// Grid is the resolution of the quantity's canonical values.
func (q Quantity) Grid() float64 {
	switch q.suffix() {
	case "_m":
		return LengthGrid
	case "_ohm":
		return ResistanceGrid
	}
	return TurnsGrid
}

// Layout ties a spec's points to designs: which variable is which dimension.
type Layout struct {
	spec      *Spec
	Columns   []Column    // one a variable, in the order of a point
	Space     space.Space // what a searcher sees, named like the columns
	conductor int         // the variable that chooses the stock; −1: the first row
}

// NewLayout lays the varied quantities of a spec out as variables.
func NewLayout(s *Spec) *Layout {
	l := &Layout{spec: s, conductor: -1}
	for _, v := range s.Vary {
		for k := range max(v.Knots, 1) {
			c := Column{Name: string(v.Quantity) + v.Quantity.suffix(), Quantity: v.Quantity, Knot: k}
			if v.Quantity.IsLaw() {
				c.Name = string(v.Quantity) + "_" + strconv.Itoa(k+1) + v.Quantity.suffix()
			}
			if v.Quantity == Conductor {
				l.conductor = len(l.Columns)
			}
			l.Columns = append(l.Columns, c)
			l.Space = append(l.Space, s.variable(c, v))
		}
	}
	l.raiseFeed()
	return l
}

// raiseFeed lets the feed height begin where the chosen conductor allows it:
// a thicker one need not wait for a higher feed to come by.
func (l *Layout) raiseFeed() {
	feed := slices.IndexFunc(l.Columns, func(c Column) bool { return c.Quantity == FeedHeight })
	if feed < 0 || l.conductor < 0 {
		return
	}
	pin := l.spec.Base.Feed.Pin > 0 || slices.ContainsFunc(l.Columns, func(c Column) bool { return c.Quantity == Pin })
	floors := &space.Floors{By: l.conductor}
	for i := range l.spec.Stock {
		stock := &l.spec.Stock[i]
		least := stock.Diameter/2 + stock.Insulation.Thickness + leastAirBelow
		if !pin {
			least = math.Max(least, leastRiser*stock.Diameter/2)
		}
		floors.Least = append(floors.Least, ceil(least, LengthGrid))
	}
	l.Space[feed].Floors = floors
}

// ceil is the least multiple of a grid that is no less than x, rounding aside.
func ceil(x, grid float64) float64 {
	per := math.Round(1 / grid)
	return math.Ceil(x*per-1e-6) / per
}

func (s *Spec) variable(c Column, v Vary) space.Variable {
	switch {
	case c.Quantity == Conductor:
		names := make([]string, len(s.Stock))
		for i := range s.Stock {
			names[i] = s.Stock[i].Name
		}
		return space.NewChoice(c.Name, names...)
	case v.Step > 0:
		return space.NewStepped(c.Name, v.From, v.To, v.Step)
	}
	return space.NewReal(c.Name, v.From, v.To, c.Quantity.Grid())
}

// Design is the antenna at a canonical point: the base with the varied
// quantities put in.
func (l *Layout) Design(p space.Point) models.Design {
	s := l.spec
	d := s.Base
	d.Diameter = append(models.Law(nil), d.Diameter...)
	d.Spacing = append(models.Law(nil), d.Spacing...)
	d.Band = s.Band
	for _, v := range s.Vary {
		if v.Quantity == Diameter {
			d.Diameter = make(models.Law, v.Knots)
		}
		if v.Quantity == Spacing {
			d.Spacing = make(models.Law, v.Knots)
		}
	}
	stock := l.Stock(p)
	d.Conductor = stock.Conductor()
	if stock.Insulation.Thickness > 0 {
		d.Insulation = stock.Insulation
	}
	for i, c := range l.Columns {
		if c.Quantity != Conductor {
			*slot(&d, c) = p[i]
		}
	}
	return d
}

// Conductor is the stock as a design names it.
func (s *Stock) Conductor() models.Conductor {
	return models.Conductor{Stock: s.Name, Diameter: s.Diameter, Wall: s.Wall, Material: s.Material}
}

// Stock is what the antenna at a point is wound from.
func (l *Layout) Stock(p space.Point) *Stock {
	if l.conductor < 0 {
		return &l.spec.Stock[0]
	}
	return &l.spec.Stock[int(p[l.conductor])]
}

// slot is where a design holds the quantity of a column.
func slot(d *models.Design, c Column) *float64 {
	switch c.Quantity {
	case Turns:
		return &d.Turns
	case Diameter:
		return &d.Diameter[c.Knot]
	case Spacing:
		return &d.Spacing[c.Knot]
	case FeedHeight:
		return &d.Feed.Height
	case LeadTurns:
		return &d.Feed.Lead.Turns
	case LeadSpacing:
		return &d.Feed.Lead.Spacing
	case Pin:
		return &d.Feed.Pin
	case StripTurns:
		return &d.Feed.Strip.Turns
	case StripWidth:
		return &d.Feed.Strip.Width
	case TransformerImpedance:
		return &d.Feed.Transformer.Impedance
	case TransformerLength:
		return &d.Feed.Transformer.Length
	case GroundDiameter:
		return &d.Ground.Diameter
	case GroundRim:
		return &d.Ground.Rim
	}
	panic("objectives: a column without a slot: " + string(c.Quantity))
}

// Point is the canonical point nearest to a design, and in words whatever of
// the design the space cannot follow.
func (l *Layout) Point(d models.Design) (space.Point, []string) {
	s := l.spec
	asked := d
	for _, v := range s.Vary {
		switch v.Quantity {
		case Diameter:
			asked.Diameter = helix.Resample(d.Diameter, v.Knots)
		case Spacing:
			asked.Spacing = helix.Resample(d.Spacing, v.Knots)
		}
	}
	want := make(space.Point, len(l.Columns))
	for i, c := range l.Columns {
		if c.Quantity == Conductor {
			want[i] = float64(s.nearestStock(d.Conductor))
		} else {
			want[i] = *slot(&asked, c)
		}
	}
	p := l.Space.Canonical(want)
	var notes []string
	for i, c := range l.Columns {
		if math.Abs(p[i]-want[i]) > c.Quantity.Grid()*0.51 {
			notes = append(notes, fmt.Sprintf("%s: %g taken as %g, the nearest that may vary", c.Name, want[i], p[i]))
		}
	}
	got := l.Design(p)
	if got.Handedness != d.Handedness {
		notes = append(notes, fmt.Sprintf("handedness: %s taken as %s, which the brief asks for", d.Handedness, got.Handedness))
	}
	if got.Ground.Kind != d.Ground.Kind && (got.Ground.Finite() || d.Ground.Finite()) {
		notes = append(notes, fmt.Sprintf("ground: %s taken as %s, which the brief asks for", d.Ground.Kind, got.Ground.Kind))
	}
	return p, notes
}

// nearestStock is the row nearest in diameter, the same material preferred.
func (s *Spec) nearestStock(c models.Conductor) int {
	best, bestAway := 0, math.Inf(1)
	for i := range s.Stock {
		away := math.Abs(math.Log(s.Stock[i].Diameter / c.Diameter))
		if s.Stock[i].Material.Name != c.Material.Name {
			away += 10
		}
		if away < bestAway {
			best, bestAway = i, away
		}
	}
	return best
}
