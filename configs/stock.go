package configs

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"turnwise/models"
	"turnwise/objectives"
)

// catalogue is a standard series of conductors.
type catalogue struct {
	name string
	// gauges are what from and to name: gauge numbers, or diameters in m.
	gauges []float64
	// size is a gauge's diameter and wall, m.
	size func(gauge float64) (diameter, wall float64)
	// label is what a row is called, without its material.
	label func(gauge float64) string
	// dimension of from and to: Plain for gauge numbers.
	dimension Dimension
	example   string
}

var catalogues = []catalogue{awg, metricWire, metricTube}

// awg is solid wire by American Wire Gauge, ASTM B258:
// d = 0.127 mm · 92^((36−n)/39), here gauges 0 to 30, to the micrometre.
var awg = catalogue{
	name:   "awg",
	gauges: integers(0, 30),
	size: func(n float64) (float64, float64) {
		return onGrid(0.127e-3*math.Pow(92, (36-n)/39), Length), 0
	},
	label:     func(n float64) string { return "AWG " + decimal(n, 0) },
	dimension: Plain,
	example:   "from: 8, to: 14",
}

// metricWire is round wire in the preferred diameters of IEC 60317, series
// R20 (memory).
var metricWire = catalogue{
	name: "metric-wire",
	gauges: []float64{0.5e-3, 0.56e-3, 0.63e-3, 0.71e-3, 0.8e-3, 0.9e-3, 1.0e-3, 1.12e-3, 1.25e-3, 1.4e-3, 1.6e-3, 1.8e-3,
		2.0e-3, 2.24e-3, 2.5e-3, 2.8e-3, 3.15e-3, 3.55e-3, 4.0e-3, 4.5e-3, 5.0e-3},
	size:      func(d float64) (float64, float64) { return d, 0 },
	label:     func(d float64) string { return decimal(d, 3) + " mm wire" },
	dimension: Length,
	example:   "from: 1 mm, to: 4 mm",
}

// metricTube is tube in the outer diameters of EN 1057 and ASTM B88M, with a
// wall of 1 mm, common in that series (walls from memory).
var metricTube = catalogue{
	name:      "metric-tube",
	gauges:    []float64{6e-3, 8e-3, 10e-3, 12e-3, 15e-3, 18e-3, 22e-3, 28e-3},
	size:      func(d float64) (float64, float64) { return d, 1e-3 },
	label:     func(d float64) string { return decimal(d, 3) + " mm tube" },
	dimension: Length,
	example:   "from: 8 mm, to: 15 mm",
}

func integers(from, to int) []float64 {
	var ns []float64
	for n := from; n <= to; n++ {
		ns = append(ns, float64(n))
	}
	return ns
}

// row is one conductor of a catalogue.
func (c *catalogue) row(gauge float64, m models.Material) objectives.Stock {
	d, wall := c.size(gauge)
	name := m.Name
	if name == "" {
		name = "custom"
	}
	return objectives.Stock{Name: c.label(gauge) + " " + name, Diameter: d, Wall: wall, Material: m}
}

// catalogueRow finds a conductor of any catalogue by its name.
func catalogueRow(name string) (objectives.Stock, bool) {
	for i := range catalogues {
		for _, g := range catalogues[i].gauges {
			for _, m := range Materials {
				if row := catalogues[i].row(g, m); strings.EqualFold(row.Name, name) {
					return row, true
				}
			}
		}
	}
	return objectives.Stock{}, false
}

// mostStock bounds a brief's stock.
const mostStock = 200

// stock reads the rows of a brief's stock: conductors of its own and ranges
// of catalogues.
func (r *reader) stock(b *block) []objectives.Stock {
	n := b.get("stock")
	if n == nil || n.kind == broken {
		return nil
	}
	if n.kind != list || len(n.items) == 0 {
		b.fault("stock", "is "+kindNames[n.kind]+", not a list of conductors", `write for example stock: [{name: "2 mm copper", diameter: 2 mm, material: copper, coil: 3 m}]`)
		return nil
	}
	var rows []objectives.Stock
	lines := map[string]int{}
	for i, item := range n.items {
		path := "stock[" + strconv.Itoa(i+1) + "]"
		for _, row := range r.stockRow(item, path) {
			if line, twice := lines[row.Name]; twice {
				r.add(item.line, path, "names "+quoted(row.Name)+" a second time, first on line "+strconv.Itoa(line), "give it another name, or leave one away")
				continue
			}
			lines[row.Name] = item.line
			rows = append(rows, row)
		}
	}
	if len(rows) > mostStock {
		b.fault("stock", fmt.Sprintf("holds %d conductors", len(rows)), fmt.Sprintf("keep at most %d", mostStock))
	}
	return rows
}

// stockRow reads one entry: a conductor, or a range of a catalogue.
func (r *reader) stockRow(n *node, path string) []objectives.Stock {
	if n.kind == table && n.find("catalogue") != nil {
		return r.stockRange(n, path)
	}
	b := r.block(n, path, "name", "diameter", "wall", "material", "conductivity", "density", "permeability", "insulation", "coil", "least_bend_radius")
	if !b.there {
		return nil
	}
	var s objectives.Stock
	if !b.has("diameter") {
		b.missing("diameter", "write for example diameter: 2 mm")
	}
	var ok bool
	s.Diameter, ok = b.quantity("diameter", Length, span{1e-5, 1})
	s.Wall = b.wall(s.Diameter, ok)
	s.Material = r.material(b)
	r.stockRest(b, &s)
	if s.Name, _ = b.name("name"); s.Name == "" {
		s.Name = sizeName(s.Diameter, s.Material)
	}
	return []objectives.Stock{s}
}

// sizeName is what a conductor without a name of its own is called.
func sizeName(diameter float64, m models.Material) string {
	return strings.TrimSpace(decimal(diameter, 3) + " mm " + m.Name)
}

// stockRest reads what any conductor may have.
func (r *reader) stockRest(b block, s *objectives.Stock) {
	if b.has("insulation") {
		s.Insulation = r.insulation(b.get("insulation"), join(b.path, "insulation"))
	}
	s.Coil, _ = b.quantity("coil", Length, span{1e-3, 1e5})
	s.LeastBendRadius, _ = b.quantity("least_bend_radius", Length, optional)
}

// stockRange reads a range of a catalogue.
func (r *reader) stockRange(n *node, path string) []objectives.Stock {
	b := r.block(n, path, "catalogue", "from", "to", "material", "conductivity", "density", "permeability", "insulation", "coil", "least_bend_radius")
	names := make([]string, len(catalogues))
	for i := range catalogues {
		names[i] = catalogues[i].name
	}
	name, ok := b.choice("catalogue", names...)
	if !ok {
		return nil
	}
	var c *catalogue
	for i := range catalogues {
		if catalogues[i].name == name {
			c = &catalogues[i]
		}
	}
	low, high := c.gauges[0], c.gauges[len(c.gauges)-1]
	from, to := low, high
	if b.has("from") {
		from, ok = b.quantity("from", c.dimension, span{0, 1e9})
	}
	if b.has("to") && ok {
		to, ok = b.quantity("to", c.dimension, span{0, 1e9})
	}
	if !ok {
		return nil
	}
	if from > to {
		b.fault("from", "lies beyond to", "swap from and to")
		return nil
	}
	rest := objectives.Stock{Material: r.material(b)}
	r.stockRest(b, &rest)
	var rows []objectives.Stock
	for _, g := range c.gauges {
		if g >= from-1e-9 && g <= to+1e-9 {
			row := c.row(g, rest.Material)
			row.Insulation, row.Coil, row.LeastBendRadius = rest.Insulation, rest.Coil, rest.LeastBendRadius
			rows = append(rows, row)
		}
	}
	if len(rows) == 0 {
		b.fault("from", "names a range that holds no conductor of the catalogue "+name, "the catalogue runs from "+c.label(low)+" to "+c.label(high)+"; write for example "+c.example)
	}
	return rows
}
