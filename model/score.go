package model

// A Result is what an edition says of complete answers.
type Result struct {
	LogOdds LogOdds
	PD      PD
	Score   Number // in millionths of a point; shown whole, half away from zero
	Band    int    // place among Scorecard.Bands
	// Recommendation is the band's, made stricter by the rules that fired.
	Recommendation Recommendation
	Fired          RuleSet
	// LargestAmount is the least of the caps that fired.
	LargestAmount Maybe[Number]
}

// value is what one item comes to.
type value struct {
	n     Number
	attr  int // of a choice
	state State
	told  bool
}

// values are all items' values, in space of fixed size.
type values [MostCharacteristics]value

// Score says what the edition makes of complete answers; ok is false while an
// answer is missing.
func (e *Edition) Score(a *Answers) (result Result, ok bool) {
	var v values
	if !e.evaluate(a, &v) {
		return Result{}, false
	}
	sum := e.constant
	for i := range e.items {
		if item := &e.items[i]; item.Use == Scored {
			sum += item.weight(&v[i])
		}
	}
	pd := sum.PD()
	r := Result{LogOdds: sum, PD: pd, Score: e.score(sum), Band: e.band(pd)}
	r.Recommendation = e.card.Bands[r.Band].Recommendation
	e.fire(&v, &r)
	return r, true
}

// score is the points for log-odds, kept to six places.
func (e *Edition) score(l LogOdds) Number {
	points := e.offset - float64(e.factor*l.Float())
	return roundNumber(points)
}

// roundNumber is the nearest Number to f, half away from zero.
func roundNumber(f float64) Number {
	f = float64(f * float64(One))
	switch {
	case f >= float64(Largest):
		return Largest
	case f <= -float64(Largest):
		return -Largest
	case f < 0:
		return -Number(0.5 - f)
	}
	return Number(f + 0.5)
}

// ShownScore is a score in whole points, half away from zero.
func ShownScore(score Number) int64 {
	if score < 0 {
		return -ShownScore(-score)
	}
	return int64((score + One/2) / One)
}

// band is the place of the band that a PD falls in.
func (e *Edition) band(pd PD) int {
	i := len(e.bands) - 1
	for i > 0 && pd < e.bands[i].from {
		i--
	}
	return e.bands[i].index
}

// evaluate works out every item's value; false while one is missing.
func (e *Edition) evaluate(a *Answers, v *values) bool {
	for i := range e.items {
		item := &e.items[i]
		if item.Kind == Computed {
			continue
		}
		if c := item.condition; c != nil && !c.holds(v) {
			v[i].state = IsNotApplicable
			continue
		}
		g := &a.given[i]
		if g.State == Missing || g.State == IsNotApplicable {
			return false
		}
		v[i] = value{n: g.Number, attr: g.Attribute, state: g.State, told: !g.Seen}
		switch item.Kind {
		case Worksheet:
			if g.Lines != nil {
				v[i].n = item.Monthly(g.Lines)
			}
		case DateKind:
			v[i].n = Whole(int64(g.Date.Year))
		}
	}
	for _, i := range e.order {
		v[i] = e.compute(&e.items[i], a, v)
	}
	return true
}

func (c *condition) holds(v *values) bool {
	x := &v[c.index]
	return x.state == Given && c.among&(1<<x.attr) != 0
}

// compute works out a computed item from its parts' values. An unknown part
// makes it unknown; then one with nothing left, then one that is not
// applicable, does alike, but in a sum what is not applicable counts nothing.
func (e *Edition) compute(item *Item, a *Answers, v *values) value {
	var unknown, nothing, none bool
	told := false
	for _, p := range item.parts {
		x := &v[p.index]
		switch x.state {
		case StatedUnknown:
			unknown = true
		case IsNothingLeft:
			nothing = true
		case IsNotApplicable:
			none = none || item.Operation != Sum
		}
		told = told || (x.state == Given && x.told)
	}
	switch {
	case unknown:
		return value{state: StatedUnknown}
	case nothing:
		return value{state: IsNothingLeft, told: told}
	case none:
		return value{state: IsNotApplicable}
	}
	out := value{state: Given, told: told}
	decimals := int(item.Decimals)
	switch item.Operation {
	case Sum:
		for _, p := range item.parts {
			if x := &v[p.index]; x.state != Given {
				continue
			} else if p.negative {
				out.n = out.n.Minus(x.n)
			} else {
				out.n = out.n.Plus(x.n)
			}
		}
		out.n = out.n.Round(decimals)
	case Product:
		out.n = One
		for k, p := range item.parts {
			places := MostDecimals
			if k == len(item.parts)-1 {
				places = decimals
			}
			out.n = out.n.Times(v[p.index].n, places)
		}
	case Ratio:
		divisor := v[item.parts[1].index].n
		if divisor <= 0 {
			return value{state: IsNothingLeft, told: told}
		}
		out.n = v[item.parts[0].index].n.Over(divisor, decimals)
	case Instalment:
		out.n = e.instalment(v[item.parts[0].index].n, v[item.parts[1].index].n).Round(decimals)
	case WholeYears:
		out.n = Whole(int64(a.On.WholeYears(a.given[item.parts[0].index].Date)))
	case AgeAtLastPayment:
		last := e.LastPayment(a.On, v[item.parts[1].index].n)
		out.n = Whole(int64(last.WholeYears(a.given[item.parts[0].index].Date)))
	}
	return out
}

// weight is the log-odds that an item's value adds.
func (item *Item) weight(x *value) LogOdds {
	switch x.state {
	case StatedUnknown:
		return item.weights[item.unknown]
	case IsNotApplicable:
		return item.weights[item.notApplies]
	case IsNothingLeft:
		return item.weights[item.nothingLeft]
	}
	if item.Kind == Choice || item.Kind == YesNo {
		return item.weights[x.attr]
	}
	return item.weightOf(x.n)
}

// weightOf is the log-odds of a number: its band's, and slope × value.
func (item *Item) weightOf(n Number) LogOdds {
	n = min(max(n, item.from), item.to)
	var sum LogOdds
	if i := item.bandOf(n); i >= 0 {
		sum = item.weights[item.at[i]]
	}
	if item.slope.Digits != 0 {
		sum += item.slope.At(n)
	}
	return sum
}

// bandOf is the place among floors of a clamped number, -1 without bands.
func (item *Item) bandOf(n Number) int {
	i := len(item.floors) - 1
	for i > 0 && n < item.floors[i] {
		i--
	}
	return i
}

// attributeOf is the place among Attributes of a value, -1 where it has none.
func (item *Item) attributeOf(x value) int {
	switch {
	case x.state == StatedUnknown:
		return item.unknown
	case x.state == IsNotApplicable:
		return item.notApplies
	case x.state == IsNothingLeft:
		return item.nothingLeft
	case x.state != Given:
		return -1
	case item.Kind == Choice || item.Kind == YesNo:
		return x.attr
	}
	if i := item.bandOf(min(max(x.n, item.from), item.to)); i >= 0 {
		return item.at[i]
	}
	return -1
}
