package table

import (
	"strings"
	"testing"

	"pgregory.net/rapid"

	"weighhouse/model"
)

// applicants reads every row of a table under the edition.
func applicants(t testing.TB, e *model.Edition, in string) (warnings string, list []Applicant) {
	t.Helper()
	header, rows, err := readAll(t, strings.NewReader(in))
	if err != nil {
		t.Fatal(err)
	}
	columns, problems := ColumnsOf(e, header)
	if columns == nil {
		return codes(problems), nil
	}
	for _, row := range rows {
		list = append(list, columns.Applicant(row, today, model.NewClients))
	}
	return codes(problems), list
}

// whole is a header and a row of an applicant without a fault, for tests that
// change one thing.
var whole = map[string]string{
	"ref": "A-1", "amount": "1000", "term": "12", "home": "own", "has_stall": "yes", "stall_years": "7.5",
	"opened": "2019-05-01", "late_days": "0", "household": "612.3",
}

// with is the table of that applicant with cells replaced or added.
func with(pairs ...string) string {
	var header, row []string
	cells := map[string]string{}
	for k, v := range whole {
		cells[k] = v
	}
	for i := 0; i < len(pairs); i += 2 {
		cells[pairs[i]] = pairs[i+1]
	}
	for k, v := range cells {
		header, row = append(header, k), append(row, `"`+v+`"`)
	}
	return strings.Join(header, ";") + "\n" + strings.Join(row, ";") + "\n"
}

func TestApplicant(t *testing.T) {
	e := stall(t)
	const base = "on\t2026-03-02\nclient\tnew\namount\t1000\nterm\t12\nhome\town\nhas_stall\tyes\nstall_years\t7.5\nopened\t2019-05-01\nlate_days\t0\nhousehold\t612.3\n"
	line := func(old, new string) string { return strings.Replace(base, old+"\n", new+"\n", 1) }
	for _, c := range []struct {
		name, in, text string
	}{
		{"whole", with(), base},
		{"either case", with("home", "OWN", "has_stall", "Yes"), base},
		{"day and client", with("on", "2026-01-31", "client", "repeat"), strings.Replace(base, "2026-03-02\nclient\tnew", "2026-01-31\nclient\trepeat", 1)},
		{"seen", with("home.seen", "yes", "amount.seen", "no", "term.seen", ""), line("home\town", "home\town\tseen")},
		{"seen, all in one", with("seen", "home, Opened", "home.seen", "no"), strings.Replace(line("home\town", "home\town\tseen"), "2019-05-01", "2019-05-01\tseen", 1)},
		{"its own product", with("product", "stall"), base},
		{"a year alone", with("opened", "2019"), line("opened\t2019-05-01", "opened\t2019")},
		{"unknown", with("home", "unknown", "home.seen", "yes", "household", "Unknown"), strings.Replace(line("home\town", "home\tunknown"), "612.3", "unknown", 1)},
		{"lines", with("household", "", "household.sales", "40", "household.rent", "200.5", "household.food", "60", "household.food.period", "Month", "household.wages", ""),
			line("household\t612.3", "household\tsales:40/day rent:200.5/month food:60/month")},
		{"lines as they are kept", with("household", "sales:40/day rent:200.5/month"), line("household\t612.3", "household\tsales:40/day rent:200.5/month")},
		{"not asked", with("has_stall", "no", "stall_years", ""), strings.Replace(line("has_stall\tyes", "has_stall\tno"), "stall_years\t7.5", "stall_years\tnot_applicable", 1)},
		{"not asked, said so", with("has_stall", "no", "stall_years", "not_applicable"), strings.Replace(line("has_stall\tyes", "has_stall\tno"), "stall_years\t7.5", "stall_years\tnot_applicable", 1)},
		{"zeros at the end", with("household", "612.30"), base},
	} {
		_, list := applicants(t, e, c.in)
		if len(list) != 1 || list[0].Refused() || list[0].Ref != "A-1" {
			t.Errorf("%s: %+v", c.name, list)
			continue
		}
		if got := list[0].Answers.Text(); got != c.text {
			t.Errorf("%s: got\n%swant\n%s", c.name, got, c.text)
		}
	}
}

func TestApplicantProblems(t *testing.T) {
	e := stall(t)
	for _, c := range []struct{ column, value, want string }{
		{"amount", "", "amount:file_answer_missing"},
		{"home", "", "home:file_answer_missing"},
		{"home", "castle", "home:unknown_attribute"},
		{"home", "ow\u202en", "home:unknown_attribute"},
		{"has_stall", "", "has_stall:file_answer_missing"},
		{"has_stall", "true", "has_stall:unknown_attribute"},
		{"has_stall", "unknown", "has_stall:file_unknown_not_allowed"},
		{"stall_years", "not_applicable", "stall_years:file_answer_missing"},
		{"opened", "01/05/2019", "opened:file_not_a_date"},
		{"opened", "2019-02-30", "opened:file_not_a_date"},
		{"on", "2026", "on:file_not_a_day"},
		{"on", "tomorrow", "on:file_not_a_day"},
		{"client", "old", "client:not_in_list"},
		{"home.seen", "maybe", "home.seen:not_in_list"},
		{"seen", "home hous", "seen:unknown_characteristic"},
		{"product", "farm", "product:file_other_product"},
		{"household.sales", "5", "household:file_worksheet_twice"},
		{"late_days", "-5", "late_days:number_negative"},
		{"late_days", "4000", "late_days:outside_accepted"},
		{"amount", "1010", "amount:amount_not_in_steps"},
		{"amount", "50", "amount:outside_product"},
		{"term", "12.5", "term:too_many_decimals"},
		{"amount", "999999999999", "amount:outside_product"},
		{"amount", "1000000000000", "amount:number_too_large"},
		{"household", "999999999999", ""},
		{"household", "-999999999999.99", ""},
		{"household", "-", "household:file_not_a_number"},
		{"household", "sales:5", "household:not_in_list"},
		{"household", "bribes:5/day", "household:unknown_line"},
		{"household", strings.Repeat("9", 10_000), "household:number_too_large"},
		{"household", strings.Repeat("9.", 5_000), "household:file_not_a_number"},
	} {
		_, list := applicants(t, e, with(c.column, c.value))
		if got := codes(list[0].Problems); got != c.want {
			t.Errorf("%s %.40q: %s, want %s", c.column, c.value, got, c.want)
		}
	}
}

// A number written in another way is refused with every meaning it may have.
func TestForeignNumbers(t *testing.T) {
	e := stall(t)
	for value, want := range map[string]string{
		"1250.5":             "",
		"1.250,50":           "file_number_other_style 1250.5",
		"1,250.50":           "file_number_other_style 1250.5",
		"1,250":              "file_number_two_readings 1250 1.25",
		"1.250":              "file_number_two_readings 1.25 1250",
		"12.000":             "file_number_two_readings 12 12000",
		"0.250":              "",
		"1 250":              "file_number_other_style 1250",
		"1\u202f250":         "file_number_other_style 1250",
		"1'250":              "file_number_other_style 1250",
		"12,34,567":          "file_number_other_style 1234567",
		"1250,5":             "file_number_other_style 1250.5",
		"1e3":                "file_number_other_style 1000",
		"1E+05":              "file_number_other_style 100000",
		"+5":                 "file_number_other_style 5",
		"5.":                 "file_number_other_style 5",
		"\u22125":            "file_number_other_style -5",
		"12 %":               "file_number_two_readings 0.12 12",
		"1.2.3":              "file_not_a_number",
		"inf":                "file_not_a_number",
		"-Infinity":          "file_not_a_number",
		"NaN":                "file_not_a_number",
		"1e999":              "file_not_a_number",
		"0x10":               "file_not_a_number",
		"5 crowns":           "file_not_a_number",
		"\u0661\u0662\u0663": "file_number_other_digits",
		"5\u0301":            "file_not_a_number",
	} {
		for _, column := range []string{"household", "household.sales"} {
			in := with("household", "", column, value)
			_, list := applicants(t, e, in)
			got := ""
			for _, p := range list[0].Problems {
				got = strings.TrimSpace(strings.Join([]string{p.Code, p.Args["reading"] + p.Args["first"], p.Args["second"]}, " "))
				if p.Place.Column != column {
					t.Errorf("%q: at %s", value, p.Place.Column)
				}
			}
			if got != want {
				t.Errorf("%s %q: %s, want %s", column, value, got, want)
			}
		}
	}
	_, list := applicants(t, e, with("household", "", "household.rent", "-5"))
	if got := codes(list[0].Problems); got != "household.rent:number_negative" {
		t.Error(got)
	}
}

func TestColumns(t *testing.T) {
	e := stall(t)
	for _, c := range []struct{ in, want string }{
		{with(), ""},
		{with("share", "0.1"), "table_computed_column"},
		{with("nickname", "x"), "table_unknown_column"},
		{with("household.bribes", "x"), "table_unknown_column"},
		{with("share.seen", "x"), "table_unknown_column"},
		{"AMOUNT,term,amount\n", "table_no_column table_no_column table_no_column table_no_column table_no_column table_repeated_column"},
		{"ref,colour\n1,red\n", "table_no_known_column"},
		{"amount,,home\n", "table_no_column table_no_column table_no_column table_no_column table_no_column table_unnamed_column"},
	} {
		warnings, list := applicants(t, e, c.in)
		if warnings != c.want {
			t.Errorf("%q: %s, want %s", c.in, warnings, c.want)
		}
		for _, a := range list {
			if a.Refused() {
				t.Errorf("%q: %v", c.in, a.Problems)
			}
		}
	}
	if got := columnLetters(0) + columnLetters(25) + columnLetters(26) + columnLetters(701) + columnLetters(702); got != "AZAAZZAAA" {
		t.Error(got)
	}
}

// A repeated column is refused wherever it stands, in either case.
func TestRepeatedColumnRefused(t *testing.T) {
	if columns, _ := ColumnsOf(stall(t), []string{"amount", "Amount"}); columns != nil {
		t.Error("taken")
	}
}

// An edition for new clients alone refuses a repeat one.
func TestOtherClients(t *testing.T) {
	card := *stall(t).Scorecard()
	card.Card.For = model.RepeatClients
	e, problems := model.Compile(card)
	if e == nil {
		t.Fatal(problems)
	}
	_, list := applicants(t, e, with("client", "new"))
	if got := codes(list[0].Problems); got != "client:file_other_clients" {
		t.Error(got)
	}
	_, list = applicants(t, e, with())
	if list[0].Refused() || list[0].Answers.Client != model.RepeatClients {
		t.Error(list[0].Problems, list[0].Answers.Client)
	}
}

// What a row says reads back as the same answers, whatever they are.
func TestRowsReadBack(t *testing.T) {
	e := stall(t)
	rapid.Check(t, func(t *rapid.T) {
		a := e.NewAnswers(today, model.NewClients)
		put := func(code, text string) string {
			item, _ := e.Item(code)
			answer, err := e.ParseAnswer(item.Index, text)
			if err != nil {
				t.Fatal(err)
			}
			a.Put(item.Index, answer)
			return text
		}
		number := func(code string, decimals int, lo, hi int64) string {
			step := int64(model.One)
			for range decimals {
				step /= 10
			}
			return put(code, model.Number(rapid.Int64Range(lo, hi).Draw(t, code)*step).String())
		}
		var header, row []string
		cell := func(code, text string) { header, row = append(header, code), append(row, text) }
		cell("amount", put("amount", model.Whole(50*rapid.Int64Range(2, 60).Draw(t, "amount")).String()))
		cell("term", number("term", 0, 3, 24))
		cell("home", put("home", rapid.SampledFrom([]string{"own", "rent", "family", "unknown"}).Draw(t, "home")))
		cell("has_stall", put("has_stall", rapid.SampledFrom([]string{"yes", "no"}).Draw(t, "has_stall")))
		cell("stall_years", number("stall_years", 1, 0, 600))
		cell("opened", put("opened", rapid.SampledFrom([]string{"1950", "2020-02-29", "2026-03-02"}).Draw(t, "opened")))
		cell("late_days", number("late_days", 0, 0, 3650))
		cell("household", number("household", 2, -100_000_000, 100_000_000))
		for i := range row {
			if strings.Contains(row[i], ".") && rapid.Bool().Draw(t, "zeros") && len(row[i])-strings.Index(row[i], ".") != 3 {
				row[i] += "0"
			}
		}
		columns, problems := ColumnsOf(e, header)
		if problems != nil {
			t.Fatal(problems)
		}
		got := columns.Applicant(Row{Number: 1, Cells: row}, today, model.NewClients)
		if got.Refused() || got.Answers.Text() != a.Text() {
			t.Fatalf("%v\n%s\n%s", got.Problems, got.Answers.Text(), a.Text())
		}
	})
}

// FuzzApplicants holds that any row is either refused, with a problem, or
// scored from answers that read back as themselves.
func FuzzApplicants(f *testing.F) {
	e := stall(f)
	const header = "ref,on,client,amount,term,home,has_stall,stall_years,opened,late_days,household,household.sales,household.food,household.food.period,home.seen\n"
	for _, row := range []string{
		"1,2026-01-01,new,1000,12,own,yes,7.5,2019,0,612.3,,,,yes", "2,,,500,10,family,no,,2015,100,,40,60,day,",
		"x,,,999999999999,999999999999,own,yes,999999999999,2019,999999999999,999999999999,,,,", "\"\",\"\"\"\",,1.250,\x00",
		"5,,,1e9,-3,Inf,NaN,\u0661,1e400,0x1,\u202e5,e\u0301,,,", "6,,," + strings.Repeat("9", 10_001), strings.Repeat("\"", 10_001),
	} {
		f.Add(row)
	}
	f.Fuzz(func(t *testing.T, row string) {
		_, list := applicants(t, e, header+row)
		for _, a := range list {
			if a.Answers == nil {
				if !a.Refused() {
					t.Fatal("no answers and no problem")
				}
				continue
			}
			result, complete := e.Score(a.Answers)
			if a.Refused() {
				continue
			}
			if !complete {
				t.Fatalf("missing, and not said: %q", row)
			}
			again, problems := e.ParseAnswers(a.Answers.Text())
			if problems != nil {
				t.Fatal(problems)
			}
			if r, _ := e.Score(again); r != result {
				t.Fatalf("%+v, kept and read again %+v", result, r)
			}
		}
	})
}

func BenchmarkApplicant(b *testing.B) {
	e := stall(b)
	columns, _ := ColumnsOf(e, []string{"ref", "amount", "term", "home", "has_stall", "stall_years", "opened", "late_days", "household"})
	row := Row{Number: 1, Cells: []string{"A-1", "1000", "12", "own", "yes", "7.5", "2019-05-01", "0", "612.3"}}
	for b.Loop() {
		if a := columns.Applicant(row, today, model.NewClients); a.Refused() {
			b.Fatal(a.Problems)
		}
	}
}

func BenchmarkRead(b *testing.B) {
	r, err := NewReader(&endless{left: "ref,amount,term,home,has_stall,stall_years,opened,late_days,household\n", row: "A-1,1000,12,own,yes,7.5,2019-05-01,0,612.3\n", most: 1 << 62})
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := r.Read(); err != nil {
			b.Fatal(err)
		}
	}
}

func TestHeaderOf(t *testing.T) {
	e := stall(t)
	header := HeaderOf(e)
	const want = "ref on client amount term home home.seen has_stall stall_years opened late_days household household.sales household.wages household.rent household.food"
	if got := strings.Join(header, " "); got != want {
		t.Error(got)
	}
	if columns, problems := ColumnsOf(e, header); columns == nil || problems != nil {
		t.Error(problems)
	}
}
