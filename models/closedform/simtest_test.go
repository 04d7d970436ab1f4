package closedform_test

import (
	"testing"

	"turnwise/models"
	"turnwise/models/closedform"
	"turnwise/models/simtest"
)

func TestContract(t *testing.T) {
	simtest.Run(t, func(*testing.T) models.Simulator { return closedform.New() })
}
