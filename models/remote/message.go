package remote

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"time"

	"turnwise/models"
)

// Bounds of what is sent.
const (
	mostMessage     = 1 << 20 // bytes; what a NATS server allows unless told otherwise
	mostFrequencies = 512     // of a question that is sent; more fit no message
	mostReason      = 2000    // bytes, of an error that is passed on
	mostModels      = 64      // that a worker offers
	mostName        = 200     // bytes
)

// The words that both sides use.
const (
	root         = "turnwise.1."
	askSubject   = root + "ask."
	answerPrefix = root + "answer."
	helloSubject = root + "hello"
	streamName   = "TURNWISE_1"
)

// digest is a name for what a text says, as a subject or a consumer can hold
// it.
func digest(text []byte) string {
	sum := sha256.Sum256(text)
	return hex.EncodeToString(sum[:16])
}

// tagOf names a model's identity.
func tagOf(identity string) string { return digest([]byte(identity)) }

// question is a question as it is sent. It shows of the design what makes its
// hash and no more, so that equal questions are equal bytes.
type question struct {
	Identity string         `json:"identity"`
	Design   models.Design  `json:"design"`
	Hz       []float64      `json:"hz"`
	Outputs  models.Outputs `json:"outputs"`
	Cone     float64        `json:"cone_rad,omitzero"`
}

// pack writes a question.
func pack(identity string, d models.Design, q models.Question) ([]byte, error) {
	text, err := json.Marshal(question{identity, d.Nameless(), q.Hz, q.Outputs, q.Cone})
	if err != nil {
		return nil, fmt.Errorf("the question cannot be asked: %w", err)
	}
	return text, nil
}

// unpack reads a question that lay under a key.
func unpack(text []byte, key string) (question, error) {
	var q question
	if digest(text) != key {
		return q, errors.New("is not what its key says")
	}
	if err := strictly(text, &q); err != nil {
		return q, err
	}
	if len(q.Hz) > mostFrequencies {
		return q, fmt.Errorf("asks for %d frequencies; at most %d are due", len(q.Hz), mostFrequencies)
	}
	return q, nil
}

// answer is an answer as it is sent: a response, or why there is none.
type answer struct {
	Identity  string           `json:"identity"`
	Worker    string           `json:"worker"`
	Response  *models.Response `json:"response,omitempty"`
	Statement string           `json:"statement,omitempty"`
	Error     string           `json:"error,omitempty"`
	TimedOut  bool             `json:"timed_out,omitempty"`
	Took      time.Duration    `json:"took_ns"`
}

// refusal is an error of the model on the other side, in its own words.
type refusal struct {
	words    string
	timedOut bool
}

func (r *refusal) Error() string { return r.words }

// Is makes a time limit of the worker's model one of the asker's.
func (r *refusal) Is(target error) bool { return r.timedOut && target == context.DeadlineExceeded }

// newAnswer is what a model said, as it is sent.
func newAnswer(identity, worker string, r models.Response, err error) answer {
	a := answer{Identity: identity, Worker: worker}
	if err != nil {
		a.Error, a.TimedOut = clip(err.Error(), mostReason), errors.Is(err, context.DeadlineExceeded)
		return a
	}
	a.Response, a.Statement = &r, r.Statement
	return a
}

// bytes writes an answer; one that cannot be written or is too long becomes
// the failure to do so.
func (a answer) bytes() []byte {
	text, err := json.Marshal(a)
	if err == nil && len(text) > mostMessage {
		err = fmt.Errorf("it has %d bytes; at most %d can be sent", len(text), mostMessage)
	}
	if err == nil {
		return text
	}
	text, err = json.Marshal(newAnswer(a.Identity, a.Worker, models.Response{}, fmt.Errorf("the answer cannot be sent: %w", err)))
	if err != nil {
		panic("remote: an answer of plain text cannot be written")
	}
	return text
}

// readAnswer reads an answer to a question. What is no sound answer to it is
// malformed.
func readAnswer(text []byte, identity string, q models.Question) (answer, error) {
	var a answer
	if err := strictly(text, &a); err != nil {
		return a, err
	}
	switch {
	case a.Identity != identity:
		return a, fmt.Errorf("comes from the model %q", clip(a.Identity, mostName))
	case (a.Response == nil) == (a.Error == ""):
		return a, errors.New("is neither a response nor an error")
	case a.Took < 0:
		return a, errors.New("was there before it was asked")
	case a.Error != "":
		return a, nil
	}
	return a, sound(a.Response, q)
}

// sound demands a sample for each frequency, with the axis answered and
// nothing that was not asked.
func sound(r *models.Response, q models.Question) error {
	switch extra := r.Answered &^ (q.Outputs | models.Axis); {
	case r.Answered&models.Axis == 0:
		return errors.New("lacks the axis")
	case extra != 0:
		return fmt.Errorf("has outputs %b that were not asked", extra)
	case !slices.EqualFunc(r.Samples, q.Hz, func(s models.Sample, hz float64) bool { return s.Hz == hz }):
		return fmt.Errorf("has not the %d frequencies that were asked", len(q.Hz))
	}
	for i := range r.Samples {
		if s := &r.Samples[i]; !(s.Efficiency >= 0 && s.Efficiency <= 1) || math.Abs(s.AxialRatio) > models.AxialRatioCap || s.Directivity < 0 || s.Gain.Right < 0 || s.Gain.Left < 0 {
			return fmt.Errorf("is impossible at %g Hz", s.Hz)
		}
	}
	return nil
}

// hello is how a worker presents itself, and goes on to.
type hello struct {
	ID     string   `json:"id"`
	Name   string   `json:"name"`
	Slots  int      `json:"slots"`
	Models []string `json:"models"` // identities
	// Malformed counts what the worker found in the queue that was no
	// question.
	Malformed int `json:"malformed,omitempty"`
}

func readHello(text []byte) (hello, error) {
	var h hello
	if err := strictly(text, &h); err != nil {
		return h, err
	}
	if h.ID == "" || len(h.ID) > mostName || len(h.Name) > mostName || len(h.Models) == 0 || len(h.Models) > mostModels || h.Slots < 1 {
		return h, errors.New("is no hello")
	}
	return h, nil
}

// greeting is what a search replies to a worker's hello: the identities it
// asks of that the worker has, or why it has no use for it.
type greeting struct {
	Welcome []string `json:"welcome,omitempty"`
	Refused string   `json:"refused,omitempty"`
}

// strictly reads one JSON value whose keys are all known.
func strictly(text []byte, into any) error {
	if len(text) > mostMessage {
		return fmt.Errorf("has %d bytes; at most %d are due", len(text), mostMessage)
	}
	d := json.NewDecoder(bytes.NewReader(text))
	d.DisallowUnknownFields()
	if err := d.Decode(into); err != nil {
		return err
	}
	if _, err := d.Token(); !errors.Is(err, io.EOF) {
		return errors.New("goes on after its end")
	}
	return nil
}

// clip is the start of a text that may be too long.
func clip(text string, most int) string {
	if len(text) <= most {
		return text
	}
	return text[:most] + "…"
}
