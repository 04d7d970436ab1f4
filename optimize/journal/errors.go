package journal

import (
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
	"strings"
	"syscall"

	"modernc.org/sqlite"
	sqlite3 "modernc.org/sqlite/lib"
)

// What can be wrong with a journal or its folder, for errors.Is. The first
// four wrap [ErrCannotWrite].
var (
	ErrFull     = fmt.Errorf("%w: no room", ErrCannotWrite)
	ErrReadOnly = fmt.Errorf("%w: read-only", ErrCannotWrite)
	ErrNetwork  = fmt.Errorf("%w: network file system", ErrCannotWrite)
	ErrBusy     = fmt.Errorf("%w: held by another program", ErrCannotWrite)

	ErrCannotWrite = errors.New("cannot write")
	ErrDamaged     = errors.New("damaged")
	ErrForeign     = errors.New("not a journal of this program")
	ErrNewer       = errors.New("written by a newer version of this program")
	ErrLocked      = errors.New("another search runs here")
)

// Error is a fault of a journal or of the folder it lies in.
type Error struct {
	Path   string
	Fault  error  // one of the Err… variables, fs.ErrExist, fs.ErrNotExist
	Remedy string // what would be right
	Err    error  // what the system said; may be nil
}

func (e *Error) Error() string {
	s := "journal " + e.Path + ": " + e.Fault.Error()
	if e.Err != nil {
		s += " (" + e.Err.Error() + ")"
	}
	if e.Remedy != "" {
		s += "; " + e.Remedy
	}
	return s
}

// Unwrap gives the fault and what the system said.
func (e *Error) Unwrap() []error {
	if e.Err == nil {
		return []error{e.Fault}
	}
	return []error{e.Fault, e.Err}
}

// Remedies that more than one place gives.
const (
	remedyFull    = "everything recorded so far is kept: make room and resume"
	remedyFolder  = "choose a folder on a local disk that you may write in"
	remedyDamaged = "what it still holds cannot be trusted: restore the file from a copy"
)

// fault makes an *Error of what SQLite or the system said.
func fault(path string, err error) error {
	if err == nil {
		return nil
	}
	var known *Error
	if errors.As(err, &known) {
		return err
	}
	e := &Error{Path: path, Err: err, Fault: ErrCannotWrite}
	var sq *sqlite.Error
	if errors.As(err, &sq) {
		e.classify(sq.Code())
		return e
	}
	switch {
	case errors.Is(err, syscall.ENOSPC):
		e.Fault, e.Remedy = ErrFull, remedyFull
	case errors.Is(err, fs.ErrPermission), errors.Is(err, syscall.EROFS):
		e.Fault, e.Remedy = ErrReadOnly, remedyFolder
	case errors.Is(err, fs.ErrNotExist):
		e.Fault, e.Remedy = fs.ErrNotExist, "create folder "+filepath.Dir(path)+" first"
	case strings.HasPrefix(err.Error(), "sql: Scan error"):
		// database/sql has no type for it: a value the schema does not allow.
		e.Fault, e.Remedy = ErrDamaged, remedyDamaged
	}
	return e
}

// classify names the fault of a result code of SQLite, extended or not.
func (e *Error) classify(code int) {
	switch code & 0xff {
	case sqlite3.SQLITE_FULL:
		e.Fault, e.Remedy = ErrFull, remedyFull
	case sqlite3.SQLITE_READONLY, sqlite3.SQLITE_PERM, sqlite3.SQLITE_CANTOPEN, sqlite3.SQLITE_AUTH:
		e.Fault, e.Remedy = ErrReadOnly, remedyFolder
	case sqlite3.SQLITE_BUSY, sqlite3.SQLITE_LOCKED:
		e.Fault, e.Remedy = ErrBusy, "close the program that holds it and resume"
	case sqlite3.SQLITE_CORRUPT, sqlite3.SQLITE_NOTADB, sqlite3.SQLITE_ERROR, sqlite3.SQLITE_FORMAT, sqlite3.SQLITE_MISMATCH:
		e.Fault, e.Remedy = ErrDamaged, remedyDamaged
	case sqlite3.SQLITE_IOERR:
		switch code {
		case sqlite3.SQLITE_IOERR_READ, sqlite3.SQLITE_IOERR_SHORT_READ, sqlite3.SQLITE_IOERR_CORRUPTFS, sqlite3.SQLITE_IOERR_DATA:
			e.Fault, e.Remedy = ErrDamaged, remedyDamaged
		default:
			e.Remedy = remedyFull
		}
	}
}

// damaged is an error for content that cannot be.
func damaged(path, format string, args ...any) error {
	return &Error{Path: path, Fault: ErrDamaged, Err: fmt.Errorf(format, args...), Remedy: remedyDamaged}
}
