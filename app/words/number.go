package words

import (
	"strings"

	"weighhouse/model"
)

// A NumberStyle is how a place writes numbers.
type NumberStyle string

const (
	PointComma NumberStyle = "point" // 1,234,567.89
	CommaPoint NumberStyle = "comma" // 1.234.567,89
	SpaceComma NumberStyle = "space" // 1 234 567,89
	Apostrophe NumberStyle = "apostrophe"
	Lakh       NumberStyle = "lakh" // 12,34,567.89
)

// NumberStyles lists the styles.
func NumberStyles() []NumberStyle {
	return []NumberStyle{PointComma, CommaPoint, SpaceComma, Apostrophe, Lakh}
}

// Sample is a number in that style, to choose by.
func (s NumberStyle) Sample() string {
	return marksOf[s].write("1234567.89")
}

// Shortest asks for only as many decimals as a number needs.
const Shortest = -1

// marks are what a style puts into a number.
type marks struct {
	decimal byte
	group   string
	lakh    bool
}

const nbsp = "\u00a0"

var marksOf = map[NumberStyle]marks{
	PointComma: {'.', ",", false},
	CommaPoint: {',', ".", false},
	SpaceComma: {',', nbsp, false},
	Apostrophe: {'.', "’", false},
	Lakh:       {'.', ",", true},
}

// write puts the marks into a canonical number of any size.
func (m marks) write(canonical string) string {
	digits, negative := strings.CutPrefix(canonical, "-")
	whole, fraction, point := strings.Cut(digits, ".")
	var b strings.Builder
	if negative {
		b.WriteByte('-')
	}
	for i, d := range whole {
		if left := len(whole) - i; i > 0 && (left == 3 || left > 3 && m.lakh && left%2 == 1 || left > 3 && !m.lakh && left%3 == 0) {
			b.WriteString(m.group)
		}
		b.WriteRune(d)
	}
	if point {
		b.WriteByte(m.decimal)
		b.WriteString(fraction)
	}
	return b.String()
}

// Number writes n rounded half up to the given decimals, or with only those
// it needs for Shortest.
func (r *Reader) Number(n model.Number, decimals int) string {
	if decimals == Shortest {
		return r.marks.write(n.String())
	}
	text := n.Round(decimals).String()
	if decimals > 0 {
		_, fraction, point := strings.Cut(text, ".")
		if !point {
			text += "."
		}
		text += strings.Repeat("0", decimals-len(fraction))
	}
	return r.marks.write(text)
}

// Amount writes an amount of money: a whole one without decimals, any other
// with all that the currency has.
func (r *Reader) Amount(n model.Number, decimals int) string {
	if n = n.Round(decimals); n%model.One == 0 {
		decimals = 0
	}
	return r.Number(n, decimals)
}

// Money writes an amount with its currency's name, such as "3,200 crowns".
func (r *Reader) Money(n model.Number, decimals int, currency string) string {
	if currency == "" {
		return r.Amount(n, decimals)
	}
	return r.Amount(n, decimals) + nbsp + currency
}

// Score writes a score in whole points, half away from zero.
func (r *Reader) Score(score model.Number) string {
	return r.Number(model.Whole(model.ShownScore(score)), 0)
}

// LogOdds writes log-odds with their sign and three decimals.
func (r *Reader) LogOdds(l model.LogOdds) string {
	sign := "+"
	if l < 0 {
		l, sign = -l, "-"
	}
	text := r.Number(model.Number((l+500)/1000), 3)
	if strings.Trim(text, "0.,") == "" {
		sign = ""
	}
	return sign + text
}

// Percent writes a PD as a percentage with about three digits, and says
// "below" or "above" beyond what a scorecard can know.
func (r *Reader) Percent(p model.PD) string {
	switch {
	case p < model.SmallestSaid:
		return r.T("number.below", "bound", r.percent(int64(model.SmallestSaid), 4))
	case p > model.LargestSaid:
		return r.T("number.above", "bound", r.percent(int64(model.LargestSaid), 4))
	}
	decimals := 1
	for step := model.PDOne / 10; min(p, model.PDOne-p) < step && decimals < 4; step /= 10 {
		decimals++
	}
	return r.percent(int64(p), decimals)
}

// Rate writes a share or an interest rate as a percentage with at most two
// decimals.
func (r *Reader) Rate(rate model.Rate) string {
	n := model.Number((int64(rate) + 5) / 10).Round(2)
	return r.T("number.percent", "figure", r.Number(n, Shortest))
}

// percent writes billionths as a percentage.
func (r *Reader) percent(billionths int64, decimals int) string {
	return r.T("number.percent", "figure", r.Number(model.Number((billionths+5)/10), decimals))
}

// canonical writes a canonical number in the reader's style, and leaves any
// other text as it is.
func (r *Reader) canonical(text string) string {
	digits := strings.TrimPrefix(text, "-")
	whole, fraction, point := strings.Cut(digits, ".")
	if whole == "" || (point && fraction == "") || strings.Trim(whole+fraction, "0123456789") != "" {
		return text
	}
	return r.marks.write(text)
}

// limits writes a range of canonical numbers; an end that no number lies
// beyond is open.
func (r *Reader) limits(least, most string) string {
	low, high := least != "" && least != (-model.Largest).String(), most != "" && most != model.Largest.String()
	key := "limits.none"
	switch {
	case low && high:
		key = "limits.both"
	case low:
		key = "limits.least"
	case high:
		key = "limits.most"
	}
	return r.T(key, "least", r.canonical(least), "most", r.canonical(most))
}
