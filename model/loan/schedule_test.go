package loan

import (
	"math"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
)

// Whole schedules, computed with exact fractions (Python's fractions module)
// from the package comment alone, and the yearly costs by bisection in
// 60-digit arithmetic (mpmath), on the dates and by equal periods.
func TestScheduleAgainstExactFractions(t *testing.T) {
	for _, c := range []struct {
		name           string
		terms          Terms
		amount         int64
		term, grace    int
		paidOut        time.Time
		want           Schedule
		dated, periods float64
	}{
		{
			"equal payments", Terms{Rate: 240_000_000},
			100000, 6, 0, day(2026, 1, 31),
			Schedule{Payment: 17853, Fee: 0, Savings: 0, CashInHand: 100000, TotalInterest: 7116, TotalPaid: 107116, Rows: []Row{
				{1, day(2026, 2, 28), 17853, 2000, 15853, 84147},
				{2, day(2026, 3, 31), 17853, 1683, 16170, 67977},
				{3, day(2026, 4, 30), 17853, 1360, 16493, 51484},
				{4, day(2026, 5, 31), 17853, 1030, 16823, 34661},
				{5, day(2026, 6, 30), 17853, 693, 17160, 17501},
				{6, day(2026, 7, 31), 17851, 350, 17501, 0},
			}}, 0.2740483877153097, 0.26826698481857886,
		},
		{
			"grace, fees and savings", Terms{Rate: 240_000_000, FeeRate: 20_000_000, FeeAmount: 500, SavingsRate: 100_000_000},
			100000, 6, 2, day(2026, 1, 31),
			Schedule{Payment: 26262, Fee: 2500, Savings: 10000, CashInHand: 87500, TotalInterest: 9050, TotalPaid: 109050, Rows: []Row{
				{1, day(2026, 2, 28), 2000, 2000, 0, 100000},
				{2, day(2026, 3, 31), 2000, 2000, 0, 100000},
				{3, day(2026, 4, 30), 26262, 2000, 24262, 75738},
				{4, day(2026, 5, 31), 26262, 1515, 24747, 50991},
				{5, day(2026, 6, 30), 26262, 1020, 25242, 25749},
				{6, day(2026, 7, 31), 26264, 515, 25749, 0},
			}}, 0.43206235364526213, 0.42429056640645313,
		},
		{
			"weeks and a step, over a leap day", Terms{Unit: Weeks, Rate: 360_000_000, PaymentStep: 2500},
			123457, 5, 1, day(2028, 2, 1),
			Schedule{Payment: 32500, Fee: 0, Savings: 0, CashInHand: 123457, TotalInterest: 2898, TotalPaid: 126355, Rows: []Row{
				{1, day(2028, 2, 8), 2500, 852, 1648, 121809},
				{2, day(2028, 2, 15), 32500, 841, 31659, 90150},
				{3, day(2028, 2, 22), 32500, 622, 31878, 58272},
				{4, day(2028, 2, 29), 32500, 402, 32098, 26174},
				{5, day(2028, 3, 7), 26355, 181, 26174, 0},
			}}, 0.4314202898810595, 0.4300143959457492,
		},
		{
			"flat", Terms{Rate: 100_000_000, Method: Flat},
			100000, 6, 0, day(2027, 10, 31),
			Schedule{Payment: 17500, Fee: 0, Savings: 0, CashInHand: 100000, TotalInterest: 5000, TotalPaid: 105000, Rows: []Row{
				{1, day(2027, 11, 30), 17500, 833, 16667, 83333},
				{2, day(2027, 12, 31), 17500, 833, 16667, 66666},
				{3, day(2028, 1, 31), 17500, 833, 16667, 49999},
				{4, day(2028, 2, 29), 17500, 833, 16667, 33332},
				{5, day(2028, 3, 31), 17500, 833, 16667, 16665},
				{6, day(2028, 4, 30), 17500, 835, 16665, 0},
			}}, 0.18347976754210427, 0.18324845111908536,
		},
		{
			"flat, fortnights, grace, a step, savings", Terms{Unit: Fortnights, Rate: 20_000_000, Per: PerMonth, Method: Flat, SavingsRate: 150_000_000, PaymentStep: 500},
			99999, 6, 2, day(2026, 1, 31),
			Schedule{Payment: 26000, Fee: 0, Savings: 15000, CashInHand: 84999, TotalInterest: 5523, TotalPaid: 105522, Rows: []Row{
				{1, day(2026, 2, 14), 1000, 921, 79, 99920},
				{2, day(2026, 2, 28), 1000, 921, 79, 99841},
				{3, day(2026, 3, 14), 26000, 921, 25079, 74762},
				{4, day(2026, 3, 28), 26000, 921, 25079, 49683},
				{5, day(2026, 4, 11), 26000, 921, 25079, 24604},
				{6, day(2026, 4, 25), 25522, 918, 24604, 0},
			}}, 0.48250247017479697, 0.4809041325483209,
		},
		{
			"flat, ends early", Terms{Rate: 120_000_000, Method: Flat, PaymentStep: 25000},
			100000, 12, 0, day(2026, 1, 31),
			Schedule{Payment: 25000, Fee: 0, Savings: 0, CashInHand: 100000, TotalInterest: 5000, TotalPaid: 105000, Rows: []Row{
				{1, day(2026, 2, 28), 25000, 1000, 24000, 76000},
				{2, day(2026, 3, 31), 25000, 1000, 24000, 52000},
				{3, day(2026, 4, 30), 25000, 1000, 24000, 28000},
				{4, day(2026, 5, 31), 25000, 1000, 24000, 4000},
				{5, day(2026, 6, 30), 5000, 1000, 4000, 0},
			}}, 0.25951370545578506, 0.25198560598156283,
		},
		{
			"flat, less interest than periods", Terms{Rate: 60_000_000, Method: Flat},
			100, 12, 0, day(2026, 1, 31),
			Schedule{Payment: 9, Fee: 0, Savings: 0, CashInHand: 100, TotalInterest: 6, TotalPaid: 106, Rows: []Row{
				{1, day(2026, 2, 28), 9, 1, 8, 92},
				{2, day(2026, 3, 31), 9, 1, 8, 84},
				{3, day(2026, 4, 30), 9, 1, 8, 76},
				{4, day(2026, 5, 31), 9, 1, 8, 68},
				{5, day(2026, 6, 30), 9, 1, 8, 60},
				{6, day(2026, 7, 31), 9, 1, 8, 52},
				{7, day(2026, 8, 31), 9, 0, 9, 43},
				{8, day(2026, 9, 30), 9, 0, 9, 34},
				{9, day(2026, 10, 31), 9, 0, 9, 25},
				{10, day(2026, 11, 30), 9, 0, 9, 16},
				{11, day(2026, 12, 31), 9, 0, 9, 7},
				{12, day(2027, 1, 31), 7, 0, 7, 0},
			}}, 0.11745979522045057, 0.11653877232472329,
		},
		{
			"interest then principal", Terms{Rate: 30_000_000, Per: PerMonth, Repayment: InterestThenPrincipal},
			50000, 4, 0, day(2026, 1, 31),
			Schedule{Payment: 1500, Fee: 0, Savings: 0, CashInHand: 50000, TotalInterest: 6000, TotalPaid: 56000, Rows: []Row{
				{1, day(2026, 2, 28), 1500, 1500, 0, 50000},
				{2, day(2026, 3, 31), 1500, 1500, 0, 50000},
				{3, day(2026, 4, 30), 1500, 1500, 0, 50000},
				{4, day(2026, 5, 31), 51500, 1500, 50000, 0},
			}}, 0.4333145276965661, 0.42576088684617897,
		},
		{
			"interest then principal, a step", Terms{Rate: 240_000_000, Repayment: InterestThenPrincipal, PaymentStep: 1000},
			30000, 4, 0, day(2026, 1, 31),
			Schedule{Payment: 1000, Fee: 0, Savings: 0, CashInHand: 30000, TotalInterest: 2352, TotalPaid: 32352, Rows: []Row{
				{1, day(2026, 2, 28), 1000, 600, 400, 29600},
				{2, day(2026, 3, 31), 1000, 592, 408, 29192},
				{3, day(2026, 4, 30), 1000, 584, 416, 28776},
				{4, day(2026, 5, 31), 29352, 576, 28776, 0},
			}}, 0.27286155048096583, 0.2683209888202009,
		},
		{
			"interest then principal, flat", Terms{Rate: 200_000_000, Method: Flat, Repayment: InterestThenPrincipal},
			10001, 3, 0, day(2026, 1, 31),
			Schedule{Payment: 167, Fee: 0, Savings: 0, CashInHand: 10001, TotalInterest: 500, TotalPaid: 10501, Rows: []Row{
				{1, day(2026, 2, 28), 167, 167, 0, 10001},
				{2, day(2026, 3, 31), 167, 167, 0, 10001},
				{3, day(2026, 4, 30), 10167, 166, 10001, 0},
			}}, 0.2255978483618991, 0.2193750059636126,
		},
		{
			"all at the end", Terms{Rate: 300_000_000, Repayment: AllAtTheEnd, FeeRate: 15_000_000},
			77777, 9, 0, day(2026, 1, 31),
			Schedule{Payment: 95277, Fee: 1167, Savings: 0, CashInHand: 76610, TotalInterest: 17500, TotalPaid: 95277, Rows: []Row{
				{9, day(2026, 10, 31), 95277, 17500, 77777, 0},
			}}, 0.3384958989935975, 0.3374271921117282,
		},
		{
			"no interest", Terms{},
			1001, 5, 1, day(2026, 1, 31),
			Schedule{Payment: 250, Fee: 0, Savings: 0, CashInHand: 1001, TotalInterest: 0, TotalPaid: 1001, Rows: []Row{
				{1, day(2026, 2, 28), 0, 0, 0, 1001},
				{2, day(2026, 3, 31), 250, 0, 250, 751},
				{3, day(2026, 4, 30), 250, 0, 250, 501},
				{4, day(2026, 5, 31), 250, 0, 250, 251},
				{5, day(2026, 6, 30), 251, 0, 251, 0},
			}}, 0.0, 0.0,
		},
	} {
		p := compiled(t, c.terms, 12)
		got := scheduled(t, p, c.amount, c.term, c.grace, c.paidOut)
		want := c.want
		want.Amount, want.PaidOut, want.Unit = c.amount, c.paidOut, p.terms.Unit
		if d := cmp.Diff(want, got); d != "" {
			t.Errorf("%s (-want +got):\n%s", c.name, d)
		}
		dated, err := got.YearlyCost()
		periods, err2 := got.YearlyCostByPeriods()
		if err != nil || err2 != nil || math.Abs(dated-c.dated) > 1e-14 || math.Abs(periods-c.periods) > 1e-14 {
			t.Errorf("%s: yearly cost %v %v, %v %v; want %v, %v", c.name, dated, err, periods, err2, c.dated, c.periods)
		}
	}
}

func TestDueDates(t *testing.T) {
	for _, c := range []struct {
		unit       Unit
		n          int
		from, want time.Time
	}{
		{Months, 1, day(2027, 1, 31), day(2027, 2, 28)},
		{Months, 1, day(2028, 1, 31), day(2028, 2, 29)},
		{Months, 2, day(2028, 1, 31), day(2028, 3, 31)},
		{Months, 13, day(2027, 12, 30), day(2029, 1, 30)},
		{Months, 1, day(2100, 1, 29), day(2100, 2, 28)},
		{Months, 600, day(2026, 3, 1), day(2076, 3, 1)},
		{Fortnights, 2, day(2028, 2, 15), day(2028, 3, 14)},
		{Weeks, 52, day(2026, 3, 1), day(2027, 2, 28)},
	} {
		if got := c.unit.after(c.from, c.n); !got.Equal(c.want) {
			t.Errorf("%d %s after %s: %s, want %s", c.n, c.unit, c.from, got, c.want)
		}
	}
	// Neither the hour nor the place moves a day.
	late := time.Date(2026, 1, 31, 23, 59, 0, 0, time.FixedZone("", 12*60*60))
	if got := midnight(late); !got.Equal(day(2026, 1, 31)) {
		t.Error(got)
	}
}
