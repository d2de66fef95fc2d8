package table

import (
	"slices"
	"strings"

	"weighhouse/model"
)

// Columns tell which column of a table answers which question of an edition.
// Their names are the codes of the edition's characteristics, and
//
//	ref                     the applicant's mark in the file, written out again
//	on                      the day of the application
//	client                  new or repeat
//	product                 the product code
//	CODE.seen               yes where a paper was seen, no or blank where not
//	seen                    or the codes of all whose papers were seen
//	WORKSHEET               one monthly figure, or
//	WORKSHEET.LINE          the amount of each line, and where it is not the usual
//	WORKSHEET.LINE.period   how often
//
// in any order and either case. They may be used by several goroutines.
type Columns struct {
	edition *model.Edition
	names   []string
	// Columns, -1 where there is none.
	ref, on, client, product, seen int

	questions []question
	money     int // decimals
}

// A question is one that is asked, and its columns.
type question struct {
	item         *model.Item
	answer, seen int
	lines        []lineColumns
}

type lineColumns struct{ amount, period int }

// ColumnsOf finds the columns. The problems are warnings,
// table_unknown_column, table_computed_column, table_unnamed_column and
// table_no_column (of a question that is always asked), and what makes the table
// useless: table_repeated_column and table_no_known_column; then there are no
// Columns.
func ColumnsOf(e *model.Edition, header []string) (*Columns, []model.Problem) {
	c := &Columns{edition: e, money: int(e.Scorecard().Terms.MoneyDecimals)}
	for _, name := range header {
		c.names = append(c.names, strings.ToLower(name))
	}
	var problems []model.Problem
	warn := func(code, column string) {
		p := problem(code, "value", column)
		p.Warning = true
		problems = append(problems, p)
	}
	used := make([]bool, len(c.names))
	find := func(name string) int {
		i := slices.Index(c.names, name)
		if i >= 0 {
			used[i] = true
		}
		return i
	}
	c.ref, c.on, c.client, c.product, c.seen = find("ref"), find("on"), find("client"), -1, -1
	if _, taken := e.Item("product"); !taken {
		c.product = find("product")
	}
	if _, taken := e.Item("seen"); !taken {
		c.seen = find("seen")
	}
	answers := 0
	items := e.Items()
	for i := range items {
		item := &items[i]
		if item.Kind == model.Computed {
			if find(item.Code) >= 0 {
				warn("table_computed_column", item.Code)
			}
			continue
		}
		q := question{item: item, answer: find(item.Code), seen: find(item.Code + ".seen")}
		given := q.answer >= 0
		for n, line := range item.Lines {
			name := item.Code + "." + line.Code
			q.lines = append(q.lines, lineColumns{find(name), find(name + ".period")})
			given = given || q.lines[n].amount >= 0
		}
		if _, conditional := item.ConditionOf(); given {
			answers++
		} else if !conditional {
			warn("table_no_column", item.Code)
		}
		c.questions = append(c.questions, q)
	}
	if answers == 0 {
		return nil, []model.Problem{problem("table_no_known_column", "value", strings.Join(header, " "))}
	}
	for i, name := range c.names {
		switch {
		case name == "":
			warn("table_unnamed_column", columnLetters(i))
		case slices.Index(c.names, name) < i:
			problems = append(problems, problem("table_repeated_column", "value", header[i]))
		case !used[i]:
			warn("table_unknown_column", header[i])
		}
	}
	if slices.ContainsFunc(problems, func(p model.Problem) bool { return !p.Warning }) {
		return nil, problems
	}
	return c, problems
}

// columnLetters are A for 0, AA for 26, as spreadsheets call columns.
func columnLetters(i int) string {
	letters := ""
	for i++; i > 0; i = (i - 1) / 26 {
		letters = string(rune('A'+(i-1)%26)) + letters
	}
	return letters
}

// HeaderOf is a header under which every question of an edition can be
// answered: a worksheet by its lines, or in one cell where it may be unknown,
// and papers seen where they are wanted.
func HeaderOf(e *model.Edition) []string {
	header := []string{"ref", "on", "client"}
	for _, item := range e.Items() {
		switch item.Kind {
		case model.Computed:
			continue
		case model.Worksheet:
			if item.UnknownAllowed {
				header = append(header, item.Code)
			}
			for _, line := range item.Lines {
				header = append(header, item.Code+"."+line.Code)
			}
		default:
			header = append(header, item.Code)
		}
		if item.EvidenceNeeded == model.Seen {
			header = append(header, item.Code+".seen")
		}
	}
	return header
}
