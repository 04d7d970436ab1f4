package workshop

import (
	"fmt"
	"math"
	"strconv"

	"turnwise/configs"
	"turnwise/models"
)

// Resolution is how finely a pack states what is made: every length, turn
// and ohm of the design is a multiple of it. What is bought (conductor, pin,
// coat) keeps its own size.
type Resolution struct {
	Length float64 // m
	Turns  float64
	Ohms   float64
	digits int // after the point, of millimetres
	places int // after the point, of turns
}

// The resolutions, the one a workshop would rather have first. A hundredth
// of a turn is 3.6° of the open end's place, where a design forgives most.
var (
	Coarse = Resolution{Length: 1e-4, Turns: 0.01, Ohms: 0.1, digits: 1, places: 2}
	Fine   = Resolution{Length: 1e-5, Turns: 0.001, Ohms: 0.01, digits: 2, places: 3}
)

// String says the resolution in words.
func (r Resolution) String() string {
	return fmt.Sprintf("%s mm, %s turn and %s Ω", shortest(r.Length*1e3), shortest(r.Turns), shortest(r.Ohms))
}

// Round is the design at the resolution, written as a design file and read
// back from it, with that file.
func (r Resolution) Round(d models.Design) (models.Design, []byte, error) {
	d.Diameter, d.Spacing = r.law(d.Diameter), r.law(d.Spacing)
	d.Turns = nearest(d.Turns, r.Turns)
	f := &d.Feed
	f.Height = nearest(f.Height, r.Length)
	f.Lead.Turns, f.Lead.Spacing = nearest(f.Lead.Turns, r.Turns), nearest(f.Lead.Spacing, r.Length)
	f.Strip.Turns, f.Strip.Width = nearest(f.Strip.Turns, r.Turns), nearest(f.Strip.Width, r.Length)
	f.Transformer.Impedance, f.Transformer.Length = nearest(f.Transformer.Impedance, r.Ohms), nearest(f.Transformer.Length, r.Length)
	d.Ground.Diameter, d.Ground.Rim = nearest(d.Ground.Diameter, r.Length), nearest(d.Ground.Rim, r.Length)
	text := configs.WriteDesign(d)
	back, err := configs.ParseDesign("design.yaml", text, configs.YAML)
	return back, text, err
}

func (r Resolution) law(l models.Law) models.Law {
	out := make(models.Law, len(l))
	for i, x := range l {
		out[i] = nearest(x, r.Length)
	}
	return out
}

func nearest(x, step float64) float64 { return math.Round(x/step) * step }

// steps is a length as a whole number of the resolution.
func (r Resolution) steps(metres float64) int { return int(math.Round(metres / r.Length)) }

// shown is a whole number of the resolution in millimetres.
func (r Resolution) shown(steps int) string {
	return fixed(float64(steps)*r.Length*1e3, r.digits)
}

// mm is a length as the sheet prints it, in millimetres without the unit.
func (r Resolution) mm(metres float64) string { return r.shown(r.steps(metres)) }

// turns is a number of turns as the sheet prints it.
func (r Resolution) turns(t float64) string { return fixed(t, r.places) }

// shortest is the shortest decimal that stands for x.
func shortest(x float64) string { return strconv.FormatFloat(x, 'g', 12, 64) }

// bought is the size of something bought, in millimetres to the micrometre.
func bought(metres float64) string { return shortest(math.Round(metres*1e6) / 1e3) }
