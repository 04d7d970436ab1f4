package objectives

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"fmt"
	"strconv"
	"strings"
	"time"

	"golang.org/x/sync/singleflight"

	"turnwise/models"
	"turnwise/optimize"
)

// inquiry asks one rung the questions of one evaluation and, where there is
// a memory, keeps what was answered.
type inquiry struct {
	rung    Rung
	memory  Memory
	flights *singleflight.Group // questions that are being asked, by key
	answers []optimize.Answer
	took    time.Duration // by their own account
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
	r, stored, err := q.put(ctx, d, question, a.Key)
	q.took += r.Took
	if err != nil {
		return r, err
	}
	a.Response = stored
	q.answers = append(q.answers, a)
	return r, nil
}

// put asks the simulator, once where the same question is asked by several at
// a time.
func (q *inquiry) put(ctx context.Context, d *models.Design, question models.Question, key string) (models.Response, []byte, error) {
	type reply struct {
		models.Response
		stored []byte
	}
	v, err, _ := q.flights.Do(key, func() (any, error) {
		r, err := q.rung.Simulator.Simulate(ctx, *d, question)
		if err != nil {
			return reply{Response: r}, err
		}
		stored, err := json.Marshal(&r)
		if err != nil {
			err = fmt.Errorf("the answer cannot be kept: %w", err)
		}
		return reply{r, stored}, err
	})
	r := v.(reply)
	return r.Response, r.stored, err
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
