package store

import (
	"context"
	"crypto/sha256"
	"database/sql"
	"encoding/hex"
	"errors"
	"fmt"
	"maps"
	"slices"
	"strconv"
	"strings"
	"time"

	"weighhouse/model/duty"
	"weighhouse/store/vault"
)

// An Entry is one act in the journal: append-only, numbered without a gap,
// chained to the one before by its hash, signed by who did it.
type Entry struct {
	Seq     int64
	At      time.Time // whole milliseconds, UTC
	Desk    string
	Person  int64
	Act     duty.Act
	Facts   Facts
	Commits []Commit
	Before  Hash // of the entry before; zero for the first
	Hash    Hash
	// Signature is by Person's key, over Hash.
	Signature []byte

	facts, commits string // as kept, and hashed
}

// A Hash is an entry's SHA-256.
type Hash [sha256.Size]byte

// String is 64 hexadecimal digits.
func (h Hash) String() string { return hex.EncodeToString(h[:]) }

// Facts are what an entry says in the open: nothing of an applicant.
type Facts map[string]string

// A Commit binds an entry to a row that it made: the SHA-256 of the row's
// text, or where that is sealed a vault.Commitment.
type Commit struct {
	Table string
	Row   int64
	Hash  vault.Commitment
}

// hash is over everything an entry says. No field but the last two holds a
// line end, and facts are told with their length: unlike entries have unlike
// texts.
func (e *Entry) hash() Hash {
	return sha256.Sum256(fmt.Appendf(nil, "weighhouse entry 1\n%d\n%d\n%s\n%d\n%s\n%s\n%d\n%s%s",
		e.Seq, e.At.UnixMilli(), e.Desk, e.Person, e.Act, e.Before, len(e.facts), e.facts, e.commits))
}

var (
	factEscaper   = strings.NewReplacer(`\`, `\\`, "\t", `\t`, "\n", `\n`)
	factUnescaper = strings.NewReplacer(`\\`, `\`, `\t`, "\t", `\n`, "\n")
)

// text is a line a fact, in order of names.
func (f Facts) text() string {
	var b strings.Builder
	for _, name := range slices.Sorted(maps.Keys(f)) {
		b.WriteString(name + "\t" + factEscaper.Replace(f[name]) + "\n")
	}
	return b.String()
}

func parseFacts(text string) (Facts, bool) {
	f := Facts{}
	for line := range strings.Lines(text) {
		name, value, _ := strings.Cut(strings.TrimSuffix(line, "\n"), "\t")
		f[name] = factUnescaper.Replace(value)
	}
	return f, f.text() == text
}

func commitsText(commits []Commit) string {
	var b strings.Builder
	for _, c := range commits {
		fmt.Fprintf(&b, "%s\t%d\t%x\n", c.Table, c.Row, c.Hash)
	}
	return b.String()
}

func parseCommits(text string) ([]Commit, bool) {
	var commits []Commit
	for line := range strings.Lines(text) {
		cells := strings.Split(strings.TrimSuffix(line, "\n"), "\t")
		if len(cells) != 3 {
			return nil, false
		}
		row, _ := strconv.ParseInt(cells[1], 10, 64)
		hash, _ := hex.DecodeString(cells[2])
		if len(hash) != sha256.Size {
			return nil, false
		}
		commits = append(commits, Commit{cells[0], row, vault.Commitment(hash)})
	}
	return commits, commitsText(commits) == text
}

// plainCommit commits to a row that is not secret.
func plainCommit(table string, row int64, text string) Commit {
	return Commit{table, row, sha256.Sum256([]byte(text))}
}

const entryColumns = "seq, at, desk, person, act, facts, commits, before, hash, signature"

// scanEntry reads a row of entryColumns; ok is false where its texts are not
// in canonical form.
func scanEntry(row scanner) (e Entry, ok bool, err error) {
	var at int64
	var before, hash []byte
	err = row.Scan(&e.Seq, &at, &e.Desk, &e.Person, &e.Act, &e.facts, &e.commits, &before, &hash, &e.Signature)
	if err != nil {
		return e, false, err
	}
	e.At = time.UnixMilli(at).UTC()
	var factsOK, commitsOK bool
	e.Facts, factsOK = parseFacts(e.facts)
	e.Commits, commitsOK = parseCommits(e.commits)
	ok = factsOK && commitsOK && len(before) == len(e.Before) && len(hash) == len(e.Hash)
	copy(e.Before[:], before)
	copy(e.Hash[:], hash)
	return e, ok, nil
}

// A scanner is a row.
type scanner interface{ Scan(...any) error }

// A queryer is a database or a transaction.
type queryer interface {
	QueryContext(ctx context.Context, query string, args ...any) (*sql.Rows, error)
	QueryRowContext(ctx context.Context, query string, args ...any) *sql.Row
}

// lastEntry is the journal's end; the zero Entry where it is empty.
func lastEntry(ctx context.Context, q queryer) (Entry, error) {
	e, _, err := scanEntry(q.QueryRowContext(ctx, "SELECT "+entryColumns+" FROM journal ORDER BY seq DESC LIMIT 1"))
	if errors.Is(err, sql.ErrNoRows) {
		return Entry{}, nil
	}
	return e, err
}

// A writing is one act's transaction.
type writing struct {
	*sql.Tx
	ctx    context.Context
	desk   string
	person int64
	key    vault.SigningKey
	last   Entry

	committed func() // run once it is on the disk, before the next act; may be nil
}

// next is the number that the next entry will have, for the rows it makes.
func (w *writing) next() int64 { return w.last.Seq + 1 }

// enter appends an entry. Rows it makes are inserted after it.
func (w *writing) enter(at time.Time, act duty.Act, facts Facts, commits ...Commit) error {
	e := Entry{
		Seq: w.next(), At: at.UTC().Truncate(time.Millisecond), Desk: w.desk, Person: w.person, Act: act,
		Facts: facts, Commits: commits, Before: w.last.Hash,
		facts: facts.text(), commits: commitsText(commits),
	}
	e.Hash = e.hash()
	e.Signature = w.key.Sign(e.Hash[:])
	if err := w.insert("journal", e.Seq, e.At.UnixMilli(), e.Desk, e.Person, string(e.Act),
		e.facts, e.commits, e.Before[:], e.Hash[:], e.Signature); err != nil {
		return err
	}
	w.last = e
	return nil
}

// insert adds a row with a value for each column.
func (w *writing) insert(table string, values ...any) error {
	blanks := strings.Repeat(", ?", len(values))[2:]
	_, err := w.ExecContext(w.ctx, "INSERT INTO "+table+" VALUES ("+blanks+")", values...)
	return err
}
