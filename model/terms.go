package model

import (
	"errors"
	"strconv"

	"weighhouse/model/loan"
)

// terms checks the product's terms and prepares its repayment plan.
func (c *compiler) terms() {
	t := c.s.Terms
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Terms", 0, column), Args: args})
	}
	if t.MoneyDecimals > 4 {
		bad("Money decimals", "more_than", Args{"value": strconv.Itoa(int(t.MoneyDecimals)), "most": "4"})
		return
	}
	c.e.minor = Number(pow10[MostDecimals-int(t.MoneyDecimals)])
	positive := func(column string, n Number) {
		if n <= 0 {
			bad(column, "not_above_zero", nil)
		} else if n%c.e.minor != 0 {
			bad(column, "too_many_decimals", Args{"value": n.String(), "most": strconv.Itoa(int(t.MoneyDecimals))})
		}
	}
	positive("Smallest amount", t.SmallestAmount)
	positive("Largest amount", t.LargestAmount)
	positive("Amount step", t.AmountStep)
	if t.PaymentRoundedTo.Set {
		positive("Payment rounded up to", t.PaymentRoundedTo.Value)
	}
	if t.SmallestAmount > t.LargestAmount {
		bad("Largest amount", "limits_crossed", Args{"value": t.LargestAmount.String(), "expected": t.SmallestAmount.String()})
	}
	if t.ShortestTerm < 1 {
		bad("Shortest term", "not_above_zero", nil)
	}
	if t.ShortestTerm > t.LongestTerm {
		bad("Longest term", "limits_crossed", Args{"value": strconv.Itoa(int(t.LongestTerm)), "expected": strconv.Itoa(int(t.ShortestTerm))})
	}
	if t.Rate >= 1_000_000_000 {
		c.warn(Problem{Code: "rate_above_one", Place: at("Terms", 0, "Rate"), Args: Args{"value": t.Rate.String()}})
	}
	plan, err := loan.Compile(loan.Terms{
		Unit:        loan.Unit(t.TermUnit),
		Repayment:   loan.Repayment(t.Repayment),
		Method:      loan.Method(t.Method),
		Rate:        loan.Rate(t.Rate),
		Per:         loan.Per(t.RatePer),
		FeeRate:     loan.Rate(t.FeeRate.Or(0)),
		FeeAmount:   int64(t.FeeAmount.Or(0) / c.e.minor),
		SavingsRate: loan.Rate(t.SavingsRate.Or(0)),
		PaymentStep: int64(t.PaymentRoundedTo.Or(0) / c.e.minor),
	}, max(int(t.LongestTerm), 1))
	var p loan.Problem
	switch {
	case err == nil:
		c.e.plan = plan
	case errors.As(err, &p) && p.Code == loan.OutOfRange:
		column := map[string]string{"Rate": "Rate", "FeeRate": "Fee rate", "FeeAmount": "Fee amount",
			"SavingsRate": "Forced savings rate", "PaymentStep": "Payment rounded up to", "longest": "Longest term"}[p.Item]
		bad(column, p.Code, Args{"value": strconv.FormatInt(p.Value, 10), "most": strconv.FormatInt(p.Most, 10)})
	}
	// A word that is none of the list was listed when the cell was read.
}

// minorUnits is money in the smallest unit, what is finer left off.
func (e *Edition) minorUnits(n Number) int64 { return int64(n / e.minor) }

// money is the Number for a sum in the smallest unit.
func (e *Edition) money(minor int64) Number {
	if minor > int64(Largest/e.minor) {
		return Largest
	}
	return Number(minor) * e.minor
}

// periods is a term within what the product allows, for what is computed from
// it; a term outside is refused by Check.
func (e *Edition) periods(term Number) int {
	return int(min(max(term/One, 1), Number(e.card.Terms.LongestTerm)))
}

// instalment is one payment of a loan; Largest where it is beyond counting,
// and 0 for no loan.
func (e *Edition) instalment(amount, term Number) Number {
	if amount < e.minor {
		return 0
	}
	payment, ok := e.plan.Payment(e.minorUnits(amount), e.periods(term), 0)
	if !ok {
		return Largest
	}
	return e.money(payment)
}

// instalmentRange tries every term that is still possible: a longer one need
// not have the lower payment.
func (e *Edition) instalmentRange(amount, term possible) (lo, hi Number) {
	lo = Largest
	for n := e.periods(term.lo); n <= e.periods(term.hi); n++ {
		lo = min(lo, e.instalment(amount.lo, Whole(int64(n))))
		hi = max(hi, e.instalment(amount.hi, Whole(int64(n))))
	}
	return lo, hi
}

// LastPayment is the day a loan paid out on a day ends.
func (e *Edition) LastPayment(on Date, term Number) Date {
	n := e.periods(term)
	switch e.card.Terms.TermUnit {
	case Weeks:
		return on.AddDays(7 * n)
	case Fortnights:
		return on.AddDays(14 * n)
	}
	return on.AddMonths(n)
}

// Schedule is the loan asked for, paid out on a day. grace is in periods.
func (e *Edition) Schedule(amount Number, term, grace int, paidOut Date) (loan.Schedule, error) {
	return e.plan.Schedule(e.minorUnits(amount), term, grace, paidOut.Time())
}

// Money is the Number for a sum that package loan has in the smallest unit.
func (e *Edition) Money(minor int64) Number { return e.money(minor) }

// AmountAndTerm are what the answers ask for; ok is false while one is missing.
func (a *Answers) AmountAndTerm() (amount Number, term int, ok bool) {
	x, y := a.given[a.edition.byCode[Amount]], a.given[a.edition.byCode[Term]]
	return x.Number, int(y.Number / One), x.State == Given && y.State == Given
}
