package model

import (
	"math/bits"
	"slices"
)

// A RuleSet is a set of rules by their place among Edition.Rules.
type RuleSet uint64

// Has tells whether rule i is in the set.
func (s RuleSet) Has(i int) bool { return s&(1<<i) != 0 }

// Len counts the rules in the set.
func (s RuleSet) Len() int { return bits.OnesCount64(uint64(s)) }

// A PolicyRule is one policy rule: the label, effect, amount and text are
// those of its first row that has them.
type PolicyRule struct {
	Code, Label string
	Effect      Effect
	Amount      Number // of a largest amount
	Text        string
	// Characteristics are the indexes of what it asks about.
	Characteristics []int
}

// rule is a policy rule in tables: all tests must hold.
type rule struct {
	PolicyRule
	tests      []test
	strictness int // of what it recommends
}

// Rules are the policy rules in the workbook's order.
func (e *Edition) Rules() []PolicyRule {
	rules := make([]PolicyRule, len(e.rules))
	for i, r := range e.rules {
		rules[i] = r.PolicyRule
	}
	return rules
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

// fire finds the rules that fire and makes the result as strict as the band
// and they say.
func (e *Edition) fire(v []value, r *Result) {
	strict := e.strictness[r.Band]
	for i := range e.rules {
		rule := &e.rules[i]
		if !rule.holds(v) {
			continue
		}
		r.Fired |= 1 << i
		strict = max(strict, rule.strictness)
		if rule.Effect == LargestAmount && rule.Amount < r.LargestAmount.Or(Largest) {
			r.LargestAmount = Some(rule.Amount)
		}
	}
	r.Recommendation = byStrictness[strict]
}

func (r *rule) holds(v []value) bool {
	for i := range r.tests {
		if t := &r.tests[i]; !t.holds(&v[t.index]) {
			return false
		}
	}
	return true
}

// may tells whether the rule fires.
func (r *rule) may(p *possibles) Truth {
	fires := Sure
	for i := range r.tests {
		fires = fires.and(r.tests[i].may(&p.of[r.tests[i].index]))
	}
	return fires
}

// rules gathers the rows of each rule.
func (c *compiler) rules() {
	for i, row := range c.s.Rules {
		if row.Code == "" {
			continue // listed when the cell was read
		}
		bad := func(column, code string, args Args) {
			c.add(Problem{Code: code, Place: at("Rules", i+1, column), Args: args})
		}
		n := slices.IndexFunc(c.e.rules, func(r rule) bool { return r.Code == row.Code })
		if n < 0 {
			if len(c.e.rules) == MostRules {
				c.add(tooMany(at("Rules", i+1, "Rule"), MostRules+1, MostRules))
				return
			}
			n = len(c.e.rules)
			c.e.rules = append(c.e.rules, rule{strictness: row.Effect.recommends().strictness(),
				PolicyRule: PolicyRule{Code: row.Code, Effect: row.Effect, Amount: row.Amount.Or(0)}})
			if row.Effect == "" {
				bad("Effect", "missing_value", nil)
			}
			if row.Label == "" {
				bad("Label", "missing_value", nil)
			}
			if row.Effect == LargestAmount && row.Amount.Or(0) <= 0 {
				bad("Amount", "not_above_zero", nil)
			}
		}
		r := &c.e.rules[n]
		if row.Effect != "" && r.Effect != row.Effect {
			bad("Effect", "rule_two_effects", Args{"value": string(row.Effect), "above": string(r.Effect)})
		}
		switch {
		case row.Amount.Set && r.Effect != LargestAmount:
			bad("Amount", "amount_not_wanted", nil)
		case row.Amount.Set && row.Amount.Value != r.Amount:
			bad("Amount", "rule_two_amounts", Args{"value": row.Amount.Value.String(), "above": r.Amount.String()})
		}
		if r.Label == "" {
			r.Label = row.Label
		}
		if r.Text == "" {
			r.Text = row.Text
		}
		item := c.item(row.Characteristic)
		if item == nil {
			c.unknown(at("Rules", i+1, "Characteristic"), row.Characteristic)
			continue
		}
		if !slices.Contains(r.Characteristics, item.Index) {
			r.Characteristics = append(r.Characteristics, item.Index)
		}
		if item.LawfulGround == "" && (item.Use == Watched || c.grounds[item.Index] != "") {
			bad("Characteristic", "rule_without_ground", Args{"value": item.Code})
		}
		t, err := c.test(item, row)
		if err != nil {
			p := err.(Problem)
			if p.Place = at("Rules", i+1, "Value"); p.Code == "test_not_usable" {
				p.Place.Column = "Test"
			}
			c.add(p)
			continue
		}
		r.tests = append(r.tests, t)
	}
}
