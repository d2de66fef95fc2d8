package store

import (
	"database/sql"
	"encoding/hex"
	"fmt"
	"strings"
	"testing"
	"time"

	"weighhouse/model"
	"weighhouse/model/duty"
)

// tamper edits a closed branch as another program could, with the triggers
// away while it lasts.
func tamper(t *testing.T, dir string, edit func(db *sql.DB)) {
	t.Helper()
	db := plain(t, dir)
	var triggers []string
	rows := must(db.Query("SELECT name, sql FROM sqlite_schema WHERE type = 'trigger'"))
	var drop string
	for rows.Next() {
		var name, text string
		if err := rows.Scan(&name, &text); err != nil {
			t.Fatal(err)
		}
		drop += "DROP TRIGGER " + name + ";"
		triggers = append(triggers, text)
	}
	must(db.Exec("PRAGMA foreign_keys = 0;" + drop))
	edit(db)
	must(db.Exec(strings.Join(triggers, ";")))
	if err := db.Close(); err != nil {
		t.Fatal(err)
	}
}

// column is a place in a row that the chain commits to.
type column struct {
	table, key, name string
	row              int64
	// entry is the journal's that made the row.
	entry int64
}

// flip changes one bit of a value and keeps its type.
func flip(t *testing.T, db *sql.DB, c column) {
	t.Helper()
	var value any
	query := fmt.Sprintf("SELECT %s FROM %s WHERE %s = ?", c.name, c.table, c.key)
	if err := db.QueryRow(query, c.row).Scan(&value); err != nil {
		t.Fatal(c, err)
	}
	switch v := value.(type) {
	case int64:
		value = v ^ 1
	case string:
		b := []byte(v)
		b[len(b)/2] ^= 1
		value = string(b)
	case []byte:
		v[len(v)/2] ^= 1
		value = v
	default:
		t.Fatalf("%v: %T", c, value)
	}
	must(db.Exec(fmt.Sprintf("UPDATE %s SET %s = ? WHERE %s = ?", c.table, c.name, c.key), value, c.row))
}

// history is a branch with every kind of row: entries 1 set up, 2 and 3
// editions, 4 to 6 results, 7 a clearing, 8 a date.
func history(t *testing.T) (dir string) {
	t.Helper()
	dir = t.TempDir()
	clock := clockAt("2026-12-01 09:00")
	s, e := practice(t, dir, clock.options())
	must(s.ReleaseEdition(t.Context(), stallCard(2, model.RepeatClients, "2026-11-01")))
	for n := range 3 {
		clock.forward(time.Minute)
		must(s.KeepResult(t.Context(), Complete{Answers: nth(e, n)}))
	}
	if err := s.ClearResult(t.Context(), 5); err != nil {
		t.Fatal(err)
	}
	if err := s.ConfirmDate(t.Context(), day("2026-12-02")); err != nil {
		t.Fatal(err)
	}
	proven(t, s)
	s.branch.Close()
	return dir
}

func proveAgain(t *testing.T, dir string) Proof {
	t.Helper()
	s := openPractice(t, dir, clockAt("2026-12-02 12:00").options())
	proof, err := s.Prove(t.Context(), nil)
	if err != nil {
		t.Fatal(err)
	}
	s.branch.Close()
	return proof
}

func TestEveryFlippedBitInACommittedRowIsFoundAtItsEntry(t *testing.T) {
	var places []column
	add := func(table, key string, row, entry int64, names ...string) {
		for _, name := range names {
			places = append(places, column{table, key, name, row, entry})
		}
	}
	for _, entry := range []int64{2, 4, 5, 7, 8} {
		add("journal", "seq", entry, entry, "at", "desk", "person", "act", "facts", "before", "hash", "signature")
	}
	add("journal", "seq", 4, 4, "commits")
	add("branch", "entry", 1, 1, "name", "desk")
	add("editions", "entry", 2, 2, "fingerprint", "canonical")
	add("editions", "entry", 3, 3, "fingerprint", "canonical")
	add("results", "entry", 4, 4, "edition", "band", "recommendation", "kept")
	add("results", "entry", 6, 6, "kept")
	add("clearings", "entry", 7, 7, "result")
	whole := history(t)
	for _, c := range places {
		t.Run(fmt.Sprintf("%s.%s %d", c.table, c.name, c.row), func(t *testing.T) {
			dir := copyOf(t, whole)
			tamper(t, dir, func(db *sql.DB) { flip(t, db, c) })
			proof := proveAgain(t, dir)
			if len(proof.Problems) == 0 {
				t.Fatal("not found")
			}
			if got := proof.Problems[0].Args["entry"]; got != fmt.Sprint(c.entry) {
				t.Errorf("found at entry %s: %v", got, proof.Problems)
			}
		})
	}
}

func TestRowsTakenAwayOrAddedAreFound(t *testing.T) {
	whole := history(t)
	for _, c := range []struct{ edit, code, entry string }{
		{"DELETE FROM journal WHERE seq = 5", "entry_missing", "5"},
		{"DELETE FROM editions WHERE entry = 2", "row_missing", "2"},
		{"DELETE FROM results WHERE entry = 5", "row_missing", "5"},
		{"DELETE FROM clearings", "row_missing", "7"},
		{"DELETE FROM editions WHERE entry = 3", "row_missing", "3"},
		{"UPDATE results SET kept = (SELECT kept FROM results WHERE entry = 5) WHERE entry = 4", "row_altered", "4"},
		{"INSERT INTO results SELECT 8, edition, band, recommendation, kept FROM results WHERE entry = 4", "row_not_journalled", ""},
		{"INSERT INTO clearings VALUES (4, 4)", "row_not_journalled", ""},
		{"UPDATE journal SET seq = 9 WHERE seq = 8", "entry_missing", "8"},
	} {
		t.Run(c.edit, func(t *testing.T) {
			dir := copyOf(t, whole)
			tamper(t, dir, func(db *sql.DB) { must(db.Exec(c.edit)) })
			p := proveAgain(t, dir).Problems
			if len(p) == 0 || p[0].Code != c.code || p[0].Args["entry"] != c.entry {
				t.Errorf("%v", p)
			}
		})
	}
}

// Whoever edits an entry and works out every hash anew still lacks the
// person's key.
func TestARewrittenChainIsNotSigned(t *testing.T) {
	dir := history(t)
	tamper(t, dir, func(db *sql.DB) {
		rows := must(db.Query("SELECT " + entryColumns + " FROM journal WHERE seq >= 4 ORDER BY seq"))
		var chain []Entry
		for rows.Next() {
			e, _, err := scanEntry(rows)
			if err != nil {
				t.Fatal(err)
			}
			chain = append(chain, e)
		}
		for i := range chain {
			e := &chain[i]
			if i == 0 {
				e.facts = strings.Replace(e.facts, "band\tb", "band\ta", 1)
			} else {
				e.Before = chain[i-1].Hash
			}
			e.Hash = e.hash()
			must(db.Exec("UPDATE journal SET facts = ?, before = ?, hash = ? WHERE seq = ?", e.facts, e.Before[:], e.Hash[:], e.Seq))
		}
	})
	p := proveAgain(t, dir).Problems
	if len(p) == 0 || p[0].Code != "entry_not_signed" || p[0].Args["entry"] != "4" {
		t.Error(p)
	}
}

// A cut-off end leaves a whole chain; the last hash, written down elsewhere,
// shows it.
func TestACutEndChangesTheLastHash(t *testing.T) {
	dir := history(t)
	before := proveAgain(t, dir)
	tamper(t, dir, func(db *sql.DB) { must(db.Exec("DELETE FROM journal WHERE seq = 8")) })
	after := proveAgain(t, dir)
	if len(after.Problems) > 0 || after.Last == before.Last || after.Entries != before.Entries-1 {
		t.Errorf("%+v, before %+v", after, before)
	}
}

func TestTimeThatGoesBackIsFound(t *testing.T) {
	dir := t.TempDir()
	clock := clockAt("2026-12-01 09:00")
	s, _ := practice(t, dir, clock.options())
	err := s.act(t.Context(), duty.KeepResult, func(w *writing) error {
		return w.enter(clock.now().Add(-time.Hour), duty.KeepResult, nil)
	})
	if err != nil {
		t.Fatal(err)
	}
	proof := must(s.Prove(t.Context(), nil))
	if len(proof.Problems) != 1 || proof.Problems[0].Code != "time_went_back" || proof.Problems[0].Args["entry"] != "3" {
		t.Error(proof.Problems)
	}
}

func TestADroppedTriggerIsFound(t *testing.T) {
	dir := history(t)
	db := plain(t, dir)
	must(db.Exec("DROP TRIGGER results_stand"))
	db.Close()
	p := proveAgain(t, dir).Problems
	if len(p) != 1 || p[0].Code != "schema_altered" {
		t.Error(p)
	}
}

// A figure that the edition does not give, kept by a program gone wrong.
func TestAFigureThatDiffersInTheLastDigitIsFound(t *testing.T) {
	s, e := practice(t, t.TempDir(), Options{})
	k, err := s.score(Complete{Answers: nth(e, 1)})
	if err != nil {
		t.Fatal(err)
	}
	k.PD++
	if err := s.act(t.Context(), duty.KeepResult, func(w *writing) error { return s.keep(w, &k) }); err != nil {
		t.Fatal(err)
	}
	proof := must(s.Prove(t.Context(), nil))
	if len(proof.Problems) != 1 || proof.Problems[0].Code != "result_differs" || proof.Problems[0].Args["entry"] != "3" {
		t.Error(proof.Problems)
	}
}

func TestARaisedRoleIsFoundAtSignIn(t *testing.T) {
	for _, edit := range []string{
		"UPDATE people SET role = 'head_office'",
		"UPDATE people SET name = 'Somebody Else'",
		"DELETE FROM journal WHERE seq = 1",
		"UPDATE people SET role = 'head_office'; UPDATE journal SET facts = replace(facts, 'role\tmanager', 'role\thead_office') WHERE seq = 1",
	} {
		dir := history(t)
		tamper(t, dir, func(db *sql.DB) { must(db.Exec(edit)) })
		b, err := Open(t.Context(), dir, Options{})
		if err != nil {
			t.Fatal(err)
		}
		names := must(b.People(t.Context()))
		_, err = b.SignIn(t.Context(), names[0], practicePassphrase)
		wantCode(t, err, "person_altered")
		b.Close()
	}
}

func TestProofTellsHowFarItIs(t *testing.T) {
	s, e := practice(t, t.TempDir(), Options{})
	var all []Complete
	for n := range 250 {
		all = append(all, Complete{Answers: nth(e, n)})
	}
	must(s.KeepResults(t.Context(), all))
	var told []int64
	proof, err := s.Prove(t.Context(), func(done, total int64) {
		if total != 252 {
			t.Errorf("of %d", total)
		}
		told = append(told, done)
	})
	if err != nil || len(proof.Problems) > 0 || proof.Results != 250 || fmt.Sprint(told) != "[100 200 252]" {
		t.Errorf("%+v %v %v", proof, told, err)
	}
	last := must(lastEntry(t.Context(), s.branch.db))
	if proof.Last != last.Hash || len(hex.EncodeToString(proof.Last[:])) != len(proof.Last.String()) {
		t.Error("another last hash")
	}
}
