package objectives

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"strconv"
	"strings"

	"turnwise/models"
	"turnwise/optimize"
)

// inquiry asks one rung the questions of one evaluation and, where there is
// a memory, keeps what was answered.
type inquiry struct {
	rung    Rung
	memory  Memory
	answers []optimize.Answer
}

// ask puts a question about a design: to the memory first.
func (q *inquiry) ask(ctx context.Context, d *models.Design, question models.Question) (models.Response, error) {
	if q.memory == nil {
		return q.rung.Simulator.Simulate(ctx, *d, question)
	}
	a := optimize.Answer{Design: d.Hash(), Model: q.rung.Simulator.Identity()}
	a.Key = QuestionKey(a.Design, question, a.Model)
	if stored, ok := q.memory.Recall(a.Key); ok {
		var r models.Response
		if err := json.Unmarshal(stored, &r); err == nil {
			a.Response = stored
			q.answers = append(q.answers, a)
			return r, nil
		}
	}
	r, err := q.rung.Simulator.Simulate(ctx, *d, question)
	if err != nil {
		return r, err
	}
	if a.Response, err = json.Marshal(&r); err != nil {
		return r, fmt.Errorf("the answer cannot be kept: %w", err)
	}
	q.answers = append(q.answers, a)
	return r, nil
}

// QuestionKey is what a stored answer is found by: SHA-256 of the design's
// hash, the frequencies, the outputs asked and the model's identity.
func QuestionKey(designHash string, q models.Question, identity string) string {
	var b strings.Builder
	b.WriteString(designHash)
	fmt.Fprintf(&b, "\noutputs %d", q.Outputs|models.Axis)
	if q.Outputs&models.Cone != 0 {
		b.WriteString(" cone " + strconv.FormatFloat(q.Cone, 'g', -1, 64))
	}
	b.WriteString("\nhz")
	for _, f := range q.Hz {
		b.WriteByte(' ')
		b.WriteString(strconv.FormatFloat(f, 'g', -1, 64))
	}
	b.WriteString("\nmodel " + identity)
	sum := sha256.Sum256([]byte(b.String()))
	return hex.EncodeToString(sum[:])
}
