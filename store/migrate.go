package store

import (
	"context"
	"database/sql"

	"github.com/pressly/goose/v3"

	"weighhouse/store/migrations"
)

// migrate brings a file up to this program's version, a transaction a
// migration. It runs before, and apart from, the guarded connections.
func migrate(ctx context.Context, path string) error {
	db, err := sql.Open("sqlite", dsn(path, nil))
	if err != nil {
		return err
	}
	defer db.Close()
	if err := migrateDB(ctx, db); err != nil {
		return err
	}
	return db.Close()
}

func migrateDB(ctx context.Context, db *sql.DB) error {
	provider, err := goose.NewProvider(goose.DialectSQLite3, db, migrations.Files, goose.WithDisableGlobalRegistry(true))
	if err != nil {
		return err
	}
	_, err = provider.Up(ctx)
	return err
}
