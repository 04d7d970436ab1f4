package moment

import (
	"testing"

	"turnwise/models"
	"turnwise/models/simtest"
)

func TestContract(t *testing.T) {
	for _, f := range []Fidelity{Draft, Standard, Fine} {
		t.Run(string(f), func(t *testing.T) {
			simtest.Run(t, func(t *testing.T) models.Simulator {
				s, err := New(f)
				if err != nil {
					t.Fatal(err)
				}
				return s
			})
		})
	}
}
