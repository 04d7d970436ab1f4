package moment

import (
	"fmt"
	"math"

	"turnwise/models"
)

// Where the thin wire stops being true, against a six-filament model of the
// tube's surface.
const (
	mostRadius    = 0.012 // wavelengths: 0.05 dB and 5 % at 0.01, 0.14 dB and 20 % at 0.02
	leastClear    = 6     // radii between neighbouring turns, centre to centre
	leastRiser    = 2.5   // radii
	leastHeight   = 5     // radii over the plane: at 3 the impedance is off by 8–9 %
	widestStrip   = 3     // heights
	mostExcess    = 0.5   // excess phase
	leastCircle   = 0.6   // circumference in wavelengths
	mostCircle    = 1.5
	thickestCoat  = 1 // radii
	lowStripShare = 0.5
)

// warnings name every way in which the design leaves the model's range over
// the sweep.
func (w *worker) warnings(hz []float64) []string {
	var out []string
	warn := func(format string, args ...any) { out = append(out, fmt.Sprintf(format, args...)) }
	d := w.design
	high := hz[len(hz)-1]
	lambda := models.LightSpeed / high
	a := d.Conductor.Diameter / 2
	thick := max(a, d.PinDiameter()/2)
	if thick > mostRadius*lambda {
		warn("a conductor radius of %.3g wavelengths is thick for a thin-wire model, which ends at %.3g: 0.14 dB and 20 %% in impedance at 0.02", thick/lambda, mostRadius)
	}
	clear := w.curve.ClearancesFrom(leastClear * a)
	if clear.Turns < leastClear*a {
		warn("neighbouring turns run %.3g radii apart, centre to centre: the thin-wire model wants %d", clear.Turns/a, leastClear)
	}
	if h := d.Feed.Height; h < leastRiser*d.PinDiameter()/2 {
		warn("a riser of %.3g radii is short for a thin-wire model, which wants %.3g", h/(d.PinDiameter()/2), leastRiser)
	} else if d.Feed.Strip.Turns == 0 && clear.Plane < leastHeight*a {
		warn("the winding starts %.3g radii over the plane: at 3 the impedance is off by 8–9 %%", clear.Plane/a)
	}
	w.stripWarnings(warn)
	if t := d.Insulation.Thickness; t > thickestCoat*a {
		warn("a coat of %.3g radii is not thin: the loading takes it for a thin one", t/a)
	}
	low, most := math.Inf(1), 0.0
	for i := range 33 {
		c := math.Pi * w.curve.Diameter(d.Turns*float64(i)/32)
		low, most = min(low, c), max(most, c)
	}
	if low < leastCircle*models.LightSpeed/hz[0] || most > mostCircle*lambda {
		warn("the circumference runs from %.3g to %.3g wavelengths over winding and sweep: outside %.3g to %.3g a helix leaves the axial mode",
			low*hz[0]/models.LightSpeed, most/lambda, leastCircle, mostCircle)
	}
	if e := w.curve.ExcessPhase(high); e > mostExcess {
		warn("the excess phase is %.3g at %.5g GHz: past %.3g the gain falls off a cliff, so look at it over the whole band", e, high/1e9, mostExcess)
	}
	if p := plateOf(d.Ground); p.Finite() && w.shore.short {
		warn("the winding comes so close to the edge of the %s that more than %d azimuthal modes pass between them", d.Ground.Kind, w.shore.modes)
	}
	return out
}

// stripWarnings are the strip's.
func (w *worker) stripWarnings(warn func(string, ...any)) {
	s := w.design.Feed.Strip
	if s.Turns <= 0 {
		return
	}
	h := w.curve.Height(0)
	if s.Width > widestStrip*h {
		warn("the strip is %.3g times as wide as its height over the plane: its equivalent radius holds up to %d", s.Width/h, widestStrip)
	} else if s.Width/4 > lowStripShare*h {
		warn("a quarter of the strip's width is %.3g of its height over the plane: the thin-wire model wants less than %.3g", s.Width/4/h, lowStripShare)
	}
}
