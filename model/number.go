package model

import (
	"math"
	"math/bits"
	"strings"
)

// A Number is an exact decimal in millionths: money, counts, ratios, ages.
// Its range is -Largest to Largest; arithmetic stops at the ends of it
// ("saturates") rather than wrap, which keeps every comparison true because
// no limit of a scorecard lies beyond them.
type Number int64

const (
	// One is the Number 1.
	One Number = 1_000_000
	// Largest is 999,999,999,999.999999.
	Largest Number = 1_000_000_000_000*One - 1
	// MostDecimals is how many decimal places a Number holds.
	MostDecimals = 6
)

// Whole returns n as a Number, stopping at the ends of the range.
func Whole(n int64) Number {
	if n > int64(Largest/One) {
		return Largest
	}
	if n < -int64(Largest/One) {
		return -Largest
	}
	return Number(n) * One
}

// ParseNumber reads canonical text: an optional minus, digits, and after a
// point at most six more. It refuses all else: grouping, exponents, spaces,
// numbers beyond Largest.
func ParseNumber(text string) (Number, error) {
	n, err := parseFixed(text, MostDecimals)
	if err == nil && (n > int64(Largest) || n < -int64(Largest)) {
		return 0, Problem{Code: "number_too_large", Args: Args{"value": text}}
	}
	return Number(n), err
}

// String gives the shortest canonical text, such as "-1250.5".
func (n Number) String() string { return formatFixed(int64(n), MostDecimals) }

// MarshalText is String.
func (n Number) MarshalText() ([]byte, error) { return []byte(n.String()), nil }

// UnmarshalText is ParseNumber.
func (n *Number) UnmarshalText(b []byte) (err error) {
	*n, err = ParseNumber(string(b))
	return err
}

// Float is n as the nearest float64, for drawing and for estimates only.
func (n Number) Float() float64 { return float64(n) / float64(One) }

// Plus is n + m, saturating.
func (n Number) Plus(m Number) Number { return clampNumber(int64(n) + int64(m)) }

// Minus is n - m, saturating.
func (n Number) Minus(m Number) Number { return clampNumber(int64(n) - int64(m)) }

// Times is n × m rounded half up to the given decimals, saturating.
func (n Number) Times(m Number, decimals int) Number {
	return mulDiv(n, m, One, decimals)
}

// Over is n ÷ m rounded half up to the given decimals, saturating. m must be
// above zero.
func (n Number) Over(m Number, decimals int) Number {
	return mulDiv(n, One, m, decimals)
}

// Round is n to the given decimals, half up (towards plus infinity).
func (n Number) Round(decimals int) Number { return mulDiv(n, One, One, decimals) }

func clampNumber(n int64) Number {
	if n > int64(Largest) {
		return Largest
	}
	if n < -int64(Largest) {
		return -Largest
	}
	return Number(n)
}

// mulDiv is a × b ÷ c rounded half up to decimals places; c > 0. The product
// is held in 128 bits and rounded once.
func mulDiv(a, b, c Number, decimals int) Number {
	negative := (a < 0) != (b < 0)
	hi, lo := bits.Mul64(abs(int64(a)), abs(int64(b)))
	step := uint64(pow10[MostDecimals-min(max(decimals, 0), MostDecimals)])
	// Quotient in steps; a divisor c×step may not fit 64 bits, so divide twice
	// and keep both remainders' news in one flag.
	q1hi, q1lo, r1 := div128(hi, lo, uint64(c))
	q2hi, q2lo, r2 := div128(q1hi, q1lo, step)
	if q2hi != 0 || q2lo > uint64(Largest)/step {
		if negative {
			return -Largest
		}
		return Largest
	}
	q := q2lo
	// The fraction of a step is (r2 + r1/c)/step; compare with one half.
	// 2·r2 against step, then r1 as the tie breaker. step is 1 or even.
	var cmp int
	if step == 1 {
		cmp = compare(r1, uint64(c)-r1)
	} else if cmp = compare(2*r2, step); cmp == 0 && r1 > 0 {
		cmp = 1
	}
	if cmp > 0 || (cmp == 0 && !negative) {
		q++
	}
	if q > uint64(Largest)/step {
		q = uint64(Largest) / step
	}
	n := Number(q * step)
	if negative {
		n = -n
	}
	return n
}

func compare(a, b uint64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

func div128(hi, lo, d uint64) (qhi, qlo, r uint64) {
	qhi, r = hi/d, hi%d
	qlo, r = bits.Div64(r, lo, d)
	return qhi, qlo, r
}

func abs(n int64) uint64 {
	if n < 0 {
		return uint64(-n)
	}
	return uint64(n)
}

var pow10 = [...]int64{1, 10, 100, 1000, 10_000, 100_000, 1_000_000, 10_000_000, 100_000_000, 1_000_000_000}

// parseFixed reads canonical decimal text into units of 10^-places.
func parseFixed(text string, places int) (int64, error) {
	bad := Problem{Code: "not_a_number", Args: Args{"value": text}}
	digits := strings.TrimPrefix(text, "-")
	whole, fraction, point := strings.Cut(digits, ".")
	if whole == "" || (point && fraction == "") {
		return 0, bad
	}
	fraction = strings.TrimRight(fraction, "0")
	var n int64
	overflow := false
	add := func(part string) bool {
		for _, c := range []byte(part) {
			if c < '0' || c > '9' {
				return false
			}
			if n > (math.MaxInt64-9)/10 {
				overflow = true
				continue
			}
			n = n*10 + int64(c-'0')
		}
		return true
	}
	if !add(whole) || !add(fraction) {
		return 0, bad
	}
	if len(fraction) > places {
		return 0, Problem{Code: "too_many_decimals", Args: Args{"value": text, "most": formatFixed(int64(places), 0)}}
	}
	for range places - len(fraction) {
		if n > math.MaxInt64/10 {
			overflow = true
			break
		}
		n *= 10
	}
	if overflow {
		return 0, Problem{Code: "number_too_large", Args: Args{"value": text}}
	}
	if strings.HasPrefix(text, "-") {
		n = -n
	}
	return n, nil
}

// formatFixed writes n units of 10^-places as the shortest decimal text.
func formatFixed(n int64, places int) string {
	var buf [24]byte
	i := len(buf)
	u := abs(n)
	for p := places; p > 0; p-- {
		d := byte(u % 10)
		u /= 10
		if d != 0 || i < len(buf) {
			i--
			buf[i] = '0' + d
		}
	}
	if i < len(buf) {
		i--
		buf[i] = '.'
	}
	for first := true; first || u > 0; first = false {
		i--
		buf[i] = '0' + byte(u%10)
		u /= 10
	}
	if n < 0 {
		i--
		buf[i] = '-'
	}
	return string(buf[i:])
}
