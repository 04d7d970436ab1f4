package folder

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

func TestWriteFile(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "front.csv")
	for _, text := range []string{"one\n", "", "a longer text than the first\n"} {
		if err := WriteFile(path, []byte(text)); err != nil {
			t.Fatal(err)
		}
		if got := read(t, path); got != text {
			t.Errorf("read %q, want %q", got, text)
		}
		if info, err := os.Stat(path); err != nil || info.Mode() != 0o644 {
			t.Errorf("mode %v, %v", info.Mode(), err)
		}
	}
	if got := names(t, dir); !slices.Equal(got, []string{"front.csv"}) {
		t.Errorf("left behind: %v", got)
	}
}

// A reader who has the old file open reads on in it: the new one is another.
func TestWriteFileReplaces(t *testing.T) {
	path := filepath.Join(t.TempDir(), "front.csv")
	write(t, path, "old")
	open, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer open.Close()
	if err := WriteFile(path, []byte("new and longer")); err != nil {
		t.Fatal(err)
	}
	var room [20]byte
	if n, _ := open.Read(room[:]); string(room[:n]) != "old" {
		t.Errorf("the old file reads %q", room[:n])
	}
}

func TestWriteFileThatCannot(t *testing.T) {
	dir := t.TempDir()
	write(t, filepath.Join(dir, "file"), "mine")
	write(t, filepath.Join(dir, "full", "x"), "mine")
	cases := map[string]string{
		filepath.Join(dir, "missing", "front.csv"): "no such file",
		filepath.Join(dir, "file", "front.csv"):    "not a directory",
		filepath.Join(dir, "full"):                 "file exists",
	}
	// Root writes where nobody may.
	if os.Geteuid() != 0 {
		closed := filepath.Join(dir, "closed")
		write(t, filepath.Join(closed, "front.csv"), "mine")
		if err := os.Chmod(closed, 0o555); err != nil {
			t.Fatal(err)
		}
		defer os.Chmod(closed, 0o755)
		cases[filepath.Join(closed, "front.csv")] = "permission denied"
	}
	for path, words := range cases {
		err := WriteFile(path, []byte("new"))
		if err == nil {
			t.Errorf("%s: no error", path)
			continue
		}
		// The temporary name is no business of whoever reads this.
		if got := err.Error(); !strings.HasPrefix(got, "cannot write "+path+": ") || !strings.Contains(got, words) || strings.Contains(got, ".front.csv.") || strings.Contains(got, ".full.") {
			t.Errorf("%s: %v", path, err)
		}
	}
	if read(t, filepath.Join(dir, "file")) != "mine" || read(t, filepath.Join(dir, "full", "x")) != "mine" {
		t.Error("what was there is not what it was")
	}
	if os.Geteuid() != 0 && read(t, filepath.Join(dir, "closed", "front.csv")) != "mine" {
		t.Error("the old front is not what it was")
	}
	if got := names(t, dir); slices.ContainsFunc(got, func(name string) bool { return strings.HasPrefix(name, ".") }) {
		t.Errorf("left behind: %v", got)
	}
}
