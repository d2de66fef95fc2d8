package store

import (
	"testing"

	"weighhouse/model"
)

func TestReleasedEditions(t *testing.T) {
	clock := clockAt("2026-12-01 09:00")
	dir := t.TempDir()
	s, first := practice(t, dir, clock.options())
	second := must(s.ReleaseEdition(t.Context(), stallCard(2, model.RepeatClients, "2026-11-01")))
	s.branch.Close()

	s = openPractice(t, dir, clock.options())
	list := must(s.Editions(t.Context()))
	if len(list) != 2 || list[0].Fingerprint != second.Fingerprint() || list[1].Fingerprint != first.Fingerprint() {
		t.Fatalf("%+v", list)
	}
	if r := list[0]; r.By != practicePerson || !r.At.Equal(clock.now()) || r.Card != second.Scorecard().Card || r.Entry != 3 {
		t.Errorf("%+v", r)
	}
	got := must(s.Edition(t.Context(), first.Fingerprint()))
	if got.Scorecard().Canonical() != first.Scorecard().Canonical() {
		t.Error("another edition")
	}
	if again := must(s.Edition(t.Context(), first.Fingerprint())); again != got {
		t.Error("compiled twice")
	}
	_, err := s.Edition(t.Context(), model.Fingerprint{1})
	wantCode(t, err, "edition_not_released")
}

func TestReleasesOfOneProductAndClientGoUp(t *testing.T) {
	s, _ := practice(t, t.TempDir(), clockAt("2026-12-01 09:00").options())
	release := func(edition int, client model.ClientKind, from string) error {
		_, err := s.ReleaseEdition(t.Context(), stallCard(edition, client, from))
		return err
	}
	wantCode(t, release(1, model.AllClients, "2026-01-01"), "edition_already_released")
	p := wantCode(t, release(1, model.AllClients, "2026-02-01"), "edition_number_used")
	if p.Args["edition"] != "1" || p.Args["released"] != "1" {
		t.Error(p.Args)
	}
	for _, err := range []error{
		release(5, model.AllClients, "2026-02-01"),
		release(1, model.NewClients, "2026-02-01"), // numbers count by kind of client
	} {
		if err != nil {
			t.Error(err)
		}
	}
	wantCode(t, release(4, model.AllClients, "2026-03-01"), "edition_number_used")

	broken := stallCard(9, model.AllClients, "2026-03-01")
	broken.Bands[0].Below = pd("0.2")
	broken.Card.Title = ""
	_, err := s.ReleaseEdition(t.Context(), broken)
	if problems := Problems(err); len(problems) == 0 || problems[0].Place.Sheet == "" {
		t.Errorf("%v", err)
	}
	if n := len(must(s.Editions(t.Context()))); n != 3 {
		t.Errorf("%d editions", n)
	}
	proven(t, s)
}

func TestInForce(t *testing.T) {
	s, _ := practice(t, t.TempDir(), clockAt("2026-12-01 09:00").options()) // 1, all, 2026-01-01
	for _, r := range []struct {
		edition int
		client  model.ClientKind
		from    string
	}{
		{2, model.AllClients, "2026-06-01"},
		{3, model.AllClients, "2026-03-01"}, // released later, in force earlier
		{1, model.RepeatClients, "2026-04-01"},
		{2, model.RepeatClients, "2026-06-01"}, // the same day and number as one for all: released last
		{7, model.NewClients, "2027-01-01"},
	} {
		must(s.ReleaseEdition(t.Context(), stallCard(r.edition, r.client, r.from)))
	}
	for _, c := range []struct {
		on      string
		client  model.ClientKind
		edition model.Count
		want    model.ClientKind
	}{
		{"2026-01-01", model.NewClients, 1, model.AllClients},
		{"2026-02-28", model.RepeatClients, 1, model.AllClients},
		{"2026-03-01", model.NewClients, 3, model.AllClients},
		{"2026-04-01", model.RepeatClients, 1, model.RepeatClients},
		{"2026-04-01", model.NewClients, 3, model.AllClients},
		{"2026-06-01", model.NewClients, 2, model.AllClients},
		{"2026-12-31", model.RepeatClients, 2, model.RepeatClients},
		{"2027-01-01", model.NewClients, 7, model.NewClients},
	} {
		e, err := s.InForce(t.Context(), "stall", c.client, day(c.on))
		if err != nil {
			t.Fatal(c, err)
		}
		if card := e.Scorecard().Card; card.Edition != c.edition || card.For != c.want {
			t.Errorf("%v: edition %d for %s", c, card.Edition, card.For)
		}
	}
	_, err := s.InForce(t.Context(), "stall", model.NewClients, day("2025-12-31"))
	wantCode(t, err, "no_edition_in_force")
	_, err = s.InForce(t.Context(), "other", model.NewClients, day("2026-12-01"))
	wantCode(t, err, "no_edition_in_force")
}
