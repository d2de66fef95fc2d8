package model

import (
	"slices"
	"strings"
	"testing"
)

// firing are the codes of a result's rules.
func firing(e *Edition, set RuleSet) string {
	var codes []string
	for i, r := range e.Rules() {
		if set.Has(i) {
			codes = append(codes, r.Code)
		}
	}
	return strings.Join(codes, " ")
}

// Each test, of each kind of answer: what fires and what may.
func TestTests(t *testing.T) {
	s := partOf(`
Characteristics
Characteristic | Question | Kind | Decimals | Counted from | Counted to | Use | Asked only if | Unknown allowed
pick | Pick | choice | | | | recorded | | yes
more | More | choice | | | | recorded | pick is a |
count | Count | number | 1 | 0 | 100 | recorded | | yes
day | Day | date | | | | recorded | |
income | Income | number | | | | recorded | |
other | Other | number | | | | recorded | | yes
ratio | Ratio | computed | 2 | | | recorded | |
both | Both | computed | | | | recorded | |

Attributes
Characteristic | Attribute | Label | From | Below
pick | a | A
pick | b | B
pick | c | C
more | x | X
more | y | Y
count | low | Low | 0 | 10
count | mid | Mid | 10 | 20
count | high | High | 20 |

Computed
Characteristic | Operation | Part 1 | Part 2
ratio | ratio | count | income
both | sum | ratio | other

Bands
Band | Label | Recommendation
a | All | approve

Rules
Rule | Label | Characteristic | Test | Value | Effect
is_a | R | pick | is | a | note
not_a | R | pick | is not | a | note
a_or_b | R | pick | one of | a, b | note
a_or_unknown | R | pick | one of | a unknown | note
pick_unknown | R | pick | unknown | | note
pick_told | R | pick | told only | | note
more_is_x | R | more | is | x | note
more_not_x | R | more | is not | x | note
more_none | R | more | is | not_applicable | note
is_low | R | count | is | low | note
low_or_high | R | count | one of | low, high | note
is_10 | R | count | is | 10 | note
not_10 | R | count | is not | 10 | note
one_of_10_high | R | count | one of | 10, high | note
below_10 | R | count | below | 10 | note
at_most_10 | R | count | at most | 10 | note
above_10 | R | count | above | 10 | note
at_least_10 | R | count | at least | 10 | note
ten_to_20 | R | count | between | 10 to 20 | note
born_1980 | R | day | is | 1980 | note
born_before | R | day | below | 1980 | note
ratio_over | R | ratio | above | 1000000 | note
ratio_under | R | ratio | at most | 1000000 | note
ratio_not_5 | R | ratio | is not | 5 | note
ratio_nothing | R | ratio | is | nothing_left | note
ratio_told | R | ratio | told only | | note
both_unknown | R | both | unknown | | note
both_nothing | R | both | is | nothing_left | note
`)
	e := gather(s).e
	rest := []string{"amount 100", "term 3", "more x", "day 1990-01-01!", "income 10!", "other 1!"}
	for _, c := range []struct{ answers, fires string }{
		{"pick a!; count 5!", "is_a a_or_b a_or_unknown more_is_x is_low low_or_high not_10 below_10 at_most_10 ratio_under ratio_not_5"},
		{"pick b; count 10", "not_a a_or_b pick_told more_none is_10 one_of_10_high at_most_10 at_least_10 ten_to_20 ratio_under ratio_not_5 ratio_told"},
		// What is unknown meets no comparison; a question not asked neither.
		{"pick unknown; count unknown", "a_or_unknown pick_unknown more_none both_unknown"},
		{"pick a!; more y; count 20!", "is_a a_or_b a_or_unknown more_not_x low_or_high not_10 one_of_10_high above_10 at_least_10 ten_to_20 ratio_under ratio_not_5"},
		// A band is the one that the number is counted in: -3 is counted as 0, 200 as 100.
		{"pick c!; count -3!", "not_a more_none is_low low_or_high not_10 below_10 at_most_10 ratio_under ratio_not_5"},
		{"pick c!; count 200!", "not_a more_none low_or_high not_10 one_of_10_high above_10 at_least_10 ratio_under ratio_not_5"},
		// A date is compared by its year.
		{"pick c!; count 9.9!; day 1980!", "not_a more_none is_low low_or_high not_10 below_10 at_most_10 born_1980 ratio_under ratio_not_5"},
		{"pick c!; count 19.9!; day 1979-12-31!", "not_a more_none not_10 above_10 at_least_10 ten_to_20 born_before ratio_under ratio_not_5"},
		// With nothing left a ratio is beyond every number, whatever its parts.
		{"pick c!; count 20; income 0!", "not_a more_none low_or_high not_10 one_of_10_high above_10 at_least_10 ten_to_20 ratio_over ratio_not_5 ratio_nothing both_nothing"},
		{"pick c!; count 0!; income -5!", "not_a more_none is_low low_or_high not_10 below_10 at_most_10 ratio_over ratio_not_5 ratio_nothing both_nothing"},
		// An unknown part outranks that.
		{"pick c!; count unknown; income 0!", "not_a more_none both_unknown"},
		{"pick c!; count 0!; income 0!; other unknown", "not_a more_none is_low low_or_high not_10 below_10 at_most_10 ratio_over ratio_not_5 ratio_nothing both_unknown"},
		// A ratio is only told if one of its parts is.
		{"pick c!; count 50; income 10!", "not_a more_none low_or_high not_10 one_of_10_high above_10 at_least_10 ratio_under ratio_told"},
	} {
		a := answered(t, e, append(slices.Clone(rest), strings.Split(c.answers, "; ")...)...)
		r, ok := e.Score(a)
		if got := firing(e, r.Fired); !ok || got != c.fires {
			t.Errorf("%s:\n%s\nwant\n%s", c.answers, got, c.fires)
		}
		if b := e.Bound(a); b.Fires != r.Fired || b.May != 0 {
			t.Errorf("%s: surely %s, perhaps %s", c.answers, firing(e, b.Fires), firing(e, b.May))
		}
	}
	// One that can be known at its question is known there and then.
	b := e.Bound(answered(t, e, "pick c", "day 1975"))
	if got := firing(e, b.Fires); got != "not_a pick_told more_none born_before" {
		t.Errorf("surely %s", got)
	}
	if got := firing(e, b.May); strings.Contains(got, "more_is") || strings.Contains(got, "born") || !strings.Contains(got, "ratio_nothing") {
		t.Errorf("perhaps %s", got)
	}
}

// The strictest effect wins, the least cap stands, and all that fired are told.
func TestRulesMakeStricter(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	for _, c := range []struct {
		changes, fires string
		to             Recommendation
		cap            Number
	}{
		{"", "", Approve, 0},
		{"debts unknown", "debts", Refer, Whole(1000)}, // of the band: an unknown share is riskier
		{"own_stall no", "stalls", Refer, Whole(1500)},
		{"own_stall no; debts unknown", "debts stalls", Refer, Whole(1000)},
		{"household sales:100/week wages:50/month", "papers", Refer, 0},
		{"born 2009", "young", Decline, 0},
		{"household 400; born 2009", "young papers", Decline, 0},
		{"term 3; household 2000!", "short", Approve, 0},
	} {
		a := sampleAnswers(t, e)
		for line := range strings.SplitSeq(c.changes, "; ") {
			if line != "" {
				code, _, _ := strings.Cut(line, " ")
				i := e.byCode[code]
				a.Put(i, answered(t, e, line).At(i))
			}
		}
		r, _ := e.Score(a)
		if firing(e, r.Fired) != c.fires || r.Recommendation != c.to || r.LargestAmount.Or(0) != c.cap {
			t.Errorf("%s: %s, %s, %v; want %s, %s, %v", c.changes, firing(e, r.Fired), r.Recommendation, r.LargestAmount, c.fires, c.to, c.cap)
		}
		var declining []string
		for _, r := range e.DecliningRules(r.Fired) {
			declining = append(declining, r.Code)
		}
		if (c.to == Decline) != slices.Equal(declining, []string{"young"}) {
			t.Errorf("%s: declined by %v", c.changes, declining)
		}
	}
}

func TestDecider(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	for _, c := range []struct {
		band   int
		to     Recommendation
		amount Number
		want   Decider
	}{
		{0, Approve, Whole(2000), OfficerDecides}, {0, Approve, Whole(2000) + 1, ManagerDecides}, {0, Approve, Whole(5000) + 1, HeadOfficeDecides},
		{0, Refer, Whole(100), ManagerDecides}, {0, Decline, Whole(100), OfficerDecides},
		{1, Refer, Whole(3000), ManagerDecides}, {1, Refer, Whole(3001), HeadOfficeDecides},
		{2, Decline, Largest, OfficerDecides}, // no limits given
	} {
		if got := e.Decider(Result{Band: c.band, Recommendation: c.to}, c.amount); got != c.want {
			t.Errorf("%+v: %s", c, got)
		}
	}
}

// A band's From is included, its Below is not; a PD of 1 is in the last.
func TestBandOfPD(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	for pd, want := range map[PD]int{0: 0, PDOne/10 - 1: 0, PDOne / 10: 1, PDOne/5 - 1: 1, PDOne / 5: 2, PDOne: 2} {
		if got := e.band(pd); got != want {
			t.Errorf("a PD of %v is in band %d, want %d", pd, got, want)
		}
	}
}

// A range is of the number that is counted, and there is none without a
// covariance or with an answer missing.
func TestRange(t *testing.T) {
	s := scorecardOf(t, sample)
	e := compiled(t, s)
	a := sampleAnswers(t, e)
	// base, own_stall.yes, years (5 of them) and share.low, and the adjustment:
	// 0.04 + 0.01 + 25 × 0.0001 + 0.01 - 2 × 5 × 0.0001 + 0.05².
	se, ok := e.StandardError(a)
	near(t, "standard error", se*se, 0.064, 1e-15)
	low, high, also := e.Range(a)
	// R: plogis(-2.3525 + c(-1, 1) * qnorm(0.975) * sqrt(0.064))
	if low != 54_767_394 || high != 135_092_367 || !ok || !also {
		t.Error(low, high, ok, also)
	}
	years := e.byCode["years"]
	a.Put(years, Answer{State: Given, Number: Whole(20)})
	at20, _ := e.StandardError(a)
	a.Put(years, Answer{State: Given, Number: Whole(55)})
	if at55, _ := e.StandardError(a); at55 != at20 || at20 == se {
		t.Error(se, at20, at55)
	}
	a.Put(years, Answer{})
	_, _, ok = e.Range(a)
	s.Covariance = nil
	e = compiled(t, s)
	if _, _, also := e.Range(sampleAnswers(t, e)); ok || also {
		t.Error("a range of nothing")
	}
}
