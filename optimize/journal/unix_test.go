//go:build unix

package journal

import (
	"bufio"
	"errors"
	"fmt"
	"os"
	"os/signal"
	"path/filepath"
	"syscall"
	"testing"
)

func init() {
	children["limited"] = limited
	children["unprivileged"] = unprivileged
}

// limited writes under a limit of the size of files until it fails, says how
// many groups are on record, waits to be told that there is room, and goes
// on.
func limited(path string) error {
	signal.Ignore(syscall.SIGXFSZ)
	w, err := Open(path)
	if err != nil {
		return err
	}
	var was syscall.Rlimit
	if err := syscall.Getrlimit(syscall.RLIMIT_FSIZE, &was); err != nil {
		return err
	}
	now := was
	now.Cur = 300_000
	if err := syscall.Setrlimit(syscall.RLIMIT_FSIZE, &now); err != nil {
		return err
	}
	n := 0
	for err = nil; err == nil; n++ {
		err = w.Record(group(n))
	}
	n--
	if !errors.Is(err, ErrCannotWrite) {
		return fmt.Errorf("wrong kind of error: %w", err)
	}
	fmt.Println(n)
	if _, err := bufio.NewReader(os.Stdin).ReadString('\n'); err != nil {
		return err
	}
	if err := syscall.Setrlimit(syscall.RLIMIT_FSIZE, &was); err != nil {
		return err
	}
	if err := w.Record(group(n)); err != nil {
		return err
	}
	fmt.Println("on record")
	return nil
}

// TestFailingWriter has the system refuse to write, as a full disk does.
func TestFailingWriter(t *testing.T) {
	w := create(t, header())
	must(t, w.Close())
	c := start(t, "limited", w.Path())
	var n int
	_, err := fmt.Sscan(c.line(t), &n)
	must(t, err)
	r, err := Read(w.Path())
	must(t, err)
	defer r.Close()
	if got := checkPrefix(t, r); got != n || n < 2 {
		t.Errorf("%d groups on record, want %d", got, n)
	}
	_, err = fmt.Fprintln(c.in)
	must(t, err)
	c.line(t)
	must(t, c.Wait())
	again, err := Open(w.Path())
	must(t, err)
	defer again.Close()
	must(t, again.Record(group(n+1)))
	if got := checkPrefix(t, again.Reader); got != n+2 {
		t.Errorf("%d groups on record, want %d", got, n+2)
	}
}

// unprivileged tries everything in a folder that it may only read.
func unprivileged(path string) error {
	if os.Getuid() == 0 {
		if err := errors.Join(syscall.Setgid(65534), syscall.Setuid(65534)); err != nil {
			return err
		}
	}
	var wrong *Error
	_, err := Create(filepath.Join(filepath.Dir(path), "new.db"), header())
	if !errors.Is(err, ErrReadOnly) || !errors.Is(err, ErrCannotWrite) || !errors.As(err, &wrong) {
		return fmt.Errorf("create: %w", err)
	}
	if _, err := Open(path); !errors.Is(err, ErrReadOnly) {
		return fmt.Errorf("open: %w", err)
	}
	if _, err := Lock(filepath.Dir(path)); !errors.Is(err, ErrReadOnly) {
		return fmt.Errorf("lock: %w", err)
	}
	r, err := Read(path)
	if err != nil {
		return err
	}
	c, err := r.Counts(ctx)
	if err != nil {
		return err
	}
	fmt.Println(c.Evaluations)
	return r.Close()
}

// TestReadOnlyFolder looks at closed and at killed runs on a medium that
// cannot be written to.
func TestReadOnlyFolder(t *testing.T) {
	const groups = 6
	files := live(t, groups)
	for name, without := range map[string][]string{
		"killed":         nil,
		"killed, copied": {"-shm"},
		"closed":         {"-shm", "-wal"},
	} {
		t.Run(name, func(t *testing.T) {
			want := 3 * groups
			copied := map[string][]byte{}
			for ext, b := range files {
				copied[ext] = b
			}
			for _, ext := range without {
				if delete(copied, ext); ext == "-wal" {
					want = 3 * (groups/2 + 1)
				}
			}
			dir := t.TempDir()
			path := lie(t, dir, copied)
			must(t, os.Chmod(dir, 0o555))
			must(t, os.Chmod(filepath.Dir(dir), 0o755))
			t.Cleanup(func() { _ = os.Chmod(dir, 0o755) })
			t.Setenv("TMPDIR", "/tmp")
			if got := start(t, "unprivileged", path).line(t); got != fmt.Sprint(want) {
				t.Errorf("%s evaluations read, want %d", got, want)
			}
		})
	}
}

func TestNetworkFolder(t *testing.T) {
	w := create(t, header())
	must(t, w.Record(group(0)))
	defer func(old func(string) (string, bool)) { network = old }(network)
	if kind, remote := network(filepath.Dir(w.Path())); remote {
		t.Fatalf("the folder of temporary files is on %s", kind)
	}
	network = func(string) (string, bool) { return "NFS", true }
	if _, err := Create(filepath.Join(t.TempDir(), File), header()); !errors.Is(err, ErrNetwork) || !errors.Is(err, ErrCannotWrite) {
		t.Errorf("create: %v", err)
	}
	if _, err := Open(w.Path()); !errors.Is(err, ErrNetwork) {
		t.Errorf("open: %v", err)
	}
	r, err := Read(w.Path())
	must(t, err)
	defer r.Close()
	if got := checkPrefix(t, r); got != 1 || r.Path() != w.Path() {
		t.Errorf("%d groups read at %s", got, r.Path())
	}
	must(t, r.Close())
	if _, err := os.Stat(r.spare); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("the private copy remains: %v", err)
	}
}
