package store

import (
	"database/sql"
	"encoding/binary"
	"fmt"
	"maps"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"testing"

	"weighhouse/store/migrations"
)

// closedBranch is a folder with a branch of a few results in it.
func closedBranch(t *testing.T) (dir, file string) {
	t.Helper()
	dir = t.TempDir()
	s, e := practice(t, dir, Options{})
	for n := range 20 {
		must(s.KeepResult(t.Context(), Complete{Answers: nth(e, n)}))
	}
	if err := s.branch.Close(); err != nil {
		t.Fatal(err)
	}
	return dir, filepath.Join(dir, FileName)
}

// What cannot be opened is told for what it is, and nothing is touched.
func TestWhatCannotBeOpenedStaysUntouched(t *testing.T) {
	whole, _ := closedBranch(t)
	write := func(t *testing.T, file string, at int64, data []byte) {
		t.Helper()
		f := must(os.OpenFile(file, os.O_WRONLY, 0))
		must(f.WriteAt(data, at))
		if err := f.Close(); err != nil {
			t.Fatal(err)
		}
	}
	u32 := func(n uint32) []byte { return binary.BigEndian.AppendUint32(nil, n) }
	cut := func(to int64) func(*testing.T, string) {
		return func(t *testing.T, file string) {
			if err := os.Truncate(file, to); err != nil {
				t.Fatal(err)
			}
		}
	}
	for _, fault := range []struct {
		name, code string
		make       func(t *testing.T, file string)
	}{
		{"a newer program's file", "newer_program", func(t *testing.T, file string) { write(t, file, 60, u32(uint32(migrations.Latest()+1))) }},
		{"another program's database", "foreign_file", func(t *testing.T, file string) { write(t, file, 68, u32(0)) }},
		{"a text", "foreign_file", func(t *testing.T, file string) {
			if err := os.WriteFile(file, []byte(strings.Repeat("not a database\n", 100)), 0o600); err != nil {
				t.Fatal(err)
			}
		}},
		{"a short text", "foreign_file", func(t *testing.T, file string) {
			if err := os.WriteFile(file, []byte("hello"), 0o600); err != nil {
				t.Fatal(err)
			}
		}},
		{"a folder of that name", "foreign_file", func(t *testing.T, file string) {
			if err := os.Remove(file); err != nil {
				t.Fatal(err)
			}
			if err := os.Mkdir(file, 0o700); err != nil {
				t.Fatal(err)
			}
		}},
		{"an empty file", "truncated", cut(0)},
		{"a cut header", "truncated", cut(50)},
		{"a cut first page", "truncated", cut(1000)},
		{"half a file", "truncated", func(t *testing.T, file string) { cut(must(os.Stat(file)).Size()/2)(t, file) }},
		{"a file cut within a page", "truncated", func(t *testing.T, file string) { cut(must(os.Stat(file)).Size()-1)(t, file) }},
		{"an impossible page size", "damaged", func(t *testing.T, file string) { write(t, file, 16, []byte{3, 7}) }},
		{"version 0", "damaged", func(t *testing.T, file string) { write(t, file, 60, u32(0)) }},
		{"a spoilt first page", "damaged", func(t *testing.T, file string) { write(t, file, 100, []byte(strings.Repeat("\xa5", 3900))) }},
		{"spoilt pages", "damaged", func(t *testing.T, file string) {
			write(t, file, 4096, []byte(strings.Repeat("\xa5", int(must(os.Stat(file)).Size()-4096))))
		}},
		{"a missing file", "no_branch", func(t *testing.T, file string) {
			if err := os.Remove(file); err != nil {
				t.Fatal(err)
			}
		}},
	} {
		for _, locked := range []bool{true, false} {
			name := fault.name
			if !locked {
				name += " without a lock file"
			}
			t.Run(name, func(t *testing.T) {
				dir := copyOf(t, whole)
				file := filepath.Join(dir, FileName)
				fault.make(t, file)
				if !locked {
					if err := os.Remove(filepath.Join(dir, lockName)); err != nil {
						t.Fatal(err)
					}
				}
				before := folder(t, dir)
				_, err := Open(t.Context(), dir, Options{})
				p := wantCode(t, err, fault.code)
				if p.Args["file"] != file {
					t.Errorf("names the file %q", p.Args["file"])
				}
				if after := folder(t, dir); !maps.Equal(before, after) {
					t.Errorf("touched: %v, before %v", slices.Sorted(maps.Keys(after)), slices.Sorted(maps.Keys(before)))
				}
			})
		}
	}
}

func TestAMissingFolderIsNoBranchAndIsNotMade(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "nothing here")
	_, err := Open(t.Context(), dir, Options{})
	wantCode(t, err, "no_branch")
	if _, err := os.Stat(dir); !os.IsNotExist(err) {
		t.Error("made the folder")
	}
}

func TestASecondWindowIsToldSo(t *testing.T) {
	dir := t.TempDir()
	s, e := practice(t, dir, Options{})
	_, err := Open(t.Context(), dir, Options{})
	wantCode(t, err, "locked")
	_, err = CreatePractice(t.Context(), dir, Options{})
	wantCode(t, err, "locked")
	must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)})) // the first goes on
	if err := s.branch.Close(); err != nil {
		t.Fatal(err)
	}
	proven(t, openPractice(t, dir, Options{}))
}

func TestABranchIsNotMadeTwice(t *testing.T) {
	dir, _ := closedBranch(t)
	before := folder(t, dir)
	_, err := CreatePractice(t.Context(), dir, Options{})
	wantCode(t, err, "branch_exists")
	if !maps.Equal(before, folder(t, dir)) {
		t.Error("touched")
	}
}

func TestWhatACrashLeftOfABranchBeingMadeIsMadeAnew(t *testing.T) {
	dir := t.TempDir()
	for _, end := range []string{".part", ".part-wal", ".part-shm"} {
		if err := os.WriteFile(filepath.Join(dir, FileName+end), []byte("half"), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	_, err := Open(t.Context(), dir, Options{})
	wantCode(t, err, "no_branch")
	s, _ := practice(t, dir, Options{})
	proven(t, s)
	if left := must(filepath.Glob(filepath.Join(dir, "*.part*"))); len(left) > 0 {
		t.Error(left)
	}
}

func TestABranchIsFoundedByAPersonWithAPassphrase(t *testing.T) {
	good := Founding{Info{"Sedgebrook", "B", false}, "Wren Halloway", "seven bags"}
	for _, bad := range []func(*Founding){
		func(f *Founding) { f.Name = "" }, func(f *Founding) { f.Desk = "" }, func(f *Founding) { f.Desk = "b" },
		func(f *Founding) { f.Desk = "BB" }, func(f *Founding) { f.Person = " " }, func(f *Founding) { f.Passphrase = "" },
	} {
		f := good
		bad(&f)
		_, err := Create(t.Context(), t.TempDir(), f, Options{})
		wantCode(t, err, "bad_founding")
	}
	dir := filepath.Join(t.TempDir(), "new", "é ?#% ; branch") // made, and escaped
	b, err := Create(t.Context(), dir, good, Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer b.Close()
	if b.Info() != good.Info {
		t.Errorf("%+v", b.Info())
	}
	if _, err := os.Stat(filepath.Join(dir, FileName)); err != nil {
		t.Error(err)
	}
	if info := must(os.Stat(filepath.Join(dir, FileName))); runtime.GOOS != "windows" && info.Mode().Perm() != 0o600 {
		t.Errorf("others may read it: %v", info.Mode())
	}
}

func TestConnectionsAreSetUp(t *testing.T) {
	s, _ := practice(t, t.TempDir(), Options{})
	conns := make([]*sql.Conn, 4)
	for i := range conns {
		conns[i] = must(s.branch.db.Conn(t.Context()))
		defer conns[i].Close()
		for pragma, want := range map[string]string{
			"journal_mode": "wal", "synchronous": "2", "foreign_keys": "1", "recursive_triggers": "1",
			"secure_delete": "1", "busy_timeout": "5000", "trusted_schema": "0", "application_id": "1464365925",
		} {
			var got string
			if err := conns[i].QueryRowContext(t.Context(), "PRAGMA "+pragma).Scan(&got); err != nil || got != want {
				t.Errorf("%s is %s, %v", pragma, got, err)
			}
		}
	}
}

// What is kept can be neither changed nor dropped, in this program by its
// authorizer, in any other by triggers.
func TestWhatIsKeptCannotBeChanged(t *testing.T) {
	dir := t.TempDir()
	s, e := practice(t, dir, Options{})
	kept := must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)}))
	if err := s.ClearResult(t.Context(), kept.ID); err != nil {
		t.Fatal(err)
	}
	var changes []string
	for _, table := range []string{"journal", "branch", "people", "editions", "results", "clearings"} {
		key := map[string]string{"journal": "seq", "people": "id"}[table]
		if key == "" {
			key = "entry"
		}
		changes = append(changes,
			"UPDATE "+table+" SET "+key+" = "+key+" + 100",
			"DELETE FROM "+table,
			"INSERT OR REPLACE INTO "+table+" SELECT * FROM "+table)
	}
	inProgram := append(changes, "DROP TRIGGER journal_stands", "DROP TABLE clearings", "ALTER TABLE results ADD x", "CREATE TABLE x (y)",
		"CREATE TEMP TRIGGER x BEFORE INSERT ON journal BEGIN SELECT RAISE(IGNORE); END",
		"ATTACH ':memory:' AS x", "PRAGMA synchronous = OFF", "PRAGMA recursive_triggers = 0")
	for _, change := range inProgram {
		if _, err := s.branch.db.ExecContext(t.Context(), change); err == nil {
			t.Errorf("this program can %s", change)
		}
	}
	proven(t, s)
	s.branch.Close()

	db := plain(t, dir)
	if _, err := db.Exec("PRAGMA recursive_triggers = 1; PRAGMA foreign_keys = 0"); err != nil {
		t.Fatal(err)
	}
	for _, change := range changes {
		if _, err := db.Exec(change); err == nil || !strings.Contains(err.Error(), "append-only") {
			t.Errorf("another program can %s: %v", change, err)
		}
	}
	db.Close()
	proven(t, openPractice(t, dir, Options{}))
}

// plain is a connection without our settings, as another program has it.
func plain(t testing.TB, dir string) *sql.DB {
	t.Helper()
	db := must(sql.Open("sqlite", filepath.Join(dir, FileName)))
	db.SetMaxOpenConns(1)
	t.Cleanup(func() { db.Close() })
	return db
}

func TestMigrationsSetTheirOwnNumber(t *testing.T) {
	names := must(migrations.Files.ReadDir("."))
	for i, entry := range names {
		text := string(must(migrations.Files.ReadFile(entry.Name())))
		if want := fmt.Sprintf("PRAGMA user_version = %d;", i+1); !strings.Contains(text, want) {
			t.Errorf("%s lacks %q", entry.Name(), want)
		}
		if want := fmt.Sprintf("%05d_", i+1); !strings.HasPrefix(entry.Name(), want) {
			t.Errorf("%s should be number %s", entry.Name(), want)
		}
	}
	if migrations.Latest() != len(names) {
		t.Errorf("latest %d of %d", migrations.Latest(), len(names))
	}
}
