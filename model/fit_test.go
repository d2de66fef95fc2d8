package model

import (
	"slices"
	"testing"
)

// Log-odds -3 + 2.5·(payment/400) + 0.035·months, 3,000 at 24 % a year: a PD
// below 0.30 only for 13 to 42 months; 0.3085 at 12 and 0.4108 at 60. Computed
// with R 4.2.2.
const fitting = `
Characteristics
Characteristic | Question | Kind | Decimals | Counted from | Counted to | Use | Average log-odds
amount | How much? | number | 2 | | | recorded |
term | How long? | number | | 0 | 60 | scored | 1
payment | Payment | computed | 2 | 0 | 4000 | scored | 1

Attributes
Characteristic | Attribute | Log-odds per unit
term | | 0.035
payment | | 0.00625

Computed
Characteristic | Operation
payment | instalment

Bands
Band | Label | PD from | PD below | Recommendation
a | Low | | 0.3 | approve
b | High | 0.3 | | decline
`

func TestTermsThatFitAreNoInterval(t *testing.T) {
	s := partOf(fitting)
	s.Card.BaseLogOdds, s.Card.Adjustment, s.Card.AdjustmentSE = -3*LogOddsOne, Maybe[LogOdds]{}, Maybe[LogOdds]{}
	s.Terms.ShortestTerm, s.Terms.LongestTerm = 1, 60
	c := gather(s)
	for _, p := range c.problems {
		t.Error(p)
	}
	e := c.e
	for term, pd := range map[string]float64{"12": 0.3085, "60": 0.4108} {
		r, _ := e.Score(answered(t, e, "amount 3000", "term "+term))
		near(t, "PD at "+term, r.PD.Float(), pd, 0.00005)
	}
	var whole []int
	for _, o := range e.TermsThatFit(answered(t, e, "amount 3000", "term 60")) {
		if o.Amount == Whole(3000) {
			whole = append(whole, o.Term)
		}
		if o.Result.PD >= 3*PDOne/10 {
			t.Errorf("%+v does not fit", o)
		}
	}
	var want []int
	for term := 13; term <= 42; term++ {
		want = append(want, term)
	}
	if !slices.Equal(whole, want) {
		t.Errorf("3,000 fits for %v months, want 13 to 42", whole)
	}
}

func TestNoTermsFit(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	a := sampleAnswers(t, e)
	if len(e.TermsThatFit(a)) == 0 {
		t.Error("what is approved does not fit")
	}
	a.Put(e.byCode["born"], Answer{State: Given, Date: Date{2015, 1, 1}})
	if offers := e.TermsThatFit(a); offers != nil {
		t.Errorf("offers to a child: %+v", offers)
	}
	if offers := e.TermsThatFit(e.NewAnswers(a.On, a.Client)); offers != nil {
		t.Errorf("offers to nobody: %+v", offers)
	}
	a.Put(e.byCode["years"], Answer{})
	if offers := e.TermsThatFit(a); offers != nil {
		t.Errorf("offers with an answer missing: %+v", offers)
	}
}

// A payment of 76.50 each fortnight is 26 of them over 12 months: 165.75 a
// month (arithmetic). Set against 900 left each month it is a share of 0.184,
// not the 0.085 of a single payment.
func TestMonthlyInstalment(t *testing.T) {
	for unit, want := range map[TermUnit]string{Weeks: "331.5", Fortnights: "165.75", Months: "76.5"} {
		e := &Edition{card: Scorecard{Terms: Terms{TermUnit: unit}}}
		payment, _ := ParseNumber("76.5")
		got := e.aMonth(payment, 2)
		if got.String() != want {
			t.Errorf("%s: %s, want %s", unit, got, want)
		}
		if share := got.Over(Whole(900), 3); unit == Fortnights && share.String() != "0.184" {
			t.Errorf("share %s, want 0.184", share)
		}
	}
}
