package model

import "testing"

// What another edition asks in the same terms is carried over; a term in other
// units, a figure that cannot be held and a question not asked are not.
func TestCarry(t *testing.T) {
	s := scorecardOf(t, sample)
	from := compiled(t, s)
	answers := sampleAnswers(t, from)
	same := compiled(t, s).NewAnswers(answers.On, RepeatClients)
	same.Carry(answers)
	same.Client = answers.Client
	if same.Text() != answers.Text() {
		t.Errorf("got\n%swant\n%s", same.Text(), answers.Text())
	}

	s.Terms.TermUnit = Weeks
	s.Characteristics = append([]Characteristic(nil), s.Characteristics...)
	for i := range s.Characteristics {
		if c := &s.Characteristics[i]; c.Code == "debts" {
			c.Unit = "hours"
		}
	}
	other := gather(s).e // its checks are for months
	a := other.NewAnswers(answers.On, NewClients)
	a.Carry(answers)
	for code, want := range map[string]State{"amount": Given, "term": Missing, "debts": Missing, "trade": Given, "household": Given} {
		item, _ := other.Item(code)
		if got := a.At(item.Index); got.State != want {
			t.Errorf("%s: %v, want %v", code, got.State, want)
		}
	}
	if item, _ := other.Item("household"); !a.At(item.Index).Seen {
		t.Error("that a paper was seen is lost")
	}
}
