package workbook

import (
	"bytes"
	"errors"
	"strings"
	"testing"
	"unicode"

	"github.com/xuri/excelize/v2"
	"golang.org/x/text/unicode/norm"
	"pgregory.net/rapid"

	"weighhouse/model"
)

// kinds is a scorecard with every kind of question, operation and test.
func kinds(t testing.TB) model.Scorecard {
	t.Helper()
	s, problems := model.ParseCanonical(string(kept(t, "kinds.txt")))
	if len(problems) > 0 {
		t.Fatal(problems)
	}
	return s
}

func written(t testing.TB, s model.Scorecard) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, s); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestWriteThenRead(t *testing.T) {
	s := kinds(t)
	rd, err := Read(bytes.NewReader(written(t, s)))
	if err != nil {
		t.Fatal(err)
	}
	if len(rd.Problems) > 0 {
		t.Errorf("problems: %v", rd.Problems)
	}
	if rd.Edition == nil || rd.Edition.Fingerprint() != s.Fingerprint() {
		t.Errorf("canonical text differs:\n%s\nfrom\n%s", rd.Scorecard.Canonical(), s.Canonical())
	}
}

// Whatever a scorecard says, written and read again it says the same.
func TestWriteThenReadAnything(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		text := rapid.Custom(func(r *rapid.T) string {
			s := rapid.StringOf(rapid.OneOf(rapid.RuneFrom([]rune("_x0041=\"'<&>%\n1,.")), rapid.RuneFrom(nil, unicode.L, unicode.P, unicode.Nd, unicode.M))).Draw(r, "text")
			return strings.TrimSpace(norm.NFC.String(s))
		})
		code := rapid.StringMatching(`[a-z][a-z0-9_]{0,12}`)
		var s model.Scorecard
		s.Card.Title, s.Card.Notes = text.Draw(r, "title"), text.Draw(r, "notes")
		s.Card.Edition = model.Count(rapid.IntRange(0, 1e9).Draw(r, "edition"))
		s.Card.BaseLogOdds = model.LogOdds(rapid.Int64Range(-1e15+1, 1e15-1).Draw(r, "base"))
		s.Card.IssuedOn = model.Date{Year: rapid.IntRange(1909, 2999).Draw(r, "year"), Month: 2, Day: 28}
		s.Card.HistoryUntil = model.Some(model.Date{Year: rapid.IntRange(1800, 2999).Draw(r, "year alone")})
		for range rapid.IntRange(0, 5).Draw(r, "attributes") {
			s.Attributes = append(s.Attributes, model.Attribute{
				Characteristic: code.Draw(r, "code"), Code: code.Draw(r, "code"), Label: text.Draw(r, "label"),
				From:    model.Some(model.Number(rapid.Int64Range(-1e12, 1e12).Draw(r, "from"))),
				LogOdds: model.Maybe[model.LogOdds]{Value: model.LogOdds(rapid.Int64Range(-1e15+1, 1e15-1).Draw(r, "log-odds")), Set: true},
				Slope:   model.Some(model.Slope{Digits: rapid.Int64Range(1, 999).Draw(r, "digits")*1000 + 1, Places: int8(rapid.IntRange(0, 15).Draw(r, "places"))}),
				Share:   model.Maybe[model.Rate]{Value: model.Rate(rapid.Int64Range(0, 1e9).Draw(r, "share")), Set: rapid.Bool().Draw(r, "has share")},
			})
		}
		s.Rules = append(s.Rules, model.Rule{Code: "a", Characteristic: "b", Test: model.Is, Value: "c, d"})
		if rapid.Bool().Draw(r, "covariance") {
			v := model.Covar(float64(rapid.Int64Range(-1e9, 1e9).Draw(r, "covariance value")) / 1e9)
			s.Covariance = &model.Covariance{Names: []string{"base"}, Values: [][]model.Covar{{v}}}
		}
		var b bytes.Buffer
		if err := Write(&b, s); err != nil {
			r.Fatal(err)
		}
		rd := read(b.Bytes())
		if got, want := rd.Scorecard.Canonical(), s.Canonical(); got != want {
			r.Fatalf("got\n%s\nwant\n%s\n%v", got, want, rd.Problems)
		}
	})
}

func TestTextTooLong(t *testing.T) {
	s := kinds(t)
	s.Card.Notes = strings.Repeat("a", mostText+1)
	var p model.Problem
	if err := Write(&bytes.Buffer{}, s); !errors.As(err, &p) || p.Code != "text_too_long" {
		t.Errorf("got %v", err)
	}
}

func TestFileName(t *testing.T) {
	if got := FileName(kinds(t).Card); got != "market_loan-edition-3-2026-03-01.xlsx" {
		t.Error(got)
	}
	if got := FileName(model.Card{}); got != "scorecard-blank.xlsx" {
		t.Error(got)
	}
}

// The blank workbook reads but for what has to be filled in, and its example
// is a scorecard that is taken.
func TestBlank(t *testing.T) {
	var b bytes.Buffer
	if err := Blank(&b); err != nil {
		t.Fatal(err)
	}
	for _, p := range read(b.Bytes()).Problems {
		switch p.Code {
		case "missing_value", "no_bands", "no_checks", "not_above_zero", "needed_for_estimated":
		default:
			t.Error(p)
		}
	}
	example, problems := model.ParseCanonical(exampleText)
	if len(problems) > 0 {
		t.Error(problems)
	}
	if rd := read(written(t, example)); rd.Edition == nil || len(rd.Problems) > 0 {
		t.Errorf("example: %v", rd.Problems)
	}
}

// Every header and item has its note, every closed list its drop-down, and
// the headers cannot be changed by a slip.
func TestHelpInWorkbook(t *testing.T) {
	var b bytes.Buffer
	if err := Blank(&b); err != nil {
		t.Fatal(err)
	}
	f, err := excelize.OpenReader(&b)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	for _, form := range model.Forms() {
		comments, err := f.GetComments(form.Name)
		if err != nil {
			t.Fatal(err)
		}
		want := len(form.Columns)
		if form.Items {
			want += 2
		}
		if len(comments) != want {
			t.Errorf("%s has %d notes, want %d", form.Name, len(comments), want)
		}
		lists := 0
		for _, c := range form.Columns {
			if len(c.Options) > 0 || c.Kind == model.YesNoColumn {
				lists++
			}
		}
		validations, err := f.GetDataValidations(form.Name)
		if err != nil {
			t.Fatal(err)
		}
		for _, v := range validations {
			if v.ShowErrorMessage {
				lists--
			}
		}
		if lists != 0 {
			t.Errorf("%s lacks %d drop-downs", form.Name, lists)
		}
		guard, err := f.GetSheetProtection(form.Name)
		if err != nil || guard.Password != "" || guard.AlgorithmName != "" {
			t.Errorf("%s: %+v, %v", form.Name, guard, err)
		}
		panes, err := f.GetPanes(form.Name)
		if err != nil || !panes.Freeze || panes.YSplit != 1 {
			t.Errorf("%s: %+v, %v", form.Name, panes, err)
		}
	}
}
