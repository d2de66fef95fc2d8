package workbook

import (
	"math/big"
	"slices"
	"strconv"
	"strings"
	"time"
	"unicode"
	"unicode/utf16"
	"unicode/utf8"

	"golang.org/x/text/unicode/norm"
)

// shortest is the shortest decimal text of the float64 that a stored number
// stands for, the form in which two spellings of one number are equal:
// 1.2949999999999999 gives 1.295, and 1E-3 gives 0.001.
func shortest(stored string) (string, bool) {
	if strings.Trim(stored, "0123456789+-.eE") != "" {
		return "", false
	}
	f, err := strconv.ParseFloat(stored, 64)
	if err != nil {
		return "", false
	}
	if f == 0 {
		return "0", true // no minus
	}
	return strconv.FormatFloat(f, 'f', -1, 64), true
}

// round is decimal text to at most that many decimal places and significant
// digits, half away from zero as a spreadsheet rounds.
func round(decimal string, places, digits int) string {
	minus := strings.HasPrefix(decimal, "-")
	whole, fraction, _ := strings.Cut(strings.TrimPrefix(decimal, "-"), ".")
	all := strings.TrimLeft(whole+fraction, "0")
	drop := max(len(fraction)-places, len(all)-digits)
	if drop <= 0 {
		return decimal
	}
	n, _ := new(big.Int).SetString("0"+all, 10)
	unit := new(big.Int).Exp(big.NewInt(10), big.NewInt(int64(drop)), nil)
	n.Add(n, new(big.Int).Rsh(unit, 1)).Quo(n, unit)
	kept := n.String()
	if left := len(fraction) - drop; left >= 0 {
		kept = strings.Repeat("0", max(0, left+1-len(kept))) + kept
		if left > 0 {
			kept = strings.TrimSuffix(strings.TrimRight(kept[:len(kept)-left]+"."+kept[len(kept)-left:], "0"), ".")
		}
	} else {
		kept += strings.Repeat("0", -left)
	}
	if minus && kept != "0" {
		kept = "-" + kept
	}
	return kept
}

// firstDay is 18 March 1908. A smaller number in a cell meant for dates is a
// year alone that someone typed there; and about the first of them spreadsheets
// disagree, because some count a 29 February 1900 that never was.
const firstDay = 3000

// lastDay is 31 December 9999.
const lastDay = 2_958_465

// dateOf is the date of a day's number, counted from 30 December 1899; any
// other number stays as it is.
func dateOf(serial string) string {
	f, err := strconv.ParseFloat(serial, 64)
	if err != nil || f < firstDay || f >= lastDay+1 {
		return serial
	}
	whole := int(f)
	t := time.Date(1899, 12, 30+whole, 0, 0, 0, 0, time.UTC)
	if f == float64(whole) {
		return t.Format(time.DateOnly)
	}
	return t.Add(time.Duration((f - float64(whole)) * float64(24*time.Hour))).Round(time.Second).Format("2006-01-02T15:04:05")
}

// cleanText is text in the form that is kept: the format's own escapes
// undone, line ends as \n, composed characters (NFC), no blanks around it.
func cleanText(raw string) text {
	s := norm.NFC.String(strings.NewReplacer("\r\n", "\n", "\r", "\n").Replace(unescape(raw)))
	trimmed := strings.TrimFunc(s, unicode.IsSpace)
	return text{trimmed, trimmed != s}
}

// unescape undoes _x000D_ and its like: four hexadecimal digits of a UTF-16
// unit (ISO/IEC 29500-1, 22.9.2.19).
func unescape(s string) string {
	if !strings.Contains(s, "_x") {
		return s
	}
	var b strings.Builder
	for i := 0; i < len(s); {
		unit, ok := escapeAt(s[i:])
		if !ok {
			b.WriteByte(s[i])
			i++
			continue
		}
		i += 7
		if utf16.IsSurrogate(rune(unit)) {
			low, ok := escapeAt(s[i:])
			unit = utf16.DecodeRune(unit, low)
			if ok {
				i += 7
			}
		}
		b.WriteRune(unit)
	}
	return b.String()
}

func escapeAt(s string) (rune, bool) {
	if len(s) < 7 || s[:2] != "_x" || s[6] != '_' {
		return utf8.RuneError, false
	}
	n, err := strconv.ParseUint(s[2:6], 16, 16)
	return rune(n), err == nil
}

// readings are the numbers that a text may mean, in canonical decimal text;
// none where it looks like no number. "1,250" may be 1250 or 1.25, "12 %" is
// 0.12 or 12.
func readings(s string) (found []string) {
	s = strings.Map(func(r rune) rune {
		switch {
		case r == '\u2212', r == '\u2013': // minus sign and dash
			return '-'
		case unicode.IsSpace(r), r == '\'', r == '\u2019':
			return ' '
		}
		return r
	}, s)
	add := func(decimal string) {
		if !slices.Contains(found, decimal) {
			found = append(found, decimal)
		}
	}
	s, hundredth := strings.CutSuffix(s, "%")
	for _, point := range []string{".", ","} {
		decimal, ok := reading(strings.TrimSpace(s), point)
		if !ok {
			continue
		}
		if hundredth {
			f, _ := strconv.ParseFloat(decimal, 64)
			add(round(strconv.FormatFloat(f/100, 'f', -1, 64), 15, 15))
		}
		add(decimal)
	}
	return found
}

// reading is s as a number whose decimal mark is point and whose groups are
// parted by spaces or by the other mark: threes, or the lakh's twos before a
// three.
func reading(s, point string) (string, bool) {
	number, exponent, _ := strings.Cut(strings.ToUpper(s), "E")
	whole, fraction, _ := strings.Cut(number, point)
	digits := strings.TrimLeft(whole, "+-")
	sign := whole[:len(whole)-len(digits)]
	if mark := strings.IndexAny(digits, " ,."); mark > 0 {
		groups := strings.Split(digits, digits[mark:mark+1])
		for i, g := range groups {
			last := i == len(groups)-1
			if last && len(g) != 3 || !last && i > 0 && len(g) != 3 && len(g) != 2 || len(g) > 3 {
				return "", false
			}
		}
		digits = strings.Join(groups, "")
	}
	text := sign + digits + "." + fraction
	if exponent != "" {
		text += "E" + exponent
	}
	return shortest(text)
}
