package store

import (
	"context"
	"strconv"
	"strings"

	"golang.org/x/text/unicode/norm"

	"weighhouse/model"
	"weighhouse/model/duty"
)

// Complete is what a result is kept of.
type Complete struct {
	// Applicant is who it is about; white space is made single.
	Applicant string
	Answers   *model.Answers
}

// KeepResult keeps complete answers with what their edition says of them.
// The codes: answers_incomplete, edition_not_released, and answers_unreadable
// where the text of the answers would not give the same result again.
func (s *Session) KeepResult(ctx context.Context, c Complete) (Kept, error) {
	kept, err := s.KeepResults(ctx, []Complete{c})
	if err != nil {
		return Kept{}, err
	}
	return kept[0], nil
}

// KeepResults keeps several results, all of them or none.
func (s *Session) KeepResults(ctx context.Context, all []Complete) ([]Kept, error) {
	var kept []Kept
	for _, c := range all {
		k, err := s.score(c)
		if err != nil {
			return nil, err
		}
		kept = append(kept, k)
	}
	err := s.act(ctx, duty.KeepResult, func(w *writing) error {
		for i := range kept {
			if err := s.keep(w, &kept[i]); err != nil {
				return err
			}
		}
		w.committed = func() { s.branch.remember(kept) }
		return nil
	})
	if err != nil {
		return nil, err
	}
	return kept, nil
}

// score works a result out of a copy read back from the answers' text, so
// that what is kept gives itself again.
func (s *Session) score(c Complete) (k Kept, err error) {
	answers := c.Answers
	edition := answers.Edition()
	k.Applicant = norm.NFC.String(strings.Join(strings.Fields(c.Applicant), " "))
	result, complete := edition.Score(answers)
	if !complete {
		return k, refuse("answers_incomplete")
	}
	k.figures(answers, result)
	read, problems := edition.ParseAnswers(k.Answers)
	if refused(problems) {
		return k, &Error{Problems: problems}
	}
	again, complete := edition.Score(read)
	if !complete || again != result || read.Text() != k.Answers {
		return k, refuse("answers_unreadable")
	}
	return k, nil
}

func (s *Session) keep(w *writing, k *Kept) error {
	edition, err := s.branch.edition(w.ctx, w, k.Edition)
	if err != nil {
		return err
	}
	id := w.next()
	sealed, commitment := s.keys.Data.Seal(keptCell(id), k.text())
	err = s.enter(w, duty.KeepResult, Facts{
		"edition": strconv.FormatInt(edition.Entry, 10),
		"band":    k.Band, "recommendation": string(k.Recommendation),
	}, Commit{"results", id, commitment})
	if err != nil {
		return err
	}
	k.ID, k.At, k.By = id, w.last.At, s.person.name
	return w.insert("results", id, edition.Entry, k.Band, string(k.Recommendation), sealed)
}
