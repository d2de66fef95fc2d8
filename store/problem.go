package store

import (
	"database/sql"
	"errors"
	"io/fs"
	"strings"
	"syscall"

	"modernc.org/sqlite"
	sqlite3 "modernc.org/sqlite/lib"

	"weighhouse/model"
)

// An Error is what every call of this package fails with, but for a cancelled
// context: typed problems to be put into words, and what the system said.
type Error struct {
	Problems []model.Problem
	Cause    error // may be nil; for logs
}

// Error is for logs and tests; people read app/words.
func (e *Error) Error() string {
	var parts []string
	for _, p := range e.Problems {
		parts = append(parts, p.Error())
	}
	if e.Cause != nil {
		parts = append(parts, e.Cause.Error())
	}
	return strings.Join(parts, "; ")
}

// Unwrap gives the problems, each an error, and the cause.
func (e *Error) Unwrap() []error {
	var all []error
	for _, p := range e.Problems {
		all = append(all, p)
	}
	if e.Cause != nil {
		all = append(all, e.Cause)
	}
	return all
}

// Problems are what err has to say to a person. An error of another package
// is one "unexpected".
func Problems(err error) []model.Problem {
	if e, ok := errors.AsType[*Error](err); ok {
		return e.Problems
	}
	if p, ok := errors.AsType[model.Problem](err); ok {
		return []model.Problem{p}
	}
	if err == nil {
		return nil
	}
	return []model.Problem{{Code: "unexpected", Args: model.Args{"detail": err.Error()}}}
}

// refuse is an Error of one problem; args are names and values in turn.
func refuse(code string, args ...string) *Error {
	p := model.Problem{Code: code}
	if len(args) > 0 {
		p.Args = model.Args{}
		for i := 0; i < len(args); i += 2 {
			p.Args[args[i]] = args[i+1]
		}
	}
	return &Error{Problems: []model.Problem{p}}
}

// fault turns what the system or SQLite said about a file into an Error. An
// Error stays what it is, and so does a cancelled context.
func fault(file string, err error) error {
	if _, ok := errors.AsType[*Error](err); ok || err == nil || isCancelled(err) {
		return err
	}
	e := refuse(faultCode(err), "file", file, "detail", err.Error())
	e.Cause = err
	return e
}

// faultCode names the kind of failure.
func faultCode(err error) string {
	if e, ok := errors.AsType[*sqlite.Error](err); ok {
		switch e.Code() {
		case sqlite3.SQLITE_READONLY_DBMOVED:
			return "file_moved"
		case sqlite3.SQLITE_IOERR_SHORT_READ:
			return "truncated"
		}
		switch e.Code() & 0xff {
		case sqlite3.SQLITE_FULL:
			return "disk_full"
		case sqlite3.SQLITE_BUSY, sqlite3.SQLITE_LOCKED:
			return "locked"
		case sqlite3.SQLITE_CORRUPT, sqlite3.SQLITE_NOTADB:
			return "damaged"
		case sqlite3.SQLITE_READONLY, sqlite3.SQLITE_CANTOPEN, sqlite3.SQLITE_PERM:
			return "read_only"
		case sqlite3.SQLITE_IOERR:
			return "disk_failed"
		}
		return "unexpected"
	}
	switch {
	case errors.Is(err, sql.ErrNoRows):
		return "damaged" // asked only for rows that every branch has
	case isDiskFull(err):
		return "disk_full"
	case isHeld(err):
		return "locked"
	case errors.Is(err, fs.ErrPermission), errors.Is(err, syscall.EROFS):
		return "read_only"
	}
	if _, ok := errors.AsType[*fs.PathError](err); ok {
		return "disk_failed"
	}
	return "unexpected"
}
