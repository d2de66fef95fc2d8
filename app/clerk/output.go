package main

import (
	"bytes"
	"crypto/rand"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
)

// An output is a file in the making: it has its name only once it is whole.
type output struct {
	io.Writer
	file *os.File    // nil for standard output
	name string      // as it was given
	path string      // where the file goes; empty where it is written in place
	mode fs.FileMode // of the file whose place it takes; 0 where there is none
}

// create begins to write a file; "-" is standard output. It refuses to take
// the place of a file that is being read.
func (k *clerk) create(path string, reading ...string) (*output, error) {
	if path == "-" {
		return &output{Writer: k.out}, nil
	}
	o := &output{name: path, path: path}
	if old, err := os.Stat(path); err == nil {
		for _, other := range reading {
			if info, err := os.Stat(other); err == nil && os.SameFile(info, old) {
				return nil, problem("clerk_overwrites_input", "file", path)
			}
		}
		if !old.Mode().IsRegular() { // a pipe or a device has no beside
			f, err := os.OpenFile(path, os.O_WRONLY, 0)
			return &output{Writer: f, file: f, name: path}, cannot(err)
		}
		o.mode = old.Mode().Perm()
		// A link goes on pointing where it did.
		if o.path, err = filepath.EvalSymlinks(path); err != nil {
			return nil, cannot(err)
		}
	}
	beside := filepath.Join(filepath.Dir(o.path), "."+filepath.Base(o.path)+"-"+rand.Text()[:8])
	f, err := os.OpenFile(beside, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return nil, o.cannot(err)
	}
	o.Writer, o.file = f, f
	return o, nil
}

// finish gives the file its name, or takes it away where err is not nil.
func (o *output) finish(err error) error {
	if o.file == nil {
		return err
	}
	temporary := o.file.Name()
	if err == nil && o.path != "" {
		err = o.file.Sync()
	}
	if closing := o.file.Close(); err == nil {
		err = closing
	}
	if o.path == "" {
		return o.cannot(err)
	}
	if err == nil && o.mode != 0 {
		err = os.Chmod(temporary, o.mode)
	}
	if err == nil {
		err = os.Rename(temporary, o.path)
	}
	if err != nil {
		os.Remove(temporary)
	}
	return o.cannot(err)
}

// cannot names the file as it was given, not the one beside it.
func (o *output) cannot(err error) error {
	switch e := err.(type) {
	case *fs.PathError:
		e.Path = o.name
	case *os.LinkError:
		err = &fs.PathError{Op: e.Op, Path: o.name, Err: e.Err}
	}
	return cannot(err)
}

// writeNew writes a file that must not be there yet, but with the same bytes.
func (k *clerk) writeNew(path string, b []byte) error {
	if path != "-" {
		old, err := os.ReadFile(path)
		switch {
		case err == nil && bytes.Equal(old, b):
			return nil
		case err == nil:
			return problem("clerk_file_exists", "file", path)
		}
	}
	o, err := k.create(path)
	if err != nil {
		return err
	}
	_, err = o.Write(b)
	return o.finish(err)
}

// ending refuses a name that promises another kind of file than is written.
func ending(path, kind string) error {
	if path == "-" || strings.EqualFold(filepath.Ext(path), kind) {
		return nil
	}
	return problem("clerk_other_ending", "file", path, "kind", kind)
}

// cannot turns what the system says of a file into a Problem.
func cannot(err error) error {
	e, ok := errors.AsType[*fs.PathError](err)
	switch {
	case !ok:
		return err
	case errors.Is(err, fs.ErrNotExist):
		return problem("clerk_no_such_file", "file", e.Path)
	case errors.Is(err, fs.ErrPermission):
		return problem("clerk_not_permitted", "file", e.Path)
	}
	return problem("clerk_file_failed", "file", e.Path, "detail", e.Err.Error())
}
