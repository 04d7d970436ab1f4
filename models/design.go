package models

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// LightSpeed is the speed of light in vacuum, m/s (exact, SI).
const LightSpeed = 299792458.0

// Sense is a hand: of a winding, or of a circular polarisation in the IEEE
// Std 145 convention (clockwise seen along propagation is right-hand).
type Sense int8

// The two hands. The zero Sense means "not stated".
const (
	Right Sense = 1
	Left  Sense = -1
)

func (s Sense) String() string {
	switch s {
	case Right:
		return "right"
	case Left:
		return "left"
	}
	return ""
}

// Law is how a dimension runs along the winding: knots evenly spaced in
// turns, feed end first. One knot is a constant, two a straight line, three
// and more a shape-preserving cubic.
type Law []float64

// Design is one fully dimensioned antenna; a workshop could wind it from
// this alone. Lengths in metres.
type Design struct {
	Title      string
	Turns      float64
	Diameter   Law // of the wire's centre line
	Spacing    Law // axial advance per turn, dz/dt
	Handedness Sense
	Conductor  Conductor
	Insulation Insulation // zero thickness: bare
	Feed       Feed
	Ground     Ground

	// The rest says what is wanted of the design and is no part of its hash.
	Band           Band
	Sense          Sense // wanted sense on the axis; unset: the winding's own
	FeedsReflector bool  // for words only
}

// Conductor is a round wire or tube. Stock is the name it was bought under,
// for people only.
type Conductor struct {
	Stock    string
	Diameter float64 // m, outer
	Wall     float64 // m, of a tube; 0: solid
	Material Material
}

// Section is the cross-section of the metal, m².
func (c *Conductor) Section() float64 {
	inner := 0.0
	if c.Wall > 0 {
		inner = max(c.Diameter-2*c.Wall, 0)
	}
	return math.Pi / 4 * (c.Diameter*c.Diameter - inner*inner)
}

// Material is a conductor's bulk behaviour. Name is empty for one given by
// its numbers.
type Material struct {
	Name         string
	Conductivity float64 // S/m
	Density      float64 // kg/m³
	Permeability float64 // relative; 0 is read as 1
}

// Insulation is a thin coat on the conductor.
type Insulation struct {
	Thickness    float64 // m; 0: bare
	Permittivity float64 // relative
}

// Feed is the way from the connector behind the plane to the winding.
type Feed struct {
	Height      float64 // m, straight riser from the plane to the start of the winding
	Pin         float64 // m, the riser's own diameter; 0: the conductor's
	Impedance   float64 // Ω, reference of VSWR and reflection
	Lead        Lead
	Strip       Strip
	Transformer Transformer
}

// Opening is the outer over the inner diameter of the coaxial opening at the
// riser's foot: an air line of 50 Ω.
const Opening = 2.3

// PinDiameter is the riser's diameter, m.
func (d *Design) PinDiameter() float64 {
	if d.Feed.Pin > 0 {
		return d.Feed.Pin
	}
	return d.Conductor.Diameter
}

// Wanted is the wanted sense on the axis: as stated, else the winding's own.
func (d *Design) Wanted() Sense {
	if d.Sense != 0 {
		return d.Sense
	}
	return d.Handedness
}

// LeadShape is how a lead passes into the winding's own spacing.
type LeadShape string

// Ramp climbs linearly to the spacing law over the lead; Flat keeps the
// lead's spacing and blends over the quarter turn after it.
const (
	Ramp LeadShape = "ramp"
	Flat LeadShape = "flat"
)

// Lead is a start of the winding that rises more slowly. Zero turns: none.
type Lead struct {
	Turns   float64
	Spacing float64 // m per turn at the very start
	Shape   LeadShape
}

// Strip is a start of the winding that is a flat strip parallel to the
// plane. Zero turns: none.
type Strip struct {
	Turns float64
	Width float64 // m
}

// Transformer is an ideal line section between connector and port. Zero
// impedance: none.
type Transformer struct {
	Impedance float64 // Ω
	Length    float64 // m
	Velocity  float64 // relative to light; 0 is read as 1
}

// Band is a range of frequencies in equal steps. The zero Band is none.
type Band struct {
	From, To float64 // Hz
	Samples  int
}

// Mid is the band's middle, Hz.
func (b Band) Mid() float64 { return (b.From + b.To) / 2 }

// Hz lists the band's samples, rising.
func (b Band) Hz() []float64 {
	if b.Samples <= 1 {
		return []float64{b.Mid()}
	}
	hz := make([]float64, b.Samples)
	for i := range hz {
		hz[i] = b.From + (b.To-b.From)*float64(i)/float64(b.Samples-1)
	}
	return hz
}

// Canonical is the text a design is known by: every dimension that physics
// can see, SI, one a line, shortest decimals that read back exactly. Title,
// band, sense, reflector and the stock's name are no part of it.
func (d *Design) Canonical() string {
	var b strings.Builder
	num := func(key string, v ...float64) {
		b.WriteString(key)
		for _, x := range v {
			b.WriteByte(' ')
			b.WriteString(strconv.FormatFloat(x, 'g', -1, 64))
		}
		b.WriteByte('\n')
	}
	num("turns", d.Turns)
	num("diameter_m", d.Diameter...)
	num("spacing_m", d.Spacing...)
	fmt.Fprintf(&b, "handedness %s\n", d.Handedness)
	m := d.Conductor.Material
	num("conductor", d.Conductor.Diameter, m.Conductivity, m.Density, max(m.Permeability, 0)+b2f(m.Permeability == 0))
	if d.Conductor.Wall > 0 {
		num("wall", d.Conductor.Wall)
	}
	if d.Insulation.Thickness > 0 {
		num("insulation", d.Insulation.Thickness, d.Insulation.Permittivity)
	}
	num("feed", d.Feed.Height, d.PinDiameter(), d.Feed.Impedance)
	if l := d.Feed.Lead; l.Turns > 0 {
		shape := l.Shape
		if shape == "" {
			shape = Ramp
		}
		num("lead_"+string(shape), l.Turns, l.Spacing)
	}
	if s := d.Feed.Strip; s.Turns > 0 {
		num("strip", s.Turns, s.Width)
	}
	if t := d.Feed.Transformer; t.Impedance > 0 {
		num("transformer", t.Impedance, t.Length, t.Velocity+b2f(t.Velocity == 0))
	}
	switch d.Ground.Kind {
	case Disc:
		num("disc", d.Ground.Diameter)
	case Cup:
		num("cup", d.Ground.Diameter, d.Ground.Rim)
	default:
		num("infinite")
	}
	if g := d.Ground; g.Finite() && !g.ordinary() {
		m := g.Metal()
		num("sheet", g.SheetThickness(), m.Conductivity, m.Density, orOne(m.Permeability))
	}
	return b.String()
}

// Hash is the SHA-256 of the canonical text, hexadecimal.
func (d *Design) Hash() string {
	sum := sha256.Sum256([]byte(d.Canonical()))
	return hex.EncodeToString(sum[:])
}

// ID is the first ten digits of the hash.
func (d *Design) ID() string { return d.Hash()[:10] }

// Nameless is the design with what makes its hash and no more, so that equal
// hashes are equal questions.
func (d Design) Nameless() Design {
	d.Title, d.Band, d.Sense, d.FeedsReflector = "", Band{}, 0, false
	d.Conductor.Stock, d.Conductor.Material.Name = "", ""
	if d.Ground.Finite() {
		d.Ground.Thickness, d.Ground.Material = d.Ground.SheetThickness(), d.Ground.Metal()
		d.Ground.Material.Name = ""
	}
	return d
}

func b2f(b bool) float64 {
	if b {
		return 1
	}
	return 0
}
