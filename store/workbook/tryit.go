package workbook

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"github.com/xuri/excelize/v2"

	"weighhouse/model"
)

// Columns of "Try it". Results stand in two columns beside the questions.
const (
	tryNumber = iota + 1
	tryCode
	tryQuestion
	tryAnswer
	tryValue
	tryCounted
	tryRow
	tryAttribute
	tryLogOdds
	_
	tryItem
	tryResult
)

// Rows of the results.
const (
	tryOn = iota + 2
	tryMissing
	tryTotal
	tryPD
	tryScore
	tryBand
	tryRecommendation
	_
	tryRate
	tryPeriods
	tryInterest
	tryFirst
	tryEven
	tryPayment
)

// resultRef is the cell of a result.
func resultRef(row int) string { return fmt.Sprintf("$%s$%d", columnName(tryResult), row) }

// tryIt writes the sheet that scores an applicant by formulas: coefficients,
// bands, limits, scale and terms are looked up in the other sheets as they
// stand; which questions there are, and what is computed from what, is fixed
// when the workbook is written. Only functions that LibreOffice, Gnumeric and
// Excel share are used; inside SUMPRODUCT only operators and ROW work on whole
// columns in all three.
func (b *builder) tryIt(s model.Scorecard, e *model.Edition) {
	_, err := b.f.NewSheet(tryItSheet)
	b.do(err)
	t := &trySheet{builder: b, s: s, e: e, lastRow: max(spareRows, len(s.Attributes)+100)}
	for i, name := range []string{"No.", "Code", "Question", "Answer", "Value", "Counted as", "Row of Attributes", "Attribute", "Log-odds", "", "Result", "Value"} {
		if name != "" {
			b.text(tryItSheet, i+1, 1, name, b.header)
		}
		b.width(tryItSheet, i+1, []float64{5, 20, questionWidth, 18, 16, 16, 12, 18, 16, 3, 40, 18}[i])
	}
	b.do(b.f.SetRowHeight(tryItSheet, 1, 30))
	b.note(tryItSheet, refOf(tryAnswer, 1), "Type answers in this column: the code of a choice, yes or no, a number, a date, or unknown where that is allowed. A worksheet takes one monthly figure.")
	for i := range e.Items() {
		t.item(&e.Items()[i])
	}
	t.results()
	b.page(tryItSheet, true)
}

// questionWidth is in characters.
const questionWidth = 48.0

// trySheet is the sheet in the making.
type trySheet struct {
	*builder
	s       model.Scorecard
	e       *model.Edition
	lastRow int // of the ranges looked up
}

// row is the sheet's row of an item.
func (t *trySheet) row(item *model.Item) int { return item.Index + 2 }

// value is the cell with the value of a characteristic.
func (t *trySheet) value(code string) string {
	item, _ := t.e.Item(code)
	return refOf(tryValue, t.row(item))
}

// formula writes a formula.
func (t *trySheet) formula(col, row int, format string, args ...any) {
	t.do(t.f.SetCellFormula(tryItSheet, refOf(col, row), fmt.Sprintf(format, args...)))
}

// span is a column of another sheet by its header, from a row on.
func (t *trySheet) span(sheet, header string, from int) string {
	form, _ := formOf(sheet)
	letter := columnName(1 + slices.IndexFunc(form.Columns, func(c model.Column) bool { return c.Name == header }))
	return fmt.Sprintf("%s!$%s$%d:$%s$%d", sheet, letter, from, letter, t.lastRow)
}

// fact is an item of Card or Terms.
func (t *trySheet) fact(sheet, item string) string {
	return fmt.Sprintf(`INDEX(%s!$B$2:$B$99,MATCH("%s",%s!$A$2:$A$99,0))`, sheet, item, sheet)
}

// of is a column of Characteristics for the item of a row.
func (t *trySheet) of(header string, row int) string {
	return fmt.Sprintf("INDEX(%s,MATCH($B%d,%s,0))", t.span("Characteristics", header, 2), row, t.span("Characteristics", "Characteristic", 2))
}

// item writes one row.
func (t *trySheet) item(item *model.Item) {
	r := t.row(item)
	if item.Number > 0 {
		t.do(t.f.SetCellInt(tryItSheet, refOf(tryNumber, r), int64(item.Number)))
	}
	t.do(t.f.SetCellStyle(tryItSheet, refOf(1, r), refOf(tryLogOdds, r), t.locked))
	t.string(tryItSheet, refOf(tryCode, r), item.Code)
	t.string(tryItSheet, refOf(tryQuestion, r), item.Question)
	t.height(tryItSheet, r, []string{item.Question}, []float64{questionWidth})
	if item.Kind == model.Computed {
		t.computed(item, r)
	} else {
		t.answer(item, r)
	}
	listed := slices.ContainsFunc(t.s.Characteristics, func(c model.Characteristic) bool { return c.Code == item.Code })
	switch {
	case item.Kind == model.Choice, item.Kind == model.YesNo, item.Kind == model.DateKind, !listed:
		t.formula(tryCounted, r, "E%d", r)
	default:
		t.formula(tryCounted, r, "IF(ISNUMBER(E%[1]d),MIN(MAX(E%[1]d,IF(ISNUMBER(%[2]s),%[2]s,-1E+15)),IF(ISNUMBER(%[3]s),%[3]s,1E+15)),E%[1]d)",
			r, t.of("Counted from", r), t.of("Counted to", r))
	}
	if !listed {
		t.formula(tryLogOdds, r, `IF(F%d="","",0)`, r)
		return
	}
	// The row of Attributes: of a number that of its band, of anything else
	// that of its name.
	code, name := t.span("Attributes", "Characteristic", 2), t.span("Attributes", "Attribute", 2)
	from, below := t.span("Attributes", "From", 2), t.span("Attributes", "Below", 2)
	t.formula(tryRow, r, `IF(F%[1]d="",0,IF(ISNUMBER(F%[1]d),`+
		`SUMPRODUCT((%[2]s=$B%[1]d)*(%[3]s<>"")*(%[3]s<>"unknown")*(%[3]s<>"not_applicable")*(%[3]s<>"nothing_left")*((%[4]s<>"")*(%[4]s>F%[1]d)=0)*((%[5]s<>"")*(%[5]s<=F%[1]d)=0)*ROW(%[2]s)),`+
		`SUMPRODUCT((%[2]s=$B%[1]d)*(%[3]s=F%[1]d)*ROW(%[2]s))))`, r, code, name, from, below)
	t.formula(tryAttribute, r, `IF(G%[1]d=0,"",INDEX(%[2]s,G%[1]d))`, r, t.span("Attributes", "Attribute", 1))
	// A slope is rounded to a billionth, as the program does.
	t.formula(tryLogOdds, r, `IF(F%[1]d="","",IF(%[2]s<>"scored",0,IF(G%[1]d>0,INDEX(%[3]s,G%[1]d)+0,IF(ISNUMBER(F%[1]d),0,"not known"))+`+
		`IF(ISNUMBER(F%[1]d),ROUND(SUMPRODUCT((%[4]s=$B%[1]d)*(%[5]s=""),%[6]s)*F%[1]d,9),0)))`,
		r, t.of("Use", r), t.span("Attributes", "Log-odds", 1), code, name, t.span("Attributes", "Log-odds per unit", 2))
}

// answer writes the cell for an answer, filled as in the first check, and the
// value it comes to.
func (t *trySheet) answer(item *model.Item, r int) {
	ref := refOf(tryAnswer, r)
	style := t.open[generalFormat]
	switch item.Kind {
	case model.Choice, model.YesNo:
		style = t.open[textFormat]
		var codes []string
		for _, a := range item.Attributes {
			if a.Code != model.NotApplicable {
				codes = append(codes, a.Code)
			}
		}
		if list := strings.Join(codes, ","); len(list) <= excelize.MaxFieldLength {
			t.dropDown(tryItSheet, ref, model.Column{Options: codes})
		}
	case model.DateKind:
		style = t.open[dateFormat]
		t.do(t.f.SetCellStyle(tryItSheet, refOf(tryValue, r), refOf(tryCounted, r), style))
	}
	t.do(t.f.SetCellStyle(tryItSheet, ref, ref, style))
	kind := model.ValueColumn
	if item.Kind == model.DateKind {
		kind = model.DateColumn
	}
	t.builder.value(tryItSheet, tryAnswer, r, t.first(item), kind)

	own := fmt.Sprintf(`IF(D%[1]d="","",D%[1]d)`, r)
	if source, codes, not := condition(item.AskedOnlyIf); source != "" {
		cell := t.value(source)
		var holds []string
		if not {
			codes = append(codes, model.Unknown, model.NotApplicable)
		}
		for _, code := range codes {
			holds = append(holds, fmt.Sprintf(`%s="%s"`, cell, code))
		}
		asked, otherwise := own, `"not_applicable"`
		if not {
			asked, otherwise = otherwise, asked
		}
		own = fmt.Sprintf(`IF(%s="","",IF(OR(%s),%s,%s))`, cell, strings.Join(holds, ","), asked, otherwise)
	}
	t.formula(tryValue, r, "%s", own)
}

// first is an item's answer in the first check; of a worksheet the monthly
// figure.
func (t *trySheet) first(item *model.Item) string {
	if len(t.s.Checks) == 0 {
		return ""
	}
	for _, a := range t.s.Checks[0].Answers {
		if a.Characteristic != item.Code {
			continue
		}
		if answer, err := t.e.ParseAnswer(item.Index, a.Answer); err == nil && answer.Lines != nil {
			return item.Monthly(answer.Lines).String()
		}
		return a.Answer
	}
	return ""
}

// condition reads "source is a", "source is not a" or "source is one of a, b".
func condition(text string) (source string, codes []string, not bool) {
	words := strings.Fields(strings.ReplaceAll(text, ",", " "))
	if len(words) < 3 {
		return "", nil, false
	}
	source, codes = words[0], words[2:]
	switch {
	case codes[0] == "not":
		codes, not = codes[1:], true
	case len(codes) > 2 && codes[0] == "one" && codes[1] == "of":
		codes = codes[2:]
	}
	return source, codes, not
}

// computed writes the value of a computed item: unknown where a part is, then
// nothing_left, then not_applicable, else the number.
func (t *trySheet) computed(item *model.Item, r int) {
	i := slices.IndexFunc(t.s.Computed, func(f model.Formula) bool { return f.Characteristic == item.Code })
	var parts, signs []string
	for _, p := range t.s.Computed[i].Parts {
		if p.Code != "" {
			parts = append(parts, t.value(p.Code))
			signs = append(signs, map[bool]string{true: "-", false: "+"}[p.Sign == model.Minus])
		}
	}
	var number string
	round := func(x string) string { return halfUp(x, int(item.Decimals)) }
	on := resultRef(tryOn)
	switch item.Operation {
	case model.Sum:
		sum := ""
		for k, p := range parts {
			sum += signs[k] + "N(" + p + ")"
		}
		number = round(sum)
	case model.Product:
		number = round(strings.Join(parts, "*"))
	case model.Ratio:
		number = fmt.Sprintf(`IF(%s<=0,"nothing_left",%s)`, parts[1], round(parts[0]+"/"+parts[1]))
	case model.Instalment:
		parts = []string{t.value(model.Amount), t.value(model.Term)}
		number = round(resultRef(tryPayment))
	case model.MonthlyInstalment:
		parts = []string{t.value(model.Amount), t.value(model.Term)}
		number = round(fmt.Sprintf(`%[1]s*IF(%[2]s="weeks",52,IF(%[2]s="fortnights",26,12))/12`, resultRef(tryPayment), t.fact("Terms", "Term counted in")))
	case model.WholeYears:
		number = wholeYears(on, parts[0])
	case model.AgeAtLastPayment:
		periods, unit := resultRef(tryPeriods), t.fact("Terms", "Term counted in")
		number = wholeYears(fmt.Sprintf(`IF(%[1]s="months",EDATE(%[2]s,%[3]s),%[2]s+%[3]s*IF(%[1]s="weeks",7,14))`, unit, on, periods), parts[0])
		parts = append(parts, t.value(model.Term))
	}
	for _, state := range []string{model.NotApplicable, model.NothingLeft, model.Unknown, ""} {
		if state == model.NotApplicable && item.Operation == model.Sum {
			continue // in a sum it counts nothing
		}
		var any []string
		for _, p := range parts {
			any = append(any, fmt.Sprintf(`%s="%s"`, p, state))
		}
		number = fmt.Sprintf(`IF(OR(%s),"%s",%s)`, strings.Join(any, ","), state, number)
	}
	t.formula(tryValue, r, "%s", number)
}

// halfUp rounds half towards plus infinity; ROUND rounds half away from zero.
func halfUp(x string, decimals int) string {
	unit := "1E" + strconv.Itoa(decimals)
	return fmt.Sprintf("(ROUND(%[1]s,%[2]d)+IF((%[1]s)<0,IF(ROUND(MOD(-(%[1]s)*%[3]s,1),6)=0.5,1/%[3]s,0),0))", x, decimals, unit)
}

// wholeYears counts birthdays from born, a day or a year alone, which stands
// for its 1 July.
func wholeYears(on, born string) string {
	day := fmt.Sprintf("IF(%[1]s<3000,DATE(%[1]s,7,1),%[1]s)", born)
	return fmt.Sprintf("(YEAR(%[1]s)-YEAR(%[2]s)-IF(MONTH(%[1]s)*100+DAY(%[1]s)<MONTH(%[2]s)*100+DAY(%[2]s),1,0))", on, day)
}

// results writes what the answers come to, and the payment if one is needed.
func (t *trySheet) results() {
	last := len(t.e.Items()) + 1
	line := func(row int, name, format string, args ...any) {
		t.text(tryItSheet, tryItem, row, name, t.name)
		t.formula(tryResult, row, format, args...)
		t.do(t.f.SetCellStyle(tryItSheet, refOf(tryResult, row), refOf(tryResult, row), t.locked))
	}
	shown := func(row int, s *excelize.Style) {
		s.Alignment = &excelize.Alignment{Horizontal: "left"}
		id, err := t.f.NewStyle(s)
		t.do(err)
		t.do(t.f.SetCellStyle(tryItSheet, refOf(tryResult, row), refOf(tryResult, row), id))
	}
	line(tryOn, "On the day (may be changed)", "%s", t.fact("Card", "Issued on"))
	t.do(t.f.SetCellStyle(tryItSheet, refOf(tryResult, tryOn), refOf(tryResult, tryOn), t.open[dateFormat]))
	line(tryMissing, "Answers missing or not known", "ROWS(I2:I%[1]d)-COUNT(I2:I%[1]d)", last)
	complete := func(row int, name, format string, args ...any) {
		line(row, name, `IF(%s>0,"",%s)`, resultRef(tryMissing), fmt.Sprintf(format, args...))
	}
	complete(tryTotal, "Log-odds", "%s+%s+SUM(I2:I%d)", t.fact("Card", "Base log-odds"), t.fact("Card", "Later adjustment"), last)
	complete(tryPD, "PD", "1/(1+EXP(-%s))", resultRef(tryTotal))
	percent := "0.0000%"
	shown(tryPD, &excelize.Style{CustomNumFmt: &percent})
	complete(tryScore, "Score", "%s-%s/LN(2)*(%s+LN(%s))", t.fact("Card", "Reference score"), t.fact("Card", "Points to double the odds"),
		resultRef(tryTotal), t.fact("Card", "Reference odds"))
	shown(tryScore, &excelize.Style{NumFmt: 1})
	bandRow := fmt.Sprintf(`SUMPRODUCT((%[1]s<>"")*((%[2]s<>"")*(%[2]s>%[4]s)=0)*((%[3]s<>"")*(%[3]s<1)*(%[3]s<=%[4]s)=0)*ROW(%[1]s))`,
		t.span("Bands", "Band", 2), t.span("Bands", "PD from", 2), t.span("Bands", "PD below", 2), "ROUND("+resultRef(tryPD)+",9)")
	complete(tryBand, "Band", "INDEX(%s,%s)", t.span("Bands", "Band", 1), bandRow)
	complete(tryRecommendation, "Recommendation before rules", "INDEX(%s,%s)", t.span("Bands", "Recommendation", 1), bandRow)
	if slices.ContainsFunc(t.s.Computed, func(f model.Formula) bool {
		return f.Operation == model.Instalment || f.Operation == model.MonthlyInstalment || f.Operation == model.AgeAtLastPayment
	}) {
		t.payment(line)
	}
}

// payment writes the ordinary payment step by step, as package loan explains
// it.
func (t *trySheet) payment(line func(row int, name, format string, args ...any)) {
	amount, term := t.value(model.Amount), t.value(model.Term)
	terms := func(item string) string { return t.fact("Terms", item) }
	rate, n, decimals := resultRef(tryRate), resultRef(tryPeriods), terms("Money decimals")
	line(tryRate, "Interest rate of one period", `%[1]s*IF(%[2]s="month",12,1)*IF(%[3]s="weeks",7/365,IF(%[3]s="fortnights",14/365,1/12))`,
		terms("Rate"), terms("Rate per"), terms("Term counted in"))
	line(tryPeriods, "Periods", "MIN(MAX(INT(N(%s)),1),%s)", term, terms("Longest term"))
	line(tryInterest, "Interest on the amount for all of them", "ROUND(N(%s)*%s*%s,%s)", amount, rate, n, decimals)
	line(tryFirst, "Interest of the first", `IF(%[1]s="flat",ROUND(%[2]s/%[3]s,%[4]s),ROUND(N(%[5]s)*%[6]s,%[4]s))`,
		terms("Interest method"), resultRef(tryInterest), n, decimals, amount, rate)
	line(tryEven, "Equal payment before rounding", `IF(%[1]s="flat",(N(%[2]s)+%[3]s)/%[4]s,IF(%[5]s=0,N(%[2]s)/%[4]s,N(%[2]s)*%[5]s/(1-(1+%[5]s)^-%[4]s)))`,
		terms("Interest method"), amount, resultRef(tryInterest), n, rate)
	step := terms("Payment rounded up to")
	up := func(x, otherwise string) string {
		return fmt.Sprintf("IF(N(%[1]s)>10^-%[2]s,ROUNDUP(ROUND(%[3]s/%[1]s,9),0)*%[1]s,%[4]s)", step, decimals, x, otherwise)
	}
	first, even := resultRef(tryFirst), resultRef(tryEven)
	line(tryPayment, "Payment", `IF(%[1]s="all at the end",N(%[2]s)+%[3]s,MIN(N(%[2]s)+%[4]s,IF(%[1]s="equal payments",%[5]s,IF(%[6]s=1,N(%[2]s)+%[4]s,%[7]s))))`,
		terms("Repayment"), amount, resultRef(tryInterest), first, up(even, fmt.Sprintf("ROUND(%s,%s)", even, decimals)), n, up(first, first))
}
