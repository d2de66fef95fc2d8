package model

import (
	"encoding"
	"fmt"
	"reflect"
	"slices"
	"strconv"
	"strings"
)

// A Sheet is one table of a scorecard in canonical cell text: what a workbook
// reader hands over and a workbook writer gets.
type Sheet struct {
	Name    string
	Columns []string
	Rows    [][]string // as long as Columns each; blank cells are ""
}

// ColumnKind is what a column's cells hold.
type ColumnKind int

const (
	TextColumn   ColumnKind = iota // any text
	CodeColumn                     // [a-z][a-z0-9_]*
	ListColumn                     // one of Options
	YesNoColumn                    // yes or no; blank is no
	NumberColumn                   // a number, or a fraction shown as percent
	DateColumn                     // a date
	ValueColumn                    // a number, a date, or text: what a rule compares with, or a check's answer
)

// A Column describes one column, or one item of an item sheet.
type Column struct {
	Name     string
	Kind     ColumnKind
	Options  []string
	Required bool
	// Places and Digits are the most decimal places and significant digits a
	// number may have; the reader of a workbook rounds to them and says so.
	Places, Digits int
}

// A SheetForm describes a sheet.
type SheetForm struct {
	Name string
	// Items tells that the sheet has the columns Item and Value, and a row for
	// each of Columns.
	Items bool
	// Optional tells that the sheet may be left out.
	Optional bool
	// Columns are the fixed columns. Checks has a column for each asked
	// characteristic after its first, and Covariance one for each coefficient.
	Columns []Column
}

// Forms describes every sheet of a workbook in order.
func Forms() []SheetForm {
	return []SheetForm{
		{Name: "Card", Items: true, Columns: columnsOf[Card]()},
		{Name: "Characteristics", Columns: columnsOf[Characteristic]()},
		{Name: "Attributes", Columns: columnsOf[Attribute]()},
		{Name: "Lines", Optional: true, Columns: columnsOf[Line]()},
		{Name: "Computed", Optional: true, Columns: columnsOf[Formula]()},
		{Name: "Bands", Columns: columnsOf[Band]()},
		{Name: "Rules", Optional: true, Columns: columnsOf[Rule]()},
		{Name: "Terms", Items: true, Columns: columnsOf[Terms]()},
		{Name: "Overrides", Optional: true, Columns: columnsOf[Override]()},
		{Name: "Checks", Columns: checkColumns()},
		{Name: "Covariance", Optional: true, Columns: []Column{{Name: "Coefficient", Kind: TextColumn, Required: true}}},
		{Name: "Words", Optional: true, Columns: columnsOf[Wording]()},
	}
}

// CheckAnswerColumn is the form of the columns of Checks that hold answers.
var CheckAnswerColumn = Column{Kind: ValueColumn, Places: MostDecimals, Digits: 12}

// CovarianceColumn is the form of the columns of Covariance that hold numbers.
var CovarianceColumn = Column{Kind: NumberColumn, Places: 40, Digits: 12, Required: true}

// checkColumns are those before and after the answers.
func checkColumns() []Column {
	return []Column{
		{Name: "Check", Kind: CodeColumn, Required: true},
		{Name: "Seen", Kind: TextColumn},
		{Name: "Log-odds", Kind: NumberColumn, Places: 9, Digits: 15, Required: true},
		{Name: "PD", Kind: NumberColumn, Places: 9, Digits: 12, Required: true},
		{Name: "Score", Kind: NumberColumn, Places: 6, Digits: 12, Required: true},
		{Name: "Band", Kind: CodeColumn, Required: true},
		{Name: "Recommendation", Kind: ListColumn, Options: Approve.Options(), Required: true},
	}
}

// columnsOf reads the columns from a row type's tags.
func columnsOf[T any]() []Column {
	var columns []Column
	eachField(reflect.ValueOf(new(T)).Elem(), func(name string, tag reflect.StructTag, v reflect.Value) {
		c := Column{Name: name, Required: tag.Get("need") == "yes", Kind: TextColumn}
		switch x := v.Addr().Interface().(type) {
		case interface{ Options() []string }:
			c.Kind, c.Options = ListColumn, x.Options()
		case *bool:
			c.Kind = YesNoColumn
		case *Date, *Maybe[Date]:
			c.Kind = DateColumn
		case *Value:
			c.Kind, c.Places, c.Digits = ValueColumn, MostDecimals, 12
		case *Count, *Maybe[Count]:
			c.Kind, c.Digits = NumberColumn, 10
		case *Number, *Maybe[Number]:
			c.Kind, c.Places, c.Digits = NumberColumn, MostDecimals, 12
		case *LogOdds, *Maybe[LogOdds]:
			c.Kind, c.Places, c.Digits = NumberColumn, 9, 15
		case *PD, *Maybe[PD], *Rate, *Maybe[Rate]:
			c.Kind, c.Places, c.Digits = NumberColumn, 9, 12
		case *Maybe[Slope]:
			c.Kind, c.Places, c.Digits = NumberColumn, 15, 12
		case *string:
			if tag.Get("as") == "code" {
				c.Kind = CodeColumn
			}
		}
		columns = append(columns, c)
	})
	return columns
}

// eachField calls f for each tagged field of a row, and for the parts of a
// formula in turn, numbered.
func eachField(row reflect.Value, f func(name string, tag reflect.StructTag, v reflect.Value)) {
	for i := range row.NumField() {
		field, v := row.Type().Field(i), row.Field(i)
		if name := field.Tag.Get("col"); name != "" {
			f(name, field.Tag, v)
			continue
		}
		for n := range v.Len() { // Formula.Parts
			eachField(v.Index(n), func(name string, tag reflect.StructTag, v reflect.Value) {
				f(fmt.Sprintf("%s %d", name, n+1), tag, v)
			})
		}
	}
}

// setCell reads canonical text into a field. Errors are Problems.
func setCell(v reflect.Value, c Column, text string) error {
	switch {
	case text == "" && c.Required:
		return Problem{Code: "missing_value"}
	case c.Kind == CodeColumn && text != "" && !IsCode(text):
		return Problem{Code: "bad_code", Args: Args{"value": text}}
	case c.Kind == ListColumn && text != "" && !slices.Contains(c.Options, text):
		return Problem{Code: "not_in_list", Args: Args{"value": text, "options": strings.Join(c.Options, ", ")}}
	case c.Kind == NumberColumn && significant(text) > c.Digits:
		return Problem{Code: "too_many_digits", Args: Args{"value": text, "most": strconv.Itoa(c.Digits)}}
	}
	if t, ok := v.Addr().Interface().(encoding.TextUnmarshaler); ok {
		if text == "" {
			v.SetZero()
			return nil
		}
		return t.UnmarshalText([]byte(text))
	}
	if v.Kind() == reflect.Bool {
		if text != "" && text != Yes && text != No {
			return Problem{Code: "not_in_list", Args: Args{"value": text, "options": "yes, no"}}
		}
		v.SetBool(text == Yes)
		return nil
	}
	v.SetString(plainText(text))
	return nil
}

// cellText writes a field as canonical text.
func cellText(v reflect.Value) string {
	if t, ok := v.Interface().(encoding.TextMarshaler); ok {
		b, _ := t.MarshalText() // none of our types can fail
		return string(b)
	}
	if v.Kind() == reflect.Bool {
		if v.Bool() {
			return Yes
		}
		return ""
	}
	return v.String()
}

// significant counts the significant digits of a decimal.
func significant(text string) int {
	text, _, _ = strings.Cut(strings.TrimPrefix(text, "-"), "E")
	whole, fraction, _ := strings.Cut(text, ".")
	digits := strings.TrimLeft(whole+strings.TrimRight(fraction, "0"), "0")
	if fraction == "" {
		digits = strings.TrimRight(digits, "0")
	}
	return len(digits)
}

// IsCode tells whether text may be a code: a small letter, then small
// letters, digits and underscores, 64 at the most.
func IsCode(text string) bool {
	if text == "" || len(text) > 64 || text[0] < 'a' || text[0] > 'z' {
		return false
	}
	for _, c := range []byte(text) {
		if c != '_' && (c < 'a' || c > 'z') && (c < '0' || c > '9') {
			return false
		}
	}
	return true
}
