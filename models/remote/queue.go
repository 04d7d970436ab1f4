package remote

import (
	"context"
	"encoding/json"
	"fmt"
	"strings"
	"sync"
	"time"

	"github.com/nats-io/nats.go"
	"github.com/nats-io/nats.go/jetstream"

	"turnwise/models"
)

// Options say how a search uses a queue. Zero fields are read as their
// defaults.
type Options struct {
	// Lease is how long a worker may be silent over a question before it is
	// handed out again; 10 s.
	Lease time.Duration
	// Say takes what a person should know: workers that join or are refused.
	Say func(string)
}

// Queue is a search's end of a queue. It is safe for concurrent use; it needs
// a Close.
type Queue struct {
	nc    *nats.Conn
	js    jetstream.JetStream
	lease time.Duration
	say   func(string)

	mu         sync.Mutex
	identities map[string]bool      // that are asked of
	pending    map[string][]*waiter // by key
	again      chan struct{}        // closed: the queue was away, ask again
	roster     roster
	dropped    int // answers that nobody waited for
	malformed  int // messages that are none
}

// waiter is one who waits for an answer.
type waiter struct{ answers chan []byte }

// Open connects to a queue that is there already.
func Open(ctx context.Context, address string, a Access, o Options) (*Queue, error) {
	return open(o, func(say func(string), more ...nats.Option) (*nats.Conn, error) {
		return dial(ctx, address, a, say, more...)
	})
}

// Open connects to one's own queue, inside this program.
func (s *Server) Open(o Options) (*Queue, error) {
	return open(o, func(_ func(string), more ...nats.Option) (*nats.Conn, error) {
		return nats.Connect("", append(more, nats.InProcessServer(s.nats), nats.Token(s.token))...)
	})
}

func open(o Options, connect func(say func(string), more ...nats.Option) (*nats.Conn, error)) (*Queue, error) {
	q := &Queue{
		lease: o.Lease, say: o.Say, identities: map[string]bool{}, pending: map[string][]*waiter{}, again: make(chan struct{}),
		roster: roster{workers: map[string]*member{}},
	}
	if q.lease <= 0 {
		q.lease = 10 * time.Second
	}
	if q.say == nil {
		q.say = func(string) {}
	}
	var err error
	if q.nc, err = connect(q.say, nats.ReconnectHandler(func(*nats.Conn) { q.wake() })); err != nil {
		return nil, err
	}
	if q.js, err = jetstream.New(q.nc); err == nil {
		err = q.listen()
	}
	if err == nil {
		err = q.able()
	}
	if err != nil {
		q.Close()
		return nil, err
	}
	return q, nil
}

// listen hears answers and workers.
func (q *Queue) listen() error {
	if _, err := q.nc.Subscribe(answerPrefix+"*", q.hear); err != nil {
		return err
	}
	_, err := q.nc.Subscribe(helloSubject, q.greet)
	return err
}

// able demands of a server that it keeps streams.
func (q *Queue) able() error {
	ctx, cancel := context.WithTimeout(context.Background(), 5*time.Second)
	defer cancel()
	if _, err := q.js.AccountInfo(ctx); err != nil {
		return fmt.Errorf("the server keeps no streams, which a queue needs: %w", err)
	}
	return nil
}

// Close lets go of the queue. Whoever still waits for an answer waits for its
// context.
func (q *Queue) Close() { q.nc.Close() }

// wake has everyone ask again who waits.
func (q *Queue) wake() {
	q.mu.Lock()
	defer q.mu.Unlock()
	close(q.again)
	q.again = make(chan struct{})
}

func (q *Queue) awake() <-chan struct{} {
	q.mu.Lock()
	defer q.mu.Unlock()
	return q.again
}

// serve makes the queue one for the questions to a model.
func (q *Queue) serve(ctx context.Context, identity string) error {
	q.mu.Lock()
	q.identities[identity] = true
	q.mu.Unlock()
	return q.prepare(ctx, tagOf(identity))
}

// prepare makes the stream and a model's consumer, where they are not there.
func (q *Queue) prepare(ctx context.Context, tag string) error {
	ctx, cancel := context.WithTimeout(ctx, 5*time.Second)
	defer cancel()
	stream, err := q.js.CreateOrUpdateStream(ctx, jetstream.StreamConfig{
		Name: streamName, Subjects: []string{askSubject + "*.*"}, Retention: jetstream.WorkQueuePolicy, Storage: jetstream.MemoryStorage,
		// A question that is there already is not taken a second time.
		MaxMsgsPerSubject: 1, Discard: jetstream.DiscardNew, DiscardNewPerSubject: true,
		MaxMsgSize: mostMessage, MaxMsgs: 100_000, MaxAge: 24 * time.Hour,
	})
	if err != nil {
		return fmt.Errorf("the queue: %w", err)
	}
	_, err = stream.CreateOrUpdateConsumer(ctx, jetstream.ConsumerConfig{
		Durable: tag, FilterSubject: askSubject + tag + ".*", AckPolicy: jetstream.AckExplicitPolicy, AckWait: q.lease,
		MaxAckPending: 100_000, MaxWaiting: 100_000,
	})
	if err != nil {
		return fmt.Errorf("the queue: %w", err)
	}
	return nil
}

// put lays a question into the queue, and reports whether it is there
// already.
func (q *Queue) put(ctx context.Context, subject string, text []byte) (there bool, err error) {
	ctx, cancel := context.WithTimeout(ctx, 5*time.Second)
	defer cancel()
	_, err = q.js.Publish(ctx, subject, text)
	if err != nil && strings.Contains(err.Error(), "maximum messages per subject") {
		return true, nil
	}
	return false, err
}

// take takes a question out of the queue that nobody waits for any more.
func (q *Queue) take(subject string) {
	filter, err := json.Marshal(map[string]string{"filter": subject})
	if err != nil {
		panic("remote: a subject cannot be written")
	}
	// Where it fails, a worker answers in vain.
	_, _ = q.nc.Request("$JS.API.STREAM.PURGE."+streamName, filter, time.Second)
}

// ask asks until there is an answer, or no time.
func (q *Queue) ask(ctx context.Context, identity string, text []byte, asked models.Question) (answer, error) {
	tag, key := tagOf(identity), digest(text)
	subject := askSubject + tag + "." + key
	w := q.wait(key)
	a, err := q.await(ctx, w, identity, asked, func() (bool, error) { return q.put(ctx, subject, text) })
	if alone := q.leave(key, w); alone && err != nil {
		q.take(subject)
	}
	return a, err
}

// firstLook is when a question is put again that was in the queue already. It
// may be one that was answered just now, and on its way out.
const firstLook = 10 * time.Millisecond

// await puts a question, again and again, until there is an answer.
func (q *Queue) await(ctx context.Context, w *waiter, identity string, asked models.Question, put func() (bool, error)) (answer, error) {
	look := firstLook
	for {
		again := q.awake()
		there, err := put()
		switch {
		case err != nil && !q.recover(ctx, tagOf(identity)):
			return answer{}, ctx.Err()
		case err != nil:
			continue
		case there:
			look = min(2*look, q.lease)
		default:
			look = q.lease
		}
		select {
		case got := <-w.answers:
			if a, err := readAnswer(got, identity, asked); err == nil {
				q.credit(a)
				return a, nil
			}
			q.count(&q.malformed)
			look = firstLook
		case <-ctx.Done():
			return answer{}, ctx.Err()
		case <-again:
		case <-time.After(look):
		}
	}
}

// recover waits a moment and makes what the queue lacks. It reports whether
// there is time left.
func (q *Queue) recover(ctx context.Context, tag string) bool {
	select {
	case <-ctx.Done():
		return false
	case <-time.After(retryEvery):
	}
	// What fails now is tried again with the question.
	_ = q.prepare(ctx, tag)
	return ctx.Err() == nil
}

// wait makes a waiter for the answer to a question.
func (q *Queue) wait(key string) *waiter {
	w := &waiter{answers: make(chan []byte, 1)}
	q.mu.Lock()
	defer q.mu.Unlock()
	q.pending[key] = append(q.pending[key], w)
	return w
}

// leave ends the waiting, and reports whether nobody waits any more.
func (q *Queue) leave(key string, w *waiter) bool {
	q.mu.Lock()
	defer q.mu.Unlock()
	var rest []*waiter
	for _, other := range q.pending[key] {
		if other != w {
			rest = append(rest, other)
		}
	}
	if len(rest) > 0 {
		q.pending[key] = rest
		return false
	}
	delete(q.pending, key)
	return true
}

// hear gives an answer to those who wait for it.
func (q *Queue) hear(m *nats.Msg) {
	q.mu.Lock()
	defer q.mu.Unlock()
	waiters := q.pending[strings.TrimPrefix(m.Subject, answerPrefix)]
	if len(waiters) == 0 {
		q.dropped++
	}
	for _, w := range waiters {
		select {
		case w.answers <- m.Data:
		default:
			q.dropped++
		}
	}
}

// greet welcomes a worker, or refuses it.
func (q *Queue) greet(m *nats.Msg) {
	h, err := readHello(m.Data)
	if err != nil {
		q.count(&q.malformed)
		return
	}
	g, news := q.judge(h)
	if news != "" {
		q.say(news)
	}
	if text, err := json.Marshal(g); err == nil && (len(g.Welcome) > 0 || g.Refused != "") {
		m.Respond(text)
	}
}

// judge says what a worker is good for, and what is new about it.
func (q *Queue) judge(h hello) (g greeting, news string) {
	q.mu.Lock()
	defer q.mu.Unlock()
	if len(q.identities) == 0 {
		return g, ""
	}
	for _, identity := range h.Models {
		if q.identities[identity] {
			g.Welcome = append(g.Welcome, identity)
		}
	}
	if len(g.Welcome) == 0 {
		g.Refused = fmt.Sprintf("the search asks of %s; the worker has %s", listed(q.identities), strings.Join(quoted(h.Models), ", "))
	}
	known := q.roster.see(h, g.Refused != "")
	switch {
	case known:
	case g.Refused != "":
		news = fmt.Sprintf("the worker %q is refused: %s", h.Name, g.Refused)
	default:
		news = fmt.Sprintf("the worker %q takes %d questions at a time", h.Name, h.Slots)
	}
	return g, news
}

// credit notes who answered.
func (q *Queue) credit(a answer) {
	q.mu.Lock()
	defer q.mu.Unlock()
	q.roster.credit(a.Worker, a.Error != "")
}

func (q *Queue) count(n *int) {
	q.mu.Lock()
	defer q.mu.Unlock()
	*n++
}
