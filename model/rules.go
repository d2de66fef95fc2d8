package model

import (
	"math/bits"
	"slices"
	"strings"
)

// A RuleSet is a set of rules by their place among Edition.Rules.
type RuleSet uint64

// Has tells whether rule i is in the set.
func (s RuleSet) Has(i int) bool { return s&(1<<i) != 0 }

// Len counts the rules in the set.
func (s RuleSet) Len() int { return bits.OnesCount64(uint64(s)) }

// A PolicyRule is one policy rule as the workbook words it: the label, effect
// and text of its first row that has them.
type PolicyRule struct {
	Code, Label string
	Effect      Effect
	Amount      Number // of a largest amount
	Text        string
	// Characteristics are the indexes of what it asks about.
	Characteristics []int
}

// rule is a policy rule in tables: all conditions must hold.
type rule struct {
	PolicyRule
	tests []test
}

// test is one row of a rule.
type test struct {
	index  int
	kind   Test
	among  uint64   // attributes, for is, is not and one of on choices and reserved attributes
	lo, hi Number   // inclusive limits, for the rest
	states stateSet // states named, for is and its like on reserved attributes
}

// Rules are the policy rules in the workbook's order.
func (e *Edition) Rules() []PolicyRule {
	rules := make([]PolicyRule, len(e.rules))
	for i, r := range e.rules {
		rules[i] = r.PolicyRule
	}
	return rules
}

// fire finds the rules that fire and makes the result as strict as they say.
func (e *Edition) fire(v *values, r *Result) {
	for i := range e.rules {
		rule := &e.rules[i]
		if !rule.holds(v) {
			continue
		}
		r.Fired |= 1 << i
		switch rule.Effect {
		case DeclineEffect:
			r.Recommendation = Decline
		case ReferEffect:
			r.Recommendation = stricter(r.Recommendation, Refer)
		case LargestAmount:
			if !r.LargestAmount.Set || rule.Amount < r.LargestAmount.Value {
				r.LargestAmount = Some(rule.Amount)
			}
		}
	}
}

func (r *rule) holds(v *values) bool {
	for i := range r.tests {
		if t := &r.tests[i]; !t.holds(&v[t.index]) {
			return false
		}
	}
	return true
}

// holds asks one test of one value. What is unknown or not applicable meets
// no comparison; what has nothing left counts as beyond every number.
func (t *test) holds(x *value) bool {
	switch t.kind {
	case IsUnknown:
		return x.state == StatedUnknown
	case ToldOnly:
		return x.state == Given && x.told
	case Is, OneOf:
		return t.named(x)
	case IsNot:
		return x.state == Given && !t.named(x)
	}
	switch x.state {
	case Given:
		return t.lo <= x.n && x.n <= t.hi
	case IsNothingLeft:
		return t.hi == Largest && (t.kind == Above || t.kind == AtLeast)
	}
	return false
}

// named tells whether the value is one that is/is not/one of names.
func (t *test) named(x *value) bool {
	if x.state != Given {
		return t.states.has(x.state)
	}
	if t.among != 0 {
		return t.among&(1<<x.attr) != 0
	}
	return t.lo <= x.n && x.n <= t.hi
}

// rules gathers the rows of each rule.
func (c *compiler) rules() {
	for i, row := range c.s.Rules {
		if row.Code == "" {
			continue
		}
		at := func(column string) Place { return at("Rules", i+1, column) }
		n := slices.IndexFunc(c.e.rules, func(r rule) bool { return r.Code == row.Code })
		if n < 0 {
			if len(c.e.rules) == MostRules {
				c.add(Problem{Code: "too_many", Place: at("Rule"), Args: Args{"value": "65", "most": "64"}})
				return
			}
			n = len(c.e.rules)
			c.e.rules = append(c.e.rules, rule{PolicyRule: PolicyRule{Code: row.Code}})
			if row.Effect == "" {
				c.add(Problem{Code: "missing_value", Place: at("Effect")})
			}
			if row.Label == "" {
				c.add(Problem{Code: "missing_value", Place: at("Label")})
			}
		}
		r := &c.e.rules[n]
		if r.Effect != "" && row.Effect != "" && r.Effect != row.Effect {
			c.add(Problem{Code: "rule_two_effects", Place: at("Effect"), Args: Args{"value": string(row.Effect), "above": string(r.Effect)}})
		}
		first := func(into *string, text string) {
			if *into == "" {
				*into = text
			}
		}
		first(&r.Label, row.Label)
		first((*string)(&r.Effect), string(row.Effect))
		first(&r.Text, row.Text)
		if row.Amount.Set {
			r.Amount = row.Amount.Value
		}
		switch {
		case row.Effect == LargestAmount && (!row.Amount.Set || row.Amount.Value <= 0):
			c.add(Problem{Code: "not_above_zero", Place: at("Amount")})
		case r.Effect != LargestAmount && row.Amount.Set:
			c.add(Problem{Code: "amount_not_wanted", Place: at("Amount")})
		}
		item := c.item(row.Characteristic)
		if item == nil {
			c.unknown(at("Characteristic"), row.Characteristic)
			continue
		}
		if !slices.Contains(r.Characteristics, item.Index) {
			r.Characteristics = append(r.Characteristics, item.Index)
		}
		if item.LawfulGround == "" && (item.Use == Watched || c.protectedBy(item) != "") {
			c.add(Problem{Code: "rule_without_ground", Place: at("Characteristic"), Args: Args{"value": item.Code}})
		}
		t, p := c.test(item, row)
		if p != nil {
			p.Place = at("Value")
			if p.Code == "test_not_usable" {
				p.Place = at("Test")
			}
			c.add(*p)
			continue
		}
		r.tests = append(r.tests, t)
	}
}

// test compiles one row of a rule.
func (c *compiler) test(item *Item, row Rule) (test, *Problem) {
	t := test{index: item.Index, kind: row.Test, lo: -Largest, hi: Largest}
	choice := item.Kind == Choice || item.Kind == YesNo
	misfit := &Problem{Code: "test_not_usable", Args: Args{"value": string(row.Test), "characteristic": item.Code}}
	switch row.Test {
	case IsUnknown, ToldOnly:
		if row.Value != "" {
			return t, &Problem{Code: "value_not_wanted", Args: Args{"value": string(row.Value)}}
		}
		if row.Test == IsUnknown && !c.states(item.Index).has(StatedUnknown) {
			return t, misfit
		}
		return t, nil
	case Is, IsNot, OneOf:
		t.lo, t.hi = 1, 0 // no number, until one is named
		for _, word := range strings.FieldsFunc(string(row.Value), func(r rune) bool { return r == ',' || r == ' ' }) {
			if p := c.name(item, &t, word); p != nil {
				return t, p
			}
		}
		if t.among == 0 && t.states == 0 && (choice || row.Value == "") {
			return t, &Problem{Code: "missing_value"}
		}
		return t, nil
	}
	if choice {
		return t, misfit
	}
	low, high, two := strings.Cut(string(row.Value), " to ")
	if two != (row.Test == Between) {
		return t, &Problem{Code: "between_unreadable", Args: Args{"value": string(row.Value)}}
	}
	lo, err := ParseNumber(low)
	hi := lo
	if err == nil && two {
		hi, err = ParseNumber(high)
	}
	if err != nil {
		p := err.(Problem)
		return t, &p
	}
	switch row.Test {
	case Below:
		t.hi = lo - 1
	case AtMost:
		t.hi = lo
	case Above:
		t.lo = lo + 1
	case AtLeast:
		t.lo = lo
	case Between:
		if lo > hi {
			return t, &Problem{Code: "limits_crossed", Args: Args{"value": hi.String(), "expected": lo.String()}}
		}
		t.lo, t.hi = lo, hi
	}
	return t, nil
}

// name adds one attribute, reserved attribute or number to a test.
func (c *compiler) name(item *Item, t *test, word string) *Problem {
	switch word {
	case Unknown:
		t.states |= set(StatedUnknown)
		return nil
	case NotApplicable:
		t.states |= set(IsNotApplicable)
		return nil
	case NothingLeft:
		t.states |= set(IsNothingLeft)
		return nil
	}
	if item.Kind == Choice || item.Kind == YesNo {
		n, err := item.attribute(word)
		if err != nil {
			p := err.(Problem)
			return &p
		}
		t.among |= 1 << n
		return nil
	}
	if n := slices.IndexFunc(item.Attributes, func(a Attribute) bool { return a.Code == word }); n >= 0 {
		// A band of a number, by its name.
		a := item.Attributes[n]
		t.lo, t.hi = a.From.Or(-Largest), a.Below.Or(Largest+1)-1
		return nil
	}
	n, err := ParseNumber(word)
	if err != nil || t.kind == OneOf {
		return &Problem{Code: "unknown_attribute", Args: Args{"value": word, "options": item.options()}}
	}
	t.lo, t.hi = n, n
	return nil
}
