package loan

import (
	"errors"
	"math"
	"math/big"
	"testing"
	"time"

	"pgregory.net/rapid"
)

func day(year, month, d int) time.Time {
	return time.Date(year, time.Month(month), d, 0, 0, 0, 0, time.UTC)
}

// near checks a share against a published percentage. The published digits are
// themselves up to 1.3e-12 off (found with 60-digit arithmetic).
func near(t *testing.T, what string, got float64, err error, percent float64) {
	t.Helper()
	if err != nil {
		t.Errorf("%s: %v", what, err)
	} else if math.Abs(got*100-percent) > 2e-12 {
		t.Errorf("%s: %.15g %%, want %.15g", what, got*100, percent)
	}
}

// Directive 98/7/EC, Annex III, calendar basis; digits by R 4.2.2 from the
// equation of Directive 2008/48/EC, Annex I.
func TestYearlyCostOfTheDirective(t *testing.T) {
	paidOut := day(1994, 1, 1)
	cost, err := YearlyCost([]Flow{{paidOut, 1000}, {day(1995, 7, 1), -1200}})
	near(t, "first example", cost, err, 12.9620377080724)
	cost, err = YearlyCost([]Flow{{paidOut, 1000}, {paidOut, -50}, {day(1995, 7, 1), -1200}})
	near(t, "second example", cost, err, 16.9026206536971)
	cost, err = YearlyCost([]Flow{{paidOut, 1000}, {day(1995, 1, 1), -600}, {day(1996, 1, 1), -600}})
	near(t, "third example", cost, err, 13.0662386291807)
	cost, err = YearlyCostByPeriods([]int64{1000, -600, -600}, 1)
	near(t, "third example, two years", cost, err, 13.0662386291807)
	// 1.5 years for 546 days: 1.2^(2/3) - 1.
	cost, err = YearlyCostByPeriods([]int64{1000, 0, 0, -1200}, 2)
	if err != nil || math.Abs(cost*100-12.9243) > 0.00005 {
		t.Errorf("first example, a year and a half: %v %v", cost, err)
	}
}

// compiled is a Plan of monthly terms, and fails the test where there is none.
func compiled(t testing.TB, terms Terms, longest int) *Plan {
	t.Helper()
	if terms.Unit == "" {
		terms.Unit = Months
	}
	if terms.Repayment == "" {
		terms.Repayment = EqualPayments
	}
	if terms.Method == "" {
		terms.Method = Declining
	}
	if terms.Per == "" {
		terms.Per = PerYear
	}
	p, err := Compile(terms, longest)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func scheduled(t testing.TB, p *Plan, amount int64, term, grace int, paidOut time.Time) Schedule {
	t.Helper()
	s, err := p.Schedule(amount, term, grace, paidOut)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// fine is so small a minor unit that rounding to it does not show.
const fine = 1_000_000_000_000

// Standard annuity table for the payment; (1 + 0.06/12)^12 - 1 for the cost.
func TestAnnuityTable(t *testing.T) {
	p := compiled(t, Terms{Rate: 60_000_000}, 360)
	if got, ok := p.Payment(100_000_00, 360, 0); !ok || got != 599_55 {
		t.Errorf("payment %d %v, want 599.55", got, ok)
	}
	cost, err := scheduled(t, p, 100_000*fine, 360, 0, day(2026, 1, 1)).YearlyCostByPeriods()
	near(t, "360 months", cost, err, 6.16778118644983)
}

// Flat to effective, computed with R 4.2.2 on unrounded payments.
func TestFlatToEffective(t *testing.T) {
	for _, c := range []struct {
		rate            Rate
		term            int
		nominal, yearly float64
	}{
		{100_000_000, 12, 17.9719974980352, 19.5288357993552},
		{200_000_000, 12, 35.0742489229607, 41.2998984149619},
		{120_000_000, 36, 21.1998926754679, 23.3860715074779},
		{240_000_000, 6, 40.0479877251747, 48.2814931776350},
	} {
		s := scheduled(t, compiled(t, Terms{Rate: c.rate, Method: Flat}, c.term), 36_000*fine, c.term, 0, day(2026, 1, 1))
		cost, err := s.YearlyCostByPeriods()
		near(t, "flat", cost, err, c.yearly)
		near(t, "flat, nominal", cost, err, 100*grown(c.nominal/1200, 12))
	}
}

// As above, on twelve payments of 91.6667 rounded to 91.67.
func TestFlatToEffectiveRounded(t *testing.T) {
	p := compiled(t, Terms{Rate: 100_000_000, Method: Flat}, 12)
	payment, ok := p.Payment(1000_00, 12, 0)
	if !ok || payment != 91_67 {
		t.Fatalf("payment %d %v", payment, ok)
	}
	flows := []int64{1000_00}
	for range 12 {
		flows = append(flows, -payment)
	}
	cost, err := YearlyCostByPeriods(flows, 12)
	near(t, "rounded", cost, err, 19.5370849876528)
}

// 1,000 at 12 %, 12 months, a fee of 1 % kept back: computed with R 4.2.2.
func TestFeeKeptBack(t *testing.T) {
	p := compiled(t, Terms{Rate: 120_000_000, FeeRate: 10_000_000}, 12)
	s := scheduled(t, p, 1000*fine, 12, 0, day(2026, 1, 1))
	if s.Payment != 88_848788678342 || s.CashInHand != 990*fine {
		t.Errorf("payment %d, in hand %d", s.Payment, s.CashInHand)
	}
	cost, err := s.YearlyCostByPeriods()
	near(t, "fee", cost, err, 14.8355556805562)
}

// A loan is the same loan from the lender's side, and in any order.
func TestYearlyCostEitherSide(t *testing.T) {
	cost, err := YearlyCost([]Flow{{day(1995, 7, 1), 1200}, {day(1994, 1, 1), -1000}})
	near(t, "lender's side", cost, err, 12.9620377080724)
}

func TestYearlyCostWithoutOneAnswer(t *testing.T) {
	for _, c := range []struct {
		code  string
		flows []int64
	}{
		{NoFlows, nil},
		{NoFlows, []int64{0, 0, 0}},
		{OneWay, []int64{100}},
		{OneWay, []int64{-100, -5}},
		{BelowZero, []int64{100, -99}},
		{BelowZero, []int64{-100, 50, 49}},
		{BelowZero, []int64{100, -10, 5}},
		// 100 - 230v + 132v² is 0 at v = 10/11 and at 10/12; with 133 nowhere.
		{NotSingle, []int64{100, -230, 132}},
		{NotSingle, []int64{100, -230, 133}},
		// No rate at all, and 25 %: 100 - 225v + 125v².
		{NotSingle, []int64{100, -225, 125}},
		{CostTooLarge, []int64{1, -math.MaxInt64 + 1}},
		{FlowsTooLarge, []int64{math.MaxInt64, -1}},
		{FlowsTooLarge, []int64{math.MinInt64}},
		{FlowsTooLarge, []int64{math.MinInt64, math.MinInt64}},
	} {
		if cost, err := YearlyCostByPeriods(c.flows, 365); !errors.Is(err, Problem{Code: c.code}) {
			t.Errorf("%v: %v %v, want %s", c.flows, cost, err, c.code)
		}
	}
	if _, err := YearlyCostByPeriods([]int64{1, -1}, 0); !errors.Is(err, Problem{OutOfRange, "perYear", 0, 1, math.MaxInt32}) {
		t.Error(err)
	}
	if _, err := (Schedule{}).YearlyCost(); !errors.Is(err, Problem{Code: NoFlows}) {
		t.Error(err)
	}
}

// Money that turns more than once may still have one cost that is not below 0.
func TestYearlyCostOfManyTurns(t *testing.T) {
	for _, c := range []struct {
		flows   []int64
		percent float64
	}{
		// 100 - 120v + 20v² is 0 at v = 1 and v = 5.
		{[]int64{100, -120, 20}, 0},
		// 810 - 1260v + 400v² is 0 at v = 0.9 and v = 2.25.
		{[]int64{810, -1260, 400}, 100.0 / 9},
		// 380 - 900v + 495v² is 0 at v = 2/3 and v = 38/33, and falls at first.
		{[]int64{380, -900, 495}, 50},
		// 300 - 500v - 700v² + 600v³ is 0 at v = (√13 - 1)/6 and v = 3/2.
		{[]int64{300, -500, -700, 600}, 50 * (math.Sqrt(13) - 1)},
		// The sums turn, but the sums of sums do not: 100 - 50v - 60v² + 10v³ is
		// 0 at v = 1 and beyond.
		{[]int64{100, -50, -60, 10}, 0},
		{[]int64{100, -100}, 0},
	} {
		cost, err := YearlyCostByPeriods(c.flows, 1)
		near(t, "turns", cost, err, c.percent)
	}
}

// Arithmetic: 2/1 - 1, 2^12 - 1 and so on.
func TestYearlyCostFarOut(t *testing.T) {
	for _, c := range []struct {
		flows   []int64
		perYear int
		want    float64
	}{
		{[]int64{1, -2}, 1, 1},
		{[]int64{1, -2}, 12, 4095},
		{[]int64{1, -1_000_000_000}, 1, 999_999_999},
		{[]int64{999_999_999_999, -1_000_000_000_000}, 1, 1.000000000001e-12},
	} {
		got, err := YearlyCostByPeriods(c.flows, c.perYear)
		if err != nil || math.Abs(got-c.want) > 1e-15+1e-13*c.want {
			t.Errorf("%v: %v %v, want %v", c.flows, got, err, c.want)
		}
	}
}

// byPeriod is what the borrower of a schedule receives and pays each period.
func byPeriod(s Schedule) []int64 {
	last := s.Rows[len(s.Rows)-1].Period
	amounts := make([]int64, last+1)
	amounts[0] = s.CashInHand
	for _, r := range s.Rows {
		amounts[r.Period] = -r.Payment
	}
	amounts[last] += s.Savings
	return amounts
}

// worthSign is the sign of the equation at a rate for one period, in 400-bit
// arithmetic.
func worthSign(amounts []int64, rate float64) int {
	wide := func() *big.Float { return new(big.Float).SetPrec(400) }
	growth := wide().Add(wide().SetInt64(1), wide().SetFloat64(rate))
	sum := wide()
	for _, amount := range amounts {
		sum.Add(sum.Mul(sum, growth), wide().SetInt64(amount))
	}
	return sum.Sign()
}

// checkCost puts the cost back into the equation: a little below it the flows
// must be worth less than 0, a little above it more.
func checkCost(t *rapid.T, amounts []int64) {
	cost, err := YearlyCostByPeriods(amounts, 1)
	if err != nil {
		t.Fatalf("%v: %v", amounts, err)
	}
	off := 1e-12 * (1 + cost)
	below, above := worthSign(amounts, cost-off), worthSign(amounts, cost+off)
	if above != 1 || (cost > 0 && below != -1) {
		t.Fatalf("%v: cost %v, worth %d below and %d above it", amounts, cost, below, above)
	}
}

// Whatever the flows: a cost solves the equation and is the only one that is
// not below 0; when it is BelowZero nothing solves it.
func TestYearlyCostOfAnyFlows(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		amounts := rapid.SliceOfN(rapid.Int64Range(-1000, 1000), 0, 12).Draw(t, "amounts")
		amounts = append([]int64{rapid.Int64Range(1, 3000).Draw(t, "first")}, amounts...)
		cost, err := YearlyCostByPeriods(amounts, 1)
		if errors.Is(err, Problem{Code: OneWay}) || errors.Is(err, Problem{Code: NotSingle}) {
			return
		}
		if err == nil {
			checkCost(t, amounts)
		} else if !errors.Is(err, Problem{Code: BelowZero}) {
			t.Fatal(err)
		}
		for x := 1e-6; x < 1e6; x *= 1.1 {
			want := 1
			if err == nil && x < cost {
				want = -1
			}
			if math.Abs(x-cost) > 1e-9 && worthSign(amounts, x) != want {
				t.Fatalf("%v: cost %v %v, but worth %d at %v", amounts, cost, err, -want, x)
			}
		}
	})
}
