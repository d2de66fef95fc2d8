package model

import (
	"math"
	"slices"
	"strconv"
)

// attributes gives each item its attributes, bands and slope.
func (c *compiler) attributes() {
	rows := make([][]int, len(c.e.items)) // of Attributes, by item
	for i, a := range c.s.Attributes {
		if item := c.item(a.Characteristic); item != nil {
			rows[item.Index] = append(rows[item.Index], i)
		} else {
			c.unknown(at("Attributes", i+1, "Characteristic"), a.Characteristic)
		}
	}
	for i := range c.e.items {
		item := &c.e.items[i]
		switch item.Kind {
		case Choice, YesNo:
			c.choices(item, rows[i])
		case DateKind:
			for _, r := range rows[i] {
				c.add(Problem{Code: "date_has_attributes", Place: at("Attributes", r+1, "Characteristic"), Args: Args{"value": item.Code}})
			}
		default:
			c.numberBands(item, rows[i])
		}
	}
}

// attribute checks what every attribute row must say and adds it to the item;
// false where it has no room.
func (c *compiler) attribute(item *Item, r int) bool {
	a := c.s.Attributes[r]
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Attributes", r+1, column), Args: args})
	}
	if slices.ContainsFunc(item.Attributes, func(b Attribute) bool { return a.Code == b.Code }) {
		bad("Attribute", "repeated_code", Args{"value": a.Code})
		return false
	}
	if len(item.Attributes) == MostAttributes {
		c.add(tooMany(at("Attributes", r+1, "Attribute"), MostAttributes+1, MostAttributes))
		return false
	}
	name := coefficient(a)
	if a.Label == "" {
		bad("Label", "missing_value", nil)
	}
	if item.Use == Scored && !a.LogOdds.Set {
		bad("Log-odds", "log_odds_missing", Args{"value": name})
	}
	if item.Use != Scored && a.LogOdds.Set {
		bad("Log-odds", "log_odds_not_scored", Args{"value": name, "use": string(item.Use)})
	}
	if a.Slope.Set {
		bad("Log-odds per unit", "slope_in_attribute", Args{"value": name})
	}
	if a.Loans.Set && a.Defaults.Or(0) > a.Loans.Value {
		bad("Defaults", "more_than", Args{"value": strconv.Itoa(int(a.Defaults.Value)), "most": strconv.Itoa(int(a.Loans.Value))})
	}
	if a.StandardError.Or(Slope{}).Digits < 0 {
		bad("Standard error", "below_zero", nil)
	}
	if (reserved(a.Code) || item.isChoice()) && (a.From.Set || a.Below.Set) {
		bad("From", "limits_not_wanted", Args{"value": a.Code})
	}
	switch n := len(item.Attributes); a.Code {
	case Unknown:
		item.unknown = n
	case NotApplicable:
		item.notApplies = n
	case NothingLeft:
		item.nothingLeft = n
	}
	item.Attributes = append(item.Attributes, a)
	item.weights = append(item.weights, a.LogOdds.Or(0))
	return true
}

func (c *compiler) choices(item *Item, rows []int) {
	for _, r := range rows {
		code := c.s.Attributes[r].Code
		place := at("Attributes", r+1, "Attribute")
		switch {
		case code == "":
			c.add(Problem{Code: "missing_value", Place: place})
		case item.Kind == YesNo && code != Yes && code != No && !reserved(code):
			c.add(Problem{Code: "unknown_attribute", Place: place, Args: Args{"value": code, "options": "yes, no"}})
		default:
			c.attribute(item, r)
		}
	}
	place := at("Characteristics", c.row(item), "Kind")
	if item.Kind == Choice {
		if item.options() == "" {
			c.add(Problem{Code: "choice_without_attributes", Place: place, Args: Args{"value": item.Code}})
		}
		return
	}
	for _, code := range []string{Yes, No} {
		if _, err := item.attribute(code); err == nil {
			continue
		}
		if item.Use == Scored {
			c.add(Problem{Code: "attribute_missing", Place: place, Args: Args{"value": item.Code + "." + code}})
		}
		item.Attributes = append(item.Attributes, Attribute{Characteristic: item.Code, Code: code})
		item.weights = append(item.weights, 0)
	}
}

// numberBands reads the bands of a number in the order of their rows: each
// must start where the one above ends.
func (c *compiler) numberBands(item *Item, rows []int) {
	sloped := false
	var last *Attribute
	lastRow := 0
	for _, r := range rows {
		a := &c.s.Attributes[r]
		if a.Code == "" {
			c.slope(item, *a, r, sloped)
			sloped = true
			continue
		}
		n := len(item.Attributes)
		if !c.attribute(item, r) || reserved(a.Code) {
			continue
		}
		c.follows(item, a, last, r)
		floor := Number(math.MinInt64)
		if last != nil {
			floor = a.From.Or(floor)
		}
		item.floors = append(item.floors, floor)
		item.bandAt = append(item.bandAt, n)
		last, lastRow = a, r+1
	}
	if last != nil && last.Below.Set && last.Below.Value <= item.to {
		c.add(Problem{Code: "band_last_below", Place: at("Attributes", lastRow, "Below"), Args: Args{"value": last.Below.Value.String()}})
	}
	if item.Use == Scored && last == nil && !sloped {
		c.add(Problem{Code: "number_without_bands", Place: at("Characteristics", c.row(item), "Kind"), Args: Args{"value": item.Code}})
	}
}

// follows checks that a band starts where the one above it ends. Below the
// first and above the last, the clamp may take over.
func (c *compiler) follows(item *Item, a, above *Attribute, r int) {
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Attributes", r+1, column), Args: args})
	}
	if a.From.Set && a.Below.Set && a.From.Value >= a.Below.Value {
		bad("Below", "band_empty", Args{"value": a.Below.Value.String(), "expected": a.From.Value.String()})
	}
	from, end := a.From.Value, Number(0)
	if above != nil {
		end = above.Below.Value
	}
	switch {
	case above == nil && a.From.Set && from > item.from:
		bad("From", "band_first_from", Args{"value": from.String()})
	case above == nil:
	case !above.Below.Set:
		bad("From", "band_after_open", Args{"value": a.Code, "above": above.Code})
	case !a.From.Set:
		bad("From", "band_from_missing", Args{"expected": end.String()})
	case from > end:
		bad("From", "band_gap", Args{"value": from.String(), "expected": end.String()})
	case from < end:
		bad("From", "band_overlap", Args{"value": from.String(), "expected": end.String()})
	}
}

// slope reads the row whose attribute is blank.
func (c *compiler) slope(item *Item, a Attribute, r int, again bool) {
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Attributes", r+1, column), Args: args})
	}
	switch {
	case again:
		bad("Attribute", "slope_repeated", Args{"value": item.Code})
	case !a.Slope.Set:
		bad("Attribute", "missing_value", nil)
	case a.LogOdds.Set || a.From.Set || a.Below.Set:
		bad("Log-odds", "slope_with_band", Args{"value": item.Code})
	case item.Use != Scored:
		bad("Log-odds per unit", "log_odds_not_scored", Args{"value": item.Code, "use": string(item.Use)})
	case !item.CountedFrom.Set || !item.CountedTo.Set:
		bad("Log-odds per unit", "slope_needs_limits", Args{"value": item.Code})
	}
	if a.StandardError.Or(Slope{}).Digits < 0 {
		bad("Standard error", "below_zero", nil)
	}
	item.slope, item.slopeReason = a.Slope.Or(Slope{}), a.Reason
}

// reservedAttributes demands unknown, not_applicable and nothing_left of a
// scored item where they can happen, and refuses them where they cannot.
func (c *compiler) reservedAttributes() {
	c.findStates()
	for i := range c.e.items {
		item := &c.e.items[i]
		for _, r := range reservedStates {
			happens, given := c.states[i].has(r.state), item.stateAttribute(r.state) >= 0
			switch {
			case happens && !given && item.Use == Scored:
				c.add(Problem{Code: "attribute_missing", Place: at("Characteristics", c.row(item), "Characteristic"), Args: Args{"value": item.Code + "." + r.code}})
			case !happens && given:
				c.add(Problem{Code: "attribute_never_happens", Place: c.attributeRow(item, r.code, "Attribute"), Args: Args{"value": item.Code + "." + r.code}})
			}
		}
		if n := item.nothingLeft; n >= 0 && item.Use == Scored {
			if _, most := item.numberRange(-Largest, Largest); item.weights[n] < most {
				c.warn(Problem{Code: "nothing_left_not_riskiest", Place: c.attributeRow(item, NothingLeft, "Log-odds"), Args: Args{"value": item.Code}})
			}
		}
	}
}

// attributeRow is the place of a cell in an attribute's row.
func (c *compiler) attributeRow(item *Item, code, column string) Place {
	row := slices.IndexFunc(c.s.Attributes, func(a Attribute) bool { return a.Characteristic == item.Code && a.Code == code })
	return at("Attributes", row+1, column)
}

// reservedStates are the states that have an attribute of their own.
var reservedStates = [...]struct {
	code  string
	state State
}{{Unknown, StatedUnknown}, {NotApplicable, IsNotApplicable}, {NothingLeft, IsNothingLeft}}

func reserved(attribute string) bool {
	return attribute == Unknown || attribute == NotApplicable || attribute == NothingLeft
}

// options lists what may be picked, for a message.
func (item *Item) options() string {
	text := ""
	for _, a := range item.Attributes {
		if !reserved(a.Code) {
			if text != "" {
				text += ", "
			}
			text += a.Code
		}
	}
	return text
}

// averages warns where the shares of past loans, given for every attribute of
// a scored characteristic without a slope, do not add up to one, or give
// another average of log-odds than the workbook says: reasons are told from
// that average.
func (c *compiler) averages() {
	for i := range c.e.items {
		item := &c.e.items[i]
		if item.Use != Scored || item.slope.Digits != 0 || len(item.Attributes) == 0 {
			continue
		}
		shares, sum := Rate(0), 0.0
		for n, a := range item.Attributes {
			if !a.Share.Set {
				shares = -1
				break
			}
			shares += a.Share.Value
			sum += float64(a.Share.Value.Float() * item.weights[n].Float())
		}
		const slack = 0.005 // shares are often given to three places
		switch average := item.AverageLogOdds.Or(0); {
		case shares < 0:
		case math.Abs(shares.Float()-1) > slack:
			c.warn(Problem{Code: "shares_not_one", Place: at("Characteristics", c.row(item), "Characteristic"),
				Args: Args{"value": item.Code, "sum": shares.String()}})
		case math.Abs(average.Float()-sum) > slack*(1+math.Abs(sum)):
			c.warn(Problem{Code: "average_differs", Place: at("Characteristics", c.row(item), "Average log-odds"),
				Args: Args{"value": average.String(), "expected": LogOdds(math.Round(sum * 1e9)).String()}})
		}
	}
}
