package model

import "math"

// A PD is a probability of default, in billionths from 0 to 1,000,000,000:
// the figure that is kept, and on which score bands are decided.
type PD int64

// PDOne is certainty.
const PDOne PD = 1_000_000_000

// Beyond these a PD is said as "below" or "above" them: a scorecard cannot
// know more.
const (
	SmallestSaid PD = 1_000         // 0.0001 %
	LargestSaid  PD = PDOne - 1_000 // 99.9999 %
)

// ParsePD reads canonical decimal text from 0 to 1 with at most nine places.
func ParsePD(text string) (PD, error) {
	n, err := parseFixed(text, 9)
	if err == nil && (n < 0 || n > int64(PDOne)) {
		return 0, Problem{Code: "not_a_probability", Args: Args{"value": text}}
	}
	return PD(n), err
}

// String gives the shortest canonical text, such as "0.05".
func (p PD) String() string { return formatFixed(int64(p), 9) }

// MarshalText is String.
func (p PD) MarshalText() ([]byte, error) { return []byte(p.String()), nil }

// UnmarshalText is ParsePD.
func (p *PD) UnmarshalText(b []byte) (err error) {
	*p, err = ParsePD(string(b))
	return err
}

// Float is p as the nearest float64.
func (p PD) Float() float64 { return float64(p) / 1e9 }

// PD is 1/(1+e^-l), rounded to nine places.
func (l LogOdds) PD() PD { return pdOf(l.Float()) }

// pdOf is the PD of log-odds that are not exact.
func pdOf(x float64) PD { return PD(float64(logistic(x)*1e9) + 0.5) }

// LogOdds is the log-odds of p, for placing PDs on an axis; the ends 0 and 1
// give minus and plus infinity.
func (p PD) LogOdds() float64 { return Logit(p.Float()) }

// Logit is ln(p/(1-p)) for a probability p, the same on every processor.
func Logit(p float64) float64 {
	switch {
	case p <= 0:
		return math.Inf(-1)
	case p >= 1:
		return math.Inf(1)
	}
	return ln(p) - ln(1-p)
}

// logistic is 1/(1+e^-x) without overflow.
func logistic(x float64) float64 {
	if x >= 0 {
		return 1 / (1 + exp(-x))
	}
	e := exp(x)
	return e / (1 + e)
}
