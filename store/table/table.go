// Package table reads tables of rows from .csv and .xlsx files that come from
// programs we do not know.
//
// NewReader tells by its first bytes what a file is and gives its rows one by
// one, so that a long file needs no more memory than a short one. A row that
// does not read has its problem and the rows after it still come. ColumnsOf
// finds which column of a file answers which question of an edition, and
// Columns.Applicant turns a row into answers.
//
// Nothing is guessed: text is UTF-8, a number has a point for its decimals and
// nothing between its thousands, a date is 2026-03-01. What may be read in
// another way is refused with what it may mean.
package table

import (
	"bufio"
	"bytes"
	"io"
	"slices"
	"strconv"
	"strings"
	"unicode/utf8"

	"weighhouse/model"
)

// Limits of a table.
const (
	mostColumns = 2_000
	mostCell    = 10_000  // characters
	mostRow     = 1 << 20 // bytes
)

// A Row is one row under the header.
type Row struct {
	// Number counts the rows under the header from 1, blank ones too, as a
	// spreadsheet does.
	Number int
	// Cells are the texts by column, without blanks around them. A row with
	// Problems may have more or fewer of them than the header.
	Cells []string
	// Problems are why the row cannot be taken; their place has the column
	// where there is one.
	Problems []model.Problem
}

// A Reader reads the rows of a table in turn. Errors are model.Problems, or
// those of the reader below.
type Reader struct {
	header []string
	rows   source
	number int
}

// A source gives rows of cells, blank ones too, without a number; io.EOF ends
// them. The first is the header.
type source interface{ next() (Row, error) }

// NewReader reads the header of a table. Its problems' codes: table_empty,
// table_not_utf8, table_separator_unclear, table_header_unreadable,
// table_too_many_columns, and those of a workbook that is no table.
func NewReader(in io.Reader) (*Reader, error) {
	b := bufio.NewReaderSize(in, 64<<10)
	head, err := b.Peek(4)
	if err != nil && err != io.EOF {
		return nil, err
	}
	var rows source
	switch {
	case bytes.HasPrefix(head, []byte("PK\x03\x04")), bytes.HasPrefix(head, []byte("\xD0\xCF\x11\xE0")):
		rows, err = readSheet(b)
	default:
		rows, err = readCSV(b)
	}
	if err != nil {
		return nil, err
	}
	t := &Reader{rows: rows}
	for len(t.header) == 0 {
		row, err := rows.next()
		switch {
		case err == io.EOF:
			return nil, problem("table_empty")
		case err != nil:
			return nil, err
		case len(row.Problems) > 0, slices.ContainsFunc(row.Cells, func(cell string) bool { return textProblem(cell) != "" }):
			return nil, problem("table_header_unreadable")
		}
		t.header = row.Cells[:trimBlank(row.Cells)]
	}
	if len(t.header) > mostColumns {
		return nil, problem("table_too_many_columns", "most", strconv.Itoa(mostColumns))
	}
	return t, nil
}

// Header is the header row.
func (t *Reader) Header() []string { return t.header }

// Read gives the next row that is not blank; io.EOF ends them.
func (t *Reader) Read() (Row, error) {
	for {
		row, err := t.rows.next()
		if err != nil {
			return Row{}, err
		}
		t.number++
		row.Number = t.number
		filled := trimBlank(row.Cells)
		if filled == 0 && len(row.Problems) == 0 {
			continue
		}
		if len(row.Problems) == 0 {
			t.check(&row, filled)
		}
		return row, nil
	}
}

// check lists what is wrong with the cells of a row as text.
func (t *Reader) check(row *Row, filled int) {
	width := len(t.header)
	counts := []string{"cells", strconv.Itoa(len(row.Cells)), "columns", strconv.Itoa(width)}
	switch {
	case len(row.Cells) < width:
		row.Problems = append(row.Problems, problem("row_too_few_cells", counts...))
		return
	case filled > width:
		row.Problems = append(row.Problems, problem("row_too_many_cells", counts...))
		return
	}
	row.Cells = row.Cells[:width]
	for i, cell := range row.Cells {
		if code := textProblem(cell); code != "" {
			p := problem(code, "length", strconv.Itoa(utf8.RuneCountInString(cell)), "most", strconv.Itoa(mostCell))
			p.Place = place(t.header[i])
			row.Problems = append(row.Problems, p)
		}
	}
}

// textProblem is the code of what is wrong with a cell as text, or empty.
func textProblem(cell string) string {
	if len(cell) > mostCell && utf8.RuneCountInString(cell) > mostCell {
		return "cell_too_long"
	}
	ascii := true
	for i := 0; i < len(cell); i++ {
		c := cell[i]
		if c < ' ' && c != '\n' && c != '\t' || c == 0x7f {
			return "cell_control_character"
		}
		ascii = ascii && c < utf8.RuneSelf
	}
	if !ascii && !utf8.ValidString(cell) {
		return "cell_not_utf8"
	}
	return ""
}

// trimBlank takes the blanks from around each cell and tells how many cells
// there are but for blank ones at the end.
func trimBlank(cells []string) (filled int) {
	for i, cell := range cells {
		if cells[i] = strings.TrimSpace(cell); cells[i] != "" {
			filled = i + 1
		}
	}
	return filled
}

// place is a column of the table.
func place(column string) model.Place { return model.Place{Sheet: "Answers", Column: column} }

// problem makes a Problem from pairs of a name and a value.
func problem(code string, args ...string) model.Problem {
	p := model.Problem{Code: code}
	for i := 0; i+1 < len(args); i += 2 {
		if p.Args == nil {
			p.Args = model.Args{}
		}
		p.Args[args[i]] = args[i+1]
	}
	return p
}
