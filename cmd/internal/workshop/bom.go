package workshop

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"math"
)

// part is a line of the bill of materials.
type part struct {
	Name, Description string
	Quantity          int
	Length, Diameter  float64 // m; 0: does not apply
	Mass              float64 // kg; 0: not known
	Note              string
}

// billCSV is the bill of materials.
func (s *sheet) billCSV() []byte {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	w.Write([]string{"item", "part", "description", "quantity", "length_m", "diameter_m", "mass_kg", "note"})
	cell := func(x float64, digits int) string {
		if x == 0 {
			return ""
		}
		return fixed(x, digits)
	}
	for i, p := range s.bill() {
		w.Write([]string{fmt.Sprint(i + 1), p.Name, p.Description, fmt.Sprint(p.Quantity), cell(p.Length, 5), cell(p.Diameter, 6), cell(p.Mass, 4), p.Note})
	}
	w.Flush()
	return b.Bytes()
}

// bill lists what has to be at hand.
func (s *sheet) bill() []part {
	d, c := &s.Design, s.Curve
	k := cuts(c, d.Feed.Strip.Turns, d.Feed.Pin > 0)
	var out []part
	if k.Length() > 0 {
		out = append(out, part{Name: "conductor", Description: s.conductorName(), Quantity: 1, Length: k.Length(), Diameter: d.Conductor.Diameter,
			Mass: d.Conductor.Material.Density * d.Conductor.Section() * k.Length(), Note: "cut length, allowances included"})
	}
	if k.Riser > 0 {
		out = append(out, part{Name: "riser", Description: s.material() + " pin", Quantity: 1, Length: k.Riser + feedAllowance, Diameter: d.PinDiameter(), Note: "allowance to solder included"})
	}
	if k.Strip > 0 {
		f := s.flatStrip()
		out = append(out, part{Name: "strip", Description: fmt.Sprintf("%s strip %s mm wide", s.material(), s.Resolution.mm(f.width)), Quantity: 1, Length: f.length, Note: "cut to the flat pattern"})
	}
	out = append(out, s.groundParts()...)
	out = append(out, s.formerPart(),
		part{Name: "connector", Description: fmt.Sprintf("coaxial, %s ohm, panel mounting", shortest(d.Feed.Impedance)), Quantity: 1, Note: "at the riser's foot"})
	if t := d.Feed.Transformer; t.Impedance > 0 {
		out = append(out, part{Name: "line section", Description: fmt.Sprintf("%s ohm, velocity %s", shortest(t.Impedance), shortest(max(t.Velocity, 0)+one(t.Velocity == 0))), Quantity: 1, Length: t.Length, Note: "between connector and plate"})
	}
	return append(out, part{Name: "end cap", Description: "insulating, for the open end", Quantity: 1, Diameter: d.Conductor.Diameter + 2*d.Insulation.Thickness})
}

func one(yes bool) float64 {
	if yes {
		return 1
	}
	return 0
}

func (s *sheet) conductorName() string {
	c := s.Design.Conductor
	if c.Stock != "" {
		return c.Stock
	}
	kind := "wire"
	if c.Wall > 0 {
		kind = fmt.Sprintf("tube, wall %s mm", bought(c.Wall))
	}
	return fmt.Sprintf("%s mm %s %s", bought(c.Diameter), s.material(), kind)
}

func (s *sheet) formerPart() part {
	length := s.former.head() / 1e3
	if s.former.combs {
		return part{Name: "former", Description: "four combs, see template", Quantity: 1, Length: length}
	}
	p := part{Name: "former", Description: "insulating cylinder", Quantity: 1, Length: length, Diameter: s.former.Diameter(0) / 1e3, Note: "the model has no former in it"}
	if s.former.cone() {
		p.Description = fmt.Sprintf("insulating cone, %s mm at the plate to %s mm at the open end", s.Resolution.mm(s.former.Diameter(0)/1e3), s.Resolution.mm(s.former.Diameter(1e3*s.Curve.Top())/1e3))
		p.Diameter = math.Max(s.former.Diameter(0), s.former.Diameter(s.former.head())) / 1e3
	}
	return p
}
