package model

import "strconv"

// Below these an estimate stands on thin ground (each common practice, no
// source).
const (
	FewLoans    = 1000 // in the whole development sample
	FewOfOne    = 50   // with one attribute
	FewDefaults = 5    // among those
)

// Ground lists, as warnings, where a result goes beyond what the edition was
// made from: a number outside what the development sample saw, an attribute
// with few loans or few defaults there, a small sample, an edition past its
// review date on the day today.
func (e *Edition) Ground(a *Answers, today Date) []Problem {
	var list []Problem
	add := func(code, column string, args Args) {
		list = append(list, Problem{Code: code, Place: answerPlace(column), Args: args, Warning: true})
	}
	var p possibles
	e.spread(a, &p)
	for _, i := range e.scored {
		item := &e.items[i]
		x, ok := p.of[i].single(item)
		if !ok {
			continue
		}
		if x.state == Given && !item.isChoice() && (x.n < item.SeenFrom.Or(-Largest) || x.n > item.SeenTo.Or(Largest)) {
			add("outside_seen", item.Code, Args{"value": x.n.String(),
				"least": item.SeenFrom.Or(-Largest).String(), "most": item.SeenTo.Or(Largest).String()})
		}
		if x.attr < 0 {
			continue
		}
		b := item.Attributes[x.attr]
		if (b.Loans.Set && b.Loans.Value < FewOfOne) || (b.Defaults.Set && b.Defaults.Value < FewDefaults) {
			add("few_of_attribute", item.Code, Args{"value": b.Label,
				"loans": strconv.Itoa(int(b.Loans.Value)), "defaults": strconv.Itoa(int(b.Defaults.Value))})
		}
	}
	if n := e.card.Card.LoansUsed; n.Set && n.Value < FewLoans {
		add("few_loans", "", Args{"value": strconv.Itoa(int(n.Value)), "least": strconv.Itoa(FewLoans)})
	}
	if e.card.Card.ReviewBy.Before(today) {
		add("past_review", "", Args{"value": e.card.Card.ReviewBy.String()})
	}
	return list
}
