package store

import (
	"context"
	"crypto/sha256"
	"slices"
	"strconv"
	"sync"
	"time"

	"weighhouse/model"
	"weighhouse/model/duty"
)

// A Released tells of one released edition.
type Released struct {
	Entry       int64 // of the journal, by which it was released
	At          time.Time
	By          string // the person's name
	Fingerprint model.Fingerprint
	Card        model.Card
}

// released is an edition with its compiled form, made when first asked for.
type released struct {
	Released
	compile func() (*model.Edition, error)
	altered error
}

// newReleased never fails: an edition that was tampered with, or that this
// program cannot compile, says so when it is asked for, and the others stay.
func newReleased(entry int64, at time.Time, by string, fingerprint []byte, canonical string) *released {
	r := &released{Released: Released{Entry: entry, At: at, By: by}}
	copy(r.Fingerprint[:], fingerprint)
	card, problems := model.ParseCanonical(canonical)
	if sha256.Sum256([]byte(canonical)) != r.Fingerprint || refused(problems) {
		e := refuse("edition_altered", "entry", strconv.FormatInt(entry, 10))
		r.altered = e
		r.compile = func() (*model.Edition, error) { return nil, e }
		return r
	}
	r.Card = card.Card
	r.compile = sync.OnceValues(func() (*model.Edition, error) {
		edition, problems := model.Compile(card)
		if edition == nil {
			return nil, &Error{Problems: problems}
		}
		return edition, nil
	})
	return r
}

// refused tells whether problems are more than warnings.
func refused(problems []model.Problem) bool {
	return slices.ContainsFunc(problems, func(p model.Problem) bool { return !p.Warning })
}

// editions are all that were released, in that order, read once. An entry or
// a person that was tampered with hides none: Prove tells of it.
func (b *Branch) editions(ctx context.Context, q queryer) ([]*released, error) {
	b.editionsMu.Lock()
	defer b.editionsMu.Unlock()
	if b.released != nil {
		return b.released, nil
	}
	rows, err := q.QueryContext(ctx, `SELECT e.entry, ifnull(j.at, 0), ifnull(p.name, ''), e.fingerprint, e.canonical FROM editions e
		LEFT JOIN journal j ON j.seq = e.entry LEFT JOIN people p ON p.id = j.person ORDER BY e.entry`)
	if err != nil {
		return nil, fault(b.path, err)
	}
	defer rows.Close()
	all := []*released{}
	for rows.Next() {
		var entry, at int64
		var by, canonical string
		var fingerprint []byte
		if err := rows.Scan(&entry, &at, &by, &fingerprint, &canonical); err != nil {
			return nil, fault(b.path, err)
		}
		all = append(all, newReleased(entry, time.UnixMilli(at).UTC(), by, fingerprint, canonical))
	}
	if err := rows.Err(); err != nil {
		return nil, fault(b.path, err)
	}
	b.released = all
	return all, nil
}

// Editions lists every released edition, the newest release first;
// edition_altered where one was tampered with.
func (s *Session) Editions(ctx context.Context) ([]Released, error) {
	if err := s.may(duty.ReadEditions); err != nil {
		return nil, err
	}
	all, err := s.branch.editions(ctx, s.branch.db)
	if err != nil {
		return nil, err
	}
	list := make([]Released, len(all))
	for i, r := range all {
		if r.altered != nil {
			return nil, r.altered
		}
		list[len(all)-1-i] = r.Released
	}
	return list, nil
}

// Edition is a released edition, compiled; edition_not_released where there
// is none with that fingerprint.
func (s *Session) Edition(ctx context.Context, fingerprint model.Fingerprint) (*model.Edition, error) {
	if err := s.may(duty.ReadEditions); err != nil {
		return nil, err
	}
	r, err := s.branch.edition(ctx, s.branch.db, fingerprint)
	if err != nil {
		return nil, err
	}
	return r.compile()
}

func (b *Branch) edition(ctx context.Context, q queryer, fingerprint model.Fingerprint) (*released, error) {
	all, err := b.editions(ctx, q)
	if err != nil {
		return nil, err
	}
	i := slices.IndexFunc(all, func(r *released) bool { return r.Fingerprint == fingerprint })
	if i < 0 {
		return nil, refuse("edition_not_released", "fingerprint", fingerprint.String())
	}
	return all[i], nil
}

// InForce is the edition for a product and kind of client (new or repeat) on
// a day: of those for that kind or for all clients, the one in force from the
// latest day that is not after it; of several from one day, the highest
// number, then the last released. Where there is none it is a
// no_edition_in_force, where one was tampered with an
// edition_altered. A doubtful clock chooses no edition: doubtful_date.
func (s *Session) InForce(ctx context.Context, product string, client model.ClientKind, on model.Date) (*model.Edition, error) {
	if err := s.may(duty.ReadEditions); err != nil {
		return nil, err
	}
	if _, err := s.branch.Today(); err != nil {
		return nil, err
	}
	all, err := s.branch.editions(ctx, s.branch.db)
	if err != nil {
		return nil, err
	}
	var best *released
	for _, r := range all {
		if r.altered != nil {
			return nil, r.altered // it may have been the one
		}
		card := &r.Card
		if card.ProductCode != product || (card.For != client && card.For != model.AllClients) || on.Before(card.InForceFrom) {
			continue
		}
		if best == nil || best.Card.InForceFrom.Before(card.InForceFrom) ||
			best.Card.InForceFrom == card.InForceFrom && best.Card.Edition <= card.Edition {
			best = r
		}
	}
	if best == nil {
		return nil, refuse("no_edition_in_force", "product", product, "client", string(client), "date", on.String())
	}
	return best.compile()
}
