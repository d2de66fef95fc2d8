package words

import (
	"regexp"
	"strings"
	"unicode"
	"unicode/utf8"

	"weighhouse/model"
)

// mostTyped is the longest text that is looked at as a number or a date.
const mostTyped = 40

// neutral marks only ever group digits, in whichever style; every space and
// apostrophe is first turned into one of these.
const neutral = " '"

var (
	exponent  = regexp.MustCompile(`^[0-9][0-9.,]*[eE][+-]?[0-9]+$`)
	twoMarks  = regexp.MustCompile(`[.,' ]{2}`)
	notFinite = regexp.MustCompile(`(?i)^(inf|infinity|infini|infinito|nan|∞)$`)
)

// ParseNumber reads what a person typed, with the reader's own marks and at
// most the given decimals. What could be meant in two ways is refused with
// both readings, never guessed. The errors are Problems without a place:
// number_empty, text_too_long, digits_other, number_not_finite,
// number_exponent, number_two_readings, number_other_style, not_a_number,
// too_many_decimals, number_too_large.
func (r *Reader) ParseNumber(text string, decimals int) (model.Number, error) {
	typed, err := plain(text, "number_empty")
	if err != nil {
		return 0, err
	}
	refuse := func(code string, args ...string) (model.Number, error) {
		return 0, problem(code, append(args, "value", typed)...)
	}
	body, sign := typed, ""
	for _, minus := range []string{"-", "−", "–"} {
		if rest, ok := strings.CutPrefix(typed, minus); ok {
			body, sign = rest, "-"
		}
	}
	if sign == "" {
		body = strings.TrimPrefix(body, "+")
	}
	body = strings.Map(func(c rune) rune {
		switch {
		case unicode.IsSpace(c):
			return ' '
		case c == '’':
			return '\''
		}
		return c
	}, strings.TrimFunc(body, unicode.IsSpace))
	switch {
	case notFinite.MatchString(body):
		return refuse("number_not_finite")
	case exponent.MatchString(body):
		return refuse("number_exponent")
	case twoMarks.MatchString(body), strings.Trim(body, "0123456789.,"+neutral) != "", !strings.ContainsAny(body, "0123456789"):
		return refuse("not_a_number")
	}
	own := r.marks.decimal
	canonical, ok := r.marks.read(body)
	_, fraction, _ := strings.Cut(canonical, ".")
	if ok && !(len(fraction) == 3 && decimals < 3 && looksGrouped(body)) {
		if len(strings.TrimRight(fraction, "0")) > decimals {
			return refuse("too_many_decimals", "most", model.Whole(int64(decimals)).String())
		}
		n, err := model.ParseNumber(sign + canonical)
		if err != nil {
			return refuse("number_too_large")
		}
		return n, nil
	}
	var readings []string
	for _, mark := range []byte{own, other(own)} {
		n, err := model.ParseNumber(sign + loosely(body, mark))
		if err == nil && n == n.Round(decimals) && (len(readings) == 0 || readings[0] != n.String()) {
			readings = append(readings, n.String())
		}
	}
	switch len(readings) {
	case 2:
		return refuse("number_two_readings", "first", readings[0], "second", readings[1])
	case 1:
		return refuse("number_other_style", "reading", readings[0])
	}
	return refuse("not_a_number")
}

// Unfinished tells that text, while it is being typed, may still become a
// number that reads.
func (r *Reader) Unfinished(text string, decimals int) bool {
	if len(text) > mostTyped {
		return false
	}
	for _, more := range []string{"0", "00", "000"} {
		if _, err := r.ParseNumber(text+more, decimals); err == nil {
			return true
		}
	}
	return false
}

// plain trims text and refuses what is empty, too long to be a number or a
// date, or written with other digits than 0 to 9.
func plain(text, empty string) (string, error) {
	text = strings.TrimFunc(text, unicode.IsSpace)
	if text == "" {
		return "", problem(empty)
	}
	if n := utf8.RuneCountInString(text); n > mostTyped {
		return "", problem("text_too_long", "length", model.Whole(int64(n)).String(), "most", model.Whole(mostTyped).String())
	}
	for _, c := range text {
		if c > '9' && unicode.IsDigit(c) {
			return "", problem("digits_other", "value", text)
		}
	}
	return text, nil
}

// read gives canonical text for digits written with m's own marks, or with
// neutral ones, in groups of the right size.
func (m marks) read(body string) (string, bool) {
	whole, fraction, _ := strings.Cut(body, string(m.decimal))
	if strings.Trim(fraction, "0123456789") != "" {
		return "", false
	}
	if i := strings.IndexAny(whole, neutral+m.group); i >= 0 {
		groups := strings.Split(whole, whole[i:i+1])
		if !grouped(groups) {
			return "", false
		}
		whole = strings.Join(groups, "")
	}
	if strings.Trim(whole, "0123456789") != "" {
		return "", false
	}
	if whole == "" {
		whole = "0"
	}
	if fraction != "" {
		whole += "." + fraction
	}
	return whole, true
}

// grouped tells that groups of digits are thousands, or lakhs and crores.
func grouped(groups []string) bool {
	threes, twos := true, true
	for i, g := range groups {
		last := i == len(groups)-1
		if (i > 0 && len(g) != 3) || len(g) > 3 {
			threes = false
		}
		if (last && len(g) != 3) || (!last && i > 0 && len(g) != 2) || len(g) > 3 || (i == 0 && len(g) > 2) {
			twos = false
		}
	}
	return threes || twos
}

// looksGrouped tells that a number's only mark stands where another style
// would group: 1.250 but not 0.250, 1,000.250 or 1250.000.
func looksGrouped(body string) bool {
	i := strings.IndexAny(body, ".,")
	return i >= 1 && i <= 3 && i == strings.LastIndexAny(body, ".,") && len(body) == i+4 && body[0] != '0'
}

// loosely is canonical text with that decimal mark and every other mark
// dropped; it may not read.
func loosely(body string, mark byte) string {
	body = strings.Map(func(c rune) rune {
		if strings.ContainsRune(neutral, c) || c == rune(other(mark)) {
			return -1
		}
		if c == rune(mark) {
			return '.'
		}
		return c
	}, body)
	if strings.HasPrefix(body, ".") {
		body = "0" + body
	}
	return strings.TrimSuffix(body, ".")
}

func other(mark byte) byte {
	if mark == '.' {
		return ','
	}
	return '.'
}

// problem makes a Problem from pairs of a name and a value.
func problem(code string, args ...string) model.Problem {
	p := model.Problem{Code: code, Args: model.Args{}}
	for i := 0; i+1 < len(args); i += 2 {
		p.Args[args[i]] = args[i+1]
	}
	return p
}
