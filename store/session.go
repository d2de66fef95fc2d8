package store

import (
	"context"
	"slices"

	"weighhouse/model/duty"
	"weighhouse/store/vault"
)

// A Session is a branch with a person signed in: the front door to everything
// that is kept. It is safe for concurrent use.
type Session struct {
	branch *Branch
	person person
	keys   vault.Keys
}

// SignIn opens the branch for a person. The codes of its Problems:
// sign_in_refused for a wrong name or passphrase, person_altered where the
// journal does not say what the person's row says.
func (b *Branch) SignIn(ctx context.Context, name, passphrase string) (*Session, error) {
	all, err := people(ctx, b.db)
	if err != nil {
		return nil, fault(b.path, err)
	}
	i := slices.IndexFunc(all, func(p person) bool { return foldName(p.name) == foldName(name) })
	if i < 0 {
		return nil, refuse("sign_in_refused")
	}
	p := all[i]
	keys, err := vault.Unlock(p.locked, passphrase, p.owner())
	if err != nil {
		return nil, refuse("sign_in_refused")
	}
	ok, err := vouched(ctx, b.db, p, all)
	if err != nil {
		return nil, fault(b.path, err)
	}
	if !ok || !keys.Signing.Public().Equal(p.publicKey) {
		return nil, refuse("person_altered", "person", p.name)
	}
	go b.resultIDs(context.Background()) // so that the first page need not wait
	return &Session{b, p, keys}, nil
}

// Branch is what the person is signed in to.
func (s *Session) Branch() *Branch { return s.branch }

// Person is the name of who is signed in.
func (s *Session) Person() string { return s.person.name }

// Role is what they are.
func (s *Session) Role() duty.Role { return s.person.role }

// May tells whether they may do an act.
func (s *Session) May(act duty.Act) bool { return duty.May(s.person.role, act) }

func (s *Session) may(act duty.Act) error {
	if !s.May(act) {
		return refuse("not_allowed", "role", string(s.person.role), "act", string(act))
	}
	return nil
}

// act runs one act that changes something: in one transaction, which is on
// the disk when it returns without an error, or has changed nothing.
func (s *Session) act(ctx context.Context, act duty.Act, do func(w *writing) error) error {
	if err := s.may(act); err != nil {
		return err
	}
	b := s.branch
	b.writing.Lock()
	defer b.writing.Unlock()
	tx, err := b.db.BeginTx(ctx, nil)
	if err != nil {
		return fault(b.path, err)
	}
	defer tx.Rollback()
	last, err := lastEntry(ctx, tx)
	if err != nil {
		return fault(b.path, err)
	}
	w := &writing{Tx: tx, ctx: ctx, desk: b.info.Desk, person: s.person.id, key: s.keys.Signing, last: last}
	if err := do(w); err != nil {
		return fault(b.path, err)
	}
	if err := tx.Commit(); err != nil {
		return fault(b.path, err)
	}
	b.lastAt.Store(w.last.At.UnixMilli())
	if w.committed != nil {
		w.committed()
	}
	return nil
}

// enter appends an act's entry at the present time, or tells that the clock
// is doubted.
func (s *Session) enter(w *writing, act duty.Act, facts Facts, commits ...Commit) error {
	at, err := s.branch.timeAfter(w.last.At)
	if err != nil {
		return err
	}
	return w.enter(at, act, facts, commits...)
}
