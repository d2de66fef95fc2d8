package model

import "strings"

// Monthly is what a worksheet's lines come to in a month: each amount times
// its period's times a year, summed with their signs and divided once by 12,
// rounded half up to the item's decimals. A line left blank counts nothing.
func (item *Item) Monthly(lines []Money) Number {
	// In whole units and millionths apart, nothing overflows: at most 200 lines
	// of 365 × 10^12.
	var units, parts int64
	for i, m := range lines {
		if !m.Set {
			continue
		}
		times := item.period(i, m).TimesAYear()
		if item.Lines[i].Flow == TakesAway {
			times = -times
		}
		units += int64(m.Amount/One) * times
		parts += int64(m.Amount%One) * times
	}
	units, parts = units+parts/int64(One), parts%int64(One)
	step := pow10[MostDecimals-int(item.Decimals)]
	// The year's sum over 12: whole units a month, and the rounded rest.
	rest := (units%12)*int64(One) + parts
	const beyond = 2 * int64(Largest/One)
	whole := min(max(units/12, -beyond), beyond)
	return clampTo(whole*(int64(One)/step)+floorDiv(2*rest+12*step, 2*12*step), step)
}

func (item *Item) period(line int, m Money) Period {
	if m.Period == "" {
		return item.Lines[line].Period
	}
	return m.Period
}

// linesText is "code:amount/period" for each line given, parted by spaces.
func (item *Item) linesText(lines []Money) string {
	var parts []string
	for i, m := range lines {
		if m.Set {
			parts = append(parts, item.Lines[i].Code+":"+m.Amount.String()+"/"+string(item.period(i, m)))
		}
	}
	return strings.Join(parts, " ")
}

// parseLines reads what linesText wrote.
func (item *Item) parseLines(text string) ([]Money, error) {
	lines := make([]Money, len(item.Lines))
	for part := range strings.FieldsSeq(text) {
		code, money, _ := strings.Cut(part, ":")
		amount, period, _ := strings.Cut(money, "/")
		i := item.line(code)
		if i < 0 {
			return nil, Problem{Code: "unknown_line", Args: Args{"value": code}}
		}
		if lines[i].Set {
			return nil, Problem{Code: "repeated_code", Args: Args{"value": code}}
		}
		n, err := ParseNumber(amount)
		if err != nil {
			return nil, err
		}
		if Period(period).TimesAYear() == 0 {
			return nil, Problem{Code: "not_in_list", Args: Args{"value": period, "options": strings.Join(Month.Options(), ", ")}}
		}
		if Period(period) == item.Lines[i].Period {
			period = ""
		}
		lines[i] = Money{n, Period(period), true}
	}
	return lines, nil
}
