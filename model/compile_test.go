package model

import (
	"fmt"
	"slices"
	"strings"
	"testing"
)

// An empty scorecard is refused with what it lacks, and never panics.
func TestEmptyScorecard(t *testing.T) {
	e, problems := Compile(Scorecard{})
	if e != nil || len(problems) < 30 {
		t.Errorf("%v, %v", e, problems)
	}
	for _, sheets := range [][]Sheet{nil, {{}}, {{Name: "Card"}}, {{Name: "Checks", Rows: [][]string{nil, {"a"}}}}, {{Name: "Covariance", Rows: [][]string{nil}}}} {
		s, problems := FromSheets(sheets)
		if e, more := Compile(s); e != nil || len(problems) == 0 || len(more) == 0 {
			t.Errorf("%+v: %v, %v, %v", sheets, e, problems, more)
		}
	}
}

// What only a program can put together is found too.
func TestScorecardThatNoWorkbookHolds(t *testing.T) {
	for what, spoil := range map[string]func(*Scorecard){
		"word of no list":       func(s *Scorecard) { s.Terms.Repayment = "now and then" },
		"empty word":            func(s *Scorecard) { s.Characteristics[0].Kind = "" },
		"empty operation":       func(s *Scorecard) { s.Computed[0].Operation = "" },
		"number beyond range":   func(s *Scorecard) { s.Card.ReferenceScore = 2 * Largest },
		"log-odds beyond range": func(s *Scorecard) { s.Attributes[0].LogOdds = Some(2 * largestLogOdds) },
		"negative count":        func(s *Scorecard) { s.Terms.LongestTerm = -5 },
		"covariance too narrow": func(s *Scorecard) { s.Covariance.Values[3] = nil },
		"covariance too short":  func(s *Scorecard) { s.Covariance.Values = s.Covariance.Values[1:] },
		"covariance too long":   func(s *Scorecard) { s.Covariance.Names = s.Covariance.Names[:2] },
		"check of nothing":      func(s *Scorecard) { s.Checks[0].Answers[0].Characteristic = "nobody" },
		"no date":               func(s *Scorecard) { s.Card.IssuedOn = Date{} },
	} {
		s := scorecardOf(t, sample)
		spoil(&s)
		if e, problems := Compile(s); e != nil {
			t.Errorf("%s: compiled with %v", what, problems)
		}
	}
}

// An edition shares nothing with the scorecard it was compiled from.
func TestEditionIsFrozen(t *testing.T) {
	s := scorecardOf(t, sample)
	e := compiled(t, s)
	before := e.Scorecard().Canonical()
	s.Attributes[0].Label, s.Bands[0].Recommendation, s.Checks[0].Answers[0].Answer, s.Covariance.Values[0][0] = "Changed", Decline, "9", 7
	if e.Scorecard().Canonical() != before || e.Scorecard().Fingerprint() != e.Fingerprint() {
		t.Error("the edition changed")
	}
}

// As many of everything as there may be.
func TestFullEdition(t *testing.T) {
	var b strings.Builder
	b.WriteString("Characteristics\nCharacteristic | Question | Kind | Use | Average log-odds\n")
	for i := range MostCharacteristics - 2 {
		fmt.Fprintf(&b, "q%d | Asked | choice | scored | 0\n", i)
	}
	b.WriteString("\nAttributes\nCharacteristic | Attribute | Label | Log-odds\n")
	for i := range MostCharacteristics - 2 {
		for k := range MostAttributes {
			fmt.Fprintf(&b, "q%d | a%d | Answer | 0.%03d\n", i, k, k)
		}
	}
	b.WriteString("\nRules\nRule | Label | Characteristic | Test | Value | Effect\n")
	for i := range MostRules {
		fmt.Fprintf(&b, "r%d | Rule | q%d | is | a63 | note\n", i, i%(MostCharacteristics-2))
	}
	b.WriteString("\nBands\nBand | Label | PD from | PD below | Recommendation\n")
	for i := range MostBands {
		fmt.Fprintf(&b, "b%d | Band | 0.%03d | 0.%03d | approve\n", i, 15*i, 15*(i+1))
	}
	text := strings.Replace(strings.Replace(b.String(), "| 0.000 | 0.015", "| | 0.015", 1), "| 0.945 | 0.960", "| 0.945 | ", 1)
	c := gather(partOf(text))
	for _, p := range c.problems {
		if p.Code != "missing_sheet" {
			t.Error(p)
		}
	}
	e := c.e
	a := e.NewAnswers(Date{2026, 3, 1}, NewClients)
	a.Put(0, Answer{State: Given, Number: Whole(100)})
	a.Put(1, Answer{State: Given, Number: One})
	for i := 2; i < MostCharacteristics; i++ {
		if i%20 != 0 {
			// Bounds of so many open questions take their time.
		} else if b := e.Bound(a); len(b.Missing) != MostCharacteristics-i || b.May.Len() != MostRules-b.Fires.Len() {
			t.Fatalf("%d answers: %+v", i, b)
		}
		a.Put(i, Answer{State: Given, Attribute: MostAttributes - 1})
	}
	r, ok := e.Score(a)
	if want := -2*LogOddsOne + LogOddsOne/10 + 62*63*LogOddsOne/1000; !ok || r.LogOdds != want || r.Fired.Len() != MostRules || r.Band != 58 || !r.Fired.Has(63) {
		t.Errorf("%+v, want log-odds %v", r, want)
	}
	used := newUsage(e)
	r.Band = MostBands - 1
	used.note(a, r)
	if used.bands != 1<<63 || used.rules != ^RuleSet(0) || used.attributes[63] != 1<<63 {
		t.Errorf("%+v", used)
	}
}

// A chain of conditions: each question hangs on the one before.
func TestConditionChain(t *testing.T) {
	e := gather(partOf(`
Characteristics
Characteristic | Question | Kind | Use | Asked only if | Unknown allowed
q0 | Asked | yes/no | recorded | | yes
q1 | Asked | yes/no | recorded | q0 is yes |
q2 | Asked | choice | recorded | q1 is not no | yes
q3 | Asked | number | recorded | q2 is one of a, b |

Attributes
Characteristic | Attribute | Label
q2 | a | A
q2 | b | B
q2 | c | C

Bands
Band | Label | Recommendation
a | All | approve`)).e
	for _, c := range []struct {
		answers []string
		applies []Truth // q1 to q3
		missing []int   // amount and term come first
	}{
		{nil, []Truth{Perhaps, Perhaps, Perhaps}, []int{0, 1, 2, 3, 4, 5}},
		{[]string{"q0 yes"}, []Truth{Sure, Perhaps, Perhaps}, []int{0, 1, 3, 4, 5}},
		{[]string{"q0 no"}, []Truth{Not, Not, Not}, []int{0, 1}},
		{[]string{"q0 unknown"}, []Truth{Not, Not, Not}, []int{0, 1}},
		{[]string{"q0 yes", "q1 no"}, []Truth{Sure, Not, Not}, []int{0, 1}},
		{[]string{"q0 yes", "q1 yes", "q2 b"}, []Truth{Sure, Sure, Sure}, []int{0, 1, 5}},
		{[]string{"q0 yes", "q1 yes", "q2 c"}, []Truth{Sure, Sure, Not}, []int{0, 1}},
		{[]string{"q0 yes", "q1 yes", "q2 unknown"}, []Truth{Sure, Sure, Not}, []int{0, 1}},
		// Answered out of order: what is below waits for what is above.
		{[]string{"q2 a"}, []Truth{Perhaps, Perhaps, Perhaps}, []int{0, 1, 2, 3, 5}},
		{[]string{"q0 no", "q1 yes", "q2 a", "q3 5"}, []Truth{Not, Not, Not}, []int{0, 1}},
	} {
		a := answered(t, e, c.answers...)
		for i, want := range c.applies {
			if got := a.Applies(3 + i); got != want {
				t.Errorf("%v: q%d applies %v, want %v", c.answers, i+1, got, want)
			}
		}
		if got := e.Bound(a).Missing; !slices.Equal(got, c.missing) {
			t.Errorf("%v: missing %v, want %v", c.answers, got, c.missing)
		}
	}
	if i, ok := e.items[5].ConditionOf(); i != 4 || !ok {
		t.Error("q3 hangs on", i, ok)
	}
	if _, ok := e.items[2].ConditionOf(); ok {
		t.Error("q0 hangs on something")
	}
}

// What was entered before a question turned out not to be asked is kept apart
// from the record, and comes back with the question.
func TestAnswerToWhatIsNotAsked(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	a := sampleAnswers(t, e)
	before := a.Text()
	a.Put(e.byCode["trade"], Answer{State: Given, Attribute: 1})
	if text := a.Text(); !strings.Contains(text, "own_stall\tnot_applicable\nseasons\tnot_applicable\n") {
		t.Error(text)
	}
	a.Put(e.byCode["trade"], Answer{State: Given, Attribute: 0})
	if a.Text() != before {
		t.Error(a.Text())
	}
}

// Computed items that lean on each other's parts in every way cost no more
// than their number.
func TestManyPartsAreNoTrouble(t *testing.T) {
	var b strings.Builder
	b.WriteString("Characteristics\nCharacteristic | Question | Kind | Use\n")
	b.WriteString("payment | Payment | computed | recorded\nshare | Share | computed | recorded\n")
	for i := range 60 {
		fmt.Fprintf(&b, "c%d | Computed | computed | recorded\n", i)
	}
	b.WriteString("\nComputed\nCharacteristic | Operation | Part 1 | Part 2 | Part 3 | Part 4 | Part 5 | Part 6 | Part 7 | Part 8\n")
	for i := range 60 {
		part := "term"
		if i > 0 {
			part = fmt.Sprintf("c%d", i-1)
		}
		fmt.Fprintf(&b, "c%d | sum%s\n", i, strings.Repeat(" | "+part, 8))
	}
	b.WriteString("payment | instalment\nshare | ratio | payment | c59\n\nBands\nBand | Label | Recommendation\na | All | approve")
	s := partOf(b.String())
	s.Terms.TermUnit = Weeks
	c := gather(s)
	for _, p := range c.problems {
		if p.Code != "missing_sheet" && p.Code != "no_checks" {
			t.Error(p)
		}
	}
	e := c.e
	a := answered(t, e, "amount 100", "term 3")
	if w := e.Work(a)[e.byCode["c59"]]; w.Low != Largest.Round(0) || !w.Known() {
		t.Errorf("%+v", w)
	}
	if _, ok := e.Score(a); !ok {
		t.Error("missing")
	}
}

// judge takes a scorecard all the way, whatever it is: nothing may panic, and
// an edition must keep its promises for whatever can be written as answers.
func judge(t *testing.T, s Scorecard, answers string) {
	e, problems := Compile(s)
	for _, p := range problems {
		if p.Code == "" || p.Error() == "" {
			t.Errorf("%#v", p)
		}
	}
	if e == nil {
		return
	}
	again, problems := ParseCanonical(e.Scorecard().Canonical())
	if len(problems) > 0 || again.Fingerprint() != e.Fingerprint() {
		t.Errorf("not the same read back: %v", problems)
	}
	a, _ := e.ParseAnswers(answers)
	b := e.Bound(a)
	if r, ok := e.Score(a); ok && (b.Lowest != r.LogOdds || b.Highest != r.LogOdds) {
		t.Errorf("%+v of %+v", r, b)
	}
	e.Steps(a)
	e.Reasons(a)
	e.Range(a)
	e.Check(a)
	e.Ground(a, a.On)
	e.Work(a)
	if again, problems := e.ParseAnswers(a.Text()); len(problems) == 0 && again.Text() != a.Text() {
		t.Errorf("%q was read as %q", a.Text(), again.Text())
	}
}

// FuzzCompile changes three cells of sample.
func FuzzCompile(f *testing.F) {
	answers := sampleAnswers(f, compiled(f, scorecardOf(f, sample))).Text()
	f.Add([]byte{1, 3, 5, 2, 1, 5, 4, 2, 3}, "1", "0.1", "share", answers)
	f.Add([]byte{0, 1, 1, 5, 0, 3, 7, 5, 1}, "", "999999999999", "2026-02-29", "on\t2024-02-29\nclient\tnew\namount\t-1\nborn\t2999\n")
	f.Fuzz(func(t *testing.T, spots []byte, first, second, third, answers string) {
		sheets := sheetsOf(sample)
		for i, value := range []string{first, second, third} {
			if len(spots) < 3*(i+1) {
				break
			}
			sheet := sheets[int(spots[3*i])%len(sheets)]
			row := sheet.Rows[int(spots[3*i+1])%len(sheet.Rows)]
			row[int(spots[3*i+2])%len(row)] = value
		}
		s, _ := FromSheets(sheets)
		judge(t, s, answers)
	})
}

// FuzzParseCanonical reads anything as a canonical text; what it makes of it
// must have one text that is read as the same.
func FuzzParseCanonical(f *testing.F) {
	f.Add(scorecardOf(f, sample).Canonical())
	f.Add(canonicalHead + "\nWords\nCode\tLanguage\tText\na\tfr\t\\t\\n\\\\e\u0301\\\n")
	f.Fuzz(func(t *testing.T, text string) {
		s, _ := ParseCanonical(text)
		once := s.Canonical()
		again, _ := ParseCanonical(once)
		if twice := again.Canonical(); once != twice {
			t.Errorf("%q was read as %q", once, twice)
		}
		judge(t, s, "")
	})
}
