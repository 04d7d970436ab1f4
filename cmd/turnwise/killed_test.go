//go:build unix

package main

import (
	"bytes"
	"context"
	"errors"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"syscall"
	"testing"
	"time"

	"turnwise/models"
	"turnwise/optimize/journal"
)

// A search that is killed at random moments and resumed, with another number
// of workers each time, leaves the front of the search that was not: nothing
// that was answered is asked again, and nothing is lost.
func TestKilledAtRandom(t *testing.T)      { interrupted(t, syscall.SIGKILL, 25, 6) }
func TestInterruptedAtRandom(t *testing.T) { interrupted(t, syscall.SIGINT, 12, 3) }

func interrupted(t *testing.T, signal syscall.Signal, most, short int) {
	if testing.Short() {
		most = short
	}
	l := &laboratory{t: t, dir: t.TempDir()}
	l.file("slow.yaml")
	l.search("straight", 4, nil)
	want := l.front("straight")
	kills, late := 0, false
	for run := 0; kills < most || !late; run++ {
		name := "run" + strconv.Itoa(run)
		lost := 0
		for session := 0; ; session++ {
			final := !late && run > 0
			hit := l.search(name, []int{1, 2, 8}[rand.IntN(3)], func(p *os.Process) {
				if final {
					l.awaitFinal(name)
				} else {
					time.Sleep(time.Duration(rand.Float64() * float64(900*time.Millisecond)))
				}
				p.Signal(signal)
			})
			if !hit {
				break
			}
			l.settle(name, 100*time.Millisecond)
			late = late || final && l.evaluations(name) == slowEvaluations
			kills++
			now := l.calls(name) - l.answers(name) - lost
			if now < 0 {
				t.Fatalf("%s session %d: %d calls, %d answers, %d lost before: answers that were never asked", name, session, l.calls(name), l.answers(name), lost)
			}
			if signal == syscall.SIGINT && now > 0 {
				t.Errorf("%s session %d: %d answers were not kept", name, session, now)
			}
			lost += now
			if session > 200 {
				t.Fatalf("%s does not come to its end", name)
			}
		}
		if got := l.front(name); !bytes.Equal(got, want) {
			t.Errorf("%s: the front differs from the straight run's:\n%s\n%s", name, got, want)
		}
		if calls, answers := l.calls(name), l.answers(name); calls != answers+lost {
			t.Errorf("%s: %d calls for %d answers, %d lost in flight: an answer was asked again", name, calls, answers, lost)
		}
	}
	t.Logf("%d interruptions", kills)
}

// A search that was killed between the making of its journal and the first
// line in it begins when it is resumed.
func TestKilledBeforeItsStart(t *testing.T) {
	l := &laboratory{t: t, dir: t.TempDir()}
	l.file("slow.yaml")
	l.search("straight", 4, nil)
	if err := os.CopyFS(l.path("early"), os.DirFS(l.path("straight"))); err != nil {
		t.Fatal(err)
	}
	if err := os.Remove(l.path("early/journal.db")); err != nil {
		t.Fatal(err)
	}
	r := l.read("straight")
	book, err := journal.Create(l.path("early/journal.db"), r.Header())
	if err = errors.Join(err, r.Close()); err != nil {
		t.Fatal(err)
	}
	if err := book.Close(); err != nil {
		t.Fatal(err)
	}
	l.search("early", 2, nil)
	if !bytes.Equal(l.front("early"), l.front("straight")) || l.evaluations("early") != slowEvaluations {
		t.Errorf("%d evaluations, front:\n%s\nthe straight run's:\n%s", l.evaluations("early"), l.front("early"), l.front("straight"))
	}
}

// slowEvaluations is the budget of slow.yaml.
const slowEvaluations = 300

// laboratory is a folder with runs of the slow model.
type laboratory struct {
	t   *testing.T
	dir string
}

// settle waits until models that outlived their search are done with what
// they had.
func (l *laboratory) settle(run string, patience time.Duration) {
	for last := -1; ; time.Sleep(patience) {
		now := l.calls(run)
		if now == last {
			return
		}
		last = now
	}
}

func (l *laboratory) path(name string) string { return filepath.Join(l.dir, name) }

func (l *laboratory) file(name string) {
	data, err := os.ReadFile("testdata/" + name)
	if err == nil {
		err = os.WriteFile(l.path(name), data, 0o644)
	}
	if err != nil {
		l.t.Fatal(err)
	}
}

// search starts or resumes a run and lets disturb have its process. It
// reports whether the disturbance came before the end.
func (l *laboratory) search(run string, workers int, disturb func(*os.Process)) (hit bool) {
	l.t.Helper()
	args := []string{"search", "--run", run, "--workers", strconv.Itoa(workers), "slow.yaml"}
	if _, err := os.Stat(l.path(run + "/journal.db")); err == nil {
		args = append(args, "--resume")
	} else {
		os.RemoveAll(l.path(run)) // killed before it had a journal
	}
	c := exec.Command("turnwise", args...)
	c.Dir = l.dir
	c.Env = append(os.Environ(), "SLOW_LOG="+l.path(run+".calls"), "SLOW_MS=20")
	var said bytes.Buffer
	c.Stdout, c.Stderr = &said, &said
	if err := c.Start(); err != nil {
		l.t.Fatal(err)
	}
	if disturb != nil {
		go disturb(c.Process)
	}
	err := c.Wait()
	var exit *exec.ExitError
	switch {
	case err == nil:
		return false
	case disturb != nil && errors.As(err, &exit) && (exit.ExitCode() == exitStopped || exit.ExitCode() < 0):
		return true
	}
	l.t.Fatalf("%s: %v\n%s", run, err, said.Bytes())
	return false
}

func (l *laboratory) front(run string) []byte {
	data, err := os.ReadFile(l.path(run + "/front.csv"))
	if err != nil {
		l.t.Fatal(err)
	}
	return data
}

// calls counts the questions of the search that the model has answered. The
// report asks its own, over more than the band and at its two ends.
func (l *laboratory) calls(run string) int {
	data, err := os.ReadFile(l.path(run + ".calls"))
	if err != nil && !errors.Is(err, os.ErrNotExist) {
		l.t.Fatal(err)
	}
	wide, _ := surroundings(models.Band{From: 1.66e9, To: 1.70e9, Samples: 3})
	n := 0
	for line := range bytes.Lines(data) {
		if hz := len(bytes.Fields(line[bytes.LastIndexByte(line, '['):])); hz != len(wide) && hz != 2 {
			n++
		}
	}
	return n
}

// read opens a run's journal; nil where there is none yet.
func (l *laboratory) read(run string) *journal.Reader {
	r, err := journal.Read(l.path(run + "/journal.db"))
	if errors.Is(err, os.ErrNotExist) {
		return nil
	}
	if err != nil {
		l.t.Fatal(err)
	}
	return r
}

// answers counts the different questions that the journal has answers to.
func (l *laboratory) answers(run string) int {
	r := l.read(run)
	if r == nil {
		return 0
	}
	defer r.Close()
	keys := map[string]bool{}
	for e, err := range r.Since(context.Background(), 0) {
		if err != nil {
			l.t.Fatal(err)
		}
		as, err := r.Questions(context.Background(), e.Seq)
		if err != nil {
			l.t.Fatal(err)
		}
		for _, a := range as {
			keys[a.Key] = true
		}
	}
	return len(keys)
}

func (l *laboratory) evaluations(run string) int {
	r := l.read(run)
	if r == nil {
		return 0
	}
	defer r.Close()
	past, err := r.Past(context.Background())
	if err != nil {
		l.t.Fatal(err)
	}
	return len(past)
}

// awaitFinal waits until a run confirms its front.
func (l *laboratory) awaitFinal(run string) {
	for range 3000 {
		if r, err := journal.Read(l.path(run + "/journal.db")); err == nil {
			final, err := r.Final(context.Background())
			r.Close()
			if err == nil && len(final) > 2 {
				return
			}
		}
		time.Sleep(20 * time.Millisecond)
	}
}
