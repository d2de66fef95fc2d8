// Package practice makes and opens the practice branch, in which everyone and
// everything is invented.
package practice

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"slices"
	"time"

	"weighhouse/assets"
	"weighhouse/model"
	"weighhouse/store"
	"weighhouse/store/workbook"
)

// Folder is the user's own folder for the practice branch, made or not. The
// error is the system's, where it knows no place for a user's settings.
func Folder() (string, error) {
	base, err := os.UserConfigDir()
	return filepath.Join(base, "weighhouse", "practice"), err
}

// Open opens the practice branch in a folder with its invented person signed
// in. Where the folder has no branch it makes it first: the scorecards
// released, the past applications kept, each on its day. A making that was
// cut short is taken up again, and nobody is asked for today's date.
//
// Errors are the store's; not_practice where the folder has another branch.
func Open(ctx context.Context, dir string) (*store.Session, error) {
	return openAt(ctx, dir, &calendar{present: time.Now})
}

func openAt(ctx context.Context, dir string, c *calendar) (*store.Session, error) {
	b, err := store.Open(ctx, dir, store.Options{Clock: c.now})
	if has(err, "no_branch") {
		c.past = []time.Time{morning(setUp)}
		b, err = store.CreatePractice(ctx, dir, store.Options{Clock: c.now})
	}
	if err != nil {
		return nil, err
	}
	s, err := begin(ctx, b, c)
	if err != nil {
		b.Close()
		return nil, err
	}
	return s, nil
}

// setUp is the day the branch was set up: the Friday before its scorecards
// come into force.
var setUp = model.Date{Year: 2026, Month: 2, Day: 27}

// calendar tells the time: the present, or while the branch is made its past,
// one time an asking and the last for as long as it is asked.
type calendar struct {
	present func() time.Time
	past    []time.Time
}

func (c *calendar) now() time.Time {
	if len(c.past) == 0 {
		return c.present()
	}
	first := c.past[0]
	if len(c.past) > 1 {
		c.past = c.past[1:]
	}
	return first
}

// morning is a time of a day at which the branch is open.
func morning(d model.Date) time.Time {
	return time.Date(d.Year, time.Month(d.Month), d.Day, 9, d.Day, 0, 0, time.Local)
}

func begin(ctx context.Context, b *store.Branch, c *calendar) (*store.Session, error) {
	s, err := b.SignInPractice(ctx)
	if err != nil {
		return nil, err
	}
	kept, err := s.ResultCount(ctx)
	if err == nil && kept == 0 {
		err = furnish(ctx, s, c)
	}
	if err != nil {
		return nil, err
	}
	return s, confirm(ctx, s, c)
}

// furnish releases the scorecards, or those left to release, and then keeps
// the past applications.
func furnish(ctx context.Context, s *store.Session, c *calendar) error {
	cards, err := Scorecards()
	if err != nil {
		return err
	}
	defer func() { c.past = nil }()
	c.past = []time.Time{morning(setUp)}
	editions := map[string]*model.Edition{}
	for _, card := range cards {
		edition, err := s.ReleaseEdition(ctx, card)
		if has(err, "edition_already_released") {
			edition, err = s.Edition(ctx, card.Fingerprint())
		}
		if err != nil {
			return err
		}
		editions[card.Card.ProductCode] = edition
	}
	applications, err := Applications(editions)
	if err != nil {
		return err
	}
	// All at once is all or none, and one wait for the disk. The store asks for
	// the time of each entry, so each result is kept on its day.
	var all []store.Complete
	c.past = nil
	for _, a := range applications {
		all = append(all, store.Complete{Applicant: a.Name, Answers: a.Answers})
		c.past = append(c.past, morning(a.Answers.On))
	}
	_, err = s.KeepResults(ctx, all)
	return err
}

// confirm gives the day that a practice branch takes for today where the
// clock is doubted: the clock's own after a long rest, and the last entry's
// where the clock stands before it.
func confirm(ctx context.Context, s *store.Session, c *calendar) error {
	_, err := s.Branch().Today()
	problems := store.Problems(err)
	if err == nil || len(problems) != 1 || problems[0].Code != "doubtful_date" {
		return err
	}
	today := model.DateOf(c.now())
	if last, err := model.ParseDate(problems[0].Args["last"]); err == nil && today.Before(last) {
		today = last.AddDays(1)
	}
	return s.ConfirmDate(ctx, today)
}

func has(err error, code string) bool {
	return slices.ContainsFunc(store.Problems(err), func(p model.Problem) bool { return p.Code == code })
}

// Scorecards are the practice branch's, read from its workbooks, the main
// product's first.
func Scorecards() ([]model.Scorecard, error) {
	var cards []model.Scorecard
	for _, b := range assets.PracticeWorkbooks() {
		r, err := workbook.Read(bytes.NewReader(b))
		if err != nil {
			return nil, err
		}
		if r.Edition == nil {
			return nil, &store.Error{Problems: r.Problems}
		}
		cards = append(cards, r.Scorecard)
	}
	return cards, nil
}
