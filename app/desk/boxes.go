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
		return newWorksheetBox(r, k, worksheetOf(l, item, unknown))
	}
	kind := numberKind{decimals: int(item.Decimals), negative: item.LowestAccepted.Or(0) < 0,
		unit: l.Unit(item), money: l.IsMoney(item), unknown: unknown}
	switch {
	case kind.money:
		kind.unit = l.Currency()
	case item.Code == model.Term && kind.unit == "":
		kind.unit = r.Name(e.Scorecard().Terms.TermUnit)
	}
	return newNumberBox(r, k, kind)
}

func optionOf(l *words.Labels, item *model.Item, code string) option {
	n := item.AttributeNamed(code)
	return option{label: l.Attribute(item, n), answer: optionAnswer(n)}
}

func worksheetOf(l *words.Labels, item *model.Item, unknown string) worksheetKind {
	kind := worksheetKind{decimals: l.MoneyDecimals(), currency: l.Currency(), unknown: unknown, monthly: item.Monthly}
	for n, line := range item.Lines {
		kind.lines = append(kind.lines, worksheetLine{l.Line(item, n), line.Flow, line.Period})
	}
	return kind
}
