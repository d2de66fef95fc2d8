//go:build unix

package store

import (
	"errors"
	"os"
	"syscall"

	"golang.org/x/sys/unix"
)

// lockFile takes the one lock of an open file, without waiting.
func lockFile(f *os.File) error { return unix.Flock(int(f.Fd()), unix.LOCK_EX|unix.LOCK_NB) }

// isHeld tells that another window or program has the file.
func isHeld(err error) bool { return errors.Is(err, unix.EWOULDBLOCK) }

func isDiskFull(err error) bool {
	return errors.Is(err, syscall.ENOSPC) || errors.Is(err, syscall.EDQUOT)
}

// writable fails where no file can be made in a folder.
func writable(dir string) error {
	if err := unix.Faccessat(unix.AT_FDCWD, dir, unix.W_OK|unix.X_OK, unix.AT_EACCESS); err != nil {
		return &os.PathError{Op: "access", Path: dir, Err: err}
	}
	return nil
}

// syncFolder makes a rename in a folder outlast a power cut.
func syncFolder(dir string) error {
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer d.Close()
	return d.Sync()
}
