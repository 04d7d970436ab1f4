package folder

import (
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

func TestCreate(t *testing.T) {
	dir := t.TempDir()
	for _, name := range []string{"new", "deep/down/here", "empty"} {
		path := filepath.Join(dir, name)
		if name == "empty" {
			if err := os.Mkdir(path, 0o755); err != nil {
				t.Fatal(err)
			}
		}
		f, err := Create(path)
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if info, err := os.Stat(f.Path(DesignsDir)); err != nil || !info.IsDir() {
			t.Errorf("%s: no folder of designs", name)
		}
		if _, err := Create(path); !errors.Is(err, ErrExists) {
			t.Errorf("%s: made twice: %v", name, err)
		}
	}
}

func TestCreateRefuses(t *testing.T) {
	dir := t.TempDir()
	file := filepath.Join(dir, "file")
	write(t, file, "mine")
	write(t, filepath.Join(dir, "used", "x"), "mine")
	for _, x := range []struct {
		path   string
		exists bool
		words  string
	}{
		{filepath.Join(dir, "used"), true, "exists already"},
		{file, true, "is no folder"},
		{filepath.Join(file, "under"), false, "cannot use"},
		{filepath.Join(dir, strings.Repeat("x", 300)), false, "name too long"},
	} {
		_, err := Create(x.path)
		if err == nil || errors.Is(err, ErrExists) != x.exists || !strings.Contains(err.Error(), x.words) || strings.Count(err.Error(), x.path) != 1 {
			t.Errorf("%s: %v", x.path, err)
		}
	}
	if read(t, file) != "mine" || read(t, filepath.Join(dir, "used", "x")) != "mine" {
		t.Error("a refused folder is not what it was")
	}
}

func TestCreateBesideTakesTheFirstFreeNumber(t *testing.T) {
	f := Folder{Dir: t.TempDir()}
	write(t, f.Path("refined-2", "x"), "mine")
	for _, want := range []string{"refined-1", "refined-3"} {
		got, err := CreateBeside(f, "refined")
		if err != nil || got.Dir != f.Path(want) {
			t.Errorf("%s, %v; want %s", got.Dir, err, want)
		}
	}
	file := f.Path("file")
	write(t, file, "")
	if _, err := CreateBeside(Folder{Dir: file}, "refined"); err == nil {
		t.Error("no error under a file")
	}
}

func TestOpen(t *testing.T) {
	dir := t.TempDir()
	write(t, filepath.Join(dir, "run", BriefFile), "title: x\n")
	write(t, filepath.Join(dir, "other", "x"), "")
	write(t, filepath.Join(dir, "file"), "")
	if f, err := Open(filepath.Join(dir, "run")); err != nil || f.Path(DesignsDir, "x.yaml") != filepath.Join(dir, "run", "designs", "x.yaml") {
		t.Errorf("%+v, %v", f, err)
	}
	for name, words := range map[string]string{
		"missing": "there is no folder", "file": "is a file", "other": "holds no brief.yaml", "file/under": "cannot open",
	} {
		path := filepath.Join(dir, name)
		_, err := Open(path)
		if err == nil || !strings.Contains(err.Error(), words) || strings.Count(err.Error(), path) != 1 {
			t.Errorf("%s: %v", name, err)
		}
		if errors.Is(err, ErrNoRun) != (name == "other") {
			t.Errorf("%s: is it no run? %v", name, err)
		}
	}
}

func TestNextIsTheFirstFree(t *testing.T) {
	t.Chdir(t.TempDir())
	next := func(brief, want string) {
		t.Helper()
		if got, err := Next(brief); err != nil || got != want {
			t.Errorf("%s: %q, %v; want %q", brief, got, err, want)
		}
	}
	next("balloon.yaml", "run-balloon-1")
	next("briefs/balloon.v2.toml", "run-balloon.v2-1")
	next("balloon", "run-balloon-1")
	for _, taken := range []string{"run-balloon-1", "run-balloon-2", "run-balloon-4"} {
		if err := os.Mkdir(taken, 0o755); err != nil {
			t.Fatal(err)
		}
	}
	next("balloon.yaml", "run-balloon-3")
	// A file takes a name too, and so does a link that leads nowhere.
	write(t, "run-balloon-3", "")
	next("balloon.yaml", "run-balloon-5")
	if err := os.Symlink("nowhere", "run-balloon-5"); err != nil {
		t.Fatal(err)
	}
	next("balloon.yaml", "run-balloon-6")
	next("other.yaml", "run-other-1")
	if _, err := Next(strings.Repeat("x", 300) + ".yaml"); err == nil || !strings.Contains(err.Error(), "name too long") {
		t.Errorf("a name too long: %v", err)
	}
	if got := names(t, "."); slices.Contains(got, "run-other-1") {
		t.Error("a name asked for was made")
	}
}
