package workbook

import (
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strconv"
	"testing"

	"weighhouse/model"
)

// profile is where LibreOffice keeps its settings for these tests.
var profile string

func TestMain(m *testing.M) {
	var err error
	if profile, err = os.MkdirTemp("", "profile"); err != nil {
		panic(err)
	}
	code := m.Run()
	os.RemoveAll(profile)
	os.Exit(code)
}

// savedBy has a spreadsheet program open files, work out their formulas and
// save them again.
func savedBy(t *testing.T, program string, files [][]byte) [][]byte {
	t.Helper()
	if _, err := exec.LookPath(program); err != nil {
		t.Fatalf("%s is not installed", program)
	}
	dir := t.TempDir()
	in, out := filepath.Join(dir, "in"), filepath.Join(dir, "out")
	for _, d := range []string{in, out} {
		if err := os.Mkdir(d, 0o700); err != nil {
			t.Fatal(err)
		}
	}
	var names []string
	for i, b := range files {
		name := filepath.Join(in, fmt.Sprintf("%d.xlsx", i))
		if err := os.WriteFile(name, b, 0o600); err != nil {
			t.Fatal(err)
		}
		names = append(names, name)
	}
	var runs [][]string
	switch program {
	case "soffice":
		runs = append(runs, append([]string{"-env:UserInstallation=file://" + profile, "--headless", "--convert-to", "xlsx", "--outdir", out}, names...))
	case "ssconvert":
		for i, name := range names {
			runs = append(runs, []string{"--recalc", name, filepath.Join(out, fmt.Sprintf("%d.xlsx", i))})
		}
	}
	for _, args := range runs {
		if said, err := exec.Command(program, args...).CombinedOutput(); err != nil {
			t.Fatalf("%s: %v\n%s", program, err, said)
		}
	}
	var saved [][]byte
	for i := range files {
		b, err := os.ReadFile(filepath.Join(out, fmt.Sprintf("%d.xlsx", i)))
		if err != nil {
			t.Fatal(err)
		}
		saved = append(saved, b)
	}
	return saved
}

var programs = []string{"soffice", "ssconvert"}

// Saved again untouched, a workbook keeps its fingerprint.
func TestSavedAgain(t *testing.T) {
	s := kinds(t)
	for _, program := range programs {
		t.Run(program, func(t *testing.T) {
			rd := read(savedBy(t, program, [][]byte{written(t, s)})[0])
			for _, p := range rd.Problems {
				t.Error(p)
			}
			if got := rd.Scorecard.Fingerprint(); got != s.Fingerprint() {
				t.Errorf("canonical text differs:\n%s\nfrom\n%s", rd.Scorecard.Canonical(), s.Canonical())
			}
		})
	}
}

// applicant is the workbook of s with the answers of a check in "Try it".
func applicant(t *testing.T, s model.Scorecard, check int) []byte {
	t.Helper()
	checks := slices.Clone(s.Checks)
	checks[0], checks[check] = checks[check], checks[0]
	s.Checks = checks
	return written(t, s)
}

// tried are the values of "Try it" by address.
func tried(t *testing.T, file []byte) map[string]string {
	t.Helper()
	bk, problems := readBook(file, func(name string) bool { return name == tryItSheet })
	if bk == nil {
		t.Fatal(problems)
	}
	values := map[string]string{}
	for _, s := range bk.sheets {
		for _, c := range s.cells {
			values[c.ref()] = c.text
		}
	}
	return values
}

// The sheet "Try it", worked out by other programs, says what we say before
// any rounding: to 1e-12, or to 1e-9 where there are slopes, because the
// program rounds an exact half of a billionth to even and a spreadsheet up.
func TestTryIt(t *testing.T) {
	sloped := kinds(t)
	plain := withoutSlopes(t)
	var files [][]byte
	for i := range sloped.Checks {
		s := sloped
		if i%2 == 1 {
			s = plain
		}
		files = append(files, applicant(t, s, i))
	}
	for _, program := range programs {
		t.Run(program, func(t *testing.T) {
			for i, file := range savedBy(t, program, files) {
				s, tolerance := sloped, 1e-9
				if i%2 == 1 {
					s, tolerance = plain, 1e-12
				}
				e, _ := model.Compile(s)
				compareTried(t, e, s.Checks[i], tried(t, file), tolerance)
			}
		})
	}
}

// withoutSlopes is kinds with bands alone.
func withoutSlopes(t *testing.T) model.Scorecard {
	s := kinds(t)
	s.Attributes = slices.DeleteFunc(s.Attributes, func(a model.Attribute) bool { return a.Code == "" })
	for i := range s.Characteristics {
		switch c := &s.Characteristics[i]; c.Code {
		case model.Amount, "left_over", "turnover":
			c.Use = model.Recorded
			for k := range s.Attributes {
				if s.Attributes[k].Characteristic == c.Code {
					s.Attributes[k].LogOdds = model.Maybe[model.LogOdds]{}
				}
			}
		}
	}
	corrected(t, &s)
	return s
}

// compareTried compares what a program worked out with ours.
func compareTried(t *testing.T, e *model.Edition, check model.Check, got map[string]string, tolerance float64) {
	t.Helper()
	card := e.Scorecard().Card
	l := answered(t, e, check)
	near := func(what string, row int, want float64) {
		t.Helper()
		f, err := strconv.ParseFloat(got[refOf(tryResult, row)], 64)
		if err != nil || math.Abs(f-want) > tolerance*max(1, math.Abs(want)) {
			t.Errorf("%s: %s is %q, want %.17g", check.Code, what, got[refOf(tryResult, row)], want)
		}
	}
	result, ok := e.Score(l)
	if !ok {
		t.Fatalf("%s: answers missing", check.Code)
	}
	x := result.LogOdds.Float()
	near("log-odds", tryTotal, x)
	near("PD", tryPD, 1/(1+math.Exp(-x)))
	near("score", tryScore, card.ReferenceScore.Float()-card.PointsToDouble.Float()/math.Ln2*(x+math.Log(card.ReferenceOdds.Float())))
	band := e.Scorecard().Bands[result.Band]
	if got[refOf(tryResult, tryBand)] != band.Code || got[refOf(tryResult, tryRecommendation)] != string(band.Recommendation) {
		t.Errorf("%s: band %q, %q, want %q, %q", check.Code, got[refOf(tryResult, tryBand)], got[refOf(tryResult, tryRecommendation)], band.Code, band.Recommendation)
	}
}

// answered are the answers of a check.
func answered(t *testing.T, e *model.Edition, check model.Check) *model.Answers {
	t.Helper()
	a := e.NewAnswers(e.Scorecard().Card.IssuedOn, model.NewClients)
	for _, answer := range check.Answers {
		item, _ := e.Item(answer.Characteristic)
		x, err := e.ParseAnswer(item.Index, answer.Answer)
		if err != nil {
			t.Fatal(err)
		}
		a.Put(item.Index, x)
	}
	return a
}

// Every way to repay gives the payment that package loan gives.
func TestTryItPayments(t *testing.T) {
	var files [][]byte
	var editions []*model.Edition
	for i := range 6 {
		s := kinds(t)
		s.Terms.Repayment = model.Repayment(model.EqualPayments.Options()[i%3])
		s.Terms.Method = model.InterestMethod(model.Flat.Options()[i/3%2])
		s.Terms.TermUnit = model.TermUnit(model.Weeks.Options()[(i+i/3)%3])
		s.Terms.PaymentRoundedTo = model.Maybe[model.Number]{Value: model.Whole(5), Set: i%4 >= 2}
		if i%2 == 1 {
			s.Terms.RatePer, s.Terms.Rate = model.PerMonth, 30_000_000
		}
		// With other payments other bands are met: one of each will do.
		s.Bands = s.Bands[:1]
		s.Bands[0].Below = model.Maybe[model.PD]{}
		s.Attributes = slices.DeleteFunc(s.Attributes, func(a model.Attribute) bool { return a.Code == "heavy" || a.Code == "crushing" })
		for i := range s.Attributes {
			if s.Attributes[i].Code == "light" {
				s.Attributes[i].Below = model.Maybe[model.Number]{}
			}
		}
		// Set against a month's money, the payment must be a month's.
		s.Characteristics = append(s.Characteristics, model.Characteristic{Code: "payment_a_month", Question: "Payments of a month",
			Kind: model.Computed, Decimals: 2, Use: model.Recorded})
		for i := range s.Computed {
			if f := &s.Computed[i]; f.Operation == model.Ratio && f.Parts[0].Code == "payment" {
				f.Parts[0].Code = "payment_a_month"
			}
		}
		s.Computed = append(s.Computed, model.Formula{Characteristic: "payment_a_month", Operation: model.MonthlyInstalment})
		e := corrected(t, &s)
		files, editions = append(files, written(t, s)), append(editions, e)
	}
	for i, file := range savedBy(t, "soffice", files) {
		e, got := editions[i], tried(t, file)
		check := e.Scorecard().Checks[0]
		amount, term, _ := answered(t, e, check).AmountAndTerm()
		payment, _ := e.Plan().Payment(int64(amount)/10_000, term, 0)
		item, _ := e.Item("payment")
		if cell, want := refOf(tryValue, item.Index+2), e.Money(payment).String(); got[cell] != want {
			t.Errorf("%v: %s, want %s", e.Scorecard().Terms, got[cell], want)
		}
		compareTried(t, e, check, got, 1e-9)
	}
}

// corrected makes every check say what the scorecard gives.
func corrected(t *testing.T, s *model.Scorecard) *model.Edition {
	t.Helper()
	// Log-odds first, then what follows from them.
	for range 2 {
		_, problems := model.Compile(*s)
		correct(t, s, problems)
	}
	e, problems := model.Compile(*s)
	if e == nil {
		t.Fatal(problems)
	}
	return e
}

func correct(t *testing.T, s *model.Scorecard, problems []model.Problem) {
	t.Helper()
	for _, p := range problems {
		if p.Code != "check_differs" && p.Code != "check_log_odds_differ" {
			continue
		}
		c := &s.Checks[p.Place.Row-1]
		var err error
		switch ours := p.Args["ours"]; p.Place.Column {
		case "Log-odds":
			c.LogOdds, err = model.ParseLogOdds(ours)
		case "PD":
			c.PD, err = model.ParsePD(ours)
		case "Score":
			c.Score, err = model.ParseNumber(ours)
		case "Band":
			c.Band = ours
		case "Recommendation":
			c.Recommendation = model.Recommendation(ours)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
}
