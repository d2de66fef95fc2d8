package model

import (
	"slices"
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
	if card.Edition < 1 {
		bad("Edition", "not_above_zero", nil)
	}
	if card.WithinMonths < 1 {
		bad("Within months", "not_above_zero", nil)
	}
	if card.ReferenceOdds <= 0 {
		bad("Reference odds", "not_above_zero", nil)
	}
	if card.PointsToDouble <= 0 {
		bad("Points to double the odds", "not_above_zero", nil)
	}
	if card.AnswersGoodDays < 1 {
		bad("Answers good for days", "not_above_zero", nil)
	}
	for _, d := range []struct {
		column string
		date   Date
	}{{"Issued on", card.IssuedOn}, {"In force from", card.InForceFrom}, {"Review by", card.ReviewBy}} {
		if d.date.YearAlone() {
			bad(d.column, "date_needs_day", Args{"value": d.date.String()})
		}
	}
	if card.ReviewBy.Before(card.InForceFrom) {
		bad("Review by", "before_in_force", Args{"value": card.ReviewBy.String(), "expected": card.InForceFrom.String()})
	}
	if card.InForceFrom.Before(card.IssuedOn) {
		bad("In force from", "in_force_before_issue", Args{"value": card.InForceFrom.String(), "expected": card.IssuedOn.String()})
	}
	if strings.EqualFold(card.PreparedBy, card.ApprovedBy) && card.PreparedBy != "" {
		bad("Approved by", "approved_by_preparer", Args{"value": card.ApprovedBy})
	}
	if d, l := card.DefaultsAmong, card.LoansUsed; d.Set && l.Set && d.Value > l.Value {
		bad("Defaults among them", "more_than", Args{"value": strconv.Itoa(int(d.Value)), "most": strconv.Itoa(int(l.Value))})
	}
	if card.HowMade != Judged && !card.LoansUsed.Set {
		bad("Loans used", "needed_for_estimated", nil)
	}
	if se := card.AdjustmentSE; se.Set && se.Value < 0 {
		bad("Later adjustment standard error", "below_zero", nil)
	}
	if card.ReferenceOdds > 0 {
		c.e.factor = card.PointsToDouble.Float() / ln2
		c.e.offset = card.ReferenceScore.Float() - float64(c.e.factor*ln(card.ReferenceOdds.Float()))
	}
	c.e.constant = card.BaseLogOdds + card.Adjustment.Or(0)
}

// characteristics makes the items.
func (c *compiler) characteristics() {
	list := c.s.withReserved()
	if len(list) > MostCharacteristics {
		c.add(Problem{Code: "too_many", Place: at("Characteristics", 0, ""), Args: Args{"value": strconv.Itoa(len(list)), "most": strconv.Itoa(MostCharacteristics)}})
		list = list[:MostCharacteristics]
	}
	number := 0
	for _, ch := range list {
		item := Item{Characteristic: ch, Index: len(c.e.items), unknown: -1, notApplies: -1, nothingLeft: -1,
			from: ch.CountedFrom.Or(-Largest), to: ch.CountedTo.Or(Largest)}
		if ch.Kind != Computed {
			number++
			item.Number = number
		}
		if first := c.item(ch.Code); first != nil {
			if ch.Code != "" {
				row := c.lastRow(ch.Code)
				c.add(Problem{Code: "repeated_code", Place: at("Characteristics", row, "Characteristic"), Args: Args{"value": ch.Code}})
			}
			continue
		}
		c.e.byCode[ch.Code] = item.Index
		c.e.items = append(c.e.items, item)
		c.characteristic(&c.e.items[item.Index])
	}
}

// lastRow is the last row of a repeated code.
func (c *compiler) lastRow(code string) int {
	row := 0
	for i, ch := range c.s.Characteristics {
		if ch.Code == code {
			row = i + 1
		}
	}
	return row
}

func (c *compiler) characteristic(item *Item) {
	row := c.row(item)
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Characteristics", row, column), Args: args})
	}
	limits := func(fromColumn, toColumn string, from, to Maybe[Number]) {
		if from.Set && to.Set && from.Value > to.Value {
			bad(toColumn, "limits_crossed", Args{"value": to.Value.String(), "expected": from.Value.String()})
		}
	}
	limits("Lowest accepted", "Highest accepted", item.LowestAccepted, item.HighestAccepted)
	limits("Counted from", "Counted to", item.CountedFrom, item.CountedTo)
	limits("Seen from", "Seen to", item.SeenFrom, item.SeenTo)
	if item.Decimals > MostDecimals {
		bad("Decimals", "more_than", Args{"value": strconv.Itoa(int(item.Decimals)), "most": strconv.Itoa(MostDecimals)})
		item.Decimals = MostDecimals
	}
	if item.Use == Scored && !item.AverageLogOdds.Set {
		bad("Average log-odds", "average_missing", Args{"value": item.Code})
	}
	if item.Use == Scored && item.Kind == DateKind {
		bad("Use", "date_scored", Args{"value": item.Code})
	}
	if item.Code == Amount || item.Code == Term {
		if item.Kind != Numeric || item.AskedOnlyIf != "" || item.UnknownAllowed {
			bad("Kind", "reserved_misused", Args{"value": item.Code})
		}
		if item.Code == Term && item.Decimals != 0 {
			bad("Decimals", "more_than", Args{"value": strconv.Itoa(int(item.Decimals)), "most": "0"})
		}
	}
	if reserved(item.Code) || item.Code == Base || item.Code == "on" || item.Code == "client" || item.Code == "ref" {
		bad("Characteristic", "reserved_code", Args{"value": item.Code})
	}
	if item.Kind == Computed && (item.UnknownAllowed || item.AskedOnlyIf != "") {
		bad("Kind", "computed_not_asked", Args{"value": item.Code})
	}
}

// lines gives each worksheet its lines.
func (c *compiler) lines() {
	for i, line := range c.s.Lines {
		item := c.item(line.Characteristic)
		switch {
		case item == nil:
			c.unknown(at("Lines", i+1, "Characteristic"), line.Characteristic)
		case item.Kind != Worksheet:
			c.add(Problem{Code: "not_a_worksheet", Place: at("Lines", i+1, "Characteristic"), Args: Args{"value": line.Characteristic}})
		case item.line(line.Code) >= 0:
			c.add(Problem{Code: "repeated_code", Place: at("Lines", i+1, "Line"), Args: Args{"value": line.Code}})
		case len(item.Lines) == 200:
			c.add(Problem{Code: "too_many", Place: at("Lines", i+1, "Line"), Args: Args{"value": "201", "most": "200"}})
		default:
			item.Lines = append(item.Lines, line)
		}
	}
	for i := range c.e.items {
		if item := &c.e.items[i]; item.Kind == Worksheet && len(item.Lines) == 0 {
			c.add(Problem{Code: "worksheet_without_lines", Place: at("Characteristics", c.row(item), "Kind"), Args: Args{"value": item.Code}})
		}
	}
}

// unknown lists a code that no characteristic has.
func (c *compiler) unknown(place Place, code string) {
	if code != "" {
		c.add(Problem{Code: "unknown_characteristic", Place: place, Args: Args{"value": code, "near": c.near(code)}})
	}
}

// near is the code most like a misspelt one, or empty.
func (c *compiler) near(code string) string {
	best, least := "", 3
	for _, item := range c.e.items {
		if d := distance(code, item.Code); d < least {
			best, least = item.Code, d
		}
	}
	return best
}

// distance is the number of single-letter changes between two codes (V.
// Levenshtein, 1966).
func distance(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		before := row[0]
		row[0] = i + 1
		for j := range len(b) {
			change := before
			if a[i] != b[j] {
				change++
			}
			before = row[j+1]
			row[j+1] = min(change, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}

// computed checks each formula and sorts the computed items so that parts
// come first.
func (c *compiler) computed() {
	formula := map[string]int{}
	for i, f := range c.s.Computed {
		item := c.item(f.Characteristic)
		place := at("Computed", i+1, "Characteristic")
		switch {
		case item == nil:
			c.unknown(place, f.Characteristic)
			continue
		case item.Kind != Computed:
			c.add(Problem{Code: "not_computed", Place: place, Args: Args{"value": f.Characteristic}})
			continue
		case formula[f.Characteristic] > 0:
			c.add(Problem{Code: "repeated_code", Place: place, Args: Args{"value": f.Characteristic}})
			continue
		}
		formula[f.Characteristic] = i + 1
		item.Operation = f.Operation
		c.parts(item, f, i+1)
	}
	for i := range c.e.items {
		if item := &c.e.items[i]; item.Kind == Computed && formula[item.Code] == 0 {
			c.add(Problem{Code: "formula_missing", Place: at("Characteristics", c.row(item), "Kind"), Args: Args{"value": item.Code}})
		}
	}
	c.sort(formula)
}

func (c *compiler) parts(item *Item, f Formula, row int) {
	for n, p := range f.Parts {
		place := at("Computed", row, "Part "+strconv.Itoa(n+1))
		if p.Code == "" {
			continue
		}
		source := c.item(p.Code)
		if source == nil {
			c.unknown(place, p.Code)
			continue
		}
		dated := f.Operation == WholeYears || f.Operation == AgeAtLastPayment
		if source.Kind == Choice || source.Kind == YesNo || dated != (source.Kind == DateKind) {
			c.add(Problem{Code: "part_not_usable", Place: place, Args: Args{"value": p.Code, "operation": string(f.Operation)}})
			continue
		}
		if p.Sign == Minus && f.Operation != Sum {
			c.add(Problem{Code: "sign_only_in_sum", Place: at("Computed", row, "Sign "+strconv.Itoa(n+1)), Args: Args{"operation": string(f.Operation)}})
		}
		item.parts = append(item.parts, part{source.Index, p.Sign == Minus})
	}
	least, most := 1, MostParts
	switch f.Operation {
	case Product:
		least = 2
	case Ratio:
		least, most = 2, 2
	case Instalment:
		least, most = 0, 0
		item.parts = nil
	case WholeYears, AgeAtLastPayment:
		most = 1
	}
	given := 0
	for _, p := range f.Parts {
		if p.Code != "" {
			given++
		}
	}
	if given < least || given > most {
		c.add(Problem{Code: "wrong_part_count", Place: at("Computed", row, "Operation"),
			Args: Args{"operation": string(f.Operation), "value": strconv.Itoa(given), "least": strconv.Itoa(least), "most": strconv.Itoa(most)}})
		item.Operation = ""
	}
	// What the operation takes by itself are parts too.
	switch f.Operation {
	case Instalment:
		item.parts = []part{{c.e.byCode[Amount], false}, {c.e.byCode[Term], false}}
	case AgeAtLastPayment:
		item.parts = append(item.parts, part{c.e.byCode[Term], false})
	}
}

// sort lists computed items after their parts and refuses a circle.
func (c *compiler) sort(formula map[string]int) {
	const visiting, done = 1, 2
	state := make([]int, len(c.e.items))
	var visit func(i int) bool
	visit = func(i int) bool {
		item := &c.e.items[i]
		if item.Kind != Computed || state[i] == done {
			return true
		}
		if state[i] == visiting {
			c.add(Problem{Code: "computed_circle", Place: at("Computed", formula[item.Code], "Characteristic"), Args: Args{"value": item.Code}})
			return false
		}
		state[i] = visiting
		for _, p := range item.parts {
			if !visit(p.index) {
				return false
			}
		}
		state[i] = done
		c.e.order = append(c.e.order, i)
		return true
	}
	for i := range c.e.items {
		if !visit(i) {
			return
		}
	}
}

// conditions reads "asked only if": "code is attribute", "code is not
// attribute" or "code is one of a, b", about a choice asked earlier.
func (c *compiler) conditions() {
	for i := range c.e.items {
		item := &c.e.items[i]
		if item.AskedOnlyIf == "" || item.Kind == Computed {
			continue
		}
		place := at("Characteristics", c.row(item), "Asked only if")
		bad := func(code string) { c.add(Problem{Code: code, Place: place, Args: Args{"value": item.AskedOnlyIf}}) }
		words := strings.Fields(strings.ReplaceAll(item.AskedOnlyIf, ",", " "))
		if len(words) < 3 || words[1] != "is" {
			bad("condition_unreadable")
			continue
		}
		source, rest, not := c.item(words[0]), words[2:], false
		switch {
		case len(rest) >= 2 && rest[0] == "not":
			rest, not = rest[1:], true
		case len(rest) >= 3 && rest[0] == "one" && rest[1] == "of":
			rest = rest[2:]
		}
		if source == nil {
			c.unknown(place, words[0])
			continue
		}
		if source.Index >= item.Index || (source.Kind != Choice && source.Kind != YesNo) {
			bad("condition_not_earlier_choice")
			continue
		}
		cond := &condition{index: source.Index}
		for _, code := range rest {
			n, err := source.attribute(code)
			if err != nil {
				p := err.(Problem)
				p.Place = place
				c.add(p)
				continue
			}
			cond.among |= 1 << n
		}
		if not {
			cond.among = ^cond.among
		}
		item.condition = cond
	}
	// Attributes were read before conditions were known.
	for i := range c.e.items {
		c.reservedAttributes(&c.e.items[i])
	}
}

func (c *compiler) overrides() {
	var codes []string
	for i, o := range c.s.Overrides {
		if slices.Contains(codes, o.Code) && o.Code != "" {
			c.add(Problem{Code: "repeated_code", Place: at("Overrides", i+1, "Override"), Args: Args{"value": o.Code}})
		}
		codes = append(codes, o.Code)
	}
}

// words refuses two wordings of one code in one language.
func (c *compiler) words() {
	seen := map[[2]string]bool{}
	for i, w := range c.s.Words {
		key := [2]string{w.Code, w.Language}
		if seen[key] && w.Code != "" {
			c.add(Problem{Code: "repeated_code", Place: at("Words", i+1, "Code"), Args: Args{"value": w.Code}})
		}
		seen[key] = true
	}
}
