package model

import "weighhouse/model/loan"

// How much an edition may hold. Working space is then of fixed size, sets are
// bits of one word, and scoring allocates nothing.
const (
	MostCharacteristics = 64
	MostAttributes      = 64 // of one characteristic
	MostRules           = 64
	MostBands           = 64
	MostLines           = 200 // of one worksheet
)

// An Edition is a scorecard compiled into tables: numbered, frozen, never
// edited, only followed by the next. It is safe for concurrent use.
type Edition struct {
	card        Scorecard
	fingerprint Fingerprint
	items       []Item
	byCode      map[string]int
	asked       []int // indexes of what is asked, in order
	order       []int // of what is computed, each after its parts
	scored      []int
	rules       []rule
	bands       []PD  // where each band starts
	strictness  []int // of what each band recommends
	plan        *loan.Plan
	base        int // place of the base among the covariance's names
	// score = offset - factor × log-odds
	factor, offset float64
	// base + later adjustment
	constant LogOdds
	minor    Number // the smallest unit of money as a Number
}

// An Item is one characteristic of an edition with all that belongs to it.
type Item struct {
	Characteristic
	// Index is its place among Edition.Items.
	Index int
	// Number counts the questions as on the visit form, from 1; a computed
	// item has none, 0.
	Number int
	// Attributes are its rows but for the slope's.
	Attributes []Attribute
	Lines      []Line
	Operation  Operation

	condition *condition
	parts     []part
	// Tables for scoring. A number falls in the last band whose floor is not
	// above it; bandAt is each band's place among Attributes.
	weights  []LogOdds // by place among Attributes
	floors   []Number
	bandAt   []int
	slope    Slope
	from, to Number // the clamp
	// Places among Attributes, -1 where there is none.
	unknown, notApplies, nothingLeft int
	slopeReason                      string
	// Places among the covariance's names, -1 where there is none.
	covariance      []int // by place among Attributes
	slopeCovariance int
}

// Scorecard is what the edition was compiled from. It must not be changed.
func (e *Edition) Scorecard() *Scorecard { return &e.card }

// Fingerprint is the edition's identity.
func (e *Edition) Fingerprint() Fingerprint { return e.fingerprint }

// TelephoneCode is the fingerprint's, to compare by telephone.
func (e *Edition) TelephoneCode() string { return e.fingerprint.TelephoneCode() }

// Items are all characteristics in the workbook's order, amount and term
// first where it does not list them. They must not be changed.
func (e *Edition) Items() []Item { return e.items }

// Item finds a characteristic by its code.
func (e *Edition) Item(code string) (*Item, bool) {
	i, ok := e.byCode[code]
	if !ok {
		return nil, false
	}
	return &e.items[i], true
}

// Plan is how loans of this product are paid back.
func (e *Edition) Plan() *loan.Plan { return e.plan }

// isChoice tells that an item is answered by picking an attribute.
func (item *Item) isChoice() bool { return item.Kind == Choice || item.Kind == YesNo }

// clamp is a number as it is counted.
func (item *Item) clamp(n Number) Number { return min(max(n, item.from), item.to) }

// attribute finds the place of a choice's code.
func (item *Item) attribute(code string) (int, error) {
	if n := item.AttributeNamed(code); n >= 0 && !reserved(code) {
		return n, nil
	}
	return 0, Problem{Code: "unknown_attribute", Args: Args{"value": code, "options": item.options()}}
}

// stateAttribute is the place of a state's reserved attribute, -1 for none.
func (item *Item) stateAttribute(s State) int {
	switch s {
	case StatedUnknown:
		return item.unknown
	case IsNotApplicable:
		return item.notApplies
	case IsNothingLeft:
		return item.nothingLeft
	}
	return -1
}

// bandOf is the place among Attributes of a number's band, -1 without bands.
func (item *Item) bandOf(n Number) int {
	if len(item.floors) == 0 {
		return -1
	}
	return item.bandAt[item.floorOf(n)]
}

// floorOf is the place among floors of a number's band; there must be one.
func (item *Item) floorOf(n Number) int {
	n = item.clamp(n)
	i := len(item.floors) - 1
	for i > 0 && n < item.floors[i] {
		i--
	}
	return i
}

func (item *Item) line(code string) int {
	for i, l := range item.Lines {
		if l.Code == code {
			return i
		}
	}
	return -1
}
