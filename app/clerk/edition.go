package main

import (
	"context"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"weighhouse/app/practice"
	"weighhouse/model"
	"weighhouse/store"
	"weighhouse/store/workbook"
)

// edition is the one that the options -card, or -branch with -product, -client
// and -on, name.
func (k *clerk) edition() (*model.Edition, error) {
	card, branch := k.option["card"], k.option["branch"]
	switch {
	case (card == "") == (branch == ""):
		return nil, misuse("clerk_card_or_branch")
	case card == "":
		return k.inForce(branch)
	}
	for _, name := range []string{"product", "client"} {
		if k.option[name] != "" {
			return nil, misuse("clerk_only_with_branch", "value", "-"+name)
		}
	}
	reading, err := k.accepted(card)
	if err != nil {
		return nil, err
	}
	return reading.Edition, nil
}

// accepted reads a workbook that has an edition.
func (k *clerk) accepted(path string) (*workbook.Reading, error) {
	reading, err := k.readCard(path)
	if err == nil && reading.Edition == nil {
		k.list(k.err, path, reading.Problems)
		err = errRefused
	}
	return reading, err
}

// readCard reads a workbook; "-" is standard input.
func (k *clerk) readCard(path string) (*workbook.Reading, error) {
	if path == "-" {
		return workbook.Read(k.in)
	}
	f, err := os.Open(path)
	if err != nil {
		return nil, cannot(err)
	}
	defer f.Close()
	reading, err := workbook.Read(f)
	return reading, cannot(err)
}

// inForce is the edition in force at a branch.
func (k *clerk) inForce(dir string) (*model.Edition, error) {
	on, err := k.day()
	if err != nil {
		return nil, err
	}
	client := model.ClientKind(k.option["client"])
	if client != "" && client != model.NewClients && client != model.RepeatClients {
		return nil, misuse("clerk_no_such_client", "value", string(client))
	}
	s, err := k.signIn(dir)
	if err != nil {
		return nil, err
	}
	defer s.Branch().Close()
	released, err := s.Editions(context.Background())
	if err != nil {
		return nil, err
	}
	product := k.option["product"]
	var products []string
	for _, r := range released {
		if !slices.Contains(products, r.Card.ProductCode) {
			products = append(products, r.Card.ProductCode)
		}
	}
	slices.Sort(products)
	switch {
	case product == "" && len(products) == 1:
		product = products[0]
	case product == "" && len(products) > 1:
		return nil, misuse("clerk_product_needed", "options", strings.Join(products, ", "))
	}
	if client == "" {
		client = model.NewClients
	}
	return s.InForce(context.Background(), product, client, on)
}

// signIn opens a branch. Only the practice branch signs its person in by
// itself: a passphrase is never an option, which other users of the machine
// could read.
func (k *clerk) signIn(dir string) (*store.Session, error) {
	// The practice branch is made where there is none, but not by clerk.
	if _, err := os.Stat(filepath.Join(dir, store.FileName)); err != nil {
		return nil, problem("clerk_no_branch", "folder", dir)
	}
	return practice.Open(context.Background(), dir)
}

// day is the day that -on gives, today without it.
func (k *clerk) day() (model.Date, error) {
	text := k.option["on"]
	if text == "" {
		return k.today, nil
	}
	d, err := model.ParseDate(text)
	if err != nil || d.YearAlone() {
		return d, misuse("clerk_not_a_day", "value", text)
	}
	return d, nil
}
