package store

import (
	"bufio"
	"bytes"
	"context"
	"fmt"
	"maps"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"weighhouse/model"
)

// Tests start this binary again as another process, to do one of these.
const childJob, childDir = "WEIGHHOUSE_CHILD_JOB", "WEIGHHOUSE_CHILD_DIR"

func TestMain(m *testing.M) {
	switch os.Getenv(childJob) {
	case "":
		os.Exit(m.Run())
	case "open":
		_, err := Open(context.Background(), os.Getenv(childDir), Options{})
		fmt.Println(err)
	case "keep":
		keepUntilKilled(os.Getenv(childDir))
	}
}

func child(t *testing.T, job, dir string) *exec.Cmd {
	t.Helper()
	c := exec.Command(must(os.Executable()))
	c.Env = append(os.Environ(), childJob+"="+job, childDir+"="+dir)
	c.Stderr = os.Stderr
	return c
}

// keepUntilKilled keeps results as fast as it can, says each once it is saved,
// and clears every third.
func keepUntilKilled(dir string) {
	ctx := context.Background()
	b := must(Open(ctx, dir, Options{}))
	s := must(b.SignInPractice(ctx))
	e := must(s.InForce(ctx, "stall", model.NewClients, day("2026-12-01")))
	for n := 0; ; n++ {
		k := must(s.KeepResult(ctx, Complete{Answers: nth(e, n)}))
		fmt.Println("kept", k.ID, k.LogOdds)
		if n%3 == 0 {
			if err := s.ClearResult(ctx, k.ID); err != nil {
				panic(err)
			}
			fmt.Println("cleared", k.ID)
		}
	}
}

// Killed at any moment, a program loses nothing that it said was saved, and
// leaves no half an act.
func TestKilledWhileKeeping(t *testing.T) {
	dir := t.TempDir()
	s, _ := practice(t, dir, Options{})
	s.branch.Close()
	odds, cleared := map[int64]string{}, map[int64]bool{}
	const rounds = 30
	for round := range rounds {
		c := child(t, "keep", dir)
		out := must(c.StdoutPipe())
		if err := c.Start(); err != nil {
			t.Fatal(err)
		}
		lines := bufio.NewScanner(out)
		for n := 0; lines.Scan(); n++ {
			words := strings.Fields(lines.Text())
			id := must(strconv.ParseInt(words[1], 10, 64))
			if words[0] == "kept" {
				odds[id] = words[2]
			} else {
				cleared[id] = true
			}
			if n == 0 { // at work: killed at some moment soon
				time.AfterFunc(time.Duration(rand.Int64N(int64(40*time.Millisecond))), func() { c.Process.Kill() })
			}
		}
		if c.Wait(); c.ProcessState.Exited() {
			t.Fatal("the child ended by itself")
		}
		if wal := must(os.Stat(filepath.Join(dir, FileName+"-wal"))); round == 0 {
			// Its log is as it was left: answers are sealed there too.
			content := must(os.ReadFile(filepath.Join(dir, FileName+"-wal")))
			if wal.Size() == 0 || bytes.Contains(content, []byte("born\t19")) || bytes.Contains(content, []byte("weighhouse result")) {
				t.Error("answers stand open in the log, or there is none")
			}
		}
		s := openPractice(t, dir, Options{})
		for id, want := range odds {
			k, err := s.Result(t.Context(), id)
			if err != nil || k.LogOdds.String() != want || cleared[id] && !k.Cleared() {
				t.Fatalf("round %d: %d was said to be saved: %+v %v", round, id, k, err)
			}
		}
		proven(t, s)
		if err := s.branch.Close(); err != nil {
			t.Fatal(err)
		}
	}
	if len(odds) < rounds {
		t.Errorf("%d saved in %d rounds: too few to tell anything", len(odds), rounds)
	}
	t.Logf("%d saved over %d kills, none lost", len(odds), rounds)
}

// killed is a branch as a killed program left it, with a log that holds what
// is not yet in the file.
func killed(t *testing.T) (dir, file string) {
	t.Helper()
	dir = t.TempDir()
	s, _ := practice(t, dir, Options{})
	s.branch.Close()
	c := child(t, "keep", dir)
	out := must(c.StdoutPipe())
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	for n, lines := 0, bufio.NewScanner(out); lines.Scan(); n++ {
		if n == 10 {
			c.Process.Kill()
		}
	}
	c.Wait()
	return dir, filepath.Join(dir, FileName)
}

// What a log says counts, before SQLite brings it into the file.
func TestALeftLogIsLookedInto(t *testing.T) {
	whole, _ := killed(t)
	t.Run("cut", func(t *testing.T) {
		dir := copyOf(t, whole)
		if err := os.Truncate(filepath.Join(dir, FileName), 4096); err != nil {
			t.Fatal(err)
		}
		before := folder(t, dir)
		_, err := Open(t.Context(), dir, Options{})
		wantCode(t, err, "truncated")
		if !maps.Equal(before, folder(t, dir)) {
			t.Error("touched")
		}
	})
	t.Run("newer", func(t *testing.T) {
		open := copyOf(t, whole)
		db := plain(t, open)
		must(db.Exec("PRAGMA wal_autocheckpoint = 0; PRAGMA user_version = 99"))
		dir := copyOf(t, open) // as a power cut would leave it
		db.Close()
		if err := os.Remove(filepath.Join(dir, FileName+"-shm")); err != nil {
			t.Fatal(err)
		}
		before := folder(t, dir)
		_, err := Open(t.Context(), dir, Options{})
		if p := wantCode(t, err, "newer_program"); p.Args["version"] != "99" {
			t.Error(p)
		}
		if !maps.Equal(before, folder(t, dir)) {
			t.Error("touched")
		}
	})
	t.Run("torn", func(t *testing.T) {
		dir := copyOf(t, whole)
		f := must(os.OpenFile(filepath.Join(dir, FileName+"-wal"), os.O_APPEND|os.O_WRONLY, 0))
		must(f.Write(bytes.Repeat([]byte{0xff}, 9999)))
		f.Close()
		if p := proven(t, openPractice(t, dir, Options{})); p.Results < 5 {
			t.Errorf("%+v", p)
		}
	})
}

func TestAnotherProcessIsToldThatTheBranchIsOpen(t *testing.T) {
	dir := t.TempDir()
	s, _ := practice(t, dir, Options{})
	if out := must(child(t, "open", dir).Output()); !strings.HasPrefix(string(out), "locked ") {
		t.Errorf("said %q", out)
	}
	s.branch.Close()
	if out := must(child(t, "open", dir).Output()); string(out) != "<nil>\n" {
		t.Errorf("after it was closed said %q", out)
	}
}
