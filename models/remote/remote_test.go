package remote

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"reflect"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"github.com/nats-io/nats.go"
	"github.com/nats-io/nats.go/jetstream"

	"turnwise/models"
	"turnwise/models/closedform"
	"turnwise/models/moment"
	"turnwise/models/simtest"
)

func TestContract(t *testing.T) {
	b := newBench(t, Options{})
	b.hire("one", 2, closedform.New())
	b.hire("two", 1, closedform.New())
	simtest.Run(t, func(*testing.T) models.Simulator { return b.simulator(closedform.New()) })
}

// What a worker answers is what the model here answers, to the bit, words
// and all, and so is what it refuses.
func TestAnswersAreTheModels(t *testing.T) {
	draft, err := moment.New(moment.Draft)
	if err != nil {
		t.Fatal(err)
	}
	b := newBench(t, Options{})
	b.hire("worker", 2, draft, closedform.New())
	for _, local := range []models.Simulator{draft, closedform.New()} {
		far := b.simulator(local)
		if far.Identity() != local.Identity() {
			t.Fatalf("%q stands for %q", far.Identity(), local.Identity())
		}
		titled := winding(0)
		titled.Title, titled.Conductor.Stock = strings.Repeat("long ", 500), "2 mm"
		wide := winding(1)
		wide.Diameter = models.Law{0.5}
		handless := winding(2)
		handless.Handedness = 0
		for i, d := range []models.Design{titled, winding(1), wide, handless} {
			for _, o := range []models.Outputs{models.Axis, models.Cone | models.Cuts | models.Balance | models.Spread, models.Axis | models.Pattern} {
				q := models.Question{Hz: axis.Hz, Outputs: o, Cone: 0.2}
				want, wantErr := local.Simulate(context.Background(), d, q)
				got, err := far.Simulate(context.Background(), d, q)
				if !reflect.DeepEqual(timeless(got), want) || fmt.Sprint(err) != fmt.Sprint(wantErr) {
					t.Errorf("%s, design %d, outputs %b: %+v, %v\nhere %+v, %v", local.Identity(), i, o, got, err, want, wantErr)
				}
			}
		}
	}
}

// Errors keep their words, and a time limit of the worker's model stays one.
func TestErrors(t *testing.T) {
	b := newBench(t, Options{})
	b.hire("worker", 1, &fake{name: "made", answer: func(_ context.Context, d models.Design, _ models.Question) error {
		switch d.Turns {
		case winding(0).Turns:
			return errMade
		case winding(1).Turns:
			return fmt.Errorf("no answer in 1s: %w", context.DeadlineExceeded)
		}
		panic("what a design")
	}})
	s := b.simulator(&fake{name: "made"})
	for i, want := range []string{errMade.Error(), "no answer in 1s: context deadline exceeded", "the model panicked: what a design"} {
		_, err := s.Simulate(context.Background(), winding(i), axis)
		if err == nil || !strings.HasPrefix(err.Error(), want) || errors.Is(err, context.DeadlineExceeded) != (i == 1) {
			t.Errorf("design %d: %v, %q is due", i, err, want)
		}
	}
	soon(t, "the count of failures", func() bool {
		w := b.queue.Standing().Workers
		return len(w) == 1 && w[0].Answered == 3 && w[0].Failed == 3 && w[0].Present && w[0].Slots == 1 && w[0].Name == "worker"
	})
}

// The same question asked by many at once is computed once; asked later, it
// is a new one.
func TestOneQuestionOnce(t *testing.T) {
	b := newBench(t, Options{})
	gate := make(chan struct{})
	far := &fake{name: "made", answer: func(context.Context, models.Design, models.Question) error { <-gate; return nil }}
	b.hire("worker", 4, far)
	s := b.simulator(&fake{name: "made"})
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			if r, err := s.Simulate(context.Background(), winding(0), axis); err != nil || r.Took <= 0 || !reflect.DeepEqual(timeless(r), plain(axis)) {
				t.Errorf("%+v, %v", r, err)
			}
		})
	}
	soon(t, "everyone's waiting", func() bool {
		b.queue.mu.Lock()
		defer b.queue.mu.Unlock()
		for _, ws := range b.queue.pending {
			return len(ws) == 8
		}
		return false
	})
	close(gate)
	wg.Wait()
	if n := far.asked.Load(); n != 1 {
		t.Errorf("computed %d times", n)
	}
	if _, err := s.Simulate(context.Background(), winding(0), axis); err != nil || far.asked.Load() != 2 {
		t.Errorf("asked again: %v, computed %d times", err, far.asked.Load())
	}
	if err := empty(b); err != nil {
		t.Error(err)
	}
}

// timeless is a response that says nothing of how long it took.
func timeless(r models.Response) models.Response {
	r.Took = 0
	return r
}

// empty demands that no question is left in the queue.
func empty(b *bench) error {
	var left uint64
	for range 300 {
		stream, err := b.queue.js.Stream(context.Background(), streamName)
		if err != nil {
			return err
		}
		if left = stream.CachedInfo().State.Msgs; left == 0 {
			return nil
		}
		time.Sleep(10 * time.Millisecond)
	}
	return fmt.Errorf("%d questions are left in the queue", left)
}

// A question whose worker vanishes is handed out again after its lease; one
// whose worker lives is not, however long it takes; and the late answer of
// the vanished one is dropped.
func TestLease(t *testing.T) {
	const lease = 300 * time.Millisecond
	b := newBench(t, Options{Lease: lease})
	s := b.simulator(&fake{name: "made"})
	identity := s.Identity()
	vanished := make(chan []byte, 1)
	go func() { // takes the question and falls silent
		nc, err := nats.Connect(b.server.URL())
		if err != nil {
			t.Error(err)
			return
		}
		defer nc.Close()
		js, _ := jetstream.New(nc)
		c, err := js.Consumer(context.Background(), streamName, tagOf(identity))
		if err != nil {
			t.Error(err)
			return
		}
		m, err := c.Next(jetstream.FetchMaxWait(20 * time.Second))
		if err != nil {
			t.Error(err)
			return
		}
		vanished <- m.Data()
	}()
	slow := &fake{name: "made", answer: func(context.Context, models.Design, models.Question) error {
		time.Sleep(4 * lease)
		return nil
	}}
	answered := make(chan error, 1)
	go func() {
		_, err := s.Simulate(context.Background(), winding(0), axis)
		answered <- err
	}()
	question := <-vanished
	b.hire("slow", 1, slow)
	b.hire("idle", 1, slow)
	if err := <-answered; err != nil {
		t.Fatal(err)
	}
	if n := slow.asked.Load(); n != 1 {
		t.Errorf("a question under a renewed lease was computed %d times", n)
	}
	late := newAnswer(identity, "vanished", plain(axis), nil).bytes()
	if err := b.queue.nc.Publish(answerPrefix+digest(question), late); err != nil {
		t.Fatal(err)
	}
	soon(t, "the late answer", func() bool { return b.queue.Standing().Dropped == 1 })
	if err := empty(b); err != nil {
		t.Error(err)
	}
}

// A worker that leaves hands back what it has; one that joins later answers.
func TestLeaving(t *testing.T) {
	b := newBench(t, Options{})
	s := b.simulator(&fake{name: "made"})
	hangs := &fake{name: "made", answer: func(ctx context.Context, _ models.Design, _ models.Question) error {
		<-ctx.Done()
		return ctx.Err()
	}}
	leave := b.hire("leaves", 1, hangs)
	answered := make(chan error, 1)
	go func() {
		_, err := s.Simulate(context.Background(), winding(0), axis)
		answered <- err
	}()
	soon(t, "the question", func() bool { return hangs.asked.Load() == 1 })
	if err := leave(); err != nil {
		t.Errorf("leaving: %v", err)
	}
	select {
	case err := <-answered:
		t.Fatalf("answered by nobody: %v", err)
	default:
	}
	b.hire("joins", 1, &fake{name: "made"})
	if err := <-answered; err != nil {
		t.Error(err)
	}
}

// A question that nobody waits for any more leaves the queue.
func TestCancelled(t *testing.T) {
	b := newBench(t, Options{})
	s := b.simulator(&fake{name: "made"})
	for _, limit := range []time.Duration{0, 50 * time.Millisecond} {
		ctx, cancel := context.WithTimeout(context.Background(), limit)
		if _, err := s.Simulate(ctx, winding(0), axis); !errors.Is(err, context.DeadlineExceeded) {
			t.Errorf("after %v: %v", limit, err)
		}
		cancel()
		if err := empty(b); err != nil {
			t.Error(err)
		}
	}
}

// A worker with another model is refused, and both sides say so; one that
// has several models answers for the one that is asked.
func TestForeignIdentity(t *testing.T) {
	b := newBench(t, Options{})
	foreign := &fake{name: "made 2"}
	done := make(chan error, 1)
	s := b.simulator(&fake{name: "made 1"})
	go func() {
		done <- (&Worker{Name: "foreign", Models: []models.Simulator{foreign}}).Run(context.Background(), b.server.URL(), Access{})
	}()
	err := <-done
	if !errors.Is(err, ErrRefused) || !strings.Contains(err.Error(), `asks of "made 1"; the worker has "made 2"`) {
		t.Errorf("the worker says %v", err)
	}
	if said := b.said.all(); !strings.Contains(said, `the worker "foreign" is refused: the search asks of "made 1"; the worker has "made 2"`) {
		t.Errorf("the search says %s", said)
	}
	if st := b.queue.Standing(); st.Refused != 1 || len(st.Workers) != 0 {
		t.Errorf("standing %+v", st)
	}
	mine := &fake{name: "made 1"}
	b.hire("both", 1, foreign, mine)
	if _, err := s.Simulate(context.Background(), winding(0), axis); err != nil {
		t.Error(err)
	}
	if foreign.asked.Load() != 0 || mine.asked.Load() != 1 {
		t.Errorf("the foreign model was asked %d times, the right one %d", foreign.asked.Load(), mine.asked.Load())
	}
}

// A flood of messages that are none is counted and dropped, and the
// questions between them are answered.
func TestMalformed(t *testing.T) {
	b := newBench(t, Options{})
	s := b.simulator(&fake{name: "made"})
	tag := tagOf("made")
	nc, err := nats.Connect(b.server.URL())
	if err != nil {
		t.Fatal(err)
	}
	defer nc.Close()
	js, err := jetstream.New(nc)
	if err != nil {
		t.Fatal(err)
	}
	texts := []string{
		"", "{", "null", "[]", `"made"`, strings.Repeat("[", 100_000), `{"identity":"made"}`, `{"identity":"made","hz":[1],"hz2":1}`,
		`{"identity":"made","response":{"samples":[],"answered":1}}`, `{"identity":"made","response":null,"error":""}`, "\x00\xff",
		`{"id":"","name":"","slots":0,"models":[]}`, `{"identity":"other","error":"so"}`, strings.Repeat("x", mostMessage-1000),
	}
	flood := func(i int) {
		text := []byte(texts[i%len(texts)])
		nc.Publish(helloSubject, text)
		nc.Publish(answerPrefix+fmt.Sprint(i), text)
		js.Publish(context.Background(), fmt.Sprint(askSubject, tag, ".", i), text)
	}
	for i := range 3 * len(texts) {
		flood(i)
	}
	far := &fake{name: "made"}
	b.hire("worker", 2, far)
	var spoilt atomic.Int64
	spoil, err := nc.Subscribe(askSubject+">", func(m *nats.Msg) { // answers before the worker does
		key := m.Subject[strings.LastIndexByte(m.Subject, '.')+1:]
		nc.Publish(answerPrefix+key, []byte(texts[int(spoilt.Add(1))%len(texts)]))
	})
	if err != nil {
		t.Fatal(err)
	}
	defer spoil.Unsubscribe()
	nc.Flush()
	for i := range 40 {
		flood(1000 + i)
		r, err := s.Simulate(context.Background(), winding(i), axis)
		if err != nil || r.Took <= 0 || !reflect.DeepEqual(timeless(r), plain(axis)) {
			t.Fatalf("question %d: %+v, %v", i, r, err)
		}
	}
	if st := b.queue.Standing(); st.Malformed < 3*len(texts)+40 || st.Dropped < 3*len(texts) {
		t.Errorf("counted %+v", st)
	}
}

// An answer is dropped unless it is one to the question.
func TestReadAnswer(t *testing.T) {
	good := func(change func(*answer)) []byte {
		a := newAnswer("made", "w", plain(axis), nil)
		change(&a)
		text, err := json.Marshal(a)
		if err != nil {
			t.Fatal(err)
		}
		return text
	}
	if _, err := readAnswer(good(func(*answer) {}), "made", axis); err != nil {
		t.Fatal(err)
	}
	for what, change := range map[string]func(*answer){
		"another model":       func(a *answer) { a.Identity = "made 2" },
		"both":                func(a *answer) { a.Error = "so" },
		"neither":             func(a *answer) { a.Response = nil },
		"a frequency less":    func(a *answer) { a.Response.Samples = a.Response.Samples[1:] },
		"another frequency":   func(a *answer) { a.Response.Samples[1].Hz++ },
		"no axis":             func(a *answer) { a.Response.Answered = 0 },
		"more than was asked": func(a *answer) { a.Response.Answered |= models.Cuts },
		"efficiency above 1":  func(a *answer) { a.Response.Samples[0].Efficiency = 1.5 },
		"negative time":       func(a *answer) { a.Took = -1 },
		"negative gain":       func(a *answer) { a.Response.Samples[0].Gain.Left = -1 },
	} {
		if _, err := readAnswer(good(change), "made", axis); err == nil {
			t.Errorf("an answer with %s is taken", what)
		}
	}
}

// A queue that is lost with all it holds, and comes back empty, costs time
// and nothing else.
func TestQueueLost(t *testing.T) {
	server, err := Serve("127.0.0.1:0", Access{})
	if err != nil {
		t.Fatal(err)
	}
	address := strings.TrimPrefix(server.URL(), "nats://")
	q, err := Open(context.Background(), server.URL(), Access{}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer q.Close()
	s, err := q.Simulator(context.Background(), &fake{name: "made"})
	if err != nil {
		t.Fatal(err)
	}
	gate := make(chan struct{})
	far := &fake{name: "made", answer: func(context.Context, models.Design, models.Question) error { <-gate; return nil }}
	ctx, cancel := context.WithCancel(context.Background())
	done := make(chan error, 1)
	go func() {
		done <- (&Worker{Name: "w", Slots: 2, Models: []models.Simulator{far}}).Run(ctx, "nats://"+address, Access{})
	}()
	var wg sync.WaitGroup
	for i := range 6 {
		wg.Go(func() {
			if _, err := s.Simulate(context.Background(), winding(i), axis); err != nil {
				t.Error(err)
			}
		})
	}
	soon(t, "work", func() bool { return far.asked.Load() == 2 })
	server.Close()
	time.Sleep(100 * time.Millisecond)
	if server, err = Serve(address, Access{}); err != nil {
		t.Fatal(err)
	}
	defer server.Close()
	close(gate)
	wg.Wait()
	cancel()
	if err := <-done; err != nil {
		t.Error(err)
	}
}

// A question that every worker vanished over is a failure in the end.
func TestMostHandouts(t *testing.T) {
	b := newBench(t, Options{})
	s := b.simulator(&fake{name: "made"})
	answered := make(chan error, 1)
	go func() {
		_, err := s.Simulate(context.Background(), winding(0), axis)
		answered <- err
	}()
	c, err := b.queue.js.Consumer(context.Background(), streamName, tagOf("made"))
	if err != nil {
		t.Fatal(err)
	}
	for range mostHandouts {
		m, err := c.Next(jetstream.FetchMaxWait(20 * time.Second))
		if err != nil {
			t.Fatal(err)
		}
		m.Nak()
	}
	b.hire("worker", 1, &fake{name: "made"})
	if err := <-answered; err == nil || !strings.Contains(err.Error(), "handed out 20 times") {
		t.Errorf("%v", err)
	}
}
