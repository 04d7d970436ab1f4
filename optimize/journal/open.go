package journal

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"sync"
	"time"

	"modernc.org/sqlite"
)

// File is the journal's name in a run's folder.
const File = "journal.db"

// Reader reads a journal, also while another process writes it. It is safe
// for concurrent use and never changes the file.
type Reader struct {
	path   string
	header Header
	db     *sql.DB
	insert string // columns of an evaluation, for reading and writing alike
	answer *sql.Stmt
	spare  string // folder of a private copy, removed on Close
}

// Writer appends to a journal. There may be one for a file; see [Lock]. It
// is safe for concurrent use.
type Writer struct {
	*Reader
	mu    sync.Mutex
	db    *sql.DB
	stmts statements
	// What the next group needs to know of the file; see forget.
	models map[string]int64
	fronts map[int][]member // by rung
	grown  grown
	now    func() time.Time
}

// busyTimeout is how long a lock of another program is waited for, ms.
const busyTimeout = 30000

// setup chooses, once for the process, how SQLite talks to the system:
// fdatasync is as durable as fsync and faster, and locks that belong to the
// open file are not lost when something else in the process closes the file.
// Where the system has neither, SQLite's defaults serve.
var setup = sync.OnceFunc(func() {
	_, _ = sqlite.Fdatasync(true)
	_, _ = sqlite.OFDLocking(true)
})

// network reports whether a folder lies on another machine, and on what file
// system. A variable, so that tests need no network.
var network = networkOf

// open gives a handle on the file; options are of SQLite's URI.
func open(path string, options ...string) (*sql.DB, error) {
	setup()
	abs, err := filepath.Abs(path)
	if err != nil {
		return nil, err
	}
	p := filepath.ToSlash(abs)
	if !strings.HasPrefix(p, "/") {
		p = "/" + p
	}
	options = append(options, "_dqs=0", fmt.Sprintf("_pragma=busy_timeout(%d)", busyTimeout))
	u := url.URL{Scheme: "file", Path: p, RawQuery: strings.Join(options, "&")}
	return sql.Open("sqlite", u.String())
}

// openWriting is open for the one connection that writes.
func openWriting(path string) (*sql.DB, error) {
	options := []string{"mode=rw", "_txlock=immediate", "_pragma=synchronous(FULL)", "_pragma=foreign_keys(1)",
		"_pragma=wal_autocheckpoint(1000)", "_pragma=journal_size_limit(33554432)", "_pragma=cache_size(-16384)"}
	if runtime.GOOS == "darwin" {
		// Without it a sync there leaves the bytes in the drive's own cache.
		options = append(options, "_pragma=fullfsync(1)", "_pragma=checkpoint_fullfsync(1)")
	}
	db, err := open(path, options...)
	if err == nil {
		db.SetMaxOpenConns(1)
	}
	return db, err
}

// Create starts a journal at path, which must not exist. It refuses a folder
// on a network file system or one that cannot be written in. The file
// appears whole or not at all.
func Create(path string, h Header) (*Writer, error) {
	if err := h.check(); err != nil {
		return nil, err
	}
	if err := writable(path); err != nil {
		return nil, err
	}
	if _, err := os.Lstat(path); err == nil {
		return nil, &Error{Path: path, Fault: fs.ErrExist, Remedy: "resume that run or choose another folder"}
	}
	h.Created = time.Now()
	if err := build(path, &h); err != nil {
		return nil, fault(path, err)
	}
	return Open(path)
}

// build makes the file beside its place and moves it there.
func build(path string, h *Header) error {
	part := path + ".new"
	for _, p := range []string{part, part + "-journal", part + "-wal", part + "-shm", path + "-wal", path + "-shm"} {
		if err := os.Remove(p); err != nil && !errors.Is(err, fs.ErrNotExist) {
			return err
		}
	}
	f, err := os.OpenFile(part, os.O_CREATE|os.O_EXCL|os.O_RDWR, 0o644)
	if err != nil {
		return err
	}
	if err := f.Close(); err != nil {
		return err
	}
	if err := lay(part, h); err != nil {
		_ = os.Remove(part)
		return err
	}
	if err := os.Rename(part, path); err != nil {
		return err
	}
	return syncDir(filepath.Dir(path))
}

// lay writes schema and header into an empty file.
func lay(part string, h *Header) error {
	db, err := openWriting(part)
	if err != nil {
		return err
	}
	defer db.Close()
	// An answer of a few frequencies takes 2 to 4 kB: pages of 8 kB hold
	// some of them with little waste.
	if _, err := db.Exec("PRAGMA page_size = 8192"); err != nil {
		return err
	}
	tx, err := db.Begin()
	if err != nil {
		return err
	}
	defer tx.Rollback()
	if _, err := tx.Exec(h.schema()); err != nil {
		return err
	}
	_, err = tx.Exec(`INSERT INTO run VALUES (1, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)`,
		h.Brief, h.Digest, h.Program, int64(h.Seed), h.Machine, h.Created.UnixMicro(),
		list(h.Models), list(h.Variables), list(h.Figures), list(h.Aims), list(h.Limits))
	if err != nil {
		return err
	}
	if err := tx.Commit(); err != nil {
		return err
	}
	if _, err := db.Exec("PRAGMA journal_mode = WAL"); err != nil {
		return err
	}
	return db.Close()
}

// writable refuses a folder in which a journal would not be safe.
func writable(path string) error {
	dir := filepath.Dir(path)
	if kind, remote := network(dir); remote {
		return &Error{Path: path, Fault: ErrNetwork, Err: errors.New(kind),
			Remedy: "its locks and syncs cannot be relied on: choose a folder on a local disk"}
	}
	f, err := os.CreateTemp(dir, ".probe-*")
	if err != nil {
		return fault(path, err)
	}
	name := f.Name()
	return fault(path, errors.Join(f.Close(), os.Remove(name)))
}

// Open goes on with the journal at path.
func Open(path string) (*Writer, error) {
	if err := present(path); err != nil {
		return nil, err
	}
	if err := writable(path); err != nil {
		return nil, err
	}
	db, err := openWriting(path)
	if err != nil {
		return nil, fault(path, err)
	}
	w := &Writer{db: db, now: time.Now}
	// The writer is first at the file, so that it is the one to recover what
	// a killed process left in the log.
	if err := recognise(path, db); err != nil {
		return nil, errors.Join(err, db.Close())
	}
	if err := w.claim(); err != nil {
		return nil, errors.Join(fault(path, err), db.Close())
	}
	if w.Reader, err = read(path, "mode=ro"); err != nil {
		return nil, errors.Join(err, db.Close())
	}
	if err := errors.Join(w.layGrowth(), w.prepare(), w.remember()); err != nil {
		return nil, errors.Join(fault(path, err), w.Close())
	}
	return w, nil
}

// claim takes and gives back the right to write, which a read-only file or
// another program may refuse.
func (w *Writer) claim() error {
	tx, err := w.db.Begin()
	if err != nil {
		return err
	}
	if _, err := tx.Exec("UPDATE run SET id = 1 WHERE id = 0"); err != nil {
		return errors.Join(err, tx.Rollback())
	}
	return tx.Rollback()
}

// Read opens the journal at path for reading only. It sees what is committed,
// each call anew. On a medium that cannot be written to, or on a network, it
// reads the file as it stands, by way of a private copy if the log is not
// yet folded in.
func Read(path string) (*Reader, error) {
	if err := present(path); err != nil {
		return nil, err
	}
	if _, remote := network(filepath.Dir(path)); !remote {
		r, err := read(path, "mode=ro")
		if err == nil || !errors.Is(err, ErrReadOnly) {
			return r, err
		}
	}
	if info, err := os.Stat(path + "-wal"); err != nil || info.Size() == 0 {
		return read(path, "mode=ro", "immutable=1")
	}
	return readCopy(path)
}

// readCopy reads a private copy of the file and its log.
func readCopy(path string) (*Reader, error) {
	dir, err := os.MkdirTemp("", "journal-*")
	if err != nil {
		return nil, fault(path, err)
	}
	twin := filepath.Join(dir, File)
	for _, ext := range []string{"", "-wal"} {
		if err := copyFile(twin+ext, path+ext); err != nil {
			return nil, errors.Join(fault(path, err), os.RemoveAll(dir))
		}
	}
	r, err := read(twin, "mode=ro")
	if err != nil {
		return nil, errors.Join(err, os.RemoveAll(dir))
	}
	r.path, r.spare = path, dir
	return r, nil
}

func copyFile(to, from string) error {
	in, err := os.Open(from)
	if err != nil {
		return err
	}
	defer in.Close()
	out, err := os.Create(to)
	if err != nil {
		return err
	}
	_, err = io.Copy(out, in)
	return errors.Join(err, out.Close())
}

// present says clearly that there is no journal, rather than make one.
func present(path string) error {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return &Error{Path: path, Fault: fs.ErrNotExist, Remedy: "is this the folder of a run?"}
	case err != nil:
		return fault(path, err)
	case !info.Mode().IsRegular():
		return &Error{Path: path, Fault: ErrForeign, Err: errors.New("no regular file")}
	case info.Size() == 0:
		return damaged(path, "the file is empty")
	}
	return nil
}

// read opens for reading and takes in the header.
func read(path string, options ...string) (*Reader, error) {
	db, err := open(path, append(options, "_query_only=1", "_pragma=cache_size(-8192)")...)
	if err != nil {
		return nil, fault(path, err)
	}
	db.SetMaxOpenConns(4)
	db.SetMaxIdleConns(4)
	r := &Reader{path: path, db: db}
	if err := recognise(path, db); err != nil {
		return nil, errors.Join(err, db.Close())
	}
	if err := r.load(); err != nil {
		return nil, errors.Join(err, db.Close())
	}
	return r, nil
}

// recognise checks that the file is a journal of a version that can be read.
func recognise(path string, db *sql.DB) error {
	var app, version int
	err := db.QueryRow("SELECT application_id, user_version FROM pragma_application_id, pragma_user_version").Scan(&app, &version)
	switch {
	case err != nil:
		return fault(path, err)
	case app != applicationID:
		return &Error{Path: path, Fault: ErrForeign}
	case version > schemaVersion:
		return &Error{Path: path, Fault: ErrNewer, Err: fmt.Errorf("schema version %d, this program reads up to %d", version, schemaVersion)}
	}
	return nil
}

// load reads the header and what follows from it.
func (r *Reader) load() error {
	h := &r.header
	var seed, created int64
	var models, variables, figures, aims, limits string
	err := r.db.QueryRow(`SELECT brief, digest, program, seed, machine, created_us,
		models, variables, figures, aims, limits FROM run`).Scan(&h.Brief, &h.Digest, &h.Program, &seed,
		&h.Machine, &created, &models, &variables, &figures, &aims, &limits)
	if errors.Is(err, sql.ErrNoRows) {
		return damaged(r.path, "the header is missing")
	}
	if err != nil {
		return fault(r.path, err)
	}
	h.Seed, h.Created = uint64(seed), time.UnixMicro(created).UTC()
	var errs [5]error
	h.Models, errs[0] = unlist[string](models)
	h.Variables, errs[1] = unlist[Variable](variables)
	h.Figures, errs[2] = unlist[string](figures)
	h.Aims, errs[3] = unlist[string](aims)
	h.Limits, errs[4] = unlist[string](limits)
	if err := errors.Join(append(errs[:], h.check())...); err != nil {
		return damaged(r.path, "the header cannot be read: %w", err)
	}
	r.insert = strings.Join(append(strings.Fields(fixedColumns), h.numberColumns()...), ", ")
	r.answer, err = r.db.PrepareContext(context.Background(), answerQuery)
	return fault(r.path, err)
}

// Header is what the run was started with.
func (r *Reader) Header() Header { return r.header }

// Path is the journal's file.
func (r *Reader) Path() string { return r.path }

// dir is the run's folder.
func (r *Reader) dir() string { return filepath.Dir(r.path) }

// Close lets go of the file.
func (r *Reader) Close() error {
	err := r.db.Close()
	if r.spare != "" {
		err = errors.Join(err, os.RemoveAll(r.spare))
	}
	return err
}

// Close folds the log into the file and lets go of it. What was recorded is
// safe whether or not it is called.
func (w *Writer) Close() error {
	w.mu.Lock()
	defer w.mu.Unlock()
	// The reading side goes first: the last to close folds the log in.
	return fault(w.path, errors.Join(w.Reader.Close(), w.stmts.close(), w.db.Close()))
}
