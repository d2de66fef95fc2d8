package model

import "strings"

// checks scores every specimen and compares, then lists what no specimen
// uses: that is how a slipped row or a swapped sign is caught before an
// applicant meets it.
func (c *compiler) checks() {
	if len(c.s.Checks) == 0 {
		c.add(Problem{Code: "no_checks", Place: at("Checks", 0, "")})
		return
	}
	used := newUsage(c.e)
	seen := map[string]bool{}
	complete := true
	for i, check := range c.s.Checks {
		c.onlyOnce(seen, check.Code, at("Checks", i+1, "Check"))
		a, good := c.specimen(i, check)
		complete = complete && good
		if good {
			result, _ := c.e.Score(a)
			used.note(a, result)
			c.compare(i, check, a, result)
		}
	}
	if complete { // else what is unused cannot be known yet
		c.untouched(used)
	}
}

// specimen reads a check's answers; false where they do not read or are not
// complete.
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
			continue
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
		x := a.At(item.Index)
		x.Seen = true
		a.Put(item.Index, x)
	}
	if good {
		for _, m := range c.e.Bound(a).Missing {
			c.add(Problem{Code: "answer_missing", Place: at("Checks", i+1, c.e.items[m].Code), Args: Args{"value": c.e.items[m].Code}})
			good = false
		}
	}
	return a, good
}

// Tolerances of a check: log-odds and PD to a millionth, score to half a point.
const (
	logOddsTolerance = LogOddsOne / 1_000_000
	pdTolerance      = PDOne / 1_000_000
	scoreTolerance   = One / 2
)

// compare lists where a check is not reproduced. Where the log-odds differ, PD,
// score, band and recommendation only follow from that and are passed over.
func (c *compiler) compare(i int, check Check, a *Answers, r Result) {
	if d := check.LogOdds - r.LogOdds; d > logOddsTolerance || d < -logOddsTolerance {
		c.add(Problem{Code: "check_log_odds_differ", Place: at("Checks", i+1, "Log-odds"), Args: Args{"check": check.Code,
			"value": check.LogOdds.String(), "ours": r.LogOdds.String(), "difference": (-d).String(), "suspect": suspect(a, d)}})
		return
	}
	differs := func(column, said, ours string) {
		c.add(Problem{Code: "check_differs", Place: at("Checks", i+1, column), Args: Args{"check": check.Code, "value": said, "ours": ours}})
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

// suspect names the coefficient whose sign, turned round, would explain what a
// check says less what we find; empty where there is none.
func suspect(a *Answers, difference LogOdds) string {
	e := a.edition
	explains := func(weight LogOdds) bool {
		d := difference + 2*weight
		return weight != 0 && -logOddsTolerance <= d && d <= logOddsTolerance
	}
	if explains(e.card.Card.BaseLogOdds) {
		return Base
	}
	v, _ := a.whole()
	for i := range e.items {
		item, x := &e.items[i], &v[i]
		if item.Use != Scored {
			continue
		}
		if x.attr >= 0 && explains(item.weights[x.attr]) {
			return item.Code + "." + item.Attributes[x.attr].Code
		}
		if x.state == Given && item.slope.Digits != 0 && explains(item.slope.At(item.clamp(x.n))) {
			return item.Code
		}
	}
	return ""
}

// usage notes which attributes, slopes, rules and bands the checks use.
type usage struct {
	attributes []uint64 // by item
	slopes     []bool   // by item
	rules      RuleSet
	bands      uint64
}

func newUsage(e *Edition) *usage {
	return &usage{attributes: make([]uint64, len(e.items)), slopes: make([]bool, len(e.items))}
}

func (u *usage) note(a *Answers, r Result) {
	e := a.edition
	v, _ := a.whole()
	for i := range e.items {
		if v[i].attr >= 0 {
			u.attributes[i] |= 1 << v[i].attr
		}
		// At 0 a slope, right or wrong, does not show.
		if v[i].state == Given && e.items[i].clamp(v[i].n) != 0 {
			u.slopes[i] = true
		}
	}
	u.rules |= r.Fired
	u.bands |= 1 << r.Band
}

// untouched lists what no check uses, where it stands in the workbook.
func (c *compiler) untouched(u *usage) {
	add := func(code, sheet string, row int, column, value string) {
		c.add(Problem{Code: code, Place: at(sheet, row, column), Args: Args{"value": value}})
	}
	for i, a := range c.s.Attributes {
		item := c.item(a.Characteristic)
		if item.Use != Scored {
			continue
		}
		if a.Code == "" {
			if !u.slopes[item.Index] {
				add("untouched_slope", "Attributes", i+1, "Attribute", item.Code)
			}
			continue
		}
		for n := range item.Attributes {
			if item.Attributes[n].Code == a.Code && u.attributes[item.Index]>>n&1 == 0 {
				add("untouched_attribute", "Attributes", i+1, "Attribute", coefficient(a))
			}
		}
	}
	seen := map[string]bool{}
	for i, row := range c.s.Rules {
		if seen[row.Code] {
			continue
		}
		if n := len(seen); !u.rules.Has(n) {
			add("untouched_rule", "Rules", i+1, "Rule", row.Code)
		}
		seen[row.Code] = true
	}
	for i, b := range c.s.Bands {
		if u.bands>>i&1 == 0 {
			add("untouched_band", "Bands", i+1, "Band", b.Code)
		}
	}
}
