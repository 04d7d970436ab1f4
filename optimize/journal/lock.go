package journal

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"time"
)

// LockFile is the lock's name in a run's folder.
const LockFile = "search.lock"

// Holder is the process that searches in a folder.
type Holder struct {
	PID  int    `json:"pid"`
	Host string `json:"host"`
	// Born identifies the process among all that had its number, where the
	// system tells: boot and start time.
	Born  string    `json:"born,omitempty"`
	Since time.Time `json:"since"`
}

func (h Holder) String() string {
	return fmt.Sprintf("process %d on %s, since %s", h.PID, h.Host, h.Since.Format("2006-01-02 15:04:05"))
}

// alive reports whether the process still runs. A process on another host
// cannot be seen: known is false.
func (h *Holder) alive() (alive, known bool) {
	host, err := os.Hostname()
	if err != nil || host != h.Host {
		return false, false
	}
	if h.PID == os.Getpid() {
		return born(h.PID) == h.Born, true
	}
	if !running(h.PID) {
		return false, true
	}
	now := born(h.PID)
	return now == "" || h.Born == "" || now == h.Born, true
}

// Held is a folder's lock.
type Held struct {
	f    *os.File
	path string
}

// Lock claims a folder for the one search that may write in it. The claim
// ends with the process, however it ends; one that was left behind is taken
// over. A live one is refused with an [Error] whose fault is [ErrLocked] and
// that names the holder.
func Lock(dir string) (*Held, error) {
	path := filepath.Join(dir, LockFile)
	for range 100 {
		held, err := try(path)
		switch {
		case errors.Is(err, errFading):
			time.Sleep(50 * time.Millisecond)
		case !errors.Is(err, errGone):
			return held, err
		}
	}
	return nil, &Error{Path: path, Fault: ErrLocked, Remedy: "it changes hands all the time; try again"}
}

// errGone says that the file was removed between opening and locking it,
// errFading that its lock outlives its dead holder for the moment it takes a
// process that was just starting another to leave.
var (
	errGone   = errors.New("lock file replaced")
	errFading = errors.New("holder dead, lock still held")
)

func try(path string) (*Held, error) {
	f, err := os.OpenFile(path, os.O_CREATE|os.O_RDWR, 0o644)
	if err != nil {
		return nil, fault(path, err)
	}
	ok, err := lockFile(f)
	if err != nil {
		return nil, errors.Join(&Error{Path: path, Fault: ErrCannotWrite, Err: err, Remedy: remedyFolder}, f.Close())
	}
	if !ok {
		if h, signed := signature(f); signed {
			if alive, known := h.alive(); known && !alive {
				return nil, errors.Join(errFading, f.Close())
			}
		}
		return nil, errors.Join(refused(path, f), f.Close())
	}
	if here, err := os.Stat(path); err != nil || !same(here, f) {
		return nil, errors.Join(errGone, f.Close())
	}
	if err := free(path, f); err != nil {
		return nil, errors.Join(err, f.Close())
	}
	if err := sign(f); err != nil {
		return nil, errors.Join(fault(path, err), f.Close())
	}
	return &Held{f: f, path: path}, nil
}

func same(here fs.FileInfo, f *os.File) bool {
	mine, err := f.Stat()
	return err == nil && os.SameFile(here, mine)
}

// free looks at who signed the file whose lock we hold. On a local disk the
// system drops a lock with its process, so whoever signed is gone; where
// that cannot be relied on, the signature decides.
func free(path string, f *os.File) error {
	h, ok := signature(f)
	if !ok {
		return nil
	}
	alive, known := h.alive()
	_, remote := network(filepath.Dir(path))
	if known && alive || !known && remote {
		return refused(path, f)
	}
	return nil
}

// refused names the holder as far as it is known.
func refused(path string, f *os.File) error {
	e := &Error{Path: path, Fault: ErrLocked, Remedy: "let it finish or stop it"}
	h, ok := signature(f)
	if !ok {
		return e
	}
	e.Err = errors.New(h.String())
	if _, known := h.alive(); !known {
		e.Remedy += "; if that machine no longer runs it, remove the file"
	}
	return e
}

// sign writes this process into the file.
func sign(f *os.File) error {
	host, err := os.Hostname()
	if err != nil {
		return err
	}
	b, err := json.Marshal(Holder{PID: os.Getpid(), Host: host, Born: born(os.Getpid()), Since: time.Now().Round(time.Second)})
	if err != nil {
		return err
	}
	if err := f.Truncate(0); err != nil {
		return err
	}
	if _, err := f.WriteAt(append(b, '\n'), 0); err != nil {
		return err
	}
	return f.Sync()
}

// signature reads who signed the file; none in an empty or torn one.
func signature(f io.ReaderAt) (Holder, bool) {
	var h Holder
	b, err := io.ReadAll(io.NewSectionReader(f, 0, 4096))
	if err != nil || json.Unmarshal(b, &h) != nil {
		return Holder{}, false
	}
	return h, h.PID > 0
}

// Release gives the folder back.
func (h *Held) Release() error {
	// Removed while the lock is held: who opened the file meanwhile finds
	// its name gone and starts afresh. Windows removes no open file.
	err := h.f.Truncate(0)
	rerr := os.Remove(h.path)
	err = errors.Join(err, h.f.Close())
	if rerr != nil {
		_ = os.Remove(h.path)
	}
	return err
}

// Search says who searches in a folder and whether that process is alive. A
// holder on another host counts as alive, for nothing else is known of it.
func Search(dir string) (h Holder, alive bool) {
	f, err := os.Open(filepath.Join(dir, LockFile))
	if err != nil {
		return Holder{}, false
	}
	defer f.Close()
	h, ok := signature(f)
	if !ok {
		return Holder{}, false
	}
	alive, known := h.alive()
	return h, alive || !known
}
