package remote

import (
	"context"
	"crypto/rand"
	"encoding/json"
	"errors"
	"fmt"
	"runtime/debug"
	"strings"
	"sync"
	"sync/atomic"
	"time"

	"github.com/nats-io/nats.go"

	"turnwise/models"
)

// Worker answers the questions of searches with models of its own.
type Worker struct {
	Name   string // for people
	Slots  int    // questions at a time; 1
	Models []models.Simulator
	// Say takes what a person should know.
	Say func(string)
}

// The worker's clocks.
const (
	helloEvery = time.Second
	patience   = 2 * time.Second // with a queue where no search has a use for the worker
	nextWait   = time.Second     // for one question, before another model's turn
)

// mostHandouts is how often a question is handed out before it counts as one
// that ends its workers.
const mostHandouts = 20

// ErrRefused is a worker that no search has a use for.
var ErrRefused = errors.New("the worker is refused")

// Run answers questions until the context ends; what runs then is handed back
// to the queue at once. It waits for a queue that is not there, however often
// that comes and goes. A queue that does not let it in is an error, and so is
// a search whose model it does not have.
func (w *Worker) Run(ctx context.Context, address string, a Access) error {
	ctx, cancel := context.WithCancelCause(ctx)
	defer cancel(nil)
	shift := &shift{
		Worker: w, id: rand.Text(), models: map[string]models.Simulator{}, taking: map[string]bool{},
		slots: make(chan struct{}, max(w.Slots, 1)), greetings: make(chan greeting, 64),
	}
	for _, m := range w.Models {
		shift.models[m.Identity()] = m
	}
	nc, err := dial(ctx, address, a, w.say,
		nats.ClosedHandler(func(nc *nats.Conn) { cancel(closed(nc, address)) }),
		nats.DisconnectErrHandler(func(*nats.Conn, error) {
			if ctx.Err() == nil {
				w.say("the queue is away; waiting for it")
			}
		}),
		nats.ReconnectHandler(func(*nats.Conn) { w.say("the queue is back") }))
	if err != nil {
		return err
	}
	defer nc.Close()
	shift.nc = nc
	if shift.js, err = nc.JetStream(); err != nil {
		return err
	}
	w.say(fmt.Sprintf("at the queue %s, %d questions at a time", address, cap(shift.slots)))
	err = shift.stand(ctx)
	cancel(nil)
	shift.taken.Wait()
	nc.FlushTimeout(time.Second)
	return err
}

func (w *Worker) say(text string) {
	if w.Say != nil {
		w.Say(text)
	}
}

// closed is why a connection was closed for good.
func closed(nc *nats.Conn, address string) error {
	if err := nc.LastError(); err != nil {
		return fmt.Errorf("the queue at %s: %w", address, plainly(err))
	}
	return fmt.Errorf("the queue at %s closed the connection", address)
}

// shift is a worker at its queue.
type shift struct {
	*Worker
	id        string
	nc        *nats.Conn
	js        nats.JetStreamContext
	models    map[string]models.Simulator // by identity
	slots     chan struct{}
	greetings chan greeting
	taking    map[string]bool // identities whose questions are taken
	taken     sync.WaitGroup
	malformed atomic.Int64
}

// stand presents the worker again and again and takes the questions of those
// who welcome it.
func (s *shift) stand(ctx context.Context) error {
	inbox := nats.NewInbox()
	_, err := s.nc.Subscribe(inbox, func(m *nats.Msg) {
		var g greeting
		if strictly(m.Data, &g) != nil {
			s.malformed.Add(1)
			return
		}
		select {
		case s.greetings <- g:
		default:
		}
	})
	if err != nil {
		return err
	}
	tick := time.NewTicker(helloEvery)
	defer tick.Stop()
	var refused time.Time
	for {
		s.present(inbox)
		for waiting := true; waiting; {
			select {
			case g := <-s.greetings:
				switch {
				case s.welcome(ctx, g.Welcome):
					refused = time.Time{}
				case g.Refused == "":
				case refused.IsZero():
					refused = time.Now()
				case time.Since(refused) > patience:
					return fmt.Errorf("%w: %s", ErrRefused, clip(g.Refused, mostReason))
				}
			case <-tick.C:
				waiting = false
			case <-ctx.Done():
				if cause := context.Cause(ctx); !errors.Is(cause, context.Canceled) {
					return cause
				}
				return nil
			}
		}
	}
}

// present says hello.
func (s *shift) present(inbox string) {
	h := hello{ID: s.id, Name: s.Name, Slots: cap(s.slots), Malformed: int(s.malformed.Load())}
	for _, m := range s.Models {
		h.Models = append(h.Models, m.Identity())
	}
	text, err := json.Marshal(h)
	if err != nil {
		panic("remote: a hello cannot be written")
	}
	// One that does not get through is said again.
	_ = s.nc.PublishRequest(helloSubject, inbox, text)
}

// welcome takes the questions to the models that are welcome, and reports
// whether there are any.
func (s *shift) welcome(ctx context.Context, identities []string) bool {
	any := false
	for _, identity := range identities {
		model, mine := s.models[identity]
		any = any || mine
		if !mine || s.taking[identity] {
			continue
		}
		s.taking[identity] = true
		s.say("answers questions to " + identity)
		for range cap(s.slots) {
			s.taken.Go(func() { s.take(ctx, identity, model) })
		}
	}
	return any
}

// take takes the questions to one model, one at a time.
func (s *shift) take(ctx context.Context, identity string, model models.Simulator) {
	tag := tagOf(identity)
	for ctx.Err() == nil {
		// Where the queue lost what it held, or is away, this fails.
		if consumer, err := s.js.ConsumerInfo(streamName, tag, nats.Context(ctx)); err == nil {
			if sub, err := s.js.PullSubscribe(askSubject+tag+".*", tag, nats.Bind(streamName, tag)); err == nil {
				for err == nil && ctx.Err() == nil {
					err = s.next(ctx, sub, consumer.Config.AckWait, model)
				}
				sub.Unsubscribe()
			}
		}
		select {
		case <-ctx.Done():
		case <-time.After(retryEvery):
		}
	}
}

// next takes one question, if one comes soon, once a slot is free.
func (s *shift) next(ctx context.Context, sub *nats.Subscription, lease time.Duration, model models.Simulator) error {
	select {
	case s.slots <- struct{}{}:
		defer func() { <-s.slots }()
	case <-ctx.Done():
		return nil
	}
	ms, err := sub.Fetch(1, nats.MaxWait(nextWait))
	switch {
	case errors.Is(err, nats.ErrTimeout):
		return nil
	case err != nil:
		return err
	}
	return s.serve(ctx, ms[0], lease, model)
}

// serve answers one question.
func (s *shift) serve(ctx context.Context, m *nats.Msg, lease time.Duration, model models.Simulator) error {
	if ctx.Err() != nil {
		return m.Nak()
	}
	key := m.Subject[strings.LastIndexByte(m.Subject, '.')+1:]
	q, err := unpack(m.Data, key)
	if err == nil && q.Identity != model.Identity() {
		err = errors.New("is another model's")
	}
	if err != nil {
		if s.malformed.Add(1) == 1 {
			s.say("something in the queue is no question: " + clip(err.Error(), mostReason))
		}
		return m.Term()
	}
	renew := hold(m, lease)
	began := time.Now()
	r, err := s.simulate(ctx, m, q, model)
	took := time.Since(began)
	renew()
	if ctx.Err() != nil {
		return m.Nak()
	}
	a := newAnswer(q.Identity, s.id, r, err)
	a.Took = took
	if err := s.nc.Publish(answerPrefix+key, a.bytes()); err != nil {
		return m.Nak()
	}
	return m.Ack()
}

// simulate asks the model; a panic is its failure to answer.
func (s *shift) simulate(ctx context.Context, m *nats.Msg, q question, model models.Simulator) (r models.Response, err error) {
	if meta, err := m.Metadata(); err == nil && meta.NumDelivered > mostHandouts {
		return r, fmt.Errorf("handed out %d times, and no worker came back with an answer", mostHandouts)
	}
	defer func() {
		if p := recover(); p != nil {
			err = fmt.Errorf("the model panicked: %v\n%s", p, clip(string(debug.Stack()), mostReason))
		}
	}()
	return model.Simulate(ctx, q.Design, models.Question{Hz: q.Hz, Outputs: q.Outputs, Cone: q.Cone})
}

// hold renews the lease of a question until it is let go.
func hold(m *nats.Msg, lease time.Duration) (letGo func()) {
	done := make(chan struct{})
	go func() {
		tick := time.NewTicker(max(lease/3, 10*time.Millisecond))
		defer tick.Stop()
		for {
			select {
			case <-done:
				return
			case <-tick.C:
				m.InProgress()
			}
		}
	}()
	return func() { close(done) }
}
