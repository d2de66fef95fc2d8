package model

import (
	"slices"
	"strings"
	"testing"
)

// What is computed, shown beside the questions as far as the answers tell.
func TestWork(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	share, payment, left, ok := e.PaymentShare()
	if !ok || e.items[share].Code != "share" || e.items[payment].Code != "payment" || e.items[left].Code != "left" {
		t.Fatal(share, payment, left, ok)
	}
	if got := e.items[share].Parts(); !slices.Equal(got, []int{payment, left}) {
		t.Error(got)
	}
	a := e.NewAnswers(e.card.Card.IssuedOn, NewClients)
	if w := e.Work(a)[payment]; w.Known() || w.State != Given {
		t.Errorf("payment of nothing yet: %+v", w)
	}
	a = answered(t, e, "amount 1000", "term 12", "household 400")
	w := e.Work(a)
	// 1,000 at 2 % a month over 12: the annuity table's 94.56.
	if w[payment] != (Worked{State: Given, Low: 94_560_000, High: 94_560_000, Attribute: -1}) {
		t.Errorf("payment %+v", w[payment])
	}
	// Other debts may be anything yet, and may be unknown.
	if w[left].Known() || w[left].State != Missing {
		t.Errorf("left %+v", w[left])
	}
	for answer, want := range map[string]struct {
		state     State
		share     Number
		attribute string
	}{"85": {Given, 300_000, "middle"}, "400": {IsNothingLeft, 0, "nothing_left"}, "unknown": {StatedUnknown, 0, "unknown"}} {
		a := answered(t, e, "amount 1000", "term 12", "household 400", "debts "+answer)
		w := e.Work(a)[share]
		if !w.Known() || w.State != want.state || w.Low != want.share || w.High != want.share || w.Attribute != e.items[share].AttributeNamed(want.attribute) {
			t.Errorf("debts %s: share %+v, want %+v", answer, w, want)
		}
	}
	if e.items[share].AttributeNamed("nobody") != -1 || !IsReserved(Unknown) || IsReserved("middle") {
		t.Error("attributes by name")
	}
}

func TestLoan(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	if p, ok := e.Payment(Whole(1000), 12); p != 94_560_000 || !ok {
		t.Error(p, ok)
	}
	for _, c := range []struct {
		amount Number
		term   int
	}{{Whole(99), 12}, {Whole(5001), 12}, {Whole(1000), 2}, {Whole(1000), 37}} {
		if p, ok := e.Payment(c.amount, c.term); ok {
			t.Error(c, p)
		}
	}
	s, err := e.Schedule(Whole(1000), 12, 0, Date{2026, 1, 31})
	if err != nil || e.Money(s.Payment) != 94_560_000 || len(s.Rows) != 12 || DateOf(s.Rows[0].Due) != (Date{2026, 2, 28}) {
		t.Errorf("%+v %v", s, err)
	}
	if p, ok := e.Plan().Payment(1000_00, 12, 0); p != 94_56 || !ok {
		t.Error(p, ok)
	}
	if amount, term, ok := answered(t, e, "amount 1000", "term 12").AmountAndTerm(); amount != Whole(1000) || term != 12 || !ok {
		t.Error(amount, term, ok)
	}
	if _, _, ok := answered(t, e, "amount 1000").AmountAndTerm(); ok {
		t.Error("half a loan")
	}
	// An instalment beyond the product is still a number.
	for _, c := range []struct{ amount, term, want Number }{
		{0, One, 0}, {-One, One, 0}, {Whole(1000), Whole(99), e.instalment(Whole(1000), Whole(36))}, {Whole(1000), 0, Whole(1020)},
	} {
		if got := e.instalment(c.amount, c.term); got != c.want {
			t.Errorf("%v over %v: %v, want %v", c.amount, c.term, got, c.want)
		}
	}
	// With a fee of 90 there is no loan of 50: the riskiest instalment there is.
	card := scorecardOf(t, sample)
	card.Terms.FeeAmount = Some(Whole(90))
	if got := gather(card).e.instalment(Whole(50), Whole(12)); got != Largest {
		t.Error(got)
	}
}

// An entry is taken for what it says: a worksheet without a line is no answer,
// and nobody saw a paper for what is not known.
func TestPut(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	a := e.NewAnswers(e.card.Card.IssuedOn, NewClients)
	household, debts := e.byCode["household"], e.byCode["debts"]
	a.Put(household, Answer{State: Given, Lines: make([]Money, 4)})
	if a.At(household).State != Missing {
		t.Errorf("%+v", a.At(household))
	}
	a.Put(household, Answer{State: Given, Lines: []Money{{}, {}, {}, {Amount: Whole(120), Set: true}}})
	if w := e.Work(a)[household]; w.Low != Whole(-10) || w.High != Whole(-10) {
		t.Errorf("%+v", w)
	}
	a.Put(debts, Answer{State: StatedUnknown, Number: 7, Seen: true})
	if a.At(debts).State != StatedUnknown || a.At(debts).Seen || a.At(debts).Number != 0 {
		t.Errorf("%+v", a.At(debts))
	}
	if a.Edition() != e {
		t.Error("answers to another edition")
	}
	for text, ok := range map[string]bool{"sales:100/week": true, "sales:1/day rent:2/year": true, "120.5": true, "": true} {
		answer, err := e.ParseAnswer(household, text)
		if back := e.AnswerText(household, answer); (err == nil) != ok || back != text {
			t.Errorf("%q was read as %q, %v", text, back, err)
		}
	}
}

// What an applicant is told of a reason: the attribute's words, else the
// slope's.
func TestReasonText(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	for answer, want := range map[string]string{"years 1": "Little time in the trade", "years 3": "Time in the trade", "years unknown": "", "trade farm": "The trade is a farm", "trade stall": ""} {
		code, _, _ := strings.Cut(answer, " ")
		for _, s := range e.Steps(answered(t, e, answer)) {
			if got := e.ReasonText(s); e.items[s.Index].Code == code && got != want {
				t.Errorf("%s: %q, want %q", answer, got, want)
			}
		}
	}
}

// Who is read by name.
func TestEditionNames(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	if _, ok := e.Item("nobody"); ok {
		t.Error("nobody is somebody")
	}
	if e.TelephoneCode() != e.Fingerprint().TelephoneCode() || len(e.TelephoneCode()) != 29 {
		t.Error(e.TelephoneCode())
	}
	numbers := 0
	for i, item := range e.Items() {
		if item.Index != i || (item.Kind == Computed) != (item.Number == 0) {
			t.Errorf("%s is number %d", item.Code, item.Number)
		}
		numbers = max(numbers, item.Number)
	}
	if numbers != len(e.asked) {
		t.Errorf("%d questions, want %d", numbers, len(e.asked))
	}
}
