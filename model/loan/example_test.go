package loan_test

import (
	"fmt"
	"time"

	"weighhouse/model/loan"
)

// Twelve hundred at 24 % a year, a fee of 1 % kept back; payments are rounded
// up to half a crown.
var stall = loan.Terms{
	Unit: loan.Months, Repayment: loan.EqualPayments, Method: loan.Declining,
	Rate: 240_000_000, Per: loan.PerYear,
	FeeRate: 10_000_000, PaymentStep: 50,
}

func ExamplePlan_Payment() {
	plan, err := loan.Compile(stall, 24)
	if err != nil {
		panic(err)
	}
	fmt.Println(plan.Payment(1200_00, 4, 0))
	fmt.Println(plan.Payment(1200_00, 25, 0)) // longer than 24 months
	// Output:
	// 31550 true
	// 0 false
}

func ExamplePlan_Schedule() {
	plan, err := loan.Compile(stall, 24)
	if err != nil {
		panic(err)
	}
	s, err := plan.Schedule(1200_00, 4, 0, time.Date(2026, 1, 31, 0, 0, 0, 0, time.UTC))
	if err != nil {
		panic(err)
	}
	fmt.Println("in hand", s.CashInHand)
	for _, r := range s.Rows {
		fmt.Println(r.Due.Format(time.DateOnly), r.Payment, r.Interest, r.Principal, r.Balance)
	}
	cost, err := s.YearlyCost()
	fmt.Printf("%.2f %% a year %v\n", 100*cost, err)
	// Output:
	// in hand 118800
	// 2026-02-28 31550 2400 29150 90850
	// 2026-03-31 31550 1817 29733 61117
	// 2026-04-30 31550 1222 30328 30789
	// 2026-05-31 31405 616 30789 0
	// 34.24 % a year <nil>
}

func ExampleYearlyCost() {
	// The first example of Directive 98/7/EC, Annex III.
	cost, err := loan.YearlyCost([]loan.Flow{
		{Date: time.Date(1994, 1, 1, 0, 0, 0, 0, time.UTC), Amount: 1000},
		{Date: time.Date(1995, 7, 1, 0, 0, 0, 0, time.UTC), Amount: -1200},
	})
	fmt.Printf("%.2f %% %v\n", 100*cost, err)
	// Output: 12.96 % <nil>
}
