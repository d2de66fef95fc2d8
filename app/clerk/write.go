package main

import (
	"bytes"
	"strings"

	"weighhouse/app/practice"
	"weighhouse/assets"
	"weighhouse/store/table"
	"weighhouse/store/workbook"
)

// blank writes the workbook that head office fills in; with -card, the header
// of a table of applicants for that scorecard.
func (k *clerk) blank() error {
	var b bytes.Buffer
	if k.option["card"] == "" {
		if err := workbook.Blank(&b); err != nil {
			return err
		}
	} else {
		edition, err := k.edition()
		if err != nil {
			return err
		}
		b.WriteString(strings.Join(table.HeaderOf(edition), ",") + "\n")
	}
	return k.writeNew(k.files[0], b.Bytes())
}

// practice writes a workbook of the practice branch.
func (k *clerk) practice() error {
	cards, err := practice.Scorecards()
	if err != nil {
		return err
	}
	product := k.option["product"]
	var products []string
	for i, card := range cards {
		if product == "" || product == card.Card.ProductCode {
			return k.writeNew(k.files[0], assets.PracticeWorkbooks()[i])
		}
		products = append(products, card.Card.ProductCode)
	}
	return misuse("clerk_product_needed", "options", strings.Join(products, ", "))
}
