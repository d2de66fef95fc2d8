package store

import (
	"testing"
	"time"

	"pgregory.net/rapid"

	"weighhouse/model"
)

func TestAResultIsKeptAsItWasSaid(t *testing.T) {
	clock := clockAt("2026-12-01 09:00")
	dir := t.TempDir()
	s, e := practice(t, dir, clock.options())
	clock.forward(time.Minute)
	answers := answer(e, map[string]string{"amount": "1200", "term": "10", "own_stall": "yes", "years": "1.5", "born": "1985"})
	kept, err := s.KeepResult(t.Context(), Complete{Applicant: " Ana\tMaría  Example\n", Answers: answers})
	if err != nil {
		t.Fatal(err)
	}
	want := Kept{
		ID: 3, At: clock.now(), By: practicePerson, Edition: e.Fingerprint(),
		Applicant: "Ana María Example", Answers: answers.Text(),
		LogOdds: logOdds("-1.712345678"), PD: logOdds("-1.712345678").PD(), Score: kept.Score,
		Band: "b", Recommendation: model.Refer,
	}
	if kept != want {
		t.Fatalf("got %+v", kept)
	}
	s.branch.Close()

	again := openPractice(t, dir, clock.options())
	got, err := again.Result(t.Context(), kept.ID)
	if err != nil || got != want {
		t.Fatalf("got %+v %v", got, err)
	}
	if p := proven(t, again); p.Results != 1 || p.Entries != 3 {
		t.Fatalf("%+v", p)
	}
}

func TestOnlyCompleteAnswersToAReleasedEditionAreKept(t *testing.T) {
	s, e := practice(t, t.TempDir(), clockAt("2026-12-01 09:00").options())
	_, err := s.KeepResult(t.Context(), Complete{Answers: answer(e, map[string]string{"amount": "1200", "term": "10", "own_stall": "yes", "born": "1985"})})
	wantCode(t, err, "answers_incomplete")

	other, problems := model.Compile(stallCard(2, model.AllClients, "2026-01-01"))
	if other == nil {
		t.Fatal(problems)
	}
	_, err = s.KeepResults(t.Context(), []Complete{{Answers: nth(e, 1)}, {Answers: nth(other, 1)}})
	wantCode(t, err, "edition_not_released")
	if n := must(s.ResultCount(t.Context())); n != 0 {
		t.Fatalf("%d kept of an act that was refused", n)
	}
}

func TestResultsComeNewestFirstPageByPage(t *testing.T) {
	s, e := practice(t, t.TempDir(), clockAt("2026-12-01 09:00").options())
	var all []Kept // newest first
	keep := func(n int) {
		all = append([]Kept{must(s.KeepResult(t.Context(), Complete{Answers: nth(e, n)}))}, all...)
	}
	keep(0)
	must(s.ResultCount(t.Context())) // the ids are read, and kept up from here
	for n := 1; n < 25; n++ {
		keep(n)
	}
	if n := must(s.ResultCount(t.Context())); n != 25 {
		t.Fatalf("%d results", n)
	}
	for _, page := range [][2]int{{0, 10}, {10, 10}, {20, 10}, {24, 1}, {25, 10}, {0, 100}, {-3, 2}, {3, 0}} {
		got := must(s.Results(t.Context(), page[0], page[1]))
		first := min(max(page[0], 0), 25)
		want := all[first:min(first+page[1], 25)]
		if len(got) != len(want) {
			t.Fatalf("%v: %d results, want %d", page, len(got), len(want))
		}
		for i := range got {
			if got[i] != want[i] {
				t.Errorf("%v[%d]: got %+v, want %+v", page, i, got[i], want[i])
			}
		}
	}
	_, err := s.Result(t.Context(), 999)
	wantCode(t, err, "no_result")
}

func TestAClearedResultStays(t *testing.T) {
	clock := clockAt("2026-12-01 09:00")
	s, e := practice(t, t.TempDir(), clock.options())
	kept := must(s.KeepResult(t.Context(), Complete{Answers: nth(e, 1)}))
	clock.forward(time.Hour)
	if err := s.ClearResult(t.Context(), kept.ID); err != nil {
		t.Fatal(err)
	}
	kept.ClearedAt, kept.ClearedBy = clock.now(), practicePerson
	if got := must(s.Result(t.Context(), kept.ID)); got != kept || !got.Cleared() {
		t.Errorf("got %+v", got)
	}
	wantCode(t, s.ClearResult(t.Context(), kept.ID), "already_cleared")
	wantCode(t, s.ClearResult(t.Context(), 99), "no_result")
	proven(t, s)
}

// Whatever is answered is read back and gives the same figures.
func TestKeepingLosesNothing(t *testing.T) {
	s, e := practice(t, t.TempDir(), clockAt("2026-12-01 09:00").options())
	rapid.Check(t, func(r *rapid.T) {
		a := e.NewAnswers(day("2026-12-01").AddDays(rapid.IntRange(-9999, 9999).Draw(r, "day")),
			rapid.SampledFrom([]model.ClientKind{model.NewClients, model.RepeatClients}).Draw(r, "client"))
		for i, item := range e.Items() {
			x := model.Answer{State: model.Given, Seen: rapid.Bool().Draw(r, "seen")}
			switch {
			case item.UnknownAllowed && rapid.Bool().Draw(r, "unknown"):
				x.State = model.StatedUnknown
			case item.Kind == model.YesNo:
				x.Attribute = rapid.IntRange(0, 1).Draw(r, "yes or no")
			case item.Kind == model.DateKind:
				x.Date = day("1900-01-01").AddDays(rapid.IntRange(0, 99999).Draw(r, "date"))
			default:
				n := rapid.Int64Range(-int64(model.Largest), int64(model.Largest)).Draw(r, "number")
				x.Number = model.Number(n).Round(int(item.Decimals))
			}
			a.Put(i, x)
		}
		kept, err := s.KeepResult(t.Context(), Complete{Answers: a})
		if err != nil {
			r.Fatal(err)
		}
		got, err := s.Result(t.Context(), kept.ID)
		if err != nil || got != kept || got.Answers != a.Text() {
			r.Fatalf("got %+v %v\nkept %+v", got, err, kept)
		}
	})
	proven(t, s)
}

func TestKeptTextIsReadOnlyAsWritten(t *testing.T) {
	good := Kept{Band: "a", Recommendation: model.Approve, Answers: "on\t2026-12-01\n"}
	var k Kept
	if err := k.parse(good.text()); err != nil || k != good {
		t.Fatal(k, err)
	}
	for _, text := range []string{"", keptHead, good.text()[1:], "x" + good.text(), "\n" + good.text(),
		keptHead + "\nanswers\n", "weighhouse result 2" + good.text()[len(keptHead):]} {
		if err := k.parse(text); err == nil {
			t.Errorf("read %q", text)
		}
	}
}
