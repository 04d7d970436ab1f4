package models

import "encoding/json"

// sampleText is how a sample is stored: impedances split into parts, since
// JSON has no complex numbers; what was not answered is left out, since a
// night stores millions.
type sampleText struct {
	Hz              float64    `json:"hz"`
	Port            [2]float64 `json:"port_ohm"`
	Input           [2]float64 `json:"input_ohm"`
	Gain            Circular   `json:"gain"`
	AxialRatio      float64    `json:"axial_ratio_db"`
	Sense           Sense      `json:"sense,omitzero"`
	Directivity     float64    `json:"directivity"`
	Efficiency      float64    `json:"efficiency"`
	ConeAxialRatio  Circular   `json:"cone_axial_ratio_db,omitzero"`
	EdgeGain        Circular   `json:"edge_gain,omitzero"`
	PeakDirectivity float64    `json:"peak_directivity,omitzero"`
	Beamwidth       float64    `json:"beamwidth_rad,omitzero"`
	Sidelobe        float64    `json:"sidelobe_db,omitzero"`
	RearGain        float64    `json:"rear_gain,omitzero"`
	PowerBalance    float64    `json:"power_balance,omitzero"`
	SpreadPort      [2]float64 `json:"spread_port_ohm,omitzero"`
	Pattern         []Cut      `json:"pattern,omitempty"`
}

// MarshalJSON stores a sample so that it reads back to the same bits.
func (s Sample) MarshalJSON() ([]byte, error) {
	return json.Marshal(sampleText{
		Hz: s.Hz, Port: split(s.Port), Input: split(s.Input), Gain: s.Gain, AxialRatio: s.AxialRatio, Sense: s.Sense,
		Directivity: s.Directivity, Efficiency: s.Efficiency, ConeAxialRatio: s.ConeAxialRatio, EdgeGain: s.EdgeGain,
		PeakDirectivity: s.PeakDirectivity, Beamwidth: s.Beamwidth, Sidelobe: s.Sidelobe, RearGain: s.RearGain,
		PowerBalance: s.PowerBalance, SpreadPort: split(s.SpreadPort), Pattern: s.Pattern,
	})
}

// UnmarshalJSON reads what MarshalJSON wrote.
func (s *Sample) UnmarshalJSON(text []byte) error {
	var t sampleText
	if err := json.Unmarshal(text, &t); err != nil {
		return err
	}
	*s = Sample{
		Hz: t.Hz, Port: join(t.Port), Input: join(t.Input), Gain: t.Gain, AxialRatio: t.AxialRatio, Sense: t.Sense,
		Directivity: t.Directivity, Efficiency: t.Efficiency, ConeAxialRatio: t.ConeAxialRatio, EdgeGain: t.EdgeGain,
		PeakDirectivity: t.PeakDirectivity, Beamwidth: t.Beamwidth, Sidelobe: t.Sidelobe, RearGain: t.RearGain,
		PowerBalance: t.PowerBalance, SpreadPort: join(t.SpreadPort), Pattern: t.Pattern,
	}
	return nil
}

func split(z complex128) [2]float64 { return [2]float64{real(z), imag(z)} }
func join(p [2]float64) complex128  { return complex(p[0], p[1]) }
