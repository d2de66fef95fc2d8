package store

import (
	"context"
	"slices"
	"strconv"

	"weighhouse/model"
	"weighhouse/model/duty"
)

// ReleaseEdition releases a scorecard as the next edition of its product for
// its kind of client; from then on it is never changed. It is refused with
// all that model.Compile has to say, or as edition_already_released, or as
// edition_number_used where its number is not above every earlier one's.
func (s *Session) ReleaseEdition(ctx context.Context, card model.Scorecard) (*model.Edition, error) {
	edition, problems := model.Compile(card)
	if edition == nil {
		return nil, &Error{Problems: problems}
	}
	b := s.branch
	err := s.act(ctx, duty.ReleaseEdition, func(w *writing) error {
		all, err := b.editions(ctx, w)
		if err != nil {
			return err
		}
		if err := follows(edition, all); err != nil {
			return err
		}
		canonical, fingerprint := card.Canonical(), edition.Fingerprint()
		commit := plainCommit("editions", w.next(), canonical)
		err = s.enter(w, duty.ReleaseEdition, Facts{
			"product": card.Card.ProductCode, "client": string(card.Card.For),
			"edition":       strconv.FormatInt(int64(card.Card.Edition), 10),
			"in_force_from": card.Card.InForceFrom.String(), "fingerprint": fingerprint.String(),
		}, commit)
		if err != nil {
			return err
		}
		done := newReleased(w.last.Seq, w.last.At, s.person.name, fingerprint[:], canonical)
		w.committed = func() {
			b.editionsMu.Lock()
			defer b.editionsMu.Unlock()
			b.released = append(slices.Clip(b.released), done)
		}
		return w.insert("editions", w.last.Seq, fingerprint[:], canonical)
	})
	if err != nil {
		return nil, err
	}
	return edition, nil
}

// follows tells whether an edition may be released after those before it.
func follows(edition *model.Edition, all []*released) error {
	card := &edition.Scorecard().Card
	for _, r := range all {
		if r.Fingerprint == edition.Fingerprint() {
			return refuse("edition_already_released", "edition", strconv.FormatInt(int64(card.Edition), 10))
		}
	}
	for _, r := range all {
		if r.Card.ProductCode == card.ProductCode && r.Card.For == card.For && r.Card.Edition >= card.Edition {
			return refuse("edition_number_used", "edition", strconv.FormatInt(int64(card.Edition), 10),
				"released", strconv.FormatInt(int64(r.Card.Edition), 10))
		}
	}
	return nil
}
