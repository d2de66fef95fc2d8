package model

import (
	"reflect"
	"slices"
)

// Sheets writes s as tables of canonical text, every sheet of Forms in order.
func (s Scorecard) Sheets() []Sheet {
	forms := Forms()
	return []Sheet{
		itemSheet(forms[0], s.Card),
		rowSheet(forms[1], s.Characteristics),
		rowSheet(forms[2], s.Attributes),
		rowSheet(forms[3], s.Lines),
		rowSheet(forms[4], s.Computed),
		rowSheet(forms[5], s.Bands),
		rowSheet(forms[6], s.Rules),
		itemSheet(forms[7], s.Terms),
		rowSheet(forms[8], s.Overrides),
		s.checkSheet(forms[9]),
		s.covarianceSheet(forms[10]),
		rowSheet(forms[11], s.Words),
	}
}

func itemSheet[T any](form SheetForm, row T) Sheet {
	sheet := Sheet{Name: form.Name, Columns: []string{"Item", "Value"}}
	eachField(reflect.ValueOf(row), func(name string, _ reflect.StructTag, v reflect.Value) {
		sheet.Rows = append(sheet.Rows, []string{name, cellText(v)})
	})
	return sheet
}

func rowSheet[T any](form SheetForm, rows []T) Sheet {
	sheet := Sheet{Name: form.Name, Columns: form.names()}
	for _, row := range rows {
		var cells []string
		eachField(reflect.ValueOf(row), func(_ string, _ reflect.StructTag, v reflect.Value) {
			cells = append(cells, cellText(v))
		})
		sheet.Rows = append(sheet.Rows, cells)
	}
	return sheet
}

func (f SheetForm) names() []string {
	names := make([]string, len(f.Columns))
	for i, c := range f.Columns {
		names[i] = c.Name
	}
	return names
}

// checkSheet puts a column for each asked characteristic after the first.
func (s Scorecard) checkSheet(form SheetForm) Sheet {
	asked := s.AskedCodes()
	names := form.names()
	sheet := Sheet{Name: form.Name, Columns: append(append(names[:1:1], asked...), names[1:]...)}
	for _, c := range s.Checks {
		cells := []string{c.Code}
		for _, code := range asked {
			cells = append(cells, c.answer(code))
		}
		sheet.Rows = append(sheet.Rows, append(cells, c.Seen, c.LogOdds.String(), c.PD.String(),
			c.Score.String(), c.Band, string(c.Recommendation)))
	}
	return sheet
}

func (c Check) answer(code string) string {
	for _, a := range c.Answers {
		if a.Characteristic == code {
			return a.Answer
		}
	}
	return ""
}

func (s Scorecard) covarianceSheet(form SheetForm) Sheet {
	sheet := Sheet{Name: form.Name, Columns: form.names()}
	if s.Covariance == nil {
		return sheet
	}
	sheet.Columns = append(sheet.Columns, s.Covariance.Names...)
	for i, row := range s.Covariance.Values {
		cells := []string{textAt(s.Covariance.Names, i)}
		for _, v := range row {
			cells = append(cells, v.String())
		}
		sheet.Rows = append(sheet.Rows, cells)
	}
	return sheet
}

// AskedCodes are the codes of what is asked, in order: amount and term first
// where the workbook does not list them, then every characteristic that is
// not computed.
func (s Scorecard) AskedCodes() []string {
	var codes []string
	for _, c := range s.withReserved() {
		if c.Kind != Computed && c.Code != "" && !slices.Contains(codes, c.Code) {
			codes = append(codes, c.Code)
		}
	}
	return codes
}

// withReserved puts amount and term before the characteristics where the
// workbook leaves them out.
func (s Scorecard) withReserved() []Characteristic {
	list := s.Characteristics
	for _, code := range []string{Term, Amount} {
		if s.characteristic(code) < 0 {
			c := Characteristic{Code: code, Kind: Numeric, Use: Recorded}
			if code == Amount {
				c.Decimals = s.Terms.MoneyDecimals
			}
			list = append([]Characteristic{c}, list...)
		}
	}
	return list
}

// characteristic is the place of a code among the workbook's rows, or -1.
func (s Scorecard) characteristic(code string) int {
	for i, c := range s.Characteristics {
		if c.Code == code {
			return i
		}
	}
	return -1
}
