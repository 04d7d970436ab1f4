package helix

import (
	"math"
	"testing"

	"turnwise/models"
)

func TestGeometryOfAUniformWinding(t *testing.T) {
	d := plain()
	got := wind(t, d).Geometry()
	turn := math.Hypot(math.Pi*0.058, 0.034)
	near(t, "length", got.Length, 0.005+8.25*0.034, 1e-15)
	near(t, "wire length", got.WireLength, 0.005+8.25*turn, 1e-14)
	near(t, "widest", got.Widest, 0.060, 1e-16)
	near(t, "mass", got.Mass, 8890*math.Pi*1e-6*(0.005+8.25*turn), 1e-14)
	p := 0.034 / (2 * math.Pi)
	near(t, "bend radius", got.BendRadius, 0.029+p*p/0.029, 1e-15)
}

func TestWidest(t *testing.T) {
	for _, x := range []struct {
		name   string
		change func(*models.Design)
		want   float64 // mm
	}{
		{"conductor counted", func(*models.Design) {}, 60},
		{"coat counted", func(d *models.Design) { d.Insulation = models.Insulation{Thickness: 0.0003, Permittivity: 2.3} }, 60.6},
		{"taper, widest at the plane", func(d *models.Design) { d.Diameter = models.Law{0.058, 0.04} }, 60},
		{"taper, widest at the open end", func(d *models.Design) { d.Diameter = models.Law{0.04, 0.058} }, 60},
		{"widest at an inner knot", func(d *models.Design) { d.Diameter = models.Law{0.04, 0.07, 0.05} }, 72},
		{"thick riser", func(d *models.Design) { d.Feed.Pin = 0.004 }, 62},
		{"thin riser", func(d *models.Design) { d.Feed.Pin = 0.001 }, 60},
		{"thick riser under a wide end", func(d *models.Design) { d.Feed.Pin, d.Diameter = 0.004, models.Law{0.04, 0.058} }, 60},
		{"strip", func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.005} }, 63},
		{"strip narrower than the wire", func(d *models.Design) { d.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.001} }, 60},
		{"strip at the narrow end", func(d *models.Design) {
			d.Diameter = models.Law{0.04, 0.058}
			d.Feed.Strip = models.Strip{Turns: 0.25, Width: 0.005}
		}, 60},
		{"strip over all of a growing winding", func(d *models.Design) {
			d.Diameter = models.Law{0.04, 0.058}
			d.Feed.Strip = models.Strip{Turns: d.Turns, Width: 0.005}
		}, 63},
		{"infinite ground", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Infinite, Diameter: 9} }, 60},
		{"disc", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2} }, 200},
		{"cup", func(d *models.Design) { d.Ground = models.Ground{Kind: models.Cup, Diameter: 0.15, Rim: 0.06} }, 150},
		{"disc narrower than the winding", func(d *models.Design) {
			d.Diameter = models.Law{0.04, 0.07}
			d.Ground = models.Ground{Kind: models.Disc, Diameter: 0.05}
		}, 72},
	} {
		d := plain()
		x.change(&d)
		near(t, x.name+": widest in mm", wind(t, d).Geometry().Widest*1e3, x.want, 1e-12)
	}
}

func TestMass(t *testing.T) {
	winding := 8.25 * math.Hypot(math.Pi*0.058, 0.034)
	disc := func(diameter float64) float64 { return math.Pi / 4 * diameter * diameter }
	ring := disc(0.002) - disc(0.001)
	for _, x := range []struct {
		name   string
		change func(*models.Design)
		want   float64 // m³ of metal
	}{
		{"wire", func(*models.Design) {}, disc(0.002) * (winding + 0.005)},
		{"tube", func(d *models.Design) { d.Conductor.Wall = 0.0005 }, ring * (winding + 0.005)},
		{"tube without a bore", func(d *models.Design) { d.Conductor.Wall = 0.001 }, disc(0.002) * (winding + 0.005)},
		{"riser of its own", func(d *models.Design) { d.Feed.Pin = 0.004 }, disc(0.002)*winding + disc(0.004)*0.005},
		{"riser as thick as the wire", func(d *models.Design) { d.Feed.Pin = 0.002 }, disc(0.002) * (winding + 0.005)},
		{"tube on a solid riser", func(d *models.Design) { d.Conductor.Wall, d.Feed.Pin = 0.0005, 0.001 }, ring*winding + disc(0.001)*0.005},
		{"coat weighs nothing", func(d *models.Design) {
			d.Insulation = models.Insulation{Thickness: 0.0003, Permittivity: 2.3}
		}, disc(0.002) * (winding + 0.005)},
	} {
		d := plain()
		x.change(&d)
		g := wind(t, d).Geometry()
		near(t, x.name+": mass", g.Mass, 8890*x.want, 1e-13)
		near(t, x.name+": the conductor's", g.ConductorMass, 8890*x.want, 1e-13)
	}
}

// A cup weighs with its winding: 1 mm of aluminium, a plate 150 mm across and
// a rim 60 mm high.
func TestMassWithTheGround(t *testing.T) {
	d := plain()
	alone := wind(t, d).Geometry().Mass
	d.Ground = models.Ground{Kind: models.Cup, Diameter: 0.15, Rim: 0.06}
	g := wind(t, d).Geometry()
	near(t, "mass", g.Mass, alone+2.7*math.Pi*(0.15*0.15/4+0.15*0.06), 1e-13)
	near(t, "the conductor's", g.ConductorMass, alone, 1e-13)
}

func TestWallThatCannotBe(t *testing.T) {
	for _, wall := range []float64{-1e-3, 0.00101, math.NaN(), math.Inf(1)} {
		d := plain()
		d.Conductor.Wall = wall
		if _, err := Wind(&d); err == nil {
			t.Errorf("wall %g: no error", wall)
		}
	}
}

// The least bend radius is that of many points, looked at one by one.
func TestBendRadiusAgainstSamples(t *testing.T) {
	for name, d := range windings() {
		c := wind(t, d)
		most := 0.0
		for i, a := range append([]float64{0}, c.Breaks()...) {
			b := c.Turns()
			if i < len(c.Breaks()) {
				b = c.Breaks()[i]
			}
			for j := range 4001 {
				// A break's curvature is looked at from both sides.
				at := min(max(a+(b-a)*float64(j)/4000, a+1e-12), b-1e-12)
				most = max(most, c.At(at).Curvature)
			}
		}
		near(t, name+": bend radius", c.Geometry().BendRadius, 1/most, 1e-8/most)
	}
}
