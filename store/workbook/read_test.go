package workbook

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"strings"
	"testing"
	"time"

	"github.com/xuri/excelize/v2"

	"weighhouse/model"
)

// spoilt is the workbook of kinds after change.
func spoilt(t testing.TB, change func(*excelize.File) error) *Reading {
	t.Helper()
	f, err := excelize.OpenReader(bytes.NewReader(written(t, kinds(t))))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := change(f); err != nil {
		t.Fatal(err)
	}
	var b bytes.Buffer
	if err := f.Write(&b); err != nil {
		t.Fatal(err)
	}
	return read(b.Bytes())
}

// Attributes!F3 holds the log-odds 0.1 of trade.stall; Card!B7 the edition,
// B12 the issuing day; Characteristics!B2 a question.
func TestCellsOfColumns(t *testing.T) {
	set := func(sheet, cell string, value any) func(*excelize.File) error {
		return func(f *excelize.File) error { return f.SetCellValue(sheet, cell, value) }
	}
	styled := func(sheet, cell string, value any, numberFormat int) func(*excelize.File) error {
		return func(f *excelize.File) error {
			id, err := f.NewStyle(&excelize.Style{NumFmt: numberFormat})
			if err != nil {
				return err
			}
			if err := f.SetCellValue(sheet, cell, value); err != nil {
				return err
			}
			return f.SetCellStyle(sheet, cell, cell, id)
		}
	}
	formula := func(sheet, cell string, value any) func(*excelize.File) error {
		return func(f *excelize.File) error {
			if err := f.SetCellValue(sheet, cell, value); err != nil {
				return err
			}
			return f.SetCellFormula(sheet, cell, "1+1")
		}
	}
	for _, c := range []struct {
		name   string
		change func(*excelize.File) error
		want   []string
	}{
		{"formula for a number", formula("Attributes", "F3", 0.1), []string{"Attributes!F3 formula"}},
		{"formula for a code", formula("Attributes", "B3", "stall"), []string{"Attributes!B3 formula", "and more"}},
		{"formula for a text", formula("Attributes", "C3", 0.1), []string{"Attributes!C3 formula_in_text"}},
		{"date for a number", styled("Attributes", "F3", 46082, 14), []string{"Attributes!F3 date_in_number"}},
		{"percentage for a number", styled("Attributes", "F3", 0.1, 10), nil},
		{"yes for a number", set("Attributes", "F3", true), []string{"Attributes!F3 not_a_number"}},
		{"word for a number", set("Attributes", "F3", "none"), []string{"Attributes!F3 not_a_number"}},
		{"number as text", set("Attributes", "F3", "0.1"), []string{`Attributes!F3 number_as_text reading="0.1" value="0.1"`}},
		{"number as text, two ways", set("Bands", "F2", "2,000"), []string{`Bands!F2 number_as_text_unclear reading_a="2000" reading_b="2" value="2,000"`}},
		{"number of many digits", set("Attributes", "F3", 0.1000000000001), []string{`Attributes!F3 rounded rounded="0.1" value="0.1000000000001"`}},
		{"number in a text", set("Characteristics", "B2", 12.5), nil},
		{"date in a text", styled("Characteristics", "B2", 46082, 14), []string{"Characteristics!B2 not_text"}},
		{"percentage in a text", styled("Characteristics", "B2", 0.1, 9), []string{"Characteristics!B2 not_text"}},
		{"truth in a text", set("Characteristics", "B2", true), []string{"Characteristics!B2 not_text"}},
		{"truth for yes", set("Characteristics", "P4", true), nil},
		{"capitals in a list", set("Characteristics", "M2", "Scored"), nil},
		{"not in the list", set("Characteristics", "M2", "used"), []string{"Characteristics!M2 not_in_list", "and more"}},
		{"blanks around", set("Attributes", "B3", " stall "), []string{"Attributes!B3 text_trimmed"}},
		{"date as text", set("Card", "B13", "2026-02-01"), []string{"Card!B13 date_as_text"}},
		{"number for a date", set("Card", "B13", 12), []string{"Card!B13 not_a_date"}},
		{"number as text in a rule", set("Rules", "E2", "18"), []string{`Rules!E2 number_as_text`}},
		{"number as text in a check", set("Checks", "B2", "1,000"), []string{`Checks!B2 number_as_text_unclear`}},
		{"capitals in a header", set("Attributes", "F1", "LOG-ODDS"), nil},
		{"unknown column", set("Attributes", "M1", "Colour"), []string{"Attributes!M1 unknown_column"}},
		{"content without header", set("Attributes", "M4", "blue"), []string{"Attributes!M4 column_without_header"}},
		{"missing column", set("Attributes", "A1", ""), []string{"Attributes! missing_column", "Attributes!A2 column_without_header"}},
		{"missing item", func(f *excelize.File) error { return f.RemoveRow("Card", 8) }, []string{"Card! missing_item"}},
		{"unknown item", set("Card", "A40", "Colour"), []string{"Card!A40 unknown_item"}},
		{"unknown sheet", func(f *excelize.File) error { _, err := f.NewSheet("Prices"); return err }, []string{"Prices! unknown_sheet"}},
		{"missing sheet", func(f *excelize.File) error { return f.DeleteSheet("Bands") }, []string{"Bands! missing_sheet"}},
		{"blank row between", func(f *excelize.File) error { return f.InsertRows("Attributes", 4, 1) }, nil},
		{"gap between bands", set("Bands", "C3", 0.06), []string{`Bands!C3 band_gap`}},
		{"swapped sign", set("Attributes", "F7", 0.3), []string{"Checks!N2 check_log_odds_differ", "and more"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			rd := spoilt(t, c.change)
			var got []string
			for _, p := range rd.Problems {
				line := p.Place.Sheet + "!" + p.Place.Cell + " " + p.Code
				for _, k := range []string{"reading", "reading_a", "reading_b", "rounded"} {
					if v, ok := p.Args[k]; ok {
						line += fmt.Sprintf(" %s=%q", k, v)
					}
				}
				if v := p.Args["value"]; len(c.want) > 0 && strings.Contains(c.want[0], "value=") {
					line += fmt.Sprintf(" value=%q", v)
				}
				got = append(got, line)
			}
			if n := len(c.want) - 1; n >= 0 && c.want[n] == "and more" {
				c.want = c.want[:n]
				got = got[:min(n, len(got))]
			}
			if len(got) != len(c.want) {
				t.Fatalf("got %q, want %q", got, c.want)
			}
			for i := range c.want {
				if !strings.HasPrefix(got[i], c.want[i]) {
					t.Fatalf("got %q, want %q", got, c.want)
				}
			}
		})
	}
}

// inside replaces text in a part of a workbook.
func inside(t testing.TB, file []byte, part, old, new string) []byte {
	t.Helper()
	z, err := zip.NewReader(bytes.NewReader(file), int64(len(file)))
	if err != nil {
		t.Fatal(err)
	}
	var parts []zipPart
	found := false
	for _, f := range z.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		b, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		text := string(b)
		if f.Name == part && strings.Contains(text, old) {
			text, found = strings.Replace(text, old, new, 1), true
		}
		parts = append(parts, zipPart{f.Name, text})
	}
	if !found {
		t.Fatalf("%s does not hold %q", part, old)
	}
	return zipped(t, parts)
}

// A cell that shows an error is refused, and nothing more is said of it.
func TestErrorValue(t *testing.T) {
	file := inside(t, written(t, kinds(t)), "xl/worksheets/sheet4.xml", `<c r="F3"`, `<c r="F3" t="e"`)
	rd := read(inside(t, file, "xl/worksheets/sheet4.xml", `<v>0.1</v>`, `<v>#REF!</v>`))
	if got := strings.Join(said(rd.Problems), ", "); got != "Attributes!F3 error_value" {
		t.Error(got)
	}
}

// A sheet cut in half is refused whole: no row of it is taken for all.
func TestCutSheet(t *testing.T) {
	file := written(t, kinds(t))
	rd := read(inside(t, file, "xl/worksheets/sheet4.xml", `<row r="9"`, `<row`+"\x00"))
	if len(rd.Problems) != 1 || rd.Problems[0].Code != "file_damaged" || rd.Problems[0].Args["part"] != "xl/worksheets/sheet4.xml" {
		t.Error(rd.Problems)
	}
}

// The copies: values in place of formulas, and problems as comments.
func TestCopies(t *testing.T) {
	rd := spoilt(t, func(f *excelize.File) error {
		for cell, value := range map[string]any{"F3": 0.25, "C3": "Stall"} {
			if err := f.SetCellValue("Attributes", cell, value); err != nil {
				return err
			}
			if err := f.SetCellFormula("Attributes", cell, "1+1"); err != nil {
				return err
			}
		}
		return f.SetCellValue("Bands", "C3", 0.06)
	})
	var pasted, annotated bytes.Buffer
	if err := rd.PasteValues(&pasted); err != nil {
		t.Fatal(err)
	}
	again := read(pasted.Bytes())
	if again.Scorecard.Attributes[1].LogOdds != rd.Scorecard.Attributes[1].LogOdds {
		t.Error("another value pasted")
	}
	for _, p := range again.Problems {
		if strings.HasPrefix(p.Code, "formula") {
			t.Error(p)
		}
	}

	say := func(p model.Problem) string { return "Here: " + p.Code }
	if err := rd.Annotate(&annotated, say); err != nil {
		t.Fatal(err)
	}
	// Twice, so that a comment of ours is merged as well.
	twice := read(annotated.Bytes())
	annotated.Reset()
	if err := twice.Annotate(&annotated, say); err != nil {
		t.Fatal(err)
	}
	if got, want := said(read(annotated.Bytes()).Problems), said(rd.Problems); strings.Join(got, ", ") != strings.Join(want, ", ") {
		t.Errorf("the copy reads as %q, want %q", got, want)
	}
	f, err := excelize.OpenReader(&annotated)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	comments, err := f.GetComments("Bands")
	if err != nil {
		t.Fatal(err)
	}
	if len(comments) != len(rd.Scorecard.Sheets()[5].Columns)+1 {
		t.Errorf("%d comments", len(comments))
	}
	for _, c := range comments {
		if c.Cell == "C3" && !strings.Contains(c.Text, "Here: band_gap") {
			t.Errorf("comment %q", c.Text)
		}
	}
	rows, err := f.GetRows(problemsSheet)
	if err != nil || len(rows) != len(rd.Problems)+1 {
		t.Errorf("%d rows of problems, %v", len(rows), err)
	}
}

// A problem with a header joins the note that hangs there.
func TestAnnotateKeepsNotes(t *testing.T) {
	rd := spoilt(t, func(f *excelize.File) error { return f.SetCellValue("Attributes", "G1", "Log-odds") })
	var b bytes.Buffer
	if err := rd.Annotate(&b, func(p model.Problem) string { return p.Code }); err != nil {
		t.Fatal(err)
	}
	f, err := excelize.OpenReader(&b)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	comments, err := f.GetComments("Attributes")
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range comments {
		if c.Cell == "F1" && (!strings.Contains(c.Text, "repeated_column") || !strings.Contains(c.Text, notes["Attributes"]["Log-odds"])) {
			t.Errorf("comment %q", c.Text)
		}
	}
}

func FuzzRead(f *testing.F) {
	f.Add(written(f, kinds(f)))
	f.Add(zipped(f, handMade(sheetOf(`<cols><col min="1" max="2" width="3"/></cols><sheetData><row r="1"><c r="A1" t="s"><v>0</v></c><c><f>1</f><v>2</v></c></row></sheetData><mergeCells><mergeCell ref="A1:B2"/></mergeCells>`))))
	for _, name := range []string{"table.xls", "table.ods", "table.fods"} {
		f.Add(kept(f, name))
	}
	f.Fuzz(func(t *testing.T, b []byte) {
		began := time.Now()
		rd := read(b)
		if d := time.Since(began); d > 20*time.Second {
			t.Errorf("took %v", d)
		}
		if rd.Edition == nil && len(rd.Problems) == 0 {
			t.Error("refused without a word")
		}
		if rd.book != nil && (rd.book.parts.left < 0 || rd.book.cells > mostCells) {
			t.Error("limits passed")
		}
	})
}

// FuzzSheet keeps the zip file whole and lets the XML of one sheet go wrong.
func FuzzSheet(f *testing.F) {
	f.Add(sheetOf(`<sheetData><row r="1"><c r="A1" t="inlineStr"><is><t>Band</t></is></c><c r="B1" t="s"><v>0</v></c></row><row r="2"><c s="2"><v>46082</v></c><c t="b"><v>1</v></c></row></sheetData>`))
	f.Add(sheetOf(`<sheetData><row hidden="1"><c><f t="array" ref="A1:C3">1</f><v>1E-3</v></c></row></sheetData><mergeCells><mergeCell ref="A1:B2"/></mergeCells>`))
	f.Fuzz(func(t *testing.T, sheet string) {
		if rd := read(zipped(t, handMade(sheet))); len(rd.Problems) == 0 {
			t.Error("a workbook of one sheet was taken")
		}
	})
}
