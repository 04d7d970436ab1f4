package configs

import "turnwise/models"

// Materials lists the conductors known by name. Conductivities are handbook
// values at 20 °C (memory), worth ±5 % for pure metals and more for alloys,
// where temper and batch decide.
var Materials = []models.Material{
	// 100 % IACS and 8.89 g/cm³: the International Annealed Copper Standard.
	{Name: "copper", Conductivity: 58.0e6, Density: 8890, Permeability: 1},
	// Conductor aluminium 1350, 61 % IACS; 2.70 g/cm³.
	{Name: "aluminium", Conductivity: 35.4e6, Density: 2700, Permeability: 1},
	// Cartridge brass C26000, 28 % IACS; 8.53 g/cm³.
	{Name: "brass", Conductivity: 16e6, Density: 8530, Permeability: 1},
	// Fine silver, 61 to 63 MS/m; 10.49 g/cm³.
	{Name: "silver", Conductivity: 62e6, Density: 10490, Permeability: 1},
	// Phosphor bronze C51000, 15 % IACS; 8.86 g/cm³.
	{Name: "bronze", Conductivity: 8.7e6, Density: 8860, Permeability: 1},
	// Carbon steel wire, about 10 % IACS; 7.85 g/cm³. The permeability is a
	// modest one for cold-drawn wire at radio frequencies, where it has
	// fallen far below its static value.
	{Name: "steel", Conductivity: 5.9e6, Density: 7850, Permeability: 100},
	// Austenitic stainless steel 304, annealed; 8.00 g/cm³.
	{Name: "stainless", Conductivity: 1.4e6, Density: 8000, Permeability: 1},
}

// material finds a material by its name.
func material(name string) (models.Material, bool) {
	for _, m := range Materials {
		if m.Name == name {
			return m, true
		}
	}
	return models.Material{}, false
}

// materialNames lists the names, copper first.
func materialNames() []string {
	names := make([]string, len(Materials))
	for i := range Materials {
		names[i] = Materials[i].Name
	}
	return names
}
