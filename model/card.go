package model

import (
	"strconv"
	"strings"
)

// cards checks the facts of the edition and works out the scale.
func (c *compiler) cards() {
	card := c.s.Card
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Card", 0, column), Args: args})
	}
	if card.Format != 1 {
		bad("Format", "unknown_format", Args{"value": strconv.Itoa(int(card.Format)), "expected": "1"})
	}
	for _, n := range []struct {
		column string
		value  int64
	}{
		{"Edition", int64(card.Edition)},
		{"Within months", int64(card.WithinMonths)},
		{"Reference odds", int64(card.ReferenceOdds)},
		{"Points to double the odds", int64(card.PointsToDouble)},
		{"Answers good for days", int64(card.AnswersGoodDays)},
	} {
		if n.value <= 0 {
			bad(n.column, "not_above_zero", nil)
		}
	}
	for _, d := range []struct {
		column string
		date   Date
	}{{"Issued on", card.IssuedOn}, {"In force from", card.InForceFrom}, {"Review by", card.ReviewBy}} {
		if d.date.YearAlone() {
			bad(d.column, "date_needs_day", Args{"value": d.date.String()})
		}
	}
	later := func(column, code string, date, from Date) {
		if !date.IsZero() && date.Before(from) {
			bad(column, code, Args{"value": date.String(), "expected": from.String()})
		}
	}
	later("Review by", "before_in_force", card.ReviewBy, card.InForceFrom)
	later("In force from", "in_force_before_issue", card.InForceFrom, card.IssuedOn)
	if strings.EqualFold(card.PreparedBy, card.ApprovedBy) && card.PreparedBy != "" {
		bad("Approved by", "approved_by_preparer", Args{"value": card.ApprovedBy})
	}
	if d, l := card.DefaultsAmong, card.LoansUsed; d.Set && l.Set && d.Value > l.Value {
		bad("Defaults among them", "more_than", Args{"value": strconv.Itoa(int(d.Value)), "most": strconv.Itoa(int(l.Value))})
	}
	if card.HowMade != Judged && !card.LoansUsed.Set {
		bad("Loans used", "needed_for_estimated", nil)
	}
	if card.AdjustmentSE.Or(0) < 0 {
		bad("Later adjustment standard error", "below_zero", nil)
	}
	if card.ReferenceOdds > 0 {
		c.e.factor = card.PointsToDouble.Float() / ln2
		c.e.offset = card.ReferenceScore.Float() - float64(c.e.factor*ln(card.ReferenceOdds.Float()))
	}
	c.e.constant = card.BaseLogOdds + card.Adjustment.Or(0)
}
