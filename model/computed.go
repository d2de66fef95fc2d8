package model

import (
	"slices"
	"strconv"
)

// A part is one of what a computed item is worked out from.
type part struct {
	index    int
	negative bool
}

// computed checks each formula and sorts the computed items so that parts
// come first.
func (c *compiler) computed() {
	formula := map[string]int{} // the row of each item's
	for i, f := range c.s.Computed {
		item := c.item(f.Characteristic)
		place := at("Computed", i+1, "Characteristic")
		switch {
		case item == nil:
			c.unknown(place, f.Characteristic)
		case item.Kind != Computed:
			c.add(Problem{Code: "not_computed", Place: place, Args: Args{"value": f.Characteristic}})
		case formula[f.Characteristic] > 0:
			c.add(Problem{Code: "repeated_code", Place: place, Args: Args{"value": f.Characteristic}})
		default:
			formula[f.Characteristic] = i + 1
			item.Operation = f.Operation
			c.parts(item, f, i+1)
		}
	}
	for i := range c.e.items {
		if item := &c.e.items[i]; item.Kind == Computed && formula[item.Code] == 0 {
			c.add(Problem{Code: "formula_missing", Place: at("Characteristics", c.row(item), "Kind"), Args: Args{"value": item.Code}})
		}
	}
	c.sort(formula)
}

func (c *compiler) parts(item *Item, f Formula, row int) {
	dated := f.Operation == WholeYears || f.Operation == AgeAtLastPayment
	given := 0
	for n, p := range f.Parts {
		if p.Code == "" {
			continue
		}
		given++
		place := at("Computed", row, "Part "+strconv.Itoa(n+1))
		source := c.item(p.Code)
		switch {
		case source == nil:
			c.unknown(place, p.Code)
			continue
		case source.isChoice() || dated != (source.Kind == DateKind):
			c.add(Problem{Code: "part_not_usable", Place: place, Args: Args{"value": p.Code, "operation": string(f.Operation)}})
			continue
		case p.Sign == Minus && f.Operation != Sum:
			c.add(Problem{Code: "sign_only_in_sum", Place: at("Computed", row, "Sign "+strconv.Itoa(n+1)), Args: Args{"operation": string(f.Operation)}})
		}
		item.parts = append(item.parts, part{source.Index, p.Sign == Minus})
	}
	least, most := 1, MostParts
	switch f.Operation {
	case Product:
		least = 2
	case Ratio:
		least, most = 2, 2
	case Instalment, MonthlyInstalment:
		least, most = 0, 0
	case WholeYears, AgeAtLastPayment:
		most = 1
	}
	if given < least || given > most {
		c.add(Problem{Code: "wrong_part_count", Place: at("Computed", row, "Operation"),
			Args: Args{"operation": string(f.Operation), "value": strconv.Itoa(given), "least": strconv.Itoa(least), "most": strconv.Itoa(most)}})
	}
	// What the operation takes by itself are parts too.
	switch f.Operation {
	case Instalment, MonthlyInstalment:
		item.parts = []part{{c.e.byCode[Amount], false}, {c.e.byCode[Term], false}}
	case AgeAtLastPayment:
		item.parts = append(item.parts, part{c.e.byCode[Term], false})
	}
}

// sort lists computed items after their parts. It refuses those in a circle
// and leaves them out, and what is worked out from them.
func (c *compiler) sort(formula map[string]int) {
	const visiting, done, broken = 1, 2, 3
	state := make([]int, len(c.e.items))
	var visit func(i int) bool
	visit = func(i int) bool {
		item := &c.e.items[i]
		switch {
		case item.Kind != Computed || state[i] == done:
			return true
		case state[i] == broken:
			return false
		case state[i] == visiting:
			c.add(Problem{Code: "computed_circle", Place: at("Computed", formula[item.Code], "Characteristic"), Args: Args{"value": item.Code}})
			return false
		}
		state[i] = visiting
		for _, p := range item.parts {
			if !visit(p.index) {
				state[i] = broken
				return false
			}
		}
		state[i] = done
		c.e.order = append(c.e.order, i)
		return true
	}
	for i := range c.e.items {
		visit(i)
	}
}

// compute works out a computed item from its parts' values. An unknown part
// makes it unknown; then one with nothing left, then one that is not
// applicable, does alike, but in a sum what is not applicable counts nothing. A
// missing part makes it missing.
func (e *Edition) compute(item *Item, a *Answers) value {
	v := a.values
	var states stateSet
	told := false
	for _, p := range item.parts {
		x := &v[p.index]
		states |= set(x.state)
		told = told || (x.state == Given && x.told)
	}
	if item.Operation == Sum {
		states &^= set(IsNotApplicable)
	}
	if states.has(Missing) {
		return item.in(Missing)
	}
	for _, s := range outranking {
		if states.has(s) {
			return item.in(s)
		}
	}
	var n Number
	switch item.Operation {
	case Sum:
		sum := int64(0) // eight Numbers cannot overflow it
		for _, p := range item.parts {
			if x := &v[p.index]; p.negative {
				sum -= int64(x.n)
			} else {
				sum += int64(x.n)
			}
		}
		n = clampNumber(sum).Round(int(item.Decimals))
	case Product:
		var factors [MostParts]Number
		for k, p := range item.parts {
			factors[k] = v[p.index].n
		}
		n = product(int(item.Decimals), factors[:len(item.parts)]...)
	case Ratio:
		divisor := v[item.parts[1].index].n
		if divisor <= 0 {
			return item.in(IsNothingLeft)
		}
		n = v[item.parts[0].index].n.Over(divisor, int(item.Decimals))
	case Instalment:
		n = e.instalment(v[item.parts[0].index].n, v[item.parts[1].index].n).Round(int(item.Decimals))
	case MonthlyInstalment:
		n = e.aMonth(e.instalment(v[item.parts[0].index].n, v[item.parts[1].index].n), int(item.Decimals))
	case WholeYears:
		n = years(a.On, a.given[item.parts[0].index].Date)
	case AgeAtLastPayment:
		n = years(e.LastPayment(a.On, v[item.parts[1].index].n), a.given[item.parts[0].index].Date)
	}
	return item.counted(n, told)
}

// outranking are the states of a part that a computed item takes over, the
// first before the next: what is not known is not known to be anything else.
var outranking = [...]State{StatedUnknown, IsNothingLeft, IsNotApplicable}

func years(on, born Date) Number { return Whole(int64(on.WholeYears(born))) }

// findStates tells which states each item can come to have, parts first.
func (c *compiler) findStates() {
	c.states = make([]stateSet, len(c.e.items))
	for i := range c.e.items {
		item := &c.e.items[i]
		c.states[i] = set(Given)
		if item.Kind != Computed && item.UnknownAllowed {
			c.states[i] |= set(StatedUnknown)
		}
		if item.Kind != Computed && item.AskedOnlyIf != "" {
			c.states[i] |= set(IsNotApplicable)
		}
	}
	for _, i := range c.e.order {
		item := &c.e.items[i]
		for _, p := range item.parts {
			c.states[i] |= c.states[p.index]
		}
		switch item.Operation {
		case Sum:
			c.states[i] &^= set(IsNotApplicable)
		case Ratio:
			c.states[i] |= set(IsNothingLeft)
		}
	}
}

// isPayment tells an instalment of either kind.
func (item *Item) isPayment() bool {
	return item.Operation == Instalment || item.Operation == MonthlyInstalment
}

// monthlyMoney refuses to set a payment that falls due every week or
// fortnight against a month's money.
func (c *compiler) monthlyMoney() {
	if unit := c.s.Terms.TermUnit; unit != Weeks && unit != Fortnights {
		return
	}
	monthly := c.e.monthly()
	for i, f := range c.s.Computed {
		item := c.item(f.Characteristic)
		if item == nil || f.Operation != Ratio || len(item.parts) != 2 || !slices.Contains(c.e.order, item.Index) {
			continue
		}
		payment, left := &c.e.items[item.parts[0].index], &c.e.items[item.parts[1].index]
		if payment.Operation == Instalment && monthly[left.Index] {
			c.add(Problem{Code: "instalment_not_monthly", Place: at("Computed", i+1, "Part 1"),
				Args: Args{"value": payment.Code, "against": left.Code, "expected": string(MonthlyInstalment)}})
		}
	}
}

// monthly tells of each item whether it is, or is summed from, a worksheet's
// monthly money.
func (e *Edition) monthly() []bool {
	monthly := make([]bool, len(e.items))
	for i := range e.items {
		monthly[i] = e.items[i].Kind == Worksheet
	}
	for _, i := range e.order {
		for _, p := range e.items[i].parts {
			monthly[i] = monthly[i] || e.items[i].Operation == Sum && monthly[p.index]
		}
	}
	return monthly
}

// Parts are the indexes of what a computed item is worked out from.
func (item *Item) Parts() []int {
	var list []int
	for _, p := range item.parts {
		list = append(list, p.index)
	}
	return list
}

// PaymentShare finds the item that sets the payment against what is left each
// month: the first ratio of an instalment to a worksheet's money. share, payment and left are
// indexes; ok is false where the edition has none.
func (e *Edition) PaymentShare() (share, payment, left int, ok bool) {
	monthly := e.monthly()
	share = slices.IndexFunc(e.items, func(item Item) bool {
		return item.Operation == Ratio && e.items[item.parts[0].index].isPayment() && monthly[item.parts[1].index]
	})
	if share < 0 {
		return 0, 0, 0, false
	}
	parts := e.items[share].parts
	return share, parts[0].index, parts[1].index, true
}
