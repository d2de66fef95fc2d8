package store

import (
	"maps"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"syscall"
	"testing"

	"golang.org/x/sys/unix"
)

// asNobody runs f without the superuser's rights to files, which would hide
// what is read-only.
func asNobody(t *testing.T, dir string, f func()) {
	t.Helper()
	if os.Geteuid() != 0 {
		f()
		return
	}
	const nobody = 65534
	for path := dir; path != "/"; path = filepath.Dir(path) {
		if info := must(os.Stat(path)); info.Mode().Perm()&0o001 == 0 {
			if err := os.Chmod(path, info.Mode().Perm()|0o055); err != nil {
				t.Fatal(err)
			}
		}
	}
	for _, entry := range must(os.ReadDir(dir)) {
		if err := os.Chown(filepath.Join(dir, entry.Name()), nobody, nobody); err != nil {
			t.Fatal(err)
		}
	}
	if err := os.Chown(dir, nobody, nobody); err != nil {
		t.Fatal(err)
	}
	runtime.LockOSThread()
	defer runtime.UnlockOSThread()
	if err := syscall.Setfsuid(nobody); err != nil {
		t.Fatal(err)
	}
	defer syscall.Setfsuid(0)
	f()
}

func TestReadOnlyStaysUntouched(t *testing.T) {
	for name, perms := range map[string][2]os.FileMode{
		"folder":          {0o555, 0o600},
		"file":            {0o700, 0o400},
		"folder and file": {0o555, 0o400},
	} {
		t.Run(name, func(t *testing.T) {
			dir, file := closedBranch(t)
			if err := os.Chmod(file, perms[1]); err != nil {
				t.Fatal(err)
			}
			if err := os.Chmod(dir, perms[0]); err != nil {
				t.Fatal(err)
			}
			defer os.Chmod(dir, 0o700)
			var before, after map[string]string
			var err error
			asNobody(t, dir, func() {
				before = folder(t, dir)
				_, err = Open(t.Context(), dir, Options{})
				after = folder(t, dir)
			})
			wantCode(t, err, "read_only")
			if !maps.Equal(before, after) {
				t.Error("touched")
			}
		})
	}
}

func TestNoBranchIsMadeWhereNothingMayBeWritten(t *testing.T) {
	dir := t.TempDir()
	if err := os.Chmod(dir, 0o555); err != nil {
		t.Fatal(err)
	}
	defer os.Chmod(dir, 0o700)
	asNobody(t, dir, func() {
		_, err := CreatePractice(t.Context(), dir, Options{})
		wantCode(t, err, "read_only")
		_, err = CreatePractice(t.Context(), filepath.Join(dir, "deeper"), Options{})
		wantCode(t, err, "read_only")
	})
}

func TestNetworkDrivesAreRefused(t *testing.T) {
	dir, _ := closedBranch(t)
	before := folder(t, dir)
	defer func() { statfs = unix.Statfs }()
	for magic := range networkDrives {
		statfs = func(_ string, s *unix.Statfs_t) error {
			s.Type = int64(int32(magic)) // as 32-bit systems fill it in
			return nil
		}
		_, err := Open(t.Context(), dir, Options{})
		wantCode(t, err, "network_drive")
		_, err = CreatePractice(t.Context(), filepath.Join(dir, "new", "branch"), Options{})
		wantCode(t, err, "network_drive")
	}
	if !maps.Equal(before, folder(t, dir)) {
		t.Error("touched")
	}
	statfs = unix.Statfs
	proven(t, openPractice(t, dir, Options{}))
}

// A full disk is said so, nothing said to be saved is lost, and it goes on
// once there is room.
func TestFullDisk(t *testing.T) {
	dir := t.TempDir()
	s, e := practice(t, dir, Options{})
	must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 0)}))
	s.branch.Close()

	s = openPractice(t, dir, Options{pragmas: []string{"max_page_count(40)"}})
	saved := 1
	var err error
	for err == nil && saved < 1000 {
		if _, err = s.KeepResult(t.Context(), Complete{Answers: nth(e, saved)}); err == nil {
			saved++
		}
	}
	wantCode(t, err, "disk_full")
	if n := must(s.ResultCount(t.Context())); n != saved {
		t.Fatalf("%d of %d", n, saved)
	}
	proven(t, s)
	s.branch.Close()

	s = openPractice(t, dir, Options{})
	must(s.KeepResult(t.Context(), Complete{Answers: nth(e, saved)}))
	if p := proven(t, s); p.Results != int64(saved+1) {
		t.Fatalf("%d results of %d", p.Results, saved+1)
	}
}

func TestFaultsAreTold(t *testing.T) {
	for _, c := range []struct {
		err  error
		code string
	}{
		{&os.PathError{Op: "write", Path: "x", Err: syscall.ENOSPC}, "disk_full"},
		{&os.PathError{Op: "write", Path: "x", Err: syscall.EDQUOT}, "disk_full"},
		{&os.PathError{Op: "open", Path: "x", Err: syscall.EROFS}, "read_only"},
		{&os.PathError{Op: "open", Path: "x", Err: syscall.EACCES}, "read_only"},
		{&os.PathError{Op: "read", Path: "x", Err: syscall.EIO}, "disk_failed"},
		{syscall.EWOULDBLOCK, "locked"},
		{os.ErrInvalid, "unexpected"},
	} {
		p := wantCode(t, fault("the file", c.err), c.code)
		if p.Args["file"] != "the file" || !strings.Contains(p.Args["detail"], c.err.Error()) {
			t.Errorf("%+v", p)
		}
	}
}
