package model

// What may still come: while answers are missing, every item has a set of
// possible values instead of one, and so the result has bounds. The sets are
// never too small. They are tight where no missing answer is shared between
// two computed items.

// possible is the set of values that an item may still come to have.
type possible struct {
	states stateSet
	attrs  uint64 // of a choice, when Given
	lo, hi Number // of a number, when Given
	told   Truth  // whether what is Given was only told
	from   Date   // of a date, the earliest and the latest
	until  Date
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

func truth(b bool) Truth {
	if b {
		return Sure
	}
	return Not
}

// either merges two truths of which either may come.
func (t Truth) either(u Truth) Truth {
	if t == u {
		return t
	}
	return Perhaps
}

// open spans the possible values of an item about which nothing is known:
// what is accepted is only questioned, so a number may be anything.
func (item *Item) open(on Date) possible {
	p := possible{states: set(Given), lo: -Largest, hi: Largest, told: Perhaps,
		from: Date{1800, 1, 1}, until: Date{2999, 12, 31}}
	if item.UnknownAllowed {
		p.states |= set(StatedUnknown)
	}
	for i, a := range item.Attributes {
		if !reserved(a.Code) {
			p.attrs |= 1 << i
		}
	}
	return p
}

// exact is the set of one value.
func exact(x value, d Date) possible {
	return possible{states: set(x.state), attrs: 1 << x.attr, lo: x.n, hi: x.n, told: truth(x.told), from: d, until: d}
}

type possibles [MostCharacteristics]possible

// spread works out every item's possible values.
func (e *Edition) spread(a *Answers, p *possibles) {
	for i := range e.items {
		item := &e.items[i]
		if item.Kind == Computed {
			continue
		}
		applies := Sure
		if item.condition != nil {
			applies = item.condition.may(p)
		}
		g := &a.given[i]
		switch {
		case applies == Not:
			p[i] = exact(value{state: IsNotApplicable}, Date{})
			continue
		case g.State == Missing || g.State == IsNotApplicable:
			p[i] = item.open(a.On)
		default:
			x := value{n: g.Number, attr: g.Attribute, state: g.State, told: !g.Seen}
			if g.Lines != nil {
				x.n = item.Monthly(g.Lines)
			}
			if item.Kind == DateKind {
				x.n = Whole(int64(g.Date.Year))
			}
			p[i] = exact(x, g.Date)
		}
		if applies == Perhaps {
			p[i].states |= set(IsNotApplicable)
		}
	}
	for _, i := range e.order {
		p[i] = e.spreadComputed(&e.items[i], a, p)
	}
}

// may tells whether the condition holds.
func (c *condition) may(p *possibles) Truth {
	x := &p[c.index]
	switch {
	case !x.states.has(Given) || x.attrs&c.among == 0:
		return Not
	case x.states == set(Given) && x.attrs&^c.among == 0:
		return Sure
	}
	return Perhaps
}

// spreadComputed does for sets what compute does for values.
func (e *Edition) spreadComputed(item *Item, a *Answers, p *possibles) possible {
	out := possible{states: set(Given), told: Not}
	given := true // whether Given is possible at all
	for _, part := range item.parts {
		x := &p[part.index]
		s := x.states
		if item.Operation == Sum && s.has(IsNotApplicable) {
			s = s&^set(IsNotApplicable) | set(Given)
		}
		out.states |= s &^ set(Given)
		given = given && s.has(Given)
		if x.states.has(Given) {
			// Told when any given part was: no only where all were surely seen.
			switch {
			case x.told == Sure && x.states == set(Given):
				out.told = Sure
			case x.told != Not && out.told == Not:
				out.told = Perhaps
			}
		}
	}
	if !given {
		out.states &^= set(Given)
	}
	decimals := int(item.Decimals)
	switch item.Operation {
	case Sum:
		for _, part := range item.parts {
			lo, hi := p[part.index].range0()
			if part.negative {
				lo, hi = -hi, -lo
			}
			out.lo, out.hi = out.lo.Plus(lo), out.hi.Plus(hi)
		}
		out.lo, out.hi = out.lo.Round(decimals), out.hi.Round(decimals)
	case Product:
		out.lo, out.hi = One, One
		for k, part := range item.parts {
			places := MostDecimals
			if k == len(item.parts)-1 {
				places = decimals
			}
			x := &p[part.index]
			out.lo, out.hi = corners(func(a, b Number) Number { return a.Times(b, places) }, out.lo, out.hi, x.lo, x.hi)
		}
	case Ratio:
		d := &p[item.parts[1].index]
		if d.states.has(Given) && given {
			if d.lo <= 0 {
				out.states |= set(IsNothingLeft)
			}
			if d.hi <= 0 {
				out.states &^= set(Given)
				break
			}
		}
		n := &p[item.parts[0].index]
		out.lo, out.hi = corners(func(a, b Number) Number { return a.Over(b, decimals) }, n.lo, n.hi, max(d.lo, 1), max(d.hi, 1))
	case Instalment:
		out.lo, out.hi = e.instalmentRange(p[item.parts[0].index], p[item.parts[1].index])
		out.lo, out.hi = out.lo.Round(decimals), out.hi.Round(decimals)
	case WholeYears:
		born := &p[item.parts[0].index]
		out.lo, out.hi = years(a.On, born.until), years(a.On, born.from)
	case AgeAtLastPayment:
		born, term := &p[item.parts[0].index], &p[item.parts[1].index]
		out.lo = years(e.LastPayment(a.On, term.lo), born.until)
		out.hi = years(e.LastPayment(a.On, term.hi), born.from)
	}
	return out
}

func years(on, born Date) Number { return Whole(int64(on.WholeYears(born))) }

// range0 is the range of a part of a sum, where what does not apply counts 0.
func (x *possible) range0() (lo, hi Number) {
	switch {
	case !x.states.has(Given):
		return 0, 0
	case x.states.has(IsNotApplicable):
		return min(x.lo, 0), max(x.hi, 0)
	}
	return x.lo, x.hi
}

// corners is the range of an operation that is monotone in each operand.
func corners(f func(a, b Number) Number, alo, ahi, blo, bhi Number) (lo, hi Number) {
	w, x, y, z := f(alo, blo), f(alo, bhi), f(ahi, blo), f(ahi, bhi)
	return min(w, x, y, z), max(w, x, y, z)
}

// weights is the range of log-odds that an item may still add.
func (item *Item) weightRange(x *possible) (lo, hi LogOdds) {
	first := true
	take := func(l LogOdds) {
		if first {
			lo, hi, first = l, l, false
		}
		lo, hi = min(lo, l), max(hi, l)
	}
	for _, r := range [...]struct {
		state State
		index int
	}{{StatedUnknown, item.unknown}, {IsNotApplicable, item.notApplies}, {IsNothingLeft, item.nothingLeft}} {
		if x.states.has(r.state) && r.index >= 0 {
			take(item.weights[r.index])
		}
	}
	if !x.states.has(Given) {
		return lo, hi
	}
	if item.Kind == Choice || item.Kind == YesNo {
		for i, w := range item.weights {
			if x.attrs&(1<<i) != 0 {
				take(w)
			}
		}
		return lo, hi
	}
	from, to := min(max(x.lo, item.from), item.to), min(max(x.hi, item.from), item.to)
	take(item.weightOf(from))
	take(item.weightOf(to))
	// Within a band the weight is monotone, so its ends are where each band starts.
	for _, floor := range item.floors {
		if floor > from && floor <= to {
			take(item.weightOf(floor))
			take(item.weightOf(floor - 1))
		}
	}
	return lo, hi
}

// may asks a test of a set of values.
func (t *test) may(x *possible) Truth {
	all := x.states
	hit := stateSet(0) // the states in which the test holds for certain or perhaps
	given := Not
	switch t.kind {
	case IsUnknown:
		hit = set(StatedUnknown)
	case ToldOnly:
		given = x.told
	case Is, OneOf:
		hit = t.states
		given = t.mayNamed(x)
	case IsNot:
		given = Sure - t.mayNamed(x)
	default:
		given = within(x, t.lo, t.hi)
		if t.hi == Largest && (t.kind == Above || t.kind == AtLeast) {
			hit = set(IsNothingLeft)
		}
	}
	result, first := Not, true
	merge := func(u Truth) {
		if first {
			result, first = u, false
			return
		}
		result = result.either(u)
	}
	for _, s := range [...]State{StatedUnknown, IsNotApplicable, IsNothingLeft} {
		if all.has(s) {
			merge(truth(hit.has(s)))
		}
	}
	if all.has(Given) {
		merge(given)
	}
	return result
}

func (t *test) mayNamed(x *possible) Truth {
	if t.among == 0 {
		return within(x, t.lo, t.hi)
	}
	switch {
	case x.attrs&t.among == 0:
		return Not
	case x.attrs&^t.among == 0:
		return Sure
	}
	return Perhaps
}

func within(x *possible, lo, hi Number) Truth {
	switch {
	case x.hi < lo || x.lo > hi:
		return Not
	case lo <= x.lo && x.hi <= hi:
		return Sure
	}
	return Perhaps
}
