package model

import (
	"fmt"
	"slices"
	"strings"

	"pgregory.net/rapid"
)

// Random scorecards and answers for the property tests: every kind, use,
// operation, test and effect, conditions on conditions, computed on computed.

// text is anything that can stand in a cell, combining characters and line
// ends of every sort among it.
var text = rapid.Custom(func(t *rapid.T) string {
	pieces := rapid.SliceOfN(rapid.SampledFrom([]string{"a", "B", " ", "\t", "\n", "\r\n", "\r", `\`, `\n`, "é", "e\u0301", "o\u0308\u0323", "한", "\u1112\u1161\u11ab", "|", `"`, "𝄞", "عرب"}), 0, 6).Draw(t, "text")
	return "x" + strings.Join(pieces, "")
})

var weight = rapid.Custom(func(t *rapid.T) LogOdds {
	return LogOdds(rapid.OneOf(rapid.Int64Range(-3e9, 3e9), rapid.SampledFrom([]int64{0, 1, -1, int64(largestLogOdds), -int64(largestLogOdds)})).Draw(t, "log-odds"))
})

var slope = rapid.Custom(func(t *rapid.T) Slope {
	text := fmt.Sprintf("%de-%d", rapid.Int64Range(-999_999_999_999, 999_999_999_999).Draw(t, "digits"), 0)
	text = strings.TrimSuffix(text, "e-0")
	sign := strings.HasPrefix(text, "-")
	digits := fmt.Sprintf("%016s", strings.TrimPrefix(text, "-"))
	places := rapid.IntRange(3, 15).Draw(t, "places")
	text = digits[:16-places] + "." + digits[16-places:]
	if sign {
		text = "-" + text
	}
	s, err := ParseSlope(text)
	if err != nil {
		t.Fatalf("%s: %v", text, err)
	}
	return s
})

// numberOf draws a number of an item, more often near where things change.
func numberOf(t *rapid.T, decimals int) Number {
	step := Number(pow10[MostDecimals-decimals])
	n := rapid.OneOf(
		rapid.Int64Range(-50, 200),
		rapid.Int64Range(-10_000_000, 10_000_000),
		rapid.SampledFrom([]int64{0, 1, -1, 10, 20, int64(Largest), -int64(Largest)}),
	).Draw(t, "n")
	return clampTo(n, int64(step)).Round(decimals)
}

// cuts draws rising limits.
func cuts(t *rapid.T, most int) []Number {
	var list []Number
	for _, n := range rapid.SliceOfNDistinct(rapid.Int64Range(-20, 120), 0, most, rapid.ID[int64]).Draw(t, "cuts") {
		list = append(list, Number(n)*One/2)
	}
	slices.Sort(list)
	return list
}

type drawing struct {
	*rapid.T
	s Scorecard
}

func (d *drawing) chance(what string) bool { return rapid.Bool().Draw(d.T, what) }

// drawScorecard draws a scorecard that compiles but for its checks, which are
// rows of anything.
func drawScorecard(t *rapid.T) Scorecard {
	d := &drawing{T: t}
	d.card()
	d.terms()
	d.asked()
	d.computed()
	for i := range d.s.Characteristics {
		d.attributes(&d.s.Characteristics[i])
	}
	d.reserved()
	d.bands()
	d.rules()
	d.rest()
	return d.s
}

func (d *drawing) card() {
	d.s.Card = Card{
		Format: 1, ProductCode: "p", Product: text.Draw(d.T, "product"), For: AllClients, Title: text.Draw(d.T, "title"),
		Edition: 1, Lender: text.Draw(d.T, "lender"), DefaultMeans: "late", WithinMonths: 12, HowMade: Judged,
		IssuedOn: Date{2024, 2, 29}, InForceFrom: Date{2024, 3, 1}, ReviewBy: Date{2025, 3, 1}, LogOddsOf: OfDefault,
		BaseLogOdds: weight.Draw(d.T, "base"), ReferenceScore: numberOf(d.T, 0), ReferenceOdds: Whole(rapid.Int64Range(1, 100).Draw(d.T, "odds")),
		PointsToDouble: Whole(rapid.Int64Range(1, 100).Draw(d.T, "points")), ResultShown: WhenComplete, AnswersGoodDays: 30,
		PreparedBy: "A", ApprovedBy: "B", Complaints: "C", Notes: text.Draw(d.T, "notes"),
	}
	if d.chance("adjusted") {
		d.s.Card.Adjustment = Some(weight.Draw(d.T, "adjustment"))
	}
}

func (d *drawing) terms() {
	d.s.Terms = Terms{
		Currency: "crowns", MoneyDecimals: 2, SmallestAmount: Whole(100), LargestAmount: Whole(5000), AmountStep: Whole(700),
		TermUnit:     rapid.SampledFrom([]TermUnit{Weeks, Fortnights, Months}).Draw(d.T, "unit"),
		ShortestTerm: 1, LongestTerm: Count(rapid.IntRange(1, 15).Draw(d.T, "longest")),
		Repayment: rapid.SampledFrom([]Repayment{EqualPayments, InterestThenPrincipal, AllAtTheEnd}).Draw(d.T, "repayment"),
		Rate:      Rate(rapid.Int64Range(0, 999_999_999).Draw(d.T, "rate")),
		RatePer:   rapid.SampledFrom([]RatePer{PerYear, PerMonth}).Draw(d.T, "per"),
		Method:    rapid.SampledFrom([]InterestMethod{Declining, Flat}).Draw(d.T, "method"),
	}
	if d.chance("fee") {
		d.s.Terms.FeeAmount = Some(Whole(9))
	}
	if d.chance("payment rounded") {
		d.s.Terms.PaymentRoundedTo = Some(Whole(5))
	}
}

func (d *drawing) asked() {
	for i := range rapid.IntRange(1, 7).Draw(d.T, "asked") {
		c := Characteristic{Code: fmt.Sprintf("q%d", i), Question: text.Draw(d.T, "question")}
		c.Kind = rapid.SampledFrom([]Kind{Choice, YesNo, Numeric, DateKind, Worksheet}).Draw(d.T, "kind")
		c.Use = rapid.SampledFrom([]Use{Scored, Recorded, Watched}).Draw(d.T, "use")
		if c.Use == Scored && c.Kind == DateKind {
			c.Use = Recorded
		}
		c.Decimals = Count(rapid.SampledFrom([]int{0, 2, 6}).Draw(d.T, "decimals"))
		c.UnknownAllowed = d.chance("unknown allowed")
		c.LawfulGround = "tested"
		if earlier := d.choices(); len(earlier) > 0 && d.chance("conditional") {
			source := rapid.SampledFrom(earlier).Draw(d.T, "source")
			c.AskedOnlyIf = source.Code + rapid.SampledFrom([]string{" is a", " is not a", " is one of a, b"}).Draw(d.T, "condition")
			if source.Kind == YesNo {
				c.AskedOnlyIf = source.Code + rapid.SampledFrom([]string{" is yes", " is not yes", " is no"}).Draw(d.T, "condition")
			}
		}
		if c.Kind == Worksheet {
			for k := range rapid.IntRange(1, 3).Draw(d.T, "lines") {
				d.s.Lines = append(d.s.Lines, Line{c.Code, fmt.Sprintf("l%d", k), text.Draw(d.T, "label"),
					rapid.SampledFrom([]Flow{Adds, TakesAway}).Draw(d.T, "flow"), rapid.SampledFrom(periods).Draw(d.T, "period")})
			}
		}
		d.s.Characteristics = append(d.s.Characteristics, c)
	}
	if d.chance("amount listed") {
		d.s.Characteristics = append(d.s.Characteristics, Characteristic{Code: Amount, Question: "How much?", Kind: Numeric, Decimals: 2,
			Use: rapid.SampledFrom([]Use{Scored, Recorded}).Draw(d.T, "amount use")})
	}
	if d.chance("term listed") {
		d.s.Characteristics = append(d.s.Characteristics, Characteristic{Code: Term, Question: "How long?", Kind: Numeric,
			Use: rapid.SampledFrom([]Use{Scored, Recorded}).Draw(d.T, "term use")})
	}
}

var periods = []Period{Day, Week, Fortnight, Month, Season, Year}

func (d *drawing) where(f func(c Characteristic) bool) []Characteristic {
	var list []Characteristic
	for _, c := range d.s.withReserved() {
		if f(c) {
			list = append(list, c)
		}
	}
	return list
}

func (d *drawing) choices() []Characteristic {
	return d.where(func(c Characteristic) bool { return c.Kind == Choice || c.Kind == YesNo })
}

func (d *drawing) computed() {
	for i := range rapid.IntRange(0, 5).Draw(d.T, "computed") {
		c := Characteristic{Code: fmt.Sprintf("c%d", i), Question: "Computed", Kind: Computed, LawfulGround: "tested",
			Use: rapid.SampledFrom([]Use{Scored, Recorded}).Draw(d.T, "use"), Decimals: Count(rapid.SampledFrom([]int{0, 3, 6}).Draw(d.T, "decimals"))}
		f := Formula{Characteristic: c.Code, Operation: rapid.SampledFrom([]Operation{Sum, Product, Ratio, Ratio, Instalment, MonthlyInstalment, WholeYears, AgeAtLastPayment}).Draw(d.T, "operation")}
		usable := d.where(func(c Characteristic) bool { return c.Kind == Numeric || c.Kind == Worksheet || c.Kind == Computed })
		count := 0
		switch f.Operation {
		case Sum:
			count = rapid.IntRange(1, 8).Draw(d.T, "parts")
		case Product:
			count = rapid.IntRange(2, 5).Draw(d.T, "parts")
		case Ratio:
			count = 2
		case WholeYears, AgeAtLastPayment:
			count = 1
			if usable = d.where(func(c Characteristic) bool { return c.Kind == DateKind }); len(usable) == 0 {
				f.Operation, count = Instalment, 0
			}
		}
		for k := range count {
			f.Parts[k].Code = rapid.SampledFrom(usable).Draw(d.T, "part").Code
			if f.Operation == Sum {
				f.Parts[k].Sign = rapid.SampledFrom([]Sign{"", Plus, Minus}).Draw(d.T, "sign")
			}
		}
		d.s.Computed = append(d.s.Computed, f)
		// A formula may stand before its parts.
		at := rapid.IntRange(0, len(d.s.Characteristics)).Draw(d.T, "place")
		d.s.Characteristics = slices.Insert(d.s.Characteristics, at, c)
	}
	// A payment that is not due every month has no ratio to a month's money.
	for _, f := range d.s.Computed {
		for i := range d.s.Computed {
			g := &d.s.Computed[i]
			if f.Operation == Ratio && g.Operation == Instalment && g.Characteristic == f.Parts[0].Code && d.s.Terms.TermUnit != Months {
				g.Operation = MonthlyInstalment
			}
		}
	}
	slices.Reverse(d.s.Computed)
}

func (d *drawing) attributes(c *Characteristic) {
	add := func(a Attribute) {
		a.Characteristic, a.Label = c.Code, text.Draw(d.T, "label")
		if c.Use == Scored {
			a.LogOdds = Some(weight.Draw(d.T, "log-odds"))
			if d.s.Covariance != nil && d.chance("has an error") {
				a.StandardError = Some(Slope{1, 1})
			}
		}
		d.s.Attributes = append(d.s.Attributes, a)
	}
	if c.Use == Scored {
		c.AverageLogOdds = Some(weight.Draw(d.T, "average"))
	}
	switch c.Kind {
	case Choice:
		for _, code := range []string{"a", "b", "c"} {
			add(Attribute{Code: code})
		}
	case YesNo:
		if c.Use == Scored || d.chance("labelled") {
			add(Attribute{Code: Yes})
			add(Attribute{Code: No})
		}
	case DateKind:
	default:
		banded, sloped := d.chance("banded"), c.Use == Scored && d.chance("sloped")
		if c.Use == Scored && !sloped {
			banded = true
		}
		if sloped || d.chance("counted") {
			c.CountedFrom, c.CountedTo = Some(Whole(-5)), Some(Whole(rapid.Int64Range(-5, 50).Draw(d.T, "counted to")))
		}
		if sloped {
			d.s.Attributes = append(d.s.Attributes, Attribute{Characteristic: c.Code, Slope: Some(slope.Draw(d.T, "slope"))})
		}
		if banded {
			var from Maybe[Number]
			for k, cut := range cuts(d.T, 4) {
				add(Attribute{Code: fmt.Sprintf("b%d", k), From: from, Below: Some(cut)})
				from = Some(cut)
			}
			add(Attribute{Code: "last", From: from})
		}
	}
}

// reserved adds the reserved attributes that are demanded.
func (d *drawing) reserved() {
	for _, p := range gather(d.s).problems {
		if code, attribute, _ := strings.Cut(p.Args["value"], "."); p.Code == "attribute_missing" {
			d.s.Attributes = append(d.s.Attributes, Attribute{Characteristic: code, Code: attribute, Label: attribute, LogOdds: Some(weight.Draw(d.T, "reserved"))})
		}
	}
}

func (d *drawing) bands() {
	list := rapid.SliceOfNDistinct(rapid.Int64Range(1, int64(PDOne)-1), 0, 3, rapid.ID[int64]).Draw(d.T, "bands")
	slices.Sort(list)
	to := []Recommendation{Approve, Refer, Decline}
	strict := 0
	var from Maybe[PD]
	for i := range len(list) + 1 {
		strict = rapid.IntRange(strict, 2).Draw(d.T, "recommendation")
		b := Band{Code: fmt.Sprintf("band%d", i), Label: text.Draw(d.T, "label"), From: from, Recommendation: to[strict]}
		if i < len(list) {
			b.Below = Some(PD(list[i]))
			from = b.Below
		}
		d.s.Bands = append(d.s.Bands, b)
	}
}

func (d *drawing) rules() {
	e := gather(d.s).e
	c := gather(d.s)
	for i := range rapid.IntRange(0, 6).Draw(d.T, "rules") {
		effect := rapid.SampledFrom([]Effect{DeclineEffect, ReferEffect, LargestAmount, Note}).Draw(d.T, "effect")
		amount := Maybe[Number]{}
		if effect == LargestAmount {
			amount = Some(Whole(rapid.Int64Range(1, 4000).Draw(d.T, "cap")))
		}
		for k := range rapid.IntRange(1, 3).Draw(d.T, "rows") {
			item := rapid.SampledFrom(e.items).Draw(d.T, "about")
			row := Rule{Code: fmt.Sprintf("r%d", i), Characteristic: item.Code}
			if k == 0 {
				row.Label, row.Effect, row.Amount, row.Text = "Rule", effect, amount, text.Draw(d.T, "text")
			}
			tests := []Test{Is, IsNot, OneOf, ToldOnly, Below, AtMost, Above, AtLeast, Between}
			if item.isChoice() {
				tests = tests[:4]
			}
			if c.states[item.Index].has(StatedUnknown) {
				tests = append([]Test{IsUnknown}, tests...)
			}
			row.Test = rapid.SampledFrom(tests).Draw(d.T, "test")
			var names []string // what may be named
			for _, a := range item.Attributes {
				names = append(names, a.Code)
			}
			for _, r := range reservedStates {
				if c.states[item.Index].has(r.state) && !slices.Contains(names, r.code) {
					names = append(names, r.code)
				}
			}
			n := numberOf(d.T, 0)
			if item.Kind == DateKind {
				n = Whole(rapid.Int64Range(1950, 2030).Draw(d.T, "year"))
			}
			if !item.isChoice() {
				names = append(names, n.String())
			}
			switch row.Test {
			case Is, IsNot:
				row.Value = Value(rapid.SampledFrom(names).Draw(d.T, "name"))
			case OneOf:
				row.Value = Value(strings.Join(rapid.SliceOfN(rapid.SampledFrom(names), 1, 3).Draw(d.T, "names"), ", "))
			case Between:
				row.Value = Value(n.String() + " to " + n.Plus(Whole(20)).String())
			case Below, AtMost, Above, AtLeast:
				row.Value = Value(n.String())
			}
			d.s.Rules = append(d.s.Rules, row)
		}
	}
}

// rest draws what has no part in a result.
func (d *drawing) rest() {
	for i := range rapid.IntRange(0, 2).Draw(d.T, "overrides") {
		d.s.Overrides = append(d.s.Overrides, Override{fmt.Sprintf("o%d", i), text.Draw(d.T, "label"), Safer})
	}
	for i := range rapid.IntRange(0, 2).Draw(d.T, "words") {
		d.s.Words = append(d.s.Words, Wording{fmt.Sprintf("q%d", i), "fr", text.Draw(d.T, "wording")})
	}
	e := gather(d.s).e
	for i := range rapid.IntRange(0, 2).Draw(d.T, "checks") {
		check := Check{Code: fmt.Sprintf("k%d", i), Band: "a", Recommendation: Refer, Seen: "amount, term",
			LogOdds: weight.Draw(d.T, "log-odds"), PD: PD(rapid.Int64Range(0, int64(PDOne)).Draw(d.T, "PD")), Score: Number(rapid.Int64Range(-1e11, 1e11).Draw(d.T, "score"))}
		a := drawAnswers(d.T, e)
		for _, n := range e.asked {
			if text := e.AnswerText(n, a.At(n)); text != "" {
				check.Answers = append(check.Answers, CheckAnswer{e.items[n].Code, text})
			}
		}
		d.s.Checks = append(d.s.Checks, check)
	}
	if d.chance("covariance") {
		v := &Covariance{Names: []string{Base}}
		for _, a := range d.s.Attributes {
			if a.LogOdds.Set || a.Slope.Set {
				v.Names = append(v.Names, coefficient(a))
			}
		}
		for i := range v.Names {
			row := make([]Covar, len(v.Names))
			row[i] = Covar(rapid.SampledFrom([]float64{0, 0.01, 1.23456789012e-20, 4}).Draw(d.T, "variance"))
			v.Values = append(v.Values, row)
		}
		d.s.Covariance = v
	}
}

// drawAnswers answers every question, those too that turn out not to be asked.
func drawAnswers(t *rapid.T, e *Edition) *Answers {
	a := e.NewAnswers(rapid.SampledFrom([]Date{{2024, 2, 29}, {2026, 3, 1}, {2026, 12, 31}}).Draw(t, "on"),
		rapid.SampledFrom([]ClientKind{NewClients, RepeatClients}).Draw(t, "client"))
	for _, i := range e.asked {
		a.Put(i, drawAnswer(t, &e.items[i]))
	}
	return a
}

func drawAnswer(t *rapid.T, item *Item) Answer {
	if item.UnknownAllowed && rapid.IntRange(0, 3).Draw(t, "unknown") == 0 {
		return Answer{State: StatedUnknown}
	}
	x := Answer{State: Given, Seen: rapid.Bool().Draw(t, "seen")}
	switch item.Kind {
	case Choice, YesNo:
		for {
			if x.Attribute = rapid.IntRange(0, len(item.Attributes)-1).Draw(t, "attribute"); !reserved(item.Attributes[x.Attribute].Code) {
				return x
			}
		}
	case DateKind:
		x.Date = rapid.SampledFrom([]Date{{Year: 1800}, {Year: 1980}, {1980, 2, 29}, {2004, 2, 29}, {2006, 3, 1}, {2007, 1, 31}, {Year: 2024}, {2999, 12, 31}}).Draw(t, "date")
	case Worksheet:
		x.Number = numberOf(t, int(item.Decimals))
		if rapid.Bool().Draw(t, "lines") {
			x.Lines, x.Number = make([]Money, len(item.Lines)), 0
			for i := range x.Lines {
				x.Lines[i] = Money{numberOf(t, 2), rapid.SampledFrom(append(periods, "")).Draw(t, "period"), i == 0 || rapid.Bool().Draw(t, "set")}
				if !x.Lines[i].Set {
					x.Lines[i] = Money{}
				}
			}
		}
	default:
		x.Number = numberOf(t, int(item.Decimals))
		if len(item.floors) > 0 && rapid.Bool().Draw(t, "near a band") {
			floor := max(rapid.SampledFrom(item.floors).Draw(t, "floor"), -Largest)
			x.Number = floor.Minus(Number(rapid.IntRange(0, 1).Draw(t, "under") * int(pow10[MostDecimals-int(item.Decimals)]))).Round(int(item.Decimals))
		}
		if item.Code == Amount && rapid.Bool().Draw(t, "lendable") {
			x.Number = Whole(rapid.Int64Range(1, 50).Draw(t, "hundreds") * 100)
		}
	}
	return x
}
