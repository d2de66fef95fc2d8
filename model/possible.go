package model

import "math/bits"

// What may still come: while answers are missing, every item has a set of
// possible values instead of one, and so the result has bounds. The sets are
// never too small. They are tight where no missing answer is shared between
// two computed items, or between two parts of one.

// possible is the set of values that an item may still come to have.
type possible struct {
	states      stateSet
	told        Truth  // whether what is Given was only told
	attrs       uint64 // of a choice or a number, when Given: places among Attributes
	lo, hi      Number // of a number, when Given
	from, until Date   // of a date, the earliest and the latest
}

// Truth may still be open while answers are missing.
type Truth uint8

const (
	Not Truth = iota
	Perhaps
	Sure
)

// and is the least certain of two truths.
func (t Truth) and(u Truth) Truth { return min(t, u) }

// either merges two truths of which either may come.
func (t Truth) either(u Truth) Truth {
	if t == u {
		return t
	}
	return Perhaps
}

func truth(b bool) Truth {
	if b {
		return Sure
	}
	return Not
}

// A stateSet is a set of States.
type stateSet uint8

func set(s State) stateSet            { return 1 << s }
func (s stateSet) has(one State) bool { return s&set(one) != 0 }

// possibles are all items' possible values, in space of fixed size.
type possibles struct {
	of [MostCharacteristics]possible
	// The last instalment worked out, for trying other answers with the same
	// loan.
	loan struct {
		amount        Number
		term, payment [2]Number
	}
}

// open spans the possible values of an item about which nothing is known:
// what is accepted is only questioned, so a number may be anything.
func (item *Item) open() possible {
	p := possible{states: set(Given), told: Perhaps}
	if item.UnknownAllowed {
		p.states |= set(StatedUnknown)
	}
	switch item.Kind {
	case Choice, YesNo:
		for i, a := range item.Attributes {
			if !reserved(a.Code) {
				p.attrs |= 1 << i
			}
		}
	case DateKind:
		p.from, p.until = Date{1800, 1, 1}, Date{2999, 12, 31} // all that ParseDate takes
		p.lo, p.hi = Whole(1800), Whole(2999)
	default:
		p.lo, p.hi = -Largest, Largest
		p.attrs = item.bandsOf(p.lo, p.hi)
	}
	return p
}

// bandsOf are the bands that numbers from lo to hi fall in.
func (item *Item) bandsOf(lo, hi Number) uint64 {
	attrs := uint64(0)
	if len(item.floors) > 0 {
		for i := item.floorOf(lo); i <= item.floorOf(hi); i++ {
			attrs |= 1 << item.bandAt[i]
		}
	}
	return attrs
}

// exact is the set of one value.
func exact(x value, d Date) possible {
	p := possible{states: set(x.state), lo: x.n, hi: x.n, told: truth(x.told), from: d, until: d}
	if x.attr >= 0 && x.state == Given {
		p.attrs = 1 << x.attr
	}
	return p
}

// spread works out every item's possible values.
func (e *Edition) spread(a *Answers, p *possibles) {
	for _, i := range e.asked {
		item := &e.items[i]
		applies := Sure
		if item.condition != nil {
			applies = item.condition.may(p)
		}
		switch x := a.own[i]; {
		case applies == Not:
			p.of[i] = possible{states: set(IsNotApplicable)}
			continue
		case x.state == Missing || x.state == IsNotApplicable:
			p.of[i] = item.open()
		default:
			p.of[i] = exact(x, a.given[i].Date)
		}
		if applies == Perhaps {
			p.of[i].states |= set(IsNotApplicable)
		}
	}
	for _, i := range e.order {
		e.spreadComputed(&e.items[i], a, p)
	}
}

// spreadComputed does for sets what compute does for values.
func (e *Edition) spreadComputed(item *Item, a *Answers, p *possibles) {
	out := &p.of[item.Index]
	*out = possible{}
	possible, forced := set(Given), stateSet(0) // of any part; of all values of some part
	for _, part := range item.parts {
		x := &p.of[part.index]
		s := x.states
		if item.Operation == Sum && s.has(IsNotApplicable) {
			s = s&^set(IsNotApplicable) | set(Given)
		}
		possible |= s
		if !s.has(Given) {
			forced |= lowest(s)
		}
		switch {
		case !x.states.has(Given):
		case x.told == Sure && x.states == set(Given):
			out.told = Sure
		case x.told != Not && out.told == Not:
			out.told = Perhaps
		}
	}
	// A state is possible if some part can have it and none is sure to have one
	// that outranks it.
	for _, s := range outranking {
		if possible.has(s) {
			out.states |= set(s)
		}
		if forced.has(s) {
			return
		}
	}
	out.states |= set(Given)
	parts := item.parts
	decimals := int(item.Decimals)
	switch item.Operation {
	case Sum:
		var lo, hi int64
		for _, part := range parts {
			l, h := p.of[part.index].term()
			if part.negative {
				l, h = -h, -l
			}
			lo, hi = lo+int64(l), hi+int64(h)
		}
		out.lo, out.hi = clampNumber(lo).Round(decimals), clampNumber(hi).Round(decimals)
	case Product:
		out.lo, out.hi = p.product(parts, decimals)
	case Ratio:
		n, d := &p.of[parts[0].index], &p.of[parts[1].index]
		if d.lo <= 0 {
			out.states |= set(IsNothingLeft)
		}
		if d.hi <= 0 {
			out.states &^= set(Given)
			return
		}
		// For a divisor above zero the ratio is monotone in both.
		least, most := max(d.lo, 1), d.hi
		out.lo = min(n.lo.Over(least, decimals), n.lo.Over(most, decimals))
		out.hi = max(n.hi.Over(least, decimals), n.hi.Over(most, decimals))
	case Instalment:
		lo, hi := e.instalmentRange(p, parts[0].index, parts[1].index)
		out.lo, out.hi = lo.Round(decimals), hi.Round(decimals)
	case MonthlyInstalment:
		lo, hi := e.instalmentRange(p, parts[0].index, parts[1].index)
		out.lo, out.hi = e.aMonth(lo, decimals), e.aMonth(hi, decimals)
	case WholeYears:
		born := &p.of[parts[0].index]
		out.lo, out.hi = years(a.On, born.until), years(a.On, born.from)
	case AgeAtLastPayment:
		born, term := &p.of[parts[0].index], &p.of[parts[1].index]
		out.lo = years(e.LastPayment(a.On, term.lo), born.until)
		out.hi = years(e.LastPayment(a.On, term.hi), born.from)
	}
	out.attrs = item.bandsOf(out.lo, out.hi)
}

// lowest is the state of a set that is outranked by all others of it.
func lowest(s stateSet) stateSet {
	for _, r := range [...]State{IsNotApplicable, IsNothingLeft} {
		if s.has(r) {
			return set(r)
		}
	}
	return s
}

// term is the range of a part of a sum, where what does not apply counts 0.
func (x *possible) term() (lo, hi Number) {
	if x.states.has(IsNotApplicable) {
		return min(x.lo, 0), max(x.hi, 0)
	}
	return x.lo, x.hi
}

// product is the range of a product: its ends are among the products of the
// parts' ends.
func (p *possibles) product(parts []part, decimals int) (lo, hi Number) {
	lo, hi = Largest, -Largest
	for ends := range 1 << len(parts) {
		var factors [MostParts]Number
		again := false
		for k, part := range parts {
			x := &p.of[part.index]
			factors[k] = x.lo
			if ends>>k&1 == 1 {
				factors[k] = x.hi
				again = again || x.lo == x.hi
			}
		}
		if !again {
			n := product(decimals, factors[:len(parts)]...)
			lo, hi = min(lo, n), max(hi, n)
		}
	}
	return lo, hi
}

// weightRange is the range of log-odds that an item may still add.
func (item *Item) weightRange(x *possible) (lo, hi LogOdds) {
	lo, hi = maxLogOdds, -maxLogOdds
	for _, r := range reservedStates {
		if n := item.stateAttribute(r.state); n >= 0 && x.states.has(r.state) {
			lo, hi = min(lo, item.weights[n]), max(hi, item.weights[n])
		}
	}
	switch {
	case !x.states.has(Given):
	case item.slope.Digits != 0 || x.attrs == 0:
		l, h := item.numberRange(x.lo, x.hi)
		lo, hi = min(lo, l), max(hi, h)
	default:
		for i, w := range item.weights {
			if x.attrs>>i&1 != 0 {
				lo, hi = min(lo, w), max(hi, w)
			}
		}
	}
	return lo, hi
}

// maxLogOdds is above all log-odds of an item.
const maxLogOdds = 4 * largestLogOdds

// numberRange is the range of log-odds of the numbers from lo to hi. Within a
// band they are monotone, so their ends are where a band starts or ends.
func (item *Item) numberRange(from, to Number) (lo, hi LogOdds) {
	from, to = item.clamp(from), item.clamp(to)
	lo, hi = maxLogOdds, -maxLogOdds
	take := func(n Number) {
		w := item.counted(n, true).weight
		lo, hi = min(lo, w), max(hi, w)
	}
	take(from)
	take(to)
	for _, floor := range item.floors {
		if floor > from && floor <= to {
			take(floor)
			take(floor - 1)
		}
	}
	return lo, hi
}

// single is the one value of a set, where it has but one.
func (p *possible) single(item *Item) (value, bool) {
	for _, r := range reservedStates {
		if p.states == set(r.state) {
			return item.in(r.state), true
		}
	}
	if p.states != set(Given) {
		return value{}, false
	}
	if item.isChoice() {
		n := bits.TrailingZeros64(p.attrs)
		return item.picked(n, true), bits.OnesCount64(p.attrs) == 1
	}
	return item.counted(p.lo, true), p.lo == p.hi
}
