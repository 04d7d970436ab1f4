package models_test

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"turnwise/models"
)

var brass = models.Material{Name: "brass", Conductivity: 16e6, Density: 8530, Permeability: 1}

// Masses by hand: a square metre of 1 mm aluminium weighs 2.7 kg.
func TestGroundMass(t *testing.T) {
	for _, c := range []struct {
		name   string
		ground models.Ground
		want   float64 // kg
	}{
		{"none", models.Ground{Diameter: 0.2, Rim: 0.1}, 0},
		{"infinite", models.Ground{Kind: models.Infinite, Diameter: 0.2, Thickness: 1, Material: brass}, 0},
		{"disc", models.Ground{Kind: models.Disc, Diameter: 0.2}, 2.7 * math.Pi * 0.01},
		{"a disc has no rim", models.Ground{Kind: models.Disc, Diameter: 0.2, Rim: 0.1}, 2.7 * math.Pi * 0.01},
		{"cup", models.Ground{Kind: models.Cup, Diameter: 0.2, Rim: 0.1}, 2.7 * math.Pi * (0.01 + 0.02)},
		{"half as thick", models.Ground{Kind: models.Disc, Diameter: 0.2, Thickness: 0.5e-3}, 1.35 * math.Pi * 0.01},
		{"brass", models.Ground{Kind: models.Disc, Diameter: 0.2, Material: brass}, 8.53 * math.Pi * 0.01},
	} {
		if got := c.ground.Mass(); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("%s: %g kg, want %g", c.name, got, c.want)
		}
	}
}

// A design from before plates had a sheet keeps its id; naming the ordinary
// sheet changes nothing, any other one makes another antenna.
func TestSheetAndID(t *testing.T) {
	aluminium := models.Material{Name: "aluminium", Conductivity: 35.4e6, Density: 2700}
	with := func(thickness float64, m models.Material) models.Ground {
		return models.Ground{Kind: models.Disc, Diameter: 0.2, Thickness: thickness, Material: m}
	}
	canonical := func(g models.Ground) string {
		d := fullDesign()
		d.Ground = g
		return d.Canonical()
	}
	plain := canonical(with(0, models.Material{}))
	if !strings.HasSuffix(plain, "\ndisc 0.2\n") {
		t.Errorf("a plain disc is known by\n%s", plain)
	}
	if got := canonical(with(1e-3, aluminium)); got != plain {
		t.Errorf("the ordinary sheet, named, is known by\n%s", got)
	}
	seen := map[string]string{plain: "the ordinary sheet"}
	for name, g := range map[string]models.Ground{
		"thicker": with(1.5e-3, models.Material{}), "brass": with(0, brass), "both": with(1.5e-3, brass),
	} {
		text := canonical(g)
		if other, known := seen[text]; known {
			t.Errorf("%s is known by the text of %s", name, other)
		}
		seen[text] = name
	}
	infinite := models.Ground{Kind: models.Infinite, Thickness: 1.5e-3, Material: brass}
	if canonical(infinite) != canonical(models.Ground{}) {
		t.Error("an infinite plane is known by its sheet")
	}
}

// Designs of one hash ask one question, however their sheet is named.
func TestNamelessGround(t *testing.T) {
	named, plain := fullDesign(), fullDesign()
	plain.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2}
	named.Ground = models.Ground{Kind: models.Disc, Diameter: 0.2, Thickness: 1e-3, Material: models.Material{Name: "own sheet", Conductivity: 35.4e6, Density: 2700, Permeability: 1}}
	named.Title, named.Conductor.Stock = "another", "another"
	if named.Hash() != plain.Hash() {
		t.Fatal("the two have two hashes")
	}
	if diff := cmp.Diff(plain.Nameless(), named.Nameless()); diff != "" {
		t.Errorf("one hash, two questions (-plain +named):\n%s", diff)
	}
	if bare := plain.Nameless(); bare.Hash() != plain.Hash() {
		t.Error("without names it has another hash")
	}
}
