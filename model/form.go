package model

// What a page that asks the questions needs to know of an item.

// AttributeNamed is the place among Attributes of a code, -1 where there is
// none.
func (item *Item) AttributeNamed(code string) int {
	for i := range item.Attributes {
		if item.Attributes[i].Code == code {
			return i
		}
	}
	return -1
}

// IsReserved tells that an attribute's code is one of unknown, not_applicable
// and nothing_left, which nobody picks from a list.
func IsReserved(code string) bool { return reserved(code) }

// Payment is one payment of a loan of this product; ok is false for a loan
// that the product does not allow.
func (e *Edition) Payment(amount Number, term int) (payment Number, ok bool) {
	t := e.card.Terms
	if amount < t.SmallestAmount || amount > t.LargestAmount || term < int(t.ShortestTerm) || term > int(t.LongestTerm) {
		return 0, false
	}
	return e.instalment(amount, Whole(int64(term))), true
}
