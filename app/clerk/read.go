package main

import (
	"fmt"
	"slices"
	"strings"
	"unicode"

	"weighhouse/app/words"
	"weighhouse/model"
)

// options lists what may be answered.
func (q *interview) options(item *model.Item) {
	switch item.Kind {
	case model.Choice, model.YesNo:
		labels, _ := q.attributes(item)
		for i, label := range labels {
			fmt.Fprintf(q.out, "%s%2d  %s\n", indent, i+1, label)
		}
	case model.Worksheet:
		fmt.Fprintln(q.out, indent+q.words.T("clerk.ask_lines"))
	}
	if item.UnknownAllowed {
		fmt.Fprintf(q.out, "%s ?  %s\n", indent, q.words.T("box.unknown"))
	}
}

// attributes are the labels of a choice's answers, and their places among
// Item.Attributes.
func (q *interview) attributes(item *model.Item) (labels []string, places []int) {
	for i, a := range item.Attributes {
		switch a.Code {
		case model.Unknown, model.NotApplicable, model.NothingLeft:
			continue
		}
		labels, places = append(labels, q.label(item, i)), append(places, i)
	}
	return labels, places
}

func (q *interview) label(item *model.Item, attribute int) string {
	if label := q.labels.Attribute(item, attribute); label != "" {
		return label
	}
	code := item.Attributes[attribute].Code
	if item.Kind == model.YesNo {
		return q.words.T("yes_no." + code)
	}
	return code
}

// read reads one answer; Enter alone keeps sure. Problems are Problems
// without a place.
func (q *interview) read(item *model.Item, sure model.Answer) (model.Answer, error) {
	if item.Kind == model.Worksheet {
		return q.worksheet(item, sure)
	}
	text, err := q.line(indent + strings.TrimLeft(q.labels.Unit(item)+" > ", " "))
	switch {
	case err != nil:
		return model.Answer{}, err
	case text == "" && sure.State != model.Missing:
		return sure, nil
	case text == "":
		return model.Answer{}, problem("clerk_ask_empty")
	case text == "?":
		return q.unknown(item)
	}
	a := model.Answer{State: model.Given}
	switch item.Kind {
	case model.Choice, model.YesNo:
		labels, places := q.attributes(item)
		n := pick(text, labels)
		if n < 0 {
			return a, problem("clerk_ask_pick", "value", text)
		}
		a.Attribute = places[n]
	case model.DateKind:
		a.Date, err = q.words.ParseDate(text, true)
	default:
		a.Number, err = q.words.ParseNumber(text, int(item.Decimals))
		if err == nil && a.Number < 0 && item.LowestAccepted.Or(0) >= 0 {
			err = problem("number_negative", "value", text)
		}
	}
	return a, err
}

func (q *interview) unknown(item *model.Item) (model.Answer, error) {
	if !item.UnknownAllowed {
		return model.Answer{}, problem("unknown_not_allowed")
	}
	return model.Answer{State: model.StatedUnknown}, nil
}

// worksheet reads a worksheet line by line, or its one monthly figure after
// an equals sign.
func (q *interview) worksheet(item *model.Item, sure model.Answer) (model.Answer, error) {
	a := model.Answer{State: model.Given, Lines: make([]model.Money, len(item.Lines))}
	for i := 0; i < len(item.Lines); {
		line := item.Lines[i]
		text, err := q.line(fmt.Sprintf("%s%s, %s, %s > ", indent, q.labels.Line(item, i), q.words.Name(line.Flow), q.per(line.Period)))
		switch {
		case err == errBack && i > 0:
			i--
			continue
		case err != nil:
			return a, err
		case text == "" && i == 0 && sure.State != model.Missing:
			return sure, nil
		case text == "?":
			return q.unknown(item)
		case strings.HasPrefix(text, "="):
			n, err := q.words.ParseNumber(text[1:], int(item.Decimals))
			return model.Answer{State: model.Given, Number: n}, err
		case text == "":
			a.Lines[i] = model.Money{}
		default:
			money, err := q.amount(text, line.Period)
			if p, ok := err.(model.Problem); ok {
				q.wrong(p)
				continue
			}
			a.Lines[i] = money
		}
		i++
	}
	if !slices.ContainsFunc(a.Lines, func(m model.Money) bool { return m.Set }) {
		return a, problem("clerk_ask_no_line")
	}
	return a, nil
}

func (q *interview) per(p model.Period) string {
	return q.words.T("box.per", "period", q.words.Name(p))
}

// amount reads an amount and, where it is not the usual one, its period's name
// or first letters: "40", "40 week".
func (q *interview) amount(text string, usual model.Period) (model.Money, error) {
	m := model.Money{Set: true}
	amount := strings.TrimRightFunc(text, unicode.IsLetter)
	if word := text[len(amount):]; word != "" {
		var names []string
		for _, p := range usual.Options() {
			names = append(names, q.words.Name(model.Period(p)))
		}
		n := pick(word, names)
		if n < 0 {
			return m, problem("clerk_ask_period", "value", word, "options", strings.Join(names, ", "))
		}
		if p := model.Period(usual.Options()[n]); p != usual {
			m.Period = p
		}
	}
	var err error
	m.Amount, err = q.words.ParseNumber(strings.TrimRight(amount, " /"), int(q.edition.Scorecard().Terms.MoneyDecimals))
	if err == nil && m.Amount < 0 {
		err = problem("number_negative", "value", text)
	}
	return m, err
}

// pick finds the option that a text names: by its number from 1, its whole
// text, or first letters that only it has; -1 where none is.
func pick(text string, options []string) int {
	folded := words.Fold(text)
	found := -1
	for i, option := range options {
		option = words.Fold(option)
		switch {
		case text == fmt.Sprint(i+1), folded == option:
			return i
		case folded != "" && strings.HasPrefix(option, folded) && found == -1:
			found = i
		case folded != "" && strings.HasPrefix(option, folded):
			found = -2
		}
	}
	return max(found, -1)
}
