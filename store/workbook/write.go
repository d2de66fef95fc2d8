package workbook

import (
	_ "embed"
	"fmt"
	"io"
	"slices"
	"strconv"
	"strings"
	"time"
	"unicode/utf8"

	"github.com/xuri/excelize/v2"

	"weighhouse/model"
)

// spareRows is how far down drop-downs reach at least.
const spareRows = 1000

// mostText is how many UTF-16 units a cell holds.
const mostText = 32_767

// Write writes a scorecard as a workbook. A scorecard that compiles also gets
// the sheet "Try it". The error is w's own, or a Problem of code
// text_too_long.
func Write(w io.Writer, s model.Scorecard) error {
	edition, _ := model.Compile(s)
	return write(w, s, func(b *builder) {
		if edition != nil {
			b.tryIt(s, edition)
		}
	})
}

// FileName is a name for the workbook of an edition: product, edition and the
// day it comes into force.
func FileName(c model.Card) string {
	if c.ProductCode == "" {
		return "scorecard-blank.xlsx"
	}
	return fmt.Sprintf("%s-edition-%d-%s.xlsx", c.ProductCode, c.Edition, c.InForceFrom)
}

//go:embed example.txt
var exampleText string

// Blank writes the workbook that head office fills in: every sheet and header,
// what can be said beforehand, and a worked example on a sheet of its own.
func Blank(w io.Writer) error {
	var s model.Scorecard
	s.Card.Format = 1
	s.Card.HowMade = model.Estimated
	s.Card.LogOddsOf = model.OfDefault
	s.Card.ResultShown = model.WhenComplete
	return write(w, s, func(b *builder) {
		example, _ := model.ParseCanonical(exampleText)
		b.example(example)
	})
}

// builder is a workbook in the making. The first error stops the rest.
type builder struct {
	f   *excelize.File
	err error

	// Styles: headers that are locked and not, names of items, other locked
	// cells, numbers in columns, and unlocked cells by number format.
	header, heading, name, locked, number int
	open                                  map[int]int
}

func (b *builder) do(err error) {
	if b.err == nil {
		b.err = err
	}
}

func write(w io.Writer, s model.Scorecard, more func(*builder)) error {
	b := &builder{f: excelize.NewFile(), open: map[int]int{}}
	defer b.f.Close()
	b.styles()
	forms := model.Forms()
	for i, sheet := range s.Sheets() {
		b.sheet(forms[i], sheet)
	}
	more(b)
	b.do(b.f.DeleteSheet("Sheet1"))
	b.f.SetActiveSheet(0)
	yes := true
	b.do(b.f.SetCalcProps(&excelize.CalcPropsOptions{FullCalcOnLoad: &yes}))
	b.do(b.f.SetDocProps(&excelize.DocProperties{Title: s.Card.Title, Creator: "Weighhouse"}))
	if b.err != nil {
		return b.err
	}
	return b.f.Write(w)
}

// Number formats: text is marked as text so that a spreadsheet makes no date
// of what is typed there.
const (
	generalFormat = 0
	textFormat    = 49
	dateFormat    = -1 // 1 Mar 2026, or a year alone
)

func (b *builder) styles() {
	style := func(s *excelize.Style) int {
		if s.Alignment == nil {
			s.Alignment = &excelize.Alignment{Horizontal: "left", WrapText: true}
		}
		s.Alignment.Vertical = "top"
		id, err := b.f.NewStyle(s)
		b.do(err)
		return id
	}
	bold := &excelize.Font{Bold: true, Family: "Calibri", Size: 11}
	rule := []excelize.Border{{Type: "bottom", Color: "000000", Style: 1}}
	unlocked := &excelize.Protection{Locked: false}
	b.header = style(&excelize.Style{Font: bold, Border: rule, NumFmt: textFormat})
	b.heading = style(&excelize.Style{Font: bold, Border: rule, NumFmt: textFormat, Protection: unlocked})
	b.name = style(&excelize.Style{Font: bold, NumFmt: textFormat, Alignment: &excelize.Alignment{Horizontal: "left"}})
	b.locked = style(&excelize.Style{})
	b.number = style(&excelize.Style{Protection: unlocked, Alignment: &excelize.Alignment{Horizontal: "right", Indent: 1}})
	b.open[generalFormat] = style(&excelize.Style{Protection: unlocked})
	b.open[textFormat] = style(&excelize.Style{NumFmt: textFormat, Protection: unlocked})
	day := fmt.Sprintf("[<%d]0;d mmm yyyy", firstDay)
	b.open[dateFormat] = style(&excelize.Style{CustomNumFmt: &day, Protection: unlocked})
	// A guarded sheet lets a row be deleted only where none of its cells is
	// locked, so what no style is set for is open too.
	if b.err == nil {
		xfs := b.f.Styles.CellXfs.Xf
		xfs[0].Protection, xfs[0].ApplyProtection = xfs[b.open[generalFormat]].Protection, xfs[b.open[generalFormat]].ApplyProtection
	}
}

func formatFor(kind model.ColumnKind) int {
	switch kind {
	case model.NumberColumn, model.ValueColumn:
		return generalFormat
	case model.DateColumn:
		return dateFormat
	}
	return textFormat
}

// sheet writes one sheet of the scorecard.
func (b *builder) sheet(form model.SheetForm, sheet model.Sheet) {
	_, err := b.f.NewSheet(sheet.Name)
	b.do(err)
	if form.Items {
		b.items(form, sheet)
	} else {
		b.rows(form, sheet)
	}
	b.page(sheet.Name, true)
}

// Widths of the two columns of a sheet of items, in characters.
const itemWidth, valueWidth = 34.0, 56.0

// items writes a sheet of items: names in column A, values in column B.
func (b *builder) items(form model.SheetForm, sheet model.Sheet) {
	b.width(sheet.Name, 1, itemWidth)
	b.width(sheet.Name, 2, valueWidth)
	for i, name := range sheet.Columns {
		b.text(sheet.Name, i+1, 1, name, b.header)
		b.note(sheet.Name, refOf(i+1, 1), notes[sheet.Name][name])
	}
	for i, row := range sheet.Rows {
		column, ref := form.Columns[i], refOf(2, i+2)
		b.text(sheet.Name, 1, i+2, row[0], b.name)
		b.note(sheet.Name, refOf(1, i+2), notes[sheet.Name][column.Name])
		b.do(b.f.SetCellStyle(sheet.Name, ref, ref, b.open[formatFor(column.Kind)]))
		b.value(sheet.Name, 2, i+2, row[1], column.Kind)
		b.dropDown(sheet.Name, ref, column)
		b.height(sheet.Name, i+2, row, []float64{itemWidth, valueWidth})
	}
}

// rows writes a sheet with a header and a row for each thing it lists.
func (b *builder) rows(form model.SheetForm, sheet model.Sheet) {
	last := max(spareRows, len(sheet.Rows)+100)
	widths := columnWidths(sheet)
	for i, name := range sheet.Columns {
		column, fixed := columnOf(form, name)
		letter, style := columnName(i+1), b.open[formatFor(column.Kind)]
		if column.Kind == model.NumberColumn {
			style = b.number
		}
		b.do(b.f.SetColStyle(sheet.Name, letter, style))
		b.width(sheet.Name, i+1, widths[i])
		if fixed {
			b.text(sheet.Name, i+1, 1, name, b.header)
			b.note(sheet.Name, refOf(i+1, 1), notes[sheet.Name][noteName(name)])
		} else {
			b.text(sheet.Name, i+1, 1, name, b.heading)
		}
		b.dropDown(sheet.Name, fmt.Sprintf("%s2:%s%d", letter, letter, last), column)
	}
	if form.Name == "Checks" || form.Name == "Covariance" { // room for further codes
		from, to := len(sheet.Columns)+1, len(sheet.Columns)+model.MostCharacteristics
		b.do(b.f.SetCellStyle(sheet.Name, refOf(from, 1), refOf(to, 1), b.heading))
	}
	b.height(sheet.Name, 1, sheet.Columns, widths)
	for r, row := range sheet.Rows {
		for i, text := range row {
			column, _ := columnOf(form, sheet.Columns[i])
			b.value(sheet.Name, i+1, r+2, text, column.Kind)
		}
		b.height(sheet.Name, r+2, row, widths)
	}
}

// noteName joins the numbered columns: Part 1 and Part 2 have one note.
func noteName(column string) string { return strings.TrimRight(column, " 0123456789") }

// pageWidth is how many characters of a landscape page can still be read.
const pageWidth = 170

// columnWidths fit the longest line of each column, but share a page's width.
func columnWidths(sheet model.Sheet) []float64 {
	most := 60
	for {
		widths := make([]float64, len(sheet.Columns))
		sum := 0.0
		for i, name := range sheet.Columns {
			least, longest := 8, 0
			if len(sheet.Rows) == 0 { // room for what is to come
				longest = 16
			}
			for _, word := range strings.Fields(name) {
				least = max(least, len(word)+3)
			}
			for _, row := range sheet.Rows {
				for line := range strings.Lines(row[i]) {
					longest = max(longest, utf8.RuneCountInString(line)+2)
				}
			}
			widths[i] = float64(max(least, min(longest, most)))
			sum += widths[i]
		}
		if most -= 4; sum <= pageWidth || most < 16 {
			return widths
		}
	}
}

// height makes a row as high as its texts need when they are wrapped: not
// every program works that out when it opens a file.
func (b *builder) height(sheet string, row int, texts []string, widths []float64) {
	most := 1
	for i, text := range texts {
		lines := 0
		for line := range strings.Lines(text) {
			lines++
			room := int(widths[i]) - 2
			for _, word := range strings.Fields(line) {
				if n := utf8.RuneCountInString(word) + 1; room >= n {
					room -= n
				} else {
					lines++
					room = int(widths[i]) - 2 - n
				}
			}
		}
		most = max(most, lines)
	}
	if most > 1 {
		b.do(b.f.SetRowHeight(sheet, row, float64(min(15*most, 400))))
	}
}

// page sets what every sheet has: the header row always in sight and on every
// printed page, one page wide; and the headers guarded against a slip, with no
// password.
func (b *builder) page(sheet string, guard bool) {
	b.do(b.f.SetPanes(sheet, &excelize.Panes{Freeze: true, YSplit: 1, TopLeftCell: "A2", ActivePane: "bottomLeft"}))
	landscape, one, any, fit := "landscape", 1, 0, true
	b.do(b.f.SetPageLayout(sheet, &excelize.PageLayoutOptions{Orientation: &landscape, FitToWidth: &one, FitToHeight: &any}))
	b.do(b.f.SetSheetProps(sheet, &excelize.SheetPropsOptions{FitToPage: &fit}))
	b.do(b.f.SetHeaderFooter(sheet, &excelize.HeaderFooterOptions{OddFooter: "&L&F&C&A&R&P / &N"}))
	b.do(b.f.SetDefinedName(&excelize.DefinedName{Name: "_xlnm.Print_Titles", RefersTo: "'" + sheet + "'!$1:$1", Scope: sheet}))
	if guard {
		b.do(b.f.ProtectSheet(sheet, &excelize.SheetProtectionOptions{
			SelectLockedCells: true, SelectUnlockedCells: true, FormatCells: true, FormatColumns: true, FormatRows: true,
			InsertColumns: true, InsertRows: true, DeleteColumns: true, DeleteRows: true, Sort: true, AutoFilter: true, EditObjects: true,
		}))
	}
}

func (b *builder) width(sheet string, col int, width float64) {
	b.do(b.f.SetColWidth(sheet, columnName(col), columnName(col), width))
}

// text writes a text with a style.
func (b *builder) text(sheet string, col, row int, text string, style int) {
	ref := refOf(col, row)
	b.string(sheet, ref, text)
	b.do(b.f.SetCellStyle(sheet, ref, ref, style))
}

// string refuses what the library would cut without a word.
func (b *builder) string(sheet, ref, text string) {
	units := 0
	for _, r := range text {
		units++
		if r > 0xFFFF {
			units++
		}
	}
	if units > mostText {
		b.do(model.Problem{Code: "text_too_long", Place: model.Place{Sheet: sheet, Cell: ref}, Args: model.Args{"most": strconv.Itoa(mostText)}})
		return
	}
	b.do(b.f.SetCellStr(sheet, ref, text))
}

// value writes canonical text as what the column holds: a number as a number,
// a date as a date.
func (b *builder) value(sheet string, col, row int, text string, kind model.ColumnKind) {
	ref := refOf(col, row)
	switch kind {
	case model.NumberColumn, model.DateColumn, model.ValueColumn:
		if day, err := time.Parse(time.DateOnly, text); err == nil {
			b.do(b.f.SetCellFloat(sheet, ref, float64(dayNumber(day)), -1, 64))
			b.do(b.f.SetCellStyle(sheet, ref, ref, b.open[dateFormat]))
			return
		}
		if f, err := strconv.ParseFloat(text, 64); err == nil {
			b.do(b.f.SetCellFloat(sheet, ref, f, -1, 64))
			return
		}
	}
	if text != "" {
		b.string(sheet, ref, text)
	}
}

// dayNumber counts from 30 December 1899.
func dayNumber(day time.Time) int {
	return int((day.Unix() - time.Date(1899, 12, 30, 0, 0, 0, 0, time.UTC).Unix()) / (24 * 60 * 60))
}

// dropDown offers what the cells of an area may say: the options of a closed
// list, which nothing else passes, or the codes of the characteristics.
func (b *builder) dropDown(sheet, area string, column model.Column) {
	dv := excelize.NewDataValidation(true)
	dv.SetSqref(area)
	dv.ShowErrorMessage = true
	switch {
	case len(column.Options) > 0:
		b.do(dv.SetDropList(column.Options))
	case column.Kind == model.YesNoColumn:
		b.do(dv.SetDropList([]string{model.Yes, model.No}))
	case column.Kind == model.CodeColumn && sheet != "Characteristics" && (column.Name == "Characteristic" || strings.HasPrefix(column.Name, "Part ")):
		dv.SetSqrefDropList(fmt.Sprintf("Characteristics!$A$2:$A$%d", spareRows))
		dv.ShowErrorMessage = false
	default:
		return
	}
	b.do(b.f.AddDataValidation(sheet, dv))
}

// note hangs a note on a cell.
func (b *builder) note(sheet, ref, text string) {
	if text == "" {
		return
	}
	b.do(b.f.AddComment(sheet, excelize.Comment{Cell: ref, Author: "Weighhouse", Text: text, Width: commentWidth, Height: commentHeight(text)}))
}

// commentWidth and commentHeight are in pixels, for the text in full.
const commentWidth = 260

func commentHeight(text string) uint {
	lines := 1
	for line := range strings.Lines(text) {
		lines += 1 + len(line)/38
	}
	return uint(18 * lines)
}

// example writes a whole small scorecard on one sheet, sheet under sheet.
func (b *builder) example(s model.Scorecard) {
	_, err := b.f.NewSheet(exampleSheet)
	b.do(err)
	b.text(exampleSheet, 1, 1, "A worked example, sheet by sheet. Nothing on this sheet is read.", b.name)
	row := 3
	for _, sheet := range s.Sheets() {
		if len(sheet.Rows) == 0 {
			continue
		}
		form, _ := formOf(sheet.Name)
		b.text(exampleSheet, 1, row, sheet.Name, b.name)
		row++
		for i, name := range sheet.Columns {
			b.text(exampleSheet, i+1, row, name, b.header)
		}
		b.height(exampleSheet, row, sheet.Columns, exampleWidths(len(sheet.Columns)))
		for r, cells := range sheet.Rows {
			row++
			for i, text := range cells {
				column, _ := columnOf(form, sheet.Columns[i])
				if form.Items {
					column = form.Columns[r]
				}
				ref := refOf(i+1, row)
				b.do(b.f.SetCellStyle(exampleSheet, ref, ref, b.locked))
				b.value(exampleSheet, i+1, row, text, column.Kind)
			}
			b.height(exampleSheet, row, cells, exampleWidths(len(cells)))
		}
		row += 2
	}
	for i, width := range exampleWidths(23) {
		b.width(exampleSheet, i+1, width)
	}
	b.page(exampleSheet, false)
}

// exampleWidths are the widths of the example's first n columns.
func exampleWidths(n int) []float64 {
	return append([]float64{itemWidth}, slices.Repeat([]float64{20}, n-1)...)
}
