package model

import (
	"math"
	"math/bits"
	"slices"
	"strconv"
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
func (n Number) Times(m Number, decimals int) Number { return product(decimals, n, m) }

// Over is n ÷ m rounded half up to the given decimals, saturating. m must be
// above zero.
func (n Number) Over(m Number, decimals int) Number {
	hi, lo := bits.Mul64(2*abs(int64(n)), uint64(One))
	w := [...]uint64{lo, hi}
	rest := shorten(w[:], uint64(m))
	return halfUp(w[:], rest, n < 0, decimals)
}

// Round is n to the given decimals, half up: towards plus infinity, so that
// -0.5 goes to 0 as 0.5 goes to 1, and a shift by a whole number shifts what
// is rounded by as much.
func (n Number) Round(decimals int) Number {
	step := int64(pow10[MostDecimals-decimals])
	return clampTo(floorDiv(int64(n)+step/2, step), step)
}

func clampNumber(n int64) Number {
	return Number(min(max(n, -int64(Largest)), int64(Largest)))
}

// clampTo is q steps, stopping at the last whole step within the range.
func clampTo(q, step int64) Number {
	most := int64(Largest) / step
	return Number(min(max(q, -most), most) * step)
}

func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}

// product is the exact product of at most MostParts numbers, rounded once,
// half up, to the given decimals, saturating.
func product(decimals int, factors ...Number) Number {
	var words [MostParts]uint64 // 60 bits a factor, the least significant word first
	w := words[:len(factors)]
	w[0] = 2
	negative := false
	for _, f := range factors {
		negative = negative != (f < 0)
		carry := uint64(0)
		for i := range w {
			hi, lo := bits.Mul64(w[i], abs(int64(f)))
			sum, over := bits.Add64(lo, carry, 0)
			w[i], carry = sum, hi+over
		}
	}
	rest := false
	for range len(factors) - 1 {
		rest = shorten(w, uint64(One)) || rest
	}
	return halfUp(w, rest, negative, decimals)
}

// shorten divides a number of several words and tells whether there was a
// rest. d > 0.
func shorten(w []uint64, d uint64) (rest bool) {
	r := uint64(0)
	for i := len(w) - 1; i >= 0; i-- {
		w[i], r = bits.Div64(r, w[i], d)
	}
	return r != 0
}

// halfUp rounds what w holds, twice as many millionths and perhaps a rest
// more, half up to the given decimals.
func halfUp(w []uint64, rest, negative bool, decimals int) Number {
	step := pow10[MostDecimals-decimals]
	rest = shorten(w, uint64(step)) || rest
	twice := uint64(2 * Largest)
	if !slices.ContainsFunc(w[1:], func(word uint64) bool { return word != 0 }) {
		twice = min(w[0], twice)
	}
	switch q := int64(twice); {
	case !negative:
		return clampTo((q+1)/2, step)
	case rest:
		return clampTo(-(q+1)/2, step)
	default: // a half is a tie, and goes up
		return clampTo(-q/2, step)
	}
}

func abs(n int64) uint64 {
	if n < 0 {
		return uint64(-n)
	}
	return uint64(n)
}

var pow10 = [...]int64{1, 10, 100, 1_000, 10_000, 100_000, 1_000_000, 10_000_000, 100_000_000, 1_000_000_000,
	10_000_000_000, 100_000_000_000, 1_000_000_000_000}

func notANumber(text string) error {
	return Problem{Code: "not_a_number", Args: Args{"value": text}}
}

// parseFixed reads canonical decimal text into units of 10^-places.
func parseFixed(text string, places int) (int64, error) {
	digits, negative := strings.CutPrefix(text, "-")
	whole, fraction, point := strings.Cut(digits, ".")
	if whole == "" || (point && fraction == "") {
		return 0, notANumber(text)
	}
	fraction = strings.TrimRight(fraction, "0")
	var n int64
	overflow := false
	add := func(digit int64) {
		if overflow = overflow || n > (math.MaxInt64-9)/10; !overflow {
			n = n*10 + digit
		}
	}
	for _, part := range [...]string{whole, fraction} {
		for _, c := range []byte(part) {
			if c < '0' || c > '9' {
				return 0, notANumber(text)
			}
			add(int64(c - '0'))
		}
	}
	if len(fraction) > places {
		return 0, Problem{Code: "too_many_decimals", Args: Args{"value": text, "most": strconv.Itoa(places)}}
	}
	for range places - len(fraction) {
		add(0)
	}
	if overflow {
		return 0, Problem{Code: "number_too_large", Args: Args{"value": text}}
	}
	if negative {
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
