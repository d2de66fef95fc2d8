package model

import (
	"reflect"
	"slices"
)

// FromSheets reads a scorecard from tables of canonical text and lists every
// cell that does not read, every sheet, column and item that is missing or
// not known. Sheets and columns may come in any order. What is listed is left
// at its zero value, so that further problems can still be looked for.
func FromSheets(sheets []Sheet) (Scorecard, []Problem) {
	d := decoder{sheets: map[string]Sheet{}}
	forms := Forms()
	for _, sheet := range sheets {
		known := slices.ContainsFunc(forms, func(f SheetForm) bool { return f.Name == sheet.Name })
		switch _, twice := d.sheets[sheet.Name]; {
		case !known:
			d.warn(Problem{Code: "unknown_sheet", Place: Place{Sheet: sheet.Name}, Args: Args{"value": sheet.Name}})
		case twice:
			d.add(Problem{Code: "repeated_sheet", Place: Place{Sheet: sheet.Name}, Args: Args{"value": sheet.Name}})
		default:
			d.sheets[sheet.Name] = sheet
		}
	}
	for _, f := range forms {
		if _, ok := d.sheets[f.Name]; !ok && !f.Optional {
			d.add(Problem{Code: "missing_sheet", Place: Place{Sheet: f.Name}, Args: Args{"value": f.Name}})
		}
	}
	var s Scorecard
	decodeItems(&d, forms[0], &s.Card)
	s.Characteristics = decodeRows[Characteristic](&d, forms[1])
	s.Attributes = decodeRows[Attribute](&d, forms[2])
	s.Lines = decodeRows[Line](&d, forms[3])
	s.Computed = decodeRows[Formula](&d, forms[4])
	s.Bands = decodeRows[Band](&d, forms[5])
	s.Rules = decodeRows[Rule](&d, forms[6])
	decodeItems(&d, forms[7], &s.Terms)
	s.Overrides = decodeRows[Override](&d, forms[8])
	s.Checks = d.checks(forms[9], s.AskedCodes())
	s.Covariance = d.covariance(forms[10])
	s.Words = decodeRows[Wording](&d, forms[11])
	return s, d.problems
}

type decoder struct {
	sheets   map[string]Sheet
	problems []Problem
}

func (d *decoder) add(p Problem)  { d.problems = append(d.problems, p) }
func (d *decoder) warn(p Problem) { p.Warning = true; d.add(p) }

// cell reads one cell and lists its problem, if it has one.
func (d *decoder) cell(v reflect.Value, c Column, place Place, text string) {
	if err := setCell(v, c, text); err != nil {
		p := err.(Problem)
		p.Place = place
		d.add(p)
	}
}

// columns finds each fixed column's place in the sheet, -1 where it is
// missing, and lists missing, repeated and unknown ones. others are the names
// that may stand besides.
func (d *decoder) columns(sheet Sheet, form SheetForm, others []string) []int {
	at := make([]int, len(form.Columns))
	for i, c := range form.Columns {
		at[i] = slices.Index(sheet.Columns, c.Name)
		if at[i] < 0 && c.Required {
			d.add(Problem{Code: "missing_column", Place: Place{Sheet: form.Name, Column: c.Name}, Args: Args{"value": c.Name}})
		}
	}
	for i, name := range sheet.Columns {
		place := Place{Sheet: form.Name, Column: name}
		switch {
		case name == "":
		case slices.Index(sheet.Columns, name) < i:
			d.add(Problem{Code: "repeated_column", Place: place, Args: Args{"value": name}})
		case !slices.Contains(form.names(), name) && !slices.Contains(others, name):
			d.warn(Problem{Code: "unknown_column", Place: place, Args: Args{"value": name}})
		}
	}
	return at
}

func textAt(row []string, i int) string {
	if i < 0 || i >= len(row) {
		return ""
	}
	return row[i]
}

func decodeRows[T any](d *decoder, form SheetForm) []T {
	sheet, ok := d.sheets[form.Name]
	if !ok {
		return nil
	}
	at := d.columns(sheet, form, nil)
	rows := make([]T, len(sheet.Rows))
	for r, cells := range sheet.Rows {
		i := 0
		eachField(reflect.ValueOf(&rows[r]).Elem(), func(name string, _ reflect.StructTag, v reflect.Value) {
			if at[i] >= 0 {
				d.cell(v, form.Columns[i], Place{Sheet: form.Name, Row: r + 1, Column: name}, textAt(cells, at[i]))
			}
			i++
		})
	}
	return rows
}

// decodeItems reads a sheet of items and values. A problem with an item's
// value has the item's name for its column.
func decodeItems[T any](d *decoder, form SheetForm, row *T) {
	sheet, ok := d.sheets[form.Name]
	if !ok {
		return
	}
	at := d.columns(sheet, SheetForm{Name: form.Name, Columns: []Column{{Name: "Item", Required: true}, {Name: "Value", Required: true}}}, nil)
	if at[0] < 0 || at[1] < 0 {
		return
	}
	values, rowOf := map[string]string{}, map[string]int{}
	for r, cells := range sheet.Rows {
		item, place := textAt(cells, at[0]), Place{Sheet: form.Name, Row: r + 1, Column: "Item"}
		switch {
		case item == "":
			d.add(Problem{Code: "missing_value", Place: place})
		case !slices.Contains(form.names(), item):
			d.warn(Problem{Code: "unknown_item", Place: place, Args: Args{"value": item}})
		case rowOf[item] > 0:
			d.add(Problem{Code: "repeated_item", Place: place, Args: Args{"value": item}})
		default:
			values[item], rowOf[item] = textAt(cells, at[1]), r+1
		}
	}
	i := 0
	eachField(reflect.ValueOf(row).Elem(), func(name string, _ reflect.StructTag, v reflect.Value) {
		c := form.Columns[i]
		i++
		if rowOf[name] == 0 && c.Required {
			d.add(Problem{Code: "missing_item", Place: Place{Sheet: form.Name, Column: name}, Args: Args{"value": name}})
			return
		}
		d.cell(v, c, Place{Sheet: form.Name, Row: rowOf[name], Column: name}, values[name])
	})
}

func (d *decoder) checks(form SheetForm, asked []string) []Check {
	sheet, ok := d.sheets[form.Name]
	if !ok {
		return nil
	}
	at := d.columns(sheet, form, asked)
	for _, code := range asked {
		if !slices.Contains(sheet.Columns, code) {
			d.add(Problem{Code: "missing_column", Place: Place{Sheet: form.Name, Column: code}, Args: Args{"value": code}})
		}
	}
	checks := make([]Check, len(sheet.Rows))
	for r, cells := range sheet.Rows {
		c := &checks[r]
		for _, code := range asked {
			if text := textAt(cells, slices.Index(sheet.Columns, code)); text != "" {
				c.Answers = append(c.Answers, CheckAnswer{code, text})
			}
		}
		fields := []any{&c.Code, &c.Seen, &c.LogOdds, &c.PD, &c.Score, &c.Band, &c.Recommendation}
		for i, field := range fields {
			d.cell(reflect.ValueOf(field).Elem(), form.Columns[i],
				Place{Sheet: form.Name, Row: r + 1, Column: form.Columns[i].Name}, textAt(cells, at[i]))
		}
	}
	return checks
}

func (d *decoder) covariance(form SheetForm) *Covariance {
	sheet, ok := d.sheets[form.Name]
	if !ok || (len(sheet.Rows) == 0 && len(sheet.Columns) <= 1) {
		return nil
	}
	c := &Covariance{}
	var columns []int
	for i, name := range sheet.Columns {
		if i > 0 && name != "" {
			c.Names = append(c.Names, name)
			columns = append(columns, i)
		}
	}
	if len(sheet.Rows) != len(c.Names) {
		d.add(Problem{Code: "covariance_not_square", Place: Place{Sheet: form.Name}})
		return nil
	}
	for r, cells := range sheet.Rows {
		if textAt(cells, 0) != c.Names[r] {
			d.add(Problem{Code: "covariance_names_differ", Place: Place{Sheet: form.Name, Row: r + 1, Column: form.Columns[0].Name},
				Args: Args{"value": textAt(cells, 0), "expected": c.Names[r]}})
		}
		values := make([]Covar, len(c.Names))
		for i := range values {
			d.cell(reflect.ValueOf(&values[i]).Elem(), CovarianceColumn,
				Place{Sheet: form.Name, Row: r + 1, Column: c.Names[i]}, textAt(cells, columns[i]))
		}
		c.Values = append(c.Values, values)
	}
	return c
}
