package model

import (
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"math/big"
	"strings"

	"golang.org/x/text/unicode/norm"
)

// canonicalHead is the first line of every canonical text.
const canonicalHead = "weighhouse scorecard 1"

// A Fingerprint is the SHA-256 of an edition's canonical text: its identity.
type Fingerprint [sha256.Size]byte

// String is 64 hexadecimal digits.
func (f Fingerprint) String() string { return hex.EncodeToString(f[:]) }

// ParseFingerprint reads what String wrote.
func ParseFingerprint(text string) (Fingerprint, error) {
	var f Fingerprint
	b, err := hex.DecodeString(text)
	if err != nil || len(b) != len(f) {
		return f, Problem{Code: "bad_fingerprint", Args: Args{"value": text}}
	}
	copy(f[:], b)
	return f, nil
}

// TelephoneCode is the first 128 bits modulo 10^24 as six groups of four
// digits: two people can compare editions by telephone in any language.
func (f Fingerprint) TelephoneCode() string {
	n := new(big.Int).SetBytes(f[:16])
	n.Mod(n, new(big.Int).Exp(big.NewInt(10), big.NewInt(24), nil))
	digits := fmt.Sprintf("%024d", n)
	var groups []string
	for i := 0; i < len(digits); i += 4 {
		groups = append(groups, digits[i:i+4])
	}
	return strings.Join(groups, " ")
}

// Canonical is the one text of s: its sheets in order, each a line with its
// name, a line of columns, then a line a row; cells are parted by tabs, and a
// tab, a line end or a backslash in a cell is escaped. Optional sheets without
// rows and the blank items of Card and Terms are left out. Text is NFC.
func (s Scorecard) Canonical() string { return canonicalText(s.Sheets()) }

func canonicalText(sheets []Sheet) string {
	var b strings.Builder
	b.WriteString(canonicalHead + "\n")
	forms := Forms()
	for i, sheet := range sheets {
		if len(sheet.Rows) == 0 && forms[i].Optional {
			continue
		}
		b.WriteString(sheet.Name + "\n")
		writeCells(&b, sheet.Columns)
		for _, row := range sheet.Rows {
			if sheet.Columns[0] == "Item" && row[1] == "" {
				continue
			}
			writeCells(&b, row)
		}
	}
	return b.String()
}

var escaper = strings.NewReplacer(`\`, `\\`, "\t", `\t`, "\n", `\n`)

var lineEnds = strings.NewReplacer("\r\n", "\n", "\r", "\n")

// plainText is text in the one form that is kept: NFC, lines ended by \n.
func plainText(text string) string { return norm.NFC.String(lineEnds.Replace(text)) }

func writeCells(b *strings.Builder, cells []string) {
	for i, cell := range cells {
		if i > 0 {
			b.WriteByte('\t')
		}
		b.WriteString(escaper.Replace(plainText(cell)))
	}
	b.WriteByte('\n')
}

// Fingerprint is the SHA-256 of Canonical.
func (s Scorecard) Fingerprint() Fingerprint { return sha256.Sum256([]byte(s.Canonical())) }

// ParseCanonical reads what Canonical wrote.
func ParseCanonical(text string) (Scorecard, []Problem) {
	head, rest, _ := strings.Cut(text, "\n")
	if head != canonicalHead {
		return Scorecard{}, []Problem{{Code: "not_canonical"}}
	}
	var sheets []Sheet
	fresh := false
	for line := range strings.Lines(rest) {
		line = strings.TrimSuffix(line, "\n")
		if !strings.Contains(line, "\t") {
			sheets = append(sheets, Sheet{Name: line})
			fresh = true
			continue
		}
		cells := strings.Split(line, "\t")
		for i, cell := range cells {
			cells[i] = unescape(cell)
		}
		switch {
		case len(sheets) == 0:
			return Scorecard{}, []Problem{{Code: "not_canonical"}}
		case fresh:
			sheets[len(sheets)-1].Columns, fresh = cells, false
		default:
			last := &sheets[len(sheets)-1]
			last.Rows = append(last.Rows, cells)
		}
	}
	return FromSheets(sheets)
}

func unescape(cell string) string {
	if !strings.Contains(cell, `\`) {
		return cell
	}
	var b strings.Builder
	for i := 0; i < len(cell); i++ {
		if cell[i] != '\\' || i+1 == len(cell) {
			b.WriteByte(cell[i])
			continue
		}
		i++
		switch cell[i] {
		case 't':
			b.WriteByte('\t')
		case 'n':
			b.WriteByte('\n')
		default:
			b.WriteByte(cell[i])
		}
	}
	return b.String()
}
