package helix

import (
	"testing"

	"turnwise/models"
)

func benchDesigns() map[string]models.Design {
	line := plain()
	line.Diameter = models.Law{0.058, 0.04}
	line.Feed.Lead = models.Lead{Turns: 0.5, Spacing: 0.008}
	return map[string]models.Design{"uniform": plain(), "taper": line, "rich": rich()}
}

func BenchmarkWind(b *testing.B) {
	for name, d := range benchDesigns() {
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			var c Curve
			for b.Loop() {
				if err := c.Wind(&d); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkClearances(b *testing.B) {
	for name, d := range benchDesigns() {
		c := wind(b, d)
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				c.Clearances()
			}
		})
	}
}

func BenchmarkGeometry(b *testing.B) {
	for name, d := range benchDesigns() {
		c := wind(b, d)
		b.Run(name, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				c.Geometry()
			}
		})
	}
}

func BenchmarkAt(b *testing.B) {
	c := wind(b, rich())
	b.ReportAllocs()
	for b.Loop() {
		c.At(4.2)
	}
}

func BenchmarkParameter(b *testing.B) {
	c := wind(b, rich())
	s := c.Arc(4.2)
	b.ReportAllocs()
	for b.Loop() {
		c.Parameter(s)
	}
}
