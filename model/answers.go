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
	// Lines are a worksheet's, by place among Item.Lines; nil where one monthly
	// figure was given. They must not be changed once put.
	Lines []Money
	// Seen tells that a paper was seen; otherwise the answer was told. Only
	// what is Given can have been seen.
	Seen bool
}

// Money is what one line of a worksheet holds. A zero Period is the line's
// usual one.
type Money struct {
	Amount Number
	Period Period
	Set    bool
}

// Answers are one applicant's, to the questions of one edition. They are not
// for use by several goroutines at once.
type Answers struct {
	// On is the day of the application, from which ages are counted.
	On Date
	// Client tells a new client from a repeat one.
	Client  ClientKind
	edition *Edition
	// By Item.Index: what was given; what that comes to by itself; and what each
	// item comes to, worked out on the day worked.
	given    []Answer
	own      []value
	values   []value
	worked   Date
	complete bool // nothing is missing
}

// NewAnswers are answers with nothing entered yet.
func (e *Edition) NewAnswers(on Date, client ClientKind) *Answers {
	n := len(e.items)
	values := make([]value, 2*n)
	return &Answers{On: on, Client: client, edition: e, given: make([]Answer, n), own: values[:n:n], values: values[n:]}
}

// Edition is the edition that asks.
func (a *Answers) Edition() *Edition { return a.edition }

// At is the answer to the item of that index.
func (a *Answers) At(index int) Answer { return a.given[index] }

// Put enters an answer to an item that is asked. What it holds must fit the
// item, as all that ParseAnswer gives does; whether it is acceptable is told
// by Edition.CheckAnswer. A worksheet without any line is not answered.
func (a *Answers) Put(index int, answer Answer) {
	a.enter(index, answer)
	a.work()
}

func (a *Answers) enter(index int, answer Answer) {
	switch {
	case answer.State != Given:
		answer = Answer{State: answer.State}
	case answer.Lines != nil && !slices.ContainsFunc(answer.Lines, func(m Money) bool { return m.Set }):
		answer = Answer{}
	}
	a.given[index] = answer
	a.own[index] = a.edition.items[index].valueOf(&answer)
}

// Applies tells whether a question is asked of this applicant: a conditional
// one may still depend on a missing answer.
func (a *Answers) Applies(index int) Truth {
	c := a.edition.items[index].condition
	if c == nil {
		return Sure
	}
	source := &a.own[c.index]
	switch earlier := a.Applies(c.index); {
	case earlier == Not:
		return Not
	case source.state == Missing || source.state == IsNotApplicable:
		return Perhaps
	case source.state == Given && c.among>>uint8(source.attr)&1 != 0:
		return earlier
	}
	return Not
}

// Clone is a copy that shares nothing that may be changed.
func (a *Answers) Clone() *Answers {
	b := *a
	b.given, b.own, b.values = slices.Clone(a.given), slices.Clone(a.own), slices.Clone(a.values)
	return &b
}

// Text is the canonical text that is kept and hashed: the day, the kind of
// client, then a line a characteristic in the edition's order with its code,
// its answer and, where a paper was seen, "seen", parted by tabs. Missing
// answers have no line; what is not asked of this applicant is
// not_applicable, whatever was entered before that was known.
func (a *Answers) Text() string {
	var b strings.Builder
	b.WriteString("on\t" + a.On.String() + "\nclient\t" + string(a.Client) + "\n")
	for _, i := range a.edition.asked {
		answer := a.given[i]
		if a.Applies(i) == Not {
			answer = Answer{State: IsNotApplicable}
		} else if answer.State == Missing || answer.State == IsNotApplicable {
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

// ParseAnswers reads what Text wrote, in any order, and lists what does not
// read; what is listed is missing.
func (e *Edition) ParseAnswers(text string) (*Answers, []Problem) {
	a := e.NewAnswers(Date{}, "")
	var problems []Problem
	bad := func(line string, p Problem) {
		p.Place = answerPlace(line)
		problems = append(problems, p)
	}
	client, dated := "", false
	for text != "" {
		var line string
		line, text, _ = strings.Cut(text, "\n")
		code, value, _ := strings.Cut(line, "\t")
		value, seen, evidence := strings.Cut(value, "\t")
		if evidence && seen != "seen" {
			bad(code, Problem{Code: "not_canonical"})
			continue
		}
		var err error
		switch code {
		case "on":
			dated = true
			if a.On, err = ParseDate(value); a.On.YearAlone() {
				a.On, err = Date{}, Problem{Code: "date_needs_day", Args: Args{"value": value}}
			}
		case "client":
			client = value
		default:
			err = a.read(code, value, evidence)
		}
		if err != nil {
			bad(code, err.(Problem))
		}
	}
	if !dated {
		bad("on", Problem{Code: "missing_value"})
	}
	if a.Client = ClientKind(client); a.Client != NewClients && a.Client != RepeatClients {
		bad("client", Problem{Code: "not_in_list", Args: Args{"value": client, "options": "new, repeat"}})
	}
	a.work()
	return a, problems
}

// read enters the answer of one line of text.
func (a *Answers) read(code, text string, seen bool) error {
	i, ok := a.edition.byCode[code]
	if !ok || a.edition.items[i].Kind == Computed {
		return Problem{Code: "unknown_characteristic", Args: Args{"value": code, "near": ""}}
	}
	if a.given[i].State != Missing {
		return Problem{Code: "repeated_code", Args: Args{"value": code}}
	}
	answer, err := a.edition.ParseAnswer(i, text)
	answer.Seen = seen
	if err == nil {
		a.enter(i, answer)
	}
	return err
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
	switch {
	case item.isChoice():
		a.Attribute, err = item.attribute(text)
	case item.Kind == DateKind:
		a.Date, err = ParseDate(text)
	case item.Kind == Worksheet && strings.Contains(text, ":"):
		a.Lines, err = item.parseLines(text)
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
