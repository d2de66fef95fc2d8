package main

import (
	"bytes"
	"context"
	"encoding/csv"
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"weighhouse/app/practice"
	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store"
	"weighhouse/store/table"
)

var update = flag.Bool("update", false, "write the golden files anew")

// golden compares with a file of testdata.
func golden(t *testing.T, name, got string) {
	t.Helper()
	path := filepath.Join("testdata", name)
	if *update {
		write(t, path, got)
	}
	if want := read(t, path); got != want {
		t.Errorf("%s: got\n%s\nwant\n%s", name, got, want)
	}
}

// makePractice makes the practice branch in a folder.
func makePractice(t *testing.T, dir string) *store.Session {
	t.Helper()
	s, err := practice.Open(context.Background(), dir)
	if err != nil {
		t.Fatal(err)
	}
	if err := s.Branch().Close(); err != nil {
		t.Fatal(err)
	}
	return s
}

// Every column and every kind of row, against a file that was looked at.
func TestScoreGolden(t *testing.T) {
	dir := desk(t)
	write(t, filepath.Join(dir, "in.csv"), read(t, "testdata/applicants.csv"))
	scored := func(language string) (results, told string) {
		code, out, told := call(t, dir, "", "score", "-card", "card.xlsx", "-in", "in.csv", "-out", "out.csv", "-on", "2026-03-02", "-language", language)
		if code != 0 || out != "" || strings.Contains(told, "\r") {
			t.Errorf("%d %q", code, out)
		}
		return read(t, filepath.Join(dir, "out.csv")), told
	}
	results, told := scored("en")
	golden(t, "results.csv", results)
	golden(t, "told.txt", told)
	// In another language the sentences differ and nothing else.
	want, _ := csv.NewReader(strings.NewReader(results)).ReadAll()
	results, told = scored("fr")
	got, err := csv.NewReader(strings.NewReader(results)).ReadAll()
	if err != nil || len(got) != len(want) || !strings.Contains(told, "demandeurs notés") {
		t.Fatal(len(got), told, err)
	}
	for i := range got {
		last := len(got[i]) - 1
		if !slices.Equal(got[i][:last], want[i][:last]) || i > 0 && (got[i][last] == want[i][last]) != (want[i][last] == "") {
			t.Errorf("%q\n%q", got[i], want[i])
		}
	}
	files, err := filepath.Glob(filepath.Join(dir, ".*"))
	if err != nil || len(files) > 0 {
		t.Error("left behind:", files, err)
	}
}

func TestScoreRefused(t *testing.T) {
	dir := desk(t)
	const row = "amount,term\n"
	write(t, filepath.Join(dir, "in.csv"), row)
	write(t, filepath.Join(dir, "other.csv"), "name,colour\nx,red\n")
	write(t, filepath.Join(dir, "twice.csv"), "amount,Amount\n")
	write(t, filepath.Join(dir, "empty.csv"), "")
	write(t, filepath.Join(dir, "latin.csv"), "amount,pr\xe9nom\n")
	write(t, filepath.Join(dir, "card.csv"), read(t, filepath.Join(dir, "card.xlsx")))
	if err := os.Symlink("in.csv", filepath.Join(dir, "link.csv")); err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct{ in, out, card, want string }{
		{"none.csv", "out.csv", "card.xlsx", "There is no none.csv."},
		{"in.csv", "out.csv", "none.xlsx", "There is no none.xlsx."},
		{"in.csv", "out.csv", "in.csv", "in.csv: "},
		{"in.csv", "in.csv", "card.xlsx", "in.csv is being read"},
		{"in.csv", "link.csv", "card.xlsx", "link.csv is being read"},
		{"in.csv", "./card.csv", "card.csv", "card.csv is being read"},
		{"in.csv", "no/where.csv", "card.xlsx", "There is no no/where.csv"},
		{"in.csv", ".", "card.xlsx", ". could not be used"},
		{"other.csv", "out.csv", "card.xlsx", "No column of the file answers"},
		{"twice.csv", "out.csv", "card.xlsx", "Two columns have the name Amount"},
		{"empty.csv", "out.csv", "card.xlsx", "The file is empty"},
		{"latin.csv", "out.csv", "card.xlsx", "UTF-8"},
		{".", "out.csv", "card.xlsx", ". could not be used"},
	} {
		code, out, problems := call(t, dir, "", "score", "-card", c.card, "-in", c.in, "-out", c.out)
		if code != 1 || out != "" || !strings.Contains(problems, c.want) {
			t.Errorf("%+v: %d %q %q", c, code, out, problems)
		}
	}
	if _, err := os.Stat(filepath.Join(dir, "out.csv")); err == nil {
		t.Error("a result was written")
	}
	if read(t, filepath.Join(dir, "in.csv")) != row {
		t.Error("the applicants were overwritten")
	}
}

func TestScoreHeaderOnlyAndNone(t *testing.T) {
	dir := desk(t)
	header := strings.Join(resultHeader, ",") + "\n"
	const columns = "amount,term,home,has_stall,stall_years,opened,late_days,household\n"
	code, out, problems := call(t, dir, columns, "score", "-card", "card.xlsx", "-in", "-", "-out", "-")
	if code != 0 || out != header || problems != "0 applicants scored.\n" {
		t.Errorf("%d %q %q", code, out, problems)
	}
	// Not one row could be scored: that is not well.
	code, out, _ = call(t, dir, columns+"1,2\n", "score", "-card", "card.xlsx", "-in", "-", "-out", "-")
	if code != 1 || strings.Count(out, "\n") != 2 {
		t.Errorf("%d %q", code, out)
	}
}

// A file that is there keeps its rights and, being a link, goes on pointing.
func TestScoreReplacesResults(t *testing.T) {
	dir := desk(t)
	old := filepath.Join(dir, "old.csv")
	write(t, old, "last week's")
	if err := os.Chmod(old, 0o600); err != nil {
		t.Fatal(err)
	}
	if err := os.Symlink("old.csv", filepath.Join(dir, "link.csv")); err != nil {
		t.Fatal(err)
	}
	code, _, problems := call(t, dir, "amount\n", "score", "-card", "card.xlsx", "-in", "-", "-out", "link.csv")
	info, err := os.Stat(old)
	if code != 0 || err != nil || info.Mode().Perm() != 0o600 || !strings.HasPrefix(read(t, old), "ref,") {
		t.Error(code, problems, err)
	}
}

func TestScoreBranch(t *testing.T) {
	dir := t.TempDir()
	makePractice(t, dir)
	code, _, problems := call(t, dir, "amount\n", "score", "-branch", ".", "-in", "-", "-out", "-")
	if code != 2 || !strings.Contains(problems, "farm_season, working_capital") {
		t.Error(code, problems)
	}
	code, out, problems := call(t, dir, "amount\n", "score", "-branch", ".", "-product", "working_capital", "-client", "repeat", "-in", "-", "-out", "-")
	if code != 0 || !strings.HasPrefix(out, "ref,") {
		t.Error(code, out, problems)
	}
	for _, args := range [][]string{{"-product", "nothing"}, {"-product", "working_capital", "-on", "2020-01-01"}} {
		code, out, problems = call(t, dir, "amount\n", append([]string{"score", "-branch", ".", "-in", "-", "-out", "-"}, args...)...)
		if code != 1 || out != "" || problems == "" {
			t.Error(args, code, out, problems)
		}
	}
}

// scorerOf is a scorer of the edition for a table with that header.
func scorerOf(t testing.TB, e *model.Edition, header []string) *scorer {
	t.Helper()
	columns, _ := table.ColumnsOf(e, header)
	if columns == nil {
		t.Fatal("no columns")
	}
	day := model.Date{Year: 2026, Month: 3, Day: 2}
	return &scorer{edition: e, columns: columns, words: words.New(words.Style{}), labels: words.LabelsOf(e, "en"), rules: e.Rules(), on: day, client: model.NewClients}
}

// What clerk writes of any applicant is what model says.
func TestFiguresAreTheModels(t *testing.T) {
	e, problems := model.Compile(stallCard(t))
	if e == nil {
		t.Fatal(problems)
	}
	header := []string{"amount", "term", "home", "has_stall", "stall_years", "opened", "late_days", "household"}
	s := scorerOf(t, e, header)
	rapid.Check(t, func(t *rapid.T) {
		any := func(values ...string) string { return rapid.SampledFrom(values).Draw(t, "answer") }
		number := func(lo, hi int) string { return fmt.Sprint(rapid.IntRange(lo, hi).Draw(t, "number")) }
		row := []string{
			fmt.Sprint(50 * rapid.IntRange(2, 60).Draw(t, "amount")), number(3, 24), any("own", "rent", "family", "unknown"),
			any("yes", "no"), number(0, 60), any("1990", "2025-03-02", "2025-03-03", "2026-01-01"), number(0, 200),
			any(number(-300, 3000)+".25", "unknown", "sales:"+number(0, 99)+"/day food:"+number(0, 50)+"/week"),
		}
		got, scored := s.row(table.Row{Number: 1, Cells: row})
		a := e.NewAnswers(s.on, model.NewClients)
		for i, code := range header {
			item, _ := e.Item(code)
			answer, err := e.ParseAnswer(item.Index, row[i])
			if err != nil {
				t.Fatal(err)
			}
			a.Put(item.Index, answer)
		}
		r, ok := e.Score(a)
		low, high, ranged := e.Range(a)
		if !scored || !ok || !ranged {
			t.Fatal(got)
		}
		want := []string{"", r.LogOdds.String(), r.PD.String(), low.String(), high.String(), r.Score.String(),
			e.Scorecard().Bands[r.Band].Code, string(r.Recommendation)}
		if !slices.Equal(got[:8], want) {
			t.Fatalf("%q\n%q", got, want)
		}
		if n := len(strings.Fields(got[8])); n != r.Fired.Len() {
			t.Fatalf("%d rules of %d", n, r.Fired.Len())
		}
		for _, rule := range e.DecliningRules(r.Fired) {
			if got[9] != "rule."+rule.Code {
				t.Fatal(got[9])
			}
		}
	})
}

// What is asked for above a rule's cap is said of the row.
func TestOverCap(t *testing.T) {
	e, _ := model.Compile(stallCard(t))
	s := scorerOf(t, e, []string{"amount", "term", "home", "has_stall", "opened", "late_days", "household"})
	for amount, want := range map[string]string{"500": "", "550": "amount: The rules allow 500 crowns at the most, and more is asked for."} {
		cells, scored := s.row(table.Row{Number: 1, Cells: []string{amount, "12", "own", "no", "2015", "0", "900"}})
		if got := cells[len(cells)-1]; !scored || cells[8] != "no_stall" || got != want {
			t.Errorf("%s: %q", amount, cells)
		}
	}
}

// Of each row is said what its own day calls for, whatever day it is now.
func TestRowsOwnDay(t *testing.T) {
	card := stallCard(t)
	e, _ := model.Compile(card)
	s := scorerOf(t, e, []string{"on", "amount", "term", "home", "has_stall", "stall_years", "opened", "late_days", "household"})
	from, review := card.Card.InForceFrom, card.Card.ReviewBy
	for _, c := range []struct {
		on   model.Date
		want string
	}{
		{from.AddDays(-1), "The scorecard is in force only from 1 Feb 2026, after the day of this application, 31 Jan 2026."},
		{from, ""},
		{review, ""},
		{review.AddDays(1), english.Problem(model.Problem{Code: "past_review", Args: model.Args{"value": review.String()}})},
	} {
		cells, scored := s.row(table.Row{Number: 1, Cells: []string{c.on.String(), "1000", "12", "own", "yes", "7.5", "2015", "0", "900"}})
		if got := cells[len(cells)-1]; !scored || got != c.want {
			t.Errorf("%s: %q", c.on, cells)
		}
	}
}

// Many batches and several workers keep the order of the rows.
func TestOrderIsKept(t *testing.T) {
	e, _ := model.Compile(stallCard(t))
	const rows = 20*batchRows + 7
	var in strings.Builder
	in.WriteString("ref,amount,term,home,has_stall,stall_years,opened,late_days,household\n")
	for i := range rows {
		if i%17 == 0 {
			fmt.Fprintf(&in, "%d,oops\n", i)
			continue
		}
		fmt.Fprintf(&in, "%d,1000,12,own,yes,%d,2019,%d,600\n", i, i%50, i%90)
	}
	r, err := table.NewReader(strings.NewReader(in.String()))
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	told := 0
	scored, refused, err := scorerOf(t, e, r.Header()).all(context.Background(), r, &out, func(n int) { told = n })
	if err != nil || scored+refused != rows || refused != (rows+16)/17 || told != rows {
		t.Fatal(scored, refused, told, err)
	}
	lines, err := csv.NewReader(&out).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for i, line := range lines[1:] {
		if line[0] != fmt.Sprint(i) {
			t.Fatalf("row %d is %s", i, line[0])
		}
	}
}

// failing fails once so many bytes have gone by.
type failing struct {
	in   io.Reader
	left int
}

func (f *failing) Read(b []byte) (int, error) {
	if f.left -= len(b); f.left < 0 {
		return 0, os.ErrDeadlineExceeded
	}
	return f.in.Read(b)
}

func (f *failing) Write(b []byte) (int, error) {
	if f.left -= len(b); f.left < 0 {
		return 0, os.ErrDeadlineExceeded
	}
	return len(b), nil
}

// A read or a write that fails, and an interruption, end the run with their
// error.
func TestFailuresEndTheRun(t *testing.T) {
	e, _ := model.Compile(stallCard(t))
	text := "amount,home\n" + strings.Repeat("5,own\n", 40_000)
	run := func(ctx context.Context, in io.Reader, out io.Writer) error {
		r, err := table.NewReader(in)
		if err != nil {
			t.Fatal(err)
		}
		_, _, err = scorerOf(t, e, r.Header()).all(ctx, r, out, func(int) {})
		return err
	}
	if err := run(context.Background(), &failing{strings.NewReader(text), 120_000}, io.Discard); err != os.ErrDeadlineExceeded {
		t.Error(err)
	}
	if err := run(context.Background(), strings.NewReader(text), &failing{left: 120_000}); err != os.ErrDeadlineExceeded {
		t.Error(err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if err, _ := run(ctx, strings.NewReader(text), io.Discard).(model.Problem); err.Code != "clerk_interrupted" {
		t.Error(err)
	}
}

// The largest amount anybody types, in every box that takes money or a number.
func TestHugeAmounts(t *testing.T) {
	e, _ := model.Compile(stallCard(t))
	header := table.HeaderOf(e)
	good := map[string]string{"amount": "1000", "term": "12", "home": "own", "has_stall": "yes", "stall_years": "7.5", "opened": "2019", "late_days": "0", "household.sales": "40"}
	s := scorerOf(t, e, header)
	for _, huge := range []string{"999999999999", "999999999999.99", "-999999999999"} {
		for _, column := range []string{"amount", "term", "stall_years", "late_days", "household.sales", "household.rent"} {
			row := make([]string, len(header))
			for i, name := range header {
				if row[i] = good[name]; name == column {
					row[i] = huge
				}
			}
			cells, scored := s.row(table.Row{Number: 1, Cells: row})
			problem := cells[len(cells)-1]
			switch {
			case !scored && problem == "":
				t.Errorf("%s in %s: refused without a word", huge, column)
			case scored && (cells[2] == "" || cells[7] == ""):
				t.Errorf("%s in %s: %q", huge, column, cells)
			case scored && !strings.HasPrefix(column, "household") && problem == "":
				t.Errorf("%s in %s: not questioned", huge, column)
			}
		}
	}
}

func BenchmarkScore(b *testing.B) {
	e, _ := model.Compile(stallCard(b))
	header := []string{"ref", "amount", "term", "home", "has_stall", "stall_years", "opened", "late_days", "household"}
	s := scorerOf(b, e, header)
	row := table.Row{Number: 1, Cells: []string{"A-1", "1000", "12", "own", "yes", "7.5", "2019-05-01", "0", "612.3"}}
	for b.Loop() {
		if _, ok := s.row(row); !ok {
			b.Fatal("not scored")
		}
	}
}
