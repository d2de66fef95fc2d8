package loan

import "math/big"

// A Plan answers for one product's terms. It never changes and may be used
// from several goroutines at once.
type Plan struct {
	terms    Terms
	num, den uint64 // the rate for one period
	// most[n] is the largest amount over n periods whose sums all fit int64.
	most []int64
	// level[m] is what one payment is of an amount repaid in m equal payments
	// with declining interest: see levels.
	level []fraction
}

// Compile prepares terms for loans of 1 to longest periods. It returns a
// Problem of code UnknownWord or OutOfRange.
func Compile(t Terms, longest int) (*Plan, error) {
	if err := t.check(); err != nil {
		return nil, err
	}
	if p := within("longest", int64(longest), 1, LongestTerm); p != (Problem{}) {
		return nil, p
	}
	p := &Plan{terms: t, most: make([]int64, longest+1)}
	p.num, p.den = t.perPeriod()
	for n := 1; n <= longest; n++ {
		// All that is paid is at most amount × (1 + rate × n), half a minor unit
		// a period for rounding, and one step: 2^62 leaves room for both.
		quo, _ := mulDiv(1<<62, p.den, p.den+p.num*uint64(n))
		p.most[n] = min(int64(quo), LargestAmount)
	}
	if t.Repayment == EqualPayments && t.Method == Declining {
		p.level = levels(p.num, p.den, longest, t.PaymentStep > 1)
	}
	return p, nil
}

// levels are the annuity factors for 1 to longest payments at the rate n/d a
// period, made so small that an amount can be multiplied in 128 bits, and
// still exact. With a = d + n, both factors of
//
//	a^m / (d × (a^(m-1) + a^(m-2)·d + … + d^(m-1)))
//
// have no common divisor, and the sum makes a rate of 0 no special case. A
// payment is rounded by comparing the factor with k/2A (half up) or k/A (up),
// where A is an amount and k whole. So any other fraction with no k/2A between
// it and the factor rounds every amount alike: the neighbour below if halves
// go up, the one above if all goes up.
func levels(n, d uint64, longest int, up bool) []fraction {
	a, den := new(big.Int).SetUint64(d+n), new(big.Int).SetUint64(d)
	level := make([]fraction, longest+1)
	power, denPower, sum, bottom := big.NewInt(1), big.NewInt(1), new(big.Int), new(big.Int)
	for m := 1; m <= longest; m++ {
		sum.Add(sum.Mul(sum, a), denPower)
		power.Mul(power, a)
		denPower.Mul(denPower, den)
		below, above := neighbours(power, bottom.Mul(sum, den), 2*uint64(LargestAmount))
		level[m] = below
		if up {
			level[m] = above
		}
	}
	return level
}

// Payment is the ordinary payment, in minor units, of an amount over term
// periods of which the first grace ask interest only: for equal payments the
// one after grace, for interest then principal the interest of one period, all
// at the end the only one. It is exact: in a schedule of equal payments all
// after grace but the last are just this. It is false where Schedule has a
// Problem.
func (p *Plan) Payment(amount int64, term, grace int) (int64, bool) {
	if p.check(amount, term, grace) != (Problem{}) {
		return 0, false
	}
	return p.payment(amount, term, grace), true
}

func (p *Plan) payment(amount int64, term, grace int) int64 {
	total := p.interest(amount, term)
	if p.terms.Repayment == AllAtTheEnd || term == 1 {
		return amount + total
	}
	first := p.interest(amount, 1)
	if p.terms.Method == Flat {
		first = share(total, 1, uint64(term))
	}
	payment := first
	if p.terms.Repayment == EqualPayments {
		if p.terms.Method == Flat {
			payment = p.flat(amount, total, int64(term), int64(term-grace))
		} else {
			payment = p.annuity(amount, p.level[term-grace])
		}
	}
	return min(p.roundUp(payment), amount+first)
}

// annuity is amount × level, rounded half up, or up if there is a step.
func (p *Plan) annuity(amount int64, level fraction) int64 {
	whole := amount * int64(level.whole)
	if p.terms.PaymentStep > 1 {
		quo, rem := mulDiv(uint64(amount), level.num, level.den)
		return whole + int64(quo+min(rem, 1))
	}
	quo, _ := mulDiv(2*uint64(amount), level.num, level.den)
	return whole + int64(quo+1)/2
}

// flat is amount ÷ m + interest ÷ n, rounded as annuity is.
func (p *Plan) flat(amount, interest, n, m int64) int64 {
	rest := amount%m*n + interest%n*m
	whole := amount/m + interest/n + rest/(n*m)
	rest %= n * m
	if p.terms.PaymentStep > 1 {
		return whole + min(rest, 1)
	}
	return whole + half(uint64(rest), uint64(n*m))
}

// interest is the rate on principal for so many periods, rounded half up.
func (p *Plan) interest(principal int64, periods int) int64 {
	return share(principal, p.num*uint64(periods), p.den)
}

// roundUp is the next multiple of the payment step.
func (p *Plan) roundUp(n int64) int64 {
	if rest := n % max(p.terms.PaymentStep, 1); rest > 0 {
		return n - rest + p.terms.PaymentStep
	}
	return n
}

// kept is what is kept back of an amount at the start.
func (p *Plan) kept(amount int64) (fee, savings int64) {
	fee = share(amount, uint64(p.terms.FeeRate), uint64(one)) + p.terms.FeeAmount
	return fee, share(amount, uint64(p.terms.SavingsRate), uint64(one))
}

// check is the Problem with a loan, or the zero Problem.
func (p *Plan) check(amount int64, term, grace int) Problem {
	if bad := within("term", int64(term), 1, int64(len(p.most)-1)); bad != (Problem{}) {
		return bad
	}
	if bad := within("grace", int64(grace), 0, int64(term-1)); bad != (Problem{}) {
		return bad
	}
	if bad := within("amount", amount, 1, p.most[term]); bad != (Problem{}) {
		return bad
	}
	if fee, savings := p.kept(amount); amount-fee-savings <= 0 {
		return Problem{Code: NothingInHand, Item: "amount"}
	}
	return Problem{}
}
