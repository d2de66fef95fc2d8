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
	// LargestAmount is the least of the caps that fired. It does not touch the
	// recommendation: what was asked may be more.
	LargestAmount Maybe[Number]
}

// value is what one item comes to.
type value struct {
	n     Number // of a number or a date, its year
	attr  int8   // place among Attributes: of a choice, a band, a reserved state; -1 for none
	state State
	told  bool // what is Given was only told
}

// values are all items' values, in space of fixed size.
type values [MostCharacteristics]value

// valueOf is what an answer comes to.
func (item *Item) valueOf(g *Answer) value {
	if g.State != Given {
		return value{state: g.State, attr: int8(item.stateAttribute(g.State))}
	}
	x := value{n: g.Number, attr: -1, state: Given, told: !g.Seen}
	switch item.Kind {
	case Choice, YesNo:
		x.n, x.attr = 0, int8(g.Attribute)
		return x
	case DateKind:
		x.n = Whole(int64(g.Date.Year))
	case Worksheet:
		if g.Lines != nil {
			x.n = item.Monthly(g.Lines)
		}
	}
	x.attr = int8(item.bandOf(x.n))
	return x
}

// Score says what the edition makes of complete answers; ok is false while an
// answer is missing.
func (e *Edition) Score(a *Answers) (result Result, ok bool) {
	var v values
	if !e.evaluate(a, &v) {
		return Result{}, false
	}
	sum := e.constant
	for _, i := range e.scored {
		sum += e.items[i].weight(&v[i])
	}
	pd := sum.PD()
	result = Result{LogOdds: sum, PD: pd, Score: e.ScoreOf(sum), Band: e.band(pd)}
	result.Recommendation = e.card.Bands[result.Band].Recommendation
	e.fire(&v, &result)
	return result, true
}

// evaluate works out every item's value; false while one is missing.
func (e *Edition) evaluate(a *Answers, v *values) bool {
	for _, i := range e.asked {
		x := a.values[i]
		if c := e.items[i].condition; c != nil && !c.holds(v) {
			x = value{state: IsNotApplicable, attr: int8(e.items[i].notApplies)}
		} else if x.state == Missing || x.state == IsNotApplicable {
			return false
		}
		v[i] = x
	}
	for _, i := range e.order {
		v[i] = e.compute(&e.items[i], a, v)
	}
	return true
}

// weight is the log-odds that an item's value adds.
func (item *Item) weight(x *value) LogOdds {
	var sum LogOdds
	if x.attr >= 0 {
		sum = item.weights[x.attr]
	}
	if item.slope.Digits != 0 && x.state == Given {
		sum += item.slope.At(item.clamp(x.n))
	}
	return sum
}

// weightOf is the log-odds of a number.
func (item *Item) weightOf(n Number) LogOdds {
	return item.weight(&value{n: n, attr: int8(item.bandOf(n)), state: Given})
}

// band is the place of the band that a PD falls in.
func (e *Edition) band(pd PD) int {
	i := len(e.bands) - 1
	for i > 0 && pd < e.bands[i] {
		i--
	}
	return i
}
