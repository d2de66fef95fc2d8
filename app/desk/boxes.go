package desk

import (
	"weighhouse/app/words"
	"weighhouse/model"
)

// boxFor makes the box that answers a characteristic, from what the edition
// says of it.
func boxFor(r *words.Reader, l *words.Labels, e *model.Edition, item *model.Item, k keys) box {
	unknown := ""
	if item.UnknownAllowed {
		unknown = r.T("box.unknown")
		if n := item.AttributeNamed(model.Unknown); n >= 0 && l.Attribute(item, n) != "" {
			unknown = l.Attribute(item, n)
		}
	}
	terms := e.Scorecard().Terms
	switch item.Kind {
	case model.YesNo:
		return newYesNoBox(r, k, optionOf(l, item, model.Yes), optionOf(l, item, model.No), unknown)
	case model.Choice:
		var list []option
		for n, a := range item.Attributes {
			if !model.IsReserved(a.Code) {
				list = append(list, option{label: l.Attribute(item, n), answer: optionAnswer(n)})
			}
		}
		if unknown != "" {
			list = append(list, unknownOption(unknown))
		}
		return newPicker(r, k, list)
	case model.DateKind:
		return newDateBox(r, k, true, unknown)
	case model.Worksheet:
		return newWorksheetBox(r, k, worksheetOf(l, item, terms, unknown))
	}
	money := item.Code == model.Amount || l.Unit(item) == terms.Currency || item.Unit == terms.Currency
	unit := l.Unit(item)
	switch {
	case item.Code == model.Amount:
		unit = terms.Currency
	case item.Code == model.Term && unit == "":
		unit = r.Name(terms.TermUnit)
	}
	return newNumberBox(r, k, numberKind{decimals: int(item.Decimals), negative: item.LowestAccepted.Or(0) < 0,
		unit: unit, money: money, unknown: unknown})
}

func optionOf(l *words.Labels, item *model.Item, code string) option {
	n := item.AttributeNamed(code)
	return option{label: l.Attribute(item, n), answer: optionAnswer(n)}
}

func worksheetOf(l *words.Labels, item *model.Item, terms model.Terms, unknown string) worksheetKind {
	kind := worksheetKind{decimals: int(terms.MoneyDecimals), currency: terms.Currency, unknown: unknown, monthly: item.Monthly}
	for n, line := range item.Lines {
		kind.lines = append(kind.lines, worksheetLine{l.Line(item, n), line.Flow, line.Period})
	}
	return kind
}
