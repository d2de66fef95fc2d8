package model

// Carry takes over what was answered to another edition wherever this one asks
// the same: a characteristic of the same code, kind and unit that can hold the
// answer. Whether the answer is acceptable here is told by CheckAnswer.
func (a *Answers) Carry(from *Answers) {
	for _, i := range from.edition.asked {
		theirs, given := &from.edition.items[i], from.given[i]
		item, ok := a.edition.Item(theirs.Code)
		if !ok || given.State == Missing || !a.edition.asksAs(item, from.edition, theirs) {
			continue
		}
		if answer, err := a.edition.ParseAnswer(item.Index, from.edition.AnswerText(i, given)); err == nil {
			answer.Seen = given.Seen
			a.enter(item.Index, answer)
		}
	}
	a.work()
}

// asksAs tells that an item asks in the same terms as one of another edition.
func (e *Edition) asksAs(item *Item, other *Edition, theirs *Item) bool {
	if item.Kind != theirs.Kind || item.Unit != theirs.Unit {
		return false
	}
	switch item.Code {
	case Amount:
		return e.card.Terms.Currency == other.card.Terms.Currency
	case Term:
		return e.card.Terms.TermUnit == other.card.Terms.TermUnit
	}
	return true
}
