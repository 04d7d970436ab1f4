package configs

import (
	"strings"
	"testing"

	"turnwise/models"
	"turnwise/objectives"
)

const wavyBrief = `
band: {from: 1.66 GHz, to: 1.70 GHz}
sense: right
ground: {kind: cup, diameter: 1.05 wl, rim: 0.25 wl}
vary: {turns: {from: 3, to: 12}}
design: {diameter: 58 mm, spacing: 34 mm, conductor: {diameter: 2 mm, material: copper}, feed: {height: 5 mm}}
aims: [{figure: front_to_back, want: most}]
limits: {front_to_back: {at_least: 12 dB}}
`

// Wavelengths are mid-band's, 178.448 mm; a sheet nobody names stays unnamed.
func TestGroundInWavelengths(t *testing.T) {
	br := readBrief(t, wavyBrief, YAML)
	equal(t, "cup", br.Spec.Base.Ground, models.Ground{Kind: models.Cup, Diameter: 0.187370, Rim: 0.044612})
	if text := string(br.Write()); !strings.Contains(text, "ground: {kind: cup, diameter: 187.37 mm, rim: 44.612 mm}\n") {
		t.Errorf("written as\n%s", text)
	}
	br = readBrief(t, edit(t, wavyBrief, "{kind: cup, diameter: 1.05 wl, rim: 0.25 wl}", "{kind: disc, thickness: 1.5 mm, material: brass}",
		"vary: {", "vary: {ground_diameter: {from: 0.8 wl, to: 1.6 wl, step: 0.1 wl}, "), YAML)
	brass, _ := material("brass")
	equal(t, "sheet", br.Spec.Base.Ground, models.Ground{Kind: models.Disc, Thickness: 1.5e-3, Material: brass})
	v := br.Spec.Vary[1]
	if v.Quantity != objectives.GroundDiameter || v.From != 0.142758 || v.Step != 0.017845 || v.To != onGrid(v.From+8*v.Step, Length) {
		t.Errorf("varies as %+v", v)
	}
	rereadBrief(t, br, "b.yaml")
}

// Front to back may be asked of whatever ends in a model with a rear, and of
// a program of one's own.
func TestFrontToBackMayBeAsked(t *testing.T) {
	for _, model := range []string{"full-wave", "{ladder: [closed-form, full-wave draft, full-wave standard]}", "{external: [python3, solver.py]}"} {
		br := readBrief(t, wavyBrief+"model: "+model+"\n", YAML)
		if !br.Spec.Asks(objectives.FrontToBack) {
			t.Errorf("model %s: front to back is not asked", model)
		}
	}
}
