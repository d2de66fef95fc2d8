package model

// The closed lists of a workbook. Each type's Options are what a cell may
// say, in the order of a drop-down.

// ClientKind tells clients of the lender apart.
type ClientKind string

const (
	NewClients    ClientKind = "new"
	RepeatClients ClientKind = "repeat"
	AllClients    ClientKind = "all"
)

// Options lists the client kinds.
func (ClientKind) Options() []string { return []string{"new", "repeat", "all"} }

// HowMade tells where the coefficients come from.
type HowMade string

const (
	Estimated          HowMade = "estimated"
	Judged             HowMade = "judged"
	EstimatedAndJudged HowMade = "estimated and judged"
)

// Options lists the ways a scorecard is made.
func (HowMade) Options() []string { return []string{"estimated", "judged", "estimated and judged"} }

// Outcome is what the log-odds are of. Only default is allowed: a workbook
// made the other way round must not slip in.
type Outcome string

// OfDefault is the only Outcome.
const OfDefault Outcome = "default"

// Options lists the outcomes.
func (Outcome) Options() []string { return []string{"default"} }

// Shown is when the officer sees a result.
type Shown string

const (
	WhileAnswering Shown = "while answering"
	WhenComplete   Shown = "when complete"
	WhenHandedIn   Shown = "when handed in"
)

// Options lists the moments.
func (Shown) Options() []string {
	return []string{"when complete", "while answering", "when handed in"}
}

// Kind is how a characteristic is answered.
type Kind string

const (
	Choice    Kind = "choice"
	YesNo     Kind = "yes/no"
	Numeric   Kind = "number"
	DateKind  Kind = "date"
	Worksheet Kind = "worksheet"
	Computed  Kind = "computed"
)

// Options lists the kinds.
func (Kind) Options() []string {
	return []string{"choice", "yes/no", "number", "date", "worksheet", "computed"}
}

// Use is what a characteristic is for.
type Use string

const (
	Scored   Use = "scored"   // has coefficients
	Recorded Use = "recorded" // for rules, computed answers or the file
	Watched  Use = "watched"  // kept to check fairness: never scored
)

// Options lists the uses.
func (Use) Options() []string { return []string{"scored", "recorded", "watched"} }

// Evidence is what stands behind an answer, or must.
type Evidence string

const (
	NoEvidence Evidence = "none"
	Told       Evidence = "told"
	Seen       Evidence = "seen"
)

// Options lists the evidence.
func (Evidence) Options() []string { return []string{"none", "told", "seen"} }

// Flow tells whether a line of a worksheet adds or takes away.
type Flow string

const (
	Adds      Flow = "adds"
	TakesAway Flow = "takes away"
)

// Options lists the flows.
func (Flow) Options() []string { return []string{"adds", "takes away"} }

// Period is how often a line of money comes or goes.
type Period string

const (
	Day       Period = "day"
	Week      Period = "week"
	Fortnight Period = "fortnight"
	Month     Period = "month"
	Season    Period = "season"
	Year      Period = "year"
)

// Options lists the periods.
func (Period) Options() []string {
	return []string{"month", "day", "week", "fortnight", "season", "year"}
}

// TimesAYear is how often p comes in a year, the one rule by which money is
// turned into months: 365 days, 52 weeks, 26 fortnights, 12 months, 2
// seasons; the year's total is then divided by 12. It is 0 for no period.
func (p Period) TimesAYear() int64 {
	switch p {
	case Day:
		return 365
	case Week:
		return 52
	case Fortnight:
		return 26
	case Month:
		return 12
	case Season:
		return 2
	case Year:
		return 1
	}
	return 0
}

// Operation is how a computed characteristic is worked out.
type Operation string

const (
	Sum        Operation = "sum"
	Product    Operation = "product"
	Ratio      Operation = "ratio"
	Instalment Operation = "instalment"
	// MonthlyInstalment is what the payments of a month come to, by the rule of
	// Period.TimesAYear, for setting beside a month's money.
	MonthlyInstalment Operation = "monthly instalment"
	WholeYears        Operation = "whole years"
	AgeAtLastPayment  Operation = "age at last payment"
)

// Options lists the operations.
func (Operation) Options() []string {
	return []string{"sum", "product", "ratio", "instalment", "monthly instalment", "whole years", "age at last payment"}
}

// Sign is the sign of a part of a sum.
type Sign string

const (
	Plus  Sign = "plus"
	Minus Sign = "minus"
)

// Options lists the signs.
func (Sign) Options() []string { return []string{"plus", "minus"} }

// Recommendation is what an edition says to do, from the mildest.
type Recommendation string

const (
	Approve Recommendation = "approve"
	Refer   Recommendation = "refer"
	Decline Recommendation = "decline"
)

// Options lists the recommendations.
func (Recommendation) Options() []string { return []string{"approve", "refer", "decline"} }

var byStrictness = [...]Recommendation{Approve, Refer, Decline}

func (r Recommendation) strictness() int {
	switch r {
	case Refer:
		return 1
	case Decline:
		return 2
	}
	return 0
}

// Test is what a rule asks of an answer.
type Test string

const (
	Is        Test = "is"
	IsNot     Test = "is not"
	OneOf     Test = "one of"
	Below     Test = "below"
	AtMost    Test = "at most"
	Above     Test = "above"
	AtLeast   Test = "at least"
	Between   Test = "between"
	IsUnknown Test = "unknown"
	ToldOnly  Test = "told only"
)

// Options lists the tests.
func (Test) Options() []string {
	return []string{"is", "is not", "one of", "below", "at most", "above", "at least", "between", "unknown", "told only"}
}

// Effect is what a rule does once it fires.
type Effect string

const (
	DeclineEffect Effect = "decline"
	ReferEffect   Effect = "refer"
	LargestAmount Effect = "largest amount"
	Note          Effect = "note"
)

// Options lists the effects.
func (Effect) Options() []string { return []string{"decline", "refer", "largest amount", "note"} }

// recommends is what an effect makes of an approval.
func (f Effect) recommends() Recommendation {
	switch f {
	case DeclineEffect:
		return Decline
	case ReferEffect:
		return Refer
	}
	return Approve
}

// Direction is which way a departure from the recommendation goes.
type Direction string

const (
	Safer   Direction = "safer"
	Riskier Direction = "riskier"
)

// Options lists the directions.
func (Direction) Options() []string { return []string{"safer", "riskier"} }

// TermUnit is what a loan's term is counted in.
type TermUnit string

const (
	Weeks      TermUnit = "weeks"
	Fortnights TermUnit = "fortnights"
	Months     TermUnit = "months"
)

// Options lists the units.
func (TermUnit) Options() []string { return []string{"weeks", "fortnights", "months"} }

// Repayment is how a loan is paid back.
type Repayment string

const (
	EqualPayments         Repayment = "equal payments"
	InterestThenPrincipal Repayment = "interest then principal"
	AllAtTheEnd           Repayment = "all at the end"
)

// Options lists the ways.
func (Repayment) Options() []string {
	return []string{"equal payments", "interest then principal", "all at the end"}
}

// RatePer is the time an interest rate is for.
type RatePer string

const (
	PerYear  RatePer = "year"
	PerMonth RatePer = "month"
)

// Options lists the times.
func (RatePer) Options() []string { return []string{"year", "month"} }

// InterestMethod is what interest is worked out on.
type InterestMethod string

const (
	Declining InterestMethod = "declining"
	Flat      InterestMethod = "flat"
)

// Options lists the methods.
func (InterestMethod) Options() []string { return []string{"declining", "flat"} }
