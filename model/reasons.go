package model

import (
	"cmp"
	"slices"
)

// A Step is what one scored characteristic adds to or takes from the
// development average: its part of the balance.
type Step struct {
	Index     int // of the item
	Attribute int // place among Item.Attributes, -1 where it has none or is open
	State     State
	// LogOdds is what the answer adds to the sum; Average is what the
	// development sample's answers added on average.
	LogOdds, Average LogOdds
	// Lowest and Highest bound LogOdds while the answer is missing or open; for
	// an answer they are LogOdds.
	Lowest, Highest LogOdds
}

// Above is how far the step lies above the average: riskier when above zero.
func (s Step) Above() LogOdds { return s.LogOdds - s.Average }

// Open tells that the answer is not settled yet; LogOdds is then the average.
func (s Step) Open() bool { return s.Lowest != s.Highest }

// Steps are the parts of the sum in the workbook's order, for answers complete
// or not. Of complete answers, Centre plus every step's Above is the log-odds.
func (e *Edition) Steps(a *Answers) []Step {
	var p possibles
	e.spread(a, &p)
	steps := make([]Step, len(e.scored))
	for n, i := range e.scored {
		item := &e.items[i]
		s := Step{Index: i, Attribute: -1, Average: item.AverageLogOdds.Value}
		s.Lowest, s.Highest = item.weightRange(&p.of[i])
		s.LogOdds = min(max(s.Average, s.Lowest), s.Highest)
		if x, ok := p.of[i].single(item); ok {
			s.Attribute, s.State = int(x.attr), x.state
		}
		steps[n] = s
	}
	return steps
}

// Centre is the middle of the balance: the constant and every scored
// characteristic's development average. It is not the log-odds of the default
// rate: an average of log-odds never is.
func (e *Edition) Centre() LogOdds {
	sum := e.constant
	for _, i := range e.scored {
		sum += e.items[i].AverageLogOdds.Value
	}
	return sum
}

// MostReasons is how many reasons are given at the most: 12 CFR 1002.9(b)(2),
// official interpretation, comment 1, holds that more than four are not likely
// to help.
const MostReasons = 4

// Reasons are the scored characteristics that speak most against the answers:
// those whose log-odds lie furthest above their development average, at most
// MostReasons, ties in the workbook's order. One at the average or below is
// never a reason, however few are left: it did not speak against anybody. An
// open one is none either. Where a rule declined, the reason is that rule
// instead: see Result.Fired and DecliningRules.
func (e *Edition) Reasons(a *Answers) []Step {
	list := slices.DeleteFunc(e.Steps(a), func(s Step) bool { return s.Open() || s.Above() <= 0 })
	slices.SortStableFunc(list, func(a, b Step) int { return cmp.Compare(b.Above(), a.Above()) })
	return list[:min(len(list), MostReasons)]
}

// ReasonText is what the workbook would have the applicant told of a step: the
// attribute's reason, else the slope's; empty where it gives none.
func (e *Edition) ReasonText(s Step) string {
	item := &e.items[s.Index]
	if s.Attribute >= 0 && item.Attributes[s.Attribute].Reason != "" {
		return item.Attributes[s.Attribute].Reason
	}
	if s.State == Given {
		return item.slopeReason
	}
	return ""
}
