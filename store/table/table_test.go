package table

import (
	"fmt"
	"io"
	"os"
	"reflect"
	"runtime"
	"strings"
	"testing"
	"unicode/utf8"

	"weighhouse/model"
)

// stall is a small edition with every kind of question.
func stall(t testing.TB) *model.Edition {
	t.Helper()
	text, err := os.ReadFile("testdata/stall.txt")
	if err != nil {
		t.Fatal(err)
	}
	card, problems := model.ParseCanonical(string(text))
	if problems != nil {
		t.Fatal(problems)
	}
	edition, problems := model.Compile(card)
	if edition == nil {
		t.Fatal(problems)
	}
	return edition
}

var today = model.Date{Year: 2026, Month: 3, Day: 2}

// readAll reads every row that is left.
func readAll(t testing.TB, in io.Reader) (header []string, rows []Row, err error) {
	t.Helper()
	r, err := NewReader(in)
	if err != nil {
		return nil, nil, err
	}
	for {
		row, err := r.Read()
		if err == io.EOF {
			return r.Header(), rows, nil
		}
		if err != nil {
			return r.Header(), rows, err
		}
		rows = append(rows, row)
	}
}

func codes(problems []model.Problem) string {
	var list []string
	for _, p := range problems {
		code := p.Code
		if p.Place.Column != "" {
			code = p.Place.Column + ":" + code
		}
		list = append(list, code)
	}
	return strings.Join(list, " ")
}

// Rows are told as number, cells with | between and problems.
func TestRows(t *testing.T) {
	long := strings.Repeat("é", mostCell)
	for _, c := range []struct{ name, in, want string }{
		{"comma", "a,b\n1,2\n", "a|b; 1 1|2"},
		{"semicolon", "a;b\n1,5;2\n", "a|b; 1 1,5|2"},
		{"tab, byte order mark, CRLF, no end", "\uFEFFa\tb\r\n1\t2\r\n3\t4", "a|b; 1 1|2; 2 3|4"},
		{"blank rows count and are skipped", "\na,b\n\n1,2\n , \n3,4\n\n", "a|b; 2 1|2; 4 3|4"},
		{"blanks around cells", " a , b\n 1 ,\u00a02\u3000\n", "a|b; 1 1|2"},
		{"quoted", "a,b\n\"1,\"\"2\"\"\",\"x\r\ny\"\n", "a|b; 1 1,\"2\"|x\ny"},
		{"quoted header with another separator", "a;\"b,c\"\n1;2\n", "a|b,c; 1 1|2"},
		{"empty cells", "a,b,c\n,,\n,,1\n\"\",2,\n", "a|b|c; 2 ||1; 3 |2|"},
		{"separators at the end", "a,b,,\n1,2,,\n1,2\n1,2,3,\n", "a|b; 1 1|2; 2 1|2; 3 1|2|3| row_too_many_cells"},
		{"ragged", "a,b,c\n1,2\n1,2,3\n1,2,3,4\n", "a|b|c; 1 1|2 row_too_few_cells; 2 1|2|3; 3 1|2|3|4 row_too_many_cells"},
		{"bare quotation marks", "a,b\n5\",1\n\"x\"y,2\n3,4\n", "a|b; 1 5\" row_quote_stray; 2 x row_quote_stray; 3 3|4"},
		{"a quotation mark never closed", "a,b\n1,\"2\n3,4\n5,6\n", "a|b; 1 1 row_quote_open; 2 3|4; 3 5|6"},
		{"two stray quotation marks", "a,b\n1,\"2\n3,4\n5,6\",7\n8,9\n", "a|b; 1 1|2\n3,4\n5,6|7 row_quote_open; 2 3|4; 3 5|6\" row_quote_stray; 4 8|9"},
		{"the longest cell", "a,b\n" + long + ",2\n", "a|b; 1 " + long + "|2"},
		{"too long a cell", "a,b\nx" + long + ",2\n3,4\n", "a|b; 1 x" + long + "|2 a:cell_too_long; 2 3|4"},
		{"NUL and other control characters", "a,b\n1,\x00\n2,\x1b[2J\n3,4\n", "a|b; 1 1|\x00 b:cell_control_character; 2 2|\x1b[2J b:cell_control_character; 3 3|4"},
		{"Latin-1 in a row", "a,b\n1,\xe9\n2,é\n", "a|b; 1 1|\xe9 b:cell_not_utf8; 2 2|é"},
		{"right to left and combining", "a,b\n\u202eשלום,e\u0301\n", "a|b; 1 \u202eשלום|e\u0301"},
		{"one column", "a\n1\n", "a; 1 1"},
		{"header only", "a,b\n", "a|b"},
	} {
		header, rows, err := readAll(t, strings.NewReader(c.in))
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		got := strings.Join(header, "|")
		for _, row := range rows {
			got += fmt.Sprintf("; %d %s", row.Number, strings.Join(row.Cells, "|"))
			if len(row.Problems) > 0 {
				got += " " + codes(row.Problems)
			}
		}
		if got != c.want {
			t.Errorf("%s:\ngot  %.300q\nwant %.300q", c.name, got, c.want)
		}
	}
}

func TestRefusedTables(t *testing.T) {
	for _, c := range []struct{ name, in, want string }{
		{"empty", "", "table_empty"},
		{"only a byte order mark", "\uFEFF", "table_empty"},
		{"blank lines", "\n \r\n\n", "table_empty"},
		{"separators only", ",,,\n,\n", "table_empty"},
		{"two separators", "a,b;c\n1,2;3\n", "table_separator_unclear"},
		{"UTF-16", "\xff\xfea\x00,\x00b\x00\n\x00", "table_not_utf8"},
		{"UTF-16 without its mark", "a\x00,\x00b\x00\n\x00", "table_not_utf8"},
		{"Latin-1 header", "pr\xe9nom,b\n", "table_not_utf8"},
		{"old line ends", "a,b\r1,2\r", "table_header_unreadable"},
		{"header never closed", "a,\"b\n1,2\n", "table_header_unreadable"},
		{"too many columns", strings.Repeat("a,", mostColumns) + "a\n", "table_too_many_columns"},
		{"a zip file cut in half", "PK\x03\x04abc", "file_cut_short"},
		{"an old office file", "\xD0\xCF\x11\xE0\xA1\xB1\x1A\xE1", "file_not_workbook"},
	} {
		_, _, err := readAll(t, strings.NewReader(c.in))
		if p, _ := err.(model.Problem); p.Code != c.want {
			t.Errorf("%s: %v, want %s", c.name, err, c.want)
		}
	}
}

// endless is a header and then rows for ever, counted.
type endless struct {
	row   string
	left  string
	bytes int64
	most  int64
}

func (e *endless) Read(b []byte) (int, error) {
	if e.bytes >= e.most {
		return 0, io.EOF
	}
	if e.left == "" {
		e.left = e.row
	}
	n := copy(b, e.left)
	e.left = e.left[n:]
	e.bytes += int64(n)
	return n, nil
}

// However long a file, what is held of it stays the same; also where a
// quotation mark is never closed, or one line never ends.
func TestMemoryStaysFlat(t *testing.T) {
	for name, row := range map[string]string{
		"rows":             "1,2,3\n",
		"open quotation":   "1,\"2,3\n",
		"opened, no other": "1,2,\"3\n1,2,3\n1,2,3\n\"\"\n",
		"one endless line": "1,2,3,",
		"endless cell":     "1,\"2\",\"aaaaaaaaaaaaaaaaaaaaaaa",
		"endless row":      "\",\"x\n",
	} {
		in := &endless{left: "a,b,c\n", row: row, most: 16 << 20}
		r, err := NewReader(in)
		if err != nil {
			t.Fatal(err)
		}
		var most uint64
		for n := 0; ; n++ {
			_, err := r.Read()
			if err == io.EOF {
				break
			}
			if err != nil {
				t.Fatal(err)
			}
			if n%100_000 == 0 {
				var m runtime.MemStats
				runtime.GC()
				runtime.ReadMemStats(&m)
				most = max(most, m.HeapAlloc)
			}
		}
		if in.bytes < in.most {
			t.Errorf("%s: stopped after %d bytes", name, in.bytes)
		}
		if most > 8<<20 {
			t.Errorf("%s: %d bytes held", name, most)
		}
	}
}

func TestWorkbook(t *testing.T) {
	file, err := os.Open("testdata/applicants.xlsx")
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	r, err := NewReader(file)
	if err != nil {
		t.Fatal(err)
	}
	columns, problems := ColumnsOf(stall(t), r.Header())
	if got := codes(problems); got != "" {
		t.Fatal(got)
	}
	for _, want := range []struct {
		row      int
		problems string
		text     string
	}{
		{1, "", "on\t2026-03-02\nclient\tnew\namount\t1000\nterm\t12\nhome\town\tseen\nhas_stall\tyes\nstall_years\t7.5\nopened\t2019-05-01\nlate_days\t0\nhousehold\t612.3\n"},
		{3, "formula", ""},
		{4, "late_days:file_not_a_number", ""},
	} {
		row, err := r.Read()
		if err != nil {
			t.Fatal(err)
		}
		a := columns.Applicant(row, today, model.NewClients)
		if got := codes(a.Problems); got != want.problems || row.Number != want.row {
			t.Errorf("row %d: %s, want row %d: %s", row.Number, got, want.row, want.problems)
		}
		if want.text != "" && a.Answers.Text() != want.text {
			t.Errorf("got\n%s\nwant\n%s", a.Answers.Text(), want.text)
		}
	}
	if _, err := r.Read(); err != io.EOF {
		t.Error("no end:", err)
	}
}

// FuzzRows holds that nothing crashes, that a row is never longer than it may
// be, and that what is read again after writing it plainly is the same.
func FuzzRows(f *testing.F) {
	for _, seed := range []string{
		"a,b\n1,2\n", "\uFEFFa;b\r\n\"1;\"\"\";2", "a\tb\n\"\n\"\t1\n\"", "a,b\n\"x\"y,\n", "a\n\x00\n\xff\n",
		"a,b\n" + strings.Repeat("x", 3*mostCell) + ",\n", "a,b\n\"" + strings.Repeat("\n", mostCell), "a,b\n\u202e,e\u0301\n",
	} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, in []byte) {
		if strings.HasPrefix(string(in), "PK\x03\x04") {
			return // a workbook is another reader's
		}
		header, rows, err := readAll(t, strings.NewReader(string(in)))
		if err != nil {
			if _, ok := err.(model.Problem); !ok {
				t.Fatal(err)
			}
			return
		}
		var plain strings.Builder
		write := func(cells []string) {
			for i, cell := range cells {
				if i > 0 {
					plain.WriteByte(',')
				}
				plain.WriteString(`"` + strings.ReplaceAll(cell, `"`, `""`) + `"`)
			}
			plain.WriteByte('\n')
		}
		write(header)
		var good []Row
		last := 0
		for _, row := range rows {
			if row.Number <= last {
				t.Fatalf("row %d after row %d", row.Number, last)
			}
			last = row.Number
			if len(row.Problems) > 0 {
				continue
			}
			if len(row.Cells) != len(header) {
				t.Fatalf("%d cells under %d headers", len(row.Cells), len(header))
			}
			for _, cell := range row.Cells {
				if !utf8.ValidString(cell) || utf8.RuneCountInString(cell) > mostCell {
					t.Fatalf("%q", cell)
				}
			}
			write(row.Cells)
			row.Number = len(good) + 1
			good = append(good, row)
		}
		_, again, err := readAll(t, strings.NewReader(plain.String()))
		if err != nil {
			t.Fatal(err)
		}
		if len(again) != len(good) || len(good) > 0 && !reflect.DeepEqual(again, good) {
			t.Fatalf("%+v\nread again as\n%+v", good, again)
		}
	})
}
