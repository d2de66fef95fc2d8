package workbook

import (
	"encoding/xml"
	"strconv"
	"strings"
)

// The namespaces of a workbook's own XML: the usual one, and the strict one
// of ISO/IEC 29500.
const (
	mainSpace   = "http://schemas.openxmlformats.org/spreadsheetml/2006/main"
	strictSpace = "http://purl.oclc.org/ooxml/spreadsheetml/main"
)

func ours(name xml.Name, local string) bool {
	return name.Local == local && (name.Space == mainSpace || name.Space == strictSpace)
}

// A format is what a number format makes of a number.
type format uint8

const (
	plain format = iota
	percent
	dated // a date, a time or both
)

// readFormats reads the styles that cells point to.
func (bk *book) readFormats(part string) error {
	codes := map[string]format{}
	in := ""
	return bk.parts.each(part, func(depth int, e xml.StartElement) error {
		switch {
		case depth == 1 && !ours(e.Name, "styleSheet"):
			return errXML
		case depth == 2:
			in = ""
			if ours(e.Name, e.Name.Local) {
				in = e.Name.Local
			}
		case depth == 3 && in == "numFmts":
			codes[attr(e, "numFmtId")] = formatOf(attr(e, "formatCode"))
		case depth == 3 && in == "cellXfs":
			id := attr(e, "numFmtId")
			f, ok := codes[id]
			if !ok {
				n, _ := strconv.Atoi(id)
				f = builtIn(n)
			}
			bk.formats = append(bk.formats, f)
		}
		return nil
	})
}

// builtIn is the format of a number below 164, which files do not spell out:
// ISO/IEC 29500-1, 18.8.30, with the dates of East Asian and Thai programs.
func builtIn(id int) format {
	switch {
	case id == 9, id == 10, id == 67, id == 68:
		return percent
	case id >= 14 && id <= 22, id >= 27 && id <= 36, id >= 45 && id <= 47,
		id >= 50 && id <= 58, id >= 71 && id <= 81:
		return dated
	}
	return plain
}

// formatOf reads a format code such as `[$-409]d mmm yyyy;@` or `0.0%`.
func formatOf(code string) format {
	if strings.EqualFold(code, "general") || strings.EqualFold(code, "standard") {
		return plain
	}
	f := plain
	for i := 0; i < len(code); i++ {
		switch code[i] {
		case '"':
			end := strings.IndexByte(code[i+1:], '"')
			if end < 0 {
				return f
			}
			i += end + 1
		case '\\', '_', '*':
			i++
		case '[':
			end := strings.IndexByte(code[i:], ']')
			if end < 0 {
				return f
			}
			if strings.Trim(code[i+1:i+end], "HhMmSs") == "" { // elapsed hours, minutes or seconds
				return dated
			}
			i += end
		case '%':
			f = percent
		case 'y', 'Y', 'm', 'M', 'd', 'D', 'h', 'H', 's', 'S':
			return dated
		}
	}
	return f
}
