//go:build unix

package external

import (
	"bufio"
	"context"
	"errors"
	"net"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// callers listens for processes that call.
type callers struct {
	net.Listener
	lines []net.Conn
}

func listen(t *testing.T) *callers {
	t.Helper()
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { l.Close() })
	return &callers{Listener: l}
}

// family is the command of a script that starts two processes that call: one
// that never ends, and a simulator of some mood.
func (c *callers) family(t *testing.T, mood string) []string {
	return []string{"/bin/sh", filepath.Join("testdata", "family.sh"), binary(t), c.Addr().String(), mood}
}

// connect waits for two more callers.
func (c *callers) connect(t *testing.T) {
	t.Helper()
	_ = c.Listener.(*net.TCPListener).SetDeadline(time.Now().Add(time.Minute))
	for range 2 {
		conn, err := c.Accept()
		if err != nil {
			t.Fatal(err)
		}
		t.Cleanup(func() { conn.Close() })
		c.lines = append(c.lines, conn)
	}
}

// live demands that every caller is there. A process that has ended has hung
// up.
func (c *callers) live(t *testing.T) {
	t.Helper()
	for _, conn := range c.lines {
		_ = conn.SetReadDeadline(time.Now().Add(20 * time.Millisecond))
		if _, err := conn.Read(make([]byte, 1)); !errors.Is(err, os.ErrDeadlineExceeded) {
			t.Fatalf("a process has gone: %v", err)
		}
	}
}

// hangUp waits until every caller has ended.
func (c *callers) hangUp(t *testing.T) {
	t.Helper()
	for _, conn := range c.lines {
		_ = conn.SetReadDeadline(time.Now().Add(time.Minute))
		if _, err := conn.Read(make([]byte, 1)); err == nil || errors.Is(err, os.ErrDeadlineExceeded) {
			t.Errorf("a process lives on: %v", err)
		}
	}
	c.lines = nil
}

// A simulator and what it started end with a parent that is killed by the
// one signal that it cannot see coming.
func TestKilledParent(t *testing.T) {
	t.Parallel()
	c := listen(t)
	parent := exec.Command(binary(t), append([]string{"host"}, c.family(t, "stubborn")...)...)
	out, err := parent.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := parent.Start(); err != nil {
		t.Fatal(err)
	}
	c.connect(t)
	if word, err := bufio.NewReader(out).ReadString('\n'); word != "answered: <nil>\n" {
		t.Fatalf("%q, %v", word, err)
	}
	c.live(t)
	if err := parent.Process.Signal(syscall.SIGKILL); err != nil {
		t.Fatal(err)
	}
	_ = parent.Wait()
	c.hangUp(t)
}

// So do they when the parent ends in the ordinary way, gives up waiting, or
// its user does.
func TestFamilyEnds(t *testing.T) {
	t.Parallel()
	c := listen(t)
	p := start(t, c.family(t, "stubborn"), Options{Timeout: 2 * time.Second})
	c.connect(t)
	demand(t, p)
	c.live(t)
	if _, err := simulate(p, deadly+1); !errors.Is(err, context.DeadlineExceeded) {
		t.Errorf("error %v", err)
	}
	c.hangUp(t)
	ctx, cancel := context.WithCancel(context.Background())
	asked := make(chan error)
	go func() {
		_, err := p.Simulate(ctx, winding(deadly+1), plainQuestion)
		asked <- err
	}()
	c.connect(t)
	cancel()
	if err := <-asked; !errors.Is(err, context.Canceled) && !errors.Is(err, context.DeadlineExceeded) {
		t.Errorf("error %v", err)
	}
	p.Close()
	c.hangUp(t)
}

// What a simulator leaves behind when it ends by itself ends too.
func TestLeftBehind(t *testing.T) {
	t.Parallel()
	c := listen(t)
	p := start(t, c.family(t, "polite"), Options{})
	c.connect(t)
	demand(t, p)
	p.Close()
	c.hangUp(t)
}

// signalGuard sends a signal to the guard of a program's only process.
func signalGuard(t *testing.T, p *Program, s os.Signal) {
	t.Helper()
	p.pool.mu.Lock()
	defer p.pool.mu.Unlock()
	for proc := range p.pool.live {
		if err := proc.leash.cmd.Process.Signal(s); err != nil {
			t.Fatal(err)
		}
	}
}

// A guard that is killed alone takes its simulator with it.
func TestKilledGuard(t *testing.T) {
	t.Parallel()
	c := listen(t)
	p := start(t, c.family(t, "stubborn"), Options{})
	c.connect(t)
	demand(t, p)
	signalGuard(t, p, syscall.SIGKILL)
	c.hangUp(t)
	demand(t, p)
	c.connect(t)
}

// A guard told to end by a signal ends its group.
func TestGuardIsToldToEnd(t *testing.T) {
	t.Parallel()
	c := listen(t)
	p := start(t, c.family(t, "stubborn"), Options{})
	c.connect(t)
	signalGuard(t, p, syscall.SIGTERM)
	c.hangUp(t)
}

// Nobody is a guard by typing its word: the group it would kill is another's.
func TestGuardByHand(t *testing.T) {
	cmd := exec.Command(binary(t), guardWord, "true")
	said, err := cmd.CombinedOutput()
	var exit *exec.ExitError
	if !errors.As(err, &exit) || exit.ExitCode() != 2 || !strings.Contains(string(said), "is for the program itself to call") {
		t.Errorf("%v: %s", err, said)
	}
}
