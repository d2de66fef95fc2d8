package model

// An Offer is an amount and a term that the edition would approve.
type Offer struct {
	Amount Number
	Term   int
	Result Result
}

// TermsThatFit looks for amounts and terms, never above the amount asked and
// with every fact of the applicant left as it is, for which the edition
// recommends to approve within the rules' caps. For each allowed term it gives
// the largest amount that fits: what was asked, or the largest step, counted
// from the smallest amount, below it. What fits need not be an interval (a
// longer term lowers the payment but may raise the risk), so every term and
// every step is tried. Complete answers are needed; without them, and where
// nothing fits, there is no offer.
func (e *Edition) TermsThatFit(a *Answers) []Offer {
	asked, _, ok := a.AmountAndTerm()
	if !ok {
		return nil
	}
	t := e.card.Terms
	try := a.Clone()
	amount, term := &e.items[e.byCode[Amount]], &e.items[e.byCode[Term]]
	put := func(item *Item, n Number) {
		try.own[item.Index] = item.counted(n, try.own[item.Index].told)
	}
	top := min(asked, t.LargestAmount)
	step := t.SmallestAmount + (top-t.SmallestAmount)/t.AmountStep*t.AmountStep // the first at top or below
	var offers []Offer
	for n := int(t.ShortestTerm); n <= int(t.LongestTerm); n++ {
		put(term, Whole(int64(n)))
		for x, next := top, step; x >= t.SmallestAmount; x, next = next, next-t.AmountStep {
			if x == next {
				next -= t.AmountStep
			}
			put(amount, x)
			try.work()
			r, ok := e.Score(try)
			if !ok {
				return nil
			}
			if r.Recommendation == Approve && x <= r.LargestAmount.Or(Largest) {
				offers = append(offers, Offer{x, n, r})
				break
			}
		}
	}
	return offers
}
