// Package loan works out repayment schedules and what a loan costs a year.
//
// Money is int64 in the currency's smallest unit (the minor unit), so that
// every schedule is exact: the principal of its rows sums to the amount and
// the last balance is 0. Rates are billionths. The package keeps nothing,
// reads no clock and does no input or output.
//
// Compile turns a product's terms into a Plan. Plan.Payment is the quick
// question (what would one payment be?), Plan.Schedule the whole answer, and
// Schedule.YearlyCost its price.
//
// # Interest
//
// A rate per year gives a month one twelfth of it, a week 7/365 and a
// fortnight 14/365; a rate per month is first made twelve times as large.
// (Common practice, no source.)
//
//   - Declining: each period's interest is the rate for one period on the
//     principal still owed, rounded half up to the minor unit.
//   - Flat: the rate on the amount first lent, for every period of the term
//     whatever has been paid back. The total is rounded half up once and spread
//     evenly; the last period takes what the spreading left over. A loan that
//     ends early, because payments were rounded up, is not charged for the
//     periods after.
//
// Interest never bears interest.
//
// # Repayment
//
//   - Equal payments: the same payment each period. Grace is a number of
//     periods at the start, within the term, in which only interest is paid;
//     the principal is spread over the periods that are left.
//   - Interest then principal: interest each period, the whole principal with
//     the last payment. Grace changes nothing.
//   - All at the end: one payment, of the amount and the interest of the whole
//     term, rounded once; declining and flat are then the same, and grace
//     changes nothing.
//
// A payment is rounded half up to the minor unit or, if the product has a
// payment step, up to a multiple of the step; what that adds repays principal
// sooner, so the loan may end with a smaller last payment, or earlier. The
// last payment is whatever is still owed: it takes up all rounding, and is not
// a multiple of the step.
//
// Fees are kept back from what is paid out. Forced savings are kept back too,
// bear no interest, and are given back with the last payment.
package loan

// A Rate is a share or a rate of interest in billionths: 0.24 is 240_000_000.
type Rate int64

// Unit is what a term is counted in; one payment may fall due each unit.
type Unit string

// The units.
const (
	Weeks      Unit = "weeks"
	Fortnights Unit = "fortnights"
	Months     Unit = "months"
)

// Repayment is how the principal is paid back.
type Repayment string

// The ways to repay; the package comment explains each.
const (
	EqualPayments         Repayment = "equal payments"
	InterestThenPrincipal Repayment = "interest then principal"
	AllAtTheEnd           Repayment = "all at the end"
)

// Method is what interest is charged on.
type Method string

// The methods; the package comment explains each.
const (
	Declining Method = "declining"
	Flat      Method = "flat"
)

// Per is the time that a rate is for.
type Per string

// The times.
const (
	PerYear  Per = "year"
	PerMonth Per = "month"
)

// Terms are the part of a product's terms that shapes a loan.
type Terms struct {
	Unit      Unit
	Repayment Repayment
	Method    Method
	// Rate is from 0 to LargestRate, Per year or month.
	Rate Rate
	Per  Per
	// FeeRate (0 to 1) of the amount and FeeAmount (minor units, from 0) are
	// kept back from what is paid out.
	FeeRate   Rate
	FeeAmount int64
	// SavingsRate (0 to 1) of the amount is kept back until the last payment.
	SavingsRate Rate
	// PaymentStep is what payments are rounded up to a multiple of, in minor
	// units; with 0 or 1 they are rounded half up to the minor unit.
	PaymentStep int64
}

// The ends of what can be worked out.
const (
	// LargestAmount is what may be lent at most, in minor units.
	LargestAmount int64 = 999_999_999_999_999_999
	// LargestRate is 10,000 % a year or month.
	LargestRate Rate = 100 * one
	// LongestTerm is in units of the term: a hundred years of months.
	LongestTerm = 1200

	one Rate = 1_000_000_000
)

// check finds the first term that is not one.
func (t Terms) check() error {
	for _, w := range []struct {
		item  string
		known bool
	}{
		{"Unit", t.Unit == Weeks || t.Unit == Fortnights || t.Unit == Months},
		{"Repayment", t.Repayment == EqualPayments || t.Repayment == InterestThenPrincipal || t.Repayment == AllAtTheEnd},
		{"Method", t.Method == Declining || t.Method == Flat},
		{"Per", t.Per == PerYear || t.Per == PerMonth},
	} {
		if !w.known {
			return Problem{Code: UnknownWord, Item: w.item}
		}
	}
	for _, n := range []struct {
		item        string
		value, most int64
	}{
		{"Rate", int64(t.Rate), int64(LargestRate)},
		{"FeeRate", int64(t.FeeRate), int64(one)},
		{"FeeAmount", t.FeeAmount, LargestAmount},
		{"SavingsRate", int64(t.SavingsRate), int64(one)},
		{"PaymentStep", t.PaymentStep, LargestAmount},
	} {
		if p := within(n.item, n.value, 0, n.most); p != (Problem{}) {
			return p
		}
	}
	return nil
}

// perPeriod is the rate for one period, as a fraction in lowest terms.
func (t Terms) perPeriod() (num, den uint64) {
	num, den = uint64(t.Rate), uint64(one)
	if t.Per == PerMonth {
		num *= 12
	}
	switch t.Unit {
	case Months:
		den *= 12
	case Fortnights:
		num, den = num*14, den*365
	case Weeks:
		num, den = num*7, den*365
	}
	g, r := den, num
	for r != 0 {
		g, r = r, g%r
	}
	return num / g, den / g
}
