package external

import (
	"encoding/json"
	"fmt"
	"math"

	"turnwise/models"
	"turnwise/models/helix"
)

// question is a question to the program, as a line holds it.
type question struct {
	ID      uint64        `json:"id"`
	Design  models.Design `json:"design"`
	Hz      []float64     `json:"hz"`
	Outputs []string      `json:"outputs"`
	Cone    float64       `json:"cone_rad,omitzero"`

	outputs models.Outputs
}

// newQuestion asks what of q the program can answer. The program sees of the
// design what makes its hash and no more, so that equal hashes get equal
// answers.
func newQuestion(d models.Design, q models.Question, can models.Outputs) (question, error) {
	if err := checkQuestion(q); err != nil {
		return question{}, err
	}
	if err := helix.Check(&d); err != nil {
		return question{}, err
	}
	d.Title, d.Band, d.Sense, d.FeedsReflector = "", models.Band{}, 0, false
	d.Conductor.Stock, d.Conductor.Material.Name = "", ""
	out := question{Design: d, Hz: q.Hz, outputs: q.Outputs&can | models.Axis}
	out.Outputs = wordsOf(out.outputs)
	if out.outputs&models.Cone != 0 {
		out.Cone = q.Cone
	}
	return out, nil
}

// checkQuestion refuses frequencies and cones that are none.
func checkQuestion(q models.Question) error {
	if len(q.Hz) == 0 {
		return fmt.Errorf("no frequency was asked for; give at least one")
	}
	last := 0.0
	for _, hz := range q.Hz {
		if !(hz > last) || math.IsInf(hz, 0) {
			return fmt.Errorf("a frequency of %g Hz after %g Hz cannot be answered; positive ones, rising, are due", hz, last)
		}
		last = hz
	}
	if q.Outputs&models.Cone != 0 && !(q.Cone > 0 && q.Cone <= math.Pi/2) {
		return fmt.Errorf("a cone of %g rad about the axis cannot be answered; above 0 and at most π/2 is due", q.Cone)
	}
	return nil
}

// line is the question with a number, ready to be written.
func (q question) line(id uint64) ([]byte, error) {
	q.ID = id
	text, err := json.Marshal(&q)
	return append(text, '\n'), err
}
