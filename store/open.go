package store

import (
	"context"
	"database/sql"
	"errors"
	"os"
	"path/filepath"
	"sync"
	"sync/atomic"
	"time"

	"weighhouse/store/migrations"
)

// The names of a desk's file and of the file that is locked while it is open.
const (
	FileName = "desk.weighhouse"
	lockName = "desk.lock"
)

// Options are how a branch is opened; the zero Options are the usual ones.
type Options struct {
	// Clock tells the time, in the place the branch is in; time.Now when nil.
	Clock func() time.Time

	pragmas []string // for tests
}

// A Branch is a desk's file, opened and locked. It is safe for concurrent use.
type Branch struct {
	info  Info
	path  string
	db    *sql.DB
	lock  *folderLock
	clock func() time.Time

	shiftDays atomic.Int64 // see now
	lastAt    atomic.Int64 // the last entry's time, in milliseconds

	writing sync.Mutex // held for each act's transaction

	editionsMu sync.Mutex
	released   []*released // nil until first asked for

	resultsMu sync.Mutex
	results   []int64 // entries in order; nil until first asked for
}

// Info is what a branch is.
type Info struct {
	Name     string
	Desk     string // one capital letter
	Practice bool   // everything in it is invented
}

// Info tells what the branch is.
func (b *Branch) Info() Info { return b.info }

// Open opens the branch kept in a folder. Nothing in the folder is changed
// where it fails. The codes of its Problems: no_branch, locked, read_only,
// network_drive, foreign_file, newer_program, truncated, damaged, disk_full,
// disk_failed.
func Open(ctx context.Context, dir string, o Options) (*Branch, error) {
	dir, path, err := locate(dir)
	if err != nil {
		return nil, err
	}
	lock, err := lockFolder(dir, false)
	if errors.Is(err, os.ErrNotExist) {
		// No lock file, so nobody has the branch open: look before making one.
		if _, err := checkHeader(path); err != nil {
			return nil, err
		}
		lock, err = lockFolder(dir, true)
	}
	if err != nil {
		return nil, fault(path, err)
	}
	b, err := open(ctx, path, lock, o)
	if err != nil {
		lock.undo()
		return nil, fault(path, err)
	}
	return b, nil
}

// locate makes a folder absolute and refuses network drives. The folder need
// not be there yet.
func locate(dir string) (abs, path string, err error) {
	if abs, err = filepath.Abs(dir); err != nil {
		return "", "", fault(dir, err)
	}
	path = filepath.Join(abs, FileName)
	there := abs
	for {
		remote, err := onNetwork(there)
		switch parent := filepath.Dir(there); {
		case errors.Is(err, os.ErrNotExist) && parent != there:
			there = parent
		case err != nil:
			return "", "", fault(path, err)
		case remote:
			return "", "", refuse("network_drive", "file", path)
		default:
			return abs, path, nil
		}
	}
}

// open opens a file under its lock.
func open(ctx context.Context, path string, lock *folderLock, o Options) (*Branch, error) {
	version, err := checkHeader(path)
	if err != nil {
		return nil, err
	}
	if err := writable(filepath.Dir(path)); err != nil {
		return nil, err
	}
	if version < migrations.Latest() {
		if err := migrate(ctx, path); err != nil {
			return nil, err
		}
	}
	b := &Branch{path: path, lock: lock, clock: o.Clock}
	if b.clock == nil {
		b.clock = time.Now
	}
	if b.db, err = connect(ctx, path, o.pragmas); err != nil {
		return nil, err
	}
	if err := b.load(ctx); err != nil {
		b.db.Close()
		return nil, err
	}
	return b, nil
}

// load reads what is needed at once.
func (b *Branch) load(ctx context.Context) error {
	err := b.db.QueryRowContext(ctx, "SELECT name, desk, practice FROM branch").
		Scan(&b.info.Name, &b.info.Desk, &b.info.Practice)
	if err != nil {
		return err
	}
	last, err := lastEntry(ctx, b.db)
	if err != nil {
		return err
	}
	b.lastAt.Store(last.At.UnixMilli())
	return nil
}

// Close closes the file and gives the folder free. It waits for calls that
// are under way; cancel the context of a long one first.
func (b *Branch) Close() error {
	err := b.db.Close() // which does not wait
	for b.db.Stats().OpenConnections > 0 {
		time.Sleep(time.Millisecond)
	}
	b.lock.release()
	return fault(b.path, err)
}
