package main

import (
	"bytes"
	"io"
	"path/filepath"
	"strings"
	"testing"

	"weighhouse/app/words"
	"weighhouse/model"
)

// Conversations with every turn in them: wrong answers, going back, figures to
// be sure of, lines of a worksheet, papers.
const (
	askedInEnglish = "perhaps\n\nn\n" + // borrowed before
		"1010\n1,000\n12\n" + // amount, term
		"castle\n\n?\n<\nown\ny\n<\n\nn\n" + // home, and its paper
		"yes\n" +
		"lots\n-1\n75\n7.5\n" + // stall_years: accepted to 60
		"31/02/2019\n1 May 2019\n" +
		"-5\n4000\n0\n" + // late_days
		"40 fortnight\n<\n40\n\n200\n60 decade\n60\n" // household
	askedInFrench = "non\n" +
		"500\n10\n3\nnon\nnon\n2015\n100\n100\n=150\n"
)

func TestAskGolden(t *testing.T) {
	dir := desk(t)
	code, out, problems := call(t, dir, askedInEnglish, "ask", "-card", "card.xlsx", "-on", "2026-03-02")
	if code != 0 || problems != "" {
		t.Errorf("%d %s", code, problems)
	}
	golden(t, "ask.txt", out)
	code, out, problems = call(t, dir, askedInFrench, "ask", "-card", "card.xlsx", "-on", "2026-03-02", "-language", "fr")
	for _, want := range []string{"Oui / Non > non\n", "= cinq cents crowns\n", "8 sur 8", "\nREFUSER\n", "PD 39,2"} {
		if code != 0 || problems != "" || !strings.Contains(out, want) || strings.Contains(out, "[") {
			t.Errorf("%d %s\nno %q in\n%s", code, problems, want, out)
		}
	}
}

var english = words.New(words.Style{})

// talk runs a conversation within the test.
func talk(t testing.TB, e *model.Edition, in string) (q *interview, out string, err error) {
	t.Helper()
	var b bytes.Buffer
	k := &clerk{in: strings.NewReader(in), out: &b, err: &b, words: english, today: model.Date{Year: 2026, Month: 3, Day: 2}}
	q = newInterview(k, e, k.today)
	err = q.all()
	return q, b.String(), err
}

// Wherever input ends, the conversation ends with no result, and says so.
func TestAskEndsAnywhere(t *testing.T) {
	e, _ := model.Compile(stallCard(t))
	// The last line may do without its end.
	for n := range strings.Index(askedInEnglish, "60 decade") + 1 {
		if _, out, err := talk(t, e, askedInEnglish[:n]); err != io.EOF {
			t.Fatalf("after %d bytes: %v\n%s", n, err, out)
		}
	}
	dir := desk(t)
	code, _, problems := call(t, dir, "n\n1000\n", "ask", "-card", "card.xlsx")
	if code != 1 || problems != "Ended before the last question, so there is no result.\n" {
		t.Error(code, problems)
	}
}

// Nothing that is typed or pasted does harm.
func TestAskBadInput(t *testing.T) {
	e, _ := model.Compile(stallCard(t))
	for _, bad := range []string{
		strings.Repeat("9", 10_000), "\x00", "\xff\xfe", "\u202eown", "e\u0301", "1e9", "inf", "NaN", "1,250.5.5", "999999999999999999", "-", "=", "= ", "/", "\x1b[2J", "<<",
	} {
		// The bad answer to each question in turn; the others are good.
		good := []string{"n", "1000", "12", "own\nn", "yes", "7.5", "2019", "0", "=600"}
		for i := range good {
			answers := append(append(append([]string{}, good[:i]...), bad), good[i:]...)
			q, out, err := talk(t, e, strings.Join(answers, "\n")+"\n")
			if err != nil {
				t.Fatalf("%.20q to question %d: %v\n%s", bad, i, err, out)
			}
			if strings.ContainsAny(out, "\x00\x1b") || strings.Contains(out, "\u202e") {
				t.Errorf("%.20q to question %d is written out as it came", bad, i)
			}
			if _, ok := e.Score(q.answers); !ok {
				t.Errorf("%.20q to question %d: not complete", bad, i)
			}
		}
	}
	if _, _, err := talk(t, e, strings.Repeat("9", 2*longestLine)); err == nil {
		t.Error("an endless line was taken")
	}
}

// The terminal and the table give the same applicant the same figures.
func TestAskAgreesWithScore(t *testing.T) {
	dir := desk(t)
	const row = "amount,term,home,home.seen,has_stall,stall_years,opened,late_days,household.sales,household.rent,household.food\n" +
		"1000,12,own,yes,yes,7.5,2019-05-01,0,40,200,60\n"
	_, out, _ := call(t, dir, row, "score", "-card", "card.xlsx", "-in", "-", "-out", "-", "-on", "2026-03-02")
	if !strings.Contains(out, ",-3.45,0.030768859,") {
		t.Fatal(out)
	}
	e, _ := model.Compile(stallCard(t))
	q, _, err := talk(t, e, askedInEnglish)
	if err != nil {
		t.Fatal(err)
	}
	if r, ok := e.Score(q.answers); !ok || r.LogOdds.String() != "-3.45" {
		t.Error(r)
	}
}

// The result is said when the lender wants it said.
func TestAskShowsWhenTheLenderSays(t *testing.T) {
	const in = "n\n1000\n12\nown\nn\nyes\n7.5\n2019\n0\n=600\n"
	for shown, want := range map[model.Shown]struct{ soFar, handIn bool }{
		model.WhileAnswering: {true, false},
		model.WhenComplete:   {false, false},
		model.WhenHandedIn:   {false, true},
	} {
		card := stallCard(t)
		card.Card.ResultShown = shown
		dir := t.TempDir()
		writeCard(t, filepath.Join(dir, "card.xlsx"), card)
		_, out, _ := call(t, dir, in+"\n", "ask", "-card", "card.xlsx")
		if strings.Contains(out, "With the answers so far") != want.soFar || strings.Contains(out, "hands it in") != want.handIn || !strings.Contains(out, "\nAPPROVE\n") {
			t.Errorf("%s:\n%s", shown, out)
		}
	}
}

// The verdict names a rule's cap where more is asked for, in money as the
// lender words it.
func TestAskCap(t *testing.T) {
	card := stallCard(t)
	card.Words = append(card.Words, model.Wording{Code: "currency", Language: "fr", Text: "couronnes"})
	dir := t.TempDir()
	writeCard(t, filepath.Join(dir, "card.xlsx"), card)
	for language, want := range map[string]string{"en": "\nAPPROVE, 500 crowns at the most\n", "fr": "\nAPPROUVER, 500 couronnes au plus\n", "es": "\nAPROBAR, 500 crowns como máximo\n"} {
		const in = "n\n600\n12\n1\nn\nn\n2015\n0\n=900\n"
		_, out, _ := call(t, dir, in, "ask", "-card", "card.xlsx", "-on", "2026-03-02", "-language", language)
		if !strings.Contains(strings.ReplaceAll(out, "\u00a0", " "), want) {
			t.Errorf("no %q in\n%s", want, out)
		}
	}
}

// A result handed in only at the end can be gone back from.
func TestAskHandInGoesBack(t *testing.T) {
	card := stallCard(t)
	card.Card.ResultShown = model.WhenHandedIn
	e, _ := model.Compile(card)
	q, out, err := talk(t, e, "n\n1000\n12\nown\nn\nyes\n7.5\n2019\n0\n=600\n<\n=700\n\n")
	if err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	item, _ := e.Item("household")
	if got := q.answers.At(item.Index).Number; got != model.Whole(700) {
		t.Error(got)
	}
}

func TestPick(t *testing.T) {
	options := []string{"Épicerie", "Élevage", "Market stall", "Marketing"}
	for text, want := range map[string]int{
		"1": 0, "epi": 0, "ÉL": 1, "e": -1, "market": -1, "market s": 2, "marketing": 3, "": -1, "0": -1, "5": -1, "01": -1,
	} {
		if got := pick(text, options); got != want {
			t.Errorf("%q picks %d, want %d", text, got, want)
		}
	}
}
