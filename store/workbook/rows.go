package workbook

import (
	"io"
	"slices"
	"strconv"

	"weighhouse/model"
)

// A Row is one row of a sheet that is no scorecard, from column 1 to its last
// filled cell.
type Row struct {
	Row   int // in the workbook, from 1
	Cells []string
	// Problems are what must not be taken: formulas and error values.
	Problems []model.Problem
}

// mostColumns is how wide a sheet that is no scorecard may be.
const mostColumns = 1000

// Rows are the filled rows of a workbook's first sheet, each cell as text: a
// number as a decimal of at most 15 significant digits, a date as 2026-03-01.
// The workbook is looked at as closely as a scorecard's. The error is the
// reader's own or a model.Problem; of other sheets nothing is said.
func Rows(r io.Reader) ([]Row, error) {
	b, err := io.ReadAll(io.LimitReader(r, mostZipped+1))
	if err != nil {
		return nil, err
	}
	first := ""
	bk, problems := readBook(b, func(sheet string) bool {
		if first == "" {
			first = sheet
		}
		return sheet == first
	})
	if i := slices.IndexFunc(problems, func(p model.Problem) bool { return !p.Warning }); i >= 0 {
		return nil, problems[i]
	}
	var rows []Row
	for _, s := range bk.sheets {
		for _, c := range s.cells {
			if c.col > mostColumns {
				p := problem("too_many", "value", strconv.Itoa(int(c.col)), "most", strconv.Itoa(mostColumns))
				p.Place = model.Place{Sheet: s.name, Cell: c.ref()}
				return nil, p
			}
			if n := len(rows); n == 0 || rows[n-1].Row != int(c.row) {
				rows = append(rows, Row{Row: int(c.row)})
			}
			rows[len(rows)-1].add(s.name, c)
		}
	}
	return rows, nil
}

// add puts a cell at its column.
func (r *Row) add(sheet string, c cell) {
	for len(r.Cells) < int(c.col) {
		r.Cells = append(r.Cells, "")
	}
	code := ""
	switch {
	case c.kind == failure:
		code = "error_value"
	case c.formula:
		code = "formula"
	}
	if code != "" {
		p := problem(code, "value", c.text)
		p.Place = model.Place{Sheet: sheet, Cell: c.ref()}
		r.Problems = append(r.Problems, p)
	}
	text := c.text
	if c.kind == numeric {
		text = round(text, 15, 15)
	}
	r.Cells[c.col-1] = text
}

// Readings are the numbers that a text may mean, in canonical decimal text:
// "1,250" may be 1250 or 1.25. There are none where it looks like no number.
func Readings(text string) []string { return readings(text) }
