package model_test

import (
	"fmt"

	"weighhouse/model"
)

// card is a small scorecard: two questions besides amount and term, one rule.
func card() model.Scorecard {
	number := func(text string) model.Number {
		n, err := model.ParseNumber(text)
		if err != nil {
			panic(err)
		}
		return n
	}
	date := func(text string) model.Date {
		d, err := model.ParseDate(text)
		if err != nil {
			panic(err)
		}
		return d
	}
	logOdds := func(tenths int) model.Maybe[model.LogOdds] {
		return model.Some(model.LogOdds(tenths) * model.LogOddsOne / 10)
	}
	tenth := model.Some(model.PDOne / 10)
	fifth := model.Some(model.PDOne / 5)
	return model.Scorecard{
		Card: model.Card{
			Format: 1, ProductCode: "stall", Product: "Stall loan", For: model.NewClients, Title: "Stall loans", Edition: 1,
			Lender: "Marlow Fen Savings and Loan", DefaultMeans: "more than 30 days behind", DefaultDaysLate: 30, WithinMonths: 12,
			HowMade: model.Judged, IssuedOn: date("2026-02-01"), InForceFrom: date("2026-03-01"), ReviewBy: date("2027-03-01"),
			LogOddsOf: model.OfDefault, BaseLogOdds: -2 * model.LogOddsOne,
			ReferenceScore: number("600"), ReferenceOdds: number("50"), PointsToDouble: number("20"),
			ResultShown: model.WhenComplete, AnswersGoodDays: 30, PreparedBy: "A. Quill", ApprovedBy: "B. Stone", Complaints: "the branch",
		},
		Characteristics: []model.Characteristic{
			{Code: "years", Question: "How many years in the trade?", Kind: model.Numeric, Use: model.Scored, AverageLogOdds: logOdds(-1)},
			{Code: "own_stall", Question: "Is the stall their own?", Kind: model.YesNo, Use: model.Scored, AverageLogOdds: logOdds(-4)},
		},
		Attributes: []model.Attribute{
			{Characteristic: "years", Code: "few", Label: "Under 3", Below: model.Some(number("3")), LogOdds: logOdds(5), Reason: "Little time in the trade"},
			{Characteristic: "years", Code: "more", Label: "3 and more", From: model.Some(number("3")), LogOdds: logOdds(-3)},
			{Characteristic: "own_stall", Code: "yes", Label: "Yes", LogOdds: logOdds(-9)},
			{Characteristic: "own_stall", Code: "no", Label: "No", LogOdds: logOdds(2), Reason: "The stall is not their own"},
		},
		Bands: []model.Band{
			{Code: "low", Label: "Low", Below: tenth, Recommendation: model.Approve, OfficerLimit: model.Some(number("2000"))},
			{Code: "middle", Label: "Middle", From: tenth, Below: fifth, Recommendation: model.Refer},
			{Code: "high", Label: "High", From: fifth, Recommendation: model.Decline},
		},
		Rules: []model.Rule{
			{Code: "starter", Label: "First year in the trade", Characteristic: "years", Test: model.Below, Value: "1", Effect: model.LargestAmount, Amount: model.Some(number("500"))},
		},
		Terms: model.Terms{
			Currency: "crowns", MoneyDecimals: 2, SmallestAmount: number("100"), LargestAmount: number("5000"), AmountStep: number("100"),
			TermUnit: model.Months, ShortestTerm: 3, LongestTerm: 24, Repayment: model.EqualPayments,
			Rate: 240_000_000, RatePer: model.PerYear, Method: model.Declining,
		},
		Checks: []model.Check{
			check("good", "5", "yes", "-3.2", "0.039165723", "579.455358", "low", model.Approve),
			check("bad", "0", "no", "-1.3", "0.214165017", "524.632947", "high", model.Decline),
			check("between", "5", "no", "-2.1", "0.109096821", "547.716068", "middle", model.Refer),
		},
	}
}

// check is a specimen worked outside: here with R's plogis.
func check(code, years, own, logOdds, pd, score, band string, to model.Recommendation) model.Check {
	c := model.Check{Code: code, Band: band, Recommendation: to, Answers: []model.CheckAnswer{
		{Characteristic: "amount", Answer: "1000"}, {Characteristic: "term", Answer: "12"},
		{Characteristic: "years", Answer: years}, {Characteristic: "own_stall", Answer: own},
	}}
	for _, err := range []error{c.LogOdds.UnmarshalText([]byte(logOdds)), c.PD.UnmarshalText([]byte(pd)), c.Score.UnmarshalText([]byte(score))} {
		if err != nil {
			panic(err)
		}
	}
	return c
}

func compile() *model.Edition {
	edition, problems := model.Compile(card())
	if edition == nil {
		panic(fmt.Sprint(problems))
	}
	return edition
}

// put enters an answer the way a page does.
func put(a *model.Answers, code, text string) {
	item, _ := a.Edition().Item(code)
	answer, err := a.Edition().ParseAnswer(item.Index, text)
	if err != nil {
		panic(err)
	}
	a.Put(item.Index, answer)
}

func applicant(years, own string) *model.Answers {
	e := compile()
	a := e.NewAnswers(e.Scorecard().Card.InForceFrom, model.NewClients)
	put(a, "amount", "1200")
	put(a, "term", "12")
	put(a, "years", years)
	put(a, "own_stall", own)
	return a
}

// A scorecard with a slip is refused, with every slip at its cell.
func ExampleCompile() {
	s := card()
	edition, problems := model.Compile(s)
	fmt.Println("edition", edition.Scorecard().Card.Edition, len(problems), "problems")

	s.Attributes[1].From = model.Some(model.Whole(4))
	s.Attributes[3].LogOdds = model.Some(-2 * model.LogOddsOne / 10)
	_, problems = model.Compile(s)
	for _, p := range problems {
		fmt.Println(p)
	}
	s.Attributes[1].From = model.Some(model.Whole(3))
	_, problems = model.Compile(s) // now the checks can be worked, and find the sign
	fmt.Println(problems[0])
	// Output:
	// edition 1 0 problems
	// Attributes row 2 (From): band_gap expected="3" value="4"
	// Checks row 2 (Log-odds): check_log_odds_differ check="bad" difference="-0.4" ours="-1.7" suspect="own_stall.no" value="-1.3"
}

// What an edition says of complete answers.
func ExampleEdition_Score() {
	a := applicant("0", "yes")
	e := a.Edition()
	r, ok := e.Score(a)
	fmt.Println(ok, "log-odds", r.LogOdds, "PD", r.PD, "score", model.ShownScore(r.Score))
	fmt.Println(e.Scorecard().Bands[r.Band].Label, r.Recommendation, "decided by", e.Decider(r, model.Whole(1200)))
	for i, rule := range e.Rules() {
		if r.Fired.Has(i) {
			fmt.Println(rule.Label, rule.Effect, rule.Amount)
		}
	}
	// Output:
	// true log-odds -2.4 PD 0.083172696 score 556
	// Low approve decided by officer
	// First year in the trade largest amount 500
}

// While answers are missing there are bounds, and a question to ask next.
func ExampleEdition_Bound() {
	e := compile()
	a := e.NewAnswers(e.Scorecard().Card.InForceFrom, model.NewClients)
	put(a, "amount", "1200")
	put(a, "term", "12")
	b := e.Bound(a)
	fmt.Println(b.LowestPD, "to", b.HighestPD, b.Mildest, "to", b.Strictest, "ask", e.Items()[b.Narrows].Question)
	put(a, "years", "7")
	b = e.Bound(a)
	fmt.Println(b.LowestPD, "to", b.HighestPD, b.Mildest, "to", b.Strictest, "settled", b.Settled())
	put(a, "own_stall", "yes")
	b = e.Bound(a)
	fmt.Println(b.LowestPD, "to", b.HighestPD, b.Mildest, "to", b.Strictest, "settled", b.Settled())
	// Output:
	// 0.039165723 to 0.214165017 approve to decline ask Is the stall their own?
	// 0.039165723 to 0.109096821 approve to refer settled false
	// 0.039165723 to 0.039165723 approve to approve settled true
}

// The balance: what each answer adds to the average applicant's log-odds.
func ExampleEdition_Steps() {
	a := applicant("2", "yes")
	e := a.Edition()
	fmt.Println("the middle", e.Centre())
	for _, s := range e.Steps(a) {
		fmt.Println(e.Items()[s.Index].Code, s.Above())
	}
	r, _ := e.Score(a)
	fmt.Println("log-odds", r.LogOdds)
	// Output:
	// the middle -2.5
	// years 0.6
	// own_stall -0.5
	// log-odds -2.4
}

func ExampleEdition_Reasons() {
	a := applicant("2", "no")
	for _, s := range a.Edition().Reasons(a) {
		fmt.Println(a.Edition().ReasonText(s), s.Above())
	}
	// Output:
	// Little time in the trade 0.6
	// The stall is not their own 0.6
}

// The loan asked for is approved up to 500 only: what fits is 500, over any
// term. Amount and term are not scored here; where a payment is, what fits
// differs with the term.
func ExampleEdition_TermsThatFit() {
	a := applicant("0", "yes")
	offers := a.Edition().TermsThatFit(a)
	fmt.Println(len(offers))
	for _, o := range offers[:2] {
		fmt.Println(o.Amount, "over", o.Term, "months", o.Result.Recommendation)
	}
	// Output:
	// 22
	// 500 over 3 months approve
	// 500 over 4 months approve
}

// The text of a scorecard is its identity; two people compare editions by
// telephone.
func ExampleParseCanonical() {
	text := card().Canonical()
	s, problems := model.ParseCanonical(text)
	fmt.Println(len(problems), s.Fingerprint() == card().Fingerprint())
	fmt.Println(s.Fingerprint().TelephoneCode())
	// Output:
	// 0 true
	// 4982 2246 4340 7358 3527 9098
}

// Answers are kept as text; scored again they give the same to the last digit.
func ExampleEdition_ParseAnswers() {
	a := applicant("2", "yes")
	fmt.Print(a.Text())
	again, problems := a.Edition().ParseAnswers(a.Text())
	r, _ := a.Edition().Score(a)
	s, _ := a.Edition().Score(again)
	fmt.Println(len(problems), r == s)
	// Output:
	// on	2026-03-01
	// client	new
	// amount	1200
	// term	12
	// years	2
	// own_stall	yes
	// 0 true
}

// A reader of workbooks hands over tables of text.
func ExampleFromSheets() {
	_, problems := model.FromSheets([]model.Sheet{{
		Name:    "Overrides",
		Columns: []string{"Override", "Label", "Direction"},
		Rows:    [][]string{{"known", "Well known at the branch", "riskier"}, {"Rumour", "Bad word in the market", "worse"}},
	}})
	for _, p := range problems {
		if p.Place.Sheet == "Overrides" {
			fmt.Println(p)
		}
	}
	// Output:
	// Overrides row 2 (Override): bad_code value="Rumour"
	// Overrides row 2 (Direction): not_in_list options="safer, riskier" value="worse"
}

// What is worth a question in an answer, and what a result stands on.
func ExampleEdition_Check() {
	s := card()
	s.Characteristics[0].HighestAccepted = model.Some(model.Whole(60))
	s.Characteristics[0].SeenTo = model.Some(model.Whole(40))
	e, _ := model.Compile(s)
	a := e.NewAnswers(s.Card.InForceFrom, model.NewClients)
	put(a, "amount", "6000")
	put(a, "years", "61")
	for _, p := range append(e.Check(a), e.Ground(a, s.Card.ReviewBy.AddDays(1))...) {
		fmt.Println(p.Warning, p)
	}
	// Output:
	// false Answers (amount): outside_product least="100" most="5000" value="6000"
	// true Answers (years): outside_accepted least="-999999999999.999999" most="60" value="61"
	// true Answers (years): outside_seen least="-999999999999.999999" most="40" value="61"
	// true Answers: past_review value="2027-03-01"
}
