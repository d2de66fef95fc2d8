package model

import (
	"slices"
	"strings"
	"testing"
)

// The telephone code's remainder was worked out with bc.
func TestCanonicalText(t *testing.T) {
	s := Scorecard{Words: []Wording{{"a", "fr", "tab\there, back\\slash,\r\nan e\u0301"}}}
	text := s.Canonical()
	want := "Words\nCode\tLanguage\tText\na\tfr\ttab\\there, back\\\\slash,\\nan \u00e9\n"
	if !strings.HasPrefix(text, "weighhouse scorecard 1\nCard\nItem\tValue\n") || !strings.HasSuffix(text, want) {
		t.Error(text)
	}
	f, err := ParseFingerprint("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad") // of "abc": FIPS 180-2, B.1
	if err != nil || f.String() != "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad" {
		t.Error(f, err)
	}
	if got, want := f.TelephoneCode(), "3994 1814 3717 5092 3613 8531"; got != want {
		t.Errorf("telephone code %s, want %s", got, want)
	}
	if got, want := (Fingerprint{15: 7}).TelephoneCode(), "0000 0000 0000 0000 0000 0007"; got != want {
		t.Errorf("telephone code %s, want %s", got, want)
	}
}

// Every column of every sheet is in the text.
func TestCanonicalTextHoldsEverything(t *testing.T) {
	s := scorecardOf(t, sample)
	before := s.Fingerprint()
	forms := Forms()
	for k, sheet := range s.Sheets() {
		if sheet.Name == "Covariance" {
			continue // its columns are coefficients
		}
		for n, column := range forms[k].Columns {
			sheets := s.Sheets()
			row, at := sheets[k].Rows[0], slices.Index(sheet.Columns, column.Name)
			if forms[k].Items {
				row, at = sheets[k].Rows[n], 1
			}
			others := map[ColumnKind][]string{TextColumn: {"other"}, CodeColumn: {"other"}, ListColumn: column.Options, YesNoColumn: {Yes, No},
				NumberColumn: {"1", "0.5", "0"}, DateColumn: {"2031-01-01"}, ValueColumn: {"7"}}[column.Kind]
			original := row[at]
			if !slices.ContainsFunc(others, func(other string) bool {
				if other == original || len(column.Options) == 1 {
					return len(column.Options) == 1 // nothing else can stand there
				}
				row[at] = other
				read, _ := FromSheets(sheets)
				return read.Fingerprint() != before
			}) {
				t.Errorf("%s: %s is not in the fingerprint", sheet.Name, column.Name)
			}
		}
	}
}

// The forms tell all that a writer of blank workbooks needs.
func TestForms(t *testing.T) {
	forms := Forms()
	var names []string
	for _, f := range forms {
		names = append(names, f.Name)
		for _, c := range f.Columns {
			switch c.Kind {
			case ListColumn:
				if len(c.Options) == 0 {
					t.Errorf("%s: %s has no options", f.Name, c.Name)
				}
			case NumberColumn:
				if c.Digits == 0 {
					t.Errorf("%s: %s has no digits", f.Name, c.Name)
				}
			}
		}
	}
	if got := strings.Join(names, " "); got != "Card Characteristics Attributes Lines Computed Bands Rules Terms Overrides Checks Covariance Words" {
		t.Error(got)
	}
}
