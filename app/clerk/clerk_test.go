package main

import (
	"bytes"
	"database/sql"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"weighhouse/app/practice"
	"weighhouse/model"
	"weighhouse/store"
	"weighhouse/store/workbook"
)

// program is clerk as people run it, built without a C compiler.
var program string

func TestMain(m *testing.M) {
	dir, err := os.MkdirTemp("", "clerk")
	if err != nil {
		panic(err)
	}
	program = filepath.Join(dir, "clerk")
	if runtime.GOOS == "windows" {
		program += ".exe"
	}
	build := exec.Command("go", "build", "-o", program, ".")
	build.Env = append(os.Environ(), "CGO_ENABLED=0")
	if out, err := build.CombinedOutput(); err != nil {
		panic(fmt.Sprintf("%v\n%s", err, out))
	}
	code := m.Run()
	os.RemoveAll(dir)
	os.Exit(code)
}

// call runs the program in a folder.
func call(t testing.TB, dir, in string, args ...string) (code int, out, problems string) {
	t.Helper()
	c := exec.Command(program, args...)
	c.Dir = dir
	c.Stdin = strings.NewReader(in)
	var o, e bytes.Buffer
	c.Stdout, c.Stderr = &o, &e
	if err := c.Run(); err != nil {
		if _, ok := errors.AsType[*exec.ExitError](err); !ok {
			t.Fatal(err)
		}
	}
	return c.ProcessState.ExitCode(), o.String(), e.String()
}

// stallCard is a small scorecard with every kind of question.
func stallCard(t testing.TB) model.Scorecard {
	t.Helper()
	text, err := os.ReadFile("../../store/table/testdata/stall.txt")
	if err != nil {
		t.Fatal(err)
	}
	card, problems := model.ParseCanonical(string(text))
	if problems != nil {
		t.Fatal(problems)
	}
	return card
}

// writeCard writes a scorecard as a workbook.
func writeCard(t testing.TB, path string, card model.Scorecard) {
	t.Helper()
	var b bytes.Buffer
	if err := workbook.Write(&b, card); err != nil {
		t.Fatal(err)
	}
	write(t, path, b.String())
}

func write(t testing.TB, path, text string) {
	t.Helper()
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
}

func read(t testing.TB, path string) string {
	t.Helper()
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// desk is a folder with the small scorecard in card.xlsx.
func desk(t testing.TB) string {
	t.Helper()
	dir := t.TempDir()
	writeCard(t, filepath.Join(dir, "card.xlsx"), stallCard(t))
	return dir
}

func TestWrongUse(t *testing.T) {
	dir := desk(t)
	for _, c := range []struct{ args, want string }{
		{"", "clerk needs to be told what to do."},
		{"judge", "no command “judge”"},
		{"score", "needs the option -in"},
		{"score -in a.csv", "needs the option -out"},
		{"score -in a.csv -out", "-out needs a value"},
		{"score -in a.csv -out=", "-out needs a value"},
		{"score -in a.csv -out b.csv", "either -card"},
		{"score -in a.csv -out b.csv -card card.xlsx -branch .", "either -card"},
		{"score -in a.csv -out b.csv -card card.xlsx -client new", "-client is for -branch"},
		{"score -in a.csv -out b.csv -card card.xlsx -on 2026", "-on needs a day"},
		{"score -in a.csv -in b.csv", "-in is given twice"},
		{"score -passphrase x", "no option -passphrase"},
		{"score -in a.csv -out b.csv -card card.xlsx c.csv", "what to do with “c.csv”"},
		{"check", "needs the name of a file"},
		{"check a.xlsx b.xlsx", "what to do with “b.xlsx”"},
		{"check -language xx card.xlsx", "no language"},
		{"check -language= card.xlsx", "-language needs a value"},
		{"help judge", "no command “judge”"},
		{"help score check", "what to do with “check”"},
		{"practice -product nothing out.xlsx", "Give -product with one of"},
		{"prove somewhere", "what to do with “somewhere”"},
		{"practice", "needs the name of a file"},
		{"practice -branch . out.xlsx", "what to do with “out.xlsx”"},
		{"practice . -product farm_season", "-product does not go with a branch"},
	} {
		code, out, problems := call(t, dir, "", strings.Fields(c.args)...)
		if code != 2 || out != "" || !strings.Contains(problems, c.want) || !strings.Contains(problems, "clerk help") {
			t.Errorf("clerk %s: %d, %q, %q", c.args, code, out, problems)
		}
	}
}

// Every command has help, in every language, that names all its options and
// leaves no blank unfilled.
func TestHelp(t *testing.T) {
	dir := t.TempDir()
	for _, language := range []string{"en", "fr", "es-MX"} {
		code, list, problems := call(t, dir, "", "help", "-language", language)
		if code != 0 || problems != "" {
			t.Error(code, problems)
		}
		for _, c := range commands() {
			if !strings.Contains(list, "clerk "+c.name) {
				t.Errorf("%s: clerk %s is not listed", language, c.name)
			}
			_, one, _ := call(t, dir, "", "help", c.name, "--language="+language)
			_, same, _ := call(t, dir, "", c.name, "-h", "-language", language)
			if one != same {
				t.Errorf("%s: help %s is not %s -h", language, c.name, c.name)
			}
			if strings.Contains(one, "[clerk") || strings.Contains(one, "no value") {
				t.Errorf("%s: %s", language, one)
			}
			for _, option := range append(c.options, c.switches...) {
				if !strings.Contains(one, "-"+option) {
					t.Errorf("%s: help %s does not name -%s", language, c.name, option)
				}
			}
			for line := range strings.Lines(one) {
				if len([]rune(line)) > 124 {
					t.Errorf("%s: help %s: a line of %d", language, c.name, len([]rune(line)))
				}
			}
		}
	}
}

func TestCheck(t *testing.T) {
	dir := desk(t)
	code, out, problems := call(t, dir, "", "check", "card.xlsx")
	const good = "Stall loans, small test card\nscorecard edition 3, in force from 1 Feb 2026\nTelephone code 9816 0219 0132 8815 5041 5561\n"
	if code != 0 || out != good || problems != "" {
		t.Errorf("%d\n%s\n%s", code, out, problems)
	}
	code, out, _ = call(t, dir, read(t, filepath.Join(dir, "card.xlsx")), "check", "-")
	if code != 0 || out != good {
		t.Errorf("from standard input: %d %s", code, out)
	}

	card := stallCard(t)
	card.Attributes[0].LogOdds = model.Some(-card.Attributes[0].LogOdds.Value) // a swapped sign
	card.Bands[1].From = model.Some(model.PD(90_000_000))
	writeCard(t, filepath.Join(dir, "bad.xlsx"), card)
	code, out, problems = call(t, dir, "", "check", "bad.xlsx")
	if code != 1 || problems != "" || !strings.Contains(out, "Bands!C3: ") {
		t.Errorf("%d\n%s\n%s", code, out, problems)
	}
	code, out, _ = call(t, dir, "", "check", "-json", "bad.xlsx")
	for _, want := range []string{`"accepted": false`, `"sheet": "Bands"`, `"cell": "C3"`, `"warning": false`, `"problems": [`} {
		if code != 1 || !strings.Contains(out, want) {
			t.Errorf("%d, no %s in\n%s", code, want, out)
		}
	}
	code, out, _ = call(t, dir, "", "check", "card.xlsx", "-json")
	for _, want := range []string{`"accepted": true`, `"telephone_code": "9816 0219 0132 8815 5041 5561"`, `"problems": []`, `"edition": 3`} {
		if code != 0 || !strings.Contains(out, want) {
			t.Errorf("%d, no %s in\n%s", code, want, out)
		}
	}

	write(t, filepath.Join(dir, "text.xlsx"), "not a workbook")
	if code, out, _ := call(t, dir, "", "check", "text.xlsx"); code != 1 || !strings.HasPrefix(out, "text.xlsx: ") {
		t.Error(code, out)
	}
	if code, out, problems := call(t, dir, "", "check", "none.xlsx"); code != 1 || out != "" || problems != "There is no none.xlsx.\n" {
		t.Error(code, out, problems)
	}
	if code, _, problems := call(t, dir, "", "check", "."); code != 1 || problems == "" {
		t.Error(code, problems)
	}
}

func TestBlankAndPractice(t *testing.T) {
	dir := desk(t)
	for _, c := range []struct{ args, file string }{
		{"blank b.xlsx", "b.xlsx"},
		{"blank -card card.xlsx b.csv", "b.csv"},
		{"try card.xlsx t.xlsx", "t.xlsx"},
		{"practice p.xlsx", "p.xlsx"},
		{"practice -product farm_season q.xlsx", "q.xlsx"},
	} {
		path := filepath.Join(dir, c.file)
		if code, out, problems := call(t, dir, "", strings.Fields(c.args)...); code != 0 || out != "" || problems != "" {
			t.Errorf("clerk %s: %d %s %s", c.args, code, out, problems)
		}
		write(t, path, "mine")
		code, _, problems := call(t, dir, "", strings.Fields(c.args)...)
		if code != 1 || !strings.Contains(problems, "is there already") || read(t, path) != "mine" {
			t.Errorf("clerk %s on a file: %d %s", c.args, code, problems)
		}
		os.Remove(path)
		call(t, dir, "", strings.Fields(c.args)...)
	}
	if got := read(t, filepath.Join(dir, "b.csv")); !strings.HasPrefix(got, "ref,on,client,amount,term,home,home.seen,") {
		t.Error(got)
	}
	if code, _, _ := call(t, dir, "", "practice", "p.xlsx"); code != 0 {
		t.Error("the same workbook over itself:", code)
	}
	for _, args := range []string{"blank b.csv", "blank -card card.xlsx c.xlsx", "practice p.csv", "try card.xlsx t.csv", "score -card card.xlsx -in b.csv -out c.xlsx"} {
		code, _, problems := call(t, dir, "", strings.Fields(args)...)
		if _, err := os.Stat(filepath.Join(dir, "c.xlsx")); code != 1 || !strings.Contains(problems, "a name that ends in .") || err == nil {
			t.Errorf("clerk %s: %d %s", args, code, problems)
		}
	}
	if code, _, problems := call(t, dir, "", "try", "b.xlsx", "u.xlsx"); code != 1 || !strings.Contains(problems, "Card!") {
		t.Error("a blank workbook to try:", code, problems)
	}
	for _, args := range [][]string{{"practice", ""}, {"blank", ""}, {"try", "card.xlsx", ""}} {
		if code, _, problems := call(t, dir, "", args...); code != 1 || !strings.Contains(problems, "a name that ends in .xlsx") {
			t.Errorf("clerk %q: %d %s", args, code, problems)
		}
	}
	_, want, _ := call(t, dir, "", "check", "card.xlsx")
	if _, got, _ := call(t, dir, "", "check", "t.xlsx"); got != want {
		t.Error(got)
	}
	if rows, err := excelize.OpenFile(filepath.Join(dir, "t.xlsx")); err != nil || !slices.Contains(rows.GetSheetList(), "Try it") {
		t.Error(err)
	}
	for _, file := range []string{"p.xlsx", "q.xlsx"} {
		if code, out, _ := call(t, dir, "", "check", file); code != 0 || !strings.Contains(out, "Telephone code") {
			t.Error(code, out)
		}
	}
	if code, out, _ := call(t, dir, "", "check", "b.xlsx"); code != 1 || !strings.Contains(out, "Card!") {
		t.Error("a blank workbook:", code, out)
	}
	if code, _, problems := call(t, dir, "", "blank", "nowhere/b.xlsx"); code != 1 || problems == "" {
		t.Error(code, problems)
	}
}

func TestProve(t *testing.T) {
	dir := t.TempDir()
	code, out, problems := call(t, dir, "", "prove", "-branch", ".")
	if code != 1 || out != "" || !strings.Contains(problems, `clerk practice -branch "."`) {
		t.Error(code, out, problems)
	}
	for range 2 { // what is there stays
		code, out, problems = call(t, dir, "", "practice", ".")
		if code != 0 || problems != "" || !strings.Contains(out, "is in .") {
			t.Error(code, out, problems)
		}
	}
	code, out, problems = call(t, dir, "", "prove", "-branch", ".")
	if code != 0 || problems != "" || !strings.HasPrefix(out, "200 kept results give the same figures again") {
		t.Error(code, out, problems)
	}
	tamper(t, filepath.Join(dir, store.FileName))
	code, out, problems = call(t, dir, "", "prove", "-branch", ".")
	if code != 1 || problems != "" || !strings.Contains(out, "Entry 5 ") {
		t.Error(code, out, problems)
	}
}

// Without -branch it is the window's own practice branch.
func TestProveTheUsersOwn(t *testing.T) {
	dir := t.TempDir()
	for _, name := range []string{"HOME", "XDG_CONFIG_HOME", "AppData"} {
		t.Setenv(name, dir)
	}
	folder, err := practice.Folder()
	if err != nil || !strings.HasPrefix(folder, dir) {
		t.Fatal(folder, err)
	}
	if _, out, _ := call(t, dir, "", "help", "prove"); !strings.Contains(out, folder) {
		t.Error(out)
	}
	if code, _, problems := call(t, dir, "", "prove"); code != 1 || !strings.Contains(problems, folder) {
		t.Error(code, problems)
	}
	if code, _, problems := call(t, dir, "", "practice", folder+string(filepath.Separator)); code != 0 {
		t.Error(code, problems)
	}
	if code, out, problems := call(t, dir, "", "prove"); code != 0 || !strings.HasPrefix(out, "200 kept results") {
		t.Error(code, out, problems)
	}
}

// tamper moves the fifth entry of a branch's journal by a second, past every
// trigger.
func tamper(t *testing.T, path string) {
	t.Helper()
	db, err := sql.Open("sqlite", path)
	if err != nil {
		t.Fatal(err)
	}
	defer db.Close()
	var triggers string
	err = db.QueryRow("SELECT group_concat('DROP TRIGGER ' || name, ';') FROM sqlite_schema WHERE type = 'trigger'").Scan(&triggers)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := db.Exec(triggers + "; UPDATE journal SET at = at + 1000 WHERE seq = 5"); err != nil {
		t.Fatal(err)
	}
}
