package models

import "encoding/json"

// sampleText is how a sample is stored: its impedances split into parts,
// since JSON has no complex numbers.
type sampleText struct {
	plainSample
	Port, Input, SpreadPort [2]float64
}

type plainSample Sample

// MarshalJSON stores a sample so that it reads back to the same bits.
func (s Sample) MarshalJSON() ([]byte, error) {
	return json.Marshal(sampleText{plainSample(s), split(s.Port), split(s.Input), split(s.SpreadPort)})
}

// UnmarshalJSON reads what MarshalJSON wrote.
func (s *Sample) UnmarshalJSON(text []byte) error {
	var t sampleText
	if err := json.Unmarshal(text, &t); err != nil {
		return err
	}
	*s = Sample(t.plainSample)
	s.Port, s.Input, s.SpreadPort = join(t.Port), join(t.Input), join(t.SpreadPort)
	return nil
}

func split(z complex128) [2]float64 { return [2]float64{real(z), imag(z)} }
func join(p [2]float64) complex128  { return complex(p[0], p[1]) }
