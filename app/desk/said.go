package desk

import (
	"unicode"
	"unicode/utf8"

	"weighhouse/app/words"
	"weighhouse/model"
)

// What was asked and answered, as a person reads it.

// labelled ends a label that is no question with a colon, to stand before what
// it names.
func labelled(r *words.Reader, label string) string {
	if last, _ := utf8.DecodeLastRuneInString(label); unicode.IsPunct(last) && last != ')' {
		return label
	}
	return r.T("balance.label", "question", label)
}

// loanWords is the loan asked for, such as "3,000 crowns, 12 months"; empty
// while either is open.
func loanWords(r *words.Reader, l *words.Labels, a *model.Answers) string {
	amount, term, ok := a.AmountAndTerm()
	if !ok {
		return ""
	}
	terms := a.Edition().Scorecard().Terms
	return r.T("desk.loan", "amount", moneyWords(r, l, amount), "term", r.Term(term, terms.TermUnit))
}

// moneyWords is an amount in the edition's currency.
func moneyWords(r *words.Reader, l *words.Labels, n model.Number) string {
	return r.Money(n, l.MoneyDecimals(), l.Currency())
}

// givenWords is one answer.
func givenWords(r *words.Reader, l *words.Labels, item *model.Item, a model.Answer) string {
	switch {
	case a.State == model.StatedUnknown:
		return r.T("box.unknown")
	case a.State != model.Given:
		return ""
	}
	text := ""
	switch item.Kind {
	case model.Choice, model.YesNo:
		if text = l.Attribute(item, a.Attribute); text == "" {
			text = r.T("yes_no." + item.Attributes[a.Attribute].Code)
		}
	case model.DateKind:
		text = r.Date(a.Date)
	case model.Worksheet:
		n := a.Number
		if a.Lines != nil {
			n = item.Monthly(a.Lines)
		}
		text = moneyWords(r, l, n)
	default:
		text = numberWords(r, l, item, a.Number)
	}
	if a.Seen {
		text += " (" + r.Name(model.Seen) + ")"
	}
	return text
}

// workedWords is what a computed item comes to.
func workedWords(r *words.Reader, l *words.Labels, item *model.Item, w model.Worked) string {
	switch w.State {
	case model.Missing:
		return r.T("worked.open")
	case model.StatedUnknown:
		return r.T("box.unknown")
	case model.IsNotApplicable:
		return r.T("worked.not_applicable")
	case model.IsNothingLeft:
		return r.T("worked.nothing_left")
	}
	if w.Low != w.High {
		return r.T("worked.open")
	}
	return numberWords(r, l, item, w.Low)
}

// numberWords is a number of an item with its unit.
func numberWords(r *words.Reader, l *words.Labels, item *model.Item, n model.Number) string {
	if l.IsMoney(item) {
		return moneyWords(r, l, n)
	}
	text := r.Number(n, int(item.Decimals))
	if unit := l.Unit(item); unit != "" {
		text += " " + unit
	}
	return text
}
