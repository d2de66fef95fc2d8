package store

import (
	"context"
	"database/sql"
	"errors"
	"slices"
	"strconv"
	"strings"
	"time"

	"weighhouse/model/duty"
)

// keptQuery joins so that an entry or a person that was tampered with hides
// no result: Prove tells of it.
const keptQuery = `SELECT r.entry, ifnull(j.at, 0), ifnull(p.name, ''), r.kept, c.at, cp.name
	FROM results r LEFT JOIN journal j ON j.seq = r.entry LEFT JOIN people p ON p.id = j.person
	LEFT JOIN clearings x ON x.result = r.entry
	LEFT JOIN journal c ON c.seq = x.entry LEFT JOIN people cp ON cp.id = c.person `

// scanKept reads and unseals a row of keptQuery.
func (s *Session) scanKept(row scanner) (k Kept, err error) {
	var at int64
	var sealed []byte
	var clearedAt sql.NullInt64
	var clearedBy sql.NullString
	if err := row.Scan(&k.ID, &at, &k.By, &sealed, &clearedAt, &clearedBy); err != nil {
		return k, err
	}
	k.At = time.UnixMilli(at).UTC()
	if clearedAt.Valid {
		k.ClearedAt, k.ClearedBy = time.UnixMilli(clearedAt.Int64).UTC(), clearedBy.String
	}
	text, _, err := s.keys.Data.Open(keptCell(k.ID), sealed)
	if err == nil {
		err = k.parse(text)
	}
	if err != nil {
		e := refuse("result_altered", "result", strconv.FormatInt(k.ID, 10))
		e.Cause = err
		return k, e
	}
	return k, nil
}

// Result is a kept result; no_result where there is none of that id, and
// result_altered where the file was tampered with.
func (s *Session) Result(ctx context.Context, id int64) (Kept, error) {
	if err := s.may(duty.ReadResults); err != nil {
		return Kept{}, err
	}
	return s.result(ctx, s.branch.db, id)
}

func (s *Session) result(ctx context.Context, q queryer, id int64) (Kept, error) {
	k, err := s.scanKept(q.QueryRowContext(ctx, keptQuery+"WHERE r.entry = ?", id))
	if errors.Is(err, sql.ErrNoRows) {
		return k, refuse("no_result", "result", strconv.FormatInt(id, 10))
	}
	return k, fault(s.branch.path, err)
}

// ResultCount is how many results are kept.
func (s *Session) ResultCount(ctx context.Context) (int, error) {
	if err := s.may(duty.ReadResults); err != nil {
		return 0, err
	}
	ids, err := s.branch.resultIDs(ctx)
	return len(ids), err
}

// Results are up to count kept results, newest first, after skipping the
// first ones. Where one was tampered with the error says which.
func (s *Session) Results(ctx context.Context, first, count int) ([]Kept, error) {
	if err := s.may(duty.ReadResults); err != nil {
		return nil, err
	}
	b := s.branch
	ids, err := b.resultIDs(ctx)
	if err != nil {
		return nil, err
	}
	newest := len(ids) - 1 - max(first, 0)
	oldest := max(newest-count+1, 0)
	if newest < oldest {
		return nil, nil
	}
	rows, err := b.db.QueryContext(ctx, keptQuery+"WHERE r.entry BETWEEN ? AND ? ORDER BY r.entry DESC", ids[oldest], ids[newest])
	if err != nil {
		return nil, fault(b.path, err)
	}
	defer rows.Close()
	var page []Kept
	for rows.Next() {
		k, err := s.scanKept(rows)
		if err != nil {
			return nil, fault(b.path, err)
		}
		page = append(page, k)
	}
	return page, fault(b.path, rows.Err())
}

// resultIDs are all results' ids in order, so that any page is found without
// counting through those before it. They are read once, as one text: row by
// row takes four times as long, and the first page waits for it.
func (b *Branch) resultIDs(ctx context.Context) ([]int64, error) {
	b.resultsMu.Lock()
	defer b.resultsMu.Unlock()
	if b.results != nil {
		return b.results, nil
	}
	var text string
	err := b.db.QueryRowContext(ctx, "SELECT ifnull(group_concat(entry, ' '), '') FROM results").Scan(&text)
	if err != nil {
		return nil, fault(b.path, err)
	}
	ids := make([]int64, 0, strings.Count(text, " ")+1)
	for field := range strings.FieldsSeq(text) {
		id, err := strconv.ParseInt(field, 10, 64)
		if err != nil {
			return nil, fault(b.path, err)
		}
		ids = append(ids, id)
	}
	slices.Sort(ids)
	b.results = ids
	return ids, nil
}

// remember adds ids to those read. Whoever read them between the commit and
// now has them already.
func (b *Branch) remember(kept []Kept) {
	b.resultsMu.Lock()
	defer b.resultsMu.Unlock()
	if b.results == nil {
		return
	}
	for _, k := range kept {
		if n := len(b.results); n == 0 || b.results[n-1] < k.ID {
			b.results = append(b.results, k.ID)
		}
	}
}
