package main

import (
	"encoding/json"
	"fmt"
	"io"

	"weighhouse/model"
	"weighhouse/store/workbook"
)

// check looks at a workbook and says what it is, or everything that is wrong.
func (k *clerk) check() error {
	reading, err := k.readCard(k.files[0])
	if err != nil {
		return err
	}
	switch {
	case k.option["json"] != "":
		if err := k.checkJSON(reading); err != nil {
			return err
		}
	case reading.Edition == nil:
		k.list(k.out, k.files[0], reading.Problems)
	default:
		card := reading.Scorecard.Card
		fmt.Fprintln(k.out, card.Title)
		fmt.Fprintln(k.out, k.words.T("clerk.edition", "edition", card.Edition, "date", card.InForceFrom))
		fmt.Fprintln(k.out, k.words.T("clerk.telephone_code", "code", reading.Edition.TelephoneCode()))
		k.list(k.err, k.files[0], reading.Problems)
	}
	if reading.Edition == nil {
		return errRefused
	}
	return nil
}

// list tells problems one a line, Sheet!Cell before each; before what is wrong
// with the whole file stands its name.
func (k *clerk) list(to io.Writer, file string, problems []model.Problem) {
	for _, p := range problems {
		what := k.words.Sentence(p)
		if p.Warning {
			what = k.words.T("clerk.note", "what", what)
		}
		fmt.Fprintf(to, "%s: %s\n", where(file, p.Place), what)
	}
}

func where(file string, p model.Place) string {
	switch {
	case p.Sheet == "":
		return file
	case p.Cell == "":
		return p.Sheet
	}
	return p.Sheet + "!" + p.Cell
}

// report is what check tells a program.
type report struct {
	Accepted      bool      `json:"accepted"`
	Title         string    `json:"title,omitempty"`
	Product       string    `json:"product,omitempty"`
	Edition       int       `json:"edition,omitempty"`
	InForceFrom   string    `json:"in_force_from,omitempty"`
	TelephoneCode string    `json:"telephone_code,omitempty"`
	Problems      []finding `json:"problems"`
}

type finding struct {
	Sheet   string            `json:"sheet,omitempty"`
	Cell    string            `json:"cell,omitempty"`
	Column  string            `json:"column,omitempty"`
	Code    string            `json:"code"`
	Args    map[string]string `json:"args,omitempty"`
	Warning bool              `json:"warning"`
	Text    string            `json:"text"`
}

func (k *clerk) checkJSON(reading *workbook.Reading) error {
	card := reading.Scorecard.Card
	r := report{Title: card.Title, Product: card.ProductCode, Edition: int(card.Edition), InForceFrom: card.InForceFrom.String(), Problems: []finding{}}
	if reading.Edition != nil {
		r.Accepted, r.TelephoneCode = true, reading.Edition.TelephoneCode()
	}
	for _, p := range reading.Problems {
		r.Problems = append(r.Problems, finding{p.Place.Sheet, p.Place.Cell, p.Place.Column, p.Code, p.Args, p.Warning, k.words.Sentence(p)})
	}
	e := json.NewEncoder(k.out)
	e.SetIndent("", "  ")
	e.SetEscapeHTML(false)
	return e.Encode(r)
}
