package words

import (
	"strings"

	"weighhouse/model"
)

// Labels word an edition's own text in one language: the lender's wording
// from the sheet Words where there is one, else what its other sheets say.
//
// The codes of the sheet Words are these, with the codes of the workbook in
// place of the capitals:
//
//	product, title, default_means, currency
//	notes, complaints_contact, letter.decline
//	section.TEXT            TEXT as the sheet Characteristics has it
//	CHARACTERISTIC          the question
//	CHARACTERISTIC.unit, CHARACTERISTIC.help, CHARACTERISTIC.papers
//	CHARACTERISTIC.ATTRIBUTE and CHARACTERISTIC.ATTRIBUTE.reason
//	CHARACTERISTIC.reason   of a number's slope
//	CHARACTERISTIC.line.LINE
//	band.BAND, band.BAND.caution
//	rule.RULE, rule.RULE.text
//	override.OVERRIDE
type Labels struct {
	edition *model.Edition
	words   map[string]string
}

// LabelsOf are an edition's labels in a language such as "fr".
func LabelsOf(e *model.Edition, language string) *Labels {
	l := &Labels{e, map[string]string{}}
	for _, w := range e.Scorecard().Words {
		if w.Language == language {
			l.words[w.Code] = w.Text
		}
	}
	return l
}

// Text is the lender's own wording of a code, or otherwise.
func (l *Labels) Text(code, otherwise string) string {
	if t := l.words[code]; t != "" {
		return t
	}
	return otherwise
}

// Product names the product.
func (l *Labels) Product() string { return l.Text("product", l.edition.Scorecard().Card.Product) }

// Title is the edition's title.
func (l *Labels) Title() string { return l.Text("title", l.edition.Scorecard().Card.Title) }

// Section names the part of the form that an item belongs to.
func (l *Labels) Section(i *model.Item) string { return l.Text("section."+i.Section, i.Section) }

// Question is what is asked, or for a computed item what it is. Amount and
// term, where the workbook does not word them, are for the caller to word.
func (l *Labels) Question(i *model.Item) string { return l.Text(i.Code, i.Question) }

// Unit is what a number is counted in.
func (l *Labels) Unit(i *model.Item) string { return l.Text(i.Code+".unit", i.Unit) }

// Currency names the money: as the lender words it, or the unit of a
// characteristic that is counted in it, else as the sheet Terms has it.
func (l *Labels) Currency() string {
	currency := l.edition.Scorecard().Terms.Currency
	if own := l.Text("currency", currency); own != currency {
		return own
	}
	for i := range l.edition.Items() {
		item := &l.edition.Items()[i]
		if unit := l.Unit(item); item.Unit == currency && unit != currency {
			return unit
		}
	}
	return currency
}

// MoneyDecimals is how many decimals money has.
func (l *Labels) MoneyDecimals() int { return int(l.edition.Scorecard().Terms.MoneyDecimals) }

// IsMoney tells that a number is counted in the edition's currency.
func (l *Labels) IsMoney(i *model.Item) bool {
	return i.Code == model.Amount || i.Unit == l.edition.Scorecard().Terms.Currency
}

// Help explains the question.
func (l *Labels) Help(i *model.Item) string { return l.Text(i.Code+".help", i.Help) }

// Papers says which papers are accepted.
func (l *Labels) Papers(i *model.Item) string { return l.Text(i.Code+".papers", i.PapersAccepted) }

// Attribute is the label of an item's attribute by its place; empty where
// there is none, as with a yes or no that the workbook does not word.
func (l *Labels) Attribute(i *model.Item, n int) string {
	if n < 0 {
		return ""
	}
	a := i.Attributes[n]
	return l.Text(i.Code+"."+a.Code, a.Label)
}

// Reason is what an applicant is told of an attribute that spoke against.
func (l *Labels) Reason(i *model.Item, n int) string {
	if n < 0 {
		return l.slopeReason(i)
	}
	a := i.Attributes[n]
	reason := l.Text(i.Code+"."+a.Code+".reason", a.Reason)
	if reason == "" {
		return strings.Join([]string{l.Question(i), l.Attribute(i, n)}, ": ")
	}
	return reason
}

// slopeReason is what is told of a number without bands: the reason on the
// row of its slope.
func (l *Labels) slopeReason(i *model.Item) string {
	for _, a := range l.edition.Scorecard().Attributes {
		if a.Characteristic == i.Code && a.Code == "" && a.Reason != "" {
			return l.Text(i.Code+".reason", a.Reason)
		}
	}
	return l.Question(i)
}

// Line is the label of one line of a worksheet.
func (l *Labels) Line(i *model.Item, n int) string {
	return l.Text(i.Code+".line."+i.Lines[n].Code, i.Lines[n].Label)
}

// Band is the label of a band by its place, and the caution that stands by it.
func (l *Labels) Band(n int) (label, caution string) {
	b := l.edition.Scorecard().Bands[n]
	return l.Text("band."+b.Code, b.Label), l.Text("band."+b.Code+".caution", b.Caution)
}

// Rule is the label of a policy rule, and its text.
func (l *Labels) Rule(r model.PolicyRule) (label, text string) {
	return l.Text("rule."+r.Code, r.Label), l.Text("rule."+r.Code+".text", r.Text)
}

// Override is the label of a reason for departing from the recommendation.
func (l *Labels) Override(o model.Override) string { return l.Text("override."+o.Code, o.Label) }
