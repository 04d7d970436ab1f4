package remote

import (
	"context"
	"errors"
	"fmt"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"turnwise/models"
)

// bench is a queue on loopback with the search's end of it.
type bench struct {
	t      testing.TB
	server *Server
	queue  *Queue
	said   notes
}

func newBench(t testing.TB, o Options) *bench {
	t.Helper()
	server, err := Serve("127.0.0.1:0", Access{})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(server.Close)
	b := &bench{t: t, server: server}
	o.Say = b.said.add
	if b.queue, err = server.Open(o); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(b.queue.Close)
	return b
}

// simulator stands for a model at the bench's queue.
func (b *bench) simulator(inner models.Simulator) *Simulator {
	b.t.Helper()
	s, err := b.queue.Simulator(context.Background(), inner)
	if err != nil {
		b.t.Fatal(err)
	}
	return s
}

// hire starts a worker; leave ends it and gives its error.
func (b *bench) hire(name string, slots int, ms ...models.Simulator) (leave func() error) {
	ctx, cancel := context.WithCancel(context.Background())
	done := make(chan error, 1)
	w := &Worker{Name: name, Slots: slots, Models: ms, Say: b.said.add}
	go func() { done <- w.Run(ctx, b.server.URL(), Access{}) }()
	leave = sync.OnceValue(func() error {
		cancel()
		return <-done
	})
	b.t.Cleanup(func() { leave() })
	return leave
}

// notes keeps what was said.
type notes struct {
	mu   sync.Mutex
	said []string
}

func (n *notes) add(text string) {
	n.mu.Lock()
	defer n.mu.Unlock()
	n.said = append(n.said, text)
}

func (n *notes) all() string {
	n.mu.Lock()
	defer n.mu.Unlock()
	return fmt.Sprint(n.said)
}

// fake is a model whose answers the test makes.
type fake struct {
	name   string
	asked  atomic.Int64
	answer func(ctx context.Context, d models.Design, q models.Question) error
}

func (f *fake) Identity() string { return f.name }

func (f *fake) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	f.asked.Add(1)
	if f.answer != nil {
		if err := f.answer(ctx, d, q); err != nil {
			return models.Response{}, err
		}
	}
	return plain(q), nil
}

// plain is a sound answer to a question.
func plain(q models.Question) models.Response {
	r := models.Response{Answered: models.Axis, Statement: "made up", Warnings: []string{"of no worth"}}
	for _, hz := range q.Hz {
		r.Samples = append(r.Samples, models.Sample{Hz: hz, Port: 140 + 5i, Input: 140 + 5i, Gain: models.Circular{Right: 10, Left: 0.1}, AxialRatio: 1, Sense: models.Right, Directivity: 10.1, Efficiency: 1})
	}
	return r
}

// winding is a good design, one of as many as there are numbers.
func winding(i int) models.Design {
	return models.Design{
		Turns: 6 + float64(i)/1000, Diameter: models.Law{0.095}, Spacing: models.Law{0.068}, Handedness: models.Right,
		Conductor: models.Conductor{Diameter: 3e-3, Material: models.Material{Conductivity: 58e6, Density: 8890, Permeability: 1}},
		Feed:      models.Feed{Height: 8e-3, Impedance: 50}, Ground: models.Ground{Kind: models.Infinite},
	}
}

var axis = models.Question{Hz: []float64{0.98e9, 1e9, 1.02e9}, Outputs: models.Axis}

// soon waits for something that is sure to come.
func soon(t testing.TB, what string, come func() bool) {
	t.Helper()
	for range 3000 {
		if come() {
			return
		}
		time.Sleep(10 * time.Millisecond)
	}
	t.Fatalf("%s does not come", what)
}

var errMade = errors.New("the winding is too short; at least 2 turns are due")
