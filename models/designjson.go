package models

import (
	"encoding/json"
	"errors"
	"math"

	"turnwise/models/internal/jsontree"
)

// designText is a design as machines exchange it: a design file's keys, each
// dimension with its SI unit in its name, laws always lists.
type designText struct {
	Title          string          `json:"title,omitempty"`
	Turns          float64         `json:"turns"`
	Diameter       Law             `json:"diameter_m"`
	Spacing        Law             `json:"spacing_m"`
	Handedness     string          `json:"handedness"`
	Conductor      conductorText   `json:"conductor"`
	Insulation     *insulationText `json:"insulation,omitempty"`
	Feed           feedText        `json:"feed"`
	Ground         groundText      `json:"ground"`
	Band           *bandText       `json:"band,omitempty"`
	Sense          string          `json:"sense,omitempty"`
	FeedsReflector bool            `json:"feeds_reflector,omitempty"`
}

type conductorText struct {
	Stock    string  `json:"stock,omitempty"`
	Diameter float64 `json:"diameter_m"`
	Wall     float64 `json:"wall_m,omitempty"`
	materialText
}

type materialText struct {
	Material     string  `json:"material,omitempty"`
	Conductivity float64 `json:"conductivity_s_per_m"`
	Density      float64 `json:"density_kg_per_m3"`
	Permeability float64 `json:"permeability"`
}

type insulationText struct {
	Thickness    float64 `json:"thickness_m"`
	Permittivity float64 `json:"permittivity"`
}

type feedText struct {
	Height      float64          `json:"height_m"`
	Pin         float64          `json:"pin_m"`
	Impedance   float64          `json:"impedance_ohm"`
	Lead        *leadText        `json:"lead,omitempty"`
	Strip       *stripText       `json:"strip,omitempty"`
	Transformer *transformerText `json:"transformer,omitempty"`
}

type leadText struct {
	Turns   float64   `json:"turns"`
	Spacing float64   `json:"spacing_m"`
	Shape   LeadShape `json:"shape"`
}

type stripText struct {
	Turns float64 `json:"turns"`
	Width float64 `json:"width_m"`
}

type transformerText struct {
	Impedance float64 `json:"impedance_ohm"`
	Length    float64 `json:"length_m"`
	Velocity  float64 `json:"velocity"`
}

type groundText struct {
	Kind      GroundKind `json:"kind"`
	Diameter  *float64   `json:"diameter_m,omitempty"`
	Rim       *float64   `json:"rim_m,omitempty"`
	Thickness float64    `json:"thickness_m,omitempty"`
	*materialText
}

type bandText struct {
	From    float64 `json:"from_hz"`
	To      float64 `json:"to_hz"`
	Samples int     `json:"samples"`
}

// MarshalJSON writes the design as one object: a design file's keys with
// their SI units in the names, laws always lists. What a design leaves to its
// defaults is written out (the pin's diameter, the permeability, a lead's
// shape, a line's velocity, the kind of ground and its sheet), so that a reader needs to
// know none; the text reads back to a design with the same hash.
func (d Design) MarshalJSON() ([]byte, error) {
	if d.Handedness != Right && d.Handedness != Left {
		return nil, errors.New("a design without handedness cannot be written; it should be right or left")
	}
	t := designText{
		Title:      d.Title,
		Turns:      d.Turns,
		Diameter:   d.Diameter,
		Spacing:    d.Spacing,
		Handedness: d.Handedness.String(),
		Conductor: conductorText{
			Stock: d.Conductor.Stock, Diameter: d.Conductor.Diameter, Wall: d.Conductor.Wall, materialText: textOf(d.Conductor.Material),
		},
		Feed:           feedText{Height: d.Feed.Height, Pin: d.PinDiameter(), Impedance: d.Feed.Impedance},
		Ground:         textOfGround(d.Ground),
		Sense:          d.Sense.String(),
		FeedsReflector: d.FeedsReflector,
	}
	if i := d.Insulation; i.Thickness > 0 {
		t.Insulation = &insulationText{i.Thickness, i.Permittivity}
	}
	if l := d.Feed.Lead; l.Turns > 0 {
		if l.Shape == "" {
			l.Shape = Ramp
		}
		t.Feed.Lead = &leadText{l.Turns, l.Spacing, l.Shape}
	}
	if s := d.Feed.Strip; s.Turns > 0 {
		t.Feed.Strip = &stripText{s.Turns, s.Width}
	}
	if s := d.Feed.Transformer; s.Impedance > 0 {
		t.Feed.Transformer = &transformerText{s.Impedance, s.Length, orOne(s.Velocity)}
	}
	if d.Band != (Band{}) {
		t.Band = &bandText{d.Band.From, d.Band.To, d.Band.Samples}
	}
	return json.Marshal(t)
}

func textOf(m Material) materialText {
	return materialText{Material: m.Name, Conductivity: m.Conductivity, Density: m.Density, Permeability: orOne(m.Permeability)}
}

func textOfGround(g Ground) groundText {
	if !g.Finite() {
		return groundText{Kind: Infinite}
	}
	metal := textOf(g.Metal())
	t := groundText{Kind: g.Kind, Diameter: &g.Diameter, Thickness: g.SheetThickness(), materialText: &metal}
	if g.Kind == Cup {
		t.Rim = &g.Rim
	}
	return t
}

// UnmarshalJSON reads what MarshalJSON writes. It is strict: a key that is
// unknown, missing or there twice, a word or a number of the wrong kind are
// errors that name the key, all of them at once. It does not judge whether
// the design can be built.
func (d *Design) UnmarshalJSON(text []byte) error {
	v, err := jsontree.Parse(text)
	if err != nil {
		return err
	}
	var faults jsontree.Faults
	f := jsontree.Read(v, "", &faults)
	read := Design{
		Title:          f.TextOr("title", 1000),
		Turns:          f.Number("turns", finite("turns")),
		Diameter:       f.Numbers("diameter_m", finite("m")),
		Spacing:        f.Numbers("spacing_m", finite("m")),
		Handedness:     senseOf(f.Choice("handedness", "right", "left")),
		Conductor:      readConductor(f.Object("conductor")),
		Ground:         readGround(f.Object("ground")),
		FeedsReflector: f.Flag("feeds_reflector"),
	}
	read.Feed = readFeed(f.Object("feed"))
	if read.Feed.Pin == 0 {
		read.Feed.Pin = read.Conductor.Diameter
	}
	if f.Has("insulation") {
		i := f.Object("insulation")
		read.Insulation = Insulation{Thickness: i.Number("thickness_m", finite("m")), Permittivity: i.Number("permittivity", finite(""))}
		i.Done()
	}
	if f.Has("band") {
		b := f.Object("band")
		read.Band = Band{From: b.Number("from_hz", finite("Hz")), To: b.Number("to_hz", finite("Hz")), Samples: b.Whole("samples", 0, 1e6)}
		b.Done()
	}
	if f.Has("sense") {
		read.Sense = senseOf(f.Choice("sense", "right", "left"))
	}
	f.Done()
	if err := faults.Err(); err != nil {
		return err
	}
	*d = read
	return nil
}

func readConductor(f *jsontree.Fields) Conductor {
	c := Conductor{
		Stock:    f.TextOr("stock", 1000),
		Diameter: f.Number("diameter_m", finite("m")),
		Wall:     f.NumberOr("wall_m", finite("m"), 0),
		Material: readMaterial(f),
	}
	f.Done()
	return c
}

func readMaterial(f *jsontree.Fields) Material {
	return Material{
		Name:         f.TextOr("material", 1000),
		Conductivity: f.Number("conductivity_s_per_m", finite("S/m")),
		Density:      f.Number("density_kg_per_m3", finite("kg/m³")),
		Permeability: f.NumberOr("permeability", finite(""), 1),
	}
}

func readFeed(f *jsontree.Fields) Feed {
	feed := Feed{
		Height:    f.Number("height_m", finite("m")),
		Pin:       f.NumberOr("pin_m", finite("m"), 0),
		Impedance: f.Number("impedance_ohm", finite("ohm")),
	}
	if f.Has("lead") {
		l := f.Object("lead")
		feed.Lead = Lead{Turns: l.Number("turns", finite("turns")), Spacing: l.Number("spacing_m", finite("m")), Shape: Ramp}
		if l.Has("shape") {
			feed.Lead.Shape = LeadShape(l.Choice("shape", string(Ramp), string(Flat)))
		}
		l.Done()
	}
	if f.Has("strip") {
		s := f.Object("strip")
		feed.Strip = Strip{Turns: s.Number("turns", finite("turns")), Width: s.Number("width_m", finite("m"))}
		s.Done()
	}
	if f.Has("transformer") {
		t := f.Object("transformer")
		feed.Transformer = Transformer{Impedance: t.Number("impedance_ohm", finite("ohm")), Length: t.Number("length_m", finite("m")), Velocity: t.NumberOr("velocity", finite(""), 1)}
		t.Done()
	}
	f.Done()
	return feed
}

func readGround(f *jsontree.Fields) Ground {
	g := Ground{Kind: GroundKind(f.Choice("kind", string(Infinite), string(Disc), string(Cup)))}
	if g.Finite() {
		g.Diameter = f.Number("diameter_m", finite("m"))
		g.Thickness = f.NumberOr("thickness_m", finite("m"), 0)
		if f.Has("conductivity_s_per_m") {
			g.Material = readMaterial(f)
		}
	}
	if g.Kind == Cup {
		g.Rim = f.Number("rim_m", finite("m"))
	}
	f.Done()
	return g
}

// finite is any number at all: what a dimension may be is for the geometry
// to say.
func finite(unit string) jsontree.Range {
	return jsontree.Range{Low: -math.MaxFloat64, High: math.MaxFloat64, Unit: unit}
}

func senseOf(word string) Sense {
	switch word {
	case "right":
		return Right
	case "left":
		return Left
	}
	return 0
}

func orOne(x float64) float64 {
	if x == 0 {
		return 1
	}
	return x
}
