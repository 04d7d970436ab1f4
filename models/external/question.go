package external

import (
	"encoding/json"

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
	if err := q.Check(); err != nil {
		return question{}, err
	}
	if err := helix.Check(&d); err != nil {
		return question{}, err
	}
	out := question{Design: d.Nameless(), Hz: q.Hz, outputs: q.Outputs&can | models.Axis}
	out.Outputs = wordsOf(out.outputs)
	if out.outputs&models.Cone != 0 {
		out.Cone = q.Cone
	}
	return out, nil
}

// line is the question with a number, ready to be written.
func (q question) line(id uint64) ([]byte, error) {
	q.ID = id
	text, err := json.Marshal(&q)
	return append(text, '\n'), err
}
