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
// the largest amount that fits. What fits need not be an interval (a longer
// term lowers the payment but may raise the risk), so every term and every
// step of the amount is tried. Complete answers are needed; without them, and
// where nothing fits, there is no offer.
func (e *Edition) TermsThatFit(a *Answers) []Offer {
	asked, _, ok := a.AmountAndTerm()
	if !ok {
		return nil
	}
	t := e.card.Terms
	try := a.Clone()
	amount, term := e.byCode[Amount], e.byCode[Term]
	// Steps count from the smallest amount. The asked amount itself is tried
	// first, whether a step or not.
	top := min(asked, t.LargestAmount)
	first := t.SmallestAmount + (top-t.SmallestAmount)/t.AmountStep*t.AmountStep
	var offers []Offer
	for n := int(t.ShortestTerm); n <= int(t.LongestTerm); n++ {
		try.given[term].Number = Whole(int64(n))
		for x := top; x >= t.SmallestAmount; {
			try.given[amount].Number = x
			r, ok := e.Score(try)
			if !ok {
				return nil
			}
			if r.Recommendation == Approve && x <= r.LargestAmount.Or(Largest) {
				offers = append(offers, Offer{x, n, r})
				break
			}
			if x == top && first < top {
				x = first
			} else {
				x -= t.AmountStep
			}
		}
	}
	return offers
}
