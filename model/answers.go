package model

import (
	"slices"
	"strings"
)

// State tells what stands in an answer.
type State uint8

const (
	Missing         State = iota // not answered yet
	Given                        // a choice, a number, a date or lines of money
	StatedUnknown                // the applicant does not know
	IsNotApplicable              // the question is not asked of this applicant
	IsNothingLeft                // a ratio whose divisor is zero or less
)

// An Answer is what was entered for one asked characteristic.
type Answer struct {
	State State
	// Attribute is the place among Item.Attributes of a choice or yes/no.
	Attribute int
	// Number is a number's value, or a worksheet's single monthly figure.
	Number Number
	Date   Date
	// Lines are a worksheet's; nil where one monthly figure was given.
	Lines []Money
	// Seen tells that a paper was seen; otherwise the answer was told.
	Seen bool
}

// Money is what one line of a worksheet holds. A zero Period is the line's
// usual one.
type Money struct {
	Amount Number
	Period Period
	Set    bool
}

// Answers are one applicant's, to the questions of one edition.
type Answers struct {
	// On is the day of the application, from which ages are counted.
	On Date
	// Client tells a new client from a repeat one.
	Client  ClientKind
	edition *Edition
	given   []Answer // by Item.Index
}

// NewAnswers are answers with nothing entered yet.
func (e *Edition) NewAnswers(on Date, client ClientKind) *Answers {
	return &Answers{On: on, Client: client, edition: e, given: make([]Answer, len(e.items))}
}

// Edition is the edition that asks.
func (a *Answers) Edition() *Edition { return a.edition }

// At is the answer to the item of that index.
func (a *Answers) At(index int) Answer { return a.given[index] }

// Put enters an answer. What it holds is the caller's to have read with
// Edition.ParseAnswer; limits are told by Edition.Question.
// A worksheet without any line is not answered.
func (a *Answers) Put(index int, answer Answer) {
	if answer.Lines != nil && !slices.ContainsFunc(answer.Lines, func(m Money) bool { return m.Set }) {
		answer = Answer{}
	}
	a.given[index] = answer
}

// Applies tells whether a question is asked of this applicant: a conditional
// one may still depend on a missing answer.
func (a *Answers) Applies(index int) Truth {
	c := a.edition.items[index].condition
	if c == nil {
		return Sure
	}
	source := a.given[c.index]
	switch earlier := a.Applies(c.index); {
	case earlier == Not:
		return Not
	case source.State == Missing || source.State == IsNotApplicable:
		return Perhaps
	case source.State == Given && c.among&(1<<source.Attribute) != 0:
		return earlier
	}
	return Not
}

// Clone is a copy that shares nothing that may be changed.
func (a *Answers) Clone() *Answers {
	b := *a
	b.given = append([]Answer(nil), a.given...)
	return &b
}

// Text is the canonical text that is kept and hashed: the day, the kind of
// client, then a line a characteristic in the edition's order with its code,
// its answer and, where a paper was seen, "seen". Missing answers have no
// line; what is not asked of this applicant is not_applicable, whatever was
// entered before that was known.
func (a *Answers) Text() string {
	var b strings.Builder
	b.WriteString("on\t" + a.On.String() + "\nclient\t" + string(a.Client) + "\n")
	for i, answer := range a.given {
		switch applies := a.Applies(i); {
		case applies == Not:
			answer = Answer{State: IsNotApplicable}
		case answer.State == IsNotApplicable:
			continue
		}
		if answer.State == Missing {
			continue
		}
		b.WriteString(a.edition.items[i].Code + "\t" + a.edition.AnswerText(i, answer))
		if answer.Seen {
			b.WriteString("\tseen")
		}
		b.WriteByte('\n')
	}
	return b.String()
}

// ParseAnswers reads what Text wrote and lists what does not read.
func (e *Edition) ParseAnswers(text string) (*Answers, []Problem) {
	a := e.NewAnswers(Date{}, "")
	var problems []Problem
	for line := range strings.Lines(text) {
		cells := strings.Split(strings.TrimSuffix(line, "\n"), "\t")
		code, value := cells[0], textAt(cells, 1)
		var err error
		switch code {
		case "on":
			a.On, err = ParseDate(value)
		case "client":
			a.Client = ClientKind(value)
		default:
			i, ok := e.byCode[code]
			if !ok || e.items[i].Kind == Computed {
				problems = append(problems, Problem{Code: "unknown_characteristic", Place: answerPlace(code), Args: Args{"value": code}})
				continue
			}
			a.given[i], err = e.ParseAnswer(i, value)
			a.given[i].Seen = textAt(cells, 2) == "seen"
		}
		if err != nil {
			p := err.(Problem)
			p.Place = answerPlace(code)
			problems = append(problems, p)
		}
	}
	return a, problems
}

func answerPlace(code string) Place { return Place{Sheet: "Answers", Column: code} }

// AnswerText is the canonical text of one answer.
func (e *Edition) AnswerText(index int, a Answer) string {
	item := &e.items[index]
	switch a.State {
	case Missing:
		return ""
	case StatedUnknown:
		return Unknown
	case IsNotApplicable:
		return NotApplicable
	}
	switch item.Kind {
	case Choice, YesNo:
		return item.Attributes[a.Attribute].Code
	case DateKind:
		return a.Date.String()
	case Worksheet:
		if a.Lines != nil {
			return item.linesText(a.Lines)
		}
	}
	return a.Number.String()
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

func (item *Item) period(line int, m Money) Period {
	if m.Period == "" {
		return item.Lines[line].Period
	}
	return m.Period
}

// ParseAnswer reads one answer from canonical text; empty is Missing. Errors
// are Problems.
func (e *Edition) ParseAnswer(index int, text string) (Answer, error) {
	item := &e.items[index]
	switch text {
	case "":
		return Answer{}, nil
	case Unknown:
		if !item.UnknownAllowed {
			return Answer{}, Problem{Code: "unknown_not_allowed"}
		}
		return Answer{State: StatedUnknown}, nil
	case NotApplicable:
		if item.condition == nil {
			return Answer{}, Problem{Code: "not_applicable_not_allowed"}
		}
		return Answer{State: IsNotApplicable}, nil
	}
	a := Answer{State: Given}
	var err error
	switch item.Kind {
	case Choice, YesNo:
		a.Attribute, err = item.attribute(text)
	case DateKind:
		a.Date, err = ParseDate(text)
	case Worksheet:
		if strings.Contains(text, ":") {
			a.Lines, err = item.parseLines(text)
			break
		}
		fallthrough
	default:
		if a.Number, err = ParseNumber(text); err == nil && a.Number != a.Number.Round(int(item.Decimals)) {
			err = Problem{Code: "too_many_decimals", Args: Args{"value": text, "most": Whole(int64(item.Decimals)).String()}}
		}
	}
	if err != nil {
		return Answer{}, err
	}
	return a, nil
}

// attribute finds the place of a choice's code.
func (item *Item) attribute(code string) (int, error) {
	for i, a := range item.Attributes {
		if a.Code == code && !reserved(code) {
			return i, nil
		}
	}
	return 0, Problem{Code: "unknown_attribute", Args: Args{"value": code, "options": item.options()}}
}

func (item *Item) options() string {
	var codes []string
	for _, a := range item.Attributes {
		if !reserved(a.Code) && a.Code != "" {
			codes = append(codes, a.Code)
		}
	}
	return strings.Join(codes, ", ")
}

func reserved(attribute string) bool {
	return attribute == Unknown || attribute == NotApplicable || attribute == NothingLeft
}

func (item *Item) parseLines(text string) ([]Money, error) {
	lines := make([]Money, len(item.Lines))
	for _, part := range strings.Fields(text) {
		code, money, _ := strings.Cut(part, ":")
		amount, period, _ := strings.Cut(money, "/")
		i := item.line(code)
		if i < 0 {
			return nil, Problem{Code: "unknown_line", Args: Args{"value": code}}
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

func (item *Item) line(code string) int {
	for i, l := range item.Lines {
		if l.Code == code {
			return i
		}
	}
	return -1
}

// Monthly is what a worksheet's lines come to in a month: each amount times
// its period's times a year, summed with their signs and divided once by 12,
// rounded half up to the item's decimals. A line left blank counts nothing.
func (item *Item) Monthly(lines []Money) Number {
	// In whole units and millionths apart, nothing overflows: 365 × 10^12 a line.
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
	// The year's sum over 12, kept with its remainder so that it rounds once.
	step := pow10[MostDecimals-int(item.Decimals)]
	whole := units / 12
	rest := (units%12)*int64(One) + parts // in millionths, |rest| < 13 million
	d := 12 * step
	q := floorDiv(2*rest+d, 2*d)
	return Whole(whole).Plus(Number(q * step))
}

func floorDiv(a, b int64) int64 {
	q := a / b
	if a%b < 0 {
		q--
	}
	return q
}
