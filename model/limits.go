package model

import "strconv"

// Check lists what is wrong or worth a question in the answers given so far:
// a loan outside the product, and, as warnings, numbers outside what is
// accepted and a date to come. A true figure can always be entered, so these
// stop nothing. What is missing is no problem here.
func (e *Edition) Check(a *Answers) []Problem {
	var list []Problem
	for _, i := range e.asked {
		list = append(list, e.CheckAnswer(a, i)...)
	}
	return list
}

// CheckAnswer does for one answer what Check does for all.
func (e *Edition) CheckAnswer(a *Answers, index int) []Problem {
	item, x := &e.items[index], a.own[index]
	if x.state != Given || item.isChoice() {
		return nil
	}
	var list []Problem
	add := func(code string, warning bool, args Args) {
		list = append(list, Problem{Code: code, Place: answerPlace(item.Code), Args: args, Warning: warning})
	}
	t := e.card.Terms
	switch item.Code {
	case Amount:
		switch {
		case x.n < t.SmallestAmount || x.n > t.LargestAmount:
			add("outside_product", false, Args{"value": x.n.String(), "least": t.SmallestAmount.String(), "most": t.LargestAmount.String()})
		case (x.n-t.SmallestAmount)%t.AmountStep != 0 && x.n%t.AmountStep != 0:
			add("amount_not_in_steps", false, Args{"value": x.n.String(), "step": t.AmountStep.String()})
		}
	case Term:
		if x.n < Whole(int64(t.ShortestTerm)) || x.n > Whole(int64(t.LongestTerm)) {
			add("outside_product", false, Args{"value": x.n.String(), "least": strconv.Itoa(int(t.ShortestTerm)), "most": strconv.Itoa(int(t.LongestTerm))})
		}
	}
	if d := a.given[index].Date; item.Kind == DateKind && a.On.Before(d) && !(d.YearAlone() && d.Year == a.On.Year) {
		add("date_to_come", true, Args{"value": d.String()})
	}
	// Of a date, what is accepted are years.
	if x.n < item.LowestAccepted.Or(-Largest) || x.n > item.HighestAccepted.Or(Largest) {
		add("outside_accepted", true, Args{"value": x.n.String(),
			"least": item.LowestAccepted.Or(-Largest).String(), "most": item.HighestAccepted.Or(Largest).String()})
	}
	return list
}
