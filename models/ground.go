package models

import "math"

// GroundKind is the shape of the ground.
type GroundKind string

// The grounds a design may stand on.
const (
	Infinite GroundKind = "infinite"
	Disc     GroundKind = "disc"
	Cup      GroundKind = "cup"
)

// Ground is the conductor the antenna stands on. The empty kind is Infinite.
type Ground struct {
	Kind     GroundKind
	Diameter float64 // m, disc and cup
	Rim      float64 // m, cup

	// The sheet that a disc or cup is cut from decides its mass.
	Thickness float64  // m; 0: 1 mm
	Material  Material // the zero one: aluminium
}

// The largest ground that the full-wave model solves, in wavelengths: its rules
// around the axis end there.
const (
	MostGroundDiameter = 30
	MostGroundRim      = 10
)

// What a plate or cup is made of where nobody says: practice.
const sheetThickness = 1e-3 // m

// sheetMaterial is conductor aluminium 1350, 61 % IACS (handbook, memory).
var sheetMaterial = Material{Name: "aluminium", Conductivity: 35.4e6, Density: 2700, Permeability: 1}

// Finite reports whether the ground ends somewhere: a disc or a cup.
func (g Ground) Finite() bool { return g.Kind == Disc || g.Kind == Cup }

// SheetThickness is how thick a disc's or cup's sheet is, m.
func (g Ground) SheetThickness() float64 {
	if g.Thickness == 0 {
		return sheetThickness
	}
	return g.Thickness
}

// Metal is what a disc or cup is made of.
func (g Ground) Metal() Material {
	if g.Material == (Material{}) {
		return sheetMaterial
	}
	return g.Material
}

// ordinary reports whether the sheet is the one that nobody has to name.
func (g Ground) ordinary() bool {
	m := g.Metal()
	m.Name, m.Permeability = sheetMaterial.Name, orOne(m.Permeability)
	return g.SheetThickness() == sheetThickness && m == sheetMaterial
}

// Area is what a disc or cup takes of its sheet, m²: the plate, and the strip
// of a cup's rim. An infinite ground is nobody's to cut: 0.
func (g Ground) Area() float64 {
	plate := math.Pi / 4 * g.Diameter * g.Diameter
	switch g.Kind {
	case Disc:
		return plate
	case Cup:
		return plate + math.Pi*g.Diameter*g.Rim
	}
	return 0
}

// Mass is a disc's or cup's, kg; 0 for an infinite ground. Holes are not
// taken out, nor seams and flanges added.
func (g Ground) Mass() float64 { return g.Area() * g.SheetThickness() * g.Metal().Density }
