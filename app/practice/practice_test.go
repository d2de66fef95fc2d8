package practice

import (
	"bytes"
	"cmp"
	"context"
	"encoding/csv"
	"os"
	"slices"
	"strings"
	"testing"
	"time"

	"weighhouse/assets"
	"weighhouse/model"
	"weighhouse/store"
	"weighhouse/store/workbook"
)

// editions are the practice branch's, compiled, by product code.
func editions(t *testing.T) map[string]*model.Edition {
	t.Helper()
	list := map[string]*model.Edition{}
	for _, b := range assets.PracticeWorkbooks() {
		r, err := workbook.Read(bytes.NewReader(b))
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range r.Problems {
			t.Error(p)
		}
		if r.Edition == nil {
			t.Fatal("no edition")
		}
		list[r.Scorecard.Card.ProductCode] = r.Edition
	}
	return list
}

func TestWorkbooks(t *testing.T) {
	for product, e := range editions(t) {
		s := e.Scorecard()
		for _, text := range []string{s.Card.Title, s.Card.Notes, s.Card.Lender} {
			if !strings.Contains(text, "invented") {
				t.Errorf("%s: %q does not say that it is invented", product, text)
			}
		}
		for _, a := range s.Attributes {
			item, _ := e.Item(a.Characteristic)
			riskier := a.LogOdds.Or(0) > item.AverageLogOdds.Or(0) || a.Slope.Value.Digits > 0
			if item.Use == model.Scored && riskier && a.Reason == "" {
				t.Errorf("%s: %s.%s may be a reason and has none to tell", product, a.Characteristic, a.Code)
			}
		}
	}
}

// Between them the two workbooks use every entry of the closed lists that a
// scorecard is made of.
func TestWorkbooksUseEverything(t *testing.T) {
	used := map[string]bool{}
	for _, e := range editions(t) {
		s := e.Scorecard()
		for _, c := range s.Characteristics {
			used[string(c.Kind)], used[string(c.Use)], used[string(c.EvidenceNeeded)] = true, true, true
		}
		for _, f := range s.Computed {
			used[string(f.Operation)] = true
		}
		for _, r := range s.Rules {
			used[string(r.Test)], used[string(r.Effect)] = true, true
		}
		for _, l := range s.Lines {
			used[string(l.Flow)] = true
		}
		for _, o := range s.Overrides {
			used[string(o.Direction)] = true
		}
		for _, b := range s.Bands {
			used[string(b.Recommendation)] = true
		}
	}
	for _, options := range [][]string{model.Choice.Options(), model.Scored.Options(), model.Sum.Options(), model.Is.Options(),
		model.Note.Options(), model.Adds.Options(), model.Safer.Options(), model.Approve.Options(), {"told", "seen"}} {
		for _, o := range options {
			if !used[o] {
				t.Errorf("nothing is %q", o)
			}
		}
	}
}

// Whatever an officer or an applicant reads has French and Spanish wording.
func TestWorkbooksInEveryLanguage(t *testing.T) {
	for product, e := range editions(t) {
		s := e.Scorecard()
		worded := map[string]bool{}
		for _, w := range s.Words {
			worded[w.Code+" "+w.Language] = true
		}
		need := func(code, text string) {
			if text == "" {
				return
			}
			for _, language := range []string{"fr", "es"} {
				if !worded[code+" "+language] {
					t.Errorf("%s: %s is not worded in %s", product, code, language)
				}
			}
		}
		need("product", s.Card.Product)
		need("title", s.Card.Title)
		need("default_means", s.Card.DefaultMeans)
		need("letter.decline", "always")
		for _, c := range s.Characteristics {
			need("section."+c.Section, c.Section)
			need(c.Code, c.Question)
			need(c.Code+".unit", c.Unit)
			need(c.Code+".help", c.Help)
			need(c.Code+".papers", c.PapersAccepted)
		}
		for _, a := range s.Attributes {
			code := a.Characteristic + "." + a.Code
			if a.Code == "" {
				need(a.Characteristic+".reason", a.Reason)
				continue
			}
			need(code, a.Label)
			need(code+".reason", a.Reason)
		}
		for _, l := range s.Lines {
			need(l.Characteristic+".line."+l.Code, l.Label)
		}
		for _, b := range s.Bands {
			need("band."+b.Code, b.Label)
			need("band."+b.Code+".caution", b.Caution)
		}
		for _, r := range s.Rules {
			need("rule."+r.Code, r.Label)
			need("rule."+r.Code+".text", r.Text)
		}
		for _, o := range s.Overrides {
			need("override."+o.Code, o.Label)
		}
	}
}

// expected.csv was worked out in Python 3.11 with exact decimals, from the
// sheets and the printed rules, by code that shares nothing with this
// program.
func TestApplications(t *testing.T) {
	e := editions(t)
	list, err := Applications(e)
	if err != nil {
		t.Fatal(err)
	}
	file, err := os.Open("testdata/expected.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	expected, err := csv.NewReader(file).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if len(list) != 200 || len(expected) != 201 {
		t.Fatalf("%d applications, %d expected", len(list), len(expected)-1)
	}
	if !slices.IsSortedFunc(list, func(a, b Application) int { return cmp.Compare(a.Answers.On.String(), b.Answers.On.String()) }) {
		t.Error("not in order of their days")
	}
	names, came := map[string]bool{}, map[string]bool{}
	for i, a := range list {
		names[a.Name] = true
		r, ok := a.Answers.Edition().Score(a.Answers)
		if !ok {
			t.Fatalf("%s is not complete", a.Ref)
		}
		for _, p := range a.Answers.Edition().Check(a.Answers) {
			t.Errorf("%s: %v", a.Ref, p)
		}
		s := a.Answers.Edition().Scorecard()
		var fired []string
		for n, rule := range a.Answers.Edition().Rules() {
			if r.Fired.Has(n) {
				fired = append(fired, rule.Code)
			}
		}
		got := []string{a.Ref, r.LogOdds.String(), r.PD.String(), r.Score.String(), s.Bands[r.Band].Code,
			string(r.Recommendation), strings.Join(fired, " ")}
		if !slices.Equal(got, expected[i+1]) {
			t.Errorf("got %q\nexpected %q", got, expected[i+1])
		}
		came[s.Card.ProductCode+s.Bands[r.Band].Code], came[s.Card.ProductCode+string(r.Recommendation)] = true, true
	}
	if len(names) != len(list) {
		t.Errorf("%d names", len(names))
	}
	for product, edition := range e {
		for _, b := range edition.Scorecard().Bands {
			if !came[product+b.Code] {
				t.Errorf("%s: no application is in band %s", product, b.Code)
			}
		}
		for _, r := range model.Approve.Options() {
			if !came[product+r] {
				t.Errorf("%s: no application is to %s", product, r)
			}
		}
	}
}

// at is a calendar whose present is noon of a day.
func at(day string) *calendar {
	d, err := model.ParseDate(day)
	if err != nil {
		panic(err)
	}
	return &calendar{present: func() time.Time { return d.Time().Add(12 * time.Hour) }}
}

// look fails the test unless the branch is whole: all applications kept on
// their days, both products in force, everything proven.
func look(t *testing.T, s *store.Session, today string) {
	t.Helper()
	ctx := context.Background()
	list, err := s.Results(ctx, 0, 1000)
	if err != nil || len(list) != 200 {
		t.Fatalf("%d results, %v", len(list), err)
	}
	for _, k := range list {
		if !strings.HasPrefix(k.Answers, "on\t"+model.DateOf(k.At.Local()).String()+"\n") {
			t.Errorf("result %d was kept on %v: %.20q", k.ID, k.At, k.Answers)
		}
	}
	if proof, err := s.Prove(ctx, nil); err != nil || proof.Results != 200 || len(proof.Problems) > 0 {
		t.Error(proof, err)
	}
	day, err := s.Branch().Today()
	if err != nil || day.String() != today {
		t.Error(day, err)
	}
	for product := range editions(t) {
		if _, err := s.InForce(ctx, product, model.NewClients, day); err != nil {
			t.Error(err)
		}
	}
}

func closing(t *testing.T, s *store.Session) {
	t.Helper()
	if err := s.Branch().Close(); err != nil {
		t.Error(err)
	}
}

func TestOpen(t *testing.T) {
	dir := t.TempDir()
	for _, c := range []struct{ clock, today string }{
		{"2026-12-01", "2026-12-01"}, // made
		{"2026-12-01", "2026-12-01"}, // opened again
		{"2027-09-15", "2027-09-15"}, // after a long rest
		{"2020-01-01", "2027-09-16"}, // with a dead clock
	} {
		began := time.Now()
		s, err := openAt(context.Background(), dir, at(c.clock))
		if err != nil {
			t.Fatal(err)
		}
		t.Log(c.clock, time.Since(began))
		look(t, s, c.today)
		closing(t, s)
	}
}

func TestOpenCutShort(t *testing.T) {
	dir := t.TempDir()
	ctx, cut := context.WithCancel(context.Background())
	c := at("2026-12-01")
	c.past = []time.Time{morning(setUp)}
	b, err := store.CreatePractice(ctx, dir, store.Options{Clock: func() time.Time {
		now := c.now()
		if now.Month() == time.June {
			cut()
		}
		return now
	}})
	if err != nil {
		t.Fatal(err)
	}
	if s, err := begin(ctx, b, c); err == nil {
		t.Fatal(s)
	}
	if err := b.Close(); err != nil {
		t.Error(err)
	}
	s, err := openAt(context.Background(), dir, at("2026-12-01"))
	if err != nil {
		t.Fatal(err)
	}
	look(t, s, "2026-12-01")
	closing(t, s)
}

func TestOpenAnotherBranch(t *testing.T) {
	ctx, dir := context.Background(), t.TempDir()
	b, err := store.Create(ctx, dir, store.Founding{Info: store.Info{Name: "Sallowby", Desk: "A"}, Person: "Pell Reedmace", Passphrase: "not a secret"}, store.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if err := b.Close(); err != nil {
		t.Fatal(err)
	}
	if s, err := Open(ctx, dir); !has(err, "not_practice") {
		t.Error(s, err)
	}
}
