package model

import (
	"strconv"
	"strings"
)

// checks scores every specimen and compares, then lists what no specimen
// uses: that is how a slipped row or a swapped sign is caught before an
// applicant meets it.
func (c *compiler) checks() {
	used := newUsage(c.e)
	ok := true
	for i, check := range c.s.Checks {
		a, good := c.specimen(i, check)
		if !good {
			ok = false
			continue
		}
		result, complete := c.e.Score(a)
		if !complete {
			c.incomplete(i, a)
			ok = false
			continue
		}
		used.note(a, result)
		c.compare(i, check, result)
	}
	if len(c.s.Checks) == 0 {
		c.add(Problem{Code: "no_checks", Place: at("Checks", 0, "")})
		return
	}
	if !ok {
		return // what is unused cannot be known yet
	}
	for _, p := range used.untouched() {
		c.add(p)
	}
}

// specimen reads a check's answers.
func (c *compiler) specimen(i int, check Check) (*Answers, bool) {
	client := c.s.Card.For
	if client == AllClients {
		client = NewClients
	}
	a := c.e.NewAnswers(c.s.Card.IssuedOn, client)
	good := true
	for _, answer := range check.Answers {
		item := c.item(answer.Characteristic)
		x, err := c.e.ParseAnswer(item.Index, answer.Answer)
		if err != nil {
			p := err.(Problem)
			p.Place = at("Checks", i+1, answer.Characteristic)
			c.add(p)
			good = false
		}
		a.Put(item.Index, x)
	}
	for _, code := range strings.FieldsFunc(check.Seen, func(r rune) bool { return r == ',' || r == ' ' }) {
		item := c.item(code)
		if item == nil || item.Kind == Computed {
			c.unknown(at("Checks", i+1, "Seen"), code)
			good = false
			continue
		}
		a.given[item.Index].Seen = true
	}
	return a, good
}

// incomplete lists the answers that a check lacks.
func (c *compiler) incomplete(i int, a *Answers) {
	for _, m := range c.e.Bound(a).Missing {
		c.add(Problem{Code: "answer_missing", Place: at("Checks", i+1, c.e.items[m].Code), Args: Args{"value": c.e.items[m].Code}})
	}
}

// Tolerances of a check: log-odds and PD to a millionth, score to half a point.
const (
	logOddsTolerance = LogOddsOne / 1_000_000
	pdTolerance      = PDOne / 1_000_000
	scoreTolerance   = One / 2
)

func (c *compiler) compare(i int, check Check, r Result) {
	differs := func(column, said, ours string) {
		c.add(Problem{Code: "check_differs", Place: at("Checks", i+1, column), Args: Args{"check": check.Code, "value": said, "ours": ours}})
	}
	if d := check.LogOdds - r.LogOdds; d > logOddsTolerance || d < -logOddsTolerance {
		differs("Log-odds", check.LogOdds.String(), r.LogOdds.String())
	}
	if d := check.PD - r.PD; d > pdTolerance || d < -pdTolerance {
		differs("PD", check.PD.String(), r.PD.String())
	}
	if d := check.Score - r.Score; d > scoreTolerance || d < -scoreTolerance {
		differs("Score", check.Score.String(), r.Score.String())
	}
	if band := c.s.Bands[r.Band].Code; band != check.Band {
		differs("Band", check.Band, band)
	}
	if r.Recommendation != check.Recommendation {
		differs("Recommendation", string(check.Recommendation), string(r.Recommendation))
	}
}

// usage notes which attributes, slopes, rules and bands the checks use.
type usage struct {
	e          *Edition
	attributes []uint64 // by item
	slopes     []bool   // by item
	rules      RuleSet
	bands      uint64
}

func newUsage(e *Edition) *usage {
	return &usage{e: e, attributes: make([]uint64, len(e.items)), slopes: make([]bool, len(e.items))}
}

func (u *usage) note(a *Answers, r Result) {
	var v values
	u.e.evaluate(a, &v)
	for i := range u.e.items {
		item := &u.e.items[i]
		if n := item.attributeOf(v[i]); n >= 0 {
			u.attributes[i] |= 1 << n
		}
		if v[i].state == Given && item.slope.At(v[i].n) != 0 {
			u.slopes[i] = true
		}
	}
	u.rules |= r.Fired
	u.bands |= 1 << r.Band
}

// untouched lists what no check uses, where it stands in the workbook.
func (u *usage) untouched() []Problem {
	var list []Problem
	add := func(place Place, what, value string) {
		list = append(list, Problem{Code: "untouched_" + what, Place: place, Args: Args{"value": value}})
	}
	for i, a := range u.e.card.Attributes {
		item := &u.e.items[u.e.byCode[a.Characteristic]]
		place := at("Attributes", i+1, "Attribute")
		if item.Use != Scored {
			continue
		}
		if a.Code == "" {
			if !u.slopes[item.Index] {
				add(place, "slope", item.Code)
			}
			continue
		}
		for n := range item.Attributes {
			if item.Attributes[n].Code == a.Code && u.attributes[item.Index]&(1<<n) == 0 {
				add(place, "attribute", item.Code+"."+a.Code)
			}
		}
	}
	for i, row := range u.e.card.Rules {
		for n := range u.e.rules {
			if u.e.rules[n].Code == row.Code && !u.rules.Has(n) && u.firstRow(row.Code) == i {
				add(at("Rules", i+1, "Rule"), "rule", row.Code)
			}
		}
	}
	for i, b := range u.e.card.Bands {
		if u.bands&(1<<i) == 0 {
			add(at("Bands", i+1, "Band"), "band", b.Code)
		}
	}
	return list
}

func (u *usage) firstRow(rule string) int {
	for i, row := range u.e.card.Rules {
		if row.Code == rule {
			return i
		}
	}
	return -1
}

// Check lists what is wrong or worth a question in the answers given so far:
// a loan outside the product, and, as warnings, numbers outside what is
// accepted and a date to come. What is missing is no problem here.
func (e *Edition) Check(a *Answers) []Problem {
	var list []Problem
	for i := range e.items {
		if e.items[i].Kind != Computed && a.given[i].State == Given {
			list = append(list, e.CheckAnswer(a, i)...)
		}
	}
	return list
}

// CheckAnswer does for one answer what Check does for all.
func (e *Edition) CheckAnswer(a *Answers, index int) []Problem {
	item, g := &e.items[index], a.given[index]
	if g.State != Given {
		return nil
	}
	var list []Problem
	add := func(code string, warning bool, args Args) {
		list = append(list, Problem{Code: code, Place: answerPlace(item.Code), Args: args, Warning: warning})
	}
	n := g.Number
	switch item.Kind {
	case Choice, YesNo:
		return nil
	case DateKind:
		if a.On.Before(g.Date) && g.Date.Year >= a.On.Year && !(g.Date.YearAlone() && g.Date.Year == a.On.Year) {
			add("date_to_come", true, Args{"value": g.Date.String()})
		}
		n = Whole(int64(g.Date.Year))
	case Worksheet:
		if g.Lines != nil {
			n = item.Monthly(g.Lines)
		}
	}
	t := e.card.Terms
	switch item.Code {
	case Amount:
		if n < t.SmallestAmount || n > t.LargestAmount {
			add("outside_product", false, Args{"value": n.String(), "least": t.SmallestAmount.String(), "most": t.LargestAmount.String()})
		} else if (n-t.SmallestAmount)%t.AmountStep != 0 && n%t.AmountStep != 0 {
			add("amount_not_in_steps", false, Args{"value": n.String(), "step": t.AmountStep.String()})
		}
	case Term:
		if n < Whole(int64(t.ShortestTerm)) || n > Whole(int64(t.LongestTerm)) {
			add("outside_product", false, Args{"value": n.String(), "least": strconv.Itoa(int(t.ShortestTerm)), "most": strconv.Itoa(int(t.LongestTerm))})
		}
	}
	if (item.LowestAccepted.Set && n < item.LowestAccepted.Value) || (item.HighestAccepted.Set && n > item.HighestAccepted.Value) {
		add("outside_accepted", true, Args{"value": n.String(),
			"least": item.LowestAccepted.Or(-Largest).String(), "most": item.HighestAccepted.Or(Largest).String()})
	}
	return list
}
