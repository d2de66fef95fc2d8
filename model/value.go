package model

// value is what one item comes to.
type value struct {
	n      Number  // of a number; of a date, its year
	weight LogOdds // what it adds to the sum
	attr   int8    // place among Attributes: of a choice, a band, a reserved state; -1 for none
	state  State
	told   bool // what is Given was only told
}

// in is the value of an item in a state other than Given.
func (item *Item) in(s State) value {
	return item.weighed(value{state: s, attr: int8(item.stateAttribute(s))})
}

// picked is the value of a choice.
func (item *Item) picked(attribute int, told bool) value {
	return item.weighed(value{attr: int8(attribute), state: Given, told: told})
}

// counted is the value of a number, or of the year of a date.
func (item *Item) counted(n Number, told bool) value {
	return item.weighed(value{n: n, attr: int8(item.bandOf(n)), state: Given, told: told})
}

// weighed looks up a value's log-odds: its attribute's, and slope × number.
// They are 0 where the item is not scored.
func (item *Item) weighed(x value) value {
	if x.attr >= 0 {
		x.weight = item.weights[x.attr]
	}
	if item.slope.Digits != 0 && x.state == Given {
		x.weight += item.slope.At(item.clamp(x.n))
	}
	return x
}

// valueOf is what an answer comes to by itself.
func (item *Item) valueOf(g *Answer) value {
	if g.State != Given {
		return item.in(g.State)
	}
	n := g.Number
	switch item.Kind {
	case Choice, YesNo:
		return item.picked(g.Attribute, !g.Seen)
	case DateKind:
		n = Whole(int64(g.Date.Year))
	case Worksheet:
		if g.Lines != nil {
			n = item.Monthly(g.Lines)
		}
	}
	return item.counted(n, !g.Seen)
}

// whole are all items' values, if none is missing.
func (a *Answers) whole() ([]value, bool) {
	if a.worked != a.On {
		a.work()
	}
	return a.values, a.complete
}

// work works out every item's value, with conditions and formulas. It is done
// as answers come in.
func (a *Answers) work() {
	e := a.edition
	a.worked, a.complete = a.On, true
	for _, i := range e.asked {
		item, x := &e.items[i], a.own[i]
		if c := item.condition; c != nil && !c.holds(a.values) {
			x = item.in(IsNotApplicable)
		} else if x.state == Missing || x.state == IsNotApplicable {
			x = item.in(Missing)
			a.complete = false
		}
		a.values[i] = x
	}
	for _, i := range e.order {
		a.values[i] = e.compute(&e.items[i], a)
	}
}
