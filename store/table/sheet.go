package table

import (
	"io"

	"weighhouse/store/workbook"
)

// sheet gives the rows of a workbook's first sheet. A workbook is read whole:
// it may have no more than 20,000 rows.
type sheet struct {
	rows  []workbook.Row
	width int // of the header
	at    int // the row of the workbook given last
}

func readSheet(in io.Reader) (*sheet, error) {
	rows, err := workbook.Rows(in)
	if err != nil {
		return nil, err
	}
	if len(rows) > 0 { // the header; rows above it are blank
		return &sheet{rows, len(rows[0].Cells), rows[0].Row - 1}, nil
	}
	return &sheet{}, nil
}

func (s *sheet) next() (Row, error) {
	if len(s.rows) == 0 {
		return Row{}, io.EOF
	}
	s.at++
	if s.rows[0].Row > s.at {
		return Row{}, nil // a blank row
	}
	row := Row{Cells: s.rows[0].Cells, Problems: s.rows[0].Problems}
	for len(row.Cells) < s.width {
		row.Cells = append(row.Cells, "")
	}
	s.rows = s.rows[1:]
	return row, nil
}
