package model

import (
	"math"
	"strconv"
	"strings"
)

// Count is a whole number of zero or more.
type Count int

// MarshalText is decimal digits.
func (c Count) MarshalText() ([]byte, error) { return strconv.AppendInt(nil, int64(c), 10), nil }

// UnmarshalText reads a whole number from 0 to a thousand million.
func (c *Count) UnmarshalText(b []byte) error {
	n, err := ParseNumber(string(b))
	if err != nil {
		return err
	}
	if n < 0 || n%One != 0 || n > Whole(1_000_000_000) {
		return Problem{Code: "not_a_count", Args: Args{"value": string(b)}}
	}
	*c = Count(n / One)
	return nil
}

// A Rate is a share or an interest rate in billionths: 0.24 is 24 %.
type Rate int64

// String gives the shortest canonical text, such as "0.24".
func (r Rate) String() string { return formatFixed(int64(r), 9) }

// MarshalText is String.
func (r Rate) MarshalText() ([]byte, error) { return []byte(r.String()), nil }

// UnmarshalText reads a rate from 0 to 1,000 with at most nine places.
func (r *Rate) UnmarshalText(b []byte) error {
	n, err := parseFixed(string(b), 9)
	if err != nil {
		return err
	}
	if n < 0 || n > 1000*1_000_000_000 {
		return Problem{Code: "not_a_rate", Args: Args{"value": string(b)}}
	}
	*r = Rate(n)
	return nil
}

// Float is r as the nearest float64.
func (r Rate) Float() float64 { return float64(r) / 1e9 }

// A Covar is one number of a covariance: the nearest float64 to a decimal of
// at most 12 significant digits.
type Covar float64

// String gives 12 significant digits at most.
func (c Covar) String() string {
	return strings.Replace(strconv.FormatFloat(float64(c), 'g', 12, 64), "e", "E", 1)
}

// MarshalText is String.
func (c Covar) MarshalText() ([]byte, error) { return []byte(c.String()), nil }

// UnmarshalText reads a decimal, with or without an exponent.
func (c *Covar) UnmarshalText(b []byte) error {
	f, err := strconv.ParseFloat(string(b), 64)
	if err != nil || math.IsInf(f, 0) || math.IsNaN(f) {
		return Problem{Code: "not_a_number", Args: Args{"value": string(b)}}
	}
	*c = Covar(f + 0) // -0 becomes 0
	if kept, _ := strconv.ParseFloat(c.String(), 64); kept != f {
		return Problem{Code: "too_many_digits", Args: Args{"value": string(b), "most": "12"}}
	}
	return nil
}

// Float is c.
func (c Covar) Float() float64 { return float64(c) }

// Value is what a rule compares with: a number, a date's year, an attribute,
// attributes with commas, or for between "18 to 75".
type Value string

// MarshalText is the text with single spaces.
func (v Value) MarshalText() ([]byte, error) {
	return []byte(strings.Join(strings.Fields(plainText(string(v))), " ")), nil
}

// UnmarshalText takes any text.
func (v *Value) UnmarshalText(b []byte) error {
	text, _ := Value(b).MarshalText() // cannot fail
	*v = Value(text)
	return nil
}
