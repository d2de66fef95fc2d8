package workbook

import (
	"bytes"
	"io"
	"maps"
	"slices"
	"strconv"
	"strings"
	"time"

	"github.com/xuri/excelize/v2"

	"weighhouse/model"
)

// Annotate writes a copy of the workbook that was read, with each problem as a
// comment on its cell (the first 1,000 of them) and all of them on a sheet of
// their own, in the words of say. A comment that a cell had already is kept.
// The error is w's own, or a Problem where the file cannot be copied.
func (rd *Reading) Annotate(w io.Writer, say func(model.Problem) string) error {
	return rd.copy(w, func(f *excelize.File) error {
		if err := rd.listProblems(f, say); err != nil {
			return err
		}
		for _, s := range rd.book.sheets {
			comments := map[string][]string{}
			for _, p := range rd.Problems[:min(len(rd.Problems), mostProblems)] {
				if p.Place.Cell != "" && strings.EqualFold(p.Place.Sheet, strings.TrimSpace(s.name)) {
					comments[p.Place.Cell] = append(comments[p.Place.Cell], say(p))
				}
			}
			if err := addComments(f, s.name, comments); err != nil {
				return err
			}
		}
		return nil
	})
}

// listProblems writes the sheet that lists them all.
func (rd *Reading) listProblems(f *excelize.File, say func(model.Problem) string) error {
	if err := f.DeleteSheet(problemsSheet); err != nil { // that of an earlier copy
		return err
	}
	if _, err := f.NewSheet(problemsSheet); err != nil {
		return err
	}
	if err := f.SetSheetRow(problemsSheet, "A1", &[]string{"Sheet", "Cell", "Problem"}); err != nil {
		return err
	}
	for i, p := range rd.Problems {
		if err := f.SetSheetRow(problemsSheet, refOf(1, i+2), &[]string{p.Place.Sheet, p.Place.Cell, say(p)}); err != nil {
			return err
		}
	}
	return f.SetColWidth(problemsSheet, "C", "C", 100)
}

// addComments hangs texts on cells. The library takes one comment a cell, so
// one that is there is merged, deleted and added again.
func addComments(f *excelize.File, sheet string, texts map[string][]string) error {
	old, err := f.GetComments(sheet)
	if err != nil {
		return err
	}
	for _, c := range old {
		added, ok := texts[c.Cell]
		if !ok {
			continue
		}
		before := c.Text
		for _, run := range c.Paragraph {
			before += run.Text
		}
		texts[c.Cell] = append(added, before)
		if err := f.DeleteComment(sheet, c.Cell); err != nil {
			return err
		}
	}
	for _, cell := range slices.Sorted(maps.Keys(texts)) {
		text := strings.Join(texts[cell], "\n")
		if err := f.AddComment(sheet, excelize.Comment{Cell: cell, Author: "Weighhouse", Text: text, Width: commentWidth, Height: commentHeight(text)}); err != nil {
			return err
		}
	}
	return nil
}

// PasteValues writes a copy of the workbook that was read in which the cells
// of its known sheets hold what their formulas last came to. Errors stay.
func (rd *Reading) PasteValues(w io.Writer) error {
	return rd.copy(w, func(f *excelize.File) error {
		for _, s := range rd.book.sheets {
			for _, c := range s.cells {
				if !c.formula {
					continue
				}
				if err := paste(f, s.name, c); err != nil {
					return err
				}
			}
		}
		return nil
	})
}

func paste(f *excelize.File, sheet string, c cell) error {
	switch c.kind {
	case textual:
		return f.SetCellStr(sheet, c.ref(), c.text)
	case logical:
		return f.SetCellBool(sheet, c.ref(), c.text == model.Yes)
	case numeric:
		n, err := strconv.ParseFloat(c.text, 64)
		if err != nil {
			return err
		}
		return f.SetCellFloat(sheet, c.ref(), n, -1, 64)
	case day:
		date, err := time.Parse(time.DateOnly, c.text)
		if err != nil {
			return nil // a time of day, or no date: the reader will ask about it
		}
		return f.SetCellInt(sheet, c.ref(), int64(dayNumber(date)))
	}
	return nil
}

// copy opens the file that was read in the library that writes, changes it
// and writes it out. The library reads more kinds of part than we do; should
// one of them make it stumble, there is no copy, and nothing else is lost.
func (rd *Reading) copy(w io.Writer, change func(*excelize.File) error) (err error) {
	if rd.book == nil {
		return rd.Problems[0]
	}
	defer func() {
		if recover() != nil {
			err = problem("file_not_copied")
		}
	}()
	f, err := excelize.OpenReader(bytes.NewReader(rd.file), excelize.Options{UnzipSizeLimit: mostUnzipped, UnzipXMLSizeLimit: mostUnzipped})
	if err != nil {
		return problem("file_not_copied")
	}
	defer f.Close()
	if err := change(f); err != nil {
		return problem("file_not_copied")
	}
	return f.Write(w)
}
