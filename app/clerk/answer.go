package main

import (
	"fmt"
	"slices"
	"strings"

	"weighhouse/model"
)

// answerText repeats an answer so that a slip shows: money in words too, a
// date that cannot be misread, what a worksheet's lines come to.
func (q *interview) answerText(item *model.Item, a model.Answer) string {
	switch a.State {
	case model.StatedUnknown:
		return q.words.T("box.unknown")
	case model.Given:
	default:
		return ""
	}
	switch item.Kind {
	case model.Choice, model.YesNo:
		return q.label(item, a.Attribute)
	case model.DateKind:
		return q.words.Date(a.Date)
	case model.Worksheet:
		n := a.Number
		if a.Lines != nil {
			n = item.Monthly(a.Lines)
		}
		return q.words.Money(n, int(item.Decimals), q.labels.Currency()) + ", " + q.per(model.Month)
	}
	switch item.Code {
	case model.Amount:
		return q.words.InWords(a.Number, q.labels.MoneyDecimals(), q.labels.Currency())
	case model.Term:
		return q.words.Term(int(a.Number/model.One), q.edition.Scorecard().Terms.TermUnit)
	}
	return q.words.Number(a.Number, int(item.Decimals))
}

// soFar says what may still come, where the lender shows it while answering.
func (q *interview) soFar() {
	if q.edition.Scorecard().Card.ResultShown != model.WhileAnswering {
		return
	}
	b := q.edition.Bound(q.answers)
	if len(b.Missing) == 0 {
		return // the result follows
	}
	text := q.words.T("desk.between", "low", b.LowestPD, "high", b.HighestPD)
	switch {
	case b.Settled():
		text += " " + q.words.T("clerk.so_far_settled", "recommendation", q.words.Name(b.Mildest))
	case b.Narrows >= 0:
		text += " " + q.words.T("desk.narrows", "number", q.edition.Items()[b.Narrows].Number)
	}
	fmt.Fprintln(q.out, indent+text)
	for i, rule := range q.edition.Rules() {
		if b.Fires.Has(i) {
			fmt.Fprintln(q.out, indent+q.rule(rule))
		}
	}
}

// rule words a rule that fires.
func (q *interview) rule(r model.PolicyRule) string {
	label, text := q.labels.Rule(r)
	if text != "" && text != label {
		label += ". " + text
	}
	return q.words.T("desk.rule."+strings.ReplaceAll(string(r.Effect), " ", "_"), "rule", label)
}

func (q *interview) editionText() string {
	card := q.edition.Scorecard().Card
	return q.words.T("clerk.edition", "edition", card.Edition, "date", card.InForceFrom)
}

// result tells the result of complete answers, and all that must stand by it.
func (q *interview) result() {
	r, ok := q.edition.Score(q.answers)
	if !ok {
		return // all asks until nothing is missing
	}
	card := q.edition.Scorecard().Card
	amount, _, _ := q.answers.AmountAndTerm()
	band, caution := q.labels.Band(r.Band)
	say := func(text string) { fmt.Fprintln(q.out, text) }
	head := func(key string) { say("\n" + q.words.T(key)) }
	verdict := strings.ToUpper(q.words.Name(r.Recommendation))
	most, over := overCap(q.answers, r)
	if over = over && r.Recommendation != model.Decline; over {
		verdict = q.words.T("clerk.at_most", "recommendation", verdict, "amount", q.money(most))
	}
	say("\n" + verdict)
	say(indent + q.words.T("desk.figures", "pd", r.PD, "score", q.words.Score(r.Score), "band", band))
	say(indent + q.words.PDPlain(r.PD, int(card.DefaultDaysLate), int(card.WithinMonths)))
	if low, high, ok := q.edition.Range(q.answers); ok {
		say(indent + q.words.T("clerk.range", "low", low, "high", high))
	}
	say(indent + q.words.T("desk.decides."+string(q.edition.Decider(r, amount))))
	if r.LargestAmount.Set && !over {
		say(indent + q.words.T("desk.largest", "amount", q.money(r.LargestAmount.Value)))
	}
	if text := q.payment(); text != "" {
		say(indent + text)
	}
	if r.Fired != 0 {
		head("clerk.rules")
		for i, rule := range q.edition.Rules() {
			if r.Fired.Has(i) {
				say(indent + q.rule(rule))
			}
		}
	}
	if reasons := q.reasons(r); len(reasons) > 0 {
		head("clerk.reasons")
		for i, reason := range reasons {
			say(fmt.Sprintf("%s%d. %s", indent, i+1, reason))
		}
	}
	if list := slices.Concat(q.edition.Check(q.answers), ground(q.edition, q.answers)); len(list) > 0 {
		head("clerk.ground")
		for _, p := range list {
			text := q.words.Sentence(p)
			if item, ok := q.edition.Item(p.Place.Column); ok {
				text = q.question(item) + " " + text
			}
			say(indent + text)
		}
	}
	say("")
	if caution != "" {
		say(caution)
	}
	say(q.words.T("desk.caution"))
	say(q.words.T("clerk.telephone_code", "code", q.edition.TelephoneCode()))
	say(q.words.T("clerk.ask_not_kept"))
}

// payment sets the payment against what is left each month, where the edition
// works both out.
func (q *interview) payment() string {
	share, payment, left, ok := q.edition.PaymentShare()
	if !ok {
		return ""
	}
	worked := q.edition.Work(q.answers)
	args := []any{"payment", q.money(worked[payment].Low), "left", q.money(worked[left].Low)}
	switch {
	case worked[payment].State != model.Given:
		return ""
	case worked[left].State != model.Given:
		return q.words.T("desk.payment", args...)
	case worked[share].State == model.IsNothingLeft:
		return q.words.T("desk.payment_nothing_left", args...)
	}
	// A Number has millionths, a Rate billionths.
	return q.words.T("desk.payment_left", append(args, "share", model.Rate(worked[share].Low*1000))...)
}

func (q *interview) money(n model.Number) string {
	return q.words.Money(n, q.labels.MoneyDecimals(), q.labels.Currency())
}

// reasons are those of the rules that declined, else of the answers that spoke
// most against.
func (q *interview) reasons(r model.Result) (list []string) {
	for _, rule := range q.edition.DecliningRules(r.Fired) {
		label, text := q.labels.Rule(rule)
		if text == "" {
			text = label
		}
		list = append(list, text)
	}
	if list != nil {
		return list
	}
	for _, step := range q.edition.Reasons(q.answers) {
		list = append(list, q.labels.Reason(&q.edition.Items()[step.Index], step.Attribute))
	}
	return list
}
