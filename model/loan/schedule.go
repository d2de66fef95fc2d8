package loan

import "time"

// A Schedule is a whole loan. Money is in minor units.
type Schedule struct {
	// PaidOut is the day the loan is paid out, at midnight UTC.
	PaidOut time.Time
	// Unit is what the rows' periods are.
	Unit Unit
	// Amount is what is lent: the sum of the rows' principal.
	Amount int64
	// Fee and Savings are kept back at the start; CashInHand is what is left.
	// Savings are given back with the last payment.
	Fee, Savings, CashInHand int64
	// Payment is the ordinary payment, as Plan.Payment has it.
	Payment int64
	// TotalInterest and TotalPaid are sums of the rows; savings given back are
	// not taken off.
	TotalInterest, TotalPaid int64
	// Rows are the payments in order; the last balance is 0.
	Rows []Row
}

// A Row is one payment. Principal + Interest = Payment.
type Row struct {
	// Period counts from 1, the first to end after the loan is paid out.
	Period int
	// Due is the day of the payment, at midnight UTC.
	Due time.Time
	// Payment may be 0, in a grace period at a rate of 0.
	Payment, Interest, Principal int64
	// Balance is the principal still owed after the payment.
	Balance int64
}

// Schedule is the loan of an amount over term periods, the first grace of them
// asking interest only, paid out on a day: its year, month and day alone
// count. It returns a Problem of code OutOfRange (amount, term, grace) or
// NothingInHand.
func (p *Plan) Schedule(amount int64, term, grace int, paidOut time.Time) (Schedule, error) {
	if bad := p.check(amount, term, grace); bad != (Problem{}) {
		return Schedule{}, bad
	}
	t := p.terms
	s := Schedule{PaidOut: midnight(paidOut), Unit: t.Unit, Amount: amount, Payment: p.payment(amount, term, grace)}
	s.Fee, s.Savings = p.kept(amount)
	s.CashInHand = amount - s.Fee - s.Savings
	if t.Repayment == AllAtTheEnd {
		s.add(term, s.Payment, s.Payment-amount)
		return s, nil
	}

	s.Rows = make([]Row, 0, term)
	flat := p.interest(amount, term)
	even := share(flat, 1, uint64(term))
	balance := amount
	for k := 1; balance > 0; k++ {
		var interest int64
		switch {
		case t.Method == Declining:
			interest = p.interest(balance, 1)
		case k == term:
			interest = flat - s.TotalInterest
		default:
			interest = min(even, flat-s.TotalInterest)
		}
		payment := s.Payment
		switch {
		case k == term:
			payment = balance + interest
		case k <= grace || t.Repayment == InterestThenPrincipal:
			payment = p.roundUp(interest)
		}
		balance = s.add(k, min(payment, balance+interest), interest)
	}
	return s, nil
}

// add appends a row and returns the balance after it.
func (s *Schedule) add(period int, payment, interest int64) int64 {
	balance := s.Amount
	if n := len(s.Rows); n > 0 {
		balance = s.Rows[n-1].Balance
	}
	principal := payment - interest
	s.Rows = append(s.Rows, Row{period, s.Unit.after(s.PaidOut, period), payment, interest, principal, balance - principal})
	s.TotalInterest += interest
	s.TotalPaid += payment
	return balance - principal
}

// midnight is the civil date of t, at midnight UTC.
func midnight(t time.Time) time.Time {
	y, m, d := t.Date()
	return time.Date(y, m, d, 0, 0, 0, 0, time.UTC)
}

// after is the day n periods after a day. Months keep the day of the month,
// or take the month's last day where it has no such day: 31 January, then 28
// or 29 February, then 31 March.
func (u Unit) after(t time.Time, n int) time.Time {
	switch u {
	case Weeks:
		return t.AddDate(0, 0, 7*n)
	case Fortnights:
		return t.AddDate(0, 0, 14*n)
	}
	y, m, d := t.Date()
	lastDay := time.Date(y, m+time.Month(n)+1, 0, 0, 0, 0, 0, time.UTC)
	return lastDay.AddDate(0, 0, min(d-lastDay.Day(), 0))
}
