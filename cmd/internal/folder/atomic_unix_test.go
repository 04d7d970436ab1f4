//go:build unix

package folder

import (
	"os"
	"os/exec"
	"os/signal"
	"path/filepath"
	"slices"
	"strings"
	"syscall"
	"testing"
)

// writeUnderLimit names, in a child's environment, the file that the child is
// to write with too little room.
const writeUnderLimit = "FOLDER_TEST_WRITE"

func TestMain(m *testing.M) {
	if path := os.Getenv(writeUnderLimit); path != "" {
		signal.Ignore(syscall.SIGXFSZ)
		if err := syscall.Setrlimit(syscall.RLIMIT_FSIZE, &syscall.Rlimit{Cur: 1000, Max: 1000}); err != nil {
			panic(err)
		}
		if err := WriteFile(path, make([]byte, 5000)); err != nil {
			os.Stderr.WriteString(err.Error())
			os.Exit(1)
		}
		os.Exit(0)
	}
	os.Exit(m.Run())
}

// A disk that fills up midway leaves the old file whole and nothing beside it.
func TestWriteFileThatFailsMidway(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "front.csv")
	write(t, path, "old")
	c := exec.Command(os.Args[0])
	c.Env = append(os.Environ(), writeUnderLimit+"="+path)
	said, err := c.CombinedOutput()
	if err == nil || !strings.HasPrefix(string(said), "cannot write "+path+": ") || !strings.Contains(string(said), "file too large") {
		t.Errorf("%v: %s", err, said)
	}
	if got := read(t, path); got != "old" {
		t.Errorf("the old file reads %q", got)
	}
	if got := names(t, dir); !slices.Equal(got, []string{"front.csv"}) {
		t.Errorf("left behind: %v", got)
	}
}
