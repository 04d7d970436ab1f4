package external

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"turnwise/models"
	"turnwise/models/simtest"
)

// start starts a command and closes it with the test.
func start(t testing.TB, command []string, o Options) *Program {
	t.Helper()
	p, err := Start(context.Background(), command, o)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { p.Close() })
	return p
}

// winding is a design of so many turns.
func winding(turns float64) models.Design {
	return models.Design{
		Turns: turns, Diameter: models.Law{0.095}, Spacing: models.Law{0.066}, Handedness: models.Right,
		Conductor: models.Conductor{Diameter: 3e-3, Material: models.Material{Conductivity: 58e6, Density: 8890}},
		Feed:      models.Feed{Height: 6e-3, Impedance: 50},
	}
}

var plainQuestion = models.Question{Hz: []float64{1e9, 1.01e9}, Outputs: models.Axis}

func simulate(p *Program, turns float64) (models.Response, error) {
	return p.Simulate(context.Background(), winding(turns), plainQuestion)
}

// demand asks about a good design and wants the one right answer.
func demand(t *testing.T, p *Program) {
	t.Helper()
	r, err := simulate(p, 4)
	if err != nil {
		t.Fatalf("a good design: %v", err)
	}
	x := 1 + 4*0.066*1.01e9/3e8
	if len(r.Samples) != 2 || r.Samples[1].Directivity != x*1.2 || r.Samples[1].Port != complex(100+x, -x) {
		t.Fatalf("a good design reads %+v", r.Samples)
	}
}

func TestContract(t *testing.T) {
	simtest.Run(t, func(t *testing.T) models.Simulator {
		return start(t, example(t, "sound"), Options{Workers: 2})
	})
}

// The example in Python keeps the contract; where there is no Python the
// example of the tests does once more.
func TestContractOfTheExample(t *testing.T) {
	t.Parallel()
	command := example(t, "sound")
	if python, err := exec.LookPath("python3"); err == nil {
		command = []string{python, filepath.Join("examples", "invented.py")}
	}
	simtest.Run(t, func(t *testing.T) models.Simulator {
		return start(t, command, Options{Workers: 2})
	})
}

func TestHelloIsKept(t *testing.T) {
	p := start(t, example(t, "greets", `{"protocol":1,"name":"own","version":"2 b","outputs":["axis","cuts"],"statement":"worth little","indicative":true}`), Options{})
	if id := p.Identity(); !strings.HasPrefix(id, `external 1 "own" "2 b" [`) || !strings.Contains(id, `"play" "greets"`) {
		t.Errorf("identity %s", id)
	}
	r, err := p.Simulate(context.Background(), winding(4), models.Question{Hz: []float64{1e9}, Outputs: models.Cone | models.Cuts, Cone: 0.2})
	if err != nil {
		t.Fatal(err)
	}
	if !p.Indicative() || !r.Indicative || r.Statement != "worth little" || r.Answered != models.Axis|models.Cuts {
		t.Errorf("answer %+v", r)
	}
	if s := r.Samples[0]; s.Beamwidth == 0 || s.EdgeGain != (models.Circular{}) {
		t.Errorf("sample %+v", s)
	}
}

// What a program does to one design harms no other.
func TestMoods(t *testing.T) {
	for _, c := range []struct {
		mood  string
		words []string // in the error; none: an answer
	}{
		{"crashes", []string{"twice in a row the program ended before it answered (exit status 3)", "step 4999\nthe matrix is singular"}},
		{"crashes once", nil},
		{"is killed", []string{"twice in a row", "ended before it answered (", "kill"}},
		{"half", []string{"twice in a row the program ended in the middle of a line (exit status 0)"}},
		{"huge", []string{"twice in a row the program wrote a line of more than 16 MB"}},
		{"closes", []string{"twice in a row the program ended before it answered"}},
		{"noise", []string{"twice in a row the program wrote a line that is no answer", "solving"}},
		{"NaN", []string{"example: the answer is broken: samples[0].directivity is NaN; it should be a finite number"}},
		{"missing", []string{"example: the answer is wrong: samples[0].efficiency is missing"}},
		{"wrong id", []string{"twice in a row the program answered question 1000"}},
		{"no id", []string{"twice in a row the program wrote a line without an id"}},
		{"twice", []string{"twice in a row the program wrote more than one line for one question"}},
		{"refuses", []string{"example: the mesh does not close"}},
		{"afterthought", nil},
	} {
		t.Run(c.mood, func(t *testing.T) {
			t.Parallel()
			p := start(t, example(t, c.mood, filepath.Join(t.TempDir(), "count")), Options{})
			demand(t, p)
			_, err := simulate(p, deadly+1)
			if (err == nil) != (c.words == nil) {
				t.Fatalf("error %v; want %q", err, c.words)
			}
			for _, w := range c.words {
				if !strings.Contains(err.Error(), w) {
					t.Errorf("error %q; want %q in it", err, w)
				}
			}
			if err != nil && len(err.Error()) > 3000 {
				t.Errorf("an error of %d bytes", len(err.Error()))
			}
			demand(t, p)
		})
	}
}

// A design that ends the program is tried twice and no more.
func TestTriedTwice(t *testing.T) {
	count := filepath.Join(t.TempDir(), "count")
	p := start(t, example(t, "crashes", count), Options{})
	if _, err := simulate(p, deadly+1); err == nil {
		t.Fatal("no error")
	}
	if tries, err := os.ReadFile(count); err != nil || string(tries) != "xx" {
		t.Errorf("tried %q (%v), want twice", tries, err)
	}
}

// A program that answers one question a life still answers all of them.
func TestTiredProgram(t *testing.T) {
	p := start(t, example(t, "tired"), Options{})
	for range 4 {
		demand(t, p)
	}
}

// A question that takes too long counts as timed out; its late answer, if
// there is one, is nobody's.
func TestTimeout(t *testing.T) {
	t.Parallel()
	p := start(t, example(t, "hangs"), Options{Timeout: 2 * time.Second})
	demand(t, p)
	_, err := simulate(p, deadly+1)
	if !errors.Is(err, context.DeadlineExceeded) || !strings.Contains(err.Error(), "within 2s; its last words:\niteration 1") {
		t.Errorf("error %v", err)
	}
	demand(t, p)
}

// A question may be larger than a pipe holds. It ends with the limit where
// the program does not read it.
func TestLongQuestion(t *testing.T) {
	t.Parallel()
	long := models.Question{Outputs: models.Axis}
	for i := range 6000 {
		long.Hz = append(long.Hz, 1e9+1234.5678*float64(i))
	}
	p := start(t, example(t, "sound"), Options{})
	if r, err := p.Simulate(context.Background(), winding(4), long); err != nil || len(r.Samples) != len(long.Hz) {
		t.Fatalf("%d samples, %v", len(r.Samples), err)
	}
	deaf := start(t, example(t, "deaf"), Options{Timeout: 100 * time.Millisecond})
	if _, err := deaf.Simulate(context.Background(), winding(4), long); !errors.Is(err, context.DeadlineExceeded) {
		t.Errorf("error %v", err)
	}
}

func TestStartFaults(t *testing.T) {
	t.Parallel()
	absent := filepath.Join(t.TempDir(), "absent")
	for _, c := range []struct {
		command []string
		words   string
		hello   time.Duration
	}{
		{command: nil, words: "no program is named"},
		{command: []string{""}, words: "no program is named"},
		{command: []string{absent}, words: "cannot be started"},
		{command: []string{"no-such-program-anywhere", "x"}, words: "cannot be started"},
		{command: example(t, "stillborn"), words: "(exit status 4); its last words:\nno licence was found"},
		{command: example(t, "mute"), words: "no hello: the program did not answer within", hello: 100 * time.Millisecond},
		{command: example(t, "greets", "Welcome to solver 3"), words: `did not present itself: the value is not JSON at byte 0`},
		{command: example(t, "greets", strings.Repeat("=", mostHello+1)), words: "a hello of 65537 bytes is too long"},
		{command: example(t, "greets", `{"protocol":2,"name":"a","version":"1"}`), words: "protocol is 2; it should be a whole number from 1 to 1"},
		{command: example(t, "greets", `{"protocol":1,"name":"","versoin":"1"}`), words: "versoin is no field of the value; did you mean version?"},
		{command: example(t, "greets", `{"protocol":1,"name":"a","version":"1","outputs":["gain"]}`), words: `outputs holds "gain"; known are axis, cone, cuts, balance, spread, pattern`},
		{command: example(t, "greets", greeting+"\nready"), words: "wrote more than its hello"},
	} {
		p, err := Start(context.Background(), c.command, Options{Hello: c.hello})
		if err == nil {
			p.Close()
			t.Errorf("%q starts", c.command)
		} else if !strings.Contains(err.Error(), c.words) {
			t.Errorf("%q: %v; want %q", c.command, err, c.words)
		}
	}
}

// Answers of two versions must not mix in one search.
func TestProgramThatChanges(t *testing.T) {
	p := start(t, example(t, "changes", filepath.Join(t.TempDir(), "started")), Options{})
	demand(t, p)
	if _, err := simulate(p, deadly+1); err == nil || !strings.Contains(err.Error(), "was example 1 and presents itself as example 2") {
		t.Errorf("error %v", err)
	}
}

// There are never more processes than workers, and no fewer than are needed.
func TestPoolGrows(t *testing.T) {
	p := start(t, example(t, "hangs"), Options{Workers: 3})
	ctx, cancel := context.WithCancel(context.Background())
	faults := make(chan error, 5)
	for range cap(faults) {
		go func() {
			_, err := p.Simulate(ctx, winding(deadly+1), plainQuestion)
			faults <- err
		}()
	}
	busy := func() int {
		p.pool.mu.Lock()
		defer p.pool.mu.Unlock()
		n := 0
		for _, b := range p.pool.live {
			if b {
				n++
			}
		}
		return n
	}
	eventually(t, "three processes are busy", func() bool { return busy() == 3 && p.asked.Load() == 3 })
	cancel()
	for range cap(faults) {
		if err := <-faults; !errors.Is(err, context.Canceled) {
			t.Errorf("error %v", err)
		}
	}
	if n := p.asked.Load(); n != 3 {
		t.Errorf("%d questions were put", n)
	}
	demand(t, p)
}

// eventually waits for what must come.
func eventually(t *testing.T, what string, done func() bool) {
	t.Helper()
	for end := time.Now().Add(time.Minute); !done(); time.Sleep(5 * time.Millisecond) {
		if time.Now().After(end) {
			t.Fatalf("never: %s", what)
		}
	}
}

// Pauses grow to a bound, and end with the context.
func TestPauses(t *testing.T) {
	last := time.Duration(-1)
	for losses := range 100 {
		d := pause(losses)
		if d < last || d > mostPause || losses < 2 && d != 0 || losses == 2 && d != leastPause {
			t.Errorf("after %d losses %v, before that %v", losses, d, last)
		}
		last = d
	}
	if last != mostPause {
		t.Errorf("the longest pause is %v", last)
	}
	p := newPool(1, func(context.Context) (*process, error) { panic("is started") })
	p.losses = 100
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := p.launch(ctx); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v", err)
	}
}

// Close ends idle and busy processes; nothing is answered after it.
func TestClose(t *testing.T) {
	p, err := Start(context.Background(), example(t, "hangs"), Options{Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	hung := make(chan error)
	go func() {
		_, err := simulate(p, deadly+1)
		hung <- err
	}()
	eventually(t, "the question is put", func() bool { return p.asked.Load() == 1 })
	demand(t, p)
	if err := p.Close(); err != nil {
		t.Error(err)
	}
	if err := <-hung; !errors.Is(err, errClosed) {
		t.Errorf("under way: %v", err)
	}
	if _, err := simulate(p, 4); !errors.Is(err, errClosed) {
		t.Errorf("afterwards: %v", err)
	}
	if len(p.pool.live) != 0 {
		t.Errorf("%d processes live", len(p.pool.live))
	}
	if err := p.Close(); err != nil {
		t.Errorf("once more: %v", err)
	}
}

// The program must not see what is no part of a design's hash, since its
// answer is kept for all designs of that hash.
func TestQuestionHoldsTheHashAndNoMore(t *testing.T) {
	d := winding(4)
	d.Title, d.Conductor.Stock, d.Conductor.Material.Name = "title", "stock", "copper"
	d.Band, d.Sense, d.FeedsReflector = models.Band{From: 1e9, To: 2e9, Samples: 3}, models.Left, true
	var texts [2]string
	for i, d := range []models.Design{d, winding(4)} {
		q, err := newQuestion(d, models.Question{Hz: []float64{1e9}, Outputs: models.Cone | models.Cuts, Cone: 0.3}, models.Axis|models.Cone)
		if err != nil {
			t.Fatal(err)
		}
		text, err := q.line(7)
		if err != nil {
			t.Fatal(err)
		}
		texts[i] = string(text)
	}
	if texts[0] != texts[1] {
		t.Errorf("one hash, two questions:\n%s%s", texts[0], texts[1])
	}
	var back struct {
		ID      int           `json:"id"`
		Design  models.Design `json:"design"`
		Hz      []float64     `json:"hz"`
		Outputs []string      `json:"outputs"`
		Cone    float64       `json:"cone_rad"`
	}
	if err := json.Unmarshal([]byte(texts[0]), &back); err != nil {
		t.Fatal(err)
	}
	if back.ID != 7 || back.Design.Hash() != d.Hash() || back.Cone != 0.3 || fmt.Sprint(back.Hz, back.Outputs) != "[1e+09] [axis cone]" {
		t.Errorf("read back %+v", back)
	}
}

func TestStartWithoutGuard(t *testing.T) {
	guarded = false
	defer func() {
		guarded = true
		if recover() == nil {
			t.Error("no panic")
		}
	}()
	_, _ = Start(context.Background(), example(t, "sound"), Options{})
}

func BenchmarkRoundTrip(b *testing.B) {
	p := start(b, example(b, "sound"), Options{})
	d := winding(4)
	b.ReportAllocs()
	for b.Loop() {
		if _, err := p.Simulate(context.Background(), d, plainQuestion); err != nil {
			b.Fatal(err)
		}
	}
	b.ReportMetric(float64(b.Elapsed().Microseconds())/float64(b.N), "µs/trip")
}
