package model

import (
	"cmp"
	"slices"
)

// A Step is what one scored characteristic adds to or takes from the
// development average: its part of the balance.
type Step struct {
	Index     int // of the item
	Attribute int // place among Item.Attributes, -1 where there is none
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
// or not. Centre plus every step's Above is the log-odds.
func (e *Edition) Steps(a *Answers) []Step {
	var p possibles
	e.spread(a, &p)
	var steps []Step
	for i := range e.items {
		item := &e.items[i]
		if item.Use != Scored {
			continue
		}
		s := Step{Index: i, Attribute: -1, Average: item.AverageLogOdds.Or(0)}
		s.Lowest, s.Highest = item.weightRange(&p[i])
		s.LogOdds = s.Lowest
		if s.Open() {
			s.LogOdds = min(max(s.Average, s.Lowest), s.Highest)
		}
		if x, ok := p[i].single(item); ok {
			s.Attribute, s.State = item.attributeOf(x), x.state
		}
		steps = append(steps, s)
	}
	return steps
}

// single is the one value of a set, where it has but one.
func (p *possible) single(item *Item) (value, bool) {
	for _, s := range [...]State{StatedUnknown, IsNotApplicable, IsNothingLeft} {
		if p.states == set(s) {
			return value{state: s}, true
		}
	}
	if p.states != set(Given) {
		return value{}, false
	}
	if item.Kind == Choice || item.Kind == YesNo {
		for n := range item.Attributes {
			if p.attrs == 1<<n {
				return value{state: Given, attr: n}, true
			}
		}
		return value{}, false
	}
	return value{state: Given, n: p.lo}, p.lo == p.hi
}

// Centre is the middle of the balance: the constant and every scored
// characteristic's development average. It is not the log-odds of the default
// rate: an average of log-odds never is.
func (e *Edition) Centre() LogOdds {
	sum := e.constant
	for i := range e.items {
		if e.items[i].Use == Scored {
			sum += e.items[i].AverageLogOdds.Or(0)
		}
	}
	return sum
}

// MostReasons is how many reasons are given at the most: 12 CFR 1002.9(b)(2),
// official interpretation, comment 1, holds that more than four are not likely
// to help.
const MostReasons = 4

// Reasons are the scored characteristics that speak most against complete
// answers: those whose log-odds lie furthest above their development average,
// strictly above, at most MostReasons, ties in the workbook's order. Where a
// rule declined, the reason is that rule instead: see Result.Fired.
func (e *Edition) Reasons(a *Answers) []Step {
	var list []Step
	for _, s := range e.Steps(a) {
		if !s.Open() && s.Above() > 0 {
			list = append(list, s)
		}
	}
	slices.SortStableFunc(list, func(a, b Step) int { return cmp.Compare(b.Above(), a.Above()) })
	return list[:min(len(list), MostReasons)]
}

// DecliningRules are the rules in a set whose effect is to decline, in the
// workbook's order.
func (e *Edition) DecliningRules(set RuleSet) []PolicyRule {
	var list []PolicyRule
	for i := range e.rules {
		if set.Has(i) && e.rules[i].Effect == DeclineEffect {
			list = append(list, e.rules[i].PolicyRule)
		}
	}
	return list
}
