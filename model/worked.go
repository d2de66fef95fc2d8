package model

// Worked is what an item comes to, as far as the answers tell: for a page that
// shows a payment, a surplus or a ratio beside the questions.
type Worked struct {
	// State is Missing while it is open which state it will have.
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
		w := Worked{Low: p[i].lo, High: p[i].hi, Attribute: -1}
		for _, s := range [...]State{Given, StatedUnknown, IsNotApplicable, IsNothingLeft} {
			if p[i].states == set(s) {
				w.State = s
			}
		}
		if x, ok := p[i].single(&e.items[i]); ok {
			w.Attribute = e.items[i].attributeOf(x)
		} else if kind := e.items[i].Kind; kind == Choice || kind == YesNo {
			w.State = Missing
		}
		list[i] = w
	}
	return list
}

// Parts are the indexes of what a computed item is worked out from.
func (item *Item) Parts() []int {
	var list []int
	for _, p := range item.parts {
		list = append(list, p.index)
	}
	return list
}

// PaymentShare finds the item that sets the payment against what is left: the
// first ratio whose first part is an instalment. share, payment and left are
// indexes; ok is false where the edition has none.
func (e *Edition) PaymentShare() (share, payment, left int, ok bool) {
	for i := range e.items {
		item := &e.items[i]
		if item.Operation == Ratio && len(item.parts) == 2 && e.items[item.parts[0].index].Operation == Instalment {
			return i, item.parts[0].index, item.parts[1].index, true
		}
	}
	return 0, 0, 0, false
}

// ConditionOf is the index of the item whose answer decides whether a question
// is asked; ok is false for one that is always asked.
func (item *Item) ConditionOf() (index int, ok bool) {
	if item.condition == nil {
		return 0, false
	}
	return item.condition.index, true
}
