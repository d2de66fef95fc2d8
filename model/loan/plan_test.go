package loan

import (
	"errors"
	"math"
	"math/big"
	"testing"
	"time"

	"pgregory.net/rapid"
)

// exactFactor is i/(1 - (1+i)^-m) by the textbook, and 1/m without interest.
func exactFactor(num, den uint64, m int) *big.Rat {
	if num == 0 {
		return big.NewRat(1, int64(m))
	}
	i := new(big.Rat).SetFrac(new(big.Int).SetUint64(num), new(big.Int).SetUint64(den))
	one := big.NewRat(1, 1)
	grown, growth := big.NewRat(1, 1), new(big.Rat).Add(one, i)
	for range m {
		grown.Mul(grown, growth)
	}
	return i.Quo(i, one.Sub(one, grown.Inv(grown)))
}

// rounded is x half up, or up to the step.
func rounded(x *big.Rat, step int64) int64 {
	if step <= 1 {
		x.Add(x, big.NewRat(1, 2))
		return new(big.Int).Div(x.Num(), x.Denom()).Int64()
	}
	x.Quo(x, new(big.Rat).SetInt64(step))
	down := new(big.Int).Neg(x.Num())
	return -down.Div(down, x.Denom()).Int64() * step
}

var words = struct {
	units      []Unit
	repayments []Repayment
	methods    []Method
	pers       []Per
}{
	[]Unit{Weeks, Fortnights, Months},
	[]Repayment{EqualPayments, InterestThenPrincipal, AllAtTheEnd},
	[]Method{Declining, Flat},
	[]Per{PerYear, PerMonth},
}

// anyTerms draws ordinary terms, and odd ones.
func anyTerms(t *rapid.T) Terms {
	return Terms{
		Unit:        rapid.SampledFrom(words.units).Draw(t, "unit"),
		Repayment:   rapid.SampledFrom(words.repayments).Draw(t, "repayment"),
		Method:      rapid.SampledFrom(words.methods).Draw(t, "method"),
		Per:         rapid.SampledFrom(words.pers).Draw(t, "per"),
		Rate:        anyRate(t),
		FeeRate:     Rate(rapid.Int64Range(0, 200_000_000).Draw(t, "fee rate")),
		FeeAmount:   rapid.Int64Range(0, 1000).Draw(t, "fee"),
		SavingsRate: Rate(rapid.Int64Range(0, 300_000_000).Draw(t, "savings")),
		PaymentStep: rapid.SampledFrom([]int64{0, 1, 5, 100, 2500, 1_000_000}).Draw(t, "step"),
	}
}

func anyRate(t *rapid.T) Rate {
	return Rate(rapid.OneOf(
		rapid.SampledFrom([]int64{0, 1, 10_000_000, 240_000_000, 1_000_000_000, 12_000_000_000, int64(LargestRate)}),
		rapid.Int64Range(0, 1_000_000_000),
	).Draw(t, "rate"))
}

func anyAmount(t *rapid.T, name string) int64 {
	return rapid.OneOf(rapid.Int64Range(1, 1000), rapid.Int64Range(1, 100_000_000), rapid.Int64Range(1, LargestAmount)).Draw(t, name)
}

// A payment is the exact annuity rightly rounded, also for the amounts that
// lie closest to a tie or to a multiple: the denominators of the fractions
// next to the factor, and half of them.
func TestPaymentIsExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		terms := Terms{Unit: rapid.SampledFrom(words.units).Draw(t, "unit"), Repayment: EqualPayments, Method: Declining,
			Per: rapid.SampledFrom(words.pers).Draw(t, "per"), Rate: anyRate(t),
			PaymentStep: rapid.SampledFrom([]int64{0, 1, 2, 7, 100}).Draw(t, "step")}
		m := rapid.IntRange(1, 60).Draw(t, "payments")
		p, err := Compile(terms, m)
		if err != nil {
			t.Fatal(err)
		}
		factor := exactFactor(p.num, p.den, m)
		amounts := []int64{anyAmount(t, "amount")}
		for _, limit := range []int64{2 * LargestAmount, LargestAmount, 2 * anyAmount(t, "limit")} {
			below, above := neighbours(factor.Num(), factor.Denom(), uint64(limit))
			amounts = append(amounts, int64(below.den), int64(below.den/2), int64(above.den), int64(above.den/2))
		}
		for _, amount := range amounts {
			got, ok := p.Payment(amount, m, 0)
			// Never more than is owed, as it would be with a large step.
			exact := new(big.Rat).Mul(factor, new(big.Rat).SetInt64(amount))
			want := min(rounded(exact, terms.PaymentStep), amount+p.interest(min(max(amount, 0), p.most[m]), 1))
			if ok && got != want {
				t.Fatalf("%d in %d at %d/%d: %d, want %d", amount, m, p.num, p.den, got, want)
			}
		}
	})
}

// A flat payment is a share of the amount and a share of the whole interest.
func TestFlatPaymentIsExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		rate, step := anyRate(t), rapid.SampledFrom([]int64{0, 7}).Draw(t, "step")
		term := rapid.IntRange(2, 60).Draw(t, "term")
		grace := rapid.IntRange(0, term-2).Draw(t, "grace")
		amount := rapid.Int64Range(1000, LargestAmount).Draw(t, "amount")
		p, err := Compile(Terms{Unit: Months, Repayment: EqualPayments, Method: Flat, Per: PerMonth, Rate: rate, PaymentStep: step}, term)
		if err != nil {
			t.Fatal(err)
		}
		got, ok := p.Payment(amount, term, grace)
		if !ok {
			return
		}
		interest := rounded(new(big.Rat).Mul(big.NewRat(amount, 1), big.NewRat(int64(rate)*int64(term), int64(one))), 1)
		exact := big.NewRat(amount, int64(term-grace))
		if want := rounded(exact.Add(exact, big.NewRat(interest, int64(term))), step); got != want {
			t.Fatalf("%d, want %d", got, want)
		}
	})
}

// Against trying every denominator.
func TestNeighbours(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		x := big.NewRat(rapid.Int64Range(0, 5000).Draw(t, "p"), rapid.Int64Range(1, 1000).Draw(t, "q"))
		limit := rapid.Int64Range(1, 60).Draw(t, "limit")
		var below, above *big.Rat
		for den := int64(1); den <= limit; den++ {
			down := new(big.Int).Mul(x.Num(), big.NewInt(den))
			down.Div(down, x.Denom())
			low := new(big.Rat).SetFrac(down, big.NewInt(den))
			high := low
			if low.Cmp(x) < 0 {
				high = new(big.Rat).Add(low, big.NewRat(1, den))
			}
			if below == nil || low.Cmp(below) > 0 {
				below = low
			}
			if above == nil || high.Cmp(above) < 0 {
				above = high
			}
		}
		value := func(f fraction) *big.Rat {
			return new(big.Rat).Add(big.NewRat(int64(f.whole), 1), big.NewRat(int64(f.num), int64(f.den)))
		}
		gotBelow, gotAbove := neighbours(x.Num(), x.Denom(), uint64(limit))
		if value(gotBelow).Cmp(below) != 0 || value(gotAbove).Cmp(above) != 0 || gotBelow.den > uint64(limit) || gotAbove.den > uint64(limit) {
			t.Fatalf("%v within %d: %v and %v, want %v and %v", x, limit, gotBelow, gotAbove, below, above)
		}
	})
}

// Ties: 1,001 in two payments without interest is 500.5 each, which is 501;
// a multiple of the step stays what it is.
func TestPaymentTies(t *testing.T) {
	for _, c := range []struct {
		terms  Terms
		amount int64
		term   int
		want   int64
	}{
		{Terms{}, 1001, 2, 501},
		{Terms{PaymentStep: 100}, 1200, 12, 100},
		{Terms{PaymentStep: 100}, 1201, 12, 200},
		// 100 % a month, two months: the factor is 4/3, for 100 that is 133.33.
		{Terms{Rate: one, Per: PerMonth}, 100, 2, 133},
		{Terms{Rate: one, Per: PerMonth, PaymentStep: 4}, 9, 2, 12},
	} {
		if got, ok := compiled(t, c.terms, c.term).Payment(c.amount, c.term, 0); !ok || got != c.want {
			t.Errorf("%+v: %d %v, want %d", c, got, ok, c.want)
		}
	}
}

// What is true of every schedule.
func TestEverySchedule(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		terms := anyTerms(t)
		term := rapid.IntRange(1, 40).Draw(t, "term")
		grace := rapid.IntRange(0, term-1).Draw(t, "grace")
		amount := anyAmount(t, "amount")
		p, err := Compile(terms, 40)
		if err != nil {
			t.Fatal(err)
		}
		payment, ok := p.Payment(amount, term, grace)
		s, err := p.Schedule(amount, term, grace, day(2026, 1, 31))
		if ok != (err == nil) {
			t.Fatalf("Payment %v, Schedule %v", ok, err)
		}
		if err != nil {
			return
		}
		if s.Payment != payment || s.CashInHand <= 0 || s.CashInHand+s.Fee+s.Savings != amount {
			t.Fatalf("%+v", s)
		}
		step := max(terms.PaymentStep, 1)
		var principal, interest, paid int64
		balance, last := amount, len(s.Rows)-1
		for i, r := range s.Rows {
			balance -= r.Principal
			principal, interest, paid = principal+r.Principal, interest+r.Interest, paid+r.Payment
			switch {
			case r.Principal < 0 || r.Interest < 0 || r.Principal+r.Interest != r.Payment:
				t.Fatalf("row %+v", r)
			case r.Balance != balance || (balance == 0) != (i == last):
				t.Fatalf("balance %d after %+v", balance, r)
			case i < last && r.Payment%step != 0:
				t.Fatalf("%d is not a multiple of %d", r.Payment, step)
			case i < last && i >= grace && terms.Repayment == EqualPayments && r.Payment != payment:
				t.Fatalf("%d is not %d", r.Payment, payment)
			case i < last && i < grace && step == 1 && r.Principal != 0:
				t.Fatalf("principal in grace: %+v", r)
			case terms.Method == Declining && terms.Repayment != AllAtTheEnd && r.Interest != p.interest(balance+r.Principal, 1):
				t.Fatalf("interest %+v", r)
			}
		}
		if principal != amount || interest != s.TotalInterest || paid != s.TotalPaid || paid != amount+interest {
			t.Fatalf("sums of %+v", s)
		}
		if terms.Method == Flat && s.Rows[last].Period == term && interest != p.interest(amount, term) {
			t.Fatalf("flat interest %d", interest)
		}
		if n := s.Rows[last].Period; n > term || (step == 1 && amount > 1000 && n != term) {
			t.Fatalf("%d periods of %d", n, term)
		}
		checkCost(t, byPeriod(s))
	})
}

// A larger amount never has a smaller payment.
func TestPaymentGrowsWithTheAmount(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		terms := anyTerms(t)
		term := rapid.IntRange(1, 40).Draw(t, "term")
		grace := rapid.IntRange(0, term-1).Draw(t, "grace")
		p, err := Compile(terms, term)
		if err != nil {
			t.Fatal(err)
		}
		a := anyAmount(t, "amount")
		b := min(a+rapid.OneOf(rapid.Int64Range(1, 3), rapid.Int64Range(1, 1_000_000)).Draw(t, "more"), LargestAmount)
		small, ok := p.Payment(a, term, grace)
		large, ok2 := p.Payment(b, term, grace)
		if ok && ok2 && large < small {
			t.Fatalf("%d for %d, %d for %d", small, a, large, b)
		}
	})
}

// Nothing that can be written in an argument leads to a panic or to sums that
// wrapped around.
func TestExtremes(t *testing.T) {
	extreme := rapid.OneOf(
		rapid.SampledFrom([]int64{math.MinInt64, -1, 0, 1, 2, 600, 1200, int64(one), int64(LargestRate), LargestAmount, math.MaxInt64}),
		rapid.Int64(), rapid.Int64Range(0, 1<<40))
	rapid.Check(t, func(t *rapid.T) {
		terms := anyTerms(t)
		for name, field := range map[string]*int64{"fee amount": &terms.FeeAmount, "step": &terms.PaymentStep} {
			if rapid.Bool().Draw(t, "extreme "+name) {
				*field = extreme.Draw(t, name)
			}
		}
		terms.Rate = Rate(rapid.OneOf(extreme, rapid.Int64Range(0, int64(LargestRate))).Draw(t, "rate"))
		longest := rapid.OneOf(rapid.IntRange(1, 90), rapid.Just(-1), rapid.Just(LongestTerm+1)).Draw(t, "longest")
		p, err := Compile(terms, longest)
		if err != nil {
			if problem := (Problem{}); !errors.As(err, &problem) || problem.Error() == "" {
				t.Fatal(err)
			}
			return
		}
		amount := extreme.Draw(t, "amount")
		term := rapid.OneOf(rapid.IntRange(1, longest), rapid.Int()).Draw(t, "term")
		grace := rapid.OneOf(rapid.IntRange(0, max(term-1, 0)), rapid.Int()).Draw(t, "grace")
		payment, ok := p.Payment(amount, term, grace)
		s, err := p.Schedule(amount, term, grace, day(2026, 1, 31))
		if ok != (err == nil) {
			t.Fatalf("Payment %v, Schedule %v", ok, err)
		}
		if !ok {
			return
		}
		sum := new(big.Int)
		for _, r := range s.Rows {
			if r.Payment < 0 || r.Interest < 0 || r.Principal < 0 || r.Balance < 0 {
				t.Fatalf("%+v", r)
			}
			sum.Add(sum, big.NewInt(r.Payment))
		}
		if payment < 0 || !sum.IsInt64() || sum.Int64() != s.TotalPaid || s.TotalPaid < amount {
			t.Fatalf("paid %v, %d", sum, s.TotalPaid)
		}
	})
}

// The largest a box takes, at 100 % a month: the sum of all interest is 600
// times the amount, which still fits; with three more decimals it does not.
func TestLargest(t *testing.T) {
	for _, repayment := range words.repayments {
		for _, method := range words.methods {
			p := compiled(t, Terms{Rate: one, Per: PerMonth, Repayment: repayment, Method: method}, 600)
			amount := int64(999_999_999_999_00)
			s := scheduled(t, p, amount, 600, 0, day(2026, 1, 1))
			if s.TotalInterest <= 0 || s.TotalPaid != amount+s.TotalInterest || s.TotalInterest > 600*amount {
				t.Errorf("%s %s: interest %d", repayment, method, s.TotalInterest)
			}
			if _, ok := p.Payment(amount*1000, 600, 0); ok {
				t.Errorf("%s %s: a payment beyond int64", repayment, method)
			}
			_, err := p.Schedule(amount*1000, 600, 0, day(2026, 1, 1))
			if want := (Problem{OutOfRange, "amount", amount * 1000, 1, (1 << 62) / 601}); err != error(want) {
				t.Errorf("%s %s: %v, want %v", repayment, method, err, want)
			}
		}
	}
}

func TestProblems(t *testing.T) {
	good := Terms{Unit: Months, Repayment: EqualPayments, Method: Declining, Per: PerYear, Rate: 240_000_000}
	for _, c := range []struct {
		change func(*Terms)
		want   Problem
	}{
		{func(t *Terms) { t.Unit = "days" }, Problem{Code: UnknownWord, Item: "Unit"}},
		{func(t *Terms) { t.Repayment = "" }, Problem{Code: UnknownWord, Item: "Repayment"}},
		{func(t *Terms) { t.Method = "Flat" }, Problem{Code: UnknownWord, Item: "Method"}},
		{func(t *Terms) { t.Per = "week" }, Problem{Code: UnknownWord, Item: "Per"}},
		{func(t *Terms) { t.Rate = -1 }, Problem{OutOfRange, "Rate", -1, 0, 100_000_000_000}},
		{func(t *Terms) { t.FeeRate = one + 1 }, Problem{OutOfRange, "FeeRate", 1_000_000_001, 0, 1_000_000_000}},
		{func(t *Terms) { t.FeeAmount = -5 }, Problem{OutOfRange, "FeeAmount", -5, 0, LargestAmount}},
		{func(t *Terms) { t.SavingsRate = -1 }, Problem{OutOfRange, "SavingsRate", -1, 0, 1_000_000_000}},
		{func(t *Terms) { t.PaymentStep = -1 }, Problem{OutOfRange, "PaymentStep", -1, 0, LargestAmount}},
	} {
		terms := good
		c.change(&terms)
		if _, err := Compile(terms, 12); err != error(c.want) {
			t.Errorf("%v, want %v", err, c.want)
		}
	}
	if _, err := Compile(good, 0); err != error(Problem{OutOfRange, "longest", 0, 1, LongestTerm}) {
		t.Error(err)
	}
	good.FeeRate, good.FeeAmount, good.SavingsRate = 100_000_000, 900, 100_000_000
	p := compiled(t, good, 12)
	for _, c := range []struct {
		amount      int64
		term, grace int
		want        Problem
	}{
		{0, 12, 0, Problem{OutOfRange, "amount", 0, 1, LargestAmount}},
		{5000, 13, 0, Problem{OutOfRange, "term", 13, 1, 12}},
		{5000, 12, 12, Problem{OutOfRange, "grace", 12, 0, 11}},
		{1125, 12, 0, Problem{Code: NothingInHand, Item: "amount"}},
	} {
		if _, err := p.Schedule(c.amount, c.term, c.grace, time.Time{}); err != error(c.want) {
			t.Errorf("%v, want %v", err, c.want)
		}
		if _, ok := p.Payment(c.amount, c.term, c.grace); ok {
			t.Errorf("a payment in spite of %v", c.want)
		}
	}
}

func TestProblemText(t *testing.T) {
	for want, p := range map[string]Problem{
		"cost_no_flows":                          {Code: NoFlows},
		"loan_unknown_word Unit":                 {Code: UnknownWord, Item: "Unit"},
		"loan_out_of_range term 13 not in 1..12": {OutOfRange, "term", 13, 1, 12},
	} {
		if got := p.Error(); got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
}

func BenchmarkPayment(b *testing.B) {
	p := compiled(b, Terms{Rate: 240_000_000, FeeRate: 10_000_000, PaymentStep: 50}, 60)
	b.ReportAllocs()
	amount := int64(100_000)
	for b.Loop() {
		amount++
		if _, ok := p.Payment(amount, 36, 2); !ok {
			b.Fatal(amount)
		}
	}
}

func BenchmarkCompile(b *testing.B) {
	for b.Loop() {
		compiled(b, Terms{Rate: 240_000_000}, 60)
	}
}

func BenchmarkYearlyCost(b *testing.B) {
	s := scheduled(b, compiled(b, Terms{Rate: 240_000_000, FeeRate: 10_000_000}, 60), 100_000, 36, 0, day(2026, 1, 31))
	for b.Loop() {
		if _, err := s.YearlyCost(); err != nil {
			b.Fatal(err)
		}
	}
}

func TestPaymentDoesNotAllocate(t *testing.T) {
	for _, repayment := range words.repayments {
		for _, method := range words.methods {
			p := compiled(t, Terms{Rate: 240_000_000, Repayment: repayment, Method: method, PaymentStep: 50}, 60)
			if n := testing.AllocsPerRun(10, func() { p.Payment(123_456, 36, 2) }); n != 0 {
				t.Errorf("%s %s: %v allocations", repayment, method, n)
			}
		}
	}
}
