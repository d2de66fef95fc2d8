package workbook

import (
	"cmp"
	"encoding/xml"
	"io"
	"slices"
	"strconv"
	"strings"

	"weighhouse/model"
)

// Limits of one sheet.
const (
	mostRows     = 20_000 // rows, blank ones that carry a format among them
	mostProblems = 1_000  // then the rest of the sheet is not read
	lastRow      = 1 << 20
	lastColumn   = 1 << 14
)

// kind is what a cell shows.
type kind uint8

const (
	blank   kind = iota
	textual      // text
	numeric      // the shortest decimal of the float64 that a spreadsheet sees
	logical      // "yes" or "no"
	day          // 2026-03-01, with T06:00:00 behind it where there is a time
	failure      // an error such as #DIV/0!
)

// A cell is one filled cell, from 1,1. Of a formula it holds the result that
// was saved with it.
type cell struct {
	row, col int32
	kind     kind
	formula  bool
	percent  bool // the number is shown as a percentage
	trimmed  bool // the text had blanks around it
	text     string
}

func (c cell) ref() string { return refOf(int(c.col), int(c.row)) }

// A sheet is one sheet of a workbook; only a wanted one keeps its cells, by
// row and then by column.
type sheet struct {
	name, part string
	wanted     bool
	cells      []cell
	problems   []model.Problem
}

func inOrder(a, b cell) int {
	return cmp.Or(cmp.Compare(a.row, b.row), cmp.Compare(a.col, b.col))
}

// add lists a problem with the cell, and stops the reading at too many.
func (s *sheet) add(code, ref string, args ...string) error {
	p := problem(code, args...)
	p.Place = model.Place{Sheet: s.name, Cell: ref}
	s.problems = append(s.problems, p)
	if len(s.problems) < mostProblems {
		return nil
	}
	s.problems = append(s.problems, model.Problem{Code: "too_many_problems", Place: model.Place{Sheet: s.name}})
	return errEnough
}

// A span is a rectangle of cells, ends included.
type span struct{ col, row, toCol, toRow int }

// sheetPass is the state of one pass over a sheet's XML.
type sheetPass struct {
	*sheet
	bk *book
	t  *tokens

	section  string // the child of worksheet that the pass is in
	sections map[string]bool
	rows     int // row elements so far
	row, col int // where the last of them stood

	seen       [lastColumn + 1]int // the row element that last had a cell in the column
	hiddenCols [lastColumn + 2]bool
	filledCols [lastColumn + 2]bool
	hiddenRow  bool
	hiddenRows []int  // filled ones
	arrays     []span // formulas that fill more than their own cell
}

// readSheet makes the one pass over a sheet.
func (bk *book) readSheet(s *sheet) error {
	return bk.parts.read(s.part, func(t *tokens) error {
		p := &sheetPass{sheet: s, bk: bk, t: t, sections: map[string]bool{}}
		for {
			tok, err := t.next()
			if err == io.EOF {
				return p.end()
			}
			if err != nil {
				return err
			}
			if e, ok := tok.(xml.StartElement); ok {
				if err := p.start(e); err != nil {
					return err
				}
			}
		}
	})
}

func (p *sheetPass) start(e xml.StartElement) error {
	switch p.t.depth {
	case 1:
		if !ours(e.Name, "worksheet") {
			return errXML
		}
	case 2:
		p.section = ""
		if ours(e.Name, e.Name.Local) {
			p.section = e.Name.Local
		}
		if p.section == "sheetData" && p.sections[p.section] {
			return errXML
		}
		p.sections[p.section] = true
	case 3:
		switch {
		case !p.wanted:
		case p.section == "cols" && ours(e.Name, "col"):
			return p.columns(e)
		case p.section == "sheetData" && ours(e.Name, "row"):
			return p.startRow(e)
		case p.section == "mergeCells" && ours(e.Name, "mergeCell"):
			area, ok := parseSpan(attr(e, "ref"))
			if !ok {
				return errXML
			}
			return p.add("merged_cells", refOf(area.col, area.row), "range", attr(e, "ref"))
		}
	case 4:
		if p.wanted && p.section == "sheetData" && ours(e.Name, "c") {
			return p.cell(e)
		}
	}
	return nil
}

// columns notes hidden columns.
func (p *sheetPass) columns(e xml.StartElement) error {
	width, err := strconv.ParseFloat(attr(e, "width"), 64)
	if !truth(attr(e, "hidden")) && (err != nil || width > 0) {
		return nil
	}
	from, err1 := strconv.Atoi(attr(e, "min"))
	to, err2 := strconv.Atoi(attr(e, "max"))
	if err1 != nil || err2 != nil || from < 1 || to > lastColumn {
		return errXML
	}
	for col := from; col <= to; col++ {
		p.hiddenCols[col] = true
	}
	return nil
}

func (p *sheetPass) startRow(e xml.StartElement) error {
	if p.rows++; p.rows > mostRows {
		p.problems = append(p.problems, model.Problem{Code: "too_many_rows",
			Place: model.Place{Sheet: p.name}, Args: model.Args{"most": strconv.Itoa(mostRows)}})
		return errEnough
	}
	row := p.row + 1
	if r := attr(e, "r"); r != "" {
		var err error
		if row, err = strconv.Atoi(r); err != nil {
			return errXML
		}
	}
	if row < 1 || row > lastRow {
		return errXML
	}
	last := p.row
	p.row, p.col = row, 0
	height, err := strconv.ParseFloat(attr(e, "ht"), 64)
	p.hiddenRow = truth(attr(e, "hidden")) || (err == nil && height == 0)
	switch {
	case row == last:
		return p.add("repeated_row", refOf(1, row))
	case row < last:
		return p.add("row_out_of_order", refOf(1, row))
	}
	return nil
}

// cell reads one c element to its end.
func (p *sheetPass) cell(e xml.StartElement) error {
	col, row := p.col+1, p.row
	if r := attr(e, "r"); r != "" {
		var ok bool
		if col, row, ok = parseRef(r); !ok {
			return errXML
		}
	}
	if col > lastColumn {
		return errXML
	}
	var err error
	switch {
	case p.seen[col] == p.rows:
		err = p.add("repeated_cell", refOf(col, row))
	case row != p.row, col <= p.col:
		err = p.add("cell_out_of_order", refOf(col, row))
	}
	if err != nil {
		return err
	}
	p.col, p.seen[col] = col, p.rows
	c := cell{row: int32(row), col: int32(col)}
	if err := p.content(e, &c); err != nil {
		return err
	}
	if c.kind == blank && !c.formula {
		return nil
	}
	if p.bk.cells++; p.bk.cells > mostCells {
		return problem("too_many_cells", "most", strconv.Itoa(mostCells))
	}
	p.cells = append(p.cells, c)
	p.filledCols[col] = true
	if n := len(p.hiddenRows); p.hiddenRow && (n == 0 || p.hiddenRows[n-1] != row) {
		p.hiddenRows = append(p.hiddenRows, row)
	}
	return nil
}

// content reads what is inside a c element into c.
func (p *sheetPass) content(e xml.StartElement, c *cell) error {
	var value, inline string
	had := map[string]bool{}
	for p.t.depth >= 4 {
		tok, err := p.t.next()
		if err != nil {
			return err
		}
		inner, ok := tok.(xml.StartElement)
		if !ok || p.t.depth != 5 || !ours(inner.Name, inner.Name.Local) {
			continue
		}
		if had[inner.Name.Local] {
			return errXML
		}
		had[inner.Name.Local] = true
		switch inner.Name.Local {
		case "f":
			c.formula = true
			err = p.formula(inner)
		case "v":
			value, err = plainText(p.t)
		case "is":
			inline, err = richText(p.t)
		}
		if err != nil {
			return err
		}
	}
	style := 0
	if s := attr(e, "s"); s != "" {
		n, err := strconv.Atoi(s)
		if err != nil || n < 0 || n >= max(1, len(p.bk.formats)) {
			return errXML
		}
		style = n
	}
	return p.convert(c, attr(e, "t"), style, value, inline)
}

// formula notes the cells that one formula fills besides its own.
func (p *sheetPass) formula(e xml.StartElement) error {
	if kind := attr(e, "t"); kind != "array" && kind != "dataTable" {
		return nil
	}
	area, ok := parseSpan(attr(e, "ref"))
	if !ok {
		return errXML
	}
	if p.arrays = append(p.arrays, area); len(p.arrays) > mostProblems {
		return p.add("too_many_problems", "")
	}
	return nil
}

// plainText joins the text of the element that t has just entered, which has
// no elements in it, and leaves t behind its end.
func plainText(t *tokens) (string, error) {
	var b []byte
	for {
		tok, err := t.next()
		if err != nil {
			return "", err
		}
		switch tok := tok.(type) {
		case xml.StartElement:
			return "", errXML
		case xml.CharData:
			b = append(b, tok...)
		case xml.EndElement:
			return string(b), nil
		}
	}
}

// convert turns a cell's stored value into what it shows.
func (p *sheetPass) convert(c *cell, kind string, style int, value, inline string) error {
	f := plain
	if style < len(p.bk.formats) {
		f = p.bk.formats[style]
	}
	switch kind {
	case "", "n":
		value = strings.TrimSpace(value)
		if value == "" {
			return nil
		}
		number, ok := shortest(value)
		if !ok {
			return errXML
		}
		c.kind, c.text, c.percent = numeric, number, f == percent
		if f == dated {
			c.kind = day
			c.text = dateOf(number)
		}
	case "s":
		i, err := strconv.Atoi(strings.TrimSpace(value))
		if err != nil || i < 0 || i >= len(p.bk.texts) {
			return errXML
		}
		c.setText(p.bk.texts[i])
	case "str":
		c.setText(cleanText(value))
	case "inlineStr":
		c.setText(cleanText(inline))
	case "b":
		c.kind, c.text = logical, model.No
		if truth(strings.TrimSpace(value)) {
			c.text = model.Yes
		}
	case "d":
		c.kind, c.text = day, strings.TrimSuffix(strings.TrimSpace(value), "T00:00:00")
	case "e":
		c.kind, c.text = failure, value
	default:
		return errXML
	}
	return nil
}

func (c *cell) setText(t text) {
	if t.text != "" {
		c.kind, c.text, c.trimmed = textual, t.text, t.trimmed
	}
}

// end lists what only the whole sheet shows.
func (p *sheetPass) end() error {
	for _, area := range p.arrays {
		for i := range p.cells {
			c := &p.cells[i]
			c.formula = c.formula || area.has(int(c.col), int(c.row))
		}
	}
	for i := 0; i < len(p.hiddenRows); i++ {
		from := p.hiddenRows[i]
		for i+1 < len(p.hiddenRows) && p.hiddenRows[i+1] == p.hiddenRows[i]+1 {
			i++
		}
		if err := p.add("hidden_rows", refOf(1, from), "from", strconv.Itoa(from), "to", strconv.Itoa(p.hiddenRows[i])); err != nil {
			return err
		}
	}
	hidden := func(col int) bool { return p.hiddenCols[col] && p.filledCols[col] }
	for col := 1; col <= lastColumn; col++ {
		if !hidden(col) {
			continue
		}
		from := col
		for hidden(col + 1) {
			col++
		}
		if err := p.add("hidden_columns", refOf(from, 1), "from", columnName(from), "to", columnName(col)); err != nil {
			return err
		}
	}
	slices.SortStableFunc(p.cells, inOrder)
	return nil
}

func (a span) has(col, row int) bool {
	return a.col <= col && col <= a.toCol && a.row <= row && row <= a.toRow
}

// columnName is A for 1, AA for 27.
func columnName(col int) string {
	var b [8]byte
	i := len(b)
	for ; col > 0; col = (col - 1) / 26 {
		i--
		b[i] = byte('A' + (col-1)%26)
	}
	return string(b[i:])
}

func refOf(col, row int) string { return columnName(col) + strconv.Itoa(row) }

// parseRef reads an address such as C6.
func parseRef(ref string) (col, row int, ok bool) {
	i := 0
	for ; i < len(ref) && i < 4 && ref[i] >= 'A' && ref[i] <= 'Z'; i++ {
		col = col*26 + int(ref[i]-'A') + 1
	}
	if i == 0 || i == len(ref) || ref[i] < '1' || ref[i] > '9' {
		return 0, 0, false
	}
	row, err := strconv.Atoi(ref[i:])
	return col, row, err == nil && col <= lastColumn && row <= lastRow
}

// parseSpan reads a range such as A1:B3, or one cell.
func parseSpan(ref string) (span, bool) {
	from, to, ranged := strings.Cut(ref, ":")
	if !ranged {
		to = from
	}
	col, row, ok1 := parseRef(from)
	toCol, toRow, ok2 := parseRef(to)
	return span{col, row, toCol, toRow}, ok1 && ok2 && col <= toCol && row <= toRow
}
