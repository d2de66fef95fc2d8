package store

import (
	"errors"
	"os"
	"path/filepath"
	"syscall"

	"golang.org/x/sys/windows"
)

// lockFile takes the one lock of an open file, without waiting.
func lockFile(f *os.File) error {
	const flags = windows.LOCKFILE_EXCLUSIVE_LOCK | windows.LOCKFILE_FAIL_IMMEDIATELY
	return windows.LockFileEx(windows.Handle(f.Fd()), flags, 0, 1, 0, new(windows.Overlapped))
}

// isHeld tells that another window or program has the file.
func isHeld(err error) bool {
	return errors.Is(err, windows.ERROR_LOCK_VIOLATION) || errors.Is(err, windows.ERROR_SHARING_VIOLATION)
}

func isDiskFull(err error) bool {
	return errors.Is(err, windows.ERROR_DISK_FULL) || errors.Is(err, windows.ERROR_HANDLE_DISK_FULL) || errors.Is(err, syscall.ENOSPC)
}

// writable has nothing to ask: what a folder allows is known by trying.
func writable(string) error { return nil }

// syncFolder has nothing to do: NTFS journals its names.
func syncFolder(string) error { return nil }

// onNetwork tells whether a folder is on a drive of another computer.
func onNetwork(dir string) (bool, error) {
	root, err := windows.UTF16PtrFromString(filepath.VolumeName(dir) + `\`)
	if err != nil {
		return false, err
	}
	return windows.GetDriveType(root) == windows.DRIVE_REMOTE, nil
}
