package main

import (
	"bytes"
	"context"
	"fmt"
	"os"
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
	kind := ".xlsx"
	if k.option["card"] != "" {
		kind = ".csv"
	}
	if err := ending(k.files[0], kind); err != nil {
		return err
	}
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

// tryIt writes an accepted workbook again, with the sheet that scores.
func (k *clerk) tryIt() error {
	if err := ending(k.files[1], ".xlsx"); err != nil {
		return err
	}
	reading, err := k.accepted(k.files[0])
	if err != nil {
		return err
	}
	var b bytes.Buffer
	if err := workbook.Write(&b, reading.Scorecard); err != nil {
		return err
	}
	return k.writeNew(k.files[1], b.Bytes())
}

// practice writes a workbook of the practice branch, or makes the branch in a
// folder.
func (k *clerk) practice() error {
	folder := k.option["branch"]
	if folder == "" && len(k.files) > 0 && isFolder(k.files[0]) {
		folder, k.files = k.files[0], k.files[1:]
	}
	most := 1
	if folder != "" {
		most = 0
	}
	switch {
	case len(k.files) > most:
		return misuse("clerk_too_many_files", "value", k.files[most], "command", "practice")
	case len(k.files) < most:
		return misuse("clerk_file_needed", "command", "practice")
	case folder != "" && k.option["product"] != "":
		return misuse("clerk_branch_has_all", "value", "-product")
	case folder != "":
		return k.practiceBranch(folder)
	}
	if err := ending(k.files[0], ".xlsx"); err != nil {
		return err
	}
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

// isFolder tells a folder, made or not, from a file.
func isFolder(path string) bool {
	info, err := os.Stat(path)
	return err == nil && info.IsDir() || path != "" && os.IsPathSeparator(path[len(path)-1])
}

// practiceBranch makes the practice branch where it is not there yet.
func (k *clerk) practiceBranch(folder string) error {
	s, err := practice.Open(context.Background(), folder)
	if err != nil {
		return err
	}
	fmt.Fprintln(k.out, k.words.T("clerk.practice_branch", "folder", folder))
	return s.Branch().Close()
}
