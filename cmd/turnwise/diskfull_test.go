//go:build diskfull

package main

import (
	"bytes"
	"os"
	"os/exec"
	"strings"
	"testing"
)

// A disk that fills up ends a search with a message and exit 1; when there is
// room again, resuming leads to the front of the search that always had room.
// It mounts a small file system, which the superuser alone may do: make
// diskfull.
func TestDiskFull(t *testing.T) {
	l := &laboratory{t: t, dir: t.TempDir()}
	l.file("slow.yaml")
	l.search("straight", 2, nil)
	small := l.path("small")
	if err := os.Mkdir(small, 0o755); err != nil {
		t.Fatal(err)
	}
	mount := func(options ...string) {
		args := append(options, "tmpfs", small)
		if out, err := exec.Command("mount", args...).CombinedOutput(); err != nil {
			t.Fatalf("mount %v: %v\n%s", args, err, out)
		}
	}
	mount("-t", "tmpfs", "-o", "size=600k")
	defer exec.Command("umount", small).Run()
	c := exec.Command("turnwise", "search", "--run", "small/run", "slow.yaml")
	c.Dir = l.dir
	c.Env = append(os.Environ(), "SLOW_LOG="+l.path("small.calls"), "SLOW_MS=2")
	out, err := c.CombinedOutput()
	t.Logf("%s", out)
	if err == nil || c.ProcessState.ExitCode() != exitFailed {
		t.Fatalf("exit %v on a full disk; 1 is due", err)
	}
	for _, word := range []string{"disk is full", "--resume --run small/run"} {
		if !strings.Contains(string(out), word) {
			t.Errorf("the message lacks %q", word)
		}
	}
	mount("-o", "remount,size=50m")
	l.search("small/run", 2, nil)
	if !bytes.Equal(l.front("small/run"), l.front("straight")) {
		t.Error("the front differs from the straight run's")
	}
}
