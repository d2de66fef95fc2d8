package store

import (
	"bufio"
	"encoding/binary"
	"errors"
	"io"
	"os"
)

// A leftLog is what stands committed in the write-ahead log that a killed
// program left beside its file, and that SQLite brings in when it opens the
// file. Without a log it is zero. The format is told at
// sqlite.org/fileformat.html, 4.
type leftLog struct {
	header []byte         // the file's, as last committed; nil where it is not in the log
	pages  int64          // of the file after the last commit; 0 without one
	holds  map[int64]bool // the pages that are in the log
}

const (
	logHeaderSize   = 32
	frameHeaderSize = 24
	logMagic        = 0x377f0682 // with a last bit for the order of bytes in sums
)

// readLog reads a log as far as its salts and checksums hold.
func readLog(path string) (l leftLog, err error) {
	f, err := os.Open(path)
	if errors.Is(err, os.ErrNotExist) {
		return l, nil
	} else if err != nil {
		return l, err
	}
	defer f.Close()
	r := bufio.NewReaderSize(f, 1<<16)
	h := make([]byte, logHeaderSize)
	if _, err := io.ReadFull(r, h); err != nil {
		return l, unlessCut(err)
	}
	magic, pageSize := binary.BigEndian.Uint32(h), binary.BigEndian.Uint32(h[8:])
	sum := logSum{order: binary.LittleEndian}
	if magic&1 != 0 {
		sum.order = binary.BigEndian
	}
	sum.add(h[:24])
	if magic&^1 != logMagic || pageSize < 512 || pageSize > 65536 || !sum.is(h[24:]) {
		return l, nil
	}
	frame := make([]byte, frameHeaderSize+pageSize)
	var header []byte
	holds := map[int64]bool{}
	for {
		if _, err := io.ReadFull(r, frame); err != nil {
			return l, unlessCut(err)
		}
		sum.add(frame[:8])
		sum.add(frame[frameHeaderSize:])
		if string(frame[8:16]) != string(h[16:24]) || !sum.is(frame[16:24]) {
			return l, nil
		}
		page := int64(binary.BigEndian.Uint32(frame))
		holds[page] = true
		if page == 1 {
			header = append([]byte(nil), frame[frameHeaderSize:frameHeaderSize+headerSize]...)
		}
		if pages := binary.BigEndian.Uint32(frame[4:]); pages > 0 { // a commit
			l = leftLog{header, int64(pages), holds}
		}
	}
}

// unlessCut forgives a log that ends anywhere: so a power cut leaves it.
func unlessCut(err error) error {
	if errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		return nil
	}
	return err
}

// logSum is the running checksum of a log.
type logSum struct {
	order  binary.ByteOrder
	s0, s1 uint32
}

func (s *logSum) add(b []byte) {
	for ; len(b) >= 8; b = b[8:] {
		s.s0 += s.order.Uint32(b) + s.s1
		s.s1 += s.order.Uint32(b[4:]) + s.s0
	}
}

func (s *logSum) is(b []byte) bool {
	return binary.BigEndian.Uint32(b) == s.s0 && binary.BigEndian.Uint32(b[4:]) == s.s1
}
