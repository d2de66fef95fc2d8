package model

import (
	"fmt"
	"sort"
	"strings"
)

// A Problem is one thing that is wrong, or worth a question, as a code and
// its arguments. It is never a sentence: app/words words it in the reader's
// language.
type Problem struct {
	// Code names the kind of problem, such as "band_gap"; app/words has a
	// message for each.
	Code string
	// Place is where it was found.
	Place Place
	// Args fill the message's blanks. Numbers are in canonical text.
	Args Args
	// Warning is true when the matter is to be said, but stops nothing.
	Warning bool
}

// Args are the named blanks of a Problem's message.
type Args map[string]string

// A Place is a cell of a scorecard's sheets, or a field of an application.
// The zero value is no place in particular.
type Place struct {
	// Sheet is the English sheet name, such as "Attributes", or "Answers" for
	// an application.
	Sheet string
	// Row counts the sheet's rows under the header from 1; 0 is the whole sheet.
	Row int
	// Column is the header of the column, or for an application the
	// characteristic's code.
	Column string
	// Cell is the address in the workbook, such as "D7", where one is known.
	Cell string
}

// Error makes a Problem usable as an error. The text is for logs and tests;
// people read app/words.
func (p Problem) Error() string {
	var b strings.Builder
	if p.Place.Sheet != "" {
		fmt.Fprintf(&b, "%s", p.Place.Sheet)
		switch {
		case p.Place.Cell != "":
			fmt.Fprintf(&b, "!%s", p.Place.Cell)
		case p.Place.Row > 0:
			fmt.Fprintf(&b, " row %d", p.Place.Row)
		}
		if p.Place.Column != "" {
			fmt.Fprintf(&b, " (%s)", p.Place.Column)
		}
		b.WriteString(": ")
	}
	b.WriteString(p.Code)
	keys := make([]string, 0, len(p.Args))
	for k := range p.Args {
		keys = append(keys, k)
	}
	sort.Strings(keys)
	for _, k := range keys {
		fmt.Fprintf(&b, " %s=%q", k, p.Args[k])
	}
	return b.String()
}
