package workbook

import (
	"cmp"
	"io"
	"slices"
	"strings"

	"weighhouse/model"
)

// A Reading is what Read made of a workbook.
type Reading struct {
	// Scorecard is what could be read of it.
	Scorecard model.Scorecard
	// Edition is compiled from Scorecard; nil unless every problem is a warning.
	Edition *model.Edition
	// Seal is head office's, found to be this scorecard's; nil without one.
	Seal *Seal
	// Problems are everything wrong or worth a question, in the workbook's
	// order. Places have the cell's address wherever there is one.
	Problems []model.Problem

	file []byte
	book *book // nil where the file as a whole was refused
}

// Read reads a workbook and judges it. The error is the reader's own; what is
// wrong with the workbook is in Problems.
func Read(r io.Reader) (*Reading, error) {
	b, err := io.ReadAll(io.LimitReader(r, mostZipped+1))
	if err != nil {
		return nil, err
	}
	return read(b), nil
}

func read(b []byte) *Reading {
	rd := &Reading{file: b}
	rd.book, rd.Problems = readBook(b, func(sheet string) bool { _, known := formOf(sheet); return known })
	if rd.book == nil {
		return rd
	}
	tables, problems := rd.book.tables()
	rd.Problems = append(rd.Problems, problems...)
	tables = rd.readSeal(tables)
	sheets := make([]model.Sheet, len(tables))
	for i, t := range tables {
		sheets[i] = t.Sheet
	}
	rd.Scorecard, problems = model.FromSheets(sheets)
	rd.judge(tables, problems)
	// What the cells say together can be judged only where no sheet or column
	// is missing.
	if !slices.ContainsFunc(rd.Problems, structural) {
		rd.checkSeal()
		edition, problems := model.Compile(rd.Scorecard)
		rd.judge(tables, problems)
		if !slices.ContainsFunc(rd.Problems, func(p model.Problem) bool { return !p.Warning }) {
			rd.Edition = edition
		}
	}
	rd.sort()
	return rd
}

// structural problems hide others.
func structural(p model.Problem) bool {
	switch p.Code {
	case "missing_sheet", "repeated_sheet", "missing_column", "repeated_column", "too_many_rows", "too_many_cells", "too_many_problems":
		return true
	}
	return false
}

// judge lists what model found, with cells' addresses. Of a cell or an item
// that could not be taken nothing more is said: it would only follow from that.
func (rd *Reading) judge(tables []*table, problems []model.Problem) {
	type spot struct{ sheet, cell, column string }
	spotOf := func(p model.Place) spot {
		if p.Cell != "" {
			return spot{p.Sheet, p.Cell, ""}
		}
		return spot{p.Sheet, "", p.Column}
	}
	refused := map[spot]bool{}
	for _, p := range rd.Problems {
		if !p.Warning {
			refused[spotOf(p.Place)] = true
		}
	}
	for _, p := range problems {
		p.Place.Cell = address(tables, p.Place)
		if at := spotOf(p.Place); !refused[at] || at == (spot{sheet: at.sheet}) {
			rd.Problems = append(rd.Problems, p)
		}
	}
}

// address is the cell of a place that model names by row and column.
func address(tables []*table, p model.Place) string {
	i := slices.IndexFunc(tables, func(t *table) bool { return t.Name == p.Sheet })
	if i < 0 {
		return ""
	}
	t := tables[i]
	column, row := p.Column, p.Row
	if t.form.Items && column != "Item" && column != "Value" {
		item := slices.Index(t.Columns, "Item")
		row = 1 + slices.IndexFunc(t.Rows, func(cells []string) bool { return item >= 0 && cells[item] == p.Column })
		column = "Value"
		if row == 0 {
			return ""
		}
	}
	col := slices.Index(t.Columns, column)
	switch {
	case col < 0 && row == 0:
		return ""
	case col < 0:
		return refOf(1, t.rows[row-1])
	case row == 0:
		return refOf(t.cols[col], 1)
	}
	return refOf(t.cols[col], t.rows[row-1])
}

// sort puts problems of the file first, then by sheet, row and column.
func (rd *Reading) sort() {
	slices.SortStableFunc(rd.Problems, func(a, b model.Problem) int {
		aCol, aRow, _ := parseRef(a.Place.Cell)
		bCol, bRow, _ := parseRef(b.Place.Cell)
		return cmp.Or(cmp.Compare(rd.sheetOrder(a.Place.Sheet), rd.sheetOrder(b.Place.Sheet)),
			cmp.Compare(aRow, bRow), cmp.Compare(aCol, bCol))
	})
}

func (rd *Reading) sheetOrder(name string) int {
	return slices.IndexFunc(rd.book.sheets, func(s *sheet) bool { return strings.EqualFold(strings.TrimSpace(s.name), name) })
}
