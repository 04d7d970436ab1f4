package journal

import (
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"sync/atomic"
	"testing"
	"time"
)

// hold locks a folder and keeps it until standard input ends.
func hold(dir string) error {
	if _, err := Lock(dir); err != nil {
		return err
	}
	fmt.Println("held")
	_, err := os.Stdin.Read(make([]byte, 1))
	return err
}

func TestLockOfALiveProcess(t *testing.T) {
	dir := t.TempDir()
	c := start(t, "hold", dir)
	c.line(t)
	_, err := Lock(dir)
	if !errors.Is(err, ErrLocked) || !strings.Contains(err.Error(), fmt.Sprintf("process %d on ", c.Process.Pid)) {
		t.Errorf("a held folder: %v", err)
	}
	if h, alive := Search(dir); !alive || h.PID != c.Process.Pid {
		t.Errorf("holder %v, alive %v", h, alive)
	}
	must(t, c.Process.Kill())
	_ = c.Wait()
	if h, alive := Search(dir); alive || h.PID != c.Process.Pid {
		t.Errorf("after its end: holder %v, alive %v", h, alive)
	}
	held, err := Lock(dir)
	must(t, err)
	if h, alive := Search(dir); !alive || h.PID != os.Getpid() {
		t.Errorf("taken over by %v, alive %v", h, alive)
	}
	if _, err := Lock(dir); !errors.Is(err, ErrLocked) {
		t.Errorf("twice in one process: %v", err)
	}
	must(t, held.Release())
	if _, alive := Search(dir); alive {
		t.Error("alive after release")
	}
	if left, err := os.ReadDir(dir); err != nil || len(left) > 0 {
		t.Errorf("left behind %v, %v", left, err)
	}
	if _, err := Lock(filepath.Join(dir, "none")); err == nil {
		t.Error("a folder that is not there was locked")
	}
}

func TestLockFoundLyingAbout(t *testing.T) {
	host, err := os.Hostname()
	must(t, err)
	c := start(t, "hold", t.TempDir())
	c.line(t)
	alive, dead := c.Process.Pid, 0
	for pid := 4_000_000; dead == 0; pid++ {
		if !running(pid) {
			dead = pid
		}
	}
	remote := func(string) (string, bool) { return "NFS", true }
	for name, test := range map[string]struct {
		text    string
		network func(string) (string, bool)
		refused string
	}{
		"nothing":                  {text: ""},
		"torn":                     {text: `{"pid":`},
		"dead":                     {text: signed(Holder{PID: dead, Host: host})},
		"number given anew":        {text: signed(Holder{PID: alive, Host: host, Born: "before"})},
		"alive":                    {text: signed(Holder{PID: alive, Host: host, Born: born(alive)}), refused: "stop it"},
		"alive, birth unknown":     {text: signed(Holder{PID: alive, Host: host}), refused: "stop it"},
		"other host, local disk":   {text: signed(Holder{PID: alive, Host: host + "x"})},
		"other host, network disk": {text: signed(Holder{PID: dead, Host: host + "x"}), network: remote, refused: "remove the file"},
	} {
		t.Run(name, func(t *testing.T) {
			if test.network != nil {
				defer func(old func(string) (string, bool)) { network = old }(network)
				network = test.network
			}
			dir := t.TempDir()
			must(t, os.WriteFile(filepath.Join(dir, LockFile), []byte(test.text), 0o644))
			held, err := Lock(dir)
			if test.refused == "" {
				must(t, err)
				must(t, held.Release())
				return
			}
			if !errors.Is(err, ErrLocked) || !strings.Contains(err.Error(), test.refused) {
				t.Errorf("error %v", err)
			}
		})
	}
	if first, again, own := born(alive), born(alive), born(os.Getpid()); first == "" || first != again || first == own {
		t.Errorf("born %q, %q and %q: no use", first, again, own)
	}
}

func signed(h Holder) string {
	h.Since = time.Now()
	b, err := json.Marshal(h)
	if err != nil {
		panic(err)
	}
	return string(b)
}

// TestLockIsExclusive has many claim and give back one folder.
func TestLockIsExclusive(t *testing.T) {
	dir := t.TempDir()
	var inside, claims atomic.Int32
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			for range 60 {
				held, err := Lock(dir)
				if errors.Is(err, ErrLocked) {
					continue
				}
				if err != nil {
					t.Error(err)
					return
				}
				if inside.Add(1) != 1 {
					t.Error("two hold the folder")
				}
				claims.Add(1)
				inside.Add(-1)
				if err := held.Release(); err != nil {
					t.Error(err)
				}
			}
		})
	}
	wg.Wait()
	if claims.Load() == 0 {
		t.Error("nobody ever held the folder")
	}
}
