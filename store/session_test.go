package store

import (
	"bytes"
	"context"
	"errors"
	"os"
	"path/filepath"
	"strconv"
	"sync"
	"testing"
	"time"

	"weighhouse/model"
	"weighhouse/model/duty"
)

func TestSigningIn(t *testing.T) {
	dir := t.TempDir()
	f := Founding{Info{"Sedgebrook", "B", false}, "Wren  Halloway", "seven bags of barley"}
	b, err := Create(t.Context(), dir, f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	defer b.Close()
	s, err := b.SignIn(t.Context(), " wren HALLOWAY", "seven bags of barley")
	if err != nil {
		t.Fatal(err)
	}
	if s.Person() != f.Person || s.Role() != duty.Manager || s.Branch() != b {
		t.Errorf("%s, %s", s.Person(), s.Role())
	}
	for _, wrong := range [][2]string{{"Wren Halloway", "seven bags"}, {"Wren Hallowa", "seven bags of barley"}, {"", ""}} {
		_, err := b.SignIn(t.Context(), wrong[0], wrong[1])
		wantCode(t, err, "sign_in_refused")
	}
	_, err = b.SignInPractice(t.Context())
	wantCode(t, err, "not_practice")
}

func TestEveryActAsksDuty(t *testing.T) {
	clock := clockAt("2026-12-01 09:00")
	s, e := practice(t, t.TempDir(), clock.options())
	kept := must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)}))
	acts := map[duty.Act]func(s *Session, n int) error{
		duty.ConfirmDate: func(s *Session, _ int) error { return s.ConfirmDate(t.Context(), day("2026-12-01")) },
		duty.ReleaseEdition: func(s *Session, n int) error {
			_, err := s.ReleaseEdition(t.Context(), stallCard(10+n, model.AllClients, "2026-01-01"))
			return err
		},
		duty.KeepResult: func(s *Session, _ int) error {
			_, err := s.KeepResult(t.Context(), Complete{Answers: nth(e, 2)})
			return err
		},
		duty.ClearResult: func(s *Session, n int) error { return s.ClearResult(t.Context(), kept.ID+int64(n)) },
		duty.ReadEditions: func(s *Session, _ int) error {
			_, err := s.Editions(t.Context())
			_, err2 := s.Edition(t.Context(), e.Fingerprint())
			_, err3 := s.InForce(t.Context(), "stall", model.NewClients, day("2026-12-01"))
			return errors.Join(err, err2, err3)
		},
		duty.ReadResults: func(s *Session, _ int) error {
			_, err := s.Result(t.Context(), kept.ID)
			_, err2 := s.Results(t.Context(), 0, 1)
			_, err3 := s.ResultCount(t.Context())
			return errors.Join(err, err2, err3)
		},
		duty.Prove: func(s *Session, _ int) error { _, err := s.Prove(t.Context(), nil); return err },
	}
	for n, role := range duty.Roles() {
		as := &Session{s.branch, s.person, s.keys}
		as.person.role = role
		for _, act := range duty.Acts() {
			if act == duty.SetUp {
				continue // before anyone is signed in
			}
			if n > 0 && act == duty.ClearResult {
				must(s.KeepResult(t.Context(), Complete{Answers: nth(e, n)})) // another to clear
				list := must(s.Results(t.Context(), 0, 1))
				err := as.ClearResult(t.Context(), list[0].ID)
				checkDuty(t, role, act, err)
				continue
			}
			checkDuty(t, role, act, acts[act](as, n))
		}
	}
	proven(t, s)
}

func checkDuty(t *testing.T, role duty.Role, act duty.Act, err error) {
	t.Helper()
	if duty.May(role, act) {
		if err != nil {
			t.Errorf("%s %s: %v", role, act, err)
		}
		return
	}
	p := wantCode(t, err, "not_allowed")
	if p.Args["role"] != string(role) || p.Args["act"] != string(act) {
		t.Errorf("%v", p.Args)
	}
}

func TestACancelledActChangesNothing(t *testing.T) {
	s, e := practice(t, t.TempDir(), Options{})
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := s.KeepResult(ctx, Complete{Answers: nth(e, 1)}); !errors.Is(err, context.Canceled) {
		t.Errorf("got %v", err)
	}
	if p := proven(t, s); p.Results != 0 {
		t.Errorf("%+v", p)
	}
}

func TestManyAtOnce(t *testing.T) {
	s, e := practice(t, t.TempDir(), Options{})
	var wait sync.WaitGroup
	const each = 15
	for range 4 {
		wait.Go(func() {
			for n := range each {
				if _, err := s.KeepResult(t.Context(), Complete{Answers: nth(e, n)}); err != nil {
					t.Error(err)
				}
			}
		})
		wait.Go(func() {
			for range each {
				n, err := s.ResultCount(t.Context())
				page, err2 := s.Results(t.Context(), 0, 10)
				if err != nil || err2 != nil || len(page) < min(n, 10) {
					t.Error(n, len(page), err, err2)
				}
			}
		})
	}
	wait.Go(func() {
		for range 3 {
			if proof, err := s.Prove(t.Context(), nil); err != nil || len(proof.Problems) > 0 {
				t.Error(proof, err)
			}
		}
	})
	wait.Wait()
	page := must(s.Results(t.Context(), 0, 1000))
	if len(page) != 4*each {
		t.Fatalf("%d results", len(page))
	}
	for i := range page[1:] {
		if page[i].ID <= page[i+1].ID {
			t.Fatal("out of order, or twice")
		}
	}
	proven(t, s)
}

func TestSettings(t *testing.T) {
	dir := t.TempDir()
	s, _ := practice(t, dir, Options{})
	b := s.branch
	if v := must(b.Remembered(t.Context(), "language")); v != "" {
		t.Errorf("%q", v)
	}
	for _, v := range []string{"fr", "es", "", "line\nline"} {
		if err := b.Remember(t.Context(), "language", v); err != nil {
			t.Fatal(err)
		}
		if got := must(b.Remembered(t.Context(), "language")); got != v {
			t.Errorf("%q, want %q", got, v)
		}
	}
	b.Close()
	if got := must(openPractice(t, dir, Options{}).branch.Remembered(t.Context(), "language")); got != "line\nline" {
		t.Errorf("%q", got)
	}
}

// Neither answers nor the figures that would give them away stand in the
// open, in the file, in its log, or in what is left once it is closed.
func TestAnswersAndFiguresAreSealed(t *testing.T) {
	dir := t.TempDir()
	s, e := practice(t, dir, clockAt("2026-12-01 09:00").options())
	secrets := []string{"4870", "1963-07-19", "weighhouse result", "repeat\n"}
	for n := range 20 {
		a := answer(e, map[string]string{"amount": "4870", "term": "11", "own_stall": "yes", "years": "0." + strconv.Itoa(n%10), "born": "1963-07-19"})
		a.Client = model.RepeatClients
		k := must(s.KeepResult(t.Context(), Complete{Answers: a}))
		secrets = append(secrets, k.LogOdds.String(), k.PD.String(), k.Score.String())
	}
	look := func(when string) {
		for _, entry := range must(os.ReadDir(dir)) {
			content := must(os.ReadFile(filepath.Join(dir, entry.Name())))
			if entry.Name() == FileName && when == "closed" && !bytes.Contains(content, []byte("own_stall")) {
				t.Error("the edition should stand in the open: is this the file?")
			}
			for _, secret := range secrets {
				if bytes.Contains(content, []byte(secret)) {
					t.Errorf("%s, %s: holds %q", when, entry.Name(), secret)
				}
			}
		}
	}
	look("open")
	s.branch.Close()
	look("closed")
}

// The folder is free only once the last call has come back.
func TestClosingWaitsForReaders(t *testing.T) {
	dir := t.TempDir()
	s, e := practice(t, dir, Options{})
	must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)}))
	rows := must(s.branch.db.QueryContext(t.Context(), "SELECT seq FROM journal"))
	if !rows.Next() {
		t.Fatal("no rows")
	}
	closed := make(chan struct{})
	go func() {
		s.branch.Close()
		close(closed)
	}()
	time.Sleep(50 * time.Millisecond)
	select {
	case <-closed:
		t.Error("closed under a reader")
	default:
	}
	_, err := Open(t.Context(), dir, Options{})
	wantCode(t, err, "locked")
	rows.Close()
	<-closed
	_, err = s.Results(t.Context(), 0, 1)
	wantCode(t, err, "unexpected")
	proven(t, openPractice(t, dir, Options{}))
}
