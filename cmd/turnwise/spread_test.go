//go:build unix

package main

import (
	"bytes"
	"errors"
	"math/rand/v2"
	"os"
	"os/exec"
	"strconv"
	"sync"
	"testing"
	"time"
)

// A search whose workers and whose own process, the queue with it, are killed
// at random moments, and which is resumed, leaves the front of the search
// that ran alone: nothing that was answered is asked again, and nothing is
// lost.
func TestKilledAtRandomWhileSpread(t *testing.T) {
	l := &laboratory{t: t, dir: t.TempDir()}
	l.file("slow.yaml")
	l.search("straight", 4, nil)
	address, err := freeAddress()
	if err != nil {
		t.Fatal(err)
	}
	c := &crew{laboratory: l, queue: address.String()}
	for i := range crewSize {
		c.hire(i)
	}
	defer c.dismiss()
	// unheard are the calls whose answers the journal does not have. A kill of
	// the search may add what was in flight, or a confirmation of the front;
	// a worker's answer that waited for the next queue takes one off.
	unheard, counted, kills, most := 0, 0, 0, 6
	if testing.Short() {
		most = 2
	}
	for !c.search("far", kills < most) {
		kills++
		c.settle("far", 300*time.Millisecond)
		before, withWorkers := unheard, c.lost
		unheard = l.calls("far") - l.answers("far")
		searching := l.evaluations("far") < slowEvaluations
		if unheard < 0 || searching && unheard > before+inFlight+withWorkers-counted {
			t.Fatalf("%d calls without an answer after kill %d, %d before it; %d were in flight and %d went with workers",
				unheard, kills, before, inFlight, withWorkers-counted)
		}
		counted = withWorkers
		c.replace(rand.IntN(crewSize))
	}
	if got, want := l.front("far"), l.front("straight"); !bytes.Equal(got, want) {
		t.Errorf("the front differs from the straight run's:\n%s\n%s", got, want)
	}
	calls, answers := l.calls("far"), l.answers("far")
	if calls < answers || calls > answers+unheard+c.lost-counted {
		t.Errorf("%d calls for %d answers, %d unheard at the last kill and at most %d since: an answer was asked again", calls, answers, unheard, c.lost-counted)
	}
	if l.evaluations("far") != slowEvaluations {
		t.Errorf("%d evaluations, %d are due", l.evaluations("far"), slowEvaluations)
	}
	t.Logf("the search was killed %d times, workers %d times", kills, c.lost/crewSlots)
}

// crewSlots is how many questions one of the crew takes at a time, inFlight
// how many they all do.
const (
	crewSize  = 3
	crewSlots = 2
	inFlight  = crewSize * crewSlots
)

// crew are the workers of a search.
type crew struct {
	*laboratory
	queue   string
	mu      sync.Mutex
	workers [crewSize]*exec.Cmd
	lost    int // answers, at most, that went with workers that were killed
}

func (c *crew) hire(i int) {
	w := exec.Command("turnwise", "worker", "--queue", "nats://"+c.queue, "--workers", strconv.Itoa(crewSlots), "--name", strconv.Itoa(i), "--", "slowmodel")
	w.Dir, w.Env = c.dir, c.environment()
	if err := w.Start(); err != nil {
		c.t.Error(err)
	}
	c.workers[i] = w
}

func (c *crew) environment() []string {
	return append(os.Environ(), "SLOW_LOG="+c.path("far.calls"), "SLOW_MS=60", "TMPDIR="+c.dir)
}

// replace kills one and hires another.
func (c *crew) replace(i int) {
	c.mu.Lock()
	defer c.mu.Unlock()
	c.workers[i].Process.Kill()
	c.workers[i].Wait()
	c.lost += crewSlots
	c.hire(i)
}

// dismiss ends them all.
func (c *crew) dismiss() {
	c.mu.Lock()
	defer c.mu.Unlock()
	for _, w := range c.workers {
		w.Process.Kill()
		w.Wait()
	}
}

// search starts or resumes the run. A worker is killed now and then, and the
// search itself where that is asked; it reports whether it came to its end.
func (c *crew) search(run string, kill bool) (done bool) {
	c.t.Helper()
	args := []string{"search", "--run", run, "--serve", c.queue, "--lease", "300ms", "slow.yaml"}
	if _, err := os.Stat(c.path(run + "/journal.db")); err == nil {
		args = append(args, "--resume")
	} else {
		os.RemoveAll(c.path(run)) // killed before it had a journal
	}
	s := exec.Command("turnwise", args...)
	s.Dir, s.Env = c.dir, c.environment()
	var said bytes.Buffer
	s.Stdout, s.Stderr = &said, &said
	if err := s.Start(); err != nil {
		c.t.Fatal(err)
	}
	ended := make(chan error, 1)
	go func() { ended <- s.Wait() }()
	worker := time.NewTicker(700 * time.Millisecond)
	defer worker.Stop()
	var fate <-chan time.Time
	if kill {
		fate = time.After(time.Duration(400+rand.IntN(1200)) * time.Millisecond)
	}
	for {
		select {
		case <-worker.C:
			c.replace(rand.IntN(crewSize))
		case <-fate:
			s.Process.Kill()
		case err := <-ended:
			var exit *exec.ExitError
			if err != nil && !(kill && errors.As(err, &exit) && exit.ExitCode() < 0) {
				c.t.Fatalf("%v\n%s", err, said.Bytes())
			}
			return err == nil
		}
	}
}
