package loan

import (
	"cmp"
	"math"
	"math/big"
	"slices"
	"time"
)

// A Flow is money that moves on a day, in minor units: what the borrower
// receives is above 0 and what the borrower pays below, or the other way round
// throughout.
type Flow struct {
	// Date counts by its year, month and day alone.
	Date   time.Time
	Amount int64
}

// YearlyCost is the rate a year, compounded, at which what is received and
// what is paid back are worth the same: 0.1296 is 12.96 %. The equation is
// that of Directive 2008/48/EC, Annex I, part I, with a year of 365 days. Flows may
// come in any order. The result is the same on every processor; it is never
// below 0.
//
// It returns a Problem whose code is NoFlows, OneWay, BelowZero, NotSingle,
// CostTooLarge or FlowsTooLarge.
func YearlyCost(flows []Flow) (float64, error) {
	moves := make([]move, len(flows))
	for i, f := range flows {
		moves[i] = move{midnight(f.Date).Unix() / (24 * 60 * 60), f.Amount}
	}
	return solve(moves, 365)
}

// YearlyCostByPeriods is YearlyCost with equal periods instead of dates:
// amounts[k] moves k periods after the start, and perYear periods (at least 1)
// make a year. The Directive has 12 equal months or 52 weeks.
func YearlyCostByPeriods(amounts []int64, perYear int) (float64, error) {
	if p := within("perYear", int64(perYear), 1, math.MaxInt32); p != (Problem{}) {
		return 0, p
	}
	moves := make([]move, len(amounts))
	for k, amount := range amounts {
		moves[k] = move{int64(k), amount}
	}
	return solve(moves, int64(perYear))
}

// Flows are what the borrower receives (above 0) and pays (below 0).
func (s Schedule) Flows() []Flow {
	flows := make([]Flow, 0, len(s.Rows)+2)
	last := s.PaidOut
	flows = append(flows, Flow{last, s.CashInHand})
	for _, r := range s.Rows {
		last = r.Due
		flows = append(flows, Flow{last, -r.Payment})
	}
	return append(flows, Flow{last, s.Savings})
}

// YearlyCost is that of the schedule's flows on their dates.
func (s Schedule) YearlyCost() (float64, error) { return YearlyCost(s.Flows()) }

// YearlyCostByPeriods is that of the schedule's flows with all periods equal:
// 12 months, 26 fortnights or 52 weeks a year.
func (s Schedule) YearlyCostByPeriods() (float64, error) {
	moves := make([]move, 0, len(s.Rows)+2)
	last := int64(0)
	moves = append(moves, move{last, s.CashInHand})
	for _, r := range s.Rows {
		last = int64(r.Period)
		moves = append(moves, move{last, -r.Payment})
	}
	moves = append(moves, move{last, s.Savings})
	switch s.Unit {
	case Weeks:
		return solve(moves, 52)
	case Fortnights:
		return solve(moves, 26)
	}
	return solve(moves, 12)
}

// A move is an amount at a time, counted in days or in periods.
type move struct{ at, amount int64 }

// solve finds the yearly rate.
func solve(moves []move, perYear int64) (float64, error) {
	moves, err := tidy(moves)
	if err != nil {
		return 0, err
	}
	total, turns := outlook(moves)
	switch {
	case turns == 0 && total == 0:
		return 0, nil
	case turns == 0:
		return 0, Problem{Code: BelowZero}
	case turns > 1 || total == 0:
		return 0, Problem{Code: NotSingle}
	}
	yearly := grown(root(moves, float64(perYear)), perYear)
	if math.IsInf(yearly, 0) {
		return 0, Problem{Code: CostTooLarge}
	}
	return yearly, nil
}

// tidy puts moves in order, one for each time, none of them 0 and the first
// above 0.
func tidy(moves []move) ([]move, error) {
	var size uint64
	for _, m := range moves {
		size += uint64(max(m.amount, -m.amount))
		if size > math.MaxInt64 {
			return nil, Problem{Code: FlowsTooLarge}
		}
	}
	slices.SortFunc(moves, func(a, b move) int { return cmp.Compare(a.at, b.at) })
	merged := moves[:0]
	for _, m := range moves {
		if n := len(merged); n > 0 && merged[n-1].at == m.at {
			merged[n-1].amount += m.amount
		} else {
			merged = append(merged, m)
		}
	}
	merged = slices.DeleteFunc(merged, func(m move) bool { return m.amount == 0 })
	if len(merged) == 0 {
		return nil, Problem{Code: NoFlows}
	}
	negative := merged[0].amount < 0
	oneWay := true
	for i := range merged {
		if negative {
			merged[i].amount = -merged[i].amount
		}
		oneWay = oneWay && merged[i].amount > 0
	}
	if oneWay {
		return nil, Problem{Code: OneWay}
	}
	return merged, nil
}

// outlook is the sum of all moves, and a bound on how many rates above 0 solve
// the equation. As a polynomial in the discount factor v, 0 < v < 1, the
// equation has the same solutions when divided by (1-v)²; its coefficients are
// then sums of sums of the moves, and Descartes' rule of signs says that there
// are at most as many solutions as these change sign. (The same with single
// sums: C. Norstrøm, J Financial Quant Anal 7 (1972) 1835; from memory.)
func outlook(moves []move) (total int64, turns int) {
	sign := 1
	see := func(s int) {
		if s == -sign {
			sign = s
			turns++
		}
	}
	var sums, days, sum big.Int
	for i, m := range moves {
		total += m.amount
		if i+1 < len(moves) {
			days.SetInt64(moves[i+1].at - m.at)
			sums.Add(&sums, sum.Mul(sum.SetInt64(total), &days))
			see(sums.Sign())
		}
	}
	// From the last move on the sums change by the total, for ever.
	see(cmp.Compare(total, 0))
	return total, turns
}

// root is the one rate for each unit of time at which the moves are worth 0:
// they are worth less at lower rates and more at higher ones. Newton's method,
// kept between the highest rate known to be too low and the lowest known to be
// too high.
func root(moves []move, perYear float64) float64 {
	low, high := 0.0, math.Inf(1)
	x := 0.0
	for range 1000 {
		worth, slope := worth(moves, x)
		step := worth / slope
		// So near, the next step would be lost in rounding.
		if math.Abs(float64(step*perYear)) <= 1e-12*(1+x) {
			return x - step
		}
		if worth < 0 {
			low = x
		} else {
			high = x
		}
		x -= step
		if !(low < x && x < high) {
			if math.IsInf(high, 1) {
				x = low + low + 1/perYear
			} else {
				x = (low + high) / 2
			}
		}
	}
	return x
}

// worth is the value of the moves at the time of the first, at the rate x, and
// how fast it changes with x. All is plain float64 arithmetic, each product
// rounded by an explicit conversion so that no compiler may fuse it with a
// sum: math.Pow and fused products differ between processors.
func worth(moves []move, x float64) (sum, slope float64) {
	last := len(moves) - 1
	sum = float64(moves[last].amount)
	for i := last - 1; i >= 0; i-- {
		gap := moves[i+1].at - moves[i].at
		growth := 1 + grown(x, gap)
		slope = (slope - float64(sum*float64(gap))/(1+x)) / growth
		sum = float64(moves[i].amount) + sum/growth
	}
	return sum, slope
}

// grown is (1+x)^n - 1 for x ≥ 0, by squaring, without losing the digits of a
// small x.
func grown(x float64, n int64) float64 {
	y := 0.0
	for ; n > 0; n >>= 1 {
		if n&1 == 1 {
			y += float64(x * (1 + y))
		}
		x += float64(x * (1 + x))
	}
	return y
}
