// Package folder keeps a run's folder: the resolved brief, the front, its
// designs. Files are written whole and renamed; a reader never sees a part.
package folder

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
)

// Names of what a run's folder holds.
const (
	BriefFile   = "brief.yaml"
	FrontFile   = "front.csv"
	NearFile    = "near.csv"
	JournalFile = "journal.db"
	StartsDir   = "start" // designs that the brief starts from
	DesignsDir  = "designs"
)

// Folder is a run's folder.
type Folder struct{ Dir string }

// ErrExists is a new run asked for in a folder that holds something.
var ErrExists = errors.New("exists already")

// ErrNoRun is a folder that holds no run.
var ErrNoRun = errors.New("is no run folder: it holds no " + BriefFile)

// Path is a file of the folder.
func (f Folder) Path(name ...string) string {
	return filepath.Join(append([]string{f.Dir}, name...)...)
}

// Create makes the folder of a new run; one that holds anything is refused
// with ErrExists.
func Create(dir string) (Folder, error) {
	f := Folder{Dir: dir}
	entries, err := os.ReadDir(dir)
	switch {
	case err == nil && len(entries) > 0:
		return f, fmt.Errorf("%s %w", dir, ErrExists)
	case err != nil && !errors.Is(err, fs.ErrNotExist):
		if info, e := os.Stat(dir); e == nil && !info.IsDir() {
			return f, fmt.Errorf("%s %w, and is no folder", dir, ErrExists)
		}
		return f, fmt.Errorf("cannot use %s: %w", dir, plain(err))
	}
	if err := os.MkdirAll(f.Path(DesignsDir), 0o755); err != nil {
		return f, fmt.Errorf("cannot make %s: %w", dir, plain(err))
	}
	return f, nil
}

// CreateBeside makes a folder of a run inside another run's, under a name with
// the first free number.
func CreateBeside(f Folder, name string) (Folder, error) {
	for n := 1; ; n++ {
		inner, err := Create(f.Path(name + "-" + strconv.Itoa(n)))
		if !errors.Is(err, ErrExists) {
			return inner, err
		}
	}
}

// Open finds the folder of an existing run.
func Open(dir string) (Folder, error) {
	f := Folder{Dir: dir}
	info, err := os.Stat(dir)
	if errors.Is(err, fs.ErrNotExist) {
		return f, fmt.Errorf("there is no folder %s; name the folder of a run, as search printed it", dir)
	}
	if err != nil {
		return f, fmt.Errorf("cannot open %s: %w", dir, plain(err))
	}
	if !info.IsDir() {
		return f, fmt.Errorf("%s is a file; name a run's folder", dir)
	}
	if _, err := os.Stat(f.Path(BriefFile)); err != nil {
		return f, fmt.Errorf("%s %w", dir, ErrNoRun)
	}
	return f, nil
}

// Next is the first free default name, run-STEM-N, for a brief's file name.
func Next(brief string) (string, error) {
	stem := strings.TrimSuffix(filepath.Base(brief), filepath.Ext(brief))
	for n := 1; n < 1_000_000; n++ {
		dir := "run-" + stem + "-" + strconv.Itoa(n)
		if _, err := os.Lstat(dir); errors.Is(err, fs.ErrNotExist) {
			return dir, nil
		} else if err != nil {
			return "", fmt.Errorf("cannot look for %s: %w", dir, plain(err))
		}
	}
	return "", fmt.Errorf("no free name run-%s-N; name a folder with --run", stem)
}
