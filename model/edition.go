package model

import (
	"slices"

	"weighhouse/model/loan"
)

// MostCharacteristics, MostAttributes, MostRules are how many an edition may
// have: working space is then of fixed size, and scoring allocates nothing.
const (
	MostCharacteristics = 64
	MostAttributes      = 64
	MostRules           = 64
)

// An Edition is a scorecard compiled into tables: numbered, frozen, never
// edited, only followed by the next. It is safe for concurrent use.
type Edition struct {
	card        Scorecard
	fingerprint Fingerprint
	items       []Item
	byCode      map[string]int
	order       []int // computed items, each after its parts
	rules       []rule
	bands       []band
	plan        *loan.Plan
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
	// Tables for scoring. A number's value falls in the last band whose floor
	// is not above it; ordinary attributes come first in floors.
	floors      []Number
	weights     []LogOdds // by place among Attributes
	at          []int     // place among Attributes, by place among floors
	slope       Slope
	from, to    Number // the clamp
	unknown     int    // places among Attributes, -1 where there is none
	notApplies  int
	nothingLeft int
}

type part struct {
	index    int
	negative bool
}

// condition is "asked only if": the answer to item index is one of a set.
type condition struct {
	index int
	among uint64
}

type band struct {
	from  PD
	index int // among Scorecard.Bands
}

// Scorecard is what the edition was compiled from. It must not be changed.
func (e *Edition) Scorecard() *Scorecard { return &e.card }

// Fingerprint is the edition's identity.
func (e *Edition) Fingerprint() Fingerprint { return e.fingerprint }

// TelephoneCode is the fingerprint's, to compare by telephone.
func (e *Edition) TelephoneCode() string { return e.fingerprint.TelephoneCode() }

// Items are all characteristics in the workbook's order, amount and term
// first where it does not list them.
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

// Compile checks everything that s says and makes an Edition of it. It lists
// every problem at once; only where all of them are warnings is there an
// Edition.
func Compile(s Scorecard) (*Edition, []Problem) {
	c := &compiler{s: s, e: &Edition{card: s, fingerprint: s.Fingerprint(), byCode: map[string]int{}}}
	c.cards()
	c.characteristics()
	c.attributes()
	c.lines()
	c.computed()
	c.conditions()
	c.protected()
	c.bands()
	c.terms()
	c.rules()
	c.overrides()
	c.words()
	c.covariance()
	if c.refused() {
		return nil, c.problems
	}
	c.checks()
	if c.refused() {
		return nil, c.problems
	}
	return c.e, c.problems
}

// compiler gathers an edition and the problems of its scorecard.
type compiler struct {
	s        Scorecard
	e        *Edition
	problems []Problem
}

func (c *compiler) add(p Problem)  { c.problems = append(c.problems, p) }
func (c *compiler) warn(p Problem) { p.Warning = true; c.add(p) }

func (c *compiler) refused() bool {
	return slices.ContainsFunc(c.problems, func(p Problem) bool { return !p.Warning })
}

// at is the place of a cell.
func at(sheet string, row int, column string) Place {
	return Place{Sheet: sheet, Row: row, Column: column}
}

// item finds a compiled item, or nil.
func (c *compiler) item(code string) *Item {
	i, ok := c.e.byCode[code]
	if !ok {
		return nil
	}
	return &c.e.items[i]
}

// row is the workbook's row of an item under Characteristics; 0 where amount
// or term is not listed.
func (c *compiler) row(item *Item) int { return c.s.characteristic(item.Code) + 1 }
