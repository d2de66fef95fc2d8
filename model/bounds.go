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
	b := e.bound(a)
	b.Narrows = e.narrows(a, b)
	return b
}

func (e *Edition) bound(a *Answers) Bounds {
	var p possibles
	e.spread(a, &p)
	b := Bounds{Lowest: e.constant, Highest: e.constant, Narrows: -1}
	for i := range e.items {
		item := &e.items[i]
		if item.Use == Scored {
			lo, hi := item.weightRange(&p[i])
			b.Lowest += lo
			b.Highest += hi
		}
		if item.Kind != Computed && p[i].states != set(IsNotApplicable) &&
			(a.given[i].State == Missing || a.given[i].State == IsNotApplicable) {
			b.Missing = append(b.Missing, i)
		}
	}
	b.LowestPD, b.HighestPD = b.Lowest.PD(), b.Highest.PD()
	b.FirstBand, b.LastBand = e.band(b.LowestPD), e.band(b.HighestPD)
	b.Mildest = e.card.Bands[b.FirstBand].Recommendation
	b.Strictest = e.card.Bands[b.LastBand].Recommendation
	for i := range e.rules {
		rule := &e.rules[i]
		fires := Sure
		for k := range rule.tests {
			fires = fires.and(rule.tests[k].may(&p[rule.tests[k].index]))
		}
		to := Approve
		switch rule.Effect {
		case DeclineEffect:
			to = Decline
		case ReferEffect:
			to = Refer
		}
		if fires == Sure {
			b.Fires |= 1 << i
			b.Mildest = stricter(b.Mildest, to)
		}
		if fires != Not {
			b.Strictest = stricter(b.Strictest, to)
		}
		if fires == Perhaps {
			b.May |= 1 << i
		}
	}
	return b
}

// narrows finds the missing question with the greatest worst-case cut: each
// is tried with every answer it may get (a number at its own bands' ends and
// at the ends and the middle of what is accepted), and the answer that leaves
// the widest bounds counts.
func (e *Edition) narrows(a *Answers, now Bounds) int {
	best, bestCut := -1, LogOdds(0)
	try := a.Clone()
	for _, i := range now.Missing {
		widest := LogOdds(0)
		for _, answer := range e.items[i].trials() {
			try.given[i] = answer
			b := e.bound(try)
			widest = max(widest, b.Highest-b.Lowest)
		}
		try.given[i] = Answer{}
		if cut := now.Highest - now.Lowest - widest; cut > bestCut {
			best, bestCut = i, cut
		}
	}
	return best
}

// trials are the answers to try for a missing question.
func (item *Item) trials() []Answer {
	var list []Answer
	if item.UnknownAllowed {
		list = append(list, Answer{State: StatedUnknown})
	}
	switch item.Kind {
	case Choice, YesNo:
		for i, a := range item.Attributes {
			if !reserved(a.Code) {
				list = append(list, Answer{State: Given, Attribute: i})
			}
		}
	case DateKind:
		for _, year := range []int{1940, 1960, 1980, 2000} {
			list = append(list, Answer{State: Given, Date: Date{Year: year}})
		}
	default:
		lo, hi := item.LowestAccepted.Or(0), item.HighestAccepted.Or(Whole(1_000_000))
		numbers := []Number{lo, hi, lo/2 + hi/2}
		for _, floor := range item.floors {
			numbers = append(numbers, max(floor, -Largest))
		}
		for _, n := range numbers {
			list = append(list, Answer{State: Given, Number: n})
		}
	}
	return list
}
