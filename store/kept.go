package store

import (
	"errors"
	"strings"
	"time"

	"weighhouse/model"
	"weighhouse/store/vault"
)

// A Kept is a result as it was kept: what was answered, and what the edition
// said of it then.
type Kept struct {
	ID      int64 // its journal entry's number
	At      time.Time
	By      string // the person's name
	Edition model.Fingerprint
	// Applicant is who it is about, as the officer wrote it; empty where no
	// name was taken.
	Applicant string
	// Answers are canonical text; Edition.ParseAnswers reads it.
	Answers        string
	LogOdds        model.LogOdds
	PD             model.PD
	Score          model.Number
	Band           string // its code
	Recommendation model.Recommendation
	// ClearedAt and ClearedBy tell when and by whom it was cleared; zero where
	// it was not.
	ClearedAt time.Time
	ClearedBy string
}

// Cleared tells that the result was cleared from the desk.
func (k *Kept) Cleared() bool { return !k.ClearedAt.IsZero() }

const keptHead = "weighhouse result 1"

// text is what is sealed and committed to.
func (k *Kept) text() string {
	return keptHead + "\nedition\t" + k.Edition.String() + "\napplicant\t" + k.Applicant + "\nlog_odds\t" + k.LogOdds.String() +
		"\npd\t" + k.PD.String() + "\nscore\t" + k.Score.String() + "\nband\t" + k.Band +
		"\nrecommendation\t" + string(k.Recommendation) + "\nanswers\n" + k.Answers
}

var errNotKept = errors.New("store: not the text of a result")

// parse reads what text wrote.
func (k *Kept) parse(text string) error {
	head, answers, ok := strings.Cut(text, "\nanswers\n")
	lines := strings.Split(head, "\n")
	if !ok || len(lines) != 8 || lines[0] != keptHead {
		return errNotKept
	}
	value := func(i int) string { _, v, _ := strings.Cut(lines[i], "\t"); return v }
	var errs [4]error
	k.Edition, errs[0] = model.ParseFingerprint(value(1))
	k.Applicant = value(2)
	k.LogOdds, errs[1] = model.ParseLogOdds(value(3))
	k.PD, errs[2] = model.ParsePD(value(4))
	k.Score, errs[3] = model.ParseNumber(value(5))
	k.Band, k.Recommendation, k.Answers = value(6), model.Recommendation(value(7)), answers
	if err := errors.Join(errs[:]...); err != nil {
		return err
	}
	if k.text() != text {
		return errNotKept
	}
	return nil
}

// figures fills in what an edition says of answers.
func (k *Kept) figures(answers *model.Answers, r model.Result) {
	e := answers.Edition()
	k.Edition, k.Answers = e.Fingerprint(), answers.Text()
	k.LogOdds, k.PD, k.Score = r.LogOdds, r.PD, r.Score
	k.Band, k.Recommendation = e.Scorecard().Bands[r.Band].Code, r.Recommendation
}

// keptCell is where a result's text is sealed.
func keptCell(id int64) vault.Cell { return vault.Cell{Table: "results", Column: "kept", Row: id} }
