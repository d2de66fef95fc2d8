package model

import "strconv"

// characteristics makes the items.
func (c *compiler) characteristics() {
	list := c.s.withReserved()
	added := len(list) - len(c.s.Characteristics)
	if len(list) > MostCharacteristics {
		c.add(tooMany(at("Characteristics", 0, ""), len(list), MostCharacteristics))
		list = list[:MostCharacteristics]
	}
	number := 0
	for n, ch := range list {
		if c.item(ch.Code) != nil {
			if ch.Code != "" {
				c.add(Problem{Code: "repeated_code", Place: at("Characteristics", n+1-added, "Characteristic"), Args: Args{"value": ch.Code}})
			}
			continue
		}
		item := Item{Characteristic: ch, Index: len(c.e.items), unknown: -1, notApplies: -1, nothingLeft: -1, slopeCovariance: -1,
			from: ch.CountedFrom.Or(-Largest), to: ch.CountedTo.Or(Largest)}
		if ch.Kind != Computed {
			number++
			item.Number = number
			c.e.asked = append(c.e.asked, item.Index)
		}
		if ch.Use == Scored {
			c.e.scored = append(c.e.scored, item.Index)
		}
		c.e.byCode[ch.Code] = item.Index
		c.e.items = append(c.e.items, item)
		c.characteristic(&c.e.items[item.Index])
	}
}

func (c *compiler) characteristic(item *Item) {
	row := c.row(item)
	bad := func(column, code string, args Args) {
		c.add(Problem{Code: code, Place: at("Characteristics", row, column), Args: args})
	}
	limits := func(toColumn string, from, to Maybe[Number]) {
		if from.Set && to.Set && from.Value > to.Value {
			bad(toColumn, "limits_crossed", Args{"value": to.Value.String(), "expected": from.Value.String()})
		}
	}
	limits("Highest accepted", item.LowestAccepted, item.HighestAccepted)
	limits("Counted to", item.CountedFrom, item.CountedTo)
	limits("Seen to", item.SeenFrom, item.SeenTo)
	most := MostDecimals
	switch item.Code {
	case Amount:
		most = int(min(c.s.Terms.MoneyDecimals, MostDecimals))
	case Term:
		most = 0
	}
	if int(item.Decimals) > most {
		bad("Decimals", "more_than", Args{"value": strconv.Itoa(int(item.Decimals)), "most": strconv.Itoa(most)})
		item.Decimals = Count(most)
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
	}
	switch item.Code {
	case Unknown, NotApplicable, NothingLeft, Base, "on", "client", "ref":
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
		case item.line(line.Code) >= 0 && line.Code != "":
			c.add(Problem{Code: "repeated_code", Place: at("Lines", i+1, "Line"), Args: Args{"value": line.Code}})
		case len(item.Lines) == MostLines:
			c.add(tooMany(at("Lines", i+1, "Line"), MostLines+1, MostLines))
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
