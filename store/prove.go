package store

import (
	"context"
	"crypto/ed25519"
	"crypto/sha256"
	"database/sql"
	"encoding/hex"
	"errors"
	"strconv"

	"weighhouse/model"
	"weighhouse/model/duty"
	"weighhouse/store/vault"
)

// A Proof is what Prove found.
type Proof struct {
	Entries int64 // of the journal
	Results int64 // scored again
	// Last is the journal's last hash: where it is written down elsewhere, a
	// cut-off end is found by it.
	Last Hash
	// Problems are in the order of entries; none is proven. The codes, with the
	// entry's number: entry_missing, chain_broken, entry_altered,
	// entry_not_signed, time_went_back; with the table and row as well:
	// row_missing, row_altered, result_differs, edition_unusable; and of no
	// entry: schema_altered, row_not_journalled. A thousand are listed at most.
	Problems []model.Problem
}

const mostProblems = 1000

// Prove scores every kept result again with its edition, compares to the last
// digit, and walks the journal: each entry's number, hash, place in the chain
// and signature, and each row that it commits to. Progress, which may be nil,
// is told entries done and all entries. An error is for what kept it from
// looking; what it found is in the Proof.
func (s *Session) Prove(ctx context.Context, progress func(done, total int64)) (Proof, error) {
	if err := s.may(duty.Prove); err != nil {
		return Proof{}, err
	}
	p := &prover{s: s, ctx: ctx, keys: map[int64]ed25519.PublicKey{}, rows: map[string]int64{},
		editions: map[model.Fingerprint]*model.Edition{}}
	err := p.walk(progress)
	return p.proof, fault(s.branch.path, err)
}

type prover struct {
	s     *Session
	ctx   context.Context
	tx    *sql.Tx
	proof Proof
	keys  map[int64]ed25519.PublicKey // of people, as far as the walk has come
	rows  map[string]int64            // committed to, by table

	editions map[model.Fingerprint]*model.Edition // nil for one that cannot be used
}

func (p *prover) found(code string, args ...string) {
	if len(p.proof.Problems) < mostProblems {
		p.proof.Problems = append(p.proof.Problems, refuse(code, args...).Problems...)
	}
}

func (p *prover) walk(progress func(done, total int64)) error {
	var err error
	// One moment of the file, whatever is written meanwhile.
	if p.tx, err = p.s.branch.db.BeginTx(p.ctx, &sql.TxOptions{ReadOnly: true}); err != nil {
		return err
	}
	defer p.tx.Rollback()
	if err := p.schema(); err != nil {
		return err
	}
	end, err := lastEntry(p.ctx, p.tx)
	if err != nil {
		return err
	}
	rows, err := p.tx.QueryContext(p.ctx, "SELECT "+entryColumns+" FROM journal ORDER BY seq")
	if err != nil {
		return err
	}
	defer rows.Close()
	var last Entry
	for rows.Next() {
		e, ok, err := scanEntry(rows)
		if err != nil {
			return err
		}
		p.entry(e, ok, last)
		for _, c := range e.Commits {
			if err := p.row(e, c); err != nil {
				return err
			}
		}
		last = e
		p.proof.Entries++
		if progress != nil && (e.Seq%100 == 0 || e.Seq == end.Seq) {
			progress(e.Seq, end.Seq)
		}
	}
	if err := rows.Err(); err != nil {
		return err
	}
	p.proof.Last = last.Hash
	return p.strays()
}

// entry checks one entry against the one before.
func (p *prover) entry(e Entry, canonical bool, last Entry) {
	seq := strconv.FormatInt(e.Seq, 10)
	if e.Seq != last.Seq+1 {
		p.found("entry_missing", "entry", strconv.FormatInt(last.Seq+1, 10))
	}
	if e.Before != last.Hash {
		p.found("chain_broken", "entry", seq)
	}
	if !canonical || e.Hash != e.hash() {
		p.found("entry_altered", "entry", seq)
	}
	if e.Act == duty.SetUp && e.Seq == 1 {
		key, _ := hex.DecodeString(e.Facts["public_key"])
		p.keys[e.Person] = key
	}
	if !vault.Signed(p.keys[e.Person], e.Hash[:], e.Signature) {
		p.found("entry_not_signed", "entry", seq)
	}
	if e.At.Before(last.At) && e.Act != duty.ConfirmDate {
		p.found("time_went_back", "entry", seq)
	}
}

// row checks a row that an entry commits to.
func (p *prover) row(e Entry, c Commit) error {
	p.rows[c.Table]++
	place := []string{"entry", strconv.FormatInt(e.Seq, 10), "table", c.Table, "row", strconv.FormatInt(c.Row, 10)}
	hash, err := p.hash(c, place)
	switch {
	case errors.Is(err, sql.ErrNoRows):
		p.found("row_missing", place...)
	case errors.Is(err, errAltered):
		p.found("row_altered", place...)
	case err != nil:
		return err
	case hash != c.Hash:
		p.found("row_altered", place...)
	}
	return nil
}

var errAltered = errors.New("store: row altered")

// hash is what a row as it now stands would be committed to by.
func (p *prover) hash(c Commit, place []string) (vault.Commitment, error) {
	one := func(query string) *sql.Row { return p.tx.QueryRowContext(p.ctx, query, c.Row) }
	switch c.Table {
	case "branch":
		var i Info
		err := one("SELECT name, desk, practice FROM branch WHERE entry = ?").Scan(&i.Name, &i.Desk, &i.Practice)
		return sha256.Sum256([]byte(i.text())), err
	case "people":
		one, err := scanPerson(one("SELECT " + personColumns + " FROM people WHERE id = ?"))
		return sha256.Sum256([]byte(one.text())), err
	case "editions":
		var fingerprint []byte
		var canonical string
		err := one("SELECT fingerprint, canonical FROM editions WHERE entry = ?").Scan(&fingerprint, &canonical)
		hash := sha256.Sum256([]byte(canonical))
		if err == nil && string(fingerprint) != string(hash[:]) {
			err = errAltered
		}
		return hash, err
	case "clearings":
		var result int64
		err := one("SELECT result FROM clearings WHERE entry = ?").Scan(&result)
		return sha256.Sum256([]byte(strconv.FormatInt(result, 10))), err
	case "results":
		return p.result(c.Row, place)
	}
	return vault.Commitment{}, errAltered
}

// result unseals a result and scores it again.
func (p *prover) result(id int64, place []string) (hash vault.Commitment, err error) {
	var k Kept
	var band, recommendation string
	var fingerprint, sealed []byte
	err = p.tx.QueryRowContext(p.ctx, `SELECT r.band, r.recommendation, r.kept, e.fingerprint
		FROM results r JOIN editions e ON e.entry = r.edition WHERE r.entry = ?`, id).
		Scan(&band, &recommendation, &sealed, &fingerprint)
	if err != nil {
		return hash, err
	}
	text, hash, err := p.s.keys.Data.Open(keptCell(id), sealed)
	if err != nil || k.parse(text) != nil ||
		k.Band != band || string(k.Recommendation) != recommendation || string(k.Edition[:]) != string(fingerprint) {
		return hash, errAltered
	}
	edition, err := p.edition(k.Edition, place)
	if edition == nil {
		return hash, err
	}
	if again(edition, &k) != text {
		p.found("result_differs", place...)
	}
	p.proof.Results++
	return hash, nil
}

// edition is what a result is scored with; nil where it was tampered with or
// does not compile, which is told once.
func (p *prover) edition(fingerprint model.Fingerprint, place []string) (*model.Edition, error) {
	if edition, ok := p.editions[fingerprint]; ok {
		return edition, nil
	}
	if _, err := p.s.branch.editions(p.ctx, p.tx); err != nil {
		return nil, err
	}
	var edition *model.Edition
	r, err := p.s.branch.edition(p.ctx, p.tx, fingerprint)
	if err == nil {
		edition, err = r.compile()
	}
	if err != nil {
		p.found("edition_unusable", place...)
	}
	p.editions[fingerprint] = edition
	return edition, nil
}

// again is the text of a result scored anew from its answers; empty where
// these cannot be scored.
func again(edition *model.Edition, k *Kept) string {
	answers, problems := edition.ParseAnswers(k.Answers)
	if refused(problems) {
		return ""
	}
	result, complete := edition.Score(answers)
	if !complete {
		return ""
	}
	again := Kept{Applicant: k.Applicant}
	again.figures(answers, result)
	return again.text()
}

// strays looks for rows that no entry made.
func (p *prover) strays() error {
	for _, table := range []string{"branch", "people", "editions", "results", "clearings"} {
		var n int64
		if err := p.tx.QueryRowContext(p.ctx, "SELECT count(*) FROM "+table).Scan(&n); err != nil {
			return err
		}
		if stray := n - p.rows[table]; stray > 0 {
			p.found("row_not_journalled", "table", table, "rows", strconv.FormatInt(stray, 10))
		}
	}
	return nil
}

// schema compares tables and triggers with those of a file made anew.
func (p *prover) schema() error {
	const query = "SELECT group_concat(sql, char(10)) FROM (SELECT sql FROM sqlite_schema ORDER BY name)"
	fresh, err := sql.Open("sqlite", ":memory:")
	if err != nil {
		return err
	}
	defer fresh.Close()
	fresh.SetMaxOpenConns(1) // each connection has a memory of its own
	if err := migrateDB(p.ctx, fresh); err != nil {
		return err
	}
	var want, got string
	if err := fresh.QueryRowContext(p.ctx, query).Scan(&want); err != nil {
		return err
	}
	if err := p.tx.QueryRowContext(p.ctx, query).Scan(&got); err != nil {
		return err
	}
	if got != want {
		p.found("schema_altered")
	}
	return nil
}
