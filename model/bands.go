package model

// bands checks that the score bands cover PD 0 to 1 in order and grow no
// milder.
func (c *compiler) bands() {
	rows := c.s.Bands
	if len(rows) == 0 {
		c.add(Problem{Code: "no_bands", Place: at("Bands", 0, "")})
	}
	if len(rows) > MostBands {
		c.add(tooMany(at("Bands", 0, ""), len(rows), MostBands))
		rows = rows[:MostBands]
	}
	seen := map[string]bool{}
	next := PD(0)
	for i, b := range rows {
		bad := func(column, code string, args Args) {
			c.add(Problem{Code: code, Place: at("Bands", i+1, column), Args: args})
		}
		c.onlyOnce(seen, b.Code, at("Bands", i+1, "Band"))
		from, below := b.From.Or(0), b.Below.Or(PDOne)
		switch {
		case i > 0 && !b.From.Set:
			bad("PD from", "band_from_missing", Args{"expected": next.String()})
		case i == 0 && from > 0:
			bad("PD from", "bands_start", Args{"value": from.String()})
		case from > next:
			bad("PD from", "band_gap", Args{"value": from.String(), "expected": next.String()})
		case from < next:
			bad("PD from", "band_overlap", Args{"value": from.String(), "expected": next.String()})
		}
		switch {
		case below <= from:
			bad("PD below", "band_empty", Args{"value": below.String(), "expected": from.String()})
		case i == len(rows)-1 && below < PDOne:
			bad("PD below", "bands_end", Args{"value": below.String()})
		case i < len(rows)-1 && !b.Below.Set:
			bad("PD below", "band_after_open", Args{"value": rows[i+1].Code, "above": b.Code})
		}
		if i > 0 && b.Recommendation.strictness() < rows[i-1].Recommendation.strictness() {
			bad("Recommendation", "band_milder", Args{"value": string(b.Recommendation), "above": string(rows[i-1].Recommendation)})
		}
		if o, m := b.OfficerLimit, b.ManagerLimit; o.Set && m.Set && o.Value > m.Value {
			bad("Manager limit", "limits_crossed", Args{"value": m.Value.String(), "expected": o.Value.String()})
		}
		c.e.bands = append(c.e.bands, from)
		c.e.strictness = append(c.e.strictness, b.Recommendation.strictness())
		next = below
	}
}

// Decider is who may decide on an amount.
type Decider string

const (
	OfficerDecides    Decider = "officer"
	ManagerDecides    Decider = "manager"
	HeadOfficeDecides Decider = "head office"
)

// Decider tells who may decide on a loan of that amount with that result: the
// officer up to the band's officer limit unless the recommendation is to
// refer, the manager up to the band's manager limit, and head office beyond.
// A limit left blank is none. The limits are of the band that the score fell
// in, also where a rule made the recommendation stricter.
func (e *Edition) Decider(r Result, amount Number) Decider {
	b := e.card.Bands[r.Band]
	switch {
	case r.Recommendation != Refer && amount <= b.OfficerLimit.Or(Largest):
		return OfficerDecides
	case amount <= b.ManagerLimit.Or(Largest):
		return ManagerDecides
	}
	return HeadOfficeDecides
}
