package store

import (
	"context"
	"database/sql"
	"database/sql/driver"
	"net/url"
	"path/filepath"
	"strings"

	"modernc.org/sqlite"
)

// dsn is the data source name of a file that exists, with everything that
// SQLite must be told for each connection.
func dsn(path string, pragmas []string) string {
	path = filepath.ToSlash(path)
	if !strings.HasPrefix(path, "/") {
		path = "/" + path // C:/…
	}
	q := url.Values{
		"mode":          {"rw"}, // never makes a file
		"_txlock":       {"immediate"},
		"_defensive":    {"1"},
		"_dqs":          {"0"},
		"_error_rc":     {"1"},
		"_busy_timeout": {"5000"},
		"_journal_mode": {"WAL"},
		"_synchronous":  {"FULL"}, // a commit is on the disk when it returns
		"_foreign_keys": {"1"},
		"_pragma": append([]string{
			"recursive_triggers(1)", // else INSERT OR REPLACE deletes without a trigger
			"secure_delete(1)",
			"trusted_schema(0)",
			"cell_size_check(1)",
			"fullfsync(1)", // of macOS, which otherwise leaves it in the drive's memory
			"checkpoint_fullfsync(1)",
		}, pragmas...),
	}
	return (&url.URL{Scheme: "file", Path: path, RawQuery: q.Encode()}).String()
}

// connect opens a file with an authorizer on every connection. A few
// connections: pages are read while an act writes and a proof runs.
func connect(ctx context.Context, path string, pragmas []string) (*sql.DB, error) {
	connector, err := sqlite.NewConnector(dsn(path, pragmas))
	if err != nil {
		return nil, err
	}
	db := sql.OpenDB(guarded{connector})
	db.SetMaxOpenConns(4)
	db.SetMaxIdleConns(4)
	if err := db.PingContext(ctx); err != nil {
		db.Close()
		return nil, err
	}
	return db, nil
}

// guarded gives each connection its authorizer.
type guarded struct{ driver.Connector }

func (g guarded) Connect(ctx context.Context) (driver.Conn, error) {
	conn, err := g.Connector.Connect(ctx)
	if err != nil {
		return nil, err
	}
	if err := conn.(sqlite.AuthorizerRegisterer).RegisterAuthorizer(authorize); err != nil {
		conn.Close()
		return nil, err
	}
	return conn, nil
}

// changeable are the tables whose rows the program may ever change or delete.
var changeable = map[string]bool{"settings": true}

// authorize lets the program read, insert, and change settings. It cannot
// drop a trigger, change the schema, attach a file or set a pragma, whatever
// the SQL says; only migrations run without it.
func authorize(action sqlite.AuthorizerActionCode, arg1, arg2, _, _ string) sqlite.AuthorizerReturnCode {
	switch action {
	case sqlite.AuthSelect, sqlite.AuthRead, sqlite.AuthFunction, sqlite.AuthRecursive,
		sqlite.AuthTransaction, sqlite.AuthInsert:
		return sqlite.AuthorizerOK
	case sqlite.AuthUpdate, sqlite.AuthDelete:
		if changeable[arg1] {
			return sqlite.AuthorizerOK
		}
	case sqlite.AuthPragma:
		if arg2 == "" { // asked, not set
			return sqlite.AuthorizerOK
		}
	}
	return sqlite.AuthorizerDeny
}
