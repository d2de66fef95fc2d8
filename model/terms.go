package model

import (
	"errors"
	"strconv"
	"time"

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
	for _, m := range []struct {
		column string
		value  Number
		least  Number
	}{
		{"Smallest amount", t.SmallestAmount, 1},
		{"Largest amount", t.LargestAmount, 1},
		{"Amount step", t.AmountStep, 1},
		{"Payment rounded up to", t.PaymentRoundedTo.Or(One), 1},
		{"Fee amount", t.FeeAmount.Or(0), 0},
	} {
		switch {
		case m.value < m.least && m.least > 0:
			bad(m.column, "not_above_zero", nil)
		case m.value < m.least:
			bad(m.column, "below_zero", nil)
		case m.value%c.e.minor != 0:
			bad(m.column, "too_many_decimals", Args{"value": m.value.String(), "most": strconv.Itoa(int(t.MoneyDecimals))})
		}
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
	if g := t.LongestGrace; g.Set && g.Value >= max(t.LongestTerm, 1) {
		bad("Longest grace", "more_than", Args{"value": strconv.Itoa(int(g.Value)), "most": strconv.Itoa(int(t.LongestTerm) - 1)})
	}
	if n := c.loansToTry(); n > MostLoansToTry {
		bad("Amount step", "amount_step_too_small", Args{"value": strconv.FormatInt(n, 10), "most": strconv.Itoa(MostLoansToTry)})
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
		FeeAmount:   int64(max(t.FeeAmount.Or(0), 0) / c.e.minor),
		SavingsRate: loan.Rate(t.SavingsRate.Or(0)),
		PaymentStep: int64(max(t.PaymentRoundedTo.Or(0), 0) / c.e.minor),
	}, max(int(t.LongestTerm), 1))
	if err != nil {
		c.refuseLoan(err, map[string]string{"Rate": "Rate", "FeeRate": "Fee rate", "SavingsRate": "Forced savings rate", "longest": "Longest term"})
		return
	}
	c.e.plan = plan
	if c.refused() {
		return
	}
	// The extremes of the product must be loans; then so are all between.
	_, err = plan.Schedule(c.e.minorUnits(t.SmallestAmount), int(t.ShortestTerm), 0, time.Time{})
	c.refuseLoan(err, map[string]string{"amount": "Smallest amount"})
	_, err = plan.Schedule(c.e.minorUnits(t.LargestAmount), int(t.LongestTerm), 0, time.Time{})
	c.refuseLoan(err, map[string]string{"amount": "Largest amount"})
}

// refuseLoan lists what package loan refuses, in the column of its item. A
// word that it does not know was listed when the cell was read.
func (c *compiler) refuseLoan(err error, columns map[string]string) {
	var p loan.Problem
	if errors.As(err, &p) && p.Code != loan.UnknownWord {
		c.add(Problem{Code: p.Code, Place: at("Terms", 0, columns[p.Item]),
			Args: Args{"value": strconv.FormatInt(p.Value, 10), "most": strconv.FormatInt(p.Most, 10)}})
	}
}

// MostLoansToTry is how many amounts and terms a product may offer, so that
// all of them can be tried for one that fits.
const MostLoansToTry = 1_000_000

// loansToTry counts the amounts and terms of the product.
func (c *compiler) loansToTry() int64 {
	t := c.s.Terms
	if t.AmountStep <= 0 || t.LargestAmount < t.SmallestAmount || t.LongestTerm < t.ShortestTerm {
		return 0
	}
	amounts := int64((t.LargestAmount-t.SmallestAmount)/t.AmountStep) + 1
	terms := int64(t.LongestTerm-t.ShortestTerm) + 1
	if amounts > MostLoansToTry {
		return amounts // the product may not fit
	}
	return amounts * terms
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

// instalment is one payment of a loan; 0 for no loan, and Largest where there
// is no such loan: beyond counting, or with nothing left of it after fees.
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

// aMonth is what payments of that amount come to in a month, rounded once;
// Largest where there is no such payment.
func (e *Edition) aMonth(payment Number, decimals int) Number {
	period := Month
	switch e.card.Terms.TermUnit {
	case Weeks:
		period = Week
	case Fortnights:
		period = Fortnight
	}
	if period == Month || payment == Largest {
		return payment.Round(decimals)
	}
	return payment.Times(Whole(period.TimesAYear()), MostDecimals).Over(Whole(12), decimals)
}

// instalmentRange is the range of an instalment over the amounts and terms
// that are still possible. Of an open amount it is all there is: an amount
// need not even leave anything to pay out. For a known one it tries every
// term: a longer one need not have the lower payment.
func (e *Edition) instalmentRange(p *possibles, amount, term int) (lo, hi Number) {
	x, y := &p.of[amount], &p.of[term]
	if x.lo < x.hi {
		return 0, Largest
	}
	if p.loan.amount == x.lo && p.loan.term == [2]Number{y.lo, y.hi} {
		return p.loan.payment[0], p.loan.payment[1]
	}
	lo = Largest
	for n := e.periods(y.lo); n <= e.periods(y.hi); n++ {
		payment := e.instalment(x.lo, Whole(int64(n)))
		lo, hi = min(lo, payment), max(hi, payment)
	}
	p.loan.amount, p.loan.term, p.loan.payment = x.lo, [2]Number{y.lo, y.hi}, [2]Number{lo, hi}
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
	x, y := a.own[a.edition.byCode[Amount]], a.own[a.edition.byCode[Term]]
	return x.n, int(y.n / One), x.state == Given && y.state == Given
}
