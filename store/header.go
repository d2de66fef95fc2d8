package store

import (
	"encoding/binary"
	"errors"
	"io"
	"os"
	"strconv"

	"weighhouse/store/migrations"
)

// applicationID marks a desk's file: "WHse".
const applicationID = 0x57487365

// headerSize is how long an SQLite file's header is; its fields are told at
// sqlite.org/fileformat.html, 1.3.
const headerSize = 100

var magic = []byte("SQLite format 3\x00")

// checkHeader looks at the first bytes of a desk's file, before SQLite opens
// it, and changes nothing. It gives the file's version; errors are Errors.
//
// The caller holds the lock, or knows that nobody in this process has the
// file open: closing any handle of it would drop SQLite's own locks.
func checkHeader(path string) (version int, err error) {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, os.ErrNotExist):
		return 0, refuse("no_branch", "file", path)
	case err != nil:
		return 0, fault(path, err)
	case !info.Mode().IsRegular():
		return 0, refuse("foreign_file", "file", path)
	}
	// For writing, to learn whether that is allowed.
	f, err := os.OpenFile(path, os.O_RDWR, 0)
	if err != nil {
		return 0, fault(path, err)
	}
	defer f.Close()
	h := make([]byte, headerSize)
	n, err := io.ReadFull(f, h)
	if err != nil && !errors.Is(err, io.EOF) && !errors.Is(err, io.ErrUnexpectedEOF) {
		return 0, fault(path, err)
	}
	if m := min(n, len(magic)); string(h[:m]) != string(magic[:m]) {
		return 0, refuse("foreign_file", "file", path)
	}
	if n < headerSize {
		return 0, truncated(path, info.Size(), headerSize)
	}
	if binary.BigEndian.Uint32(h[68:]) != applicationID {
		return 0, refuse("foreign_file", "file", path)
	}
	// What a killed program left in its log counts as in the file.
	log, err := readLog(path + "-wal")
	if err != nil {
		return 0, fault(path, err)
	}
	if log.header != nil {
		h = log.header
	}
	version = int(binary.BigEndian.Uint32(h[60:]))
	if version > migrations.Latest() {
		return 0, refuse("newer_program", "file", path,
			"version", strconv.Itoa(version), "known", strconv.Itoa(migrations.Latest()))
	}
	pageSize := int64(binary.BigEndian.Uint16(h[16:]))
	if pageSize == 1 {
		pageSize = 65536
	}
	if pageSize < 512 || pageSize&(pageSize-1) != 0 || version == 0 {
		return 0, refuse("damaged", "file", path)
	}
	pages := log.pages
	if pages == 0 {
		pages = int64(binary.BigEndian.Uint32(h[28:]))
	}
	for page := info.Size()/pageSize + 1; page <= pages; page++ {
		if !log.holds[page] {
			return 0, truncated(path, info.Size(), pages*pageSize)
		}
	}
	return version, nil
}

func truncated(path string, size, expected int64) error {
	return refuse("truncated", "file", path,
		"size", strconv.FormatInt(size, 10), "expected", strconv.FormatInt(expected, 10))
}
