package table

import (
	"bufio"
	"bytes"
	"io"
	"strings"
	"unicode/utf8"
)

// csv reads text with a row a line, as RFC 4180 has it: a cell in quotation
// marks may hold separators, line ends and doubled quotation marks. It is
// written here because a quotation mark that is never closed must not take
// the rest of the file with it, in memory or in its problem: the row it stands
// in is refused and reading goes on with the next line.
type csv struct {
	in    *bufio.Reader
	comma byte
	again []line // read already, to be read again; the last one first
	width int    // of the header
}

// A line is one line of text without its end. Of one that is too long only
// the beginning is kept.
type line struct {
	text    string
	tooLong bool
}

// readCSV looks at the header to find what parts the cells. It must be a
// comma, a semicolon or a tab, and the only one of them outside quotation
// marks: codes have none of them, so there is nothing to weigh.
func readCSV(in *bufio.Reader) (*csv, error) {
	if head, _ := in.Peek(3); string(head) == "\xEF\xBB\xBF" {
		in.Discard(3)
	}
	c := &csv{in: in, comma: ','}
	for {
		header, err := c.line()
		switch {
		case err == io.EOF:
			return c, nil // an empty table
		case err != nil:
			return nil, err
		case !utf8.ValidString(header.text), strings.ContainsRune(header.text, 0):
			return nil, problem("table_not_utf8")
		case strings.TrimSpace(header.text) == "":
			continue
		}
		c.again = append(c.again, header)
		found := 0
		for _, mark := range []byte{',', ';', '\t'} {
			if strings.IndexByte(outsideQuotes(header.text), mark) >= 0 {
				c.comma = mark
				found++
			}
		}
		if found > 1 {
			return nil, problem("table_separator_unclear")
		}
		return c, nil
	}
}

// outsideQuotes is every other part between quotation marks.
func outsideQuotes(text string) string {
	parts := strings.Split(text, `"`)
	for i := 1; i < len(parts); i += 2 {
		parts[i] = ""
	}
	return strings.Join(parts, "")
}

// line reads one line.
func (c *csv) line() (line, error) {
	if n := len(c.again); n > 0 {
		l := c.again[n-1]
		c.again = c.again[:n-1]
		return l, nil
	}
	var l line
	var whole []byte
	for {
		part, err := c.in.ReadSlice('\n')
		switch {
		case len(whole)+len(part) > mostRow:
			l.tooLong = true
		case whole == nil && err == nil:
			whole = part // in the reader's own buffer until it is made a string
		default:
			whole = append(whole, part...)
		}
		switch {
		case err == bufio.ErrBufferFull:
			continue
		case err == io.EOF && len(part)+len(whole) == 0 && !l.tooLong:
			return line{}, io.EOF
		case err != nil && err != io.EOF:
			return line{}, err
		}
		whole = bytes.TrimSuffix(bytes.TrimSuffix(whole, []byte("\n")), []byte("\r"))
		l.text = string(whole)
		return l, nil
	}
}

// next reads one row.
func (c *csv) next() (Row, error) {
	first, err := c.line()
	if err != nil {
		return Row{}, err
	}
	s := splitter{comma: c.comma, cells: make([]string, 0, c.width)}
	code := s.add(first.text)
	if first.tooLong {
		code = "row_too_long"
	}
	var more []line
	size := len(first.text)
	for code == "" && s.open {
		l, err := c.line()
		if err == io.EOF {
			code = "row_quote_open"
			break
		}
		if err != nil {
			return Row{}, err
		}
		more = append(more, l)
		size += len(l.text) + 1
		if code = s.add(l.text); code == "" && (l.tooLong || size > mostRow) {
			code = "row_too_long"
		}
		if s.open && len(s.cell) > mostCell*utf8.UTFMax {
			code = "row_quote_open"
		}
	}
	// A row over several lines that has another number of cells than the rest
	// is more likely two stray quotation marks.
	if code == "" && len(more) > 0 && c.width > 0 && len(s.cells) != c.width {
		code = "row_quote_open"
	}
	row := Row{Cells: s.cells}
	if code != "" {
		row.Problems = append(row.Problems, problem(code))
		for i := len(more) - 1; i >= 0; i-- {
			c.again = append(c.again, more[i])
		}
		return row, nil
	}
	if c.width == 0 {
		c.width = len(s.cells)
	}
	return row, nil
}

// A splitter parts the lines of one row into cells.
type splitter struct {
	comma byte
	cells []string
	cell  []byte // in quotation marks, so far
	open  bool   // the quotation mark is not closed yet
}

// add takes the next line of the row. The code is row_quote_stray where a
// quotation mark stands within a cell that does not begin with one, or does
// not end a cell that does.
func (s *splitter) add(line string) (code string) {
	if s.open {
		s.cell = append(s.cell, '\n')
	}
	for {
		switch {
		case s.open:
			i := strings.IndexByte(line, '"')
			if i < 0 {
				s.cell = append(s.cell, line...)
				return ""
			}
			s.cell = append(s.cell, line[:i]...)
			if line = line[i+1:]; strings.HasPrefix(line, `"`) {
				s.cell = append(s.cell, '"')
				line = line[1:]
				continue
			}
			s.open = false
			s.cells = append(s.cells, string(s.cell))
			if line == "" {
				return ""
			}
			if line[0] != s.comma {
				return "row_quote_stray"
			}
			line = line[1:]
		case strings.HasPrefix(line, `"`):
			s.open, s.cell, line = true, s.cell[:0], line[1:]
		default:
			end := strings.IndexByte(line, s.comma)
			last := end < 0
			if last {
				end = len(line)
			}
			s.cells = append(s.cells, line[:end])
			switch {
			case strings.IndexByte(line[:end], '"') >= 0:
				return "row_quote_stray"
			case last:
				return ""
			}
			line = line[end+1:]
		}
	}
}
