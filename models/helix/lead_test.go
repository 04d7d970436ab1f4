package helix

import (
	"testing"

	"turnwise/models"
)

// The lead's formulas word for word, at places picked by hand: spacing
// running from 20 to 40 mm over 4 turns, S(t) = 20 + 5t, and a lead that
// starts at 8 mm.
func TestLeadSpacing(t *testing.T) {
	for _, x := range []struct {
		shape models.LeadShape
		turns float64
		at    float64
		want  float64 // mm
	}{
		{models.Ramp, 1, 0, 8},
		{models.Ramp, 1, 0.5, 8 + (25-8)*0.5},
		{models.Ramp, 1, 1, 25},
		{models.Ramp, 1, 1.1, 25.5},
		{"", 1, 0.25, 8 + (25-8)*0.25},
		{models.Ramp, 4, 2, 8 + (40-8)*0.5},
		{models.Ramp, 4, 4, 40},
		{models.Flat, 1, 0, 8},
		{models.Flat, 1, 0.999, 8},
		{models.Flat, 1, 1, 8},
		{models.Flat, 1, 1.125, 8 + (25.625-8)*0.5},
		{models.Flat, 1, 1.0625, 8 + (25.3125-8)*0.15625}, // u = ¼: u²(3 − 2u) = 10/64
		{models.Flat, 1, 1.25, 26.25},
		{models.Flat, 1, 2, 30},
		{models.Flat, 3.75, 3.75, 8},
		{models.Flat, 3.75, 4, 40},
	} {
		d := plain()
		d.Turns, d.Spacing = 4, models.Law{0.020, 0.040}
		d.Feed.Lead = models.Lead{Turns: x.turns, Spacing: 0.008, Shape: x.shape}
		near(t, string(x.shape)+" lead: spacing in mm", wind(t, d).Spacing(x.at)*1e3, x.want, 1e-12)
	}
}

// What a lead of constant spacings climbs, by hand: a ramp the mean of both
// spacings, a flat one its own and then half of the difference over ¼ turn.
func TestLeadClimb(t *testing.T) {
	const s0, s, turns = 0.008, 0.034, 0.6
	for _, x := range []struct {
		shape models.LeadShape
		want  float64 // at 2 turns, over the riser
	}{
		{models.Ramp, turns*(s0+s)/2 + (2-turns)*s},
		{models.Flat, turns*s0 + 0.25*(s0+s)/2 + (2-turns-0.25)*s},
	} {
		d := plain()
		d.Feed.Lead = models.Lead{Turns: turns, Spacing: s0, Shape: x.shape}
		near(t, string(x.shape)+" lead: climb", wind(t, d).Height(2)-d.Feed.Height, x.want, 1e-16)
	}
}

// A lead hides the law's start and moves nothing of it: beyond the lead the
// spacing is what it would be without.
func TestLawGoesOnUnderTheLead(t *testing.T) {
	d := plain()
	d.Spacing = models.Law{0.02, 0.05, 0.03}
	bare := wind(t, d)
	for _, shape := range []models.LeadShape{models.Ramp, models.Flat} {
		d.Feed.Lead = models.Lead{Turns: 1.5, Spacing: 0.01, Shape: shape}
		c := wind(t, d)
		for at := 1.75; at <= d.Turns; at += 0.25 {
			near(t, "spacing", c.Spacing(at), bare.Spacing(at), 1e-16)
			near(t, "climb", c.Height(at)-c.Height(1.75), bare.Height(at)-bare.Height(1.75), 1e-15)
		}
	}
}

// A lead may also rise faster than the law, or not at all.
func TestLeadOfAnySpacing(t *testing.T) {
	for _, s0 := range []float64{0, 0.034, 0.08} {
		for _, shape := range []models.LeadShape{models.Ramp, models.Flat} {
			d := plain()
			d.Feed.Lead = models.Lead{Turns: 0.5, Spacing: s0, Shape: shape}
			c := wind(t, d)
			near(t, "spacing at the start", c.Spacing(0), s0, 0)
			near(t, "spacing beyond", c.Spacing(0.75), 0.034, 1e-16)
		}
	}
}
