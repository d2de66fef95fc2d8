package words

import (
	"fmt"

	"weighhouse/model"
)

// Name words one entry of the model's closed lists, such as a
// model.Recommendation or a model.Period.
func (r *Reader) Name(entry any) string {
	list := listOf(entry)
	if list == "" {
		return fmt.Sprint(entry)
	}
	return r.T(list + "." + fmt.Sprint(entry))
}

// word is the entry of a list in the messages, or itself where there is none.
func (r *Reader) word(list, entry string) string {
	if key := list + "." + entry; r.has(key) {
		return r.T(key)
	}
	return entry
}

func listOf(entry any) string {
	switch entry.(type) {
	case model.Recommendation:
		return "recommendation"
	case model.Period:
		return "period"
	case model.ClientKind:
		return "client"
	case model.Evidence:
		return "evidence"
	case model.Direction:
		return "direction"
	case model.HowMade:
		return "how_made"
	case model.Shown:
		return "shown"
	case model.Flow:
		return "flow"
	case model.Repayment:
		return "repayment"
	case model.RatePer:
		return "rate_per"
	case model.InterestMethod:
		return "interest"
	case model.TermUnit:
		return "term_unit"
	case NumberStyle:
		return "number_style"
	case DateOrder:
		return "date_order"
	}
	return ""
}

// Term words a loan's term, such as "12 months".
func (r *Reader) Term(n int, unit model.TermUnit) string {
	switch unit {
	case model.Weeks:
		return r.T("count.weeks", "n", n)
	case model.Fortnights:
		return r.T("count.fortnights", "n", n)
	}
	return r.T("count.months", "n", n)
}
