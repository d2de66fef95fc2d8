package model

import (
	"crypto/sha256"
	"slices"
	"strconv"
)

// Compile checks everything that s says and makes an Edition of it. It lists
// every problem at once; only where all of them are warnings is there an
// Edition. What FromSheets had to leave out of s, Compile cannot see: where
// FromSheets refused a cell, there must be no release whatever Compile says.
//
// The Edition keeps a copy of s in canonical form and shares nothing with s.
func Compile(s Scorecard) (*Edition, []Problem) {
	c := gather(s)
	if !c.refused() {
		c.checks()
	}
	if c.refused() {
		return nil, c.problems
	}
	return c.e, c.problems
}

// gather compiles all but the checks.
func gather(s Scorecard) *compiler {
	sheets := s.Sheets()
	// Read back, s is in canonical form, and what no workbook could hold is
	// found here too.
	own, problems := FromSheets(sheets)
	for i := range problems {
		if p := &problems[i].Place; p.Sheet == "Card" || p.Sheet == "Terms" {
			p.Row = 0 // of these only the item is known
		}
	}
	c := &compiler{s: own, problems: problems, e: &Edition{
		card: own, byCode: map[string]int{},
		fingerprint: sha256.Sum256([]byte(canonicalText(sheets))),
	}}
	c.cards()
	c.characteristics()
	c.attributes()
	c.lines()
	c.computed()
	c.conditions()
	c.reservedAttributes()
	c.averages()
	c.protected()
	c.bands()
	c.terms()
	c.monthlyMoney()
	c.rules()
	c.overrides()
	c.words()
	c.covariance()
	return c
}

// compiler gathers an edition and the problems of its scorecard.
type compiler struct {
	s        Scorecard
	e        *Edition
	problems []Problem
	states   []stateSet // by item: those that it can come to have
	grounds  []string   // by item: the ground by which it looks protected, or ""
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

// tooMany is the problem of more than fit.
func tooMany(place Place, n, most int) Problem {
	return Problem{Code: "too_many", Place: place, Args: Args{"value": strconv.Itoa(n), "most": strconv.Itoa(most)}}
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
		if d := len(code) - len(item.Code); d <= -least || d >= least {
			continue
		}
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

// overrides refuses two of one code.
func (c *compiler) overrides() {
	seen := map[string]bool{}
	for i, o := range c.s.Overrides {
		c.onlyOnce(seen, o.Code, at("Overrides", i+1, "Override"))
	}
}

// words refuses two wordings of one code in one language.
func (c *compiler) words() {
	seen := map[string]map[string]bool{}
	for i, w := range c.s.Words {
		if seen[w.Language] == nil {
			seen[w.Language] = map[string]bool{}
		}
		c.onlyOnce(seen[w.Language], w.Code, at("Words", i+1, "Code"))
	}
}

// onlyOnce lists a code that was seen before. A blank one was listed when its
// cell was read.
func (c *compiler) onlyOnce(seen map[string]bool, code string, place Place) {
	if seen[code] && code != "" {
		c.add(Problem{Code: "repeated_code", Place: place, Args: Args{"value": code}})
	}
	seen[code] = true
}
