package table

import (
	"strings"
	"unicode"

	"weighhouse/model"
	"weighhouse/store/workbook"
)

// longestNumber is the longest text that is looked at as a number.
const longestNumber = 40

// twoReadings tells that canonical text may be another program's thousands:
// 1.250 is 1.25 here and 1250 elsewhere. Where three decimals are usual it is
// taken as it stands.
func twoReadings(text string, decimals int) bool {
	digits := strings.TrimPrefix(text, "-")
	whole, fraction, _ := strings.Cut(digits, ".")
	return len(fraction) == 3 && decimals < 3 && len(whole) <= 3 && whole[0] != '0'
}

// notCanonical is the problem of a text that is no canonical number: with its
// readings, where it looks like a number as other places or programs write it.
func notCanonical(text string) model.Problem {
	if len(text) <= longestNumber && strings.ContainsAny(text, "0123456789") {
		switch r := workbook.Readings(text); len(r) {
		case 0:
		case 1:
			return problem("file_number_other_style", "value", text, "reading", r[0])
		default:
			return problem("file_number_two_readings", "value", text, "first", r[0], "second", r[1])
		}
	}
	if strings.ContainsFunc(text, func(c rune) bool { return c > '9' && unicode.IsDigit(c) }) {
		return problem("file_number_other_digits", "value", text)
	}
	return problem("file_not_a_number", "value", text)
}

// number reads a number of at most that many decimals.
func number(text string, decimals int) (model.Number, error) {
	n, err := model.ParseNumber(text)
	switch p, _ := err.(model.Problem); {
	case p.Code == "not_a_number":
		return 0, notCanonical(text)
	case err != nil:
		return 0, err
	case twoReadings(text, decimals):
		return 0, problem("file_number_two_readings", "value", text, "first", n.String(), "second", strings.Replace(text, ".", "", 1))
	case n != n.Round(decimals):
		return 0, problem("too_many_decimals", "value", text, "most", model.Whole(int64(decimals)).String())
	}
	return n, nil
}
