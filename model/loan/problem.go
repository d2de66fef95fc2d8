package loan

import "fmt"

// A Problem is why there is no answer: a code and what it speaks of, never a
// sentence. Problems can be compared with ==.
type Problem struct {
	// Code is one of the codes below.
	Code string
	// Item is the field of Terms or the argument at fault, such as "Rate" or
	// "amount"; empty for the codes of yearly cost.
	Item string
	// Value is what was found, from Least to Most what could be taken, in the
	// item's own unit; all 0 except for OutOfRange.
	Value, Least, Most int64
}

// The codes.
const (
	// UnknownWord: a Unit, Repayment, Method or Per that is none of those here.
	UnknownWord = "loan_unknown_word"
	// OutOfRange: a number that is too small or too large, or an amount and
	// term whose interest no longer fits.
	OutOfRange = "loan_out_of_range"
	// NothingInHand: fees and forced savings leave nothing to pay out.
	NothingInHand = "loan_nothing_in_hand"

	// NoFlows: no money moves at all.
	NoFlows = "cost_no_flows"
	// OneWay: money moves in one direction only.
	OneWay = "cost_one_way"
	// BelowZero: less is paid back than was received.
	BelowZero = "cost_below_zero"
	// NotSingle: money goes back and forth so that no rate, or more than one,
	// solves the equation.
	NotSingle = "cost_not_single"
	// CostTooLarge: a yearly cost that no float64 holds.
	CostTooLarge = "cost_too_large"
	// FlowsTooLarge: the flows together are beyond int64.
	FlowsTooLarge = "cost_flows_too_large"
)

// Error is for logs and tests; people read the words made from the code.
func (p Problem) Error() string {
	switch {
	case p.Code == OutOfRange:
		return fmt.Sprintf("%s %s %d not in %d..%d", p.Code, p.Item, p.Value, p.Least, p.Most)
	case p.Item != "":
		return p.Code + " " + p.Item
	}
	return p.Code
}

// within is OutOfRange unless least ≤ value ≤ most.
func within(item string, value, least, most int64) Problem {
	if value < least || value > most {
		return Problem{OutOfRange, item, value, least, most}
	}
	return Problem{}
}
