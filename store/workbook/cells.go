package workbook

import (
	"slices"
	"strconv"
	"strings"

	"weighhouse/model"
)

// Sheets of our own that hold nothing of a scorecard.
const (
	tryItSheet    = "Try it"
	exampleSheet  = "Example"
	problemsSheet = "Problems"
)

// formOf is the form of a sheet of that name. Spreadsheets compare sheet
// names without regard to case, and so do we.
func formOf(sheet string) (model.SheetForm, bool) {
	for _, f := range append(model.Forms(), sealForm) {
		if strings.EqualFold(f.Name, strings.TrimSpace(sheet)) {
			return f, true
		}
	}
	return model.SheetForm{}, false
}

// A table is one known sheet: the canonical text of its cells, and where in
// the workbook each stands.
type table struct {
	model.Sheet
	form model.SheetForm
	cols []int // column of the workbook, by place among Columns
	rows []int // row of the workbook, by place among Rows
}

// A translator makes tables of sheets and lists what does not translate.
type translator struct {
	problems []model.Problem
	table    *table
	place    map[int32]int  // among the table's Columns, by the workbook's column
	headless map[int32]bool // columns of the table said to have no header
}

// mostTable is how many cells, blank ones too, a table may have.
const mostTable = 2_000_000

// tables are the workbook's sheets as model wants them.
func (bk *book) tables() ([]*table, []model.Problem) {
	var list []*table
	t := &translator{}
	for _, s := range bk.sheets {
		form, known := formOf(s.name)
		switch {
		case known:
			t.table = &table{Sheet: model.Sheet{Name: form.Name}, form: form}
			t.place, t.headless = map[int32]int{}, map[int32]bool{}
			t.read(s)
			list = append(list, t.table)
		case s.name == tryItSheet, s.name == exampleSheet, s.name == problemsSheet:
		default:
			list = append(list, &table{Sheet: model.Sheet{Name: s.name}})
		}
	}
	return list, t.problems
}

// read fills the table from a sheet.
func (t *translator) read(s *sheet) {
	cells := s.cells
	for len(cells) > 0 && cells[0].row == 1 {
		t.header(cells[0])
		cells = cells[1:]
	}
	blank := make([]string, len(t.table.cols))
	for len(cells) > 0 {
		n := slices.IndexFunc(cells, func(c cell) bool { return c.row != cells[0].row })
		if n < 0 {
			n = len(cells)
		}
		if len(t.table.Rows)*len(blank) > mostTable {
			t.add(cells[0], "", 0, problem("too_many_cells", "most", strconv.Itoa(mostTable)))
			return
		}
		t.row(cells[:n], slices.Clone(blank))
		cells = cells[n:]
	}
}

// header reads a cell of row 1.
func (t *translator) header(c cell) {
	name := t.text(c, model.Column{Name: c.text, Kind: model.TextColumn}, 0)
	for _, known := range t.names() {
		if strings.EqualFold(known, name) {
			name = known
		}
	}
	t.place[c.col] = len(t.table.Columns)
	t.table.Columns = append(t.table.Columns, name)
	t.table.cols = append(t.table.cols, int(c.col))
}

func (t *translator) names() []string {
	if t.table.form.Items {
		return []string{"Item", "Value"}
	}
	var names []string
	for _, c := range t.table.form.Columns {
		names = append(names, c.Name)
	}
	return names
}

// row reads the cells of one row into texts. A row with nothing under a known
// header is none.
func (t *translator) row(cells []cell, texts []string) {
	number := len(t.table.Rows) + 1
	filled := false
	item := t.item(cells)
	for _, c := range cells {
		i, ok := t.place[c.col]
		if !ok || t.table.Columns[i] == "" {
			if !t.headless[c.col] {
				t.headless[c.col] = true
				t.add(c, "", number, model.Problem{Code: "column_without_header", Warning: true})
			}
			continue
		}
		column, known := t.column(t.table.Columns[i], item)
		if !known {
			continue
		}
		filled = true
		texts[i] = t.text(c, column, number)
		if t.table.form.Items && t.table.Columns[i] == "Item" {
			texts[i] = item
		}
	}
	if filled {
		t.table.Rows = append(t.table.Rows, texts)
		t.table.rows = append(t.table.rows, int(cells[0].row))
	}
}

// item is the item's name in a row of a sheet of items, in its known
// spelling.
func (t *translator) item(cells []cell) string {
	name := ""
	for _, c := range cells {
		if i, ok := t.place[c.col]; ok && t.table.Columns[i] == "Item" {
			name = c.text
		}
	}
	for _, c := range t.table.form.Columns {
		if strings.EqualFold(c.Name, name) {
			return c.Name
		}
	}
	return name
}

// column is what a column holds; in a sheet of items, what the row's item
// holds.
func (t *translator) column(name, item string) (model.Column, bool) {
	form := t.table.form
	if form.Items {
		switch name {
		case "Item":
			return model.Column{Name: name, Kind: model.TextColumn}, true
		case "Value":
			i := slices.IndexFunc(form.Columns, func(c model.Column) bool { return c.Name == item })
			if i >= 0 {
				return form.Columns[i], true
			}
		}
		return model.Column{}, false
	}
	c, _ := columnOf(form, name)
	return c, c.Name != ""
}

// columnOf is what a column of a sheet of rows holds, and whether every
// workbook has it. The column is nameless where the sheet has none of that
// name.
func columnOf(form model.SheetForm, name string) (c model.Column, fixed bool) {
	if i := slices.IndexFunc(form.Columns, func(c model.Column) bool { return c.Name == name }); i >= 0 {
		return form.Columns[i], true
	}
	switch form.Name {
	case "Checks":
		c = model.CheckAnswerColumn
	case "Covariance":
		c = model.CovarianceColumn
	default:
		return model.Column{}, false
	}
	c.Name = name
	return c, false
}

// add lists a problem with a cell.
func (t *translator) add(c cell, column string, row int, p model.Problem) {
	p.Place = model.Place{Sheet: t.table.Name, Row: row, Column: column, Cell: c.ref()}
	t.problems = append(t.problems, p)
}

// text is a cell's canonical text in a column of that form. Where the cell
// must not be taken, it is listed, and the text is the likeliest meaning, so
// that what else is wrong can still be found.
func (t *translator) text(c cell, column model.Column, row int) string {
	bad := func(code string, args ...string) string {
		t.add(c, column.Name, row, problem(code, args...))
		return c.text
	}
	warn := func(code string, args ...string) {
		p := problem(code, args...)
		p.Warning = true
		t.add(c, column.Name, row, p)
	}
	switch {
	case c.kind == failure:
		bad("error_value", "value", c.text)
		return ""
	case c.formula && (column.Kind != model.TextColumn || row == 0 || c.kind == blank):
		bad("formula", "value", c.text)
		bad = func(string, ...string) string { return c.text } // what it came to is not the matter
	case c.formula:
		warn("formula_in_text", "value", c.text)
	}
	if c.trimmed {
		warn("text_trimmed", "value", c.text)
	}
	switch column.Kind {
	case model.NumberColumn:
		return t.number(c, column, bad, warn)
	case model.DateColumn:
		return t.date(c, bad)
	case model.ValueColumn:
		switch c.kind {
		case numeric:
			return t.number(c, column, bad, warn)
		case textual:
			if r := readings(c.text); len(r) > 0 {
				numberAsText(c.text, r, bad)
				return r[0]
			}
		}
		return c.text
	case model.ListColumn, model.YesNoColumn:
		options := column.Options
		if column.Kind == model.YesNoColumn {
			options = []string{model.Yes, model.No}
		}
		for _, o := range options {
			if strings.EqualFold(o, c.text) {
				return o
			}
		}
	}
	if c.kind == day || c.kind == numeric && c.percent || c.kind == logical && column.Kind == model.TextColumn {
		return bad("not_text", "value", c.text)
	}
	return c.text
}

func (t *translator) number(c cell, column model.Column, bad func(string, ...string) string, warn func(string, ...string)) string {
	switch c.kind {
	case blank:
		return ""
	case day:
		bad("date_in_number", "value", c.text)
		return ""
	case logical:
		bad("not_a_number", "value", c.text)
		return ""
	case textual:
		r := readings(c.text)
		if len(r) == 0 {
			bad("not_a_number", "value", c.text)
			return ""
		}
		numberAsText(c.text, r, bad)
		return r[0]
	}
	if column.Places == 0 {
		return c.text // a count must be whole: that is for model to say
	}
	rounded := round(c.text, column.Places, column.Digits)
	if rounded != c.text {
		warn("rounded", "value", c.text, "rounded", rounded)
	}
	return rounded
}

// numberAsText lists a number typed as text, with both its readings where
// there are two.
func numberAsText(text string, readings []string, bad func(string, ...string) string) {
	if len(readings) == 1 {
		bad("number_as_text", "value", text, "reading", readings[0])
		return
	}
	bad("number_as_text_unclear", "value", text, "reading_a", readings[0], "reading_b", readings[1])
}

func (t *translator) date(c cell, bad func(string, ...string) string) string {
	switch c.kind {
	case numeric:
		// A year alone is a number; any other number would be a day's number
		// that lost its format.
		if year, err := strconv.Atoi(c.text); err != nil || year < 1800 || year > 2999 {
			return bad("not_a_date", "value", c.text)
		}
	case logical:
		bad("not_a_date", "value", c.text)
		return ""
	case textual:
		return bad("date_as_text", "value", c.text)
	}
	return c.text
}
