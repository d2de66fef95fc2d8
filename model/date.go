package model

import (
	"fmt"
	"time"
)

// A Date is a civil date, or a year alone (Month and Day 0). The zero Date is
// no date.
type Date struct {
	Year       int
	Month, Day int
}

// ParseDate reads "2026-03-01" or a year alone, "1985", from 1800 to 2999.
func ParseDate(text string) (Date, error) {
	var d Date
	if t, err := time.Parse(time.DateOnly, text); err == nil {
		d = DateOf(t)
	} else if t, err := time.Parse("2006", text); err == nil {
		d = Date{Year: t.Year()}
	}
	if d.Year < 1800 || d.Year > 2999 {
		return Date{}, Problem{Code: "not_a_date", Args: Args{"value": text}}
	}
	return d, nil
}

// DateOf is the civil date of t in t's own place.
func DateOf(t time.Time) Date {
	y, m, d := t.Date()
	return Date{y, int(m), d}
}

// IsZero tells that there is no date.
func (d Date) IsZero() bool { return d == Date{} }

// YearAlone tells that only the year is known.
func (d Date) YearAlone() bool { return d.Year != 0 && d.Month == 0 }

// String is "2026-03-01", "1985", or empty for no date.
func (d Date) String() string {
	switch {
	case d.IsZero():
		return ""
	case d.Month == 0:
		return fmt.Sprintf("%04d", d.Year)
	}
	return fmt.Sprintf("%04d-%02d-%02d", d.Year, d.Month, d.Day)
}

// MarshalText is String.
func (d Date) MarshalText() ([]byte, error) { return []byte(d.String()), nil }

// UnmarshalText is ParseDate.
func (d *Date) UnmarshalText(b []byte) (err error) {
	*d, err = ParseDate(string(b))
	return err
}

// Before tells that d is earlier than e; a year alone counts as its 1 July.
func (d Date) Before(e Date) bool { return d.order() < e.order() }

func (d Date) order() int {
	d = d.midYear()
	return d.Year*10000 + d.Month*100 + d.Day
}

// midYear is the day a year alone stands for: 1 July, half a year off at the
// most (common practice, no source).
func (d Date) midYear() Date {
	if d.YearAlone() {
		return Date{d.Year, 7, 1}
	}
	return d
}

// Time is midnight UTC of d; a year alone is its 1 July.
func (d Date) Time() time.Time {
	d = d.midYear()
	return time.Date(d.Year, time.Month(d.Month), d.Day, 0, 0, 0, 0, time.UTC)
}

// AddDays is d moved by n days.
func (d Date) AddDays(n int) Date { return DateOf(d.Time().AddDate(0, 0, n)) }

// AddMonths is d moved by n months, on the month's last day where the day
// does not exist: a month after 31 January is 28 or 29 February.
func (d Date) AddMonths(n int) Date {
	d = d.midYear()
	first := time.Date(d.Year, time.Month(d.Month+n), 1, 0, 0, 0, 0, time.UTC)
	last := first.AddDate(0, 1, -1).Day()
	return Date{first.Year(), int(first.Month()), min(d.Day, last)}
}

// WholeYears counts the birthdays of born up to and on the day d; negative
// when born is later. Who was born on 29 February has, in a common year, the
// birthday on 1 March. A year alone may be a year out either way: see midYear.
func (d Date) WholeYears(born Date) int {
	d, born = d.midYear(), born.midYear()
	years := d.Year - born.Year
	if d.Month < born.Month || (d.Month == born.Month && d.Day < born.Day) {
		years--
	}
	return years
}

// DaysTo counts the days from d to e.
func (d Date) DaysTo(e Date) int { return int((e.Time().Unix() - d.Time().Unix()) / (24 * 60 * 60)) }
