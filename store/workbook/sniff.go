package workbook

import (
	"archive/zip"
	"bytes"
	"encoding/binary"
	"slices"
	"strings"
	"unicode/utf16"
	"unicode/utf8"

	"github.com/richardlehane/mscfb"

	"weighhouse/model"
)

// mostZipped is how many bytes a workbook file may have.
const mostZipped = 20 << 20

const (
	oleMagic   = "\xD0\xCF\x11\xE0\xA1\xB1\x1A\xE1"
	zipMagic   = "PK\x03\x04"
	emptyMagic = "PK\x05\x06"
)

// problem is a Problem about the file as a whole; args go in pairs.
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

// sniff tells what kind of file b is by its bytes alone, never by its name,
// and opens it when it is a zip file. The problem's code says what else it is.
func sniff(b []byte) (*zip.Reader, error) {
	switch {
	case len(b) == 0:
		return nil, problem("file_empty")
	case len(b) > mostZipped:
		return nil, problem("file_too_large", "most", "20")
	case bytes.HasPrefix(b, []byte(oleMagic)):
		return nil, sniffOLE(b)
	case bytes.HasPrefix(b, []byte(zipMagic)):
		z, err := zip.NewReader(bytes.NewReader(b), int64(len(b)))
		if err != nil {
			// The table of contents stands at a zip file's end.
			return nil, problem("file_cut_short")
		}
		return z, nil
	case bytes.HasPrefix(b, []byte(emptyMagic)):
		return nil, problem("file_not_workbook")
	}
	return nil, sniffText(b)
}

// sniffOLE names what is inside the older container of office files.
func sniffOLE(b []byte) error {
	file, err := mscfb.New(bytes.NewReader(b))
	if err != nil {
		return problem("file_not_workbook")
	}
	var names []string
	for _, entry := range file.File {
		if len(entry.Path) == 0 {
			names = append(names, entry.Name)
		}
	}
	has := func(name string) bool { return slices.Contains(names, name) }
	switch {
	case has("EncryptedPackage"):
		return problem("file_password")
	case has("Workbook"), has("Book"):
		return problem("file_old_format")
	case has("WordDocument"):
		return problem("file_other_office", "kind", "document")
	case has("PowerPoint Document"):
		return problem("file_other_office", "kind", "slides")
	}
	return problem("file_not_workbook")
}

// sniffText tells text from other bytes that are no container.
func sniffText(b []byte) error {
	head := b[:min(len(b), 4096)]
	if big := bytes.HasPrefix(head, []byte{0xFE, 0xFF}); big || bytes.HasPrefix(head, []byte{0xFF, 0xFE}) {
		head = fromUTF16(head[2:], big)
	}
	// A character may be cut where head ends.
	for i := 0; i < utf8.UTFMax && len(head) > 0 && !utf8.Valid(head); i++ {
		head = head[:len(head)-1]
	}
	text := string(head)
	if len(head) == 0 || !utf8.ValidString(text) {
		// Older programs write tables in an 8-bit encoding: no zero bytes, and
		// no control characters but line ends and tabs.
		text = strings.ToValidUTF8(string(b[:min(len(b), 4096)]), "?")
	}
	if strings.HasPrefix(text, "%PDF-") || strings.ContainsFunc(text, isControl) {
		return problem("file_not_workbook")
	}
	switch lower := strings.ToLower(text); {
	case strings.Contains(lower, "urn:oasis:names:tc:opendocument"):
		return problem("file_other_office", "kind", "opendocument")
	case strings.Contains(lower, "urn:schemas-microsoft-com:office:spreadsheet"):
		return problem("file_other_office", "kind", "xml_workbook")
	case strings.Contains(lower, "<html"):
		return problem("file_other_office", "kind", "web_page")
	}
	return problem("file_text")
}

func isControl(r rune) bool { return r < ' ' && r != '\n' && r != '\r' && r != '\t' }

func fromUTF16(b []byte, big bool) []byte {
	var order binary.ByteOrder = binary.LittleEndian
	if big {
		order = binary.BigEndian
	}
	units := make([]uint16, len(b)/2)
	for i := range units {
		units[i] = order.Uint16(b[2*i:])
	}
	return []byte(string(utf16.Decode(units)))
}
