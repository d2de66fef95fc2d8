package model

import (
	"slices"
	"strings"
)

// A test is one row of a rule, in tables. It holds for what is Given if it is
// one of some attributes, within inclusive limits or one of some numbers; or,
// negated, if it is none of these.
//
// A test is of what is known. An unknown answer and a question not asked meet
// no comparison, not even "is not": a rule that should fire on them says so
// with "unknown", or names not_applicable. What has nothing left counts as
// beyond every number: a payment out of nothing is above any share.
type test struct {
	index    int
	states   stateSet // other than Given, in which it holds
	toldOnly bool     // holds for what is Given if it was only told
	negated  bool
	among    uint64 // by place among Attributes
	lo, hi   Number // limits; lo above hi for none
	numbers  []Number
}

// holds asks the test of one value.
func (t *test) holds(x *value) bool {
	if x.state != Given {
		return t.states.has(x.state)
	}
	in := t.among>>uint8(x.attr)&1 != 0 || (t.lo <= x.n && x.n <= t.hi)
	switch {
	case t.toldOnly:
		in = x.told
	case !in && t.numbers != nil:
		in = slices.Contains(t.numbers, x.n)
	}
	return in != t.negated
}

// may asks the test of a set of values.
func (t *test) may(x *possible) Truth {
	var answer Truth
	switch others := x.states &^ set(Given); {
	case others == 0:
		return t.mayGiven(x)
	case others&t.states == 0:
		answer = Not
	case others&^t.states == 0:
		answer = Sure
	default:
		answer = Perhaps
	}
	if x.states.has(Given) {
		answer = answer.either(t.mayGiven(x))
	}
	return answer
}

func (t *test) mayGiven(x *possible) Truth {
	if t.toldOnly {
		return x.told
	}
	in := Not
	switch {
	case x.attrs&t.among == 0:
	case x.attrs&^t.among == 0:
		in = Sure
	default:
		in = Perhaps
	}
	in = max(in, within(x, t.lo, t.hi))
	for _, n := range t.numbers {
		in = max(in, within(x, n, n))
	}
	if t.negated {
		return Sure - in
	}
	return in
}

func within(x *possible, lo, hi Number) Truth {
	switch {
	case lo > hi || x.hi < lo || x.lo > hi:
		return Not
	case lo <= x.lo && x.hi <= hi:
		return Sure
	}
	return Perhaps
}

// test compiles one row of a rule. Errors are Problems.
func (c *compiler) test(item *Item, row Rule) (test, error) {
	t := test{index: item.Index, lo: 1, hi: 0}
	value := string(row.Value)
	misfit := Problem{Code: "test_not_usable", Args: Args{"value": string(row.Test), "characteristic": item.Code}}
	switch row.Test {
	case IsUnknown, ToldOnly:
		if value != "" {
			return t, Problem{Code: "value_not_wanted", Args: Args{"value": value}}
		}
		if row.Test == ToldOnly {
			t.toldOnly = true
			return t, nil
		}
		if !c.states[item.Index].has(StatedUnknown) {
			return t, misfit
		}
		t.states = set(StatedUnknown)
		return t, nil
	case Is, IsNot, OneOf:
		names := []string{value}
		if row.Test == OneOf {
			names = strings.FieldsFunc(value, func(r rune) bool { return r == ',' || r == ' ' })
		}
		if value == "" || len(names) == 0 {
			return t, Problem{Code: "missing_value"}
		}
		for _, name := range names {
			if err := t.name(item, c.states[item.Index], name); err != nil {
				return t, err
			}
		}
		if row.Test == IsNot {
			t.negated = true
			t.states = set(IsNothingLeft) &^ t.states
		}
		return t, nil
	}
	if item.isChoice() {
		return t, misfit
	}
	return t, t.compare(row.Test, value)
}

// name adds an attribute, a reserved attribute or a number to a test.
func (t *test) name(item *Item, states stateSet, name string) error {
	for _, r := range reservedStates {
		if name == r.code && states.has(r.state) {
			t.states |= set(r.state)
			return nil
		}
	}
	if n, err := item.attribute(name); err == nil {
		t.among |= 1 << n
		return nil
	} else if item.isChoice() {
		return err
	}
	n, err := ParseNumber(name)
	if err != nil {
		return Problem{Code: "unknown_attribute", Args: Args{"value": name, "options": item.options()}}
	}
	t.numbers = append(t.numbers, n)
	return nil
}

// compare sets the limits of a test.
func (t *test) compare(kind Test, value string) error {
	low, high, two := strings.Cut(value, " to ")
	if two != (kind == Between) {
		return Problem{Code: "between_unreadable", Args: Args{"value": value}}
	}
	lo, err := ParseNumber(low)
	if err != nil {
		return err
	}
	t.lo, t.hi = -Largest, Largest
	switch kind {
	case Below:
		t.hi = lo - 1
	case AtMost:
		t.hi = lo
	case Above:
		t.lo, t.states = lo+1, set(IsNothingLeft)
	case AtLeast:
		t.lo, t.states = lo, set(IsNothingLeft)
	case Between:
		hi, err := ParseNumber(high)
		if err != nil {
			return err
		}
		if lo > hi {
			return Problem{Code: "limits_crossed", Args: Args{"value": hi.String(), "expected": lo.String()}}
		}
		t.lo, t.hi = lo, hi
	}
	return nil
}
