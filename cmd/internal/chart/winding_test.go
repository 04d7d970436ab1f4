package chart

import "testing"

// A cup that is deeper than its winding is long stays on the picture.
func TestDeepCupFits(t *testing.T) {
	w := winding(5, 200, 70, 60, true)
	w.Plate, w.Rim = 90, 900
	for _, width := range []float64{Small, Wide} {
		v := SideView{w, width}
		if rim, room := w.Rim*v.scale(), width-2*edge-behind-beyond; rim > room+1e-9 {
			t.Errorf("a rim of %g on a picture with room for %g", rim, room)
		}
	}
}
