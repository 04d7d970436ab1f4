package objectives

// Figure is the index of a figure, in the order of the columns of a front.
type Figure int

// The figures.
const (
	Gain Figure = iota
	RealisedGain
	AxialRatio
	AxialRatioCone
	EdgeGain
	GainBandwidth
	Headroom
	VSWR
	VSWRBandwidth
	Beamwidth
	Sidelobe
	Efficiency
	FrontToBack
	Length
	Widest
	WireLength
	Mass
	BendRadius
	FigureCount int = iota
)

// Unit is the unit of a figure, as a brief writes it.
type Unit string

// The units of figures. A Ratio has none.
const (
	Decibel  Unit = "dB"
	DBic     Unit = "dBic"
	Percent  Unit = "%"
	Degree   Unit = "deg"
	Metre    Unit = "m"
	Kilogram Unit = "kg"
	Ratio    Unit = ""
)

// FigureInfo is what is known of a figure beforehand.
type FigureInfo struct {
	Name   string // as briefs and commands write it
	Column string // with its unit, as CSV and JSON write it
	Unit   Unit
	More   bool    // more of it is usually wanted
	Scale  float64 // a difference that matters, in its unit: limits are scaled by it
	// Geometry marks a figure that the winding alone decides.
	Geometry bool
	// Match marks one that rests on impedance or axial ratio, so that a
	// model for which these are indicative cannot be held to it.
	Match bool
	Words string // what it is, for people
}

// Figures describes every figure, in the order of the constants.
var Figures = [FigureCount]FigureInfo{
	Gain:           {Name: "gain", Column: "gain_dbic", Unit: DBic, More: true, Scale: 1, Words: "lowest gain in the wanted sense over the band"},
	RealisedGain:   {Name: "realised_gain", Column: "realised_gain_dbic", Unit: DBic, More: true, Scale: 1, Match: true, Words: "lowest gain with mismatch over the band"},
	AxialRatio:     {Name: "axial_ratio", Column: "axial_ratio_db", Unit: Decibel, Scale: 1, Match: true, Words: "highest axial ratio on the axis over the band"},
	AxialRatioCone: {Name: "axial_ratio_cone", Column: "axial_ratio_cone_db", Unit: Decibel, Scale: 1, Match: true, Words: "highest axial ratio within the cone"},
	EdgeGain:       {Name: "edge_gain", Column: "edge_gain_dbic", Unit: DBic, More: true, Scale: 1, Words: "lowest gain in the wanted sense within the cone"},
	GainBandwidth:  {Name: "gain_bandwidth", Column: "gain_bandwidth_pct", Unit: Percent, More: true, Scale: 5, Words: "part about mid-band with gain within 1 dB of mid-band's"},
	Headroom:       {Name: "headroom", Column: "headroom_pct", Unit: Percent, More: true, Scale: 1, Words: "rise of frequency that costs 1 dB or a limit"},
	VSWR:           {Name: "vswr", Column: "vswr", More: false, Scale: 0.5, Match: true, Words: "highest VSWR over the band"},
	VSWRBandwidth:  {Name: "vswr_bandwidth", Column: "vswr_bandwidth_pct", Unit: Percent, More: true, Scale: 5, Match: true, Words: "part about mid-band with VSWR inside the limit"},
	Beamwidth:      {Name: "beamwidth", Column: "beamwidth_deg", Unit: Degree, Scale: 5, Words: "highest half-power beamwidth over the band"},
	Sidelobe:       {Name: "sidelobe", Column: "sidelobe_db", Unit: Decibel, Scale: 1, Words: "highest sidelobe below the peak over the band"},
	Efficiency:     {Name: "efficiency", Column: "efficiency", More: true, Scale: 0.1, Words: "lowest efficiency over the band"},
	FrontToBack:    {Name: "front_to_back", Column: "front_to_back_db", Unit: Decibel, More: true, Scale: 1, Words: "lowest front to back ratio over the band"},
	Length:         {Name: "length", Column: "length_m", Unit: Metre, Scale: 0.1, Geometry: true, Words: "height of the highest point of the winding"},
	Widest:         {Name: "widest", Column: "widest_m", Unit: Metre, Scale: 0.02, Geometry: true, Words: "overall diameter, a plate or cup counted"},
	WireLength:     {Name: "wire_length", Column: "wire_length_m", Unit: Metre, Scale: 0.5, Geometry: true, Words: "wire from the plane to the open end"},
	Mass:           {Name: "mass", Column: "mass_kg", Unit: Kilogram, Scale: 0.1, Geometry: true, Words: "mass of the conductor, and of a plate or cup"},
	BendRadius:     {Name: "bend_radius", Column: "bend_radius_m", Unit: Metre, More: true, Scale: 0.01, Geometry: true, Words: "least bend radius along the winding"},
}

// FigureByName finds a figure by the name that briefs use or by its column.
func FigureByName(name string) (Figure, bool) {
	for f := range Figures {
		if Figures[f].Name == name || Figures[f].Column == name {
			return Figure(f), true
		}
	}
	return 0, false
}

func (f Figure) String() string { return Figures[f].Name }
