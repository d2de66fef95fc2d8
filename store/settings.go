package store

import (
	"context"
	"database/sql"
	"errors"
)

// Remember keeps a setting of the desk, such as its language. Settings are no
// record: they need nobody signed in, and are not journalled.
func (b *Branch) Remember(ctx context.Context, name, value string) error {
	b.writing.Lock()
	defer b.writing.Unlock()
	_, err := b.db.ExecContext(ctx, "INSERT INTO settings VALUES (?, ?) ON CONFLICT (name) DO UPDATE SET value = excluded.value", name, value)
	return fault(b.path, err)
}

// Remembered is a setting; empty where it was never kept.
func (b *Branch) Remembered(ctx context.Context, name string) (value string, err error) {
	err = b.db.QueryRowContext(ctx, "SELECT value FROM settings WHERE name = ?", name).Scan(&value)
	if errors.Is(err, sql.ErrNoRows) {
		return "", nil
	}
	return value, fault(b.path, err)
}
