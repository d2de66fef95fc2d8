package words

import (
	"strings"
	"testing"

	"weighhouse/model"
)

func TestDate(t *testing.T) {
	first, twelfth := model.Date{Year: 2026, Month: 3, Day: 1}, model.Date{Year: 2026, Month: 12, Day: 12}
	for _, c := range []struct {
		language, short, full string
		date                  model.Date
	}{
		{"en", "1 Mar 2026", "1 March 2026", first},
		{"en", "12 Dec 2026", "12 December 2026", twelfth},
		{"fr", "1er mars 2026", "1er mars 2026", first},
		{"fr", "12 déc. 2026", "12 décembre 2026", twelfth},
		{"es", "1 mar 2026", "1 de marzo de 2026", first},
		{"es", "12 dic 2026", "12 de diciembre de 2026", twelfth},
		{"en", "1985", "1985", model.Date{Year: 1985}},
		{"en", "", "", model.Date{}},
	} {
		r := New(Style{Language: c.language})
		if got := r.Date(c.date); got != c.short {
			t.Errorf("%s: %q, want %q", c.language, got, c.short)
		}
		if got := r.DateInFull(c.date); got != c.full {
			t.Errorf("%s: %q, want %q", c.language, got, c.full)
		}
	}
}

func TestParseDate(t *testing.T) {
	for _, c := range []struct {
		order      DateOrder
		text, want string
	}{
		{DayFirst, "1 Dec 2026", "2026-12-01"},
		{DayFirst, "1st december 2026", "2026-12-01"},
		{DayFirst, "Dec 1, 2026", "2026-12-01"},
		{DayFirst, "1er déc. 2026", "2026-12-01"},
		{DayFirst, "1 de diciembre de 2026", "2026-12-01"},
		{DayFirst, "3 aout 2026", "2026-08-03"},
		{DayFirst, "3 ene 2026", "2026-01-03"},
		{DayFirst, "9 setiembre 2026", "2026-09-09"},
		{DayFirst, "2026-12-01", "2026-12-01"},
		{MonthFirst, "2026-12-01", "2026-12-01"},
		{DayFirst, "2026/2/1", "2026-02-01"},
		{DayFirst, "1/12/2026", "2026-12-01"},
		{MonthFirst, "1/12/2026", "2026-01-12"},
		{DayFirst, "1.12.2026", "2026-12-01"},
		{DayFirst, "31-1-2026", "2026-01-31"},
		{MonthFirst, "31/1/2026", "2026-01-31"},
		{DayFirst, "1/31/2026", "2026-01-31"},
		{DayFirst, "29 feb 2028", "2028-02-29"},
		{DayFirst, "1985", "1985"},

		{DayFirst, "", "date_empty"},
		{DayFirst, "29 feb 2026", "date_no_such_day"},
		{DayFirst, "31/31/2026", "date_no_such_day"},
		{DayFirst, "0/1/2026", "date_no_such_day"},
		{DayFirst, "1/12/26", "date_short_year"},
		{DayFirst, "1 dec 26", "date_short_year"},
		{DayFirst, "1 jui 2026", "not_a_date"},
		{DayFirst, "1 ma 2026", "not_a_date"},
		{DayFirst, "1 xyz 2026", "not_a_date"},
		{DayFirst, "yesterday", "not_a_date"},
		{DayFirst, "2026-12-2026", "not_a_date"},
		{DayFirst, "1/12", "not_a_date"},
		{DayFirst, "1 Jan 1066", "date_out_of_range"},
		{DayFirst, "0985", "date_out_of_range"},
		{DayFirst, "١/٢/٢٠٢٦", "digits_other"},
		{DayFirst, strings.Repeat("1", 10_000), "text_too_long"},
	} {
		d, err := New(Style{Dates: c.order}).ParseDate(c.text, true)
		got := d.String()
		if err != nil {
			got = err.(model.Problem).Code
		}
		if got != c.want {
			t.Errorf("%s, %.20q: %s, want %s", c.order, c.text, got, c.want)
		}
	}
	if _, err := New(Style{}).ParseDate("1985", false); err == nil || err.(model.Problem).Code != "date_year_alone" {
		t.Errorf("a year alone gave %v", err)
	}
}

// Every date a Reader writes it reads back, in each language.
func TestDatesComeBack(t *testing.T) {
	for _, l := range Languages() {
		for _, order := range DateOrders() {
			r := New(Style{Language: l.Code, Dates: order})
			for d := (model.Date{Year: 2028, Month: 1, Day: 1}); d.Year == 2028; d = d.AddDays(1) {
				for _, text := range []string{r.Date(d), r.DateInFull(d), d.String()} {
					if back, err := r.ParseDate(text, false); err != nil || back != d {
						t.Fatalf("%s: %q read as %v, %v", l.Code, text, back, err)
					}
				}
			}
		}
	}
}
