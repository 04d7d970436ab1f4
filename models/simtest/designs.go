package simtest

import (
	"math"

	"turnwise/models"
)

// good are designs that every simulator answers: small, for dear ones, of both
// hands, with and without what a feed may have, over the infinite plane and on
// a disc.
func good() []models.Design {
	plain := models.Design{
		Title: "three turns", Turns: 3, Diameter: models.Law{0.095}, Spacing: models.Law{0.066}, Handedness: models.Right,
		Conductor: models.Conductor{Stock: "3 mm wire", Diameter: 3e-3, Material: models.Material{Name: "copper", Conductivity: 58e6, Density: 8890, Permeability: 1}},
		Feed:      models.Feed{Height: 6e-3, Impedance: 50},
		Ground:    models.Ground{Kind: models.Infinite},
	}
	tapered := plain
	tapered.Title, tapered.Turns, tapered.Handedness = "a taper with a lead and a transformer", 3.5, models.Left
	tapered.Diameter, tapered.Spacing = models.Law{0.1, 0.095, 0.08}, models.Law{0.06, 0.07}
	tapered.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.012, Shape: models.Ramp}
	tapered.Feed.Transformer = models.Transformer{Impedance: 85, Length: 0.07, Velocity: 0.9}
	plated := plain
	plated.Title, plated.Ground = "three turns on a disc", models.Ground{Kind: models.Disc, Diameter: 0.25}
	return []models.Design{plain, tapered, plated}
}

// bad are designs that nobody can answer, by what is wrong with them.
func bad() map[string]models.Design {
	out := map[string]models.Design{"nothing at all": {}}
	spoil := func(what string, change func(d *models.Design)) {
		d := clone(good()[0])
		change(&d)
		out[what] = d
	}
	for what, x := range map[string]float64{"NaN": math.NaN(), "infinite": math.Inf(1), "negative": -1, "zero": 0, "huge": 1e300} {
		spoil(what+" turns", func(d *models.Design) { d.Turns = x })
		spoil(what+" diameter", func(d *models.Design) { d.Diameter = models.Law{0.095, x} })
		spoil(what+" spacing", func(d *models.Design) { d.Spacing = models.Law{x} })
		spoil(what+" conductor", func(d *models.Design) { d.Conductor.Diameter = x })
		spoil(what+" feed height", func(d *models.Design) { d.Feed.Height = x })
	}
	for what, x := range map[string]float64{"NaN": math.NaN(), "infinite": math.Inf(1), "negative": -1} {
		spoil(what+" conductivity", func(d *models.Design) { d.Conductor.Material.Conductivity = x })
		spoil(what+" impedance", func(d *models.Design) { d.Feed.Impedance = x })
		spoil(what+" pin", func(d *models.Design) { d.Feed.Pin = x })
		spoil(what+" lead", func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: x, Spacing: 0.01} })
		spoil(what+" transformer", func(d *models.Design) { d.Feed.Transformer = models.Transformer{Impedance: 85, Length: x} })
	}
	spoil("no diameter", func(d *models.Design) { d.Diameter = nil })
	spoil("no spacing", func(d *models.Design) { d.Spacing = nil })
	spoil("no hand", func(d *models.Design) { d.Handedness = 0 })
	spoil("unknown ground", func(d *models.Design) { d.Ground.Kind = "swamp" })
	spoil("conductor wider than the winding", func(d *models.Design) { d.Conductor.Diameter = 0.2 })
	spoil("lead longer than the winding", func(d *models.Design) { d.Feed.Lead = models.Lead{Turns: 5, Spacing: 0.01} })
	return out
}

// badly are questions that have no answer, by what is wrong with them.
func badly() map[string]models.Question {
	out := map[string]models.Question{}
	for what, hz := range map[string][]float64{
		"no frequency": {}, "NaN": {math.NaN()}, "zero": {0}, "negative": {-1e9}, "infinite": {math.Inf(1)},
		"NaN at the end": {1e9, math.NaN()}, "zero at the start": {0, 1e9},
	} {
		out[what] = models.Question{Hz: hz, Outputs: models.Axis}
	}
	for what, cone := range map[string]float64{"cone of NaN": math.NaN(), "negative cone": -0.1, "cone wider than a half space": 2} {
		q := sweep(models.Cone)
		q.Cone = cone
		out[what] = q
	}
	return out
}

// clone shares nothing with d.
func clone(d models.Design) models.Design {
	d.Diameter = append(models.Law(nil), d.Diameter...)
	d.Spacing = append(models.Law(nil), d.Spacing...)
	return d
}
