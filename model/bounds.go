package model

// Bounds say what a result may still come to while answers are missing.
type Bounds struct {
	// Lowest and Highest bound the log-odds; LowestPD and HighestPD the PD.
	Lowest, Highest     LogOdds
	LowestPD, HighestPD PD
	// FirstBand and LastBand bound the band, by place among Scorecard.Bands.
	FirstBand, LastBand int
	// Mildest and Strictest bound the recommendation.
	Mildest, Strictest Recommendation
	// Fires are the rules that fire whatever comes; May those that still may.
	Fires, May RuleSet
	// Missing are the indexes of the questions still to be answered; one that
	// may turn out not to be asked is among them.
	Missing []int
	// Narrows is the index of the missing question whose answer is sure to
	// narrow the log-odds most, -1 where none is.
	Narrows int
}

// BandSettled tells that every completion falls in one band.
func (b Bounds) BandSettled() bool { return b.FirstBand == b.LastBand }

// Settled tells that every completion gets one recommendation.
func (b Bounds) Settled() bool { return b.Mildest == b.Strictest }

// Bound says what may still come of answers, complete or not. For complete
// answers the bounds meet in the result.
func (e *Edition) Bound(a *Answers) Bounds {
	var p possibles
	e.spread(a, &p)
	var b Bounds
	b.Lowest, b.Highest = e.sumRange(&p)
	b.LowestPD, b.HighestPD = b.Lowest.PD(), b.Highest.PD()
	b.FirstBand, b.LastBand = e.band(b.LowestPD), e.band(b.HighestPD)
	mildest, strictest := e.strictness[b.FirstBand], e.strictness[b.LastBand]
	for i := range e.rules {
		rule := &e.rules[i]
		fires := rule.may(&p)
		if fires == Sure {
			b.Fires |= 1 << i
			mildest = max(mildest, rule.strictness)
		}
		if fires == Perhaps {
			b.May |= 1 << i
		}
		if fires != Not {
			strictest = max(strictest, rule.strictness)
		}
	}
	b.Mildest, b.Strictest = byStrictness[mildest], byStrictness[strictest]
	for _, i := range e.asked {
		if s := a.own[i].state; p.of[i].states != set(IsNotApplicable) && (s == Missing || s == IsNotApplicable) {
			b.Missing = append(b.Missing, i)
		}
	}
	b.Narrows = e.narrows(a, b, &p)
	return b
}

// sumRange is the range of the log-odds.
func (e *Edition) sumRange(p *possibles) (lowest, highest LogOdds) {
	lowest, highest = e.constant, e.constant
	for _, i := range e.scored {
		lo, hi := e.items[i].weightRange(&p.of[i])
		lowest, highest = lowest+lo, highest+hi
	}
	return lowest, highest
}

// narrows finds the missing question with the greatest worst-case cut: each
// is tried with every answer it may get (a number at its own bands' starts and
// at the ends and the middle of what is usual), and the answer that leaves the
// widest bounds counts.
func (e *Edition) narrows(a *Answers, now Bounds, p *possibles) int {
	best, bestCut := -1, LogOdds(0)
	try := a.Clone()
	for _, i := range now.Missing {
		widest := LogOdds(0)
		e.trials(&e.items[i], func(x value, d Date) {
			try.own[i], try.given[i].Date = x, d
			e.spread(try, p)
			lowest, highest := e.sumRange(p)
			widest = max(widest, highest-lowest)
		})
		try.own[i] = a.own[i]
		if cut := now.Highest - now.Lowest - widest; cut > bestCut {
			best, bestCut = i, cut
		}
	}
	return best
}

// trials gives the answers to try for a missing question.
func (e *Edition) trials(item *Item, try func(x value, d Date)) {
	if item.UnknownAllowed {
		try(item.in(StatedUnknown), Date{})
	}
	switch item.Kind {
	case Choice, YesNo:
		for i, a := range item.Attributes {
			if !reserved(a.Code) {
				try(item.picked(i, true), Date{})
			}
		}
	case DateKind:
		for _, year := range [...]int{1940, 1960, 1980, 2000} {
			try(item.counted(Whole(int64(year)), true), Date{Year: year})
		}
	default:
		number := func(n Number) { try(item.counted(n, true), Date{}) }
		lo, hi := item.LowestAccepted.Or(0), item.HighestAccepted.Or(Whole(1_000_000))
		switch t := &e.card.Terms; item.Code {
		case Amount:
			lo, hi = t.SmallestAmount, t.LargestAmount
		case Term:
			lo, hi = Whole(int64(t.ShortestTerm)), Whole(int64(t.LongestTerm))
		}
		number(lo)
		number(hi)
		number(lo/2 + hi/2)
		for _, floor := range item.floors {
			number(max(floor, lo))
		}
	}
}
