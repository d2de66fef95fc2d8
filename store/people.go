package store

import (
	"context"
	"crypto/ed25519"
	"database/sql"
	"encoding/hex"
	"errors"
	"slices"
	"strconv"
	"strings"

	"golang.org/x/text/cases"
	"golang.org/x/text/unicode/norm"

	"weighhouse/model/duty"
	"weighhouse/store/vault"
)

// person is a row of people.
type person struct {
	id        int64
	entry     int64
	name      string
	role      duty.Role
	publicKey ed25519.PublicKey
	locked    []byte
}

// foldName makes names alike that a person would call the same.
func foldName(name string) string {
	return cases.Fold().String(norm.NFKC.String(strings.Join(strings.Fields(name), " ")))
}

// facts are what the journal says of a person; text is what it commits to.
func (p *person) facts() Facts {
	return Facts{
		"person": strconv.FormatInt(p.id, 10), "name": p.name, "role": string(p.role),
		"public_key": hex.EncodeToString(p.publicKey),
	}
}

func (p *person) text() string { return p.facts().text() }

// text is what the journal commits to of the branch.
func (i Info) text() string {
	return Facts{"branch": i.Name, "desk": i.Desk, "practice": strconv.FormatBool(i.Practice)}.text()
}

// owner binds locked keys to the person.
func (p *person) owner() string { return "person " + strconv.FormatInt(p.id, 10) }

const personColumns = "id, entry, name, role, public_key, locked"

func scanPerson(row scanner) (p person, err error) {
	err = row.Scan(&p.id, &p.entry, &p.name, &p.role, &p.publicKey, &p.locked)
	return p, err
}

// people are all of them, in the order they were added.
func people(ctx context.Context, q queryer) ([]person, error) {
	rows, err := q.QueryContext(ctx, "SELECT "+personColumns+" FROM people ORDER BY id")
	if err != nil {
		return nil, err
	}
	defer rows.Close()
	var all []person
	for rows.Next() {
		p, err := scanPerson(rows)
		if err != nil {
			return nil, err
		}
		all = append(all, p)
	}
	return all, rows.Err()
}

// People are the names that may sign in.
func (b *Branch) People(ctx context.Context) ([]string, error) {
	all, err := people(ctx, b.db)
	if err != nil {
		return nil, fault(b.path, err)
	}
	var names []string
	for _, p := range all {
		names = append(names, p.name)
	}
	return names, nil
}

// vouched tells whether the journal says of a person what their row says: a
// role raised by editing the file is found here, at once.
func vouched(ctx context.Context, q queryer, p person, all []person) (bool, error) {
	e, ok, err := scanEntry(q.QueryRowContext(ctx, "SELECT "+entryColumns+" FROM journal WHERE seq = ?", p.entry))
	if errors.Is(err, sql.ErrNoRows) {
		return false, nil
	} else if err != nil {
		return false, err
	}
	i := slices.IndexFunc(all, func(by person) bool { return by.id == e.Person })
	return ok && i >= 0 && e.Hash == e.hash() && vault.Signed(all[i].publicKey, e.Hash[:], e.Signature) &&
		slices.Contains(e.Commits, plainCommit("people", p.id, p.text())), nil
}
