package store

import (
	"testing"
	"time"

	"weighhouse/model"
)

func TestADoubtfulClock(t *testing.T) {
	for _, c := range []struct {
		name, now string
		doubtful  bool
	}{
		{"the same moment", "2026-12-01 09:00", false},
		{"five minutes before", "2026-12-01 08:55", false},
		{"six minutes before", "2026-12-01 08:54", true},
		{"another decade", "2015-01-01 00:00", true},
		{"thirty days on", "2026-12-31 09:00", false},
		{"thirty days and a minute on", "2026-12-31 09:01", true},
		{"ten years on", "2036-12-01 09:00", true},
	} {
		t.Run(c.name, func(t *testing.T) {
			clock := clockAt("2026-12-01 09:00")
			s, e := practice(t, t.TempDir(), clock.options())
			clock.set(c.now)
			_, todayErr := s.branch.Today()
			_, keepErr := s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)})
			_, forceErr := s.InForce(t.Context(), "stall", model.NewClients, day("2026-12-01"))
			if !c.doubtful {
				if todayErr != nil || keepErr != nil || forceErr != nil {
					t.Fatal(todayErr, keepErr, forceErr)
				}
				proven(t, s)
				return
			}
			for _, err := range []error{todayErr, keepErr, forceErr} {
				p := wantCode(t, err, "doubtful_date")
				if p.Args["clock"] != c.now[:10] || p.Args["last"] != "2026-12-01" {
					t.Errorf("%v", p.Args)
				}
			}
			// Reading goes on, and nobody is locked out.
			must(s.Results(t.Context(), 0, 10))
			if err := s.ConfirmDate(t.Context(), day("2026-12-03")); err != nil {
				t.Fatal(err)
			}
			if today := must(s.branch.Today()); today != day("2026-12-03") {
				t.Errorf("today %v", today)
			}
			kept := must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)}))
			if got := kept.At.Format("2006-01-02 15:04"); got != "2026-12-03"+c.now[10:] {
				t.Errorf("kept at %s", got)
			}
			clock.forward(24 * time.Hour)
			if today := must(s.branch.Today()); today != day("2026-12-04") {
				t.Errorf("the day after %v", today)
			}
			proven(t, s)
		})
	}
}

// Where a wrong clock had run ahead, the true date lies before the last entry.
func TestATrueDateBeforeTheLastEntryIsTaken(t *testing.T) {
	clock := clockAt("2026-12-29 12:00")
	dir := t.TempDir()
	s, e := practice(t, dir, clock.options())
	clock.set("2026-12-01 09:00")
	if err := s.ConfirmDate(t.Context(), day("2026-12-01")); err != nil {
		t.Fatal(err)
	}
	must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)}))
	s.branch.Close()
	s = openPractice(t, dir, clock.options()) // and it stays believed
	must(s.branch.Today())
	proven(t, s)
}

// The word for a date holds until the program ends; a clock still wrong is
// doubted again.
func TestAWrongClockIsDoubtedAgain(t *testing.T) {
	clock := clockAt("2026-12-01 09:00")
	dir := t.TempDir()
	s, _ := practice(t, dir, clock.options())
	clock.set("2015-01-01 00:00")
	if err := s.ConfirmDate(t.Context(), day("2026-12-02")); err != nil {
		t.Fatal(err)
	}
	s.branch.Close()
	s = openPractice(t, dir, clock.options())
	_, err := s.branch.Today()
	wantCode(t, err, "doubtful_date")
	for _, bad := range []model.Date{{}, {Year: 2026}} {
		wantCode(t, s.ConfirmDate(t.Context(), bad), "not_a_date")
	}
}
