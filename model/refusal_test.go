package model

import (
	"go/ast"
	"go/parser"
	"go/token"
	"os"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"
)

// A workbook is sample's sheets, to be changed.
type workbook struct {
	testing.TB
	sheets []Sheet
}

func (w *workbook) sheet(name string) *Sheet {
	i := slices.IndexFunc(w.sheets, func(s Sheet) bool { return s.Name == name })
	if i < 0 {
		w.Fatalf("no sheet %q", name)
	}
	return &w.sheets[i]
}

// row finds a row by its number, by its first cell or by its first two with a
// point between; 0 for "".
func (w *workbook) row(sheet *Sheet, key string) int {
	if key == "" {
		return 0
	}
	if n, err := strconv.Atoi(key); err == nil {
		return n
	}
	for i, cells := range sheet.Rows {
		if cells[0] == key || cells[0]+"."+cells[1] == key {
			return i + 1
		}
	}
	w.Fatalf("no row %q on %s", key, sheet.Name)
	return 0
}

// change makes one change:
//
//	Sheet/row/Column: value   sets a cell; of an item sheet, Sheet/Item: value
//	+Sheet: cell | cell       adds a row; +60 Sheet: … adds 60, with # their number
//	-Sheet/row                removes a row, -Sheet all rows, --Sheet the sheet
//	#Sheet/Column: header     changes a header
//	=Sheet: header | …        replaces the sheet, lines parted by \n
func (w *workbook) change(text string) {
	target, value, _ := strings.Cut(text, ": ")
	target = strings.TrimSuffix(target, ":")
	kind := target[0]
	if strings.ContainsRune("+-#=", rune(kind)) {
		target = target[1:]
	}
	switch kind {
	case '+':
		times := 1
		if n, name, ok := strings.Cut(target, " "); ok {
			times, _ = strconv.Atoi(n)
			target = name
		}
		sheet := w.sheet(target)
		for n := range times {
			cells := cellsOf(strings.ReplaceAll(value, "#", strconv.Itoa(n)))
			sheet.Rows = append(sheet.Rows, append(cells, make([]string, max(0, len(sheet.Columns)-len(cells)))...))
		}
		return
	case '=':
		*w.sheet(target) = sheetsOf(target + "\n" + strings.ReplaceAll(value, `\n`, "\n"))[0]
		return
	case '-':
		name, key, one := strings.Cut(target, "/")
		switch {
		case target[0] == '-':
			w.sheets = slices.DeleteFunc(w.sheets, func(s Sheet) bool { return s.Name == target[1:] })
		case one:
			n := w.row(w.sheet(name), key)
			w.sheet(name).Rows = slices.Delete(w.sheet(name).Rows, n-1, n)
		default:
			w.sheet(name).Rows = nil
		}
		return
	case '#':
		name, column, _ := strings.Cut(target, "/")
		w.sheet(name).Columns[slices.Index(w.sheet(name).Columns, column)] = value
		return
	}
	place := w.place(target)
	sheet := w.sheet(place.Sheet)
	column := place.Column
	if sheet.Columns[0] == "Item" && place.Row == 0 {
		place.Row, column = w.row(sheet, place.Column), "Value"
	}
	sheet.Rows[place.Row-1][slices.Index(sheet.Columns, column)] = value
}

// place reads Sheet/row/Column or Sheet/Item.
func (w *workbook) place(text string) Place {
	parts := strings.Split(text, "/")
	switch len(parts) {
	case 1:
		return Place{Sheet: parts[0]}
	case 2:
		return Place{Sheet: parts[0], Column: parts[1]}
	}
	return Place{Sheet: parts[0], Row: w.row(w.sheet(parts[0]), parts[1]), Column: parts[2]}
}

// refusals are changes to sample, the problem each gives and where.
var refusals = []struct{ changes, code, place string }{
	// card.go
	{"Card/Format: 2", "unknown_format", "Card/Format"},
	{"Card/Edition: 0", "not_above_zero", "Card/Edition"},
	{"Card/Reference odds: 0", "not_above_zero", "Card/Reference odds"},
	{"Card/In force from: 2026", "date_needs_day", "Card/In force from"},
	{"Card/Review by: 2026-02-15", "before_in_force", "Card/Review by"},
	{"Card/In force from: 2026-01-01", "in_force_before_issue", "Card/In force from"},
	{"Card/Approved by: a. quill", "approved_by_preparer", "Card/Approved by"},
	{"Card/Defaults among them: 2000", "more_than", "Card/Defaults among them"},
	{"Card/Loans used:", "needed_for_estimated", "Card/Loans used"},
	{"Card/Later adjustment standard error: -1", "below_zero", "Card/Later adjustment standard error"},

	// characteristics.go
	{"Characteristics/years/Lowest accepted: 61", "limits_crossed", "Characteristics/years/Highest accepted"},
	{"Characteristics/years/Counted from: 21", "limits_crossed", "Characteristics/years/Counted to"},
	{"Characteristics/years/Seen from: 31", "limits_crossed", "Characteristics/years/Seen to"},
	{"Characteristics/payment/Decimals: 7", "more_than", "Characteristics/payment/Decimals"},
	{"+Characteristics: amount | How much? | number | 3 | | | | | | | recorded", "more_than", "Characteristics/amount/Decimals"},
	{"+Characteristics: term | How long? | number | 1 | | | | | | | recorded", "more_than", "Characteristics/term/Decimals"},
	{"#Attributes/Standard error: Share of past loans", "shares_not_one", "Characteristics/share/Characteristic"},
	{"#Attributes/Standard error: Share of past loans; Attributes/share.low/Share of past loans: 0.3", "average_differs", "Characteristics/share/Average log-odds"},
	{"Terms/Term counted in: weeks", "instalment_not_monthly", "Computed/share/Part 1"},
	{"Characteristics/trade/Average log-odds:", "average_missing", "Characteristics/trade/Average log-odds"},
	{"Characteristics/born/Use: scored", "date_scored", "Characteristics/born/Use"},
	{"+Characteristics: amount | How much? | choice | | | | | | | | recorded", "reserved_misused", "Characteristics/amount/Kind"},
	{"+Characteristics: term | How long? | number | | | | | | | | recorded | | | yes", "reserved_misused", "Characteristics/term/Kind"},
	{"+Characteristics: base | Base | number | | | | | | | | recorded", "reserved_code", "Characteristics/base/Characteristic"},
	{"+Characteristics: unknown | What? | number | | | | | | | | recorded", "reserved_code", "Characteristics/unknown/Characteristic"},
	{"Characteristics/payment/Unknown allowed: yes", "computed_not_asked", "Characteristics/payment/Kind"},
	{"Characteristics/payment/Asked only if: trade is farm", "computed_not_asked", "Characteristics/payment/Kind"},
	{"+Characteristics: trade | Again? | number | | | | | | | | recorded", "repeated_code", "Characteristics/16/Characteristic"},
	{"+60 Characteristics: x# | More? | number | | | | | | | | recorded", "too_many", "Characteristics"},
	{"+Lines: debts | all | All | adds | month", "not_a_worksheet", "Lines/debts/Characteristic"},
	{"+Lines: household | sales | Again | adds | month", "repeated_code", "Lines/5/Line"},
	{"+200 Lines: household | x# | More | adds | month", "too_many", "Lines/201/Line"},
	{"-Lines", "worksheet_without_lines", "Characteristics/household/Kind"},
	{"+Lines: hausehold | x | X | adds | month", "unknown_characteristic", "Lines/5/Characteristic"},

	// computed.go
	{"+Computed: peyment | instalment", "unknown_characteristic", "Computed/peyment/Characteristic"},
	{"Computed/left/Part 1: household_", "unknown_characteristic", "Computed/left/Part 1"},
	{"+Computed: debts | sum | | amount", "not_computed", "Computed/debts/Characteristic"},
	{"+Computed: left | sum | | amount", "repeated_code", "Computed/7/Characteristic"},
	{"-Computed/left", "formula_missing", "Characteristics/left/Kind"},
	{"Computed/left/Part 1: trade", "part_not_usable", "Computed/left/Part 1"},
	{"Computed/left/Part 2: born", "part_not_usable", "Computed/left/Part 2"},
	{"Computed/age/Part 1: years", "part_not_usable", "Computed/age/Part 1"},
	{"Computed/share/Sign 2: minus", "sign_only_in_sum", "Computed/share/Sign 2"},
	{"Computed/share/Part 2:", "wrong_part_count", "Computed/share/Operation"},
	{"Computed/exposure/Part 2:", "wrong_part_count", "Computed/exposure/Operation"},
	{"Computed/payment/Part 1: amount", "wrong_part_count", "Computed/payment/Operation"},
	{"Computed/age/Part 2: born", "wrong_part_count", "Computed/age/Operation"},
	{"Computed/left/Part 1: share", "computed_circle", "Computed/left/Characteristic"},
	{"Computed/left/Part 1: left", "computed_circle", "Computed/left/Characteristic"},

	// condition.go
	{"Characteristics/own_stall/Asked only if: trade was farm", "condition_unreadable", "Characteristics/own_stall/Asked only if"},
	{"Characteristics/own_stall/Asked only if: trade is farm stall", "condition_unreadable", "Characteristics/own_stall/Asked only if"},
	{"Characteristics/own_stall/Asked only if: trade is one of", "condition_unreadable", "Characteristics/own_stall/Asked only if"},
	{"Characteristics/own_stall/Asked only if: tarde is farm", "unknown_characteristic", "Characteristics/own_stall/Asked only if"},
	{"Characteristics/own_stall/Asked only if: guarantor is yes", "condition_not_earlier_choice", "Characteristics/own_stall/Asked only if"},
	{"Characteristics/own_stall/Asked only if: own_stall is yes", "condition_not_earlier_choice", "Characteristics/own_stall/Asked only if"},
	{"Characteristics/guarantor/Asked only if: years is few", "condition_not_earlier_choice", "Characteristics/guarantor/Asked only if"},
	{"Characteristics/own_stall/Asked only if: trade is farmer", "unknown_attribute", "Characteristics/own_stall/Asked only if"},
	{"Characteristics/seasons/Asked only if: own_stall is not_applicable", "unknown_attribute", "Characteristics/seasons/Asked only if"},

	// attributes.go
	{"+Attributes: trode | x | X", "unknown_characteristic", "Attributes/trode/Characteristic"},
	{"+Attributes: born | x | X", "date_has_attributes", "Attributes/born/Characteristic"},
	{"+Attributes: trade | farm | Farm | | | 0", "repeated_code", "Attributes/20/Attribute"},
	{"+62 Attributes: trade | x# | X | | | 0", "too_many", "Attributes/81/Attribute"},
	{"Attributes/trade.farm/Label:", "missing_value", "Attributes/trade.farm/Label"},
	{"Attributes/trade.farm/Log-odds:", "log_odds_missing", "Attributes/trade.farm/Log-odds"},
	{"Attributes/share.unknown/Log-odds:", "log_odds_missing", "Attributes/share.unknown/Log-odds"},
	{"Attributes/seasons.spring/Log-odds: 1", "log_odds_not_scored", "Attributes/seasons.spring/Log-odds"},
	{"Attributes/sex.man/Log-odds: 0.1", "log_odds_not_scored", "Attributes/sex.man/Log-odds"},
	{"+Attributes: debts | | | | | | 0.1", "log_odds_not_scored", "Attributes/debts/Log-odds per unit"},
	{"Attributes/trade.farm/Log-odds per unit: 0.1", "slope_in_attribute", "Attributes/trade.farm/Log-odds per unit"},
	{"Attributes/trade.farm/Defaults: 500", "more_than", "Attributes/trade.farm/Defaults"},
	{"Attributes/trade.farm/Standard error: -0.1", "below_zero", "Attributes/trade.farm/Standard error"},
	{"Attributes/years./Standard error: -0.1", "below_zero", "Attributes/years./Standard error"},
	{"Attributes/trade.farm/From: 1", "limits_not_wanted", "Attributes/trade.farm/From"},
	{"Attributes/share.nothing_left/Below: 1", "limits_not_wanted", "Attributes/share.nothing_left/From"},
	{"Attributes/trade.farm/Attribute:", "missing_value", "Attributes/2/Attribute"},
	{"Attributes/own_stall.yes/Attribute: maybe", "unknown_attribute", "Attributes/4/Attribute"},
	{"-Attributes/seasons.spring; -Attributes/seasons.autumn", "choice_without_attributes", "Characteristics/seasons/Kind"},
	{"-Attributes/own_stall.no", "attribute_missing", "Characteristics/own_stall/Kind"},
	{"-Attributes/years.unknown", "attribute_missing", "Characteristics/years/Characteristic"},
	{"-Attributes/own_stall.not_applicable", "attribute_missing", "Characteristics/own_stall/Characteristic"},
	{"-Attributes/share.nothing_left", "attribute_missing", "Characteristics/share/Characteristic"},
	{"-Attributes/share.unknown", "attribute_missing", "Characteristics/share/Characteristic"},
	{"+Attributes: guarantor | unknown | Not known", "attribute_never_happens", "Attributes/guarantor/Attribute"},
	{"Attributes/share.nothing_left/Log-odds: 0.6", "nothing_left_not_riskiest", "Attributes/share.nothing_left/Log-odds"},
	{"Attributes/share.high/Below: 0.9", "band_last_below", "Attributes/share.high/Below"},
	{"-Attributes/years.few; -Attributes/years.some; -Attributes/years.", "number_without_bands", "Characteristics/years/Kind"},
	{"Attributes/share.middle/Below: 0.3", "band_empty", "Attributes/share.middle/Below"},
	{"Attributes/share.low/From: 0.1", "band_first_from", "Attributes/share.low/From"},
	{"Attributes/share.low/Below:", "band_after_open", "Attributes/share.middle/From"},
	{"Attributes/share.middle/From:", "band_from_missing", "Attributes/share.middle/From"},
	{"Attributes/share.middle/From: 0.31", "band_gap", "Attributes/share.middle/From"},
	{"Attributes/share.middle/From: 0.29", "band_overlap", "Attributes/share.middle/From"},
	{"+Attributes: years | | | | | | 0.1", "slope_repeated", "Attributes/20/Attribute"},
	{"Attributes/years./Log-odds per unit:", "missing_value", "Attributes/years./Attribute"},
	{"Attributes/years./Log-odds: 1", "slope_with_band", "Attributes/years./Log-odds"},
	{"Characteristics/years/Counted to:", "slope_needs_limits", "Attributes/years./Log-odds per unit"},

	// protected.go
	{"Characteristics/trade/Question: In which village?", "protected_scored", "Characteristics/trade/Use"},
	{"Characteristics/trade/Question: ¿Cuál es su religión?", "protected_scored", "Characteristics/trade/Use"},
	{"Computed/left/Part 2: age; Characteristics/age/Lawful ground:", "protected_scored", "Characteristics/share/Use"},
	{"Characteristics/debts/Use: watched; Characteristics/debts/Unknown allowed:", "protected_scored", "Characteristics/share/Use"},

	// bands.go
	{"-Bands", "no_bands", "Bands"},
	{"+62 Bands: x# | X | 0.5 | 0.6 | decline", "too_many", "Bands"},
	{"Bands/b/Band: a", "repeated_code", "Bands/2/Band"},
	{"Bands/b/PD from:", "band_from_missing", "Bands/b/PD from"},
	{"Bands/a/PD from: 0.01", "bands_start", "Bands/a/PD from"},
	{"Bands/b/PD from: 0.11", "band_gap", "Bands/b/PD from"},
	{"Bands/b/PD from: 0.09", "band_overlap", "Bands/b/PD from"},
	{"Bands/b/PD below: 0.1", "band_empty", "Bands/b/PD below"},
	{"Bands/c/PD below: 0.9", "bands_end", "Bands/c/PD below"},
	{"Bands/a/PD below:", "band_after_open", "Bands/a/PD below"},
	{"Bands/c/Recommendation: approve", "band_milder", "Bands/c/Recommendation"},
	{"Bands/a/Manager limit: 1000", "limits_crossed", "Bands/a/Manager limit"},

	// rules.go and ruletest.go
	{"+60 Rules: x# | X | term | at most | 3 | note", "too_many", "Rules/68/Rule"},
	{"Rules/young/Effect:", "missing_value", "Rules/young/Effect"},
	{"Rules/young/Label:", "missing_value", "Rules/young/Label"},
	{"Rules/6/Effect: refer", "rule_two_effects", "Rules/6/Effect"},
	{"Rules/debts/Amount: 0", "not_above_zero", "Rules/debts/Amount"},
	{"Rules/young/Amount: 5", "amount_not_wanted", "Rules/young/Amount"},
	{"Rules/9/Amount: 20", "rule_two_amounts", "Rules/9/Amount"},
	{"Rules/young/Characteristic: ago", "unknown_characteristic", "Rules/young/Characteristic"},
	{"Characteristics/age/Lawful ground:", "rule_without_ground", "Rules/young/Characteristic"},
	{"Rules/8/Characteristic: sex; Rules/8/Value: man", "rule_without_ground", "Rules/8/Characteristic"},
	{"Rules/papers/Value: yes", "value_not_wanted", "Rules/papers/Value"},
	{"Rules/debts/Characteristic: household", "test_not_usable", "Rules/debts/Test"},
	{"Rules/8/Test: below", "test_not_usable", "Rules/8/Test"},
	{"Rules/8/Value:", "missing_value", "Rules/8/Value"},
	{"Rules/5/Value: ,", "missing_value", "Rules/5/Value"},
	{"Rules/8/Value: stal", "unknown_attribute", "Rules/8/Value"},
	{"Rules/8/Value: stall, farm", "unknown_attribute", "Rules/8/Value"},
	{"Rules/8/Value: unknown", "unknown_attribute", "Rules/8/Value"},
	{"Rules/short/Test: is; Rules/short/Value: few", "unknown_attribute", "Rules/short/Value"},
	{"Rules/middle/Value: 9000", "between_unreadable", "Rules/middle/Value"},
	{"Rules/young/Value: 5 to 6", "between_unreadable", "Rules/young/Value"},
	{"Rules/young/Value: eighteen", "not_a_number", "Rules/young/Value"},
	{"Rules/middle/Value: 9 to x", "not_a_number", "Rules/middle/Value"},
	{"Rules/middle/Value: 9 to 8", "limits_crossed", "Rules/middle/Value"},

	// terms.go
	{"Terms/Money decimals: 5", "more_than", "Terms/Money decimals"},
	{"Terms/Amount step: 0", "not_above_zero", "Terms/Amount step"},
	{"+Terms: Fee amount | -1", "below_zero", "Terms/Fee amount"},
	{"+Terms: Fee amount | 1.005", "too_many_decimals", "Terms/Fee amount"},
	{"+Terms: Payment rounded up to | 0", "not_above_zero", "Terms/Payment rounded up to"},
	{"Terms/Smallest amount: 100.001", "too_many_decimals", "Terms/Smallest amount"},
	{"Terms/Largest amount: 50", "limits_crossed", "Terms/Largest amount"},
	{"Terms/Shortest term: 0", "not_above_zero", "Terms/Shortest term"},
	{"Terms/Longest term: 2", "limits_crossed", "Terms/Longest term"},
	{"+Terms: Longest grace | 36", "more_than", "Terms/Longest grace"},
	{"Terms/Amount step: 0.01", "amount_step_too_small", "Terms/Amount step"},
	{"Terms/Largest amount: 999999999999; Terms/Amount step: 0.01", "amount_step_too_small", "Terms/Amount step"},
	{"Terms/Rate: 24", "rate_above_one", "Terms/Rate"},
	{"Terms/Rate: 500", "loan_out_of_range", "Terms/Rate"},
	{"+Terms: Fee rate | 2", "loan_out_of_range", "Terms/Fee rate"},
	{"Terms/Longest term: 1201", "loan_out_of_range", "Terms/Longest term"},
	{"+Terms: Fee amount | 100", "loan_nothing_in_hand", "Terms/Smallest amount"},
	{"Terms/Money decimals: 4; Terms/Rate: 100; Terms/Longest term: 1200; Terms/Largest amount: 999999999999; Terms/Amount step: 99999999999",
		"loan_out_of_range", "Terms/Largest amount"},

	// compile.go
	{"+Overrides: known | Again | safer", "repeated_code", "Overrides/3/Override"},
	{"+Words: trade.stall | fr | Banc", "repeated_code", "Words/3/Code"},

	// checks.go, and answers.go and worksheet.go by way of it
	{"-Checks", "no_checks", "Checks"},
	{"Checks/two/Check: one", "repeated_code", "Checks/2/Check"},
	{"Checks/one/Log-odds: -2.352498", "check_log_odds_differ", "Checks/one/Log-odds"},
	{"Checks/one/PD: 0.08687", "check_differs", "Checks/one/PD"},
	{"Checks/one/Score: 555.6", "check_differs", "Checks/one/Score"},
	{"Checks/one/Band: b", "check_differs", "Checks/one/Band"},
	{"Checks/one/Recommendation: refer", "check_differs", "Checks/one/Recommendation"},
	{"Checks/one/years:", "answer_missing", "Checks/one/years"},
	{"Checks/one/own_stall: not_applicable", "answer_missing", "Checks/one/own_stall"},
	{"Checks/one/Seen: howsehold", "unknown_characteristic", "Checks/one/Seen"},
	{"Checks/one/Seen: payment", "unknown_characteristic", "Checks/one/Seen"},
	{"Checks/one/trade: stal", "unknown_attribute", "Checks/one/trade"},
	{"Checks/one/trade: unknown", "unknown_not_allowed", "Checks/one/trade"},
	{"Checks/one/years: not_applicable", "not_applicable_not_allowed", "Checks/one/years"},
	{"Checks/one/years: 1.5", "too_many_decimals", "Checks/one/years"},
	{"Checks/one/years: five", "not_a_number", "Checks/one/years"},
	{"Checks/one/born: 6 May 1980", "not_a_date", "Checks/one/born"},
	{"Checks/one/household: sale:1/week", "unknown_line", "Checks/one/household"},
	{"Checks/one/household: sales:1/week sales:2/week", "repeated_code", "Checks/one/household"},
	{"Checks/one/household: sales:x/week", "not_a_number", "Checks/one/household"},
	{"Checks/one/household: sales:1/moon", "not_in_list", "Checks/one/household"},
	{"-Checks/two", "untouched_attribute", "Attributes/trade.farm/Attribute"},
	{"-Checks/four", "untouched_attribute", "Attributes/share.unknown/Attribute"},
	{"-Checks/five", "untouched_attribute", "Attributes/share.nothing_left/Attribute"},
	{"Checks/one/years: 0; Checks/two/years: 0; Checks/four/years: unknown; Checks/five/years: 0; Checks/six/years: 0", "untouched_slope", "Attributes/years./Attribute"},
	{"-Checks/three", "untouched_rule", "Rules/young/Rule"},
	{"-Checks/two", "untouched_rule", "Rules/old/Rule"},
	{"-Checks/one", "untouched_band", "Bands/a/Band"},

	// covariance.go
	{"=Covariance: Coefficient | trade.farm\\ntrade.farm | 0.01", "covariance_without_base", "Covariance"},
	{"=Covariance: Coefficient | base\\nbase | 0.01", "covariance_lacks", "Attributes/trade.farm/Standard error"},
	{"=Covariance: Coefficient | base | trade.form\\nbase | 1 | 0\\ntrade.form | 0 | 1", "unknown_coefficient", "Covariance/2/trade.form"},
	{"=Covariance: Coefficient | base | base\\nbase | 1 | 0\\nbase | 0 | 1", "repeated_code", "Covariance/2/base"},
	{"Covariance/trade.farm/trade.farm: 0.02", "covariance_not_standard_error", "Covariance/trade.farm/trade.farm"},
	{"Covariance/years/years: -0.0001", "covariance_not_standard_error", "Covariance/years/years"},
	{"Covariance/trade.farm/base: 0.001", "covariance_not_symmetric", "Covariance/trade.farm/base"},
	{"Covariance/trade.farm/base: 0.03; Covariance/base/trade.farm: 0.03", "covariance_not_semidefinite", "Covariance"},
	{"Covariance/base/base: -1", "covariance_not_semidefinite", "Covariance"},
	{"Covariance/base/base: 0", "covariance_not_semidefinite", "Covariance"},

	// decode.go
	{"#Overrides/Label: label", "missing_column", "Overrides/Label"},
	{"#Overrides/Label: label", "unknown_column", "Overrides/label"},
	{"#Overrides/Direction: Label", "repeated_column", "Overrides/Label"},
	{"#Checks/trade: tarde", "missing_column", "Checks/trade"},
	{"#Card/Item: Items", "missing_column", "Card/Item"},
	{"--Bands", "missing_sheet", "Bands"},
	{"+Card: | 5", "missing_value", "Card/30/Item"},
	{"+Card: Colour | red", "unknown_item", "Card/30/Item"},
	{"+Card: Format | 1", "repeated_item", "Card/30/Item"},
	{"-Card/Lender", "missing_item", "Card/Lender"},
	{"-Covariance/base", "covariance_not_square", "Covariance"},
	{"Covariance/trade.farm/Coefficient: trade.form", "covariance_names_differ", "Covariance/2/Coefficient"},

	// sheet.go, number.go, logodds.go, cells.go, date.go
	{"Characteristics/trade/Question:", "missing_value", "Characteristics/trade/Question"},
	{"Overrides/known/Override: Known", "bad_code", "Overrides/1/Override"},
	{"Overrides/known/Override: 1st", "bad_code", "Overrides/1/Override"},
	{"Overrides/known/Direction: up", "not_in_list", "Overrides/known/Direction"},
	{"Characteristics/years/Unknown allowed: perhaps", "not_in_list", "Characteristics/years/Unknown allowed"},
	{"Card/Reference score: 1234567.123456", "too_many_digits", "Card/Reference score"},
	{"Attributes/years./Log-odds per unit: 1.123456789012", "too_many_digits", "Attributes/years./Log-odds per unit"},
	{"Covariance/base/base: 0.1234567890123", "too_many_digits", "Covariance/base/base"},
	{"Card/Base log-odds: -2.0000000001", "too_many_decimals", "Card/Base log-odds"},
	{"Card/Base log-odds: 1000001", "number_too_large", "Card/Base log-odds"},
	{"Card/Reference score: 6e2", "not_a_number", "Card/Reference score"},
	{"Card/Edition: 1.5", "not_a_count", "Card/Edition"},
	{"Card/Issued on: 1 Feb 2026", "not_a_date", "Card/Issued on"},
	{"Terms/Rate: -0.1", "not_a_rate", "Terms/Rate"},
	{"Bands/b/PD from: 1.1", "not_a_probability", "Bands/b/PD from"},
}

// Each change to a good scorecard is refused with its own code at its own
// place, and there is no code that none of them provokes.
func TestEveryProblemIsProvoked(t *testing.T) {
	provoked := map[string]bool{}
	for _, c := range refusals {
		w := &workbook{t, sheetsOf(sample)}
		for change := range strings.SplitSeq(c.changes, "; ") {
			w.change(change)
		}
		s, problems := FromSheets(w.sheets)
		e, more := Compile(s)
		problems = append(problems, more...)
		if slices.ContainsFunc(problems, func(p Problem) bool { return !p.Warning }) {
			e = nil // FromSheets may have refused what Compile did not see
		}
		if c.place == "Bands" && strings.HasPrefix(c.changes, "--") {
			w.sheets = append(w.sheets, Sheet{Name: "Bands"})
		}
		want := w.place(c.place)
		i := slices.IndexFunc(problems, func(p Problem) bool {
			items := (want.Sheet == "Card" || want.Sheet == "Terms") && want.Row == 0
			return p.Code == c.code && p.Place.Sheet == want.Sheet && p.Place.Column == want.Column && (p.Place.Row == want.Row || items)
		})
		if i < 0 {
			t.Errorf("%s: %s not at %+v but\n%v", c.changes, c.code, want, problems)
			continue
		}
		if p := problems[i]; p.Warning != slices.Contains(warnings, p.Code) || (!p.Warning && e != nil) {
			t.Errorf("%s: %v is a warning: %v; an edition: %v", c.changes, p, p.Warning, e != nil)
		}
		provoked[c.code] = true
	}
	answerProblems(t, provoked)
	for _, code := range codesInSource(t) {
		if !provoked[code] {
			t.Errorf("no test provokes %s", code)
		}
	}
}

var warnings = []string{"nothing_left_not_riskiest", "rate_above_one", "unknown_sheet", "unknown_column", "unknown_item", "shares_not_one", "average_differs"}

// answerProblems provokes what is no matter of one sheet's cell: problems of
// whole sheets, of canonical texts and of answers.
func answerProblems(t *testing.T, provoked map[string]bool) {
	t.Helper()
	expect := func(code string, place Place, problems ...Problem) {
		t.Helper()
		provoked[code] = true
		if !slices.ContainsFunc(problems, func(p Problem) bool { return p.Code == code && p.Place == place }) {
			t.Errorf("%s not at %+v in %v", code, place, problems)
		}
	}
	sheets := append(sheetsOf(sample), Sheet{Name: "Pictures"}, Sheet{Name: "Bands"})
	_, problems := FromSheets(sheets)
	expect("unknown_sheet", Place{Sheet: "Pictures"}, problems...)
	expect("repeated_sheet", Place{Sheet: "Bands"}, problems...)
	_, problems = ParseCanonical("another text\n")
	expect("not_canonical", Place{}, problems...)
	_, problems = ParseCanonical(canonicalHead + "\na\tb\n")
	expect("not_canonical", Place{}, problems...)
	for _, text := range []string{"", "00", strings.Repeat("0", 66), strings.Repeat("x", 64)} {
		_, err := ParseFingerprint(text)
		expect("bad_fingerprint", Place{}, err.(Problem))
	}

	e := compiled(t, scorecardOf(t, sample))
	at := func(code string) Place { return Place{Sheet: "Answers", Column: code} }
	_, problems = e.ParseAnswers("")
	expect("missing_value", at("on"), problems...)
	expect("not_in_list", at("client"), problems...)
	_, problems = e.ParseAnswers("on\t2026\nclient\tall\nyears\t5\nyears\t6\nyaers\t5\npayment\t5\nterm\t6\tread\ntrade\tfram\n")
	expect("date_needs_day", at("on"), problems...)
	expect("not_in_list", at("client"), problems...)
	expect("repeated_code", at("years"), problems...)
	expect("unknown_characteristic", at("yaers"), problems...)
	expect("unknown_characteristic", at("payment"), problems...)
	expect("not_canonical", at("term"), problems...)
	expect("unknown_attribute", at("trade"), problems...)

	a := answered(t, e, "amount 5100", "term 37", "born 2026-02-02", "years 61", "trade workshop", "debts unknown", "household 100")
	problems = e.Check(a)
	expect("outside_product", at("amount"), problems...)
	expect("outside_product", at("term"), problems...)
	expect("date_to_come", at("born"), problems...)
	expect("outside_accepted", at("born"), problems...)
	expect("outside_accepted", at("years"), problems...)
	for _, p := range problems {
		if p.Warning == (p.Code == "outside_product") {
			t.Errorf("%v is a warning: %v", p, p.Warning)
		}
	}
	expect("amount_not_in_steps", at("amount"), e.Check(answered(t, e, "amount 1050.5"))...)
	for _, good := range []string{"amount 100", "amount 5000", "term 3", "term 36", "born 2026", "born 2020-01-01", "born 1900", "years 60"} {
		for _, p := range e.Check(answered(t, e, good)) {
			if p.Code != "outside_accepted" || good != "born 2026" {
				t.Errorf("%s: %v", good, p)
			}
		}
	}
	problems = e.Ground(a, Date{2027, 3, 2})
	expect("outside_seen", at("years"), problems...)
	expect("few_of_attribute", at("trade"), problems...)
	expect("past_review", at(""), problems...)
	if problems := e.Ground(answered(t, e, "years 30", "trade farm"), Date{2027, 3, 1}); problems != nil {
		t.Errorf("within its ground: %v", problems)
	}
	s := scorecardOf(t, sample)
	s.Card.LoansUsed = Some(Count(999))
	expect("few_loans", at(""), compiled(t, s).Ground(a, s.Card.IssuedOn)...)
}

// codesInSource are the codes that the package's source spells: every literal
// of small words with underscores, but for the few that are something else.
func codesInSource(t *testing.T) []string {
	t.Helper()
	notCodes := []string{NotApplicable, NothingLeft, "stand_in"}
	looksLike := regexp.MustCompile(`^"[a-z]+(_[a-z]+)+"$`)
	files, err := os.ReadDir(".")
	if err != nil {
		t.Fatal(err)
	}
	var codes []string
	for _, f := range files {
		if !strings.HasSuffix(f.Name(), ".go") || strings.HasSuffix(f.Name(), "_test.go") {
			continue
		}
		file, err := parser.ParseFile(token.NewFileSet(), f.Name(), nil, 0)
		if err != nil {
			t.Fatal(err)
		}
		ast.Inspect(file, func(n ast.Node) bool {
			if l, ok := n.(*ast.BasicLit); ok && looksLike.MatchString(l.Value) {
				code, _ := strconv.Unquote(l.Value)
				if !slices.Contains(notCodes, code) && !slices.Contains(codes, code) {
					codes = append(codes, code)
				}
			}
			return true
		})
	}
	if len(codes) < 90 {
		t.Errorf("only %d codes found", len(codes))
	}
	return codes
}

// A misspelt code is shown with the one it is most like.
func TestNearCode(t *testing.T) {
	w := &workbook{t, sheetsOf(sample)}
	w.change("+Lines: hausehold | x | X | adds | month")
	w.change("+Lines: xyz | x | X | adds | month")
	s, _ := FromSheets(w.sheets)
	_, problems := Compile(s)
	near := map[string]string{}
	for _, p := range problems {
		near[p.Args["value"]] = p.Args["near"]
	}
	if near["hausehold"] != "household" || near["xyz"] != "" {
		t.Errorf("near: %v", near)
	}
}
