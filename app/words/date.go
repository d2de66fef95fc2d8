package words

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"sync"
	"time"

	"weighhouse/model"
)

// A DateOrder is how a place reads 1/2/2026.
type DateOrder string

const (
	DayFirst   DateOrder = "day first"
	MonthFirst DateOrder = "month first"
)

// DateOrders lists the orders.
func DateOrders() []DateOrder { return []DateOrder{DayFirst, MonthFirst} }

// Date writes a date so that it cannot be misread: "1 Dec 2026", or a year
// alone; no date is empty.
func (r *Reader) Date(d model.Date) string { return r.date(d, "date.", "month_short.") }

// DateInFull writes a date with its month's whole name.
func (r *Reader) DateInFull(d model.Date) string { return r.date(d, "date_full.", "month.") }

func (r *Reader) date(d model.Date, form, months string) string {
	if d.IsZero() || d.YearAlone() {
		return d.String()
	}
	day := "day"
	if d.Day == 1 {
		day = "first"
	}
	return r.T(form+day, "day", strconv.Itoa(d.Day), "month", r.T(months+strconv.Itoa(d.Month)), "year", strconv.Itoa(d.Year))
}

// Time writes the time of day, such as "14:32".
func (r *Reader) Time(t time.Time) string { return t.Format("15:04") }

// canonicalDate writes a canonical date, and leaves any other text as it is.
func (r *Reader) canonicalDate(text string) string {
	d, err := model.ParseDate(text)
	if err != nil {
		return text
	}
	return r.Date(d)
}

var (
	threeNumbers = regexp.MustCompile(`^(\d{1,4})[-/. ](\d{1,2})[-/. ](\d{1,4})$`)
	namedMonth   = regexp.MustCompile(`^(?:(\d{1,2})(?:er|st|nd|rd|th)?\.?[- ]*(?:de )?(\pL{3,})\.?|(\pL{3,})\.? *(\d{1,2}),?)[- ]*(?:de )?(\d{1,4})$`)
)

// ParseDate reads "1 Dec 2026" with a month named in any of the program's
// languages, "2026-12-01", "1/12/2026" in the reader's order, and, if
// yearAlone, "1985". The errors are Problems without a place: date_empty,
// text_too_long, digits_other, date_short_year, date_year_alone,
// date_no_such_day, date_out_of_range, not_a_date.
func (r *Reader) ParseDate(text string, yearAlone bool) (model.Date, error) {
	typed, err := plain(text, "date_empty")
	if err != nil {
		return model.Date{}, err
	}
	refuse := func(code string) (model.Date, error) {
		return model.Date{}, problem(code, "value", typed)
	}
	folded := Fold(strings.Join(strings.Fields(typed), " "))
	var day, month, year string
	if m := threeNumbers.FindStringSubmatch(folded); m != nil && (len(m[1]) <= 2 || len(m[3]) <= 2) {
		switch {
		case len(m[1]) > 2:
			year, month, day = m[1], m[2], m[3]
		case r.style.Dates == MonthFirst:
			month, day, year = m[1], m[2], m[3]
		default:
			day, month, year = m[1], m[2], m[3]
		}
		// A day beyond 12 tells the order by itself.
		if atoi(month) > 12 && atoi(day) <= 12 && len(m[1]) <= 2 {
			day, month = month, day
		}
	} else if m := namedMonth.FindStringSubmatch(folded); m != nil {
		day, month, year = m[1]+m[4], monthNamed(m[2]+m[3]), m[5]
		if month == "" {
			return refuse("not_a_date")
		}
	} else if _, err := strconv.Atoi(folded); err == nil && len(folded) == 4 {
		if !yearAlone {
			return refuse("date_year_alone")
		}
		return inRange(typed, folded)
	} else {
		return refuse("not_a_date")
	}
	if len(year) != 4 {
		return refuse("date_short_year")
	}
	canonical := fmt.Sprintf("%s-%02d-%02d", year, atoi(month), atoi(day))
	if _, err := time.Parse(time.DateOnly, canonical); err != nil {
		return refuse("date_no_such_day")
	}
	return inRange(typed, canonical)
}

func inRange(typed, canonical string) (model.Date, error) {
	d, err := model.ParseDate(canonical)
	if err != nil {
		return d, problem("date_out_of_range", "value", typed)
	}
	return d, nil
}

func atoi(text string) int {
	n, _ := strconv.Atoi(text)
	return n
}

// monthNamed is the number of a month by three or more of its first letters
// in any language, empty where they fit none or more than one.
func monthNamed(name string) string {
	found := ""
	for month := range 12 {
		for _, full := range monthNames()[month] {
			if strings.HasPrefix(full, name) {
				number := strconv.Itoa(month + 1)
				if found != "" && found != number {
					return ""
				}
				found = number
			}
		}
	}
	return found
}

// monthNames are each month's folded names in every language.
var monthNames = sync.OnceValue(func() (names [12][]string) {
	for _, l := range Languages() {
		r := New(Style{Language: l.Code})
		for month := range 12 {
			names[month] = append(names[month], Fold(r.T("month."+strconv.Itoa(month+1))))
		}
	}
	names[8] = append(names[8], "setiembre")
	return names
})
