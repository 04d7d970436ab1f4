package drawing

// Layer is what a line stands for; it decides how the line looks and the
// layer it is found on in DXF and SVG.
type Layer string

// The layers.
const (
	Outline   Layer = "OUTLINE"   // edges of parts
	Winding   Layer = "WINDING"   // the conductor, on the near side
	Far       Layer = "FAR"       // the conductor, on the far side
	Strip     Layer = "STRIP"     // the part of the winding that is a strip
	Station   Layer = "STATIONS"  // where the conductor is to be
	Hole      Layer = "HOLES"     // what is drilled
	Axis      Layer = "AXES"      // centre lines
	Dimension Layer = "DIMENSION" // dimension and leader lines
	Check     Layer = "CHECK"     // bars to check the scale by, match marks
	Grid      Layer = "GRID"      // of charts and tables
	Trace     Layer = "TRACE"     // a chart's first curve
	Second    Layer = "SECOND"    // a chart's second curve
	Lettering Layer = "TEXT"
)

// ink is how a layer looks: line width and dashes in mm, colour as red, green
// and blue, and as a DXF colour number.
type ink struct {
	width   float64
	dash    []float64
	r, g, b int
	dxf     int
}

// layers are in the order of the DXF table.
var layers = []Layer{Outline, Winding, Far, Strip, Station, Hole, Axis, Dimension, Check, Grid, Trace, Second, Lettering}

var inks = map[Layer]ink{
	Outline:   {width: 0.35, dxf: 7},
	Winding:   {width: 0.5, r: 176, g: 72, b: 16, dxf: 1},
	Far:       {width: 0.35, r: 214, g: 176, b: 150, dxf: 8},
	Strip:     {width: 0.5, r: 32, g: 104, b: 60, dxf: 3},
	Station:   {width: 0.18, r: 20, g: 60, b: 150, dxf: 5},
	Hole:      {width: 0.25, r: 150, dxf: 6},
	Axis:      {width: 0.13, dash: []float64{5, 1, 1, 1}, r: 90, g: 90, b: 90, dxf: 9},
	Dimension: {width: 0.13, dxf: 4},
	Check:     {width: 0.1, dxf: 2},
	Grid:      {width: 0.1, r: 150, g: 150, b: 150, dxf: 8},
	Trace:     {width: 0.45, r: 20, g: 60, b: 150, dxf: 5},
	Second:    {width: 0.45, r: 176, g: 72, b: 16, dxf: 1},
	Lettering: {width: 0.13, dxf: 7},
}

// ink looks a layer up; a layer without ink is a slip of the programmer.
func (l Layer) ink() ink {
	k, ok := inks[l]
	if !ok {
		panic("drawing: no such layer: " + string(l))
	}
	return k
}
