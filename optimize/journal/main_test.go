package journal

import (
	"bufio"
	"fmt"
	"io"
	"os"
	"os/exec"
	"strings"
	"testing"
)

// children are what the test binary does when it is started by a test, in a
// process of its own. The argument is a path.
var children = map[string]func(arg string) error{
	"append": appendForever,
	"hold":   hold,
}

const childName, childArg = "JOURNAL_TEST_CHILD", "JOURNAL_TEST_ARG"

func TestMain(m *testing.M) {
	name := os.Getenv(childName)
	if name == "" {
		os.Exit(m.Run())
	}
	if err := children[name](os.Getenv(childArg)); err != nil {
		fmt.Println("error", err)
		os.Exit(1)
	}
	os.Exit(0)
}

// child is a started process and what it says.
type child struct {
	*exec.Cmd
	lines *bufio.Scanner
	in    io.WriteCloser
}

func start(t *testing.T, name, arg string) *child {
	t.Helper()
	self, err := os.Executable()
	must(t, err)
	c := &child{Cmd: exec.Command(self)}
	c.Env = append(os.Environ(), childName+"="+name, childArg+"="+arg)
	c.Stderr = os.Stderr
	out, err := c.StdoutPipe()
	must(t, err)
	c.in, err = c.StdinPipe()
	must(t, err)
	c.lines = bufio.NewScanner(out)
	must(t, c.Start())
	t.Cleanup(func() {
		_ = c.Process.Kill()
		_ = c.Wait()
	})
	return c
}

// line is the next line the child says.
func (c *child) line(t *testing.T) string {
	t.Helper()
	if !c.lines.Scan() {
		t.Fatalf("the child fell silent: %v", c.lines.Err())
	}
	if s := c.lines.Text(); !strings.HasPrefix(s, "error") {
		return s
	}
	t.Fatal(c.lines.Text())
	return ""
}

// rest reads what the child still said.
func (c *child) rest() (lines []string) {
	for c.lines.Scan() {
		lines = append(lines, c.lines.Text())
	}
	return lines
}

// memory is a folder of files in memory where the system has such a place,
// for tests that make many journals and are not about the disk.
func memory(t testing.TB) string {
	t.Helper()
	dir, err := os.MkdirTemp("/dev/shm", "journal-test-*")
	if err != nil {
		return t.TempDir()
	}
	t.Cleanup(func() { _ = os.RemoveAll(dir) })
	return dir
}
