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

// attribute checks what every attribute row must say and adds it to the item.
func (c *compiler) attribute(item *Item, r int) {
	a := c.s.Attributes[r]
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Attributes", r+1, column), Args: args})
	}
	if slices.ContainsFunc(item.Attributes, func(b Attribute) bool { return a.Code == b.Code }) {
		bad("Attribute", "repeated_code", Args{"value": a.Code})
		return
	}
	if len(item.Attributes) == MostAttributes {
		bad("Attribute", "too_many", Args{"value": strconv.Itoa(MostAttributes + 1), "most": strconv.Itoa(MostAttributes)})
		return
	}
	if a.Label == "" {
		bad("Label", "missing_value", nil)
	}
	if item.Use == Scored && !a.LogOdds.Set {
		bad("Log-odds", "log_odds_missing", Args{"value": item.Code + "." + a.Code})
	}
	if item.Use != Scored && a.LogOdds.Set {
		bad("Log-odds", "log_odds_not_scored", Args{"value": item.Code + "." + a.Code, "use": string(item.Use)})
	}
	if a.Slope.Set {
		bad("Log-odds per unit", "slope_in_attribute", Args{"value": item.Code + "." + a.Code})
	}
	if a.Loans.Set && a.Defaults.Or(0) > a.Loans.Value {
		bad("Defaults", "more_than", Args{"value": strconv.Itoa(int(a.Defaults.Value)), "most": strconv.Itoa(int(a.Loans.Value))})
	}
	if a.StandardError.Or(Slope{}).Digits < 0 {
		bad("Standard error", "below_zero", nil)
	}
	n := len(item.Attributes)
	switch a.Code {
	case Unknown:
		item.unknown = n
	case NotApplicable:
		item.notApplies = n
	case NothingLeft:
		item.nothingLeft = n
	}
	if reserved(a.Code) && (a.From.Set || a.Below.Set) {
		bad("From", "limits_not_wanted", Args{"value": a.Code})
	}
	item.Attributes = append(item.Attributes, a)
	item.weights = append(item.weights, a.LogOdds.Or(0))
}

func (c *compiler) choices(item *Item, rows []int) {
	for _, r := range rows {
		a := c.s.Attributes[r]
		if a.Code == "" {
			c.add(Problem{Code: "missing_value", Place: at("Attributes", r+1, "Attribute")})
			continue
		}
		if item.Kind == YesNo && a.Code != Yes && a.Code != No && !reserved(a.Code) {
			c.add(Problem{Code: "unknown_attribute", Place: at("Attributes", r+1, "Attribute"), Args: Args{"value": a.Code, "options": "yes, no"}})
			continue
		}
		if !reserved(a.Code) && (a.From.Set || a.Below.Set) {
			c.add(Problem{Code: "limits_not_wanted", Place: at("Attributes", r+1, "From"), Args: Args{"value": a.Code}})
		}
		c.attribute(item, r)
	}
	if item.Kind == YesNo {
		for _, code := range []string{Yes, No} {
			if _, err := item.attribute(code); err == nil {
				continue
			}
			if item.Use == Scored {
				c.add(Problem{Code: "attribute_missing", Place: at("Characteristics", c.row(item), "Kind"), Args: Args{"value": item.Code + "." + code}})
			}
			item.Attributes = append(item.Attributes, Attribute{Characteristic: item.Code, Code: code})
			item.weights = append(item.weights, 0)
		}
		return
	}
	if item.options() == "" {
		c.add(Problem{Code: "choice_without_attributes", Place: at("Characteristics", c.row(item), "Kind"), Args: Args{"value": item.Code}})
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
		place := func(column string) Place { return at("Attributes", r+1, column) }
		if a.Code == "" {
			c.slope(item, *a, r, sloped)
			sloped = true
			continue
		}
		if !reserved(a.Code) {
			switch {
			case a.From.Set && a.Below.Set && a.From.Value >= a.Below.Value:
				c.add(Problem{Code: "band_empty", Place: place("Below"), Args: Args{"value": a.Below.Value.String(), "expected": a.From.Value.String()}})
			case last == nil && a.From.Set && a.From.Value > item.from:
				c.add(Problem{Code: "band_first_from", Place: place("From"), Args: Args{"value": a.From.Value.String()}})
			case last != nil && !last.Below.Set:
				c.add(Problem{Code: "band_after_open", Place: place("From"), Args: Args{"value": a.Code, "above": last.Code}})
			case last != nil && !a.From.Set:
				c.add(Problem{Code: "band_from_missing", Place: place("From"), Args: Args{"expected": last.Below.Value.String()}})
			case last != nil && a.From.Value > last.Below.Value:
				c.add(Problem{Code: "band_gap", Place: place("From"), Args: Args{"value": a.From.Value.String(), "expected": last.Below.Value.String()}})
			case last != nil && a.From.Value < last.Below.Value:
				c.add(Problem{Code: "band_overlap", Place: place("From"), Args: Args{"value": a.From.Value.String(), "expected": last.Below.Value.String()}})
			}
			floor := Number(math.MinInt64)
			if last != nil {
				floor = a.From.Or(floor)
			}
			item.floors = append(item.floors, floor)
			item.at = append(item.at, len(item.Attributes))
			last, lastRow = a, r+1
		}
		c.attribute(item, r)
	}
	if last != nil && last.Below.Set && last.Below.Value <= item.to {
		c.add(Problem{Code: "band_last_below", Place: at("Attributes", lastRow, "Below"), Args: Args{"value": last.Below.Value.String()}})
	}
	if item.Use == Scored && last == nil && !sloped {
		c.add(Problem{Code: "number_without_bands", Place: at("Characteristics", c.row(item), "Kind"), Args: Args{"value": item.Code}})
	}
}

// slope reads the row whose attribute is blank.
func (c *compiler) slope(item *Item, a Attribute, r int, again bool) {
	bad := func(column, code string) {
		c.add(Problem{Code: code, Place: at("Attributes", r+1, column), Args: Args{"value": item.Code}})
	}
	switch {
	case again:
		bad("Attribute", "slope_repeated")
	case !a.Slope.Set:
		bad("Attribute", "missing_value")
	case a.LogOdds.Set || a.From.Set || a.Below.Set:
		bad("Log-odds", "slope_with_band")
	case item.Use != Scored:
		bad("Log-odds per unit", "log_odds_not_scored")
	case !item.CountedFrom.Set || !item.CountedTo.Set:
		bad("Log-odds per unit", "slope_needs_limits")
	}
	if a.StandardError.Or(Slope{}).Digits < 0 {
		bad("Standard error", "below_zero")
	}
	item.slope = a.Slope.Or(Slope{})
}

// reservedAttributes demands unknown, not_applicable and nothing_left of a
// scored item where they can happen, and refuses them where they cannot.
func (c *compiler) reservedAttributes(item *Item) {
	can := c.states(item.Index)
	place := at("Characteristics", c.row(item), "Characteristic")
	for _, r := range []struct {
		code  string
		index int
		state State
	}{{Unknown, item.unknown, StatedUnknown}, {NotApplicable, item.notApplies, IsNotApplicable}, {NothingLeft, item.nothingLeft, IsNothingLeft}} {
		happens := can.has(r.state)
		switch {
		case happens && r.index < 0 && item.Use == Scored:
			c.add(Problem{Code: "attribute_missing", Place: place, Args: Args{"value": item.Code + "." + r.code}})
		case !happens && r.index >= 0:
			c.add(Problem{Code: "attribute_never_happens", Place: place, Args: Args{"value": item.Code + "." + r.code}})
		}
	}
	if n := item.nothingLeft; n >= 0 && item.Use == Scored && item.weights[n] < slices.Max(item.weights) {
		c.warn(Problem{Code: "nothing_left_not_riskiest", Place: place, Args: Args{"value": item.Code}})
	}
}

// states tells which states the answer to an item can come to have.
func (c *compiler) states(index int) stateSet {
	item := &c.e.items[index]
	s := set(Given)
	if item.Kind != Computed {
		if item.UnknownAllowed {
			s |= set(StatedUnknown)
		}
		if item.AskedOnlyIf != "" {
			s |= set(IsNotApplicable)
		}
		return s
	}
	for _, p := range item.parts {
		if !slices.Contains(c.e.order, p.index) && c.e.items[p.index].Kind == Computed {
			continue // part of a circle, listed already
		}
		s |= c.states(p.index)
	}
	if item.Operation == Sum {
		s &^= set(IsNotApplicable)
	}
	if item.Operation == Ratio {
		s |= set(IsNothingLeft)
	}
	return s
}

// A stateSet is a set of States.
type stateSet uint8

func set(s State) stateSet            { return 1 << s }
func (s stateSet) has(one State) bool { return s&set(one) != 0 }
