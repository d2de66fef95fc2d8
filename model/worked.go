package model

// Worked is what an item comes to, as far as the answers tell: for a page that
// shows a payment, a surplus or a ratio beside the questions.
type Worked struct {
	// State is Missing while it is open which state it will have, or which
	// attribute of a choice.
	State State
	// Low and High bound a number; they are equal where it is known.
	Low, High Number
	// Attribute is the place among Item.Attributes, -1 where it has none or it
	// is open.
	Attribute int
}

// Known tells that nothing about it is open.
func (w Worked) Known() bool {
	return w.State != Missing && (w.State != Given || w.Low == w.High)
}

// Work works out every item, by index, from answers complete or not.
func (e *Edition) Work(a *Answers) []Worked {
	var p possibles
	e.spread(a, &p)
	list := make([]Worked, len(e.items))
	for i := range list {
		x := &p.of[i]
		w := Worked{Low: x.lo, High: x.hi, Attribute: -1}
		if v, ok := x.single(&e.items[i]); ok {
			w.State, w.Attribute = v.state, int(v.attr)
		} else if x.states == set(Given) && !e.items[i].isChoice() {
			w.State = Given
		}
		list[i] = w
	}
	return list
}
