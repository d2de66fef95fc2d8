package store

import (
	"os"
	"path/filepath"
)

// A folderLock is held while a branch is open, so that a second window on the
// same folder says so and stops. The file is empty and stays in the folder.
type folderLock struct {
	file *os.File
	made bool
}

// lockFolder takes the folder's lock, where wanted making its file first.
func lockFolder(dir string, make bool) (*folderLock, error) {
	path := filepath.Join(dir, lockName)
	for {
		_, err := os.Stat(path)
		made := os.IsNotExist(err)
		flags := os.O_RDWR
		if make {
			flags |= os.O_CREATE
		}
		f, err := os.OpenFile(path, flags, 0o600)
		if err != nil {
			return nil, err
		}
		if err := lockFile(f); err != nil {
			f.Close()
			return nil, err
		}
		// Whoever held it before may have removed it in between.
		if now, err := os.Stat(path); err == nil {
			if mine, err := f.Stat(); err == nil && os.SameFile(now, mine) {
				return &folderLock{f, made}, nil
			}
		}
		f.Close()
	}
}

func (l *folderLock) release() { l.file.Close() }

// undo releases a lock and takes away its file where it was not there before.
func (l *folderLock) undo() {
	if l.made {
		os.Remove(l.file.Name()) // fails on Windows while it is open: an empty file stays
	}
	l.file.Close()
}
