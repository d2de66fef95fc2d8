package model

import (
	"slices"
	"strings"
)

// A condition is "asked only if": the answer to item index is one of a set. A
// source that is unknown or itself not asked is none of any set, so that the
// question is not asked.
type condition struct {
	index int
	among uint64 // by place among the source's Attributes
}

// conditions reads "asked only if": "code is attribute", "code is not
// attribute" or "code is one of a, b", about a choice or a yes/no asked
// earlier.
func (c *compiler) conditions() {
	for i := range c.e.items {
		item := &c.e.items[i]
		if item.AskedOnlyIf == "" || item.Kind == Computed {
			continue
		}
		place := at("Characteristics", c.row(item), "Asked only if")
		code, attributes, not, ok := readCondition(item.AskedOnlyIf)
		source := c.item(code)
		switch {
		case !ok:
			c.add(Problem{Code: "condition_unreadable", Place: place, Args: Args{"value": item.AskedOnlyIf}})
			continue
		case source == nil:
			c.unknown(place, code)
			continue
		case source.Index >= item.Index || !source.isChoice():
			c.add(Problem{Code: "condition_not_earlier_choice", Place: place, Args: Args{"value": item.AskedOnlyIf}})
			continue
		}
		cond := &condition{index: source.Index}
		for _, code := range attributes {
			n, err := source.attribute(code)
			if err != nil {
				p := err.(Problem)
				p.Place = place
				c.add(p)
				continue
			}
			cond.among |= 1 << n
		}
		if not {
			cond.among = ^cond.among
		}
		item.condition = cond
	}
}

// readCondition takes a condition apart.
func readCondition(text string) (code string, attributes []string, not, ok bool) {
	words := strings.FieldsFunc(text, func(r rune) bool { return r == ' ' || r == ',' })
	switch {
	case len(words) == 3 && words[1] == "is":
		return words[0], words[2:], false, true
	case len(words) == 4 && words[1] == "is" && words[2] == "not":
		return words[0], words[3:], true, true
	case len(words) >= 5 && slices.Equal(words[1:4], []string{"is", "one", "of"}):
		return words[0], words[4:], false, true
	}
	return "", nil, false, false
}

func (c *condition) holds(v []value) bool {
	x := &v[c.index]
	return x.state == Given && c.among>>uint8(x.attr)&1 != 0
}

// may tells whether the condition holds.
func (c *condition) may(p *possibles) Truth {
	x := &p.of[c.index]
	switch {
	case !x.states.has(Given) || x.attrs&c.among == 0:
		return Not
	case x.states == set(Given) && x.attrs&^c.among == 0:
		return Sure
	}
	return Perhaps
}

// ConditionOf is the index of the item whose answer decides whether a question
// is asked; ok is false for one that is always asked.
func (item *Item) ConditionOf() (index int, ok bool) {
	if item.condition == nil {
		return 0, false
	}
	return item.condition.index, true
}
