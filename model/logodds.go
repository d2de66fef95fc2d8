package model

import (
	"math/bits"
	"strconv"
	"strings"
)

// LogOdds are natural logarithms of the odds of default, in billionths, so
// that a sum of them is exact and the same in any order. Higher is riskier.
type LogOdds int64

// LogOddsOne is the log-odds 1.
const LogOddsOne LogOdds = 1_000_000_000

// largestLogOdds is far beyond what a PD of 9 places can tell from 0 or 1,
// and leaves room to add a thousand of them.
const largestLogOdds = 1_000_000 * LogOddsOne

// ParseLogOdds reads canonical decimal text with at most nine places.
func ParseLogOdds(text string) (LogOdds, error) {
	n, err := parseFixed(text, 9)
	if err == nil && abs(n) > uint64(largestLogOdds) {
		return 0, Problem{Code: "number_too_large", Args: Args{"value": text}}
	}
	return LogOdds(n), err
}

// String gives the shortest canonical text, such as "-1.2579".
func (l LogOdds) String() string { return formatFixed(int64(l), 9) }

// MarshalText is String.
func (l LogOdds) MarshalText() ([]byte, error) { return []byte(l.String()), nil }

// UnmarshalText is ParseLogOdds.
func (l *LogOdds) UnmarshalText(b []byte) (err error) {
	*l, err = ParseLogOdds(string(b))
	return err
}

// Float is l as the nearest float64.
func (l LogOdds) Float() float64 { return float64(l) / 1e9 }

// A Slope is log-odds for each unit of a number: Digits × 10^-Places, with at
// most 12 significant digits and 15 places, all that a spreadsheet keeps when
// it saves. The zero Slope is no slope.
type Slope struct {
	Digits int64
	Places int8
}

// ParseSlope reads canonical decimal text of at most 12 significant digits
// and 15 places.
func ParseSlope(text string) (Slope, error) {
	whole, fraction, _ := strings.Cut(strings.TrimPrefix(text, "-"), ".")
	if whole == "" || strings.HasSuffix(text, ".") {
		return Slope{}, notANumber(text)
	}
	fraction = strings.TrimRight(fraction, "0")
	digits := strings.TrimLeft(whole+fraction, "0")
	for _, c := range digits {
		if c < '0' || c > '9' {
			return Slope{}, notANumber(text)
		}
	}
	if len(fraction) > 15 {
		return Slope{}, Problem{Code: "too_many_decimals", Args: Args{"value": text, "most": "15"}}
	}
	if len(digits) > 12 {
		return Slope{}, Problem{Code: "too_many_digits", Args: Args{"value": text, "most": "12"}}
	}
	var s Slope
	for _, c := range digits {
		s.Digits = s.Digits*10 + int64(c-'0')
	}
	if s.Digits != 0 {
		s.Places = int8(len(fraction))
	}
	if strings.HasPrefix(text, "-") {
		s.Digits = -s.Digits
	}
	return s, nil
}

// String gives the shortest canonical text.
func (s Slope) String() string {
	text := strconv.FormatUint(abs(s.Digits), 10)
	if p := int(s.Places); p > 0 {
		for len(text) <= p {
			text = "0" + text
		}
		text = text[:len(text)-p] + "." + text[len(text)-p:]
	}
	if s.Digits < 0 {
		text = "-" + text
	}
	return text
}

// MarshalText is String.
func (s Slope) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// UnmarshalText is ParseSlope.
func (s *Slope) UnmarshalText(b []byte) (err error) {
	*s, err = ParseSlope(string(b))
	return err
}

// Float is s as the nearest float64.
func (s Slope) Float() float64 {
	f, _ := strconv.ParseFloat(s.String(), 64)
	return f
}

// At is the log-odds that s gives the value v: one product in 128 bits, then
// one rounding to a billionth, half to even, stopping at a million.
func (s Slope) At(v Number) LogOdds {
	hi, lo := bits.Mul64(abs(s.Digits), abs(int64(v)))
	// The product counts units of 10^-(Places+6); log-odds count 10^-9.
	q := uint64(largestLogOdds)
	if shift := int(s.Places) + MostDecimals - 9; shift >= 0 {
		if d := uint64(pow10[shift]); hi < d {
			var r uint64
			q, r = bits.Div64(hi, lo, d)
			if r > d-r || (r == d-r && q%2 == 1) {
				q++
			}
		}
	} else if m := uint64(pow10[-shift]); hi == 0 && lo <= uint64(largestLogOdds)/m {
		q = lo * m
	}
	l := LogOdds(min(q, uint64(largestLogOdds)))
	if (s.Digits < 0) != (v < 0) {
		return -l
	}
	return l
}
