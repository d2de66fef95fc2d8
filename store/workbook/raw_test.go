package workbook

import (
	"archive/zip"
	"bytes"
	"encoding/binary"
	"fmt"
	"os"
	"slices"
	"strings"
	"testing"
	"time"
	"unicode/utf16"

	"github.com/xuri/excelize/v2"

	"weighhouse/model"
)

// A zipPart is one file of a workbook built by hand.
type zipPart struct{ name, text string }

const (
	xmlHead   = `<?xml version="1.0" encoding="UTF-8" standalone="yes"?>`
	mainNS    = `xmlns="http://schemas.openxmlformats.org/spreadsheetml/2006/main"`
	relNS     = `xmlns:r="http://schemas.openxmlformats.org/officeDocument/2006/relationships"`
	relType   = "http://schemas.openxmlformats.org/officeDocument/2006/relationships/"
	sheetType = "application/vnd.openxmlformats-officedocument.spreadsheetml."
)

// sheetOf is a worksheet around the given children.
func sheetOf(children string) string {
	return xmlHead + `<worksheet ` + mainNS + `>` + children + `</worksheet>`
}

// handMade are the parts of a workbook with the sheet Bands. Style 1 is a
// percentage, style 2 a date, style 3 a date by a code of its own.
func handMade(sheet string) []zipPart {
	return []zipPart{
		{"[Content_Types].xml", xmlHead + `<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Default Extension="xml" ContentType="application/xml"/><Override PartName="/xl/workbook.xml" ContentType="` + sheetType + `sheet.main+xml"/><Override PartName="/xl/worksheets/sheet1.xml" ContentType="` + sheetType + `worksheet+xml"/></Types>`},
		{"_rels/.rels", xmlHead + `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="` + relType + `officeDocument" Target="xl/workbook.xml"/></Relationships>`},
		{"xl/workbook.xml", xmlHead + `<workbook ` + mainNS + ` ` + relNS + `><workbookPr/><sheets><sheet name="Bands" sheetId="1" r:id="rId1"/></sheets></workbook>`},
		{"xl/_rels/workbook.xml.rels", xmlHead + `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="` + relType + `worksheet" Target="worksheets/sheet1.xml"/><Relationship Id="rId2" Type="` + relType + `styles" Target="/xl/styles.xml"/><Relationship Id="rId3" Type="` + relType + `sharedStrings" Target="sharedStrings.xml"/></Relationships>`},
		{"xl/styles.xml", xmlHead + `<styleSheet ` + mainNS + `><numFmts count="1"><numFmt numFmtId="164" formatCode="[$-409]d\ mmm\ yyyy;@"/></numFmts><cellXfs count="4"><xf numFmtId="0"/><xf numFmtId="9"/><xf numFmtId="14"/><xf numFmtId="164"/></cellXfs></styleSheet>`},
		{"xl/sharedStrings.xml", xmlHead + `<sst ` + mainNS + `><si><t>low</t></si><si><r><t>be</t></r><r><t>fore</t></r><rPh sb="0" eb="1"><t>aid</t></rPh></si><si><t xml:space="preserve"> e_x0301_a_x000D_
b </t></si></sst>`},
		{"xl/worksheets/sheet1.xml", sheet},
	}
}

// edit replaces text in a part; the part is there and holds the text.
func edit(t *testing.T, parts []zipPart, name, old, new string) []zipPart {
	t.Helper()
	for i, p := range parts {
		if p.name == name && strings.Contains(p.text, old) {
			parts[i].text = strings.Replace(p.text, old, new, 1)
			return parts
		}
	}
	t.Fatalf("%s does not hold %q", name, old)
	return nil
}

func zipped(t testing.TB, parts []zipPart) []byte {
	t.Helper()
	var b bytes.Buffer
	z := zip.NewWriter(&b)
	for _, p := range parts {
		w, err := z.Create(p.name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := w.Write([]byte(p.text)); err != nil {
			t.Fatal(err)
		}
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func kept(t testing.TB, name string) []byte {
	t.Helper()
	b, err := os.ReadFile("../../testdata/workbooks/" + name)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func all(string) bool { return true }

// said is each problem as "Sheet!Cell code".
func said(problems []model.Problem) []string {
	var lines []string
	for _, p := range problems {
		line := p.Code
		if p.Place.Sheet != "" {
			line = p.Place.Sheet + "!" + p.Place.Cell + " " + line
		}
		lines = append(lines, line)
	}
	return lines
}

func TestRefusedFiles(t *testing.T) {
	empty := sheetOf(`<sheetData/>`)
	with := func(extra ...zipPart) []byte { return zipped(t, append(handMade(empty), extra...)) }
	typed := func(old, new string) []byte {
		return zipped(t, edit(t, handMade(empty), "[Content_Types].xml", old, new))
	}
	related := func(kind, target string) []byte {
		return zipped(t, edit(t, handMade(empty), "xl/_rels/workbook.xml.rels", "</Relationships>",
			`<Relationship Id="rId9" Type="`+relType+kind+`" Target="`+target+`"/></Relationships>`))
	}
	plain := with()
	var locked bytes.Buffer
	f := excelize.NewFile()
	if err := f.Write(&locked, excelize.Options{Password: "open sesame"}); err != nil {
		t.Fatal(err)
	}
	bomb := with(zipPart{"xl/media/image1.bin", strings.Repeat("\x00", mostUnzipped)})
	lying := slices.Clone(bomb)
	// The size in the table of contents of the last part, "xl/media/…": 24
	// bytes into its entry.
	entry := bytes.LastIndex(lying, []byte("PK\x01\x02"))
	binary.LittleEndian.PutUint32(lying[entry+24:], 10)
	damaged := slices.Clone(plain)
	damaged[bytes.Index(damaged, []byte("xl/styles.xml"))+40] ^= 0xFF

	for _, c := range []struct {
		name string
		file []byte
		want string
	}{
		{"empty", nil, "file_empty"},
		{"table as text", []byte("Band,PD from\nlow,0\n"), "file_text"},
		{"text in an 8-bit encoding", []byte("Libell\xe9;0,5\r\n"), "file_text"},
		{"text in UTF-16", []byte("\xff\xfeB\x00a\x00n\x00d\x00"), "file_text"},
		{"picture", []byte("\x89PNG\r\n\x1a\n\x00\x00\x00\rIHDR"), "file_not_workbook"},
		{"printed page", []byte("%PDF-1.7\n%text"), "file_not_workbook"},
		{"old format", kept(t, "table.xls"), "file_old_format"},
		{"old format cut short", kept(t, "table.xls")[:600], "file_not_workbook"},
		{"old text document", renameStream(kept(t, "table.xls"), "Workbook", "WordDocument"), "file_other_office document"},
		{"password", locked.Bytes(), "file_password"},
		{"OpenDocument", kept(t, "table.ods"), "file_other_office opendocument"},
		{"flat OpenDocument", kept(t, "table.fods"), "file_other_office opendocument"},
		{"XML of 2003", kept(t, "table2003.xml"), "file_other_office xml_workbook"},
		{"web page", kept(t, "table.html"), "file_other_office web_page"},
		{"text document", typed(sheetType+"sheet.main+xml", "application/vnd.openxmlformats-officedocument.wordprocessingml.document.main+xml"), "file_other_office document"},
		{"slides", typed(sheetType+"sheet.main+xml", "application/vnd.openxmlformats-officedocument.presentationml.presentation.main+xml"), "file_other_office slides"},
		{"binary workbook", typed(sheetType+"sheet.main+xml", "application/vnd.ms-excel.sheet.binary.macroEnabled.main"), "file_other_office binary_workbook"},
		{"macro workbook", typed(sheetType+"sheet.main+xml", "application/vnd.ms-excel.sheet.macroEnabled.main+xml"), "file_macros"},
		{"macro template", typed(sheetType+"sheet.main+xml", "application/vnd.ms-excel.template.macroEnabled.main+xml"), "file_macros"},
		{"macro project inside", with(zipPart{"xl/vbaProject.bin", "\x00"}), "file_macros"},
		{"macro sheet inside", related("xlMacrosheet", "styles.xml"), "file_macros"},
		{"connections", zipped(t, append(edit(t, handMade(empty), "[Content_Types].xml", "</Types>", `<Override PartName="/xl/connections.xml" ContentType="`+sheetType+`connections+xml"/></Types>`),
			zipPart{"xl/connections.xml", "<connections/>"})), "file_connections"},
		{"connections related", related("connections", "connections.xml"), "file_connections"},
		{"external link", related("externalLink", "externalLinks/externalLink1.xml"), "file_external_links"},
		{"picture from elsewhere", related("image", `file:///a.png" TargetMode="External`), "file_external_links"},
		{"address in a cell", related("hyperlink", `https://example.org/" TargetMode="External`), ""},
		{"zip of something else", zipped(t, []zipPart{{"letter.txt", "hello"}}), "file_not_workbook"},
		{"empty zip", zipped(t, nil), "file_not_workbook"},
		{"too large", append(slices.Clone(plain), make([]byte, mostZipped)...), "file_too_large"},
		{"zip bomb", bomb, "file_unzips_too_large"},
		{"zip bomb that lies", lying, "file_damaged"},
		{"repeated part", with(zipPart{"xl/Workbook.xml", ""}), "file_repeated_part"},
		{"repeated part, other slashes", with(zipPart{`xl\worksheets\sheet1.xml`, ""}), "file_repeated_part"},
		{"zip cut short", plain[:len(plain)/2], "file_cut_short"},
		{"damaged inside", damaged, "file_damaged"},
		{"sheet cut short", zipped(t, handMade(empty[:len(empty)-5])), "file_damaged"},
		{"two roots", zipped(t, handMade(empty+"<a/>")), "file_damaged"},
		{"text behind the root", zipped(t, handMade(empty+"a")), "file_damaged"},
		{"entities", zipped(t, handMade(strings.Replace(empty, "<worksheet", `<!DOCTYPE a [<!ENTITY b "c">]><worksheet`, 1))), "file_damaged"},
		{"attribute twice", zipped(t, handMade(sheetOf(`<sheetData><row r="1" r="2"/></sheetData>`))), "file_damaged"},
		{"nested deep", zipped(t, handMade(sheetOf(strings.Repeat("<a>", 1e5)+strings.Repeat("</a>", 1e5)))), "file_damaged"},
		{"two tables in a sheet", zipped(t, handMade(sheetOf(`<sheetData/><sheetData/>`))), "file_damaged"},
		{"unread part malformed", with(zipPart{"docProps/core.xml", "<a><b></a>"}), "file_damaged"},
		{"shared text that is not there", zipped(t, handMade(sheetOf(`<sheetData><row r="1"><c r="A1" t="s"><v>7</v></c></row></sheetData>`))), "file_damaged"},
		{"number that is none", zipped(t, handMade(sheetOf(`<sheetData><row r="1"><c r="A1"><v>0x1p3</v></c></row></sheetData>`))), "file_damaged"},
		{"1904 dates", zipped(t, edit(t, handMade(empty), "xl/workbook.xml", "<workbookPr/>", `<workbookPr date1904="1"/>`)), "file_1904_dates"},
		{"hidden sheet", zipped(t, edit(t, handMade(empty), "xl/workbook.xml", `sheetId="1"`, `sheetId="1" state="veryHidden"`)), "Bands! hidden_sheet"},
		{"sheet twice", zipped(t, edit(t, handMade(empty), "xl/workbook.xml", `</sheets>`, `<sheet name="bands" sheetId="2" r:id="rId2"/></sheets>`)), "Bands! repeated_sheet"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, problems := readBook(c.file, all)
			got := strings.Join(said(problems), ", ")
			if len(problems) == 1 && problems[0].Args["kind"] != "" {
				got += " " + problems[0].Args["kind"]
			}
			if got != c.want && !strings.EqualFold(got, c.want) {
				t.Errorf("got %q, want %q (%v)", got, c.want, problems)
			}
		})
	}
}

// renameStream renames a stream in the directory of an old office file.
func renameStream(file []byte, from, to string) []byte {
	wide := func(s string) []byte {
		b := make([]byte, 66)
		for i, u := range utf16.Encode([]rune(s)) {
			binary.LittleEndian.PutUint16(b[2*i:], u)
		}
		binary.LittleEndian.PutUint16(b[64:], uint16(2*len(s)+2))
		return b
	}
	return bytes.Replace(file, wide(from), wide(to), 1)
}

func TestRefusedSheets(t *testing.T) {
	cells := func(s string) string { return sheetOf("<sheetData>" + s + "</sheetData>") }
	for _, c := range []struct{ name, sheet, want string }{
		{"cell twice", cells(`<row r="6"><c r="C6"><v>1</v></c><c r="C6"><v>2</v></c></row>`), "Bands!C6 repeated_cell"},
		{"cell twice, apart", cells(`<row r="6"><c r="C6"/><c r="D6"/><c r="C6"><v>2</v></c></row>`), "Bands!C6 repeated_cell"},
		{"cell out of order", cells(`<row r="6"><c r="D6"/><c r="C6"><v>2</v></c></row>`), "Bands!C6 cell_out_of_order"},
		{"cell of another row", cells(`<row r="6"><c r="C7"><v>2</v></c></row>`), "Bands!C7 cell_out_of_order"},
		{"row twice", cells(`<row r="6"/><row r="6"><c r="C6"><v>2</v></c></row>`), "Bands!A6 repeated_row"},
		{"row out of order", cells(`<row r="6"/><row r="5"/>`), "Bands!A5 row_out_of_order"},
		{"merged", sheetOf(`<sheetData/><mergeCells count="2"><mergeCell ref="B2:C3"/><mergeCell ref="A1:A2"/></mergeCells>`), "Bands!B2 merged_cells, Bands!A1 merged_cells"},
		{"hidden rows", cells(`<row r="2" hidden="1"><c r="A2"><v>1</v></c></row><row r="3" ht="0"><c r="A3"><v>1</v></c></row><row r="4" hidden="1"/>`), "Bands!A2 hidden_rows"},
		{"hidden columns", sheetOf(`<cols><col min="2" max="3" width="9" hidden="1"/><col min="4" max="4" width="0"/><col min="9" max="16384" hidden="true"/></cols><sheetData><row r="1"><c r="C1"><v>1</v></c><c r="D1"><v>1</v></c></row></sheetData>`), "Bands!C1 hidden_columns"},
		{"nothing behind the hiding", sheetOf(`<cols><col min="2" max="16384" hidden="1"/></cols><sheetData><row r="1"><c r="A1"><v>1</v></c></row><row r="1048576" hidden="1"/></sheetData>`), ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, problems := readBook(zipped(t, handMade(c.sheet)), all)
			if got := strings.Join(said(problems), ", "); got != c.want {
				t.Errorf("got %q, want %q", got, c.want)
			}
		})
	}
}

func TestCells(t *testing.T) {
	sheet := sheetOf(`<sheetData><row r="1">` +
		`<c r="A1" t="s"><v>0</v></c><c r="B1" t="s"><v>1</v></c><c r="C1" t="s"><v>2</v></c>` +
		`<c r="D1" t="inlineStr"><is><t>in line</t></is></c><c r="E1" t="str"><f>A1</f><v>low</v></c>` +
		`<c r="F1" t="b"><v>1</v></c><c r="G1" t="e"><v>#N/A</v></c></row>` +
		`<row><c><v>1.2949999999999999</v></c><c><v>1E-3</v></c><c s="1"><v>0.12</v></c><c s="2"><v>46082</v></c>` +
		`<c s="3"><v>46082.25</v></c><c t="d"><v>2026-03-01T00:00:00</v></c><c s="2"><v>1985</v></c><c s="1"/><c><v>-0</v></c></row>` +
		`<row r="4"><c r="A4"><f t="array" ref="A4:B5">X</f><v>1</v></c><c r="B4"><v>2</v></c></row><row r="5"><c r="B5"><v>3</v></c><c r="C5"><v>4</v></c></row>` +
		`</sheetData>`)
	bk, problems := readBook(zipped(t, handMade(sheet)), all)
	if len(problems) > 0 {
		t.Fatal(problems)
	}
	var got []string
	for _, c := range bk.sheets[0].cells {
		line := fmt.Sprintf("%s %d %q", c.ref(), c.kind, c.text)
		for flag, on := range map[string]bool{" formula": c.formula, " percent": c.percent, " trimmed": c.trimmed} {
			if on {
				line += flag
			}
		}
		got = append(got, line)
	}
	want := []string{
		`A1 1 "low"`, `B1 1 "before"`, `C1 1 "éa\nb" trimmed`, `D1 1 "in line"`, `E1 1 "low" formula`, `F1 3 "yes"`, `G1 5 "#N/A"`,
		`A2 2 "1.295"`, `B2 2 "0.001"`, `C2 2 "0.12" percent`, `D2 4 "2026-03-01"`, `E2 4 "2026-03-01T06:00:00"`,
		`F2 4 "2026-03-01"`, `G2 4 "1985"`, `I2 2 "0"`,
		`A4 2 "1" formula`, `B4 2 "2" formula`, `B5 2 "3" formula`, `C5 2 "4"`,
	}
	if !slices.Equal(got, want) {
		t.Errorf("got  %q\nwant %q", got, want)
	}
}

// A million rows, blank but for their format, are refused without being
// stored; in a sheet that nobody asks for they are passed over.
func TestMillionRows(t *testing.T) {
	var b strings.Builder
	for r := 1; r <= 1_000_000; r++ {
		fmt.Fprintf(&b, `<row r="%d" s="1"><c r="A%d" s="1"/></row>`, r, r)
	}
	file := zipped(t, handMade(sheetOf("<sheetData>"+b.String()+"</sheetData>")))
	began := time.Now()
	_, problems := readBook(file, all)
	if got := said(problems); !slices.Equal(got, []string{"Bands! too_many_rows"}) {
		t.Errorf("got %q", got)
	}
	if d := time.Since(began); d > time.Second {
		t.Errorf("took %v", d)
	}
	bk, problems := readBook(file, func(string) bool { return false })
	if len(problems) > 0 || len(bk.sheets[0].cells) > 0 {
		t.Errorf("a sheet not asked for: %v", problems)
	}
}

func TestRound(t *testing.T) {
	for _, c := range []struct {
		in             string
		places, digits int
		want           string
	}{
		{"1.295", 9, 12, "1.295"},
		{"0.1234567895", 9, 12, "0.12345679"},
		{"0.1234567894999", 9, 12, "0.123456789"},
		{"-0.9999999996", 9, 12, "-1"},
		{"-0.0000000004", 9, 12, "0"},
		{"0.0000358351370123", 15, 12, "0.000035835137012"},
		{"123456789012345", 6, 12, "123456789012000"},
		{"999999999999.6", 6, 12, "1000000000000"},
		{"1250", 0, 12, "1250"},
		{"0.5", 0, 12, "1"},
	} {
		if got := round(c.in, c.places, c.digits); got != c.want {
			t.Errorf("round(%s, %d, %d) = %s, want %s", c.in, c.places, c.digits, got, c.want)
		}
	}
}

func TestReadings(t *testing.T) {
	for in, want := range map[string]string{
		"1,250.5":     "1250.5",
		"1.250,5":     "1250.5",
		"1,250":       "1250 1.25",
		"1.250":       "1.25 1250",
		"0.5":         "0.5",
		"0,5":         "0.5",
		"12 %":        "0.12 12",
		"12,5%":       "0.125 12.5",
		"1 250,50":    "1250.5",
		"1\u202f250":  "1250",
		"1'250":       "1250",
		"1,00,000":    "100000",
		"\u22120.5":   "-0.5",
		"1e-3":        "0.001",
		"12 34":       "",
		"100, 200":    "",
		"1,250 000":   "",
		"1,2,3":       "",
		"2026-03-01":  "",
		"amount":      "",
		"e5":          "",
		"":            "",
		"18 to 75":    "",
		"0.1.2":       "",
		"1,250.5.7":   "",
		"999999999,9": "999999999.9",
	} {
		if got := strings.Join(readings(in), " "); got != want {
			t.Errorf("readings(%q) = %q, want %q", in, got, want)
		}
	}
}

func TestFormatOf(t *testing.T) {
	for code, want := range map[string]format{
		"General": plain, "0.00": plain, `#,##0.00" days"`: plain, `0\d`: plain, "[Red]0.0": plain, "0.00E+00": plain,
		"0%": percent, "0.0\\ %": percent, "yyyy-mm-dd": dated, "[$-409]d mmm": dated, "[h]:mm": dated, "[ss]": dated, "@": plain,
	} {
		if got := formatOf(code); got != want {
			t.Errorf("formatOf(%q) = %d, want %d", code, got, want)
		}
	}
}
