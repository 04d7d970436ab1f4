package models_test

import (
	"math"
	"testing"

	"turnwise/models"
)

// TestEquivalentRadii holds the limits of both: a wire far from the plane is
// itself, a narrow strip a quarter of its width.
func TestEquivalentRadii(t *testing.T) {
	if r := models.WireRadiusOverPlane(0.001, 1); math.Abs(r/0.001-1) > 1e-6 {
		t.Errorf("a wire far from the plane: %g", r)
	}
	// acosh(h/a) = ln(2h/a_eff), any handbook.
	if got, want := math.Log(2*0.003/models.WireRadiusOverPlane(0.001, 0.003)), math.Acosh(3); math.Abs(got-want) > 1e-12 {
		t.Errorf("near the plane: %g, want %g", got, want)
	}
	if r := models.StripRadiusOverPlane(0.001, 1); math.Abs(r/0.00025-1) > 1e-3 {
		t.Errorf("a strip far from the plane: %g", r)
	}
	if low, high := models.StripRadiusOverPlane(0.005, 0.005*0.999999), models.StripRadiusOverPlane(0.005, 0.005*1.000001); math.Abs(low/high-1) > 0.01 {
		t.Errorf("the two formulas part at w = h: %g and %g", low, high)
	}
}
