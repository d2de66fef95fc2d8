package store

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"sync/atomic"
	"testing"
	"time"

	"weighhouse/model"
)

func must[T any](v T, err error) T {
	if err != nil {
		panic(err)
	}
	return v
}

func number(text string) model.Number   { return must(model.ParseNumber(text)) }
func logOdds(text string) model.LogOdds { return must(model.ParseLogOdds(text)) }
func pd(text string) model.Maybe[model.PD] {
	return model.Some(must(model.ParsePD(text)))
}
func day(text string) model.Date { return must(model.ParseDate(text)) }

// stallCard is a small scorecard: a stall of one's own, years in the trade.
func stallCard(edition int, client model.ClientKind, from string) model.Scorecard {
	attribute := func(characteristic, code, odds, from, below string) model.Attribute {
		a := model.Attribute{Characteristic: characteristic, Code: code, Label: code, LogOdds: model.Some(logOdds(odds)), Reason: code}
		if from != "" {
			a.From = model.Some(number(from))
		}
		if below != "" {
			a.Below = model.Some(number(below))
		}
		return a
	}
	s := model.Scorecard{
		Card: model.Card{
			Format: 1, ProductCode: "stall", Product: "Stall loan", For: client, Title: "Stalls",
			Edition: model.Count(edition), Lender: "Marlow Fen Savings and Loan", DefaultMeans: "late",
			DefaultDaysLate: 30, WithinMonths: 12, HowMade: model.Judged,
			IssuedOn: day("2025-01-01"), InForceFrom: day(from), ReviewBy: day("2029-01-01"),
			LogOddsOf: model.OfDefault, BaseLogOdds: logOdds("-2.1"),
			ReferenceScore: number("600"), ReferenceOdds: number("50"), PointsToDouble: number("20"),
			ResultShown: model.WhenComplete, AnswersGoodDays: 30,
			PreparedBy: "P. Reed", ApprovedBy: "A. Sallow", Complaints: "the branch",
		},
		Characteristics: []model.Characteristic{
			{Code: "own_stall", Question: "Own stall?", Kind: model.YesNo, Use: model.Scored, AverageLogOdds: model.Some(logOdds("0"))},
			{Code: "years", Question: "Years in the trade", Kind: model.Numeric, Decimals: 1, Use: model.Scored, UnknownAllowed: true, AverageLogOdds: model.Some(logOdds("0"))},
			{Code: "born", Question: "Born", Kind: model.DateKind, Use: model.Recorded},
		},
		Attributes: []model.Attribute{
			attribute("own_stall", model.Yes, "-0.512345678", "", ""),
			attribute("own_stall", model.No, "0.4", "", ""),
			attribute("years", "new_to_it", "0.9", "", "2"),
			attribute("years", "settled", "-0.7", "2", ""),
			attribute("years", model.Unknown, "1.1", "", ""),
		},
		Bands: []model.Band{
			{Code: "a", Label: "A", Below: pd("0.1"), Recommendation: model.Approve},
			{Code: "b", Label: "B", From: pd("0.1"), Below: pd("0.3"), Recommendation: model.Refer},
			{Code: "c", Label: "C", From: pd("0.3"), Recommendation: model.Decline},
		},
		Terms: model.Terms{
			Currency: "crowns", SmallestAmount: number("100"), LargestAmount: number("5000"), AmountStep: number("10"),
			TermUnit: model.Months, ShortestTerm: 3, LongestTerm: 24, Repayment: model.EqualPayments,
			Rate: 240_000_000, RatePer: model.PerYear, Method: model.Declining,
		},
	}
	check := func(code, own, years, odds, band string, r model.Recommendation) {
		l := logOdds(odds)
		score := 600 - 20/math.Ln2*(l.Float()+math.Log(50))
		s.Checks = append(s.Checks, model.Check{
			Code: code, LogOdds: l, PD: l.PD(), Score: number(strconv.FormatFloat(score, 'f', 6, 64)), Band: band, Recommendation: r,
			Answers: []model.CheckAnswer{{Characteristic: "amount", Answer: "1000"}, {Characteristic: "term", Answer: "12"},
				{Characteristic: "own_stall", Answer: own}, {Characteristic: "years", Answer: years}, {Characteristic: "born", Answer: "1980"}},
		})
	}
	check("one", "yes", "5", "-3.312345678", "a", model.Approve)
	check("two", "no", "1", "-0.8", "c", model.Decline)
	check("three", "yes", "unknown", "-1.512345678", "b", model.Refer)
	return s
}

// answer fills in answers; a code left out stays missing.
func answer(e *model.Edition, values map[string]string) *model.Answers {
	a := e.NewAnswers(day("2026-12-01"), model.NewClients)
	for code, text := range values {
		item, ok := e.Item(code)
		if !ok {
			panic(code)
		}
		a.Put(item.Index, must(e.ParseAnswer(item.Index, text)))
	}
	return a
}

// nth is a complete set of answers, alike for one n in every run.
func nth(e *model.Edition, n int) *model.Answers {
	return answer(e, map[string]string{
		"amount": strconv.Itoa(100 + 10*(n%400)), "term": strconv.Itoa(3 + n%20),
		"own_stall": []string{"yes", "no"}[n%2], "years": []string{"0.5", "3", "12.5", "unknown"}[n%4],
		"born": fmt.Sprintf("%d-03-%02d", 1950+n%50, 1+n%28),
	})
}

// A clock that tests set; it stands still.
type testClock struct{ ms atomic.Int64 }

func clockAt(text string) *testClock {
	c := &testClock{}
	c.set(text)
	return c
}

func (c *testClock) now() time.Time { return time.UnixMilli(c.ms.Load()).UTC() }
func (c *testClock) set(text string) {
	c.ms.Store(must(time.Parse("2006-01-02 15:04", text)).UnixMilli())
}
func (c *testClock) forward(by time.Duration) { c.ms.Add(by.Milliseconds()) }
func (c *testClock) options() Options         { return Options{Clock: c.now} }

// practice is a practice branch in a folder, with its person signed in and
// one edition released.
func practice(t testing.TB, dir string, o Options) (*Session, *model.Edition) {
	t.Helper()
	b, err := CreatePractice(t.Context(), dir, o)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { b.Close() })
	s := signIn(t, b)
	e, err := s.ReleaseEdition(t.Context(), stallCard(1, model.AllClients, "2026-01-01"))
	if err != nil {
		t.Fatal(err)
	}
	return s, e
}

func signIn(t testing.TB, b *Branch) *Session {
	t.Helper()
	s, err := b.SignInPractice(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func openPractice(t testing.TB, dir string, o Options) *Session {
	t.Helper()
	b, err := Open(t.Context(), dir, o)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { b.Close() })
	return signIn(t, b)
}

// wantCode fails unless err is an Error whose first problem has the code.
func wantCode(t testing.TB, err error, code string) model.Problem {
	t.Helper()
	problems := Problems(err)
	if len(problems) == 0 || problems[0].Code != code {
		t.Fatalf("got %v, want %s", err, code)
	}
	return problems[0]
}

// folder is everything in a folder: bytes and times of change.
func folder(t testing.TB, dir string) map[string]string {
	t.Helper()
	all := map[string]string{}
	entries := must(os.ReadDir(dir))
	for _, entry := range entries {
		info := must(entry.Info())
		content := ""
		if info.Mode().IsRegular() {
			content = string(must(os.ReadFile(filepath.Join(dir, entry.Name()))))
		}
		all[entry.Name()] = fmt.Sprint(info.Mode(), info.ModTime().UnixNano(), "\n", content)
	}
	return all
}

// copyOf is a copy of a closed branch's folder.
func copyOf(t testing.TB, dir string) string {
	t.Helper()
	to := t.TempDir()
	if err := os.CopyFS(to, os.DirFS(dir)); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(filepath.Join(to, FileName), 0o600); err != nil {
		t.Fatal(err)
	}
	return to
}

// proven fails unless the whole file holds.
func proven(t testing.TB, s *Session) Proof {
	t.Helper()
	proof, err := s.Prove(context.Background(), nil)
	if err != nil || len(proof.Problems) > 0 {
		t.Fatalf("%v %v", err, proof.Problems)
	}
	return proof
}
