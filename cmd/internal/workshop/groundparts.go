package workshop

import (
	"fmt"
	"math"

	"turnwise/models"
)

// rim is a cup's rim cut flat: a strip bent round the edge of the cup's base,
// flush with its underside, so that its inner face has the cup's diameter and
// stands as high over the base as the design says.
type rim struct {
	length, width float64 // m
}

func (s *sheet) flatRim() rim {
	g := s.Design.Ground
	t := g.SheetThickness()
	return rim{length: math.Pi * (g.Diameter + t), width: g.Rim + t}
}

// groundParts are what the antenna stands on: a plate, or the two parts of a
// cup.
func (s *sheet) groundParts() []part {
	g := s.Design.Ground
	if !g.Finite() {
		return []part{{Name: "ground", Description: "plate", Quantity: 1, Diameter: math.Ceil(750*s.wavelength()) / 1e3, Note: "at least; the design assumes an infinite plane"}}
	}
	weight := g.SheetThickness() * g.Metal().Density // kg/m²
	base := part{Name: "ground", Description: "plate of " + s.sheetName(), Quantity: 1, Diameter: g.Diameter, Mass: weight * math.Pi / 4 * g.Diameter * g.Diameter}
	if g.Kind == models.Disc {
		return []part{base}
	}
	base.Description = "cup's base of " + s.sheetName()
	f := s.flatRim()
	return []part{base, {
		Name: "rim", Description: fmt.Sprintf("strip of %s, %s mm wide", s.sheetName(), s.Resolution.mm(f.width)), Quantity: 1,
		Length: f.length, Mass: weight * f.length * f.width, Note: "bent round the base and joined all along it",
	}}
}

// sheetName is what a plate or cup is cut from.
func (s *sheet) sheetName() string {
	g := s.Design.Ground
	m := g.Metal()
	if m.Name == "" {
		return fmt.Sprintf("%s mm sheet, %.3g MS/m", bought(g.SheetThickness()), m.Conductivity/1e6)
	}
	return fmt.Sprintf("%s mm %s sheet", bought(g.SheetThickness()), m.Name)
}

// groundWords is the ground as the sheet names it.
func (s *sheet) groundWords() string {
	r, g := s.Resolution, s.Design.Ground
	switch g.Kind {
	case models.Disc:
		return "disc Ø " + r.mm(g.Diameter)
	case models.Cup:
		return "cup Ø " + r.mm(g.Diameter) + ", rim " + r.mm(g.Rim)
	}
	return fmt.Sprintf("plate, Ø ≥ %.0f", math.Ceil(750*s.wavelength()))
}
